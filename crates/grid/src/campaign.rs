//! A campaign whose every reagent is known and every number in range.

use std::collections::HashMap;
use std::sync::Arc;

use enolattice_model::{
    Addition, Additive, Base, Electrophile, MeasuredPka, Model, Solvent, Substrate,
};
use enolattice_molecule::Salt;
use enolattice_reagents::Library;
use rayon::prelude::*;

use crate::fault::Faults;
use crate::resolve::{self, NamedStructure, Reagents, in_list};
use crate::values::{additions, numbers, target};
use crate::warnings::Warnings;
use crate::{
    CampaignSpec, FaultCode, GridError, InputError, Lattice, Place, SubstrateEntry, entries,
};

/// A checked campaign, prepared for the model. Axes in their order.
#[derive(Clone, Debug)]
pub struct Campaign {
    /// Title.
    pub title: String,
    /// Substrates.
    pub substrates: Vec<Arc<Substrate>>,
    /// The laboratory's own pKa of each substrate, in the order of `substrates`.
    pub own_pka: Vec<Option<MeasuredPka>>,
    /// Bases.
    pub bases: Vec<Arc<Base>>,
    /// Electrophiles.
    pub electrophiles: Vec<Arc<Electrophile>>,
    /// Solvents.
    pub solvents: Vec<Arc<Solvent>>,
    /// Additives with their amounts; `None`: no additive.
    pub additives: Vec<Option<Dose>>,
    /// Temperatures, °C.
    pub temperature_c: Vec<f64>,
    /// Temperatures of the deprotonation, °C; `None`: that of the reaction.
    pub formation_temperature_c: Vec<Option<f64>>,
    /// Equivalents of base.
    pub base_equiv: Vec<f64>,
    /// Equivalents of electrophile.
    pub electrophile_equiv: Vec<f64>,
    /// Concentrations of substrate, mol/L.
    pub concentration_m: Vec<f64>,
    /// Times, h.
    pub time_h: Vec<f64>,
    /// Dosing times, min.
    pub dosing_min: Vec<f64>,
    /// Orders of addition; `None`: the usual one of the base.
    pub addition: Vec<Option<Addition>>,
    /// Yield that makes a hit.
    pub yield_at_least: f64,
    /// What was changed silently on the way in (duplicates merged, ...), for the user.
    pub warnings: Vec<String>,
}

/// An additive and how much of it.
#[derive(Clone, Debug)]
pub struct Dose {
    /// The additive.
    pub additive: Arc<Additive>,
    /// Equivalents on substrate.
    pub equiv: f64,
}

/// A specification whose every value is sound.
struct Checked<'l> {
    substrates: Vec<Read>,
    reagents: Reagents<'l>,
    numbers: [Vec<f64>; 8],
    addition: Vec<Option<Addition>>,
    yield_at_least: f64,
}

/// Checks every value of a specification.
fn checked<'l>(
    spec: &CampaignSpec,
    library: &'l Library,
    warnings: &mut Warnings,
) -> Result<Checked<'l>, Vec<InputError>> {
    let mut faults = Faults::default();
    entries::check_text(&spec.title, Place::of_field("title"), &mut faults);
    let substrates = substrates(&spec.substrates, &mut faults);
    let reagents = resolve::reagents(spec, library, &mut faults);
    note_empty_axes(spec, &mut faults);
    let checked = Checked {
        substrates,
        reagents,
        numbers: numbers(spec, &mut faults, warnings),
        addition: additions(&spec.conditions.addition, &mut faults, warnings),
        yield_at_least: target(spec.target.yield_at_least, &mut faults),
    };
    faults.unless_any(checked, "")
}

impl Campaign {
    /// Every fault in the values of a specification: names, structures, ranges.
    pub fn faults(spec: &CampaignSpec, library: &Library) -> Vec<InputError> {
        checked(spec, library, &mut Warnings::default())
            .err()
            .unwrap_or_default()
    }

