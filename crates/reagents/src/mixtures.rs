//! Mixtures of solvents: by which rules they are mixed.
//!
//! | quantity | rule | source |
//! | --- | --- | --- |
//! | permittivity | mean by volume | ideal mixtures: Reis and others, Phys. Chem. Chem. Phys. 2009, 11, 3977 (quoted from memory) |
//! | α, β, donor number | mean by volume: no part gathers around the solute | estimate |
//! | density, molar mass, water | no change of volume on mixing | common practice |
//! | viscosity | ln η = Σ xᵢ ln ηᵢ | Grunberg and Nissan, Nature 1949, 164, 799, without their interaction term (quoted from memory) |
//! | boiling, flash point | the lowest of the parts | bound |
//! | melting point | the highest of Tᵢ/(1 − R ln xᵢ/ΔS) with ΔS = 56.5 J/(mol K) | ideal solubility (Schröder and van Laar) with Walden's entropy of fusion (quoted from memory) |
//! | class | that of the largest part; alcohol or water where such parts make half of it | estimate |
//! | own acid | the part that is the strongest acid in the mixture | see [`GAIN_OF_OH`] |

use enolattice_molecule::AnionClass;
use enolattice_units::{ZERO_CELSIUS_K, math};

use crate::{Hazards, MixtureError, Solvent, SolventClass, Value};

/// Most parts of a mixture.
pub(crate) const MOST_PARTS: usize = 3;

/// Volumes are kept to this part of one, so that a mixture's name says all about it.
const STEPS_PER_VOLUME: f64 = 1000.0;

/// Largest volume that may be written.
const LARGEST_VOLUME: f64 = 1000.0;

/// Entropy of fusion over the gas constant: 56.5 J/(mol K), Walden's rule (quoted from memory).
const FUSION_ENTROPY_OVER_R: f64 = 56.5 / 8.314;

/// Hydrogen-bond donation α of water, the scale of protic stabilisation.
const ALPHA_OF_WATER: f64 = 1.17;

/// How much stronger an O–H or N–H acid is in water than in DMSO, pK units: methanol 29.0 and 15.5
/// (Bordwell, Acc. Chem. Res. 1988, 21, 456, and handbooks; quoted from memory).
const GAIN_OF_OH: f64 = 13.5;

/// The same for C–H acids: acetone 26.5 and 19.3, ethyl acetate 29.5 and 25.6 (as above).
const GAIN_OF_CH: f64 = 5.5;

/// Least part of a liquid that makes a second phase, by volume (estimate).
const LEAST_PHASE: f64 = 0.05;

/// Alkanes: the hydrocarbons below this permittivity.
const ALKANE_PERMITTIVITY: f64 = 2.1;

/// Liquids above this permittivity do not mix with alkanes: methanol, acetonitrile, DMF, DMSO
/// (common practice).
const IMMISCIBLE_WITH_ALKANES: f64 = 30.0;

/// One part of a mixture.
struct Part<'a> {
    solvent: &'a Solvent,
    /// Volume in the smallest whole numbers.
    volume: u64,
    /// Volume fraction.
    by_volume: f64,
    /// Mass fraction.
    by_mass: f64,
    /// Mole fraction.
    by_moles: f64,
}

