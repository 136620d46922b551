//! Mayr's E of electrophiles: published where known, else by class.

use enolattice_molecule::{
    Acceptor, AcylDonor, ChalcogenDonor, Cumulene, Donor, ElectrophileKind, ElectrophilicGroup,
    HalogenDonor, ImineNitrogen, LeavingGroup, Molecule,
};
use enolattice_reagents::Library;

use crate::parameters::{P, PARAMETERS};

/// Standard uncertainty of an estimate by a class with many measured members.
const SIGMA_BY_CLASS: f64 = 1.5;
/// Standard uncertainty of an estimate by a class that has few or none.
const SIGMA_FROM_MEMORY: f64 = 2.5;

/// E with its standard uncertainty and source; `None` for alkylating agents and three-membered rings,
/// which react by relative rates of substitution.
pub(crate) fn electrophilicity(
    molecule: &Molecule,
    group: &ElectrophilicGroup,
    library: &Library,
) -> Option<(f64, f64, String)> {
    let (e, sigma, source) = by_class(&group.kind)?;
    Some(match library.electrophilicity(molecule.canonical()) {
        Some(known) => (known.e.value, known.e.sigma, known.e.source.clone()),
        None => (e, sigma, source.to_owned()),
    })
}

const FROM_TABLE: &str = "estimated by class from the electrophilicities table";
const FROM_MEMORY: &str = "estimated by class, from memory";

fn by_class(kind: &ElectrophileKind) -> Option<(f64, f64, &'static str)> {
    let remembered = |e: f64| Some((e, SIGMA_FROM_MEMORY, FROM_MEMORY));
    match *kind {
        ElectrophileKind::Michael {
            acceptor,
            further_acceptors,
            beta_acceptors,
            beta_alkyl,
            beta_aryl,
            alpha_alkyl,
            ..
        } => {
            // acrylate −19.1, crotonate −23.6, cinnamate −24.5, methacrylate −22.8,
            // benzylidenemalonate −20.6, diethyl fumarate −17.8 (from memory)
            let e = by_acceptor(acceptor) + 4.0 * f64::from(further_acceptors)
                - 4.6 * f64::from(beta_alkyl)
                - by_aryl(acceptor) * f64::from(beta_aryl)
                - 3.7 * f64::from(alpha_alkyl)
                + 2.5 * f64::from(beta_acceptors);
            Some((e, SIGMA_BY_CLASS, FROM_TABLE))
        }
        ElectrophileKind::Aldehyde {
            aromatic,
            hammett_sigma,
            activated,
            ..
        } => {
            // benzaldehyde −19.5, 4-nitrobenzaldehyde −16.9 (from memory): slope 3.4
            let e = if aromatic {
                -19.5 + 3.4 * hammett_sigma
            } else {
                PARAMETERS[P::E_ALDEHYDE as usize].mean
            };
            // glyoxylates and chloral add what simple aldehydes do not (from memory)
            let e = if activated { e + 4.5 } else { e };
            Some((e, SIGMA_BY_CLASS, FROM_TABLE))
        }
        ElectrophileKind::Ketone {
            aromatic,
            activated,
            ..
        } => {
            let plain = PARAMETERS[P::E_KETONE as usize].mean;
            let e = plain + if aromatic { -1.0 } else { 0.0 } + if activated { 6.0 } else { 0.0 };
            Some((e, SIGMA_BY_CLASS, FROM_TABLE))
        }
        ElectrophileKind::Imine {
            nitrogen,
            aromatic,
            is_ketimine,
        } => {
            let aryl = if aromatic { 0.0 } else { 0.5 };
            let ketimine = if is_ketimine { -4.0 } else { 0.0 };
            remembered(by_imine_nitrogen(nitrogen) + aryl + ketimine)
        }
        ElectrophileKind::Acyl {
            donor, branches, ..
        } => {
            let crowded = 1.5 * f64::from(branches.saturating_sub(1));
            remembered(by_acyl_donor(donor) - crowded)
        }
        ElectrophileKind::Cumulene { cumulene } => remembered(by_cumulene(cumulene)),
        ElectrophileKind::Aryl {
            leaving,
            nitro,
            acceptors,
            ring_nitrogens,
            halogens,
        } => remembered(
            -27.0
                + 6.0 * f64::from(nitro)
                + 3.0 * f64::from(acceptors)
                + 4.0 * f64::from(ring_nitrogens)
                + f64::from(halogens)
                + by_leaving_from_arene(leaving),
        ),
        ElectrophileKind::Transfer { donor } => remembered(by_donor(donor)),
        ElectrophileKind::Silyl { leaving, bulk } => {
            let triflate = if leaving == LeavingGroup::Triflate {
                5.0
            } else {
                0.0
            };
            remembered(-15.0 + triflate - 2.5 * f64::from(bulk))
        }
        ElectrophileKind::Alkyl { .. }
        | ElectrophileKind::Ring { .. }
        | ElectrophileKind::Inert { .. } => None,
    }
}

