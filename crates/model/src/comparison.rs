//! A cell solved by both solvers, and its network in plain numbers for solvers of others.

use crate::explain::reference;
use crate::formation::Pots;
use crate::kinetics::{Kinetics, Nudge};
use crate::network::{Amounts, Network, Reaction, Species, Stage};
use crate::outcome::Outcome;
use crate::parameters::Values;
use crate::program::Charge;
use crate::screen::{Coverage, coverage, is_negligible, solve};
use crate::{Cell, Channel, ModelError};

/// What one solver makes of a cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    /// Wanted product per substrate charged, 0–1; that at the site which the fast solver favours.
    pub product: f64,
    /// Largest loss, if there is one.
    pub largest_loss: Option<Channel>,
    /// Substrate in all its fates at the end per substrate charged, less one: 0 where mass is kept.
    pub substrate_error: f64,
    /// The same for the electrophile.
    pub electrophile_error: f64,
}

/// A cell at the mean of all parameters by both solvers.
#[derive(Clone, Debug, PartialEq)]
pub struct Solutions {
    /// The fast solver of the screen.
    pub fast: Solution,
    /// The stiff reference.
    pub reference: Solution,
    /// Whether the screen settles the cell by a bound and spares it the quadrature.
    pub is_settled: bool,
}

/// An elementary step: its rate is `k` times the product of the amounts of its reactants.
#[derive(Clone, Debug, PartialEq)]
pub struct Step {
    /// Indices of the reactants in the rate, one for each molecule.
    pub reactants: Vec<usize>,
    /// Indices of the species used up, one for each molecule.
    pub used: Vec<usize>,
    /// Indices of the species formed, one for each molecule.
    pub formed: Vec<usize>,
    /// Rate constant; L, mol, s.
    pub k: f64,
}

/// A stretch of time with the same reactions and constant additions.
#[derive(Clone, Debug, PartialEq)]
pub struct Stretch {
    /// Index of its reactions in [`PlainNetwork::reactions`].
    pub reactions: usize,
    /// Duration, s.
    pub duration_s: f64,
    /// Index of the species added and its amount over the stretch, mol/L.
    pub added: Option<(usize, f64)>,
}

/// The network of a cell with its solution by the stiff reference.
#[derive(Clone, Debug, PartialEq)]
pub struct PlainNetwork {
    /// Names of the species, by index.
    pub species: Vec<String>,
    /// Amounts at the beginning, mol/L.
    pub start_m: Vec<f64>,
    /// Reactions of the deprotonation, where there is one, and of what follows.
    pub reactions: Vec<Vec<Step>>,
    /// The program, in the order of time.
    pub stretches: Vec<Stretch>,
    /// Indices of the forms of the wanted product.
    pub product: Vec<usize>,
    /// Substrate charged in all, mol/L.
    pub substrate_m: f64,
    /// Amounts at the end by the stiff reference, mol/L.
    pub end_m: Vec<f64>,
}

/// Solves a cell with both solvers; `None` where the model does not cover it or needs no network.
pub(crate) fn both_solvers(cell: &Cell, values: &Values) -> Result<Option<Solutions>, ModelError> {
    if !matches!(coverage(cell), Coverage::Covered) {
        return Ok(None);
    }
    let temperature_c = cell.conditions.temperature_c;
    let kinetics = Kinetics::new(cell, temperature_c, values, Nudge::default());
    let pots = Pots::form(cell, values);
    let fast = solve(cell, values, &pots);
    let (course, network) = reference(cell, values)?;
    let read = Outcome::read(cell, &kinetics, &network, &course.end, &course.formed);
    let site = fast.outcome.site;
    let solution = |end: &Amounts, outcome: &Outcome| {
        let error = |total: f64, charged: f64| total / charged - 1.0;
        Solution {
            product: end.product(site) / network.charged[0],
            largest_loss: outcome.losses.first().map(|loss| loss.0),
            substrate_error: error(end.substrate_balance(), network.charged[0]),
            electrophile_error: error(end.total(Species::electrophiles), network.charged[2]),
        }
    };
    Ok(Some(Solutions {
        fast: solution(&fast.end, &fast.outcome),
        reference: solution(&course.end, &read),
        is_settled: is_negligible(cell, &kinetics),
    }))
}

/// The network of a cell in plain numbers; `None` as for [`both_solvers`].
pub(crate) fn plain_network(
    cell: &Cell,
    values: &Values,
) -> Result<Option<PlainNetwork>, ModelError> {
    if !matches!(coverage(cell), Coverage::Covered) {
        return Ok(None);
    }
    let site = solve(cell, values, &Pots::form(cell, values)).outcome.site;
    let charge = Charge::of(cell);
    let (course, reacting) = reference(cell, values)?;
    let [forming] = charge.forming(cell, values, [Nudge::default()]);
    let phases: Vec<&Network> = if charge.forms_first() {
        vec![&forming, &reacting]
    } else {
        vec![&reacting]
    };
    let stretches = phases
        .iter()
        .enumerate()
        .flat_map(|(reactions, network)| {
            network
                .stages
                .iter()
                .map(move |stage| stretch(reactions, stage))
        })
        .collect();
    let product = [
        Species::Product(site),
        Species::ProductAnion(site),
        Species::Dehydrated(site),
    ];
    Ok(Some(PlainNetwork {
        species: Species::all().map(Species::name).collect(),
        start_m: charge.start().0.to_vec(),
        reactions: phases
            .iter()
            .map(|network| network.reactions.iter().map(step).collect())
            .collect(),
        stretches,
        product: product.map(Species::index).to_vec(),
        substrate_m: reacting.charged[0],
        end_m: course.end.0.to_vec(),
    }))
}

fn step(reaction: &Reaction) -> Step {
    Step {
        reactants: reaction.reactants().map(Species::index).collect(),
        used: reaction.used().map(Species::index).collect(),
        formed: reaction.formed().map(Species::index).collect(),
        k: reaction.k,
    }
}

fn stretch(reactions: usize, stage: &Stage) -> Stretch {
    Stretch {
        reactions,
        duration_s: stage.duration_s,
        added: stage
            .added
            .map(|(species, amount)| (species.index(), amount)),
    }
}
