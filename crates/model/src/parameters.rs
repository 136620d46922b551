//! The model's uncertain constants as one indexed vector.

use enolattice_molecule::AnionClass;

/// A constant of the model with its standard uncertainty and source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Parameter {
    /// Name in capitals, unique: what code and fits call it.
    pub name: &'static str,
    /// What it is, in words that a chemist uses; unique.
    pub title: &'static str,
    /// Mean.
    pub mean: f64,
    /// Standard uncertainty.
    pub sigma: f64,
    /// Unit of mean and uncertainty.
    pub unit: &'static str,
    /// A publication, a table of the library, `from memory` or `common practice`.
    pub source: &'static str,
}

macro_rules! parameters {
    ($($(#[$doc:meta])* $id:ident = $title:expr, $mean:expr, $sigma:expr, $unit:expr, $source:expr;)*) => {
        /// Index of a parameter in the vector.
        #[allow(non_camel_case_types, clippy::enum_variant_names, clippy::upper_case_acronyms)]
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        #[repr(usize)]
        pub(crate) enum P { $($(#[$doc])* $id,)* }

        /// All parameters, in the order of their indices.
        pub(crate) const PARAMETERS: &[Parameter] = &[
            $(Parameter { name: stringify!($id), title: $title, mean: $mean, sigma: $sigma, unit: $unit, source: $source },)*
        ];
    };
}

const WATER_PAIRS: &str = "mean pKa(DMSO) − pKa(water) of the class in reference_pairs (Bordwell 1988 and standard compilations, from memory)";
const ONIUM_PAIRS: &str = "fitted to onium acids in water, MeCN, THF, methanol and DMSO (the page on the medium; published values from memory)";
const NUCLEOPHILES: &str =
    "fitted to the carbanions of mayr_nucleophiles in DMSO with measured pKa";
const MEMORY: &str = "from memory";

parameters! {
    /// Hydrogen-bond stabilisation of each class of anion by water, for a member of the class's
    /// reference pKa ([`reference_pka`]).
    H_KETONE = "hydrogen bonds of water to a ketone enolate", 7.0, 0.7, "pK", WATER_PAIRS;
    H_ARYL_KETONE = "hydrogen bonds of water to an aryl ketone enolate", 6.4, 1.0, "pK", WATER_PAIRS;
    H_ALDEHYDE = "hydrogen bonds of water to an aldehyde enolate", 7.0, 1.0, "pK", MEMORY;
    H_ESTER = "hydrogen bonds of water to an ester enolate", 3.9, 0.8, "pK", WATER_PAIRS;
    H_AMIDE = "hydrogen bonds of water to an amide enolate", 3.9, 1.0, "pK", MEMORY;
    H_NITRILE = "hydrogen bonds of water to a nitrile carbanion", 2.4, 0.6, "pK", WATER_PAIRS;
    H_NITRONATE = "hydrogen bonds of water to a nitronate", 8.1, 0.8, "pK", WATER_PAIRS;
    H_SULFONE = "hydrogen bonds of water to a sulfone carbanion", 2.0, 1.0, "pK", MEMORY;
    H_BETA_DICARBONYL = "hydrogen bonds of water to an open-chain 1,3-dicarbonyl anion", 3.8, 0.6, "pK", WATER_PAIRS;
    H_CYCLIC_BETA_DICARBONYL = "hydrogen bonds of water to a cyclic 1,3-dicarbonyl anion", 5.5, 0.6, "pK", WATER_PAIRS;
    H_CYCLIC_DIESTER = "hydrogen bonds of water to the anion of a cyclic malonate", 2.5, 0.6, "pK", WATER_PAIRS;
    H_CARBANION = "hydrogen bonds of water to any other carbanion", 1.0, 1.0, "pK", MEMORY;
    H_ALKOXIDE = "hydrogen bonds of water to an alkoxide", 13.7, 0.6, "pK", WATER_PAIRS;
    H_HYDROXIDE = "hydrogen bonds of water to hydroxide", 15.7, 0.5, "pK", WATER_PAIRS;
    H_PHENOXIDE = "hydrogen bonds of water to a phenoxide", 8.0, 0.7, "pK", WATER_PAIRS;
    H_CARBOXYLATE = "hydrogen bonds of water to a carboxylate", 7.5, 0.5, "pK", WATER_PAIRS;
    H_CARBONATE = "hydrogen bonds of water to carbonate and phosphate", 7.7, 1.0, "pK", "hydrogencarbonate 10.3, hydrogenphosphate 12.3 and carbonic acid 6.4 in water (standard compilations) against the effective values of the solids in dipolar solvents, 18, 20 and 14";
    H_AMIDE_NITROGEN = "hydrogen bonds of water to an amide's nitrogen anion", 10.4, 0.8, "pK", WATER_PAIRS;
    H_IMIDE_NITROGEN = "hydrogen bonds of water to an imide's nitrogen anion", 5.1, 0.8, "pK", WATER_PAIRS;
    H_AZOLE_NITROGEN = "hydrogen bonds of water to an azolide", 4.1, 0.6, "pK", WATER_PAIRS;
    H_ARYL_NITROGEN = "hydrogen bonds of water to an anilide", 2.9, 1.0, "pK", WATER_PAIRS;
    H_ALKYL_NITROGEN = "hydrogen bonds of water to a dialkylamide", 5.0, 2.0, "pK", MEMORY;
    H_SILYL_NITROGEN = "hydrogen bonds of water to a disilylamide", 4.0, 2.0, "pK", MEMORY;
    H_FLUORIDE = "hydrogen bonds of water to fluoride", 11.8, 1.0, "pK", "hydrogen fluoride 15 in DMSO (Bordwell 1988) against 3.2 in water (from memory)";
    H_THIOLATE = "hydrogen bonds of water to a thiolate", 6.3, 0.7, "pK", WATER_PAIRS;
    /// By how much the stabilisation grows with the basicity of the anion within a class: localised charge
    /// takes stronger hydrogen bonds.
    H_BASICITY_HETEROATOM = "growth of the hydrogen bonds with basicity, oxygen and sulfur anions", 0.5, 0.1, "1", "alcohols from hexafluoroisopropanol to ethanol, phenols, thiols, carboxylic acids of reference_pairs (from memory)";
    H_BASICITY_KETONE = "growth of the hydrogen bonds with basicity, ketone enolates", 0.4, 0.15, "1", "phenylacetone against acetone in reference_pairs (from memory)";
    H_BASICITY_NITRILE = "growth of the hydrogen bonds with basicity, nitrile carbanions", 0.12, 0.05, "1", "malononitrile against acetonitrile in reference_pairs (from memory)";
    /// By how much cationic acids of a kind are stronger in DMSO than in water, beside what hydrogen bonds of their
    /// N–H and electron pairs of the solvent give: of alkylamines, anilines, pyridines, amidines, phosphazenes.
    H_CATIONIC_ACID = "hydrogen bonds of water to a free alkylamine", -3.0, 0.5, "pK", ONIUM_PAIRS;
    H_CATIONIC_ARYL = "hydrogen bonds of water to a free aniline", -4.8, 0.7, "pK", ONIUM_PAIRS;
    H_CATIONIC_AZINE = "hydrogen bonds of water to a free pyridine", -3.2, 0.6, "pK", ONIUM_PAIRS;
    H_CATIONIC_AMIDINE = "hydrogen bonds of water to a free amidine or guanidine", -0.9, 0.5, "pK", ONIUM_PAIRS;
    H_CATIONIC_PHOSPHAZENE = "hydrogen bonds of water to a free phosphazene", -1.5, 1.5, "pK", ONIUM_PAIRS;
    /// Hydrogen bond of an N–H of a cationic acid with localised charge to the solvent, times β(DMSO) − β.
    H_CATIONIC_DONOR = "hydrogen bond from an ammonium N–H to the solvent", 3.5, 0.5, "pK", ONIUM_PAIRS;
    /// By what share such a hydrogen bond is stronger in THF than β says, for THF screens it less.
    H_CATIONIC_SCREENING = "gain of that hydrogen bond in solvents that screen little", 0.5, 0.2, "1", ONIUM_PAIRS;
    /// Electron pairs of the solvent for the rest of a small cation, times β(DMSO) − β.
    CATION_SOLVATION = "solvation of a small ammonium ion by electron pairs", 3.0, 1.0, "pK", ONIUM_PAIRS;
    /// Pyridinium ions are open to the electron pairs of a solvent of low permittivity, THF = 1.
    AZINE_OPEN = "solvation of a flat pyridinium ion", 1.6, 0.8, "pK", ONIUM_PAIRS;
    /// Contact pairs of a cationic acid with the anions of the pot, for which it needs no solvent: effective pK
    /// units in media of low permittivity at the concentrations of the trade.
    ONIUM_PAIR = "contact pair of an ammonium ion with an anion", 1.3, 1.0, "pK", "phosphazenes and amidines ionise carbon acids of their own strength in dichloromethane and THF, amines make ion pairs of phenols in benzene (common practice)";
    /// pKa on the medium's own scale less that on the scale anchored in DMSO: one number for all acids,
    /// which cancels in every equilibrium.
    SCALE_MECN = "offset of the pKa scale of acetonitrile from that of DMSO", 11.4, 0.3, "pK", "neutral and cationic acids of reference_pairs in MeCN against DMSO (Kütt, Leito and others, from memory)";
    SCALE_THF = "offset of the pKa scale of THF from that of DMSO", 5.1, 0.5, "pK", "onium acids in THF against DMSO (Tshepelevitsh and others 2019, from memory)";
    SCALE_DMF = "offset of the pKa scale of DMF from that of DMSO", 1.2, 0.5, "pK", "carboxylic acids and phenols in DMF against DMSO (standard compilations, from memory)";
    /// Contact-ion-pair stabilisation of localised anions over a ketone enolate, Na⁺, ε = 7.4.
    LOC_ALKOXIDE = "contact pair of an alkoxide against a ketone enolate", 4.0, 1.0, "pK", MEMORY;
    LOC_HYDROXIDE = "contact pair of hydroxide or carbonate against a ketone enolate", 5.0, 1.5, "pK", MEMORY;
    LOC_CARBOXYLATE = "contact pair of a carboxylate against a ketone enolate", 3.0, 1.0, "pK", MEMORY;
    LOC_PHENOXIDE = "contact pair of a phenoxide against a ketone enolate", 2.5, 1.0, "pK", MEMORY;
    LOC_NITROGEN = "contact pair of an N–H acid's anion against a ketone enolate", 1.5, 1.0, "pK", MEMORY;
    LOC_ALKYL_NITROGEN = "contact pair of a dialkylamide against a ketone enolate", -1.6, 1.0, "pK", "as for silylamides: the two lie 6.2 apart in THF (Fraser and others 1984, from memory)";
    LOC_SILYL_NITROGEN = "contact pair of a disilylamide against a ketone enolate", -1.5, 1.0, "pK", "metal disilylamides ionise alkyl esters, pKa 30, completely in ethers: enolates bind the metal by oxygen (common practice)";
    LOC_FLUORIDE = "contact pair of fluoride against a ketone enolate", 5.0, 1.5, "pK", MEMORY;
    LOC_ESTER = "contact pair of an ester enolate against a ketone enolate", 0.4, 0.5, "pK", MEMORY;
    /// Chelation of the metal by two oxygens of the anion, on the same scale as the localisation: of an aldolate, of a
    /// 1,3-dicarbonyl anion.
    LOC_ALDOLATE = "chelation of an aldolate by the metal", 1.6, 1.0, "pK", "lithium pinacolonate and pivalaldehyde in THF give off 18 kcal/mol (Arnett and others, J. Am. Chem. Soc. 1990, 112, 801, from memory), less about 9 for the entropy of joining two molecules: log K about 7 at 25 °C";
    LOC_CHELATE = "chelation of a 1,3-dicarbonyl anion by the metal", 3.0, 1.0, "pK", "magnesium chelates of 1,3-dicarbonyl compounds are weak bases (from memory)";
    LOC_NITRONATE = "contact pair of a nitronate against a ketone enolate", -1.0, 0.7, "pK", MEMORY;
    PAIR_LITHIUM = "pairing strength of lithium against sodium", 1.2, 0.2, "1", MEMORY;
    PAIR_POTASSIUM = "pairing strength of potassium against sodium", 0.7, 0.15, "1", MEMORY;
    PAIR_CAESIUM = "pairing strength of caesium against sodium", 0.5, 0.15, "1", MEMORY;
    PAIR_AMMONIUM = "pairing strength of tetraalkylammonium against sodium", 0.3, 0.15, "1", MEMORY;
    PAIR_MAGNESIUM = "pairing strength of magnesium against sodium", 1.5, 0.3, "1", MEMORY;
    PAIR_ZINC = "pairing strength of zinc against sodium", 1.5, 0.4, "1", MEMORY;
    /// Cost of separating charges in a medium of low permittivity, times (1/ε − 1/46.7).
    CHARGE_SEPARATION = "cost of parting charges in a solvent of low permittivity", 15.0, 4.0, "pK", "Born, Z. Phys. 1920, 1, 45, with the size of an ion pair (from memory)";
    /// By how much neutral acids, which make two charges, lose more strength from water to alcohols than cationic
    /// ones.
    CHARGES_IN_ALCOHOL = "cost of parting charges in an alcohol", 3.2, 0.5, "pK", "phenols and carboxylic acids against onium acids in water, methanol and ethanol (standard compilations, from memory)";
    /// By what factor an alcohol solvates alkoxides better than its α says.
    H_ALKOXIDE_IN_ALCOHOL = "solvation of an alkoxide by an alcohol", 1.29, 0.05, "1", "autoprotolysis of methanol, ethanol and 2-propanol (from memory)";
    /// log10 k of C–H exchange at ΔpKa = 0 and 25 °C.
    EXCHANGE_PROTIC = "speed of C–H proton transfer in hydroxylic solvents", 1.0, 0.5, "log10 L/(mol s)", "acetone in water with hydroxide, 0.2 L/(mol s) at ΔpKa −3.8, and with acetate, 2.5·10⁻⁷ L/(mol s) at ΔpKa −14.4 (Bell, The Proton in Chemistry, 1973, from memory)";
    EXCHANGE_DIPOLAR = "speed of C–H proton transfer in dipolar aprotic solvents", 0.5, 1.0, "log10 L/(mol s)", MEMORY;
    EXCHANGE_APOLAR = "speed of C–H proton transfer in ethers and hydrocarbons", -1.0, 1.0, "log10 L/(mol s)", MEMORY;
    EXCHANGE_LITHIUM = "slowing of C–H proton transfer by lithium and other firm metals", -1.5, 0.7, "log10 L/(mol s)", MEMORY;
    /// Amines and amidines exchange without an ion pair to break.
    EXCHANGE_AMINE = "speeding of C–H proton transfer with amines", 1.5, 0.7, "log10 L/(mol s)", MEMORY;
    EXCHANGE_POTASSIUM = "speeding of C–H proton transfer with large cations", 0.3, 0.3, "log10 L/(mol s)", MEMORY;
    EXCHANGE_NITRO_PROTIC = "slowness of nitroalkanes in proton transfer, hydroxylic solvents", -2.8, 0.7, "log10 L/(mol s)", "nitromethane with hydroxide in water, 27 L/(mol s) at ΔpKa 5.5 (Bordwell and Boyle, J. Am. Chem. Soc. 1972, 94, 3907, from memory)";
    EXCHANGE_NITRO = "slowness of nitroalkanes in proton transfer, other solvents", -0.5, 0.7, "log10 L/(mol s)", "the anomaly of nitroalkanes is small outside hydrogen-bonding media (from memory)";
    /// 1,3-dicarbonyl compounds and nitriles have lower intrinsic barriers than ketones and esters.
    EXCHANGE_DICARBONYL = "ease of proton transfer of 1,3-dicarbonyl compounds", 1.5, 0.7, "log10 L/(mol s)", "acetylacetone against acetone with amines in water (from memory)";
    EXCHANGE_CYANO = "ease of proton transfer of nitriles", 2.0, 0.8, "log10 L/(mol s)", "nitriles ionise with little reorganisation (from memory)";
    EXCHANGE_BRONSTED = "Brønsted slope of C–H proton transfer", 0.55, 0.1, "1", "acetone in water with hydroxide and with acetate (Bell 1973, from memory): 0.44; steeper between stronger bases (from memory)";
    EXCHANGE_PAIRED_BRONSTED = "Brønsted slope of proton transfer between metal enolates", 0.3, 0.1, "1", "directed aldol additions of lithium enolates outrun proton exchange at −78 °C (common practice)";
    AMIDE_EXCHANGE = "speed of deprotonation by metal amides", 1.2, 0.7, "log10 L/(mol s)", "half-lives of ketones, esters and amides with lithium amides in THF at −78 °C: seconds to minutes (from memory)";
    AMIDE_BRONSTED = "Brønsted slope of deprotonation by metal amides", 0.2, 0.1, "1", "half-lives of ketones, esters and amides with lithium amides in THF at −78 °C: seconds to minutes (from memory)";
    /// Metal amides reduce aldehydes, add to them and, disilylamides, make silylimines of them.
    AMIDE_TO_ALDEHYDE = "speed of addition and hydride transfer of metal amides to aldehydes", 3.5, 0.7, "log10 L/(mol s)", "aldehydes are not enolised cleanly by metal amides: dialkylamides reduce them, disilylamides make N-silylimines at −78 to 0 °C (common practice)";
    /// Sensitivity of the kinetic distribution to the acidity of the sites.
    KINETIC_BRONSTED = "weight of acidity in the kinetic choice between sites", 0.4, 0.1, "1", "fitted to the enolate_regiochemistry table (House and others, from memory)";
    KINETIC_SECONDARY = "hindrance of a bulky base at a CH2 or substituted site", 0.65, 0.2, "log10", "fitted to the enolate_regiochemistry table (House and others, from memory)";
    KINETIC_TERTIARY = "hindrance of a bulky base at a CH site", 1.9, 0.4, "log10", "fitted to the enolate_regiochemistry table (House and others, from memory)";
    /// SN2 of ethyl bromide with a carbanion of pKa 22 in DMSO at 25 °C.
    SN2_ANCHOR = "reactivity of carbanions with alkyl halides as a whole", 0.0, 0.5, "log10 L/(mol s)", "Bordwell and Hughes, J. Org. Chem. 1980–1983 (range of carbanions with alkyl halides in DMSO, from memory)";
    SN2_BRONSTED = "Brønsted slope of carbanions with alkyl halides", 0.35, 0.05, "1", "Bordwell and Hughes, J. Org. Chem. 1980–1983: 0.25–0.45 (from memory)";
    SN2_SOLVATION = "slowing of substitution by hydrogen bonds to the carbanion", 0.60, 0.1, "1", MEMORY;
    SN2_LITHIUM_BRONSTED = "Brønsted slope of lithium enolates", 0.15, 0.1, "1", MEMORY;
    /// Contact ion pair in ethers and hydrocarbons against the free ion.
    PAIRED_LITHIUM = "reactivity of a lithium contact pair against the free carbanion", -1.2, 0.5, "log10", MEMORY;
    PAIRED_SODIUM = "reactivity of a sodium contact pair against the free carbanion", -1.2, 0.5, "log10", MEMORY;
    PAIRED_POTASSIUM = "reactivity of a potassium contact pair against the free carbanion", -0.6, 0.4, "log10", MEMORY;
    PAIRED_AMMONIUM = "reactivity of a tetraalkylammonium pair against the free carbanion", -0.3, 0.3, "log10", MEMORY;
    PAIRED_MAGNESIUM = "reactivity of a magnesium contact pair against the free carbanion", -3.0, 0.8, "log10", "magnesium and zinc enolates are not alkylated in ethers (common practice)";
    PAIRED_ZINC = "reactivity of a zinc contact pair against the free carbanion", -3.5, 0.8, "log10", "magnesium and zinc enolates are not alkylated in ethers (common practice)";
    /// What the last two lose further in substitution at saturated carbon.
    SN2_DIVALENT = "further loss of magnesium and zinc enolates with alkyl halides", -2.5, 0.7, "log10", "magnesium and zinc enolates add to carbonyl groups and are not alkylated in ethers (common practice)";
    /// Firm metals stay with the oxygen even where most ions are free.
    DIPOLAR_LITHIUM = "reactivity of lithium enolates in dipolar solvents against the free enolate", -1.0, 0.5, "log10", "ion pairs of lithium enolates in DMSO, K 10² to 10⁴ L/mol (Olmstead and Bordwell, J. Org. Chem. 1980, 45, 3299, from memory)";
    DIPOLAR_DIVALENT = "reactivity of magnesium and zinc enolates in dipolar solvents against the free enolate", -2.5, 0.8, "log10", "magnesium and zinc enolates are alkylated slowly even in DMF and DMSO (common practice)";
    PAIRED_ONIUM = "reactivity of an ammonium contact pair against the free carbanion", -0.6, 0.4, "log10", MEMORY;
    /// A carbonyl group that binds the metal of a contact pair, or takes the hydrogen bond of a hydroxylic solvent,
    /// is attacked faster than in DMSO.
    CARBONYL_METAL = "activation of a carbonyl group by the metal", 2.0, 0.8, "log10", "lithium enolates add to esters and amides with chelating groups within minutes at −78 °C (common practice)";
    CARBONYL_PROTIC = "activation of a carbonyl group by a hydroxylic solvent", 1.0, 1.0, "log10", "nitronates add to benzaldehyde in methanol within minutes at 10 °C (common practice)";
    CARBONYL_ACID = "activation of a carbonyl group by an acidic solvent", 0.2, 0.07, "1", "general acid catalysis of additions to carbonyl groups, 0.2 to 0.5 (from memory)";
    /// log10 of K of four lithium enolate monomers to a tetramer in THF at 25 °C.
    TETRAMER = "aggregation of lithium enolates to tetramers", 8.7, 0.4, "log10 L³/mol³", "Abbotto, Streitwieser and others on lithium ketone enolates in THF: 5·10^8 M^-3 (from memory)";
    STERIC_SN2 = "cost of a substituent on the carbanion, alkyl halides", -0.9, 0.3, "log10", MEMORY;
    STERIC_POLAR = "cost of a substituent on the carbanion, additions", -0.7, 0.3, "log10", MEMORY;
    /// Acyl and aryl transfer to a carbanion that bears three groups besides the charge, each.
    STERIC_ACYL = "cost of making a quaternary carbon by acylation or arylation", -4.0, 1.0, "log10", "1,3-dicarbonyl compounds with one more group are hardly acylated or arylated again (common practice)";
    /// An enolate that leaves an ester's tetrahedral adduct more easily than the alkoxide does mostly goes back:
    /// per pK unit by which it is the weaker base.
    ACYL_BREAKDOWN = "return of an ester's adduct to enolate and ester", 0.3, 0.15, "1", "breakdown limits acyl transfer where the nucleophile is the better leaving group (Jencks and Gilchrist, J. Am. Chem. Soc. 1968, 90, 2622, from memory); arylacetates with sodium hydride are alkylated before they condense (common practice)";
    /// A crowded carbanion and a substituted β carbon together.
    STERIC_PAIR = "crowded carbanion with a substituted acceptor", -1.5, 0.5, "log10", MEMORY;
    STERIC_BRANCH = "cost of a branch beside the carbanion", -1.0, 0.3, "log10", MEMORY;
    /// N in DMSO = intercept + slope·pKa(DMSO) + class of carbanions, and its loss by hydrogen bonds.
    MAYR_N_INTERCEPT = "nucleophilicity of carbanions as a whole", 9.1, 0.8, "1", NUCLEOPHILES;
    MAYR_N_SLOPE = "growth of nucleophilicity with basicity", 0.79, 0.04, "1", NUCLEOPHILES;
    MAYR_N_NITRILE = "nucleophilicity of nitrile carbanions against others of their pKa", 2.0, 0.7, "1", NUCLEOPHILES;
    MAYR_N_NITRONATE = "nucleophilicity of nitronates against others of their pKa", -1.1, 0.7, "1", NUCLEOPHILES;
    MAYR_N_SULFONE = "nucleophilicity of sulfone carbanions against others of their pKa", -0.9, 0.7, "1", NUCLEOPHILES;
    MAYR_N_DICARBONYL = "nucleophilicity of 1,3-dicarbonyl anions against others of their pKa", -2.3, 0.7, "1", NUCLEOPHILES;
    MAYR_N_IMINO = "nucleophilicity of imino ester carbanions against others of their pKa", 2.9, 1.0, "1", NUCLEOPHILES;
    MAYR_N_PHOSPHORYL = "nucleophilicity of phosphoryl carbanions against others of their pKa", -3.0, 1.3, "1", NUCLEOPHILES;
    MAYR_N_LARGEST = "ceiling of carbanion nucleophilicity", 28.5, 1.0, "1", "no carbanion in mayr_nucleophiles lies above 29.1";
    MAYR_N_SOLVATION = "loss of nucleophilicity to hydrogen bonds", 1.05, 0.15, "1", "mayr_nucleophiles in water and alcohols against DMSO";
    MAYR_S_N = "sensitivity of carbanions to the electrophile", 0.62, 0.05, "1", "mean of carbanions in mayr_nucleophiles";
    /// E2 of a primary bromide with a base whose acid has pKa 19.9 in the medium.
    E2_ANCHOR = "speed of elimination from alkyl halides", -5.45, 0.5, "log10 L/(mol s)", "Ingold and Hughes, elimination fractions with ethoxide (from memory)";
    E2_SECONDARY = "elimination from a secondary halide against a primary one", 0.7, 0.3, "log10", "Ingold and Hughes, elimination fractions with ethoxide (from memory)";
    E2_TERTIARY = "elimination from a tertiary halide against a primary one", 1.3, 0.3, "log10", "Ingold and Hughes, elimination fractions with ethoxide (from memory)";
    E2_ACTIVATED = "elimination across an activated β hydrogen", 2.3, 0.4, "log10", "2-phenylethyl bromide with ethoxide, 95 % elimination (Ingold and Hughes, from memory)";
    /// What a carbanion loses against an oxygen base of its strength.
    E2_CARBANION = "carbanions against oxygen bases in elimination", -0.5, 0.4, "log10", "sodium malonate and secondary butyl bromide in ethanol give 80 % of the substituted malonate (common practice)";
    E2_LEAVING = "weight of the leaving group in elimination", 0.9, 0.1, "1", MEMORY;
    E2_BRONSTED = "weight of basicity in elimination", 0.25, 0.08, "1", MEMORY;
    /// log10 (kO/kC) of the classes of ambident anions.
    O_BETA_DICARBONYL = "tendency of 1,3-dicarbonyl anions to react at oxygen", 0.7, 0.3, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    O_DIESTER = "tendency of malonate anions to react at oxygen", -1.2, 0.6, "log10", "malonates and cyanoacetates are alkylated at carbon in every solvent (common practice)";
    O_KETONE = "tendency of ketone enolates to react at oxygen", 0.6, 0.5, "log10", MEMORY;
    O_ESTER = "tendency of ester enolates to react at oxygen", -0.8, 0.5, "log10", MEMORY;
    O_NITRONATE = "tendency of nitronates to react at oxygen", 4.7, 0.6, "log10", "Hass and Bender, J. Am. Chem. Soc. 1949, 71, 1767 (from memory)";
    O_IODIDE = "push of an iodide towards carbon", -2.2, 0.5, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    O_BROMIDE = "push of a bromide towards carbon", -0.75, 0.3, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    O_CHLORIDE = "push of a chloride towards carbon", -0.5, 0.3, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    O_BARE = "attack at oxygen by bare anions, as in HMPA", 0.0, 0.3, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    O_DIPOLAR = "attack at oxygen in DMF and DMSO", -0.4, 0.4, "log10", "less oxygen in DMF and DMSO than in HMPA (from memory)";
    O_ETHER = "attack at oxygen in ethers and hydrocarbons", -1.3, 0.4, "log10", MEMORY;
    O_PROTIC = "attack at oxygen in hydroxylic solvents", -2.6, 0.4, "log10", "fitted to c_vs_o_alkylation (Kurts and others 1971, from memory)";
    /// What the group that leaves adds to it in acyl, silyl and sulfonyl transfer, on the scale of a sulfonate.
    O_ACYL_HALIDE = "attack at oxygen on acyl chlorides and anhydrides", 1.0, 0.6, "log10", "acyl chlorides take sodium and lithium enolates of ketones at both ends (common practice)";
    O_ACYL_MILD = "attack at oxygen on mild acyl donors", -1.5, 0.7, "log10", "acyl cyanides, azoles and esters acylate at carbon (common practice)";
    O_ACYL_STABILISED = "attack at oxygen in acylation of 1,3-dicarbonyl anions", -1.5, 0.7, "log10", "sodium derivatives of malonates and acetoacetates are acylated mainly at carbon in ethers (common practice)";
    O_MAGNESIUM = "attack at oxygen in acylation of magnesium chelates", -2.0, 0.8, "log10", "magnesium chelates of 1,3-dicarbonyl compounds are acylated at carbon (common practice)";
    O_SULFONYL = "attack at oxygen on sulfonyl donors", 2.5, 0.8, "log10", MEMORY;
    O_SILYL = "attack at oxygen on silyl chlorides", 5.0, 1.0, "log10", "silyl chlorides take enolates at oxygen (common practice)";
    /// Opening of a three-membered ring at CH2 against SN2 of ethyl bromide.
    RING_EPOXIDE = "opening of an epoxide against ethyl bromide", -5.2, 0.8, "log10", "stabilised carbanions in aprotic solvents need hours at 60 °C and more, enolates of ketones hardly react without a Lewis acid (from memory)";
    /// A hydroxylic solvent helps the alkoxide of an opening epoxide to leave.
    RING_PROTIC = "help of a hydroxylic solvent in opening an epoxide", 4.0, 0.7, "log10", "in alcohols epoxides are some ten times slower than ethyl bromide with alkoxides (from memory)";
    RING_ACTIVATED_AZIRIDINE = "opening of an activated aziridine against ethyl bromide", -0.8, 0.8, "log10", MEMORY;
    RING_AZIRIDINE = "opening of a plain aziridine against ethyl bromide", -6.0, 1.5, "log10", MEMORY;
    RING_THIIRANE = "opening of a thiirane against ethyl bromide", -2.0, 1.0, "log10", MEMORY;
    RING_SUBSTITUTED = "cost of a substituent where a small ring is opened", -1.6, 0.5, "log10", "a secondary against a primary alkyl group in SN2 (Streitwieser 1956, from memory)";
    RING_ACTIVATED = "gain of an aryl or vinyl group where a small ring is opened", 1.0, 0.5, "log10", MEMORY;
    /// ΔG° of additions at 25 °C, neutral reactants and product, 1 mol/L.
    DG_ALDOL_ALKYL = "free energy of aldol addition to an alkanal", -2.5, 0.8, "kcal/mol", MEMORY;
    DG_ALDOL_ARYL = "free energy of aldol addition to an aromatic aldehyde", -1.5, 0.8, "kcal/mol", MEMORY;
    DG_ALDOL_NITRO = "free energy of nitroaldol addition", -2.7, 0.8, "kcal/mol", MEMORY;
    DG_ALDOL_STABILISED = "free energy of adding a 1,3-dicarbonyl compound to an aldehyde", 3.0, 1.0, "kcal/mol", "adducts of malonates and acetoacetates to aldehydes are not found, they go back or lose water (common practice)";
    DG_ALDOL_CYANO = "free energy of adding an active nitrile to an aldehyde", -1.5, 1.0, "kcal/mol", "adducts of malononitrile are seen (from memory)";
    DG_ALDOL_KETONE_ACCEPTOR = "free energy of aldol addition to a ketone", 2.5, 0.8, "kcal/mol", "acetone to diacetone alcohol, K = 0.04 L/mol at 25 °C (standard textbooks, from memory)";
    /// What an aryl ketone has more, whose conjugation is lost.
    DG_ALDOL_ARYL_KETONE = "conjugation that an aryl ketone loses as an acceptor", 2.0, 1.0, "kcal/mol", MEMORY;
    DG_MICHAEL = "free energy of Michael addition", -9.0, 1.5, "kcal/mol", MEMORY;
    DG_MICHAEL_BETA = "cost of a β substituent to Michael addition", 1.6, 0.5, "kcal/mol", MEMORY;
    DG_MICHAEL_STABILISED = "cost of a stabilised carbanion to Michael addition", 1.5, 0.7, "kcal/mol", MEMORY;
    DG_CLAISEN = "free energy of acylating an ester or amide with an ester", 3.0, 1.0, "kcal/mol", MEMORY;
    DG_CLAISEN_KETONE = "free energy of acylating a ketone or nitrile with an ester", 0.5, 1.0, "kcal/mol", MEMORY;
    DG_CLAISEN_ACTIVE = "gain of formates, oxalates and aryl esters in acylation", -3.0, 1.5, "kcal/mol", "formates, oxalates and aryl esters acylate further downhill than alkyl esters (from memory)";
    DG_CLAISEN_CARBONATE = "cost of a carbonate in acylation", 1.0, 1.5, "kcal/mol", MEMORY;
    /// log10 of the association constant of a carbanion with the acid of the base, which hands its proton over as the
    /// new bond forms: onium ions in dipolar and in less polar solvents, neutral acids.
    ASSISTED_DIPOLAR = "pairing of a carbanion with the ammonium ion, dipolar solvents", 1.5, 0.7, "log10 L/mol", "contact pairs at a permittivity of 37 (Fuoss, J. Am. Chem. Soc. 1958, 80, 5059, from memory)";
    ASSISTED_APOLAR = "pairing of a carbanion with the ammonium ion, other solvents", 5.5, 1.0, "log10 L/mol", "contact pairs 5 to 6 Å apart at a permittivity of 7 to 9, 10⁵ to 10⁶ (Fuoss, J. Am. Chem. Soc. 1958, 80, 5059, from memory)";
    ASSISTED_NEUTRAL = "pairing of a carbanion with a neutral acid of the base", 0.0, 0.7, "log10 L/mol", MEMORY;
    DG_IMINE = "free energy of addition to an imine", -4.0, 2.0, "kcal/mol", MEMORY;
    DG_ACTIVATED_KETONE = "free energy of addition to an activated ketone", -3.0, 1.5, "kcal/mol", MEMORY;
    DG_DEHYDRATION = "free energy of the loss of water from an aldol adduct", -4.0, 1.5, "kcal/mol", "aldol condensations with aromatic aldehydes go to completion (common practice)";
    DG_ENTROPY = "entropy of joining two molecules", 0.030, 0.005, "kcal/(mol K)", "ΔS° of joining two molecules, about −30 cal/(mol K) (from memory)";
    /// Mayr E of carbonyl groups as acceptors of the substrate's own enolate.
    E_KETONE = "electrophilicity of the substrate's own ketone group", -22.3, 1.0, "1", "Mayr database: cyclopentanone −21.0, cycloheptanone −22.1 (electrophilicities table)";
    E_ALDEHYDE = "electrophilicity of the substrate's own aldehyde group", -17.5, 1.0, "1", MEMORY;
    E_ESTER = "electrophilicity of an alkyl ester", -28.0, 1.5, "1", MEMORY;
    E_TERT_ALKYL_ESTER = "electrophilicity of a tert-alkyl ester", -31.0, 1.5, "1", MEMORY;
    /// Entropy of activation.
    DS_SN2 = "entropy of activation of substitution", -10.0, 5.0, "cal/(mol K)", MEMORY;
    DS_SN2_PAIRED = "entropy of activation of substitution by contact pairs", -40.0, 7.0, "cal/(mol K)", "effective value: lithium ester enolates are methylated by iodomethane within hours at −78 °C (common practice)";
    DS_ADDITION = "entropy of activation of addition", -25.0, 5.0, "cal/(mol K)", MEMORY;
    DS_EXCHANGE = "entropy of activation of C–H proton transfer", -20.0, 5.0, "cal/(mol K)", MEMORY;
    /// What a primary or secondary amine gains by way of the iminium ion of an aldehyde where its acid is at hand, in
    /// the addition and in the loss of water (of the amine); and what a ketone has less.
    IMINIUM_ADDITION = "gain by the iminium ion in the addition", 2.0, 1.0, "log10", "piperidine condenses aldehydes with malonates where tertiary amines of its strength hardly do (common practice)";
    IMINIUM_ELIMINATION = "gain by the iminium ion in the loss of water", 4.0, 1.0, "log10", "the amine leaves where hydroxide would have to (common practice)";
    IMINIUM_KETONE = "loss of a ketone against an aldehyde as iminium ion", -1.5, 0.7, "log10", "malonates do not condense with ketones and amines, malononitrile and cyanoacetates do (common practice)";
    /// Loss of water from an aldol adduct by hydroxide or alkoxide; weaker bases are slower by the Brønsted
    /// term of the gap of their acids.
    DEHYDRATION_BRONSTED = "weight of basicity in the loss of water", 0.5, 0.1, "1", "general base catalysis of ionisation at carbon, 0.4 to 0.6 (from memory)";
    /// By how much an adduct loses water faster for each pK unit by which its C–H is more acidic than that of a ketone.
    DEHYDRATION_ACIDITY = "weight of the adduct's acidity in the loss of water", 0.38, 0.15, "1", "adducts of malononitrile and 1,3-dicarbonyl compounds lose water with catalytic amines at room temperature, those of ketones need alkali, those of esters stay (common practice)";
    DEHYDRATION_ARYL = "speed of the loss of water, aromatic aldehydes", -2.3, 0.7, "log10 L/(mol s)", MEMORY;
    DEHYDRATION_ALKYL = "speed of the loss of water, alkanals and ketones", -4.0, 0.8, "log10 L/(mol s)", MEMORY;
    /// The same from the substrate's own aldol dimer: an aldehyde activates its α hydrogen more than a ketone.
    DEHYDRATION_DIMER_ALDEHYDE = "speed of the loss of water, dimer of an aldehyde", -2.0, 0.8, "log10 L/(mol s)", "alkanals condense to 2-alkenals with dilute alkali within hours (common practice)";
    DEHYDRATION_DIMER_KETONE = "speed of the loss of water, dimer of a ketone", -4.0, 0.8, "log10 L/(mol s)", MEMORY;
    /// Hydroxide with an alkyl ester in water.
    SAPONIFICATION = "speed of saponification", -1.0, 0.4, "log10 L/(mol s)", "ethyl acetate with hydroxide in water at 25 °C, 0.11 L/(mol s) (standard textbooks, from memory)";
    SAPONIFICATION_ALCOHOL = "slowing of saponification in alcohols", -1.2, 0.4, "log10", "ethyl acetate in 85 % ethanol, 0.006 L/(mol s) (standard compilations, from memory)";
    /// Cleavage of the carbon–carbon bond of a neutral 1,3-diketone (retro-Claisen); β-keto esters are slower.
    RETRO_CLAISEN = "speed of the cleavage of 1,3-diketones", -3.0, 1.0, "log10 L/(mol s)", "acetylacetone is cleaved by warm alkali within hours, its dialkyl derivatives more easily (common practice)";
    RETRO_CLAISEN_KETO_ESTER = "slowness of β-keto esters in that cleavage", -2.0, 0.7, "log10", "dialkylated acetoacetates are cleaved by boiling ethoxide overnight (common practice)";
    /// An alkoxide exchanges the alcohol of a neutral alkyl ester.
    TRANSESTERIFICATION = "speed of transesterification", -1.5, 0.7, "log10 L/(mol s)", "esters change their alcohol with a tenth of an equivalent of alkoxide within hours at room temperature (common practice)";
    /// A carbanion of a ketone or ester loses a group in β.
    BETA_HALIDE = "loss of a halide in β to a carbanion", 4.0, 1.0, "log10 1/s", "β-halo ketones and esters give acrylic compounds with any base at room temperature (common practice)";
    BETA_ACYLOXY = "loss of a carboxylate in β to a carbanion", 2.0, 1.0, "log10 1/s", "β-acyloxy ketones give enones with amines at room temperature (common practice)";
    BETA_ALKOXY = "loss of an alkoxide in β to a carbanion", -3.5, 1.0, "log10 1/s", "enolates of β-alkoxy esters are alkylated in the cold and lose alkoxide when warmed (common practice)";
    /// By how much less a stabler carbanion does so for each pK unit.
    BETA_BRONSTED = "reluctance of stable carbanions to lose a group in β", 0.5, 0.15, "1", MEMORY;
    /// Rings that the anion of a product closes by displacing its own halide.
    CLOSURE_EPOXIDE = "ring closure to an epoxide", 0.5, 1.0, "log10 1/s", "ethylene chlorohydrin with hydroxide in water, 0.01 L/(mol s) at 25 °C, and α-carbonyl halides react a thousand times faster (from memory)";
    CLOSURE_CYCLOPROPANE = "ring closure to a cyclopropane", 2.0, 1.0, "log10 1/s", "chloroacetates and acrylates give cyclopropanes with sodium hydride at room temperature (common practice)";
    /// An aldolate with one more aldehyde gives the ester of a glycol by hydride transfer.
    ALDOL_TISHCHENKO = "hydride transfer from an aldolate to a second aldehyde", -2.0, 1.0, "log10 L/(mol s)", "2-methylpropanal trimerises with a little alkali within an hour or so at 60 °C (from memory)";
    /// The aldolate of an aldehyde in a medium without protons expels hydroxide.
    ALDOLATE_EXPULSION = "loss of hydroxide from an aldolate", -3.5, 1.0, "log10 1/s", "aldehydes give 2-alkenals and resins on standing with strong bases at room temperature (common practice)";
    /// Enamines of pyrrolidine with aldehydes and ketones: K of formation with water, N and sN, and what a substituent costs.
    ENAMINE_ALDEHYDE = "formation of an enamine from an aldehyde", 0.5, 0.7, "log10", MEMORY;
    ENAMINE_KETONE = "formation of an enamine from a ketone", -2.0, 0.7, "log10", "ketones need an excess of pyrrolidine or removal of water (common practice)";
    ENAMINE_N = "nucleophilicity of enamines", 14.9, 0.7, "1", "pyrrolidinocyclohexene (Kempf, Hampel, Ofial and Mayr, Chem. Eur. J. 2003, 9, 2209, from memory)";
    ENAMINE_S_N = "sensitivity of enamines to the electrophile", 0.83, 0.05, "1", "enamines (Kempf and others 2003, from memory)";
    ENAMINE_ARYL = "reluctance of aryl ketones to form enamines", -3.0, 1.0, "log10", "aryl ketones hardly form enamines with secondary amines (common practice)";
    ENAMINE_CROWDED = "cost of a substituent on an enamine", -2.0, 0.7, "log10", MEMORY;
    /// Carbonyl group of an enone or enal, as an acceptor beside its β carbon.
    E_CONJUGATED = "carbonyl group of an enone against that of a ketone", -1.5, 1.0, "1", "conjugation makes a carbonyl group a weaker electrophile (from memory)";
    DG_CONJUGATED = "conjugation lost where the carbonyl group of an enone is attacked", 1.5, 1.0, "kcal/mol", "conjugation is lost where the carbonyl group of an enone is attacked (from memory)";
    /// ΔG° of adding an alcohol or amine to an acceptor, beside the chain that it begins.
    DG_HETERO_MICHAEL = "free energy of adding an alcohol or amine to an acceptor", -4.0, 1.5, "kcal/mol", "alcohols add to acrylonitrile and acrylates reversibly with alkoxides (common practice)";
    ORGANOLITHIUM_EXCHANGE = "speed of deprotonation by alkyllithiums", 2.0, 1.0, "log10 L/(mol s)", "alkyllithiums add to carbonyl groups faster than they ionise them (common practice)";
    ORGANOLITHIUM_ADDITION = "speed of addition of alkyllithiums to carbonyl groups", 3.5, 1.0, "log10 L/(mol s)", MEMORY;
    /// The same to an amide, against a ketone or ester.
    AMIDE_ADDITION = "reluctance of amides towards that addition", -1.5, 0.7, "log10", "alkyllithiums add to tertiary amides as they ionise them (common practice)";
    GRIGNARD_EXCHANGE = "speed of deprotonation by alkylmagnesium halides", 0.0, 1.0, "log10 L/(mol s)", "alkylmagnesium halides ionise far more slowly than alkyllithiums (common practice)";
    GRIGNARD_ADDITION = "speed of addition of alkylmagnesium halides to carbonyl groups", 1.5, 1.0, "log10 L/(mol s)", MEMORY;
    /// Second ionisation: the other charge conjugated or remote.
    SECOND_CONJUGATED = "second pKa where both charges share an acceptor", 7.5, 1.5, "pK", MEMORY;
    SECOND_REMOTE = "second pKa where the charges are apart", 3.0, 1.0, "pK", MEMORY;
    /// Halogen–lithium exchange of aryl and vinyl halides with alkyllithiums.
    HALOGEN_LITHIUM_IODIDE = "speed of iodine–lithium exchange", 5.0, 1.0, "log10 L/(mol s)", "aryl iodides exchange at −100 °C within minutes (common practice)";
    HALOGEN_LITHIUM_BROMIDE = "speed of bromine–lithium exchange", 3.5, 1.0, "log10 L/(mol s)", "aryl bromides exchange with butyllithium in THF at −78 °C within minutes (common practice)";
    CANNIZZARO = "speed of disproportionation of an aldehyde", -5.5, 1.0, "log10 L²/(mol² s)", "benzaldehyde needs concentrated alkali for a day (common practice)";
    /// Solvolysis of a tertiary bromide in ethanol; benzylic and allylic ones follow.
    SOLVOLYSIS_TERTIARY = "solvolysis of a tertiary bromide", -5.4, 0.3, "log10 1/s", "tert-butyl bromide in ethanol at 25 °C (Grunwald and Winstein, J. Am. Chem. Soc. 1948, 70, 846, from memory)";
    SOLVOLYSIS_ACTIVATED = "solvolysis of a secondary benzylic or allylic bromide", -5.5, 0.7, "log10 1/s", MEMORY;
    SOLVOLYSIS_PRIMARY = "solvolysis of a primary bromide", -8.5, 0.7, "log10 1/s", MEMORY;
    SOLVOLYSIS_WATER = "speeding of solvolysis in water", 5.5, 0.3, "log10", "Grunwald and Winstein 1948: Y(water) − Y(ethanol) = 5.5 (from memory)";
}

/// Values of all parameters: their means, or a draw.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Values(Vec<f64>);

impl Values {
    /// Every parameter at its mean.
    pub(crate) fn means() -> Values {
        Values(PARAMETERS.iter().map(|p| p.mean).collect())
    }

    /// Every parameter moved by its own standard normal deviate.
    pub(crate) fn moved(deviate: impl Fn(usize) -> f64) -> Values {
        Values(
            PARAMETERS
                .iter()
                .enumerate()
                .map(|(i, p)| p.mean + p.sigma * deviate(i))
                .collect(),
        )
    }

    /// The means, but for the parameters named; names that are no parameter's change nothing.
    pub(crate) fn changed(changes: &[(&str, f64)]) -> Values {
        let value = |p: &Parameter| {
            let change = changes.iter().find(|(name, _)| *name == p.name);
            change.map_or(p.mean, |(_, value)| *value)
        };
        Values(PARAMETERS.iter().map(value).collect())
    }

    /// The value of a parameter.
    #[inline]
    pub(crate) fn get(&self, parameter: P) -> f64 {
        self.0[parameter as usize]
    }
}

/// The parameter of hydrogen-bond stabilisation of a class of anion; none for hydride.
pub(crate) fn hydrogen_bond(class: AnionClass) -> Option<P> {
    Some(match class {
        AnionClass::Ketone => P::H_KETONE,
        AnionClass::ArylKetone => P::H_ARYL_KETONE,
        AnionClass::Aldehyde => P::H_ALDEHYDE,
        AnionClass::Ester => P::H_ESTER,
        AnionClass::Amide => P::H_AMIDE,
        AnionClass::Nitrile => P::H_NITRILE,
        AnionClass::Nitronate => P::H_NITRONATE,
        AnionClass::Sulfone => P::H_SULFONE,
        AnionClass::BetaDicarbonyl => P::H_BETA_DICARBONYL,
        AnionClass::CyclicBetaDicarbonyl => P::H_CYCLIC_BETA_DICARBONYL,
        AnionClass::CyclicDiester => P::H_CYCLIC_DIESTER,
        AnionClass::Carbanion => P::H_CARBANION,
        AnionClass::Alkoxide => P::H_ALKOXIDE,
        AnionClass::Hydroxide => P::H_HYDROXIDE,
        AnionClass::Phenoxide => P::H_PHENOXIDE,
        AnionClass::Carboxylate => P::H_CARBOXYLATE,
        AnionClass::Carbonate => P::H_CARBONATE,
        AnionClass::AmideNitrogen => P::H_AMIDE_NITROGEN,
        AnionClass::ImideNitrogen => P::H_IMIDE_NITROGEN,
        AnionClass::AzoleNitrogen => P::H_AZOLE_NITROGEN,
        AnionClass::ArylNitrogen => P::H_ARYL_NITROGEN,
        AnionClass::AlkylNitrogen => P::H_ALKYL_NITROGEN,
        AnionClass::SilylNitrogen => P::H_SILYL_NITROGEN,
        AnionClass::Thiolate => P::H_THIOLATE,
        AnionClass::Fluoride => P::H_FLUORIDE,
        AnionClass::Neutral => P::H_CATIONIC_ACID,
        AnionClass::Hydride => return None,
    })
}

/// pKa (DMSO) of the member of a class for which its hydrogen-bond parameter is given, and the parameter
/// by which the stabilisation grows with basicity; none where the data show no such growth.
fn basicity(class: AnionClass) -> Option<(f64, P)> {
    Some(match class {
        AnionClass::Ketone => (26.5, P::H_BASICITY_KETONE),
        AnionClass::ArylKetone => (24.7, P::H_BASICITY_KETONE),
        AnionClass::Nitrile => (31.3, P::H_BASICITY_NITRILE),
        AnionClass::Alkoxide => (29.8, P::H_BASICITY_HETEROATOM),
        AnionClass::Phenoxide => (18.0, P::H_BASICITY_HETEROATOM),
        AnionClass::Carboxylate => (12.3, P::H_BASICITY_HETEROATOM),
        AnionClass::Thiolate => (17.0, P::H_BASICITY_HETEROATOM),
        _ => return None,
    })
}

/// Stabilisation by water's hydrogen bonds of the anion of an acid, pK units, not below zero.
///
/// `h = h(class) + b·(pKa(DMSO) − pKa(reference))`
pub(crate) fn hydrogen_bonding(pka_dmso: f64, class: AnionClass, values: &Values) -> f64 {
    let Some(p) = hydrogen_bond(class) else {
        return 0.0;
    };
    let h = values.get(p);
    match basicity(class) {
        Some((reference, slope)) => (h + values.get(slope) * (pka_dmso - reference)).max(0.0),
        None => h,
    }
}

/// The parameter of contact-ion-pair stabilisation of a class of anion; none for the reference, ketone enolates.
pub(crate) fn localisation(class: AnionClass) -> Option<P> {
    Some(match class {
        AnionClass::Alkoxide => P::LOC_ALKOXIDE,
        AnionClass::Hydroxide | AnionClass::Carbonate => P::LOC_HYDROXIDE,
        AnionClass::Carboxylate => P::LOC_CARBOXYLATE,
        AnionClass::Fluoride => P::LOC_FLUORIDE,
        AnionClass::Phenoxide => P::LOC_PHENOXIDE,
        AnionClass::AmideNitrogen
        | AnionClass::ImideNitrogen
        | AnionClass::AzoleNitrogen
        | AnionClass::ArylNitrogen => P::LOC_NITROGEN,
        AnionClass::AlkylNitrogen => P::LOC_ALKYL_NITROGEN,
        AnionClass::SilylNitrogen => P::LOC_SILYL_NITROGEN,
        AnionClass::Ester | AnionClass::Amide => P::LOC_ESTER,
        AnionClass::Nitronate => P::LOC_NITRONATE,
        _ => return None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_unique_and_every_value_has_a_source() {
        let mut names: Vec<_> = PARAMETERS.iter().map(|p| p.name).collect();
        names.sort_unstable();
        let all = names.len();
        names.dedup();
        assert_eq!(names.len(), all);
        for p in PARAMETERS {
            assert!(
                p.sigma > 0.0 && p.mean.is_finite() && !p.source.is_empty(),
                "{}",
                p.name
            );
        }
    }

    #[test]
    fn titles_are_unique_and_in_plain_words() {
        let mut titles: Vec<_> = PARAMETERS.iter().map(|p| p.title).collect();
        for title in &titles {
            let words = title.split_whitespace();
            // chemists write NMR, THF or HMPA in capitals, but no name of a parameter
            let is_shouted =
                |word: &str| word.contains('_') || word.len() > 5 && word == word.to_uppercase();
            assert!(
                words.clone().count() > 1 && !words.clone().any(is_shouted),
                "{title}"
            );
        }
        titles.sort_unstable();
        let all = titles.len();
        titles.dedup();
        assert_eq!(titles.len(), all);
    }

    #[test]
    fn hydrogen_bonds_reproduce_the_water_pairs() {
        // reference_pairs: ethanol 29.8 → 15.9, nitroethane 16.7 → 8.6, acetic acid 12.3 → 4.76,
        // diethyl malonate 16.4 → 13.3; tolerance: two standard uncertainties of the class.
        let means = Values::means();
        for (class, dmso, water) in [
            (AnionClass::Alkoxide, 29.8, 15.9),
            (AnionClass::Nitronate, 16.7, 8.6),
            (AnionClass::Carboxylate, 12.3, 4.76),
            (AnionClass::BetaDicarbonyl, 16.4, 13.3),
            (AnionClass::Ketone, 26.5, 19.3),
            (AnionClass::Ester, 29.5, 25.6),
            (AnionClass::Nitrile, 31.3, 28.9),
        ] {
            let parameter = hydrogen_bond(class).unwrap();
            let sigma = PARAMETERS[parameter as usize].sigma;
            let off = dmso - hydrogen_bonding(dmso, class, &means) - water;
            assert!(off.abs() <= 2.0 * sigma, "{class:?}: off by {off:.1}");
        }
    }
}
