//! Solvents, mixtures of solvents and additives.

use enolattice_grid::{Entry, InputError, Place};

use super::stock;
use crate::v1::{self, ErrorReason};
use crate::{ConversionError, bad_field};

/// How far the volume fractions of a mixture may be from 1 in sum.
const TOLERANCE: f64 = 1e-6;

/// The name of a cell without an additive in campaigns.
const NO_ADDITIVE: &str = "none";

/// A medium of a campaign: one solvent, or a mixture by its name.
pub(crate) fn medium(entry: &Entry) -> v1::Medium {
    v1::Medium {
        components: vec![v1::SolventComponent {
            solvent: Some(entry.into()),
            volume_fraction: None,
        }],
    }
}

/// The solvent or mixture that a medium means.
pub(crate) fn solvent(medium: v1::Medium, field: &str) -> Result<Entry, Vec<InputError>> {
    let place = Place {
        field: field.to_owned(),
        ..Place::default()
    };
    let mut components = medium.components;
    if components.len() > 1 {
        return mixture(components, place);
    }
    let Some(component) = components.pop() else {
        return Err(vec![bad_field(
            ErrorReason::ValueMissing,
            field,
            "",
            "it is missing",
            "give a component",
        )]);
    };
    let fraction = component.volume_fraction.unwrap_or(1.0);
    if (fraction - 1.0).abs() > TOLERANCE {
        return Err(vec![sum_fault(
            &format!("{field}.components[0].volume_fraction"),
            fraction,
        )]);
    }
    let solvent = component.solvent.unwrap_or_default();
    Ok(Entry {
        name: solvent.name,
        smiles: solvent.smiles,
        stock: stock::from_wire(solvent.stock),
        place,
        ..Entry::default()
    })
}