/// E of CH2=CH–acceptor.
///
/// # Source
/// The electrophilicities table (Mayr database): 1-phenylpropenone −15.3, butenone −16.8, phenyl
/// vinyl sulfone −18.4, methyl acrylate −18.8, N,N-dimethylacrylamide −23.5, acrolein −15.5 (from
/// memory); acrylonitrile −19.1 and nitroethylene −10 from memory; p-benzoquinone −16.2, N-phenylmaleimide
/// −14.1 with its second acceptor, 2- and 4-vinylpyridine about −23, the others between them, all from memory.
fn by_acceptor(acceptor: Acceptor) -> f64 {
    match acceptor {
        Acceptor::Nitro => -10.0,
        Acceptor::QuinoneMethide => -11.0,
        Acceptor::Aldehyde => -15.5,
        Acceptor::Quinone => -16.2,
        Acceptor::Ketone => -16.8,
        Acceptor::Imide => -17.0,
        Acceptor::Thioester => -17.5,
        Acceptor::Sulfone => -18.4,
        Acceptor::Sulfonate => -18.5,
        Acceptor::Ester => -18.9,
        Acceptor::Nitrile => -19.1,
        Acceptor::Phosphonate | Acceptor::Sulfoxide => -21.0,
        Acceptor::Pyridyl => -23.0,
        Acceptor::Amide => -23.5,
    }
}

/// What a β-aryl group costs: nitrostyrene −13.9 against nitroethylene −10, else cinnamates.
fn by_aryl(acceptor: Acceptor) -> f64 {
    if acceptor == Acceptor::Nitro {
        3.9
    } else {
        5.5
    }
}

/// E of imines of benzaldehyde.
///
/// # Source
/// From memory: N-tosyl −11.5 and N-diphenylphosphinoyl −15.9 (Appel and Mayr, J. Am. Chem. Soc.
/// 2011, 133, 8240); dimethyl(methylene)iminium −6.7; N-alkoxycarbonyl between the first two;
/// N-aryl by what such imines need of a catalyst.
fn by_imine_nitrogen(nitrogen: ImineNitrogen) -> f64 {
    match nitrogen {
        ImineNitrogen::Iminium => -7.0,
        ImineNitrogen::Sulfonyl => -11.5,
        ImineNitrogen::Acyl => -14.0,
        ImineNitrogen::Phosphinoyl => -15.9,
        ImineNitrogen::Plain => -20.0,
    }
}

/// E of acyl donors, by the order of acylating power that the trade knows (from memory), between
/// the alkyl ester of the parameters and the acyl chloride.
fn by_acyl_donor(donor: AcylDonor) -> f64 {
    match donor {
        AcylDonor::Halide => -14.0,
        AcylDonor::Cyanide => -16.0,
        AcylDonor::Anhydride | AcylDonor::Azole => -17.5,
        AcylDonor::Chloroformate => -17.0,
        AcylDonor::Sulfonyl => -18.0,
        AcylDonor::Dicarbonate => -19.5,
        AcylDonor::CarbamoylChloride => -22.0,
        AcylDonor::Oxalate => -21.0,
        AcylDonor::ActiveEster => -22.0,
        AcylDonor::Thioester | AcylDonor::Formate => -23.5,
        AcylDonor::ChelatingAmide => -26.0,
        AcylDonor::Ester => PARAMETERS[P::E_ESTER as usize].mean,
        AcylDonor::Carbonate => PARAMETERS[P::E_ESTER as usize].mean - 0.5,
        AcylDonor::TertAlkylEster => PARAMETERS[P::E_TERT_ALKYL_ESTER as usize].mean,
        AcylDonor::Amide => -33.0,
    }
}

