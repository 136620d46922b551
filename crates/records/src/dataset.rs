//! A plan as a dataset: one reaction for each well in which a reaction runs.

use chrono::DateTime;
use enolattice_plate::{Content, PRECEDENCE, Plan, PlannedWell, Plate};

use crate::Structures;
use crate::inputs::inputs;
use crate::ord;
use crate::ord::pressure_conditions::{
    Atmosphere, PressureControl, atmosphere::AtmosphereType, pressure_control::PressureControlType,
};
use crate::ord::stirring_conditions::StirringMethodType;
use crate::ord::vessel::VesselType;
use crate::outcome::outcome;
use crate::quantities::celsius;

/// Who makes the record.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Person {
    /// Name.
    pub name: String,
    /// E-mail address; the schema asks for it.
    pub email: String,
    /// Organisation; empty: not said.
    pub organization: String,
}

/// The plan as a dataset: every well in which a reaction runs and whose product can be drawn.
///
/// Controls without a reaction are left out, and so is the product where none can be drawn.
pub fn dataset(plan: &Plan, person: &Person, structures: &Structures) -> ord::Dataset {
    let mut reactions = Vec::new();
    let mut left_out = 0;
    for (plate, well) in plan.wells() {
        let expected = outcome(plate, well).filter(|_| well.content.runs());
        match expected {
            Some(outcome) => {
                let mut reaction = reaction(plan, plate, well, person, structures);
                reaction.outcomes.push(outcome);
                reactions.push(reaction);
            }
            None => left_out += 1,
        }
    }
    ord::Dataset {
        name: title(plan),
        description: description(plan, left_out),
        reactions,
        ..ord::Dataset::default()
    }
}

fn title(plan: &Plan) -> String {
    let titles = [&plan.title, &plan.campaign];
    let said = titles.into_iter().find(|title| !title.trim().is_empty());
    said.map_or_else(
        || format!("plan {}", plan.id),
        |title| title.trim().to_owned(),
    )
}

fn description(plan: &Plan, left_out: usize) -> String {
    let without = match left_out {
        0 => String::new(),
        wells => format!(
            " {wells} wells are not in it: controls without a reaction, and cells whose product cannot be drawn."
        ),
    };
    format!(
        "A plan of reactions that are to be run, not of reactions that were run: yields are predictions. Plan {}, job {}, model \
         {}, yield of a hit {}.{without} {PRECEDENCE}",
        plan.id, plan.job, plan.model, plan.target
    )
}

fn reaction(
    plan: &Plan,
    plate: &Plate,
    well: &PlannedWell,
    person: &Person,
    structures: &Structures,
) -> ord::Reaction {
    ord::Reaction {
        inputs: inputs(plan, plate, well, structures),
        setup: Some(setup(plan, plate, well)),
        conditions: Some(conditions(plan, plate, well)),
        notes: Some(notes(well)),
        provenance: Some(provenance(plan, person)),
        ..ord::Reaction::default()
    }
}

fn setup(plan: &Plan, plate: &Plate, well: &PlannedWell) -> ord::ReactionSetup {
    let position = well.well.to_string();
    let (row, column) = position.split_at(position.find(|c: char| c.is_ascii_digit()).unwrap_or(0));
    ord::ReactionSetup {
        vessel: Some(ord::Vessel {
            r#type: VesselType::WellPlate.into(),
            details: format!("{} wells", plan.request.plates.wells.wells()),
            vessel_id: plate.name.clone(),
            row: row.to_owned(),
            col: column.to_owned(),
            position: position.clone(),
            ..ord::Vessel::default()
        }),
        is_automated: Some(true),
        ..ord::ReactionSetup::default()
    }
}

fn conditions(plan: &Plan, plate: &Plate, well: &PlannedWell) -> ord::ReactionConditions {
    let deck = &plan.request.deck;
    let (formation_c, reaction_c) = (plate.formation_temperature_c, plate.temperature_c);
    let is_dynamic = formation_c != reaction_c;
    let details = match is_dynamic {
        true => format!(
            "The anion is formed at {formation_c} °C ({}); after the electrophile the plate is kept at {reaction_c} °C.",
            well.addition
        ),
        false => String::new(),
    };
    // what nobody has said of the deck is not said here
    let pressure = deck.inert.then(|| ord::PressureConditions {
        control: deck.sealed.then(|| PressureControl {
            r#type: PressureControlType::Sealed.into(),
            details: String::new(),
        }),
        atmosphere: Some(Atmosphere {
            r#type: AtmosphereType::Custom.into(),
            details: "inert gas".to_owned(),
        }),
        ..ord::PressureConditions::default()
    });
    let stirring = deck.stirred.then(|| ord::StirringConditions {
        r#type: StirringMethodType::Agitation.into(),
        ..ord::StirringConditions::default()
    });
    ord::ReactionConditions {
        temperature: Some(ord::TemperatureConditions {
            setpoint: Some(celsius(reaction_c)),
            ..ord::TemperatureConditions::default()
        }),
        pressure,
        stirring,
        conditions_are_dynamic: is_dynamic.then_some(true),
        details,
        ..ord::ReactionConditions::default()
    }
}

fn notes(well: &PlannedWell) -> ord::ReactionNotes {
    let cautions = well.cautions.iter();
    let told = cautions.map(|caution| format!("{}: {}", caution.severity, caution.text));
    let known: Vec<String> = told.collect();
    let what = match well.content {
        Content::Positive => "Positive control. ",
        _ => "",
    };
    ord::ReactionNotes {
        safety_notes: match known.is_empty() {
            true => format!(
                "No caution is known, which does not mean that there is no hazard. {PRECEDENCE}"
            ),
            false => format!("{} {PRECEDENCE}", known.join(" ")),
        },
        procedure_details: format!(
            "{what}Cell {} of the job, replicate {}; {}.{}",
            well.cell,
            well.replicate,
            well.addition,
            match well.note.trim() {
                "" => String::new(),
                note => format!(" {note}"),
            }
        ),
        ..ord::ReactionNotes::default()
    }
}

fn provenance(plan: &Plan, person: &Person) -> ord::ReactionProvenance {
    ord::ReactionProvenance {
        record_created: Some(ord::RecordEvent {
            time: Some(ord::DateTime {
                value: date_time(plan.made_unix_ms),
            }),
            person: Some(ord::Person {
                name: person.name.clone(),
                email: person.email.clone(),
                organization: person.organization.clone(),
                ..ord::Person::default()
            }),
            details: format!("planned by enolattice {}", env!("CARGO_PKG_VERSION")),
        }),
        ..ord::ReactionProvenance::default()
    }
}

/// A time of the calendar by ISO 8601, in UTC; empty for one that no calendar has.
fn date_time(unix_ms: u64) -> String {
    let time = i64::try_from(unix_ms)
        .ok()
        .and_then(DateTime::from_timestamp_millis);
    time.map_or(String::new(), |time| {
        time.format("%Y-%m-%dT%H:%M:%SZ").to_string()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_are_those_of_the_calendar() {
        // `date -u -d @… --iso-8601=seconds`
        for (seconds, text) in [
            (0, "1970-01-01T00:00:00Z"),
            (951_782_399, "2000-02-28T23:59:59Z"),
            (951_782_400, "2000-02-29T00:00:00Z"),
            (1_709_251_200, "2024-03-01T00:00:00Z"),
            (1_796_193_901, "2026-12-02T06:45:01Z"),
            (4_107_542_399, "2100-02-28T23:59:59Z"),
            (4_107_542_400, "2100-03-01T00:00:00Z"),
        ] {
            assert_eq!(date_time(1000 * seconds), text);
        }
    }
}
