//! Rate constants: proton exchange, SN2, polar additions, eliminations.

use enolattice_molecule::{AlkylGroup, AnionClass, LeavingGroup};
use enolattice_reagents::{Cation, SolventClass};
use enolattice_units::{H, K_B, KCAL_IN_KJ, LN_10, R_KJ, kelvin, math};

use crate::medium::Medium;
use crate::parameters::{P, Values};
use crate::prepared::Beside;

/// log10 of the largest second-order rate constant: diffusion in a mobile solvent.
/// Smoluchowski's 8RT/(3η) is 7·10⁹ L/(mol s) at 1 mPa s and 25 °C.
const DIFFUSION_LIMIT: f64 = 9.5;
/// log10 k of exchange between two carbon acids, or with a metal amide: faster changes no selectivity,
/// and a cap keeps the network solvable.
const EXCHANGE_CAP: f64 = 6.0;
/// The same for X–H acids, which meet a carbanion at the speed of diffusion or give their proton to its oxygen.
const HETEROATOM_CAP: f64 = 9.0;
/// log10 of the largest rate constant of a catalysed step of three: beyond it another step limits (a working rule).
pub(crate) const FASTEST_CATALYSIS: f64 = 4.0;
/// The pKa (DMSO) at which the SN2 anchor is given.
const SN2_ANCHOR_PKA: f64 = 22.0;

/// log10 of a rate constant given at one temperature, at another.
///
/// `ΔH‡ = ΔG‡(T₀) + T₀·ΔS‡`, `k(T) = k_B·T/h · exp(ΔS‡/R − ΔH‡/(R·T))`
///
/// | argument        | unit                     |
/// |-----------------|--------------------------|
/// | `log10_k`       | log10 L/(mol s) or 1/s   |
/// | `at_c`, `to_c`  | °C                       |
/// | `entropy`       | ΔS‡, cal/(mol K)         |
///
/// A barrier's enthalpy below zero (diffusion-controlled) is taken as zero.
///
/// # Source
/// Eyring 1935, doi:10.1063/1.1749604.
pub(crate) fn at_temperature(log10_k: f64, at_c: f64, to_c: f64, entropy: f64) -> f64 {
    let (t0, t1) = (kelvin(at_c), kelvin(to_c));
    let ds = entropy * 1e-3 * KCAL_IN_KJ;
    let dg = R_KJ * t0 * LN_10 * (math::log10(K_B * t0 / H) - log10_k);
    let dh = (dg + t0 * ds).max(0.0);
    log10_k + math::log10(t1 / t0) - dh / (R_KJ * LN_10) * (1.0 / t1 - 1.0 / t0)
}

/// Limits a rate constant to that of diffusion.
pub(crate) fn diffusion_limited(log10_k: f64) -> f64 {
    // 1/k = 1/k_reaction + 1/k_diffusion
    log10_k - math::log10(1.0 + math::exp10(log10_k - DIFFUSION_LIMIT))
}

/// log10 k of proton transfer from a C–H acid to a base, `delta` = pKa(base's acid) − pKa(C–H).
///
/// `log k = k₀ + w + β·|Δ|` downhill, capped, and less by |Δ| uphill, so that forward and back keep K;
/// `weight` is w, what the site adds.
pub(crate) fn exchange(
    delta: f64,
    class: AnionClass,
    weight: f64,
    medium: &Medium,
    values: &Values,
) -> f64 {
    let slope = values.get(P::EXCHANGE_BRONSTED);
    let at_25 = intrinsic(class, medium, values) + weight + slope * delta.abs();
    both_ways(at_25, delta, HETEROATOM_CAP, medium, values)
}

/// log10 k of proton transfer from a C–H acid to a carbanion.
///
/// As [`exchange`]; contact ion pairs and aggregates of lithium, magnesium and zinc gain little from the
/// driving force, which is why directed aldol additions outrun the loss of the aldehyde's proton.
pub(crate) fn exchange_of_carbons(
    delta: f64,
    class: AnionClass,
    medium: &Medium,
    values: &Values,
) -> f64 {
    let slope = if medium.binds_oxygen() {
        P::EXCHANGE_PAIRED_BRONSTED
    } else {
        P::EXCHANGE_BRONSTED
    };
    let at_25 = intrinsic(class, medium, values) + values.get(slope) * delta.abs();
    both_ways(at_25, delta, EXCHANGE_CAP, medium, values)
}

