//! Where the material of a cell goes: the short form of an explanation.

use crate::explain::{Coverage, Outcome, coverage, products, reference};
use crate::kinetics::{Kinetics, Nudge};
use crate::parameters::Values;
use crate::{Cell, CoursePoint, Fate, Model, ModelError};

/// Where the material of a cell goes, by the stiff reference at the mean of all parameters.
pub(crate) fn fate(
    model: &Model,
    cell: &Cell,
    values: &Values,
) -> Result<Option<Fate>, ModelError> {
    if !matches!(coverage(cell), Coverage::Covered) {
        return Ok(None);
    }
    let temperature_c = cell.conditions.temperature_c;
    let kinetics = Kinetics::new(cell, temperature_c, values, Nudge::default());
    let (course, network) = reference(cell, values)?;
    let outcome = Outcome::read(cell, &kinetics, &network, &course.end, &course.formed);
    let library = model.library();
    let products = products::products(cell, &kinetics, &network, &course, library, outcome.site);
    Ok(Some(Fate {
        product: outcome.product,
        half_time_s: half_time_s(&super::course_points(&course, &network, &outcome)),
        losses: outcome.losses,
        products,
    }))
}

/// Time after which half of the product that there is at the end is there, s, linear between the points of the course.
fn half_time_s(course: &[CoursePoint]) -> Option<f64> {
    let half = 0.5 * course.last()?.product;
    let at = course.iter().position(|point| point.product >= half)?;
    let later = &course[at];
    let Some(earlier) = at.checked_sub(1).map(|before| &course[before]) else {
        return Some(later.time_s);
    };
    let share = (half - earlier.product) / (later.product - earlier.product);
    Some(earlier.time_s + share * (later.time_s - earlier.time_s))
}
