//! Campaigns.
//!
//! The paths in `Place::field` of a campaign from the wire are relative to the
//! message `Campaign`; those of faults found here are relative to the request.

use enolattice_engine::Submission;
use enolattice_grid::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, InputError, LibraryTable, MeasuredEntry, Place,
    SubstrateEntry, TargetSpec,
};

use super::cell::{addition_from_name, addition_from_wire};
use super::job::terms;
use super::{measured, media, stock};
use crate::v1::{self, ErrorReason};
use crate::{MAX_REQUEST_ID_BYTES, bad_field};

impl TryFrom<&Submission> for v1::SubmitJobRequest {
    type Error = Vec<InputError>;

    fn try_from(submission: &Submission) -> Result<Self, Vec<InputError>> {
        Ok(v1::SubmitJobRequest {
            campaign: Some(campaign_message(&submission.campaign)?),
            request_id: submission.request_id.clone(),
            validate_only: submission.validate_only,
            dry_run: false,
            terms: Some((&submission.terms).into()),
        })
    }
}

/// The submission that a request means, without the values that are at fault in the message
/// itself, and those faults: with them the engine's can be told in one answer.
pub fn submission(request: v1::SubmitJobRequest) -> (Submission, Vec<InputError>) {
    let mut faults = Vec::new();
    if request.request_id.len() > MAX_REQUEST_ID_BYTES {
        faults.push(bad_field(
            ErrorReason::ValueOutOfRange,
            "request_id",
            format!("{} bytes", request.request_id.len()),
            format!("it is longer than {MAX_REQUEST_ID_BYTES} bytes"),
            "use a UUID",
        ));
    }
    let (campaign, of_campaign) = named_campaign(request.campaign);
    faults.extend(of_campaign);
    let (terms, of_terms) = terms(request.terms);
    faults.extend(of_terms);
    let submission = Submission {
        campaign,
        request_id: request.request_id,
        validate_only: request.validate_only,
        terms,
    };
    (submission, faults)
}

/// The campaign of a request's field `campaign`, and the faults of that message.
pub(crate) fn named_campaign(message: Option<v1::Campaign>) -> (CampaignSpec, Vec<InputError>) {
    let mut faults = Vec::new();
    let campaign = campaign(message.unwrap_or_default(), &mut faults);
    for fault in &mut faults {
        fault.place.field = format!("campaign.{}", fault.place.field);
    }
    (campaign, faults)
}