/// log10 k of proton transfer at carbon at ΔpKa = 0 and 25 °C.
fn intrinsic(class: AnionClass, medium: &Medium, values: &Values) -> f64 {
    let solvent = if medium.is_protic() {
        P::EXCHANGE_PROTIC
    } else {
        match medium.class() {
            SolventClass::DipolarAprotic => P::EXCHANGE_DIPOLAR,
            _ => P::EXCHANGE_APOLAR,
        }
    };
    let cation = match medium.cation {
        _ if medium.binds_oxygen() => {
            values.get(P::EXCHANGE_LITHIUM) * (1.0 - medium.additive.freed)
        }
        Cation::Potassium | Cation::Caesium | Cation::Ammonium => values.get(P::EXCHANGE_POTASSIUM),
        Cation::None if !medium.is_protic() => values.get(P::EXCHANGE_AMINE),
        _ => 0.0,
    };
    let by_class = match (class, medium.is_protic()) {
        (AnionClass::Nitronate, true) => values.get(P::EXCHANGE_NITRO_PROTIC),
        (AnionClass::Nitronate, false) => values.get(P::EXCHANGE_NITRO),
        (class, _) if class.is_dicarbonyl() => values.get(P::EXCHANGE_DICARBONYL),
        (AnionClass::Nitrile, _) => values.get(P::EXCHANGE_CYANO),
        _ => 0.0,
    };
    values.get(solvent) + cation + by_class
}

/// log10 k of proton transfer from a C–H acid to a metal dialkylamide or disilylamide.
///
/// `log k = k₀ + β·Δ`: amides bind the substrate's oxygen and deprotonate within the complex, so
/// that the rate depends little on the driving force.
pub(crate) fn exchange_with_amide(
    delta: f64,
    weight: f64,
    medium: &Medium<'_>,
    values: &Values,
) -> f64 {
    let slope = values.get(P::AMIDE_BRONSTED);
    let at_25 = values.get(P::AMIDE_EXCHANGE) + weight + slope * delta.abs();
    both_ways(at_25, delta, EXCHANGE_CAP, medium, values)
}

/// log10 k of proton transfer from a C–H acid to an alkyllithium or an alkylmagnesium halide, whose
/// rate at ΔpKa = 0 and 25 °C is `at_25`.
pub(crate) fn exchange_with_organometal(
    at_25: P,
    delta: f64,
    weight: f64,
    medium: &Medium<'_>,
    values: &Values,
) -> f64 {
    let at_25 = values.get(at_25) + weight;
    both_ways(at_25, delta, EXCHANGE_CAP, medium, values)
}

/// Brings a downhill rate to the temperature, caps it, and takes |Δ| off where the step is uphill.
fn both_ways(
    downhill_at_25: f64,
    delta: f64,
    cap: f64,
    medium: &Medium<'_>,
    values: &Values,
) -> f64 {
    let entropy = values.get(P::DS_EXCHANGE);
    let downhill = at_temperature(downhill_at_25, 25.0, medium.temperature_c, entropy).min(cap);
    if delta < 0.0 {
        downhill + delta
    } else {
        downhill
    }
}

/// A nucleophile as the rate equations see it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Nucleophile {
    /// pKa of its conjugate acid on the DMSO scale.
    pub(crate) pka_dmso: f64,
    /// Class.
    pub(crate) class: AnionClass,
    /// Heavy neighbours of the carbanion beyond two.
    pub(crate) crowding: u8,
    /// Branches on these substituents.
    pub(crate) branches: u8,
    /// A neighbour that makes it better or worse.
    pub(crate) beside: Option<Beside>,
    /// log10 units relative to a carbanion of the same pKa.
    pub(crate) relative: f64,
    /// Whether it is a metal enolate that aggregates; concentration of anions, mol/L.
    pub(crate) aggregated_at_m: Option<f64>,
    /// Whether it carries two charges.
    pub(crate) is_dianion: bool,
}

/// log10 of the share of monomer of a lithium enolate at a total concentration.
///
/// Solves `m + 4·K·m⁴ = c` by Newton's method; the share is m/c.
pub(crate) fn monomer_share(concentration_m: f64, log10_k_tetramer: f64) -> f64 {
    let k4 = 4.0 * math::exp10(log10_k_tetramer);
    let mut m = concentration_m.min((concentration_m / k4).sqrt().sqrt());
    for _ in 0..8 {
        let m3 = m * m * m;
        m -= (m + k4 * m3 * m - concentration_m) / (1.0 + 4.0 * k4 * m3);
    }
    math::log10(m / concentration_m)
}

