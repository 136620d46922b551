//! The stiff reference: the same network, integrated to tight tolerance.
//!
//! Radau IIA of order 5 (Hairer and Wanner, Solving Ordinary Differential Equations II, 1996) of
//! the `differential-equations` crate, from point to point of the time course.
//!
//! It gave up on some networks; since the following it does so on none of 2,000 random cells. Amounts that rounding
//! leaves below zero made products of two or three of them run away ([`together`]). The crate seems to keep its
//! matrices over some steps that it has rejected: a new start at every point, and another tolerance where one fails,
//! cost little. A tolerance given once for all species is squeezed once for each of them by the crate, down to 1e-3
//! whatever was asked: it is given for each species.

use differential_equations::prelude::*;

use crate::ModelError;
use crate::network::{Amounts, Network, Reaction, Species, Stage};

/// Relative tolerance of the amounts and absolute one, mol/L, in the order in which they are tried.
/// The absolute one is far below any amount that matters, so that reagents that are nearly used up
/// stay positive; the other pairs serve the few stretches on which the integrator gives up.
const TOLERANCES: [(f64, f64); 4] = [(1e-7, 1e-13), (1e-6, 1e-12), (1e-8, 1e-11), (1e-5, 1e-10)];
/// First step of a stretch, as a share of it.
const FIRST_STEP: f64 = 1e-6;
/// Steps of a stretch at most.
const STEPS: usize = 20_000;
/// An amount below this, mol/L, is no rounding error but a solution that has left the real one.
const LEAST_M: f64 = -1e-6;
/// Points of the time course in each stage.
const POINTS: usize = 12;

/// The time course of a network.
#[derive(Clone, Debug)]
pub(crate) struct Course {
    /// Time from the first addition of electrophile, s (negative before), and amounts.
    pub(crate) points: Vec<(f64, Amounts)>,
    /// Amounts when the electrophile begins to be added.
    pub(crate) formed: Amounts,
    /// Amounts at the end.
    pub(crate) end: Amounts,
}

type State = [f64; Species::COUNT];

struct System<'a> {
    reactions: &'a [Reaction],
    stage: &'a Stage,
}

impl System<'_> {
    /// Change of each species per extent of a reaction.
    fn each_change(reaction: &Reaction, mut change: impl FnMut(usize, f64)) {
        for species in reaction.reactants().chain(reaction.with) {
            change(species.index(), -1.0);
        }
        for species in reaction.products.into_iter().flatten() {
            change(species.index(), 1.0);
        }
    }
}

/// Product of the amounts of reactants, of which rounding may have left some below zero.
///
/// One such amount keeps its sign, so that its reaction leads back to zero; with two of them nothing happens,
/// where their plain product would run away.
fn together(amounts: impl Iterator<Item = f64>) -> f64 {
    let (mut product, mut negative) = (1.0, 0);
    for amount in amounts {
        product *= amount;
        negative += usize::from(amount < 0.0);
    }
    if negative < 2 { product } else { 0.0 }
}

impl ODE<f64, State> for System<'_> {
    fn diff(&self, _t: f64, y: &State, dydt: &mut State) {
        dydt.fill(0.0);
        for reaction in self.reactions {
            let rate = reaction.k * together(reaction.reactants().map(|s| y[s.index()]));
            System::each_change(reaction, |i, change| dydt[i] += change * rate);
        }
        if let Some((species, amount)) = self.stage.added {
            dydt[species.index()] += amount / self.stage.duration_s;
        }
    }

    fn jacobian(&self, _t: f64, y: &State, j: &mut Matrix<f64>) {
        for row in 0..Species::COUNT {
            for column in 0..Species::COUNT {
                j[(row, column)] = 0.0;
            }
        }
        for reaction in self.reactions {
            for (place, by) in reaction.reactants().enumerate() {
                let others = reaction.reactants().enumerate();
                let slope: f64 = others
                    .filter(|(other, _)| *other != place)
                    .map(|(_, s)| y[s.index()].max(0.0))
                    .product();
                System::each_change(reaction, |i, change| {
                    j[(i, by.index())] += change * reaction.k * slope;
                });
            }
        }
    }
}

