//! What is expected of a well: a prediction, never a measurement.

use enolattice_plate::{PlannedWell, Plate};

use crate::ord::reaction_role::ReactionRoleType;
use crate::ord::{Data, ProductCompound, ReactionOutcome, data};
use crate::quantities::hours;
use crate::structures::named;

/// The name of the wanted product among the species of a well.
const WANTED: &str = "wanted product";

/// The expected product with its prediction as features; none where no product can be drawn.
pub(crate) fn outcome(plate: &Plate, well: &PlannedWell) -> Option<ReactionOutcome> {
    let mut species = well.masses.species.iter();
    let wanted = species.find(|species| species.name == WANTED)?;
    let predictions = [
        (
            "predicted_yield",
            "expected yield of the model, fraction of the substrate charged; not measured",
            well.yield_as_dosed.or(well.expected_yield),
        ),
        (
            "predicted_score",
            "probability by the model that the yield reaches the target; not measured",
            well.p_hit,
        ),
    ];
    let features = predictions.into_iter().filter_map(|(name, what, value)| {
        let data = Data {
            description: what.to_owned(),
            kind: Some(data::Kind::FloatValue(value? as f32)),
            ..Data::default()
        };
        Some((name.to_owned(), data))
    });
    Some(ReactionOutcome {
        reaction_time: Some(hours(plate.time_h)),
        products: vec![ProductCompound {
            identifiers: named(WANTED, &wanted.smiles),
            is_desired_product: Some(true),
            reaction_role: ReactionRoleType::Product.into(),
            features: features.collect(),
            ..ProductCompound::default()
        }],
        ..ReactionOutcome::default()
    })
}