/// log10 k relative to ethyl of the alkyl group in SN2.
///
/// # Source
/// Streitwieser, Chem. Rev. 1956, 56, 571, averages of many reactions (from memory):
/// methyl 30, ethyl 1, propyl 0.4, isobutyl 0.03, neopentyl 1e-5, isopropyl 0.025, allyl 40,
/// benzyl 120; Conant, Kirner and Hussey, J. Am. Chem. Soc. 1925, 47, 488 for α-carbonyl and
/// cyclohexyl (from memory); tertiary: no SN2, a bound. Chloromethyl methyl ether 920 against butyl chloride
/// with iodide (the same, from memory); dihalomethanes about as slow as ethyl or slower (from memory).
pub(crate) fn alkyl_group(group: AlkylGroup) -> f64 {
    match group {
        AlkylGroup::Methyl => 1.48,
        AlkylGroup::Ethyl => 0.0,
        AlkylGroup::Primary => -0.4,
        AlkylGroup::Isobutyl => -1.5,
        AlkylGroup::Neopentyl => -5.0,
        AlkylGroup::Secondary => -1.6,
        AlkylGroup::Cyclohexyl => -3.6,
        AlkylGroup::Tertiary => -6.0,
        AlkylGroup::Allyl | AlkylGroup::Propargyl => 1.6,
        AlkylGroup::Benzyl => 2.1,
        AlkylGroup::SecondaryActivated => 0.4,
        AlkylGroup::AlphaCarbonyl => 3.0,
        AlkylGroup::AlphaHetero => 2.6,
        AlkylGroup::Halomethyl => -0.5,
    }
}

/// log10 k relative to bromide of the leaving group.
///
/// # Source
/// Streitwieser, Solvolytic Displacement Reactions, 1962, and compilations in textbooks (from memory);
/// sulfonates with enolates are slower than with hard nucleophiles. Trialkyloxonium ions and trialkyl
/// phosphates by the conditions under which they alkylate (from memory).
pub(crate) fn leaving_group(leaving: LeavingGroup) -> f64 {
    match leaving {
        LeavingGroup::Fluoride => -4.0,
        LeavingGroup::Chloride => -1.7,
        LeavingGroup::Bromide => 0.0,
        LeavingGroup::Iodide => 0.4,
        LeavingGroup::Tosylate => 0.1,
        LeavingGroup::Mesylate => 0.0,
        LeavingGroup::Triflate => 3.3,
        LeavingGroup::Sulfate => 1.3,
        LeavingGroup::Ether => 4.0,
        LeavingGroup::Phosphate => -2.0,
    }
}

/// log10 (kO/kC) by leaving group: harder leaving groups favour oxygen; sulfonates and sulfates are the zero.
pub(crate) fn oxygen_by_leaving_group(leaving: LeavingGroup, values: &Values) -> f64 {
    match leaving {
        LeavingGroup::Iodide => values.get(P::O_IODIDE),
        LeavingGroup::Bromide => values.get(P::O_BROMIDE),
        LeavingGroup::Chloride | LeavingGroup::Fluoride => values.get(P::O_CHLORIDE),
        _ => 0.0,
    }
}

/// Effect of ion pairs and aggregates on a nucleophile, log10.
pub(crate) fn pairing(
    nucleophile: &Nucleophile,
    medium: &Medium,
    values: &Values,
    aggregates: bool,
) -> f64 {
    if nucleophile.class == AnionClass::Neutral || medium.is_protic() {
        return 0.0;
    }
    let bound = 1.0 - medium.additive.freed;
    if !medium.is_paired() {
        return bound * in_dipolar_solvents(nucleophile.class, medium.cation, values);
    }
    match medium.cation {
        Cation::Lithium => {
            let share = match nucleophile.aggregated_at_m {
                Some(c) if aggregates => (monomer_share(c, values.get(P::TETRAMER))
                    + medium.additive.disaggregated)
                    .min(0.0),
                _ => 0.0,
            };
            values.get(P::PAIRED_LITHIUM) * bound + share
        }
        Cation::Sodium => values.get(P::PAIRED_SODIUM) * bound,
        Cation::Potassium | Cation::Caesium => values.get(P::PAIRED_POTASSIUM) * bound,
        Cation::Ammonium => values.get(P::PAIRED_AMMONIUM) * bound,
        Cation::Magnesium | Cation::Calcium | Cation::Barium => {
            values.get(P::PAIRED_MAGNESIUM) * bound
        }
        Cation::Zinc => values.get(P::PAIRED_ZINC) * bound,
        Cation::None => values.get(P::PAIRED_ONIUM),
    }
}

