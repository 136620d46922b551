//! Rows of measured yields whose every value is checked.

use std::collections::HashMap;
use std::collections::hash_map::Entry;

use enolattice_reagents::Library;

use super::conditions::{ADDITIVE, note_unsaid};
use super::names::{Meaning, Names};
use super::{MeasuredYield, Measurement, Pot, row_at};
use crate::campaign::Checked;
use crate::conditions::{Quantity, YIELD_FRACTION, YIELD_SIGMA};
use crate::entries::check_text;
use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::keys::quoted;
use crate::resolve::{NO_ADDITIVE, in_list};
use crate::{CampaignSpec, FaultCode, MeasuredEntry, Place};

/// The measured yields of a specification that are sound; every fault of the others is noted.
pub(crate) fn checked(
    spec: &CampaignSpec,
    axes: &Checked<'_>,
    library: &Library,
    faults: &mut Faults,
) -> Vec<Measurement> {
    if spec.measured.is_empty() {
        return Vec::new();
    }
    let mut reader = RowReader::new(spec, axes, library);
    let mut sound: Vec<Measurement> = Vec::new();
    let mut first_of: HashMap<Pot, usize> = HashMap::new();
    for (i, row) in spec.measured.iter().enumerate() {
        if faults.is_full() {
            break;
        }
        let place = in_list(&row.place, "measured", i);
        let Some(measurement) = reader.read(row, &place, faults) else {
            continue;
        };
        match first_of.entry(measurement.of.clone()) {
            Entry::Vacant(free) => {
                free.insert(sound.len());
                sound.push(measurement);
            }
            Entry::Occupied(taken) => note_repeated(&place, &sound[*taken.get()].place, faults),
        }
    }
    sound
}

fn note_repeated(place: &Place, first: &Place, faults: &mut Faults) {
    let reason = format!("{} has a yield of the same cell", row_at(first));
    let remedy = "keep one: of replicates give the mean, and their spread as `sigma`";
    let place = value_of_row(place, "yield_fraction");
    faults.note(FaultCode::ValueRepeated, place, "", reason, remedy);
}

/// Reads rows against the axes of a campaign.
pub(super) struct RowReader<'c> {
    pub(super) axes: &'c Checked<'c>,
    pub(super) library: &'c Library,
    /// Additives of the campaign, each once, and their amounts.
    pub(super) additives: Vec<(&'c str, Vec<f64>)>,
    substrates: Names<'c>,
    bases: Names<'c>,
    electrophiles: Names<'c>,
    solvents: Names<'c>,
    additive_names: Names<'c>,
}

impl<'c> RowReader<'c> {
    fn new(spec: &'c CampaignSpec, axes: &'c Checked<'c>, library: &'c Library) -> RowReader<'c> {
        let mut additives: Vec<(&str, Vec<f64>)> = Vec::new();
        for (additive, equiv) in &axes.reagents.additives {
            let name = additive.map_or(NO_ADDITIVE, |known| known.name.as_str());
            let amounts = match equiv {
                Some(equiv) => std::slice::from_ref(equiv),
                None => axes.numbers[ADDITIVE].as_slice(),
            };
            match additives.iter_mut().find(|(known, _)| *known == name) {
                Some((_, all)) => all.extend(amounts),
                None => additives.push((name, amounts.to_vec())),
            }
        }
        RowReader {
            axes,
            library,
            additives,
            substrates: Names::of_substrates(spec, axes),
            bases: Names::of_bases(spec, library),
            electrophiles: Names::of_electrophiles(spec, axes, library),
            solvents: Names::of_solvents(spec, library),
            additive_names: Names::of_additives(spec, library),
        }
    }

    /// The row, if it is sound; notes every fault of it.
    fn read(
        &mut self,
        row: &MeasuredEntry,
        place: &Place,
        faults: &mut Faults,
    ) -> Option<Measurement> {
        let mut named = |names: &mut Names<'_>, word: &str, column| {
            named(names, word, value_of_row(place, column), faults)
        };
        let substrate = named(&mut self.substrates, &row.substrate, "substrate");
        let base = named(&mut self.bases, &row.base, "base");
        let electrophile = named(&mut self.electrophiles, &row.electrophile, "electrophile");
        let solvent = named(&mut self.solvents, &row.solvent, "solvent");
        let additive = self.additive(row, place, faults);
        let numbers = self.numbers(row, place, additive.as_deref(), faults);
        let addition = self.addition(row, place, base.as_deref(), faults);
        let value = value(row, place, faults);
        Some(Measurement {
            of: Pot {
                substrate: substrate?,
                electrophile: electrophile?,
                base: base?,
                solvent: solvent?,
                additive: additive?,
                numbers: numbers?,
                addition: addition?,
            },
            value: value?,
            place: place.clone(),
        })
    }

    fn additive(
        &mut self,
        row: &MeasuredEntry,
        place: &Place,
        faults: &mut Faults,
    ) -> Option<String> {
        let place = value_of_row(place, "additive");
        if !row.additive.is_empty() {
            return named(&mut self.additive_names, &row.additive, place, faults);
        }
        match self.additives.as_slice() {
            [] => Some(NO_ADDITIVE.to_owned()),
            [(only, _)] => Some((*only).to_owned()),
            several => {
                let words: Vec<&str> = several.iter().map(|(name, _)| *name).collect();
                note_unsaid(place, "additive", &quoted(&words), faults);
                None
            }
        }
    }
}

/// What a word means, if it means a substance; notes why it does not.
fn named(names: &mut Names<'_>, word: &str, place: Place, faults: &mut Faults) -> Option<String> {
    if word.is_empty() {
        let column = place
            .field
            .rsplit('.')
            .next()
            .unwrap_or_default()
            .to_owned();
        note_missing(place, &column, faults);
        return None;
    }
    match names.meaning(word) {
        Meaning::One(known) => Some(known),
        Meaning::AtFault => None,
        Meaning::None {
            code,
            reason,
            remedy,
        } => {
            faults.note(code, place, word, reason, remedy);
            None
        }
    }
}

pub(super) fn in_range(
    quantity: &Quantity,
    said: Option<f64>,
    row: &Place,
    faults: &mut Faults,
) -> Option<f64> {
    let value = said?;
    let checked = quantity.check(value).map_err(|reason| {
        let place = value_of_row(row, quantity.name());
        let remedy = quantity.remedy();
        let code = FaultCode::ValueOutOfRange;
        faults.note(code, place, &value.to_string(), reason, remedy);
    });
    checked.ok()
}

fn value(row: &MeasuredEntry, place: &Place, faults: &mut Faults) -> Option<MeasuredYield> {
    if row.yield_fraction.is_none() {
        let column = YIELD_FRACTION.name();
        note_missing(value_of_row(place, column), column, faults);
    }
    let yield_fraction = in_range(&YIELD_FRACTION, row.yield_fraction, place, faults);
    let sigma = in_range(&YIELD_SIGMA, row.sigma, place, faults);
    let note = check_text(&row.note, value_of_row(place, "note"), faults);
    let is_sound = note && sigma.is_some() == row.sigma.is_some();
    is_sound.then_some(MeasuredYield {
        yield_fraction: yield_fraction?,
        sigma,
        note: row.note.clone(),
    })
}

pub(super) fn note_missing(place: Place, column: &str, faults: &mut Faults) {
    let reason = format!("the row has no {column}");
    let remedy = "give it, or leave the whole row out";
    faults.note(FaultCode::ValueMissing, place, "", reason, remedy);
}
