//! The axes of reagents as a campaign has them: rows read, repeats merged, values prepared.

use std::collections::HashMap;
use std::sync::Arc;

use enolattice_model::{MeasuredPka, Model};
use enolattice_molecule::Salt;
use rayon::prelude::*;

use crate::faults::Faults;
use crate::resolve::{self, NamedStructure, in_list};
use crate::warnings::Warnings;
use crate::{CampaignSpec, Dose, FaultCode, Place, SubstrateEntry, entries};

/// A substrate whose row is sound.
pub(crate) struct Read {
    pub(crate) name: String,
    pub(crate) salt: Salt,
    pub(crate) own_pka: Option<MeasuredPka>,
}

/// Rows that are checked side by side before the faults found so far are counted.
const ROWS_AT_ONCE: usize = 4_096;

/// Reads the rows of a list with all threads, in their order; those at fault are left out.
pub(crate) fn side_by_side<E: Sync, T: Send>(
    listed: &[E],
    faults: &mut Faults,
    read: impl Fn(&E, usize, &mut Faults) -> Option<T> + Sync,
) -> Vec<T> {
    let mut sound = Vec::with_capacity(listed.len());
    for (run, rows) in listed.chunks(ROWS_AT_ONCE).enumerate() {
        let first = run * ROWS_AT_ONCE;
        let one = |(i, row)| {
            let mut found = Faults::default();
            (read(row, first + i, &mut found), found)
        };
        let rows: Vec<(Option<T>, Faults)> = rows.par_iter().enumerate().map(one).collect();
        for (row, found) in rows {
            faults.append(found);
            sound.extend(row);
        }
        if faults.is_full() {
            break;
        }
    }
    sound
}

pub(crate) fn substrates(listed: &[SubstrateEntry], faults: &mut Faults) -> Vec<Read> {
    side_by_side(listed, faults, substrate)
}

fn substrate(entry: &SubstrateEntry, index: usize, faults: &mut Faults) -> Option<Read> {
    let entry = SubstrateEntry {
        place: in_list(&entry.place, "substrates", index),
        ..entry.clone()
    };
    let (salt, own_pka) = entries::substrate(&entry, faults)?;
    Some(Read {
        name: if entry.name.is_empty() {
            entry.smiles
        } else {
            entry.name
        },
        salt,
        own_pka,
    })
}

/// The values of the axis of additives: each additive in each of its amounts.
pub(crate) fn doses(
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

pub(crate) fn note_empty_axes(spec: &CampaignSpec, faults: &mut Faults) {
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

/// Has the canonical SMILES made by all threads, before one asks for them in turn.
pub(crate) fn ranked<T: Sync>(values: &[T], salt: impl Fn(&T) -> &Salt + Sync) {
    values.par_iter().for_each(|value| {
        salt(value).molecule.canonical();
    });
}

pub(crate) fn structure_of_substrate(substrate: &Read) -> (String, String) {
    (
        substrate.salt.molecule.canonical().to_owned(),
        substrate.name.clone(),
    )
}

pub(crate) fn structure_of_electrophile(electrophile: &NamedStructure) -> (String, String) {
    (
        electrophile.salt.molecule.canonical().to_owned(),
        electrophile.name.clone(),
    )
}

/// The values without those that are the same as an earlier one.
///
/// `identity` gives what makes two values the same, and the name of a value.
pub(crate) fn merged<T>(
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

pub(crate) fn prepared<T: Send, P: Send + Sync>(
    values: Vec<T>,
    prepare: impl Fn(T) -> P + Sync,
) -> Vec<Arc<P>> {
    values
        .into_par_iter()
        .map(|value| Arc::new(prepare(value)))
        .collect()
}
