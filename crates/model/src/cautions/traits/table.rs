//! The traits, with the test for each.

use enolattice_molecule::{AnionClass, Molecule};
use enolattice_reagents::{Additive, AdditiveKind, Base, BaseKind, Cation, Solvent, Supply};

use super::Traits;

/// How a trait is found.
pub(super) enum Test {
    /// Any of these SMARTS in the structure.
    Any(&'static [&'static str]),
    /// Something of the whole structure, given the traits that patterns found.
    Whole(fn(&Molecule, Traits) -> bool),
    /// A fact of the base's record.
    Base(fn(&Base) -> bool),
    /// A fact of the solvent's record at the hottest temperature of the cell, °C.
    Solvent(fn(&Solvent, f64) -> bool),
    /// A fact of the additive's record.
    Additive(fn(&Additive) -> bool),
}

/// Defines the traits with their names in words and their tests.
macro_rules! traits {
    ($($name:ident, $words:literal, $test:expr;)*) => {
        /// A property that rules ask for.
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        #[repr(u8)]
        pub(in super::super) enum Trait {
            $(
                #[doc = $words]
                $name,
            )*
        }

        pub(super) const TRAITS: &[(Trait, &str, Test)] = &[$((Trait::$name, $words, $test),)*];
    };
}

impl Trait {
    /// The trait in words, as the page of rules shows it.
    #[cfg(test)]
    pub(in super::super) fn words(self) -> &'static str {
        TRAITS[self as usize].1
    }
}

/// Phosphazenes beyond the second generation are stronger than alkoxides in aprotic media.
const SUPERBASE_PKA: f64 = 20.0;
/// Water of a solvent above which moisture is no trace for a strong base, ppm by mass: about
/// 0.06 mol/L (common practice).
const WET_PPM: f64 = 1000.0;
/// Carbon atoms up to which a hydrocarbon is a gas at room temperature (butane boils at −0.5 °C).
const GASEOUS_CARBONS: usize = 4;

/// Phenoxides, which are weak, stand among the alkoxides in the tables.
fn is_alkoxide(base: &Base) -> bool {
    base.kind == BaseKind::Alkoxide && base.class != AnionClass::Phenoxide
}

fn is_organometallic(base: &Base) -> bool {
    matches!(base.kind, BaseKind::Organolithium | BaseKind::Grignard)
}

fn is_alkali(cation: Cation) -> bool {
    matches!(cation, Cation::Lithium | Cation::Sodium | Cation::Potassium)
}

/// Carbon atoms of the base's conjugate acid; none where it is no molecule.
fn carbons_of_acid(base: &Base) -> Option<usize> {
    let acid = Molecule::parse(&base.conjugate_acid).ok()?;
    Some(count(&acid, 6))
}

fn count(molecule: &Molecule, element: u8) -> usize {
    let atoms = molecule.atoms().iter();
    atoms.filter(|atom| atom.element == element).count()
}

/// Whether there are fewer carbon and oxygen atoms than three for each nitrogen; nitrogens that are
/// bound to no other nitrogen (amides, amines) store no energy and do not count.
fn is_rich_in_nitrogen(molecule: &Molecule) -> bool {
    let is_nitrogen = |atom: usize| molecule.atoms()[atom].element == 7;
    let atoms = 0..molecule.atoms().len();
    let chained = atoms.filter(|&atom| {
        let mut neighbours = molecule.neighbours(atom).iter();
        is_nitrogen(atom) && neighbours.any(|(other, _)| is_nitrogen(*other))
    });
    count(molecule, 6) + count(molecule, 8) < 3 * chained.count()
}

fn has_part(smiles: &str, part: &str) -> bool {
    smiles.split('.').any(|piece| piece == part)
}

/// Whether a carbanion among the parts of a salt has three neighbours.
fn has_tertiary_carbanion(smiles: &str) -> bool {
    let mut parts = smiles
        .split('.')
        .filter_map(|part| Molecule::parse(part).ok());
    parts.any(|part| {
        let mut atoms = part.atoms().iter().enumerate();
        atoms.any(|(i, atom)| {
            atom.element == 6 && atom.charge == -1 && part.neighbours(i).len() == 3
        })
    })
}