/// What an anion loses to a metal that stays near it where most ions are free, log10. Lithium stays with the oxygen of enolates and
/// alkoxides; carbanions whose charge is spread are free of it (fluorenides in DMSO, from memory), and 1,3-dicarbonyl
/// compounds are alkylated with lithium hydride in DMF (common practice).
fn in_dipolar_solvents(class: AnionClass, cation: Cation, values: &Values) -> f64 {
    use AnionClass::{
        Aldehyde, Alkoxide, Amide, ArylKetone, Carboxylate, Ester, Hydroxide, Ketone, Phenoxide,
    };
    let on_oxygen = matches!(
        class,
        Ketone
            | ArylKetone
            | Aldehyde
            | Ester
            | Amide
            | Alkoxide
            | Hydroxide
            | Phenoxide
            | Carboxylate
    );
    match cation {
        Cation::Lithium if on_oxygen => values.get(P::DIPOLAR_LITHIUM),
        Cation::Magnesium | Cation::Calcium | Cation::Barium | Cation::Zinc => {
            values.get(P::DIPOLAR_DIVALENT)
        }
        _ => 0.0,
    }
}

/// Whether the nucleophile is a salt of lithium, magnesium or zinc in a medium of contact pairs, whose reactivity depends
/// little on basicity; dianions are the exception.
fn is_held_by_metal(nucleophile: &Nucleophile, medium: &Medium) -> bool {
    medium.binds_oxygen() && nucleophile.class != AnionClass::Neutral && !nucleophile.is_dianion
}

/// log10 k of substitution at saturated carbon at the medium's temperature.
///
/// `log k(25 °C) = k₀ + r + β·(pKa − 22) − s·shift + pairing + steric + relative`
///
/// `to_ethyl_bromide` is r, log10 k of the electrophile against ethyl bromide: [`alkyl_group`] plus
/// [`leaving_group`], or a ring's own.
pub(crate) fn substitution(
    nucleophile: &Nucleophile,
    to_ethyl_bromide: f64,
    medium: &Medium,
    values: &Values,
) -> f64 {
    let above = nucleophile.pka_dmso - SN2_ANCHOR_PKA;
    let bronsted = if is_held_by_metal(nucleophile, medium) && above > 0.0 {
        values.get(P::SN2_LITHIUM_BRONSTED)
    } else {
        values.get(P::SN2_BRONSTED)
    };
    let shift = medium
        .hydrogen_bond_shift(nucleophile.pka_dmso, nucleophile.class, values)
        .max(0.0);
    let is_metal_pair = medium.is_paired() && nucleophile.class != AnionClass::Neutral;
    let divalent = if medium.binds_oxygen() && medium.cation != Cation::Lithium {
        values.get(P::SN2_DIVALENT)
    } else {
        0.0
    };
    let entropy = if is_metal_pair && medium.cation != Cation::None {
        P::DS_SN2_PAIRED
    } else {
        P::DS_SN2
    };
    let at_25 = values.get(P::SN2_ANCHOR) + to_ethyl_bromide + bronsted * above
        - values.get(P::SN2_SOLVATION) * shift
        + pairing(nucleophile, medium, values, true)
        + divalent
        + f64::from(nucleophile.crowding) * values.get(P::STERIC_SN2)
        + f64::from(nucleophile.branches) * values.get(P::STERIC_BRANCH)
        + nucleophile.relative;
    diffusion_limited(at_temperature(
        at_25,
        25.0,
        medium.temperature_c,
        values.get(entropy),
    ))
}

/// log10 k of addition to an electrophile of Mayr's E at the medium's temperature.
///
/// `log k(20 °C) = sN·(N + E) + pairing + steric`, `N` of [`nucleophilicity`] less 1.05·shift
///
/// # Source
/// Mayr and Patz, Angew. Chem. Int. Ed. Engl. 1994, 33, 938.
pub(crate) fn addition(nucleophile: &Nucleophile, e: f64, medium: &Medium, values: &Values) -> f64 {
    let s_n = values.get(P::MAYR_S_N);
    let shift = medium
        .hydrogen_bond_shift(nucleophile.pka_dmso, nucleophile.class, values)
        .max(0.0);
    let lithium = is_held_by_metal(nucleophile, medium);
    let above = nucleophile.pka_dmso - SN2_ANCHOR_PKA;
    let (pka, extra) = if lithium && above > 0.0 {
        (SN2_ANCHOR_PKA, values.get(P::SN2_LITHIUM_BRONSTED) * above)
    } else {
        (nucleophile.pka_dmso, 0.0)
    };
    let n = nucleophilicity(pka, nucleophile, values) - values.get(P::MAYR_N_SOLVATION) * shift;
    let at_20 = s_n * (n + e)
        + extra
        + pairing(nucleophile, medium, values, false)
        + f64::from(nucleophile.crowding) * values.get(P::STERIC_POLAR)
        + f64::from(nucleophile.branches) * values.get(P::STERIC_BRANCH)
        + nucleophile.relative;
    diffusion_limited(at_temperature(
        at_20,
        20.0,
        medium.temperature_c,
        values.get(P::DS_ADDITION),
    ))
}