/// Mixes pure solvents by volume; volumes count to a thousandth.
pub(crate) fn mixed(parts: &[(&Solvent, f64)]) -> Result<Solvent, MixtureError> {
    if !(2..=MOST_PARTS).contains(&parts.len()) {
        return Err(MixtureError::Parts { found: parts.len() });
    }
    for (index, (solvent, _)) in parts.iter().enumerate() {
        if parts[..index]
            .iter()
            .any(|(earlier, _)| earlier.name == solvent.name)
        {
            return Err(MixtureError::Repeated {
                name: solvent.name.clone(),
            });
        }
    }
    let parts = fractions(parts)?;
    let mean = |of: &dyn Fn(&Solvent) -> f64| -> f64 {
        parts
            .iter()
            .map(|part| part.by_volume * of(part.solvent))
            .sum()
    };
    let hydrogen_bond_donation = mean(&|s| s.hydrogen_bond_donation);
    let acid = strongest_acid(&parts, hydrogen_bond_donation);
    let moles: f64 = parts.iter().map(moles_per_l).sum();
    let density_g_ml = mean(&|s| s.density_g_ml);
    let donors: Option<Vec<f64>> = parts
        .iter()
        .map(|part| Some(part.by_volume * part.solvent.donor_number?))
        .collect();
    let flash = parts.iter().filter_map(|part| part.solvent.flash_c);
    let log_viscosity = parts
        .iter()
        .map(|part| part.by_moles * math::ln(part.solvent.viscosity_mpa_s));
    Ok(Solvent {
        name: name(&parts),
        synonyms: Vec::new(),
        cas: String::new(),
        smiles: joined(&parts, ".", |s| &s.smiles),
        formula: String::new(),
        class: class(&parts),
        permittivity: mean(&|s| s.permittivity),
        hydrogen_bond_donation,
        hydrogen_bond_acceptance: mean(&|s| s.hydrogen_bond_acceptance),
        donor_number: donors.map(|shares| shares.iter().sum()),
        viscosity_mpa_s: math::exp(log_viscosity.sum()),
        density_g_ml,
        molar_mass_g_mol: 1000.0 * density_g_ml / moles,
        boiling_c: lowest(parts.iter().map(|part| part.solvent.boiling_c)),
        melting_c: -lowest(parts.iter().map(|part| -first_crystals_c(part))),
        flash_c: flash.reduce(f64::min),
        grade: joined(&parts, "; ", |s| &s.grade),
        water_ppm: parts
            .iter()
            .map(|part| part.by_mass * part.solvent.water_ppm)
            .sum(),
        water_miscible: parts.iter().all(|part| part.solvent.water_miscible),
        biphasic: is_biphasic(&parts),
        peroxide_former: parts.iter().any(|part| part.solvent.peroxide_former),
        acid_m: acid.map_or(0.0, |part| part.by_volume * part.solvent.acid_m),
        acid: acid.and_then(|part| part.solvent.acid.clone()),
        parts: parts
            .iter()
            .map(|part| (part.solvent.name.clone(), part.by_volume))
            .collect(),
        part_classes: parts.iter().map(|part| part.solvent.class).collect(),
        hazards: hazards(&parts),
        date: oldest(parts.iter().map(|part| part.solvent.date.as_str())),
        source: joined(&parts, "; ", |s| &s.source),
    })
}

/// Volumes as the smallest whole numbers, and the fractions that follow from them.
fn fractions<'a>(parts: &[(&'a Solvent, f64)]) -> Result<Vec<Part<'a>>, MixtureError> {
    let mut volumes = Vec::with_capacity(parts.len());
    for (_, volume) in parts {
        let steps = (volume * STEPS_PER_VOLUME).round();
        if !(1.0..=LARGEST_VOLUME * STEPS_PER_VOLUME).contains(&steps) {
            return Err(MixtureError::Volume {
                volume: volume.to_string(),
            });
        }
        volumes.push(steps as u64);
    }
    let divisor = volumes.iter().copied().fold(0, greatest_common_divisor);
    let volume: u64 = volumes.iter().sum();
    let fractions = parts.iter().zip(&volumes).map(|((solvent, _), steps)| {
        let by_volume = *steps as f64 / volume as f64;
        (*solvent, steps / divisor, by_volume)
    });
    let mut fractions: Vec<Part<'a>> = fractions
        .map(|(solvent, volume, by_volume)| Part {
            solvent,
            volume,
            by_volume,
            by_mass: 0.0,
            by_moles: 0.0,
        })
        .collect();
    let mass: f64 = fractions
        .iter()
        .map(|p| p.by_volume * p.solvent.density_g_ml)
        .sum();
    let moles: f64 = fractions.iter().map(moles_per_l).sum();
    for part in &mut fractions {
        part.by_mass = part.by_volume * part.solvent.density_g_ml / mass;
        part.by_moles = moles_per_l(part) / moles;
    }
    Ok(fractions)
}

fn greatest_common_divisor(a: u64, b: u64) -> u64 {
    if b == 0 {
        a
    } else {
        greatest_common_divisor(b, a % b)
    }
}

fn moles_per_l(part: &Part<'_>) -> f64 {
    part.by_volume * part.solvent.concentration_m()
}