pub(crate) fn campaign_message(spec: &CampaignSpec) -> Result<v1::Campaign, Vec<InputError>> {
    let mut faults = Vec::new();
    let conditions = conditions_message(&spec.conditions, &mut faults);
    let mut yields = Vec::with_capacity(spec.measured.len());
    for (i, entry) in spec.measured.iter().enumerate() {
        match measured::to_wire(entry, &format!("measured[{i}]")) {
            Ok(row) => yields.push(row),
            Err(found) => faults.extend(found),
        }
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(v1::Campaign {
        title: spec.title.clone(),
        substrates: spec.substrates.iter().map(Into::into).collect(),
        bases: Some(reagent_axis(&spec.bases)),
        electrophiles: Some(reagent_axis(&spec.electrophiles)),
        solvents: Some(v1::SolventAxis {
            whole_library: spec.solvents.all,
            media: spec.solvents.entries.iter().map(media::medium).collect(),
        }),
        additives: Some(v1::AdditiveAxis {
            sets: spec
                .additives
                .entries
                .iter()
                .map(media::additive_set)
                .collect(),
            whole_library: spec.additives.all,
        }),
        conditions: Some(conditions),
        target: Some(v1::Target {
            yield_at_least: spec.target.yield_at_least,
        }),
        notes: spec.notes.clone(),
        library: spec.library.iter().map(table_message).collect(),
        measured: yields,
    })
}

fn campaign(campaign: v1::Campaign, faults: &mut Vec<InputError>) -> CampaignSpec {
    let substrates = campaign
        .substrates
        .into_iter()
        .enumerate()
        .map(substrate_entry);
    CampaignSpec {
        title: campaign.title,
        substrates: substrates.collect(),
        bases: axis(campaign.bases, "bases"),
        electrophiles: axis(campaign.electrophiles, "electrophiles"),
        solvents: solvent_axis(campaign.solvents.unwrap_or_default(), faults),
        additives: additive_axis(campaign.additives.unwrap_or_default(), faults),
        conditions: conditions(campaign.conditions.unwrap_or_default(), faults),
        target: TargetSpec {
            yield_at_least: campaign.target.and_then(|target| target.yield_at_least),
        },
        notes: campaign.notes,
        library: campaign.library.into_iter().map(table).collect(),
        measured: measured_yields(campaign.measured, faults),
    }
}

fn measured_yields(
    rows: Vec<v1::MeasuredYield>,
    faults: &mut Vec<InputError>,
) -> Vec<MeasuredEntry> {
    let mut entries = Vec::with_capacity(rows.len());
    for (i, row) in rows.into_iter().enumerate() {
        match measured::from_wire(row, &format!("measured[{i}]")) {
            Ok(entry) => entries.push(entry),
            Err(found) => faults.extend(found),
        }
    }
    entries
}

fn table_message(table: &LibraryTable) -> v1::LibraryTable {
    v1::LibraryTable {
        name: table.name.clone(),
        text: table.text.clone(),
    }
}

fn table(table: v1::LibraryTable) -> LibraryTable {
    LibraryTable {
        name: table.name,
        text: table.text,
    }
}

fn additive_axis(axis: v1::AdditiveAxis, faults: &mut Vec<InputError>) -> AxisSpec {
    let mut entries = Vec::new();
    for (i, set) in axis.sets.into_iter().enumerate() {
        match media::additive(set, &format!("additives.sets[{i}]")) {
            Ok(entry) => entries.push(entry),
            Err(found) => faults.extend(found),
        }
    }
    AxisSpec {
        all: axis.whole_library,
        entries,
    }
}

impl From<&SubstrateEntry> for v1::Substrate {
    fn from(entry: &SubstrateEntry) -> Self {
        v1::Substrate {
            name: entry.name.clone(),
            smiles: entry.smiles.clone(),
            pka_dmso: entry.pka_dmso,
            pka_sigma: entry.pka_sigma,
            stock: stock::to_wire(&entry.stock),
        }
    }
}

fn substrate_entry((i, substrate): (usize, v1::Substrate)) -> SubstrateEntry {
    SubstrateEntry {
        name: substrate.name,
        smiles: substrate.smiles,
        pka_dmso: substrate.pka_dmso,
        pka_sigma: substrate.pka_sigma,
        stock: stock::from_wire(substrate.stock),
        place: at(format!("substrates[{i}].smiles")),
    }
}

fn reagent_axis(axis: &AxisSpec) -> v1::ReagentAxis {
    v1::ReagentAxis {
        whole_library: axis.all,
        reagents: axis.entries.iter().map(Into::into).collect(),
    }
}

fn axis(axis: Option<v1::ReagentAxis>, name: &str) -> AxisSpec {
    let axis = axis.unwrap_or_default();
    let entries = axis
        .reagents
        .into_iter()
        .enumerate()
        .map(|(i, reagent)| Entry {
            place: at(format!("{name}.reagents[{i}]")),
            name: reagent.name,
            smiles: reagent.smiles,
            stock: stock::from_wire(reagent.stock),
            equiv: None,
        });
    AxisSpec {
        all: axis.whole_library,
        entries: entries.collect(),
    }
}

impl From<&Entry> for v1::Reagent {
    fn from(entry: &Entry) -> Self {
        v1::Reagent {
            name: entry.name.clone(),
            smiles: entry.smiles.clone(),
            stock: stock::to_wire(&entry.stock),
        }
    }
}

fn solvent_axis(axis: v1::SolventAxis, faults: &mut Vec<InputError>) -> AxisSpec {
    let mut entries = Vec::new();
    for (i, medium) in axis.media.into_iter().enumerate() {
        match media::solvent(medium, &format!("solvents.media[{i}]")) {
            Ok(entry) => entries.push(entry),
            Err(found) => faults.extend(found),
        }
    }
    AxisSpec {
        all: axis.whole_library,
        entries,
    }
}

fn conditions_message(spec: &ConditionsSpec, faults: &mut Vec<InputError>) -> v1::ConditionAxes {
    let mut addition = Vec::new();
    for (i, name) in spec.addition.iter().enumerate() {
        match addition_from_name(name, &format!("conditions.addition[{i}]")) {
            Ok(order) => addition.push(order.into()),
            Err(found) => faults.extend(found),
        }
    }
    v1::ConditionAxes {
        temperature_c: spec.temperature_c.clone(),
        formation_temperature_c: spec.formation_temperature_c.clone(),
        base_equiv: spec.base_equiv.clone(),
        electrophile_equiv: spec.electrophile_equiv.clone(),
        additive_equiv: spec.additive_equiv.clone(),
        concentration_m: spec.concentration_m.clone(),
        time_h: spec.time_h.clone(),
        dosing_min: spec.dosing_min.clone(),
        addition,
    }
}

fn conditions(axes: v1::ConditionAxes, faults: &mut Vec<InputError>) -> ConditionsSpec {
    let mut addition = Vec::new();
    for (i, number) in axes.addition.iter().enumerate() {
        match addition_from_wire(*number, &format!("conditions.addition[{i}]")) {
            Ok(Some(order)) => addition.push(order.name().to_owned()),
            Ok(None) if axes.addition.len() == 1 => {}
            Ok(None) => faults.push(bad_field(
                ErrorReason::NotYetAllowed,
                format!("conditions.addition[{i}]"),
                "ADDITION_ORDER_UNSPECIFIED",
                "the usual order cannot stand beside others",
                "name the order, or leave the axis empty for the usual order of each base",
            )),
            Err(found) => faults.extend(found),
        }
    }
    ConditionsSpec {
        temperature_c: axes.temperature_c,
        formation_temperature_c: axes.formation_temperature_c,
        base_equiv: axes.base_equiv,
        electrophile_equiv: axes.electrophile_equiv,
        additive_equiv: axes.additive_equiv,
        concentration_m: axes.concentration_m,
        time_h: axes.time_h,
        dosing_min: axes.dosing_min,
        addition,
    }
}

fn at(field: String) -> Place {
    Place {
        field,
        ..Place::default()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_grid::Stock;

    fn entry(name: &str, smiles: &str, field: &str) -> Entry {
        Entry {
            name: name.into(),
            smiles: smiles.into(),
            place: at(field.into()),
            ..Entry::default()
        }
    }

    fn shelf() -> Stock {
        Stock {
            stock_mg: Some(250.0),
            price_per_g: Some(12.5),
            currency: "EUR".into(),
            lot: "L7".into(),
            ..Stock::default()
        }
    }

    fn submitted() -> Submission {
        Submission {
            terms: enolattice_engine::Terms {
                requester: "night shift".into(),
                priority: 7,
                not_before_unix_ms: Some(1_764_590_000_001),
                deadline_unix_ms: None,
            },
            campaign: CampaignSpec {
                title: "Nitriles".into(),
                substrates: vec![SubstrateEntry {
                    name: "propionitrile".into(),
                    smiles: "CCC#N".into(),
                    pka_dmso: Some(32.5),
                    pka_sigma: Some(0.2),
                    stock: shelf(),
                    place: at("substrates[0].smiles".into()),
                }],
                bases: AxisSpec {
                    all: true,
                    entries: vec![],
                },
                electrophiles: AxisSpec {
                    all: false,
                    entries: vec![
                        Entry {
                            stock: shelf(),
                            ..entry("MeI", "", "electrophiles.reagents[0]")
                        },
                        entry("", "BrCc1ccccc1", "electrophiles.reagents[1]"),
                    ],
                },
                solvents: AxisSpec {
                    all: false,
                    entries: vec![
                        entry("THF", "", "solvents.media[0]"),
                        entry("THF/DMF 4:1", "", "solvents.media[1]"),
                    ],
                },
                additives: AxisSpec {
                    all: true,
                    entries: vec![
                        entry("none", "", "additives.sets[0]"),
                        Entry {
                            equiv: Some(2.0),
                            ..entry("HMPA", "", "additives.sets[1]")
                        },
                    ],
                },
                conditions: ConditionsSpec {
                    temperature_c: vec![-20.0, 25.0],
                    formation_temperature_c: vec![-78.0],
                    base_equiv: vec![1.05],
                    electrophile_equiv: vec![1.3],
                    additive_equiv: vec![1.1, 2.2],
                    concentration_m: vec![0.25],
                    time_h: vec![12.0],
                    dosing_min: vec![5.0],
                    addition: vec!["all together".into(), "substrate into base".into()],
                },
                target: TargetSpec {
                    yield_at_least: Some(0.6),
                },
                notes: vec!["shelf.sdf: data fields were left out".into()],
                library: vec![LibraryTable {
                    name: "own_bases.tsv".into(),
                    text: "# table: bases\n".into(),
                }],
                measured: vec![
                    MeasuredEntry {
                        substrate: "propionitrile".into(),
                        base: "LDA".into(),
                        electrophile: "MeI".into(),
                        solvent: "THF".into(),
                        temperature_c: Some(-20.0),
                        yield_fraction: Some(0.62),
                        place: at("measured[0]".into()),
                        ..MeasuredEntry::default()
                    },
                    MeasuredEntry {
                        additive: "HMPA".into(),
                        formation_temperature_c: Some(-78.0),
                        base_equiv: Some(1.05),
                        electrophile_equiv: Some(1.3),
                        additive_equiv: Some(2.0),
                        concentration_m: Some(0.25),
                        time_h: Some(12.0),
                        dosing_min: Some(5.0),
                        addition: "all together".into(),
                        sigma: Some(0.03),
                        note: "by NMR".into(),
                        place: at("measured[1]".into()),
                        ..MeasuredEntry::default()
                    },
                ],
            },
            request_id: "a-request".into(),
            validate_only: true,
        }
    }

    #[test]
    fn campaigns_come_back() {
        let sent = submitted();
        let (back, faults) = submission(v1::SubmitJobRequest::try_from(&sent).expect("to wire"));
        assert_eq!(faults, []);
        assert_eq!(back.campaign, sent.campaign);
        assert_eq!(
            (back.request_id, back.validate_only),
            (sent.request_id, sent.validate_only)
        );
    }

    #[test]
    fn every_fault_is_told_at_once() {
        let mut request = v1::SubmitJobRequest::try_from(&submitted()).expect("to wire");
        request.request_id = "x".repeat(129);
        let campaign = request.campaign.as_mut().expect("a campaign");
        let media = &mut campaign.solvents.as_mut().expect("solvents").media;
        let twice = media[0].components[0].clone();
        media[0].components.push(twice);
        media[1] = v1::Medium::default();
        campaign.conditions.as_mut().expect("conditions").addition = vec![0, 1, 7];
        campaign.additives = Some(v1::AdditiveAxis {
            sets: vec![
                v1::AdditiveSet::default(),
                v1::AdditiveSet {
                    additives: vec![v1::Additive::default(), v1::Additive::default()],
                },
            ],
            whole_library: false,
        });
        let (sound, faults) = submission(request);
        assert_eq!(sound.campaign.substrates, submitted().campaign.substrates);
        let told: Vec<_> = faults
            .iter()
            .map(|fault| (fault.place.field.as_str(), fault.code))
            .collect();
        assert_eq!(
            told,
            [
                ("request_id", "VALUE_OUT_OF_RANGE"),
                (
                    "campaign.solvents.media[0].components[0].volume_fraction",
                    "VALUE_OUT_OF_RANGE"
                ),
                (
                    "campaign.solvents.media[0].components[1].volume_fraction",
                    "VALUE_OUT_OF_RANGE"
                ),
                ("campaign.solvents.media[1]", "VALUE_MISSING"),
                ("campaign.additives.sets[1]", "NOT_YET_ALLOWED"),
                ("campaign.conditions.addition[0]", "NOT_YET_ALLOWED"),
                ("campaign.conditions.addition[2]", "VALUE_UNKNOWN"),
            ]
        );
    }

    #[test]
    fn an_unknown_order_of_addition_is_refused_before_it_is_sent() {
        let mut submission = submitted();
        submission.campaign.conditions.addition = vec!["upside down".into()];
        let faults = v1::SubmitJobRequest::try_from(&submission).expect_err("is refused");
        assert_eq!(faults[0].code, "VALUE_UNKNOWN");
        assert_eq!(faults[0].value, "upside down");
    }
}
