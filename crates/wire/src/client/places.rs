//! Faults that a server found, brought back to where the user wrote the value.

use enolattice_grid::{CampaignSpec, Entry, InputError, Place, in_order, value_of_row};

/// Gives faults in the values of axes the places of the campaign as read.
pub(super) fn relocate(faults: Vec<InputError>, campaign: &CampaignSpec) -> Vec<InputError> {
    let mut faults = within("campaign", faults);
    for fault in &mut faults {
        if let Some(place) = written(&fault.place.field, campaign) {
            fault.place = place;
        }
    }
    // As the embedded engine has them.
    in_order(faults)
}

/// Faults with their fields relative to this part of the request.
pub(super) fn within(part: &str, mut faults: Vec<InputError>) -> Vec<InputError> {
    for fault in &mut faults {
        let field = fault
            .place
            .field
            .strip_prefix(part)
            .and_then(|rest| rest.strip_prefix('.'));
        if let Some(field) = field {
            fault.place.field = field.to_owned();
        }
    }
    faults
}

/// Where the value of this field was written: `substrates[3].pka_dmso` is a value of the row of
/// the fourth substrate.
fn written(field: &str, campaign: &CampaignSpec) -> Option<Place> {
    let (list, rest) = field.split_once('[')?;
    let (index, value) = rest.split_once(']')?;
    let index: usize = index.parse().ok()?;
    let place = match list {
        "substrates" => &campaign.substrates.get(index)?.place,
        "bases.reagents" => &campaign.bases.entries.get(index)?.place,
        "electrophiles.reagents" => &campaign.electrophiles.entries.get(index)?.place,
        "solvents.media" => &campaign.solvents.entries.get(index)?.place,
        "additives.sets" => &campaign.additives.entries.get(index)?.place,
        "measured" => &campaign.measured.get(index)?.place,
        _ => return None,
    };
    Some(match value.strip_prefix('.') {
        Some(value) => value_of_row(place, value),
        // what is wrong with a reagent of a file is its name, or its structure where it has none
        None if place.field.is_empty() => value_of_row(place, known_by(list, index, campaign)),
        None => place.clone(),
    })
}

/// The column by which a reagent is looked up.
fn known_by(list: &str, index: usize, campaign: &CampaignSpec) -> &'static str {
    let axis = match list {
        "bases.reagents" => &campaign.bases,
        "electrophiles.reagents" => &campaign.electrophiles,
        "solvents.media" => &campaign.solvents,
        _ => &campaign.additives,
    };
    let has_name = |entry: &Entry| !entry.name.is_empty() || entry.smiles.is_empty();
    if axis.entries.get(index).is_some_and(has_name) {
        "name"
    } else {
        "smiles"
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::bad_field;
    use crate::v1::ErrorReason;
    use enolattice_grid::{AxisSpec, MeasuredEntry, SubstrateEntry};

    fn place(file: &str, line: u32, field: &str) -> Place {
        Place {
            file: file.into(),
            line,
            field: field.into(),
        }
    }

    fn campaign() -> CampaignSpec {
        let substrate = |line| SubstrateEntry {
            place: place("s.csv", line, "smiles"),
            ..Default::default()
        };
        let base = Entry {
            place: place("c.toml", 4, "bases.library[0]"),
            ..Default::default()
        };
        CampaignSpec {
            substrates: vec![substrate(2), substrate(3)],
            bases: AxisSpec {
                all: false,
                entries: vec![base],
            },
            measured: vec![MeasuredEntry {
                place: place("y.csv", 2, ""),
                ..Default::default()
            }],
            ..Default::default()
        }
    }

    #[test]
    fn faults_return_to_file_and_line() {
        let fault = |field: &str| bad_field(ErrorReason::ValueMissing, field, "", "", "");
        let faults = vec![
            fault("campaign.substrates[1].pka_dmso"),
            fault("campaign.substrates[0].smiles"),
            fault("campaign.bases.reagents[0]"),
            fault("campaign.conditions.time_h[2]"),
            fault("campaign.bases.reagents[9]"),
            fault("campaign.measured[0].yield_fraction"),
        ];
        let places: Vec<_> = relocate(faults, &campaign())
            .into_iter()
            .map(|fault| fault.place)
            .collect();
        assert_eq!(
            places,
            [
                place("", 0, "conditions.time_h[2]"),
                place("", 0, "bases.reagents[9]"),
                place("c.toml", 4, "bases.library[0]"),
                place("s.csv", 2, "smiles"),
                place("s.csv", 3, "pka_dmso"),
                place("y.csv", 2, "yield_fraction"),
            ]
        );
    }
}