/// `THF/DMF 4:1`
fn name(parts: &[Part<'_>]) -> String {
    let volumes: Vec<String> = parts.iter().map(|part| part.volume.to_string()).collect();
    let names: Vec<&str> = parts
        .iter()
        .map(|part| part.solvent.name.as_str())
        .collect();
    format!("{} {}", names.join("/"), volumes.join(":"))
}

/// Texts of the parts, each once.
fn joined(parts: &[Part<'_>], between: &str, text: impl Fn(&Solvent) -> &String) -> String {
    let mut texts: Vec<&str> = Vec::new();
    for part in parts {
        let text = text(part.solvent).as_str();
        if !texts.contains(&text) {
            texts.push(text);
        }
    }
    texts.join(between)
}

fn lowest(values: impl Iterator<Item = f64>) -> f64 {
    values.fold(f64::INFINITY, f64::min)
}

/// The earliest of months written `YYYY-MM`.
fn oldest<'a>(months: impl Iterator<Item = &'a str>) -> String {
    months.min().unwrap_or_default().to_owned()
}

fn class(parts: &[Part<'_>]) -> SolventClass {
    let of_classes = |protic: bool| {
        parts
            .iter()
            .filter(move |part| part.solvent.class.is_protic() == protic)
    };
    let protic: f64 = of_classes(true).map(|part| part.by_volume).sum();
    // The first of two that are equal, so that the name's order decides.
    let largest = of_classes(protic >= 0.5).reduce(|largest, next| {
        if next.volume > largest.volume {
            next
        } else {
            largest
        }
    });
    largest.map_or(parts[0].solvent.class, |part| part.solvent.class)
}

/// Temperature at which the first crystals of a part come from an ideal solution, °C.
fn first_crystals_c(part: &Part<'_>) -> f64 {
    let melting_k = part.solvent.melting_c + ZERO_CELSIUS_K;
    melting_k / (1.0 - math::ln(part.by_moles) / FUSION_ENTROPY_OVER_R) - ZERO_CELSIUS_K
}

/// The part whose own acid is the strongest in a medium of this hydrogen-bond donation.
fn strongest_acid<'a, 'b>(parts: &'b [Part<'a>], donation: f64) -> Option<&'b Part<'a>> {
    let strength = |(value, class): &(Value, AnionClass)| {
        let gain = if class.is_carbanion() {
            GAIN_OF_CH
        } else {
            GAIN_OF_OH
        };
        value.value - gain * (donation / ALPHA_OF_WATER).min(1.0)
    };
    let acids = parts
        .iter()
        .filter_map(|part| Some((strength(part.solvent.acid.as_ref()?), part)));
    acids
        .reduce(|strongest, next| {
            if next.0 < strongest.0 {
                next
            } else {
                strongest
            }
        })
        .map(|(_, part)| part)
}

/// Water beside a liquid that does not mix with it, or an alkane beside a strongly polar liquid,
/// unless half of the mixture is a third liquid that mixes with both.
fn is_biphasic(parts: &[Part<'_>]) -> bool {
    let volume = |of: &dyn Fn(&Solvent) -> bool| -> f64 {
        parts
            .iter()
            .filter(|part| of(part.solvent))
            .map(|part| part.by_volume)
            .sum()
    };
    let two_phases = |one: &dyn Fn(&Solvent) -> bool, other: &dyn Fn(&Solvent) -> bool| {
        let (one, other) = (volume(one), volume(other));
        one >= LEAST_PHASE && other >= LEAST_PHASE && 1.0 - one - other < 0.5
    };
    let is_water = |s: &Solvent| s.class == SolventClass::Water;
    let is_alkane =
        |s: &Solvent| s.class == SolventClass::Hydrocarbon && s.permittivity < ALKANE_PERMITTIVITY;
    two_phases(&is_water, &|s| !s.water_miscible)
        || two_phases(&is_alkane, &|s| s.permittivity > IMMISCIBLE_WITH_ALKANES)
}

/// All codes of all parts; `unknown` where those of a part are.
fn hazards(parts: &[Part<'_>]) -> Hazards {
    let all = || parts.iter().map(|part| &part.solvent.hazards);
    let mut h_codes: Vec<String> = all().flat_map(|h| h.h_codes.clone()).collect();
    h_codes.sort();
    h_codes.dedup();
    if all().any(Hazards::is_unknown) {
        return Hazards {
            h_codes,
            source: "unknown".to_owned(),
            date: String::new(),
        };
    }
    Hazards {
        h_codes,
        source: joined(parts, "; ", |s| &s.hazards.source),
        date: oldest(all().map(|h| h.date.as_str())),
    }
}