/// A mixture as campaigns write it, `THF/DMF 0.8:0.2`.
fn mixture(components: Vec<v1::SolventComponent>, place: Place) -> Result<Entry, Vec<InputError>> {
    let mut faults = Vec::new();
    let (mut names, mut parts, mut sum) = (Vec::new(), Vec::new(), 0.0);
    for (i, component) in components.into_iter().enumerate() {
        let field = format!("{}.components[{i}]", place.field);
        let solvent = component.solvent.unwrap_or_default();
        if solvent.name.is_empty() {
            let remedy = "name the solvent as the library does";
            let why = "a component of a mixture has no name";
            faults.push(bad_field(
                ErrorReason::ValueMissing,
                format!("{field}.solvent.name"),
                solvent.smiles,
                why,
                remedy,
            ));
        }
        match component.volume_fraction {
            Some(fraction) if fraction > 0.0 && fraction < 1.0 => {
                sum += fraction;
                parts.push(fraction.to_string());
            }
            other => {
                let value = other.map_or_else(String::new, |fraction| fraction.to_string());
                let why = "a component of a mixture has a volume fraction between 0 and 1";
                let remedy = "give one; those of a medium add up to 1";
                faults.push(bad_field(
                    ErrorReason::ValueOutOfRange,
                    format!("{field}.volume_fraction"),
                    value,
                    why,
                    remedy,
                ));
            }
        }
        names.push(solvent.name);
    }
    if faults.is_empty() && (sum - 1.0).abs() > TOLERANCE {
        faults.push(sum_fault(&place.field, sum));
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(Entry {
        name: format!("{} {}", names.join("/"), parts.join(":")),
        place,
        ..Entry::default()
    })
}

fn sum_fault(field: &str, sum: f64) -> InputError {
    bad_field(
        ErrorReason::ValueOutOfRange,
        field,
        sum.to_string(),
        "the volume fractions of a medium add up to 1",
        "leave the fraction of a pure solvent out, and give those of all components of a mixture",
    )
}

/// A set of additives of a campaign.
pub(crate) fn additive_set(entry: &Entry) -> v1::AdditiveSet {
    let is_none = entry.smiles.is_empty() && entry.name.eq_ignore_ascii_case(NO_ADDITIVE);
    let additive = || v1::Additive {
        reagent: Some(entry.into()),
        equiv: entry.equiv,
    };
    v1::AdditiveSet {
        additives: (!is_none).then(additive).into_iter().collect(),
    }
}

/// The additive that a set means; the empty set is the entry `none`.
pub(crate) fn additive(set: v1::AdditiveSet, field: &str) -> Result<Entry, Vec<InputError>> {
    let place = Place {
        field: field.to_owned(),
        ..Place::default()
    };
    let mut additives = set.additives;
    if additives.len() > 1 {
        return Err(vec![bad_field(
            ErrorReason::NotYetAllowed,
            field,
            format!("{} additives", additives.len()),
            "two additives in one cell are not computed yet",
            "give each additive a set of its own: each is then screened alone",
        )]);
    }
    let Some(additive) = additives.pop() else {
        return Ok(Entry {
            name: NO_ADDITIVE.to_owned(),
            place,
            ..Entry::default()
        });
    };
    let reagent = additive.reagent.unwrap_or_default();
    Ok(Entry {
        name: reagent.name,
        smiles: reagent.smiles,
        equiv: additive.equiv,
        stock: stock::from_wire(reagent.stock),
        place,
    })
}

/// Names of additives in an answer.
pub(crate) fn additive_names(additive: Option<&String>) -> Vec<String> {
    additive.into_iter().cloned().collect()
}

/// The one additive of an answer.
pub(crate) fn additive_name(mut names: Vec<String>) -> Result<Option<String>, ConversionError> {
    match names.len() {
        0 | 1 => Ok(names.pop()),
        _ => Err(ConversionError::Unknown {
            field: "additives",
            value: names.join(", "),
        }),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn component(name: &str, volume_fraction: Option<f64>) -> v1::SolventComponent {
        v1::SolventComponent {
            solvent: Some(v1::Reagent {
                name: name.into(),
                ..Default::default()
            }),
            volume_fraction,
        }
    }

    fn read(components: Vec<v1::SolventComponent>) -> Result<String, Vec<(String, &'static str)>> {
        let told = |fault: InputError| (fault.place.field, fault.code);
        solvent(v1::Medium { components }, "m")
            .map(|entry| entry.name)
            .map_err(|faults| faults.into_iter().map(told).collect())
    }

    #[test]
    fn mixtures_are_written_as_campaigns_write_them() {
        let components = vec![component("THF", Some(0.8)), component("DMF", Some(0.2))];
        assert_eq!(read(components).as_deref(), Ok("THF/DMF 0.8:0.2"));
        assert_eq!(
            read(vec![component("THF/DMF 4:1", None)]).as_deref(),
            Ok("THF/DMF 4:1")
        );
        let sum = vec![component("THF", Some(0.8)), component("DMF", Some(0.3))];
        assert_eq!(read(sum), Err(vec![("m".into(), "VALUE_OUT_OF_RANGE")]));
        let unnamed = vec![component("", Some(0.5)), component("DMF", None)];
        assert_eq!(
            read(unnamed),
            Err(vec![
                ("m.components[0].solvent.name".into(), "VALUE_MISSING"),
                (
                    "m.components[1].volume_fraction".into(),
                    "VALUE_OUT_OF_RANGE"
                ),
            ])
        );
        assert_eq!(read(vec![]), Err(vec![("m".into(), "VALUE_MISSING")]));
    }

    #[test]
    fn a_set_has_one_additive_at_most() {
        let none = additive(v1::AdditiveSet::default(), "s").expect("an empty set");
        assert_eq!(none.name, "none");
        assert_eq!(additive_set(&none), v1::AdditiveSet::default());
        let crown = Entry {
            name: "18-crown-6".into(),
            equiv: Some(1.5),
            ..none
        };
        let mut set = additive_set(&crown);
        assert_eq!(additive(set.clone(), "s"), Ok(crown));
        set.additives.push(set.additives[0].clone());
        let faults = additive(set, "s").expect_err("two additives");
        assert_eq!(faults[0].code, "NOT_YET_ALLOWED");
    }
}
