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
    let points = super::course_points(&course, &network, &outcome);
    let left = points.last().map_or(0.0, |end| end.substrate + end.anions);
    Ok(Some(Fate {
        product: outcome.product,
        left: left.clamp(0.0, 1.0),
        half_time_s: half_time_s(&points),
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

#[cfg(test)]
mod tests {
    use crate::Fate;
    use crate::sample::{cell, model};

    fn fate(substrate: &str, base: &str, electrophile: &str, solvent: &str) -> Fate {
        let model = model();
        let cell = cell(&model, substrate, base, electrophile, solvent);
        model.fate(&cell).expect("integrates").expect("covered")
    }

    /// Triethylamine is some fifteen units too weak for cyclohexanone (common practice): the substrate is found again. What is
    /// alkylated is not, and of the whole no more is found than was charged.
    #[test]
    fn what_does_not_react_is_left() {
        let idle = fate("O=C1CCCCC1", "Et3N", "CCBr", "THF");
        assert!(idle.left > 0.95 && idle.product < 0.01, "{idle:?}");
        let runs = fate("CCOC(=O)CC(=O)OCC", "NaH", "BrCc1ccccc1", "DMF");
        assert!(runs.left < 0.2 && runs.product > 0.5, "{runs:?}");
        assert!(runs.left + runs.product < 1.0 + 1e-6, "{runs:?}");
        assert!(
            runs.half_time_s
                .is_some_and(|half| half > 0.0 && half < 16.0 * 3600.0)
        );
    }
}