traits! {
    // Bases.
    Organolithium, "an organolithium", Test::Base(|b| b.kind == BaseKind::Organolithium);
    TertAlkyllithium, "a tertiary alkyllithium",
        Test::Base(|b| b.kind == BaseKind::Organolithium && has_tertiary_carbanion(&b.smiles));
    Grignard, "a Grignard reagent", Test::Base(|b| b.kind == BaseKind::Grignard);
    MetalAmide, "a metal amide", Test::Base(|b| b.kind == BaseKind::Amide);
    AlkaliAmide, "an amide of lithium, sodium or potassium",
        Test::Base(|b| b.kind == BaseKind::Amide && is_alkali(b.cation));
    SodiumAmide, "sodium or potassium amide",
        Test::Base(|b| has_part(&b.smiles, "[NH2-]") && b.cation != Cation::Lithium);
    AmmoniaOnQuench, "an amide of ammonia, methylamine or dimethylamine",
        Test::Base(|b| b.kind == BaseKind::Amide && carbons_of_acid(b).is_some_and(|n| n <= 2));
    Superbase, "a phosphazene or other neutral base with pKa of 20 or more in DMSO",
        Test::Base(|b| b.kind == BaseKind::Amine && b.pka_dmso.value >= SUPERBASE_PKA);
    Hydride, "a saline hydride", Test::Base(|b| b.kind == BaseKind::Hydride);
    AlkaliHydride, "a hydride of lithium, sodium or potassium",
        Test::Base(|b| b.kind == BaseKind::Hydride && is_alkali(b.cation));
    PotassiumHydride, "potassium hydride",
        Test::Base(|b| b.kind == BaseKind::Hydride && b.cation == Cation::Potassium);
    Alkoxide, "an alkoxide", Test::Base(is_alkoxide);
    SolidAlkoxide, "a solid alkoxide",
        Test::Base(|b| is_alkoxide(b) && b.supply == Supply::Solid);
    Hydroxide, "a hydroxide", Test::Base(|b| b.kind == BaseKind::Hydroxide);
    Carbonate, "a carbonate or hydrogencarbonate",
        Test::Base(|b| b.kind == BaseKind::Carbonate && b.smiles.contains('C'));
    Fluoride, "a fluoride", Test::Base(|b| b.kind == BaseKind::Fluoride);
    AmineBase, "an amine, amidine or guanidine", Test::Base(|b| b.kind == BaseKind::Amine);
    WeakBase, "a carbonate, phosphate, fluoride, carboxylate or phenoxide", Test::Base(|b| {
        let weak = matches!(b.kind, BaseKind::Carbonate | BaseKind::Fluoride | BaseKind::Carboxylate);
        weak || b.class == AnionClass::Phenoxide
    });
    GasOnQuench, "an organolithium or Grignard reagent of up to four carbons",
        Test::Base(|b| is_organometallic(b) && carbons_of_acid(b).is_some_and(|n| n <= GASEOUS_CARBONS));
    BenzeneOnQuench, "phenyllithium or a phenyl Grignard reagent", Test::Base(|b| {
        let acid = Molecule::parse(&b.conjugate_acid);
        is_organometallic(b) && acid.is_ok_and(|acid| acid.canonical() == "c1ccccc1")
    });
    // Solvents and additives, by record.
    Wet, "with 1000 ppm of water or more",
        Test::Solvent(|s, _| (WET_PPM..1e6).contains(&s.water_ppm));
    AboveFlash, "at or above its flash point",
        Test::Solvent(|s, hottest_c| s.flash_c.is_some_and(|flash| hottest_c >= flash));
    FormsPeroxides, "marked as a peroxide former",
        Test::Solvent(|s, _| s.peroxide_former);
    Crown, "a crown ether or cryptand", Test::Additive(|a| a.kind == AdditiveKind::Crown);
    PhaseTransfer, "a quaternary salt", Test::Additive(|a| a.kind == AdditiveKind::PhaseTransfer);
    // Media and plain groups.
    Water, "water", Test::Any(&["[OX2;H2]"]);
    Alcohol, "an alcohol", Test::Any(&["[OX2;H1][CX4;!$([CX4]([OX2])[OX2])]"]);
    Acid, "a carboxylic or sulfonic acid",
        Test::Any(&["[CX3](=[OX1])[OX2;H1]", "[SX4](=O)(=O)[OX2;H1]"]);
    AmineNh, "an amine with N–H",
        Test::Any(&["[NX3;H1,H2;!$(N[C,S,P]=[O,S,N]);!$(N[#7,#8])]"]);
    Amine, "an amine or pyridine", Test::Any(&[
        "[NX3;!$(N[C,S,P]=[O,S,N]);!$(N[#7,#8,F,Cl,Br,I]);!$(N[C]#N);!$(NC=[C,c][C,S,N]=,#[O,N])]([#6,#1])[#6]",
        "[nX2;!$(n[!#6])]",
    ]);
    OpenAmine, "an amine with an open lone pair (N–H, bridgehead, pyridine, amidine)", Test::Any(&[
        "N12CCN(CC1)CC2", "N12CCC(CC1)CC2", "[nX2;!$(n[!#6])]", "[NX2]=[CX3][NX3]",
        "[NX3;H1,H2]([CX4])[CX4,#1]",
    ]);
    Haloalkane, "a haloalkane", Test::Any(&["[CX4][Cl,Br,I]"]);
    MethyleneHalide, "a dihalomethane", Test::Any(&["[CX4;H2]([Cl,Br,I])[Cl,Br,I]"]);
    Haloform, "a haloform", Test::Any(&["[CX4;H1]([Cl,Br,I])([Cl,Br,I])[Cl,Br,I]"]);
    VicinalDihalide, "a 1,2-dihaloethane",
        Test::Any(&["[Cl,Br,I][CX4;H2][CX4;H2][Cl,Br,I]"]);
    Tetrahalide, "a tetrahalomethane or hexahaloethane", Test::Any(&[
        "[CX4]([Cl,Br,I])([Cl,Br,I])([Cl,Br,I])[Cl,Br,I]",
        "[CX4]([Cl,Br])([Cl,Br])([Cl,Br])[CX4]([Cl,Br])([Cl,Br])[Cl,Br]",
    ]);
    ArylHalide, "an aryl halide", Test::Any(&["c[F,Cl,Br,I]"]);
    Ammonia, "ammonia or an ammonium salt", Test::Any(&["[NX3;H3]", "[NX4+;H4]"]);
    AmideNh, "an amide with N–H", Test::Any(&["[CX3](=[OX1])[NX3;H1,H2]"]);
    Amide, "an amide without N–H", Test::Any(&["[CX3;!$(C([#7])[#7])](=[OX1])[NX3;H0]"]);
    Formamide, "a formamide", Test::Any(&["[CX3;H1](=[OX1])[NX3;H0]"]);
    Sulfoxide, "a sulfoxide", Test::Any(&["[SX3](=O)([#6])[#6]"]);
    EnolisableKetone, "a ketone with α-hydrogen", Test::Any(&["[#6][CX3](=[OX1])[CX4;!H0]"]);
    Ketone, "a ketone", Test::Any(&["[#6][CX3](=[OX1])[#6]"]);
    Nitrile, "a nitrile", Test::Any(&["C#N"]);
    AlkylNitrile, "a nitrile with α-hydrogen", Test::Any(&["[CX4;!H0]C#N"]);
    Ester, "an ester or carbonate", Test::Any(&["[CX3](=[OX1])[OX2][#6;!$(C=O)]"]);
    Ether, "an ether", Test::Any(&["[CX4;!H0][OX2][CX4]"]);
    Oxolane, "an oxolane (THF)", Test::Any(&["[OX2]1[CX4][CX4][CX4][CX4]1"]);
    Phosphoramide, "HMPA", Test::Any(&["P(=O)(N(C)C)(N(C)C)N(C)C"]);
    Nitroalkane, "a nitroalkane with α-hydrogen", Test::Any(&["[CX4;!H0][N+](=O)[O-]"]);
    Nitromethane, "nitromethane", Test::Any(&["[CX4;H3][N+](=O)[O-]"]);
    Nitroarene, "a nitroarene", Test::Any(&["c[N+](=O)[O-]"]);
    HalogenoDinitroarene, "a halodinitroarene", Test::Any(&[
        "[F,Cl,Br,I]c1c([N+](=O)[O-])cc([N+](=O)[O-])cc1",
        "[F,Cl,Br,I]c1c([N+](=O)[O-])cccc1[N+](=O)[O-]",
    ]);
    // Energetic groups.
    Azide, "an azide", Test::Any(&["*[NX2]=[N+]=[N-]", "*[N-][N+]#N"]);
    SilylAzide, "a silyl azide", Test::Any(&["[Si][NX2]=[N+]=[N-]", "[Si][N-][N+]#N"]);
    ThinAzide, "an azide, not of silicon, with (C + O) / N below 3", Test::Whole(|m, known| {
        known.has(Trait::Azide) && !known.has(Trait::SilylAzide) && is_rich_in_nitrogen(m)
    });
    ReleasingAzide, "a sulfonyl, phosphoryl, acyl or silyl azide", Test::Any(&[
        "[S,P,Si][NX2]=[N+]=[N-]", "[CX3](=O)[NX2]=[N+]=[N-]",
        "[S,P,Si][N-][N+]#N", "[CX3](=O)[N-][N+]#N",
    ]);
    SulfonylAzide, "a sulfonyl azide", Test::Any(&["[SX4](=O)(=O)[NX2]=[N+]=[N-]", "[SX4](=O)(=O)[N-][N+]#N"]);
    Diazo, "a diazo compound", Test::Any(&["[#6]=[N+]=[N-]", "[#6-][N+]#N"]);
    Diazonium, "a diazonium salt", Test::Any(&["[#6;+0][N+]#N"]);
    Azodicarbonyl, "an azodicarboxylate or azodicarboxamide", Test::Any(&["[CX3](=O)N=N[CX3]=O"]);
    AzoAlkane, "an azoalkane", Test::Any(&["[CX4]N=N[CX4]"]);
    AlkylNitrite, "an alkyl nitrite", Test::Any(&["[#6][OX2][NX2]=[OX1]"]);
    Nitroso, "a C-nitroso compound", Test::Any(&["[#6][NX2]=[OX1]"]);
    Nitrosamine, "an N-nitroso compound", Test::Any(&["[NX3][NX2]=[OX1]"]);
    DiazoalkaneSource, "an N-alkyl-N-nitroso amide", Test::Any(&[
        "[CX4;!H0][NX3]([NX2]=O)[CX3]=[O,N]", "[CX4;!H0][NX3]([NX2]=O)[SX4]=O",
    ]);
    Nitrate, "a nitrate ester or nitramine", Test::Any(&["[#6][OX2][N+](=O)[O-]", "[NX3][N+](=O)[O-]"]);
    Peroxide, "a peroxide", Test::Any(&["[OX2][OX2]"]);
    PeroxyAcid, "hydrogen peroxide or a peroxy acid", Test::Any(&["[OX2;H1][OX2;H1]", "[CX3](=O)[OX2][OX2;H1]"]);
    Polynitro, "several nitro groups on one carbon or three on one ring", Test::Any(&[
        "[C]([N+](=O)[O-])[N+](=O)[O-]",
        "c1([N+](=O)[O-])cc([N+](=O)[O-])cc([N+](=O)[O-])c1",
        "c1([N+](=O)[O-])c([N+](=O)[O-])ccc([N+](=O)[O-])c1",
        "c1([N+](=O)[O-])c([N+](=O)[O-])c([N+](=O)[O-])ccc1",
    ]);
    NitrogenChain, "a tetrazole or N-hydroxytriazole", Test::Any(&[
        "[#6]1~[#7]~[#7]~[#7]~[#7]~1", "[OX2][#7]1~[#7]~[#7]~[#6]~[#6]~1",
    ]);
    HaloAlkyne, "a haloalkyne", Test::Any(&["C#C[Cl,Br,I]"]);
    Perchlorate, "a perchlorate", Test::Any(&["[Cl](=O)(=O)=O", "[Cl+3]([O-])([O-])[O-]"]);
    PropargylHalide, "a propargyl halide", Test::Any(&["[Cl,Br,I][CX4]C#[C;!$(C[#6])]"]);
    AminatingOxygen, "an O-acyl, O-sulfonyl or O-aryl hydroxylamine", Test::Any(&[
        "[NX3;H2][OX2][SX4](=O)=O", "[NX3;H2][OX2][CX3]=O", "[NX3;H2][OX2]c", "[NX3;H2][OX2][PX4]=O",
    ]);
    // Activators.
    AcylHalide, "an acyl chloride, bromide or iodide", Test::Any(&["[CX3](=[OX1])[Cl,Br,I]"]);
    AcylFluoride, "an acyl fluoride", Test::Any(&["[CX3](=[OX1])F"]);
    OxalylHalide, "oxalyl halide", Test::Any(&["[Cl,Br]C(=O)C(=O)[Cl,Br]"]);
    Phosgene, "phosgene", Test::Any(&["[F,Cl,Br]C(=O)[F,Cl,Br]"]);
    MaskedPhosgene, "diphosgene or triphosgene", Test::Any(&["ClC(Cl)(Cl)OC(=O)[Cl,O]"]);
    Chloroformate, "a chloroformate", Test::Any(&["[OX2][CX3](=O)[Cl,F]"]);
    CarbamoylHalide, "a carbamoyl chloride", Test::Any(&["[NX3][CX3](=O)[Cl,Br]"]);
    SulfonylHalide, "a sulfonyl chloride or bromide", Test::Any(&["[SX4](=O)(=O)[Cl,Br]"]);
    SulfonicAnhydride, "a sulfonic anhydride", Test::Any(&["[SX4](=O)(=O)[OX2][SX4](=O)=O"]);
    FluorinatedAnhydride, "trifluoroacetic anhydride", Test::Any(&["FC(F)C(=O)OC=O"]);
    Anhydride, "a carboxylic anhydride", Test::Any(&["[#6][CX3](=O)[OX2][CX3](=O)[#6]"]);
    Dicarbonate, "a dicarbonate", Test::Any(&["[OX2]C(=O)[OX2]C(=O)[OX2]"]);
    SilylHalide, "a silyl halide", Test::Any(&["[Si][Cl,Br,I]"]);
    SilylSulfonate, "a silyl sulfonate", Test::Any(&["[Si][OX2][SX4](=O)=O"]);
    PhosphorusHalide, "a phosphorus halide", Test::Any(&["[P][Cl,Br]"]);
    ThionylHalide, "a thionyl or sulfinyl chloride", Test::Any(&["[SX3](=O)[Cl,Br]"]);
    SulfenylHalide, "a sulfenyl chloride", Test::Any(&["[SX2][Cl,Br]"]);
    ImidoylHalide, "an imidoyl halide or Vilsmeier salt", Test::Any(&["[CX3](=[#7])[Cl,Br]"]);
    Chlorotriazine, "cyanuric chloride", Test::Any(&["Clc1nc([Cl])nc(*)n1"]);
    // Oxidants and transfer agents.
    Halogen, "chlorine, bromine or an interhalogen", Test::Any(&["[Cl,Br;X1][F,Cl,Br,I;X1]"]);
    Iodine, "iodine", Test::Any(&["[I;X1][I;X1]"]);
    NHalo, "an N-chloro, N-bromo or N-iodo compound", Test::Any(&["[#7][Cl,Br,I]"]);
    Hypohalite, "a hypohalite", Test::Any(&["[OX2][Cl,Br,I;X1]"]);
    NFluoro, "an N-fluoro compound", Test::Any(&["[#7]F"]);
    HypervalentIodine, "a hypervalent iodine reagent", Test::Any(&["[#6][I;X3]", "[#6][I+][#6]", "[#6][I;X4,X5]"]);
    Oxaziridine, "an oxaziridine", Test::Any(&["C1NO1"]);
    SeleniumCompound, "a selenium compound", Test::Any(&["[#34]"]);
    Thiol, "a thiol", Test::Any(&["[SX2;H1]"]);
    ThiolateDonor, "a disulfide, thiosulfonate or N-thio compound",
        Test::Any(&["[SX2][SX2]", "[SX2][SX4](=O)=O", "[#6][SX2][#7]"]);
    // Alkylating agents.
    FierceAlkylator, "a dialkyl sulfate, alkyl triflate, fluorosulfate or oxonium salt",
        Test::Any(&["[CX4][OX2][SX4](=O)(=O)[OX2,F,$([CX4](F)F)]", "[OX3+]"]);
    Triflate, "an alkyl triflate, fluorosulfate or oxonium salt",
        Test::Any(&["[CX4][OX2][SX4](=O)(=O)[F,$([CX4](F)F)]", "[OX3+]"]);
    Alkylator, "an alkylating agent", Test::Any(&[
        "[CX4;!$([CX4]([F,Cl,Br])[F,Cl,Br])][I]", "[CX4][OX2][SX4](=O)=O", "[OX3+]",
        "[CX4][OX2][PX4](=O)([OX2])[OX2]", "[CX4;H3][Cl,Br]", "[CX4;H3][CX4;H2][Cl,Br]",
        "[CX4]([Cl,Br])[$(C=*),$(C#*),c,$([OX2][CX4]),$([SX2]),$([NX3])]",
    ]);
    AlkylHalide, "an alkyl halide or sulfonate",
        Test::Any(&["[CX4][Cl,Br,I]", "[CX4][OX2][SX4](=O)=O"]);
    HaloEther, "an α-halo ether", Test::Any(&["[CX4]([Cl,Br,I])[OX2][CX4]"]);
    BisHaloEther, "bis(chloromethyl) ether", Test::Any(&["[CX4]([Cl,Br])[OX2][CX4][Cl,Br]"]);
    SulfurMustard, "a sulfur mustard", Test::Any(&["[Cl,Br,I][CX4][CX4][SX2][CX4][CX4][Cl,Br,I]"]);
    HalfMustard, "a β-haloamine or β-halosulfide", Test::Any(&["[Cl,Br,I][CX4;H2][CX4][NX3;!$(NC=O);!$(NS=O),SX2]"]);
    Epoxide, "an epoxide", Test::Any(&["C1OC1"]);
    SmallEpoxide, "an epoxide of up to four carbons", Test::Whole(|m, known| known.has(Trait::Epoxide) && count(m, 6) <= 4);
    Aziridine, "an aziridine", Test::Any(&["C1NC1"]);
    Thiirane, "a thiirane", Test::Any(&["C1SC1"]);
    StrainedLactone, "a β-lactone, sultone or cyclic sulfate", Test::Any(&[
        "O=C1OCC1", "O=S1(=O)OCCC1", "O=S1(=O)OCCCC1", "O=S1(=O)OCCO1",
    ]);
    HaloCarbonyl, "an α-halo carbonyl compound or nitrile", Test::Any(&[
        "[CX4]([Cl,Br,I])[CX3](=[OX1])[#1,#6,OX2,NX3,Cl,Br]", "[CX4]([Cl,Br,I])[CX3;H1]=[OX1]", "[CX4]([Cl,Br,I])C#N",
    ]);
    BenzylHalide, "a benzyl or allyl halide",
        Test::Any(&["[CX4]([Cl,Br,I])c", "[CX4]([Cl,Br,I])[CX3]=[CX3]"]);
    // Acceptors.
    VinylAldehyde, "a vinyl aldehyde", Test::Any(&["[CX3;H2]=[CX3][CX3;H1]=O"]);
    VinylKetone, "a vinyl ketone", Test::Any(&["[CX3;H2]=[CX3][CX3](=O)[#6]"]);
    Acrylate, "an acrylic ester or amide", Test::Any(&["[CX3;H2]=[CX3][CX3](=O)[OX2,NX3]"]);
    VinylNitrile, "a vinyl nitrile", Test::Any(&["[CX3;H2]=[CX3]C#N"]);
    VinylSulfone, "a vinyl sulfone or sulfoxide", Test::Any(&["[CX3;H2]=[CX3][S](=O)"]);
    Nitroalkene, "a nitroalkene", Test::Any(&["[CX3]=[CX3][N+](=O)[O-]"]);
    VinylNitro, "a nitroethylene", Test::Any(&["[CX3;H2]=[CX3][N+](=O)[O-]"]);
    DoublyActivated, "a methylene malonate, cyanoacrylate or kin", Test::Any(&[
        "[CX3;H2]=[CX3]([$(C=O),$(C#N),$(S=O)])[$(C=O),$(C#N),$(S=O)]",
    ]);
    Acrylamide, "an acrylamide with N–H", Test::Any(&["[CX3;H2]=[CX3;H1][CX3](=O)[NX3;H1,H2]"]);
    Quinone, "a quinone", Test::Any(&["O=C1[#6]=,:[#6]C(=O)[#6]=,:[#6]1", "O=C1C(=O)[#6]=,:[#6][#6]=,:[#6]1"]);
    AcceptorAlkyne, "an acceptor alkyne", Test::Any(&["C#C[CX3]=O", "C#C[SX4]=O"]);
    EnolisableAldehyde, "an aldehyde with α-hydrogen", Test::Any(&["[CX3;H1](=O)[CX4;!H0]"]);
    SmallAldehyde, "formaldehyde or acetaldehyde", Test::Any(&["[CX3;H2]=[OX1]", "[CX4;H3][CX3;H1]=[OX1]"]);
    // Cumulenes and toxic leaving groups.
    Isocyanate, "an isocyanate", Test::Any(&["[NX2]=C=[OX1]"]);
    Isothiocyanate, "an isothiocyanate", Test::Any(&["[NX2]=C=[SX1]"]);
    Carbodiimide, "a carbodiimide", Test::Any(&["[NX2]=C=[NX2]"]);
    CarbonDisulfide, "carbon disulfide", Test::Any(&["S=C=S"]);
    CarbonylSulfide, "carbonyl sulfide", Test::Any(&["O=C=S"]);
    CarbonDioxide, "carbon dioxide", Test::Any(&["O=C=O"]);
    Ketene, "a ketene", Test::Any(&["[CX3]=C=[OX1]"]);
    GasAtRoomTemperature, "a gas at room temperature", Test::Any(&[
        "[CX3;H2]=[OX1]", "[CX4;H3][Cl,Br,F]", "[CX3;H2]=C=O", "[CX4;H2]1O[CX4;H2]1", "O=C=S",
        "[CX4;H3][CX4;H2][Cl;X1]", "[F,Cl]C(=O)[F,Cl]", "FC(F)(F)[Br,I]", "[NX3;H3]",
    ]);
    CyanideDonor, "an acyl cyanide, cyanoformate, silyl cyanide or cyanohydrin", Test::Any(&[
        "[CX3](=[OX1])C#N", "[Si]C#N", "[CX4]([OX2;H1])C#N", "[SX4](=O)(=O)C#N", "[NX3]([SX4])C#N",
        "[n+,N+]C#N", "[CX4]([NX3])C#N",
    ]);
    CyanogenHalide, "a cyanogen halide", Test::Any(&["[Cl,Br,I]C#N"]);
    HydrogenFluorideDonor, "an acyl, silyl, phosphoryl, boron or N–F fluoride",
        Test::Any(&["[CX3](=[OX1])F", "[Si]F", "[P]F", "[B]F", "[B-]F", "[P-]F", "[#7]F"]);
    // Known carcinogens that a laboratory's own record may not name.
    KnownCarcinogen, "benzene, 1,4-dioxane, carbon tetrachloride, HMPA, acrylonitrile, vinyl halide or hydrazine", Test::Any(&[
        "[cH]1[cH][cH][cH][cH][cH]1", "[CX4;H2]1[CX4;H2]O[CX4;H2][CX4;H2]O1",
        "P(=O)(N(C)C)(N(C)C)N(C)C", "[CX3;H2]=[CX3;H1]C#N", "[CX3;H2]=[CX3;H1][F,Cl,Br]",
        "[NX3;H2][NX3;!$(N[C,S]=O)]",
    ]);
    // Peroxide formers among molecules.
    AutoxidisableEther, "a secondary alkyl, allyl or benzyl ether or acetal", Test::Any(&[
        "[CX4;H1]([#6])([#6])[OX2][CX4]", "[CX4;!H0]([$(C=C),c])[OX2][CX4]", "[CX4;!H0]([OX2][CX4])[OX2][CX4]",
    ]);
    AutoxidisableCarbon, "cumene, tetralin or a diene", Test::Any(&[
        "[CX4;H1]([CX4])([CX4])c", "[CX4;H2;R]c", "[CX3;H2]=[CX3][CX3]=[CX3;H2]",
    ]);
}