/// E of heteroallenes.
///
/// # Source
/// Li, Mayr, Ofial and others, J. Am. Chem. Soc. 2020–2022 on heteroallenes (from memory): CO2 −16.3,
/// phenyl isocyanate −15.4, phenyl isothiocyanate −18.2, CS2 −17.7; carbodiimides below; ketenes and COS
/// estimated.
fn by_cumulene(cumulene: Cumulene) -> f64 {
    match cumulene {
        Cumulene::CarbonDioxide => -16.3,
        Cumulene::Isocyanate => -15.4,
        Cumulene::Isothiocyanate => -18.2,
        Cumulene::CarbonDisulfide | Cumulene::CarbonylSulfide => -17.7,
        Cumulene::Carbodiimide => -21.0,
        Cumulene::Ketene => -11.0,
    }
}

/// By how much the group that leaves moves E of an arene in SNAr: fluoride speeds the addition
/// (common practice); chloride is the reference.
fn by_leaving_from_arene(leaving: LeavingGroup) -> f64 {
    match leaving {
        LeavingGroup::Fluoride => 2.5,
        LeavingGroup::Iodide => -0.5,
        LeavingGroup::Triflate | LeavingGroup::Sulfate => 2.0,
        _ => 0.0,
    }
}

/// E of reagents that hand over an atom.
///
/// # Source
/// From memory: N-fluorobenzenesulfonimide −8.4, the N-fluoroammonium salt of DABCO −5.2 and
/// N-fluoropyridinium about −10 (Timofeeva, Ofial and Mayr, J. Am. Chem. Soc. 2018, 140, 11474);
/// diethyl azodicarboxylate −10.2 (Kanzian and Mayr 2010); benzenediazonium −7.2; the others by the
/// conditions under which the trade uses them.
fn by_donor(donor: Donor) -> f64 {
    match donor {
        Donor::Halogen(element, source) => by_halogen(element, source),
        Donor::Chalcogen(_, ChalcogenDonor::Halide) => -7.0,
        Donor::Chalcogen(_, ChalcogenDonor::Imide) => -14.0,
        Donor::Chalcogen(_, ChalcogenDonor::Thiosulfonate) => -16.0,
        Donor::Chalcogen(element, ChalcogenDonor::Dichalcogenide) => {
            if element == SELENIUM {
                -18.0
            } else {
                -20.5
            }
        }
        Donor::Azo => -10.2,
        Donor::Nitroso => -12.5,
        Donor::Nitrite => -15.0,
        Donor::SulfonylAzide => -17.0,
        Donor::Diazonium => -7.2,
        Donor::Oxaziridine => -14.0,
    }
}

const SELENIUM: u8 = 34;
const FLUORINE: u8 = 9;
const CHLORINE: u8 = 17;
const BROMINE: u8 = 35;

fn by_halogen(element: u8, source: HalogenDonor) -> f64 {
    // chlorine is handed over more slowly than bromine and iodine (common practice)
    let chlorine = |of_bromine: f64| {
        if element == CHLORINE {
            of_bromine - 3.0
        } else {
            of_bromine
        }
    };
    match source {
        HalogenDonor::Element => match element {
            CHLORINE => -4.0,
            BROMINE => -5.0,
            _ => -8.0,
        },
        HalogenDonor::Ammonium => -5.2,
        HalogenDonor::Sulfonimide if element == FLUORINE => -8.4,
        HalogenDonor::Sulfonimide => -13.0,
        HalogenDonor::Imide => chlorine(-12.0),
        HalogenDonor::Hypohalite => -12.0,
        HalogenDonor::Polyhaloalkane => chlorine(-18.0),
        HalogenDonor::SulfonylHalide => -19.0,
    }
}