    /// Checks a specification against the model's library and prepares every reagent.
    ///
    /// Where a campaign says nothing: 25 °C, 1.1 equivalents of base, 1.2 of electrophile,
    /// no additive, 0.2 mol/L, 16 h, dosing in 10 min, hits from a yield of 0.5.
    ///
    /// # Errors
    /// Every fault at once.
    pub fn new(spec: &CampaignSpec, model: &Model) -> Result<Campaign, Vec<InputError>> {
        let mut warnings = Warnings::default();
        let Checked {
            substrates,
            reagents,
            numbers,
            addition,
            yield_at_least,
        } = checked(spec, model.library(), &mut warnings)?;
        let [
            temperature_c,
            formation,
            base_equiv,
            electrophile_equiv,
            additive_equiv,
            concentration_m,
            time_h,
            dosing_min,
        ] = numbers;
        spec.notes.iter().for_each(|note| warnings.noted(note));
        let substrates = merged(
            "substrates",
            substrates,
            structure_of_substrate,
            &mut warnings,
        );
        let bases = merged(
            "bases",
            reagents.bases,
            |base| (base.name.clone(), base.name.clone()),
            &mut warnings,
        );
        let solvents = merged(
            "solvents",
            reagents.solvents,
            |known| (known.name.clone(), known.name.clone()),
            &mut warnings,
        );
        let electrophiles = merged(
            "electrophiles",
            reagents.electrophiles,
            structure_of_electrophile,
            &mut warnings,
        );
        let additives = doses(&reagents.additives, &additive_equiv, model, &mut warnings);
        for Read { name, salt, .. } in &substrates {
            warnings.of_salt("substrates", name, salt);
        }
        for NamedStructure { name, salt } in &electrophiles {
            warnings.of_salt("electrophiles", name, salt);
        }
        let own_pka = substrates
            .iter()
            .map(|substrate| substrate.own_pka)
            .collect();
        let campaign = Campaign {
            title: spec.title.clone(),
            own_pka,
            substrates: prepared(substrates, |s| {
                model.substrate(&s.name, s.salt.molecule, s.own_pka)
            }),
            bases: bases
                .into_iter()
                .map(|base| Arc::new(model.base(base)))
                .collect(),
            electrophiles: prepared(electrophiles, |e| {
                model.electrophile(&e.name, e.salt.molecule)
            }),
            solvents: solvents
                .into_iter()
                .map(|known| Arc::new(model.solvent(&known)))
                .collect(),
            additives,
            temperature_c,
            formation_temperature_c: match formation.is_empty() {
                true => vec![None],
                false => formation.into_iter().map(Some).collect(),
            },
            base_equiv,
            electrophile_equiv,
            concentration_m,
            time_h,
            dosing_min,
            addition,
            yield_at_least,
            warnings: Vec::new(),
        };
        warnings.of_prepared(&campaign);
        check_size(&campaign)?;
        Ok(Campaign {
            warnings: warnings.into_list(),
            ..campaign
        })
    }
}

/// A substrate whose row is sound.
struct Read {
    name: String,
    salt: Salt,
    own_pka: Option<MeasuredPka>,
}

/// Rows that are checked side by side before the faults found so far are counted.
const ROWS_AT_ONCE: usize = 4_096;

fn substrates(listed: &[SubstrateEntry], faults: &mut Faults) -> Vec<Read> {
    let mut sound = Vec::with_capacity(listed.len());
    for (run, rows) in listed.chunks(ROWS_AT_ONCE).enumerate() {
        let first = run * ROWS_AT_ONCE;
        let read: Vec<(Option<Read>, Faults)> = rows
            .par_iter()
            .enumerate()
            .map(|(i, entry)| substrate(entry, first + i))
            .collect();
        for (substrate, found) in read {
            faults.append(found);
            sound.extend(substrate);
        }
        if faults.is_full() {
            break;
        }
    }
    sound
}