/// Integrates a cell's networks through their program.
///
/// # Errors
/// [`ModelError::Integration`] if the integrator gives up.
pub(crate) fn integrate(
    forming: Option<&Network>,
    reacting: &Network,
    start: Amounts,
) -> Result<Course, ModelError> {
    let before = forming.map_or(0.0, |n| n.stages.iter().map(|s| s.duration_s).sum());
    // 0 − 0 is +0: a negative zero would not survive the wire
    let mut points = vec![(0.0 - before, start)];
    let formed = match forming {
        Some(network) => follow(network, start, 0.0 - before, &mut points)?,
        None => start,
    };
    let end = follow(reacting, formed, 0.0, &mut points)?;
    Ok(Course {
        points,
        formed,
        end,
    })
}

/// Integrates one network from a time on; appends its points and returns its end.
fn follow(
    network: &Network,
    start: Amounts,
    from_s: f64,
    points: &mut Vec<(f64, Amounts)>,
) -> Result<Amounts, ModelError> {
    let (mut time, mut pot) = (from_s, start);
    for stage in &network.stages {
        let system = System {
            reactions: &network.reactions,
            stage,
        };
        let at: Vec<f64> = (1..=POINTS)
            .map(|i| {
                let share = i as f64 / POINTS as f64;
                // points crowd at the beginning, where things happen
                stage.duration_s
                    * if stage.added.is_some() {
                        share
                    } else {
                        share * share * share
                    }
            })
            .collect();
        for (t, y) in solve(&system, &pot, &at)? {
            pot = Amounts(y);
            points.push((time + t, pot));
        }
        time += stage.duration_s;
    }
    Ok(pot)
}

/// Integrates one stage; times and amounts at the points asked for.
fn solve(system: &System<'_>, pot: &Amounts, at: &[f64]) -> Result<Vec<(f64, State)>, ModelError> {
    let (mut from_s, mut y) = (0.0, pot.0);
    let mut points = Vec::with_capacity(at.len());
    for &until_s in at {
        y = across(system, (from_s, until_s), y)?;
        points.push((until_s, y));
        from_s = until_s;
    }
    Ok(points)
}

/// Integrates from one point to the next; a failure costs this stretch alone another attempt.
fn across(
    system: &System<'_>,
    (from_s, until_s): (f64, f64),
    start: State,
) -> Result<State, ModelError> {
    let mut reason = String::new();
    for (relative, absolute_m) in TOLERANCES {
        // one tolerance for each species: the method would tighten a shared one again for each
        let method = ImplicitRungeKutta::radau5()
            .rtol([relative; Species::COUNT])
            .atol([absolute_m; Species::COUNT])
            .h0(FIRST_STEP * (until_s - from_s))
            .max_steps(STEPS);
        match IVP::ode(system, from_s, until_s, start)
            .t_eval([until_s])
            .method(method)
            .solve()
        {
            Ok(solution) => {
                let end = solution.iter().next_back().map(|(_, y)| *y);
                // a start that the fast solver made may lie below zero by that solver's error
                let least_m = start.iter().fold(LEAST_M, |least, m| least.min(2.0 * m));
                // a comparison with what is not a number is false
                let is_amount = |amount: &f64| *amount > least_m;
                match end {
                    Some(end) if end.iter().all(is_amount) => return Ok(end),
                    _ => reason = "an amount is negative or not a number".to_owned(),
                }
            }
            Err(error) => {
                let said = format!("{error:?}");
                reason = said
                    .split(" at (t, y)")
                    .next()
                    .unwrap_or_default()
                    .to_owned();
            }
        }
    }
    Err(ModelError::Integration { reason })
}