/// Mayr's N in DMSO of a nucleophile whose acid has this pKa, apart from the room that it takes.
///
/// `N = 9.1 + 0.79·pKa + class`, at most 28.5; the parameters name what the classes add.
pub(crate) fn nucleophilicity(pka_dmso: f64, nucleophile: &Nucleophile, values: &Values) -> f64 {
    let by_class = match (nucleophile.beside, nucleophile.class) {
        (Some(Beside::Imino), _) => values.get(P::MAYR_N_IMINO),
        (Some(Beside::Phosphoryl), _) => values.get(P::MAYR_N_PHOSPHORYL),
        (Some(Beside::Cyano), _) => {
            values.get(P::MAYR_N_NITRILE) + values.get(P::MAYR_N_DICARBONYL)
        }
        (None, AnionClass::Nitrile) => values.get(P::MAYR_N_NITRILE),
        (None, AnionClass::Nitronate) => values.get(P::MAYR_N_NITRONATE),
        (None, AnionClass::Sulfone) => values.get(P::MAYR_N_SULFONE),
        (None, class) if class.is_dicarbonyl() => values.get(P::MAYR_N_DICARBONYL),
        _ => 0.0,
    };
    let n = values.get(P::MAYR_N_INTERCEPT) + values.get(P::MAYR_N_SLOPE) * pka_dmso + by_class;
    n.min(values.get(P::MAYR_N_LARGEST))
}

/// log10 k of bimolecular elimination by a base whose acid has `pka_medium`; `None` without β hydrogens.
pub(crate) fn elimination(
    pka_medium: f64,
    group: AlkylGroup,
    leaving: LeavingGroup,
    beta_hydrogens: u8,
    activated: bool,
    medium: &Medium,
    values: &Values,
) -> Option<f64> {
    if beta_hydrogens == 0 {
        return None;
    }
    let by_group = match group {
        AlkylGroup::Secondary | AlkylGroup::Cyclohexyl | AlkylGroup::SecondaryActivated => {
            values.get(P::E2_SECONDARY)
        }
        AlkylGroup::Tertiary => values.get(P::E2_TERTIARY),
        _ => 0.0,
    };
    let at_25 = values.get(P::E2_ANCHOR)
        + by_group
        + if activated {
            values.get(P::E2_ACTIVATED)
        } else {
            0.0
        }
        + values.get(P::E2_LEAVING) * leaving_group(leaving)
        + values.get(P::E2_BRONSTED) * (pka_medium - 19.9);
    Some(diffusion_limited(at_temperature(
        at_25,
        25.0,
        medium.temperature_c,
        values.get(P::DS_SN2),
    )))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn eyring_keeps_the_anchor_and_doubles_to_triples_in_ten_kelvin() {
        assert_eq!(at_temperature(-3.0, 25.0, 25.0, -10.0), -3.0);
        // common practice: a reaction of hours at room temperature doubles or triples in 10 K
        let ratio = math::exp10(at_temperature(-4.0, 25.0, 35.0, -10.0) + 4.0);
        assert!((2.0..4.0).contains(&ratio), "{ratio}");
    }

    #[test]
    fn monomers_and_tetramers_add_up() {
        for c in [1e-6, 1e-3, 0.1, 1.0] {
            let m = c * math::exp10(monomer_share(c, 8.7));
            let total = m + 4.0 * math::exp10(8.7) * m.powi(4);
            assert!((total / c - 1.0).abs() < 1e-9, "{c}: {total}");
        }
    }

    #[test]
    fn diffusion_bounds_every_rate() {
        assert!(diffusion_limited(30.0) <= DIFFUSION_LIMIT);
        assert!((diffusion_limited(2.0) - 2.0).abs() < 1e-6);
    }
}