fn substrate(entry: &SubstrateEntry, index: usize) -> (Option<Read>, Faults) {
    let mut faults = Faults::default();
    let entry = SubstrateEntry {
        place: in_list(&entry.place, "substrates", index),
        ..entry.clone()
    };
    let read = entries::substrate(&entry, &mut faults).map(|(salt, own_pka)| Read {
        name: if entry.name.is_empty() {
            entry.smiles
        } else {
            entry.name
        },
        salt,
        own_pka,
    });
    (read, faults)
}

/// The values of the axis of additives: each additive in each of its amounts.
fn doses(
    additives: &[(Option<&enolattice_reagents::Additive>, Option<f64>)],
    amounts: &[f64],
    model: &Model,
    warnings: &mut Warnings,
) -> Vec<Option<Dose>> {
    let mut values: Vec<(&str, Option<Dose>)> = Vec::new();
    for (record, equiv) in additives {
        let Some(record) = record else {
            values.push((resolve::NO_ADDITIVE, None));
            continue;
        };
        let additive = Arc::new(model.additive(record));
        let equivs = equiv.map_or_else(|| amounts.to_vec(), |equiv| vec![equiv]);
        values.extend(equivs.into_iter().map(|equiv| {
            let additive = additive.clone();
            (record.name.as_str(), Some(Dose { additive, equiv }))
        }));
    }
    let identity = |(name, dose): &(&str, Option<Dose>)| {
        let shown = match dose {
            Some(dose) => format!("{name}, {} equivalents", dose.equiv),
            None => (*name).to_owned(),
        };
        (shown.clone(), shown)
    };
    let kept = merged("additives", values, identity, warnings);
    if kept.is_empty() {
        return vec![None];
    }
    kept.into_iter().map(|(_, dose)| dose).collect()
}

fn note_empty_axes(spec: &CampaignSpec, faults: &mut Faults) {
    let axes = [
        ("substrates", spec.substrates.is_empty()),
        ("bases", spec.bases.is_empty()),
        ("electrophiles", spec.electrophiles.is_empty()),
        ("solvents", spec.solvents.is_empty()),
    ];
    for (axis, is_empty) in axes {
        if is_empty {
            let remedy = "give at least one";
            faults.note(
                FaultCode::AxisEmpty,
                Place::of_field(axis),
                "",
                "the axis has no values",
                remedy,
            );
        }
    }
}

fn structure_of_substrate(substrate: &Read) -> (String, String) {
    (
        substrate.salt.molecule.canonical().to_owned(),
        substrate.name.clone(),
    )
}

fn structure_of_electrophile(electrophile: &NamedStructure) -> (String, String) {
    (
        electrophile.salt.molecule.canonical().to_owned(),
        electrophile.name.clone(),
    )
}

/// The values without those that are the same as an earlier one.
///
/// `identity` gives what makes two values the same, and the name of a value.
fn merged<T>(
    axis: &str,
    values: Vec<T>,
    identity: impl Fn(&T) -> (String, String),
    warnings: &mut Warnings,
) -> Vec<T> {
    let mut names_by_identity: HashMap<String, String> = HashMap::new();
    let mut kept = Vec::with_capacity(values.len());
    for value in values {
        let (same, name) = identity(&value);
        match names_by_identity.get(&same) {
            Some(first) => warnings.merged(axis, &name, first),
            None => {
                names_by_identity.insert(same, name);
                kept.push(value);
            }
        }
    }
    kept
}

fn prepared<T: Send, P: Send + Sync>(
    values: Vec<T>,
    prepare: impl Fn(T) -> P + Sync,
) -> Vec<Arc<P>> {
    values
        .into_par_iter()
        .map(|value| Arc::new(prepare(value)))
        .collect()
}

fn check_size(campaign: &Campaign) -> Result<(), Vec<InputError>> {
    let mut faults = Faults::default();
    if let Err(error @ GridError::TooLarge) = campaign.sizes().and_then(Lattice::new) {
        let remedy = "cut an axis";
        faults.note(
            FaultCode::CampaignTooLarge,
            Place::of_field("campaign"),
            "",
            error.to_string(),
            remedy,
        );
    }
    faults.unless_any((), "")
}
