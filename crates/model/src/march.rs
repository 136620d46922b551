//! The fast solver: few implicit steps, exact in mass, several networks side by side.
//!
//! Networks of one cell that differ in their rate constants alone are marched in lanes: every
//! amount is a short array, and one pass over the reactions serves all.
//!
//! Only species that react are unknowns; what can only be formed is booked from the extents.
//! Each step is a backward Euler step solved by Newton's method, `y = y₀ + Δt·f(y)`; Newton's
//! steps keep every linear invariant, so substrate is conserved to the rounding of the elimination, about 1e-7 at
//! worst. A step of which Newton's method does not find the solution is taken in halves: amounts booked from an
//! unfinished iteration can give yields above 1 (a reagent that runs out within the step beside rates of 1e9 per second).

use crate::lanes::Lanes;
use crate::network::{Amounts, Network, Reaction, Species, Stage};

/// Steps of a stage with additions.
const ADDING_STEPS: usize = 6;
/// First step of a stage without additions, s.
const FIRST_STEP_S: f64 = 5.0;
/// Growth of the steps of a stage without additions.
const STEP_GROWTH: f64 = 1.7;
/// Newton iterations of a step at most.
const NEWTON: usize = 12;
/// Halvings at most of a step that Newton's method does not solve.
const HALVINGS: usize = 1;
/// A step counts as not solved when the last iteration still changes more than this many times the tolerance.
const FAR_OFF: f64 = 100.0;
/// Change of an amount, as a share of the substrate charged, at which a step is taken as solved:
/// the change is still made, and what is left is of the order of its square.
const TOLERANCE: f64 = 1e-4;
/// Largest negative amount left by Newton's method, as a share of the substrate charged.
const NEGATIVE: f64 = 1e-8;
/// An iteration may overshoot all that is charged by this factor, mol/L of water included, no more.
const MOST: f64 = 2.0;
/// Least share of an amount that one iteration leaves.
const CUT: f64 = 0.1;

/// Marches networks of the same reactions and stages from the amounts given to the end.
pub(crate) fn march<const L: usize>(networks: &[Network; L], start: [Amounts; L]) -> [Amounts; L] {
    let mut pots = start;
    let mut solver = Solver::new(networks);
    for stage in &networks[0].stages {
        for_each_step(stage, |dt, share| {
            if let Some((species, amount)) = stage.added {
                pots.iter_mut()
                    .for_each(|pot| pot.add(species, amount * share));
            }
            solver.step(&mut pots, dt, HALVINGS);
        });
    }
    pots
}

/// Calls `step` with each duration and the share of the stage's addition that comes with it.
fn for_each_step(stage: &Stage, mut step: impl FnMut(f64, f64)) {
    if stage.added.is_some() {
        let share = 1.0 / ADDING_STEPS as f64;
        for _ in 0..ADDING_STEPS {
            step(stage.duration_s * share, share);
        }
        return;
    }
    let mut dt = FIRST_STEP_S;
    let mut left = stage.duration_s;
    while left > 0.0 {
        if left < 1.5 * dt {
            dt = left;
        }
        step(dt, 0.0);
        left -= dt;
        dt *= STEP_GROWTH;
    }
}

/// No unknown.
const ABSENT: usize = usize::MAX;
/// Room for unknowns: a power of two, so that a masked index needs no check. A row of the matrix must
/// stay small: all of it has to lie in the fastest cache.
const ROOM: usize = (Species::COUNT - Species::ONLY_FORMED).next_power_of_two();

/// A reaction in terms of unknowns.
#[derive(Clone, Copy)]
struct Term<const L: usize> {
    k: Lanes<L>,
    first: usize,
    second: usize,
    third: usize,
    /// Range of its entries in [`Solver::changes`].
    changes: (usize, usize),
}

/// Scratch of the networks that are marched together.
struct Solver<const L: usize> {
    /// Species of each unknown.
    unknowns: Vec<Species>,
    terms: Vec<Term<L>>,
    /// Unknowns that change, with the change per extent, reaction by reaction.
    changes: Vec<(usize, f64)>,
    /// Species that are only formed, by reaction.
    sinks: Vec<(usize, Species)>,
    scale: f64,
    /// No amount can be larger: all that is charged, and water.
    most: f64,
    y: [Lanes<L>; ROOM],
    residual: [Lanes<L>; ROOM],
    delta: [Lanes<L>; ROOM],
    matrix: Vec<[Lanes<L>; ROOM]>,
}

impl<const L: usize> Solver<L> {
    fn new(networks: &[Network; L]) -> Solver<L> {
        let reactions = &networks[0].reactions;
        let mut place = [ABSENT; Species::COUNT];
        let mut unknowns = Vec::with_capacity(ROOM);
        let mut enter = |species: Species| {
            if place[species.index()] == ABSENT {
                place[species.index()] = unknowns.len();
                unknowns.push(species);
            }
        };
        for reaction in reactions {
            reaction
                .reactants()
                .chain(reaction.with)
                .for_each(&mut enter);
        }
        let n = unknowns.len();
        let nothing = [Lanes::all(0.0); ROOM];
        let mut solver = Solver {
            unknowns,
            terms: Vec::with_capacity(reactions.len()),
            changes: Vec::with_capacity(4 * reactions.len()),
            sinks: Vec::with_capacity(8),
            scale: networks[0].charged[0],
            most: MOST * (1.0 + networks[0].charged.iter().sum::<f64>()),
            y: nothing,
            residual: nothing,
            delta: nothing,
            matrix: vec![nothing; n],
        };
        for (index, reaction) in reactions.iter().enumerate() {
            for product in reaction.products.iter().flatten() {
                if place[product.index()] == ABSENT {
                    solver.sinks.push((index, *product));
                }
            }
            let k = Lanes::each(|l| networks[l].reactions[index].k);
            solver.enter(reaction, k, &place);
        }
        solver
    }

    fn enter(&mut self, reaction: &Reaction, k: Lanes<L>, place: &[usize; Species::COUNT]) {
        let start = self.changes.len();
        let used = reaction.reactants().chain(reaction.with).map(|s| (s, -1.0));
        let formed = reaction.products.into_iter().flatten().map(|s| (s, 1.0));
        for (species, change) in used.chain(formed) {
            let i = place[species.index()];
            if i == ABSENT {
                continue;
            }
            match self.changes[start..].iter_mut().find(|entry| entry.0 == i) {
                Some(entry) => entry.1 += change,
                None => self.changes.push((i, change)),
            }
        }
        self.terms.push(Term {
            k,
            first: place[reaction.first.index()],
            second: reaction.second.map_or(ABSENT, |s| place[s.index()]),
            third: reaction.third.map_or(ABSENT, |s| place[s.index()]),
            changes: (start, self.changes.len()),
        });
    }

    /// One backward Euler step of every lane, in two halves where Newton's method finds no solution.
    fn step(&mut self, pots: &mut [Amounts; L], dt: f64, halvings: usize) {
        if self.solve(pots, dt) || halvings == 0 {
            self.book(pots, dt);
            return;
        }
        for _ in 0..2 {
            self.step(pots, 0.5 * dt, halvings - 1);
        }
    }

    /// Newton's method for a step; whether it found the solution.
    fn solve(&mut self, pots: &[Amounts; L], dt: f64) -> bool {
        for (y, species) in self.y.iter_mut().zip(&self.unknowns) {
            *y = Lanes::each(|l| pots[l].of(*species).max(0.0));
        }
        for iteration in 1..=NEWTON {
            self.linearise(pots, dt);
            self.eliminate();
            if self.is_solved(dt, 1.0) {
                return true;
            }
            if iteration == NEWTON {
                break;
            }
            // a step that would leave the positive root is cut; the next full one mends the mass
            let (n, most) = (self.unknowns.len(), self.most);
            for (y, delta) in self.y.iter_mut().zip(&self.delta).take(n) {
                *y = Lanes::each(|l| (y.0[l] + delta.0[l]).max(CUT * y.0[l]).min(most));
            }
        }
        self.is_solved(dt, FAR_OFF)
    }

    /// Whether what is left to change is below `slack` times the tolerance.
    fn is_solved(&self, dt: f64, slack: f64) -> bool {
        let (mut change, mut least) = (0.0_f64, 0.0_f64);
        for (y, delta) in self.y.iter().zip(&self.delta).take(self.unknowns.len()) {
            for l in 0..L {
                change = change.max(delta.0[l].abs());
                least = least.min(y.0[l] + delta.0[l]);
            }
        }
        let tolerance = slack * TOLERANCE * self.scale;
        let negative = if slack > 1.0 {
            tolerance
        } else {
            NEGATIVE * self.scale
        };
        change < tolerance && least > -negative && self.left_out(dt) < tolerance
    }

    /// Largest extent that the linearisation of a rate leaves out: `Δt·k·δa·δb`, and of three reactants each two
    /// with the amount of the third.
    fn left_out(&self, dt: f64) -> f64 {
        let mut most = 0.0_f64;
        for term in self.terms.iter().filter(|term| term.second != ABSENT) {
            let (a, b) = (
                self.delta[term.first % ROOM],
                self.delta[term.second % ROOM],
            );
            let of_pairs = if term.third == ABSENT {
                [a * b, Lanes::all(0.0), Lanes::all(0.0)]
            } else {
                let [first, second, third] =
                    [term.first, term.second, term.third].map(|i| self.y[i % ROOM]);
                let c = self.delta[term.third % ROOM];
                [a * b * third, a * c * second, b * c * first]
            };
            for pair in of_pairs {
                let extent = term.k * pair;
                for l in 0..L {
                    most = most.max((dt * extent.0[l]).abs());
                }
            }
        }
        most
    }

    /// Residual `y₀ + Δt·f(y) − y` and matrix `1 − Δt·∂f/∂y`.
    fn linearise(&mut self, pots: &[Amounts; L], dt: f64) {
        let n = self.unknowns.len();
        for (i, row) in self.matrix.iter_mut().enumerate() {
            row[..n].fill(Lanes::all(0.0));
            row[i % ROOM] = Lanes::all(1.0);
            let species = self.unknowns[i];
            self.residual[i % ROOM] = Lanes::each(|l| pots[l].of(species)) - self.y[i % ROOM];
        }
        let dt = Lanes::all(dt);
        for term in &self.terms {
            let kdt = term.k * dt;
            let changes = &self.changes[term.changes.0..term.changes.1];
            let a = self.y[term.first % ROOM];
            if term.second == ABSENT {
                for &(i, change) in changes {
                    let change = Lanes::all(change) * kdt;
                    self.residual[i % ROOM] += change * a;
                    self.matrix[i][term.first % ROOM] -= change;
                }
            } else if term.third == ABSENT {
                let b = self.y[term.second % ROOM];
                let (by_first, by_second) = (kdt * b, kdt * a);
                let rate = by_first * a;
                for &(i, change) in changes {
                    let change = Lanes::all(change);
                    self.residual[i % ROOM] += change * rate;
                    let row = &mut self.matrix[i];
                    row[term.first % ROOM] -= change * by_first;
                    row[term.second % ROOM] -= change * by_second;
                }
            } else {
                let (b, c) = (self.y[term.second % ROOM], self.y[term.third % ROOM]);
                let slopes = [kdt * b * c, kdt * a * c, kdt * a * b];
                let rate = slopes[0] * a;
                for &(i, change) in changes {
                    let change = Lanes::all(change);
                    self.residual[i % ROOM] += change * rate;
                    let row = &mut self.matrix[i];
                    for (by, slope) in [term.first, term.second, term.third]
                        .into_iter()
                        .zip(slopes)
                    {
                        row[by % ROOM] -= change * slope;
                    }
                }
            }
        }
    }

    /// Solves `matrix · delta = residual` in every lane by Gaussian elimination, in place.
    ///
    /// The matrix is the identity minus a step of mass action: what a species loses stands on its
    /// diagonal, so the elimination needs no pivoting.
    fn eliminate(&mut self) {
        let n = self.matrix.len();
        for column in 0..n {
            let (above, below) = self.matrix.split_at_mut(column + 1);
            let pivot_row = &above[column][..n];
            let inverse = pivot_row[column].inverse();
            let right = self.residual[column % ROOM];
            for (i, row) in below.iter_mut().enumerate() {
                let factor = row[column % ROOM];
                if factor.is_zero() {
                    continue;
                }
                let factor = factor * inverse;
                for (entry, pivot) in row[..n].iter_mut().zip(pivot_row).skip(column + 1) {
                    *entry -= factor * *pivot;
                }
                self.residual[(column + 1 + i) % ROOM] -= factor * right;
            }
        }
        for i in (0..n).rev() {
            let row = &self.matrix[i][..n];
            let mut sum = self.residual[i % ROOM];
            for (entry, x) in row.iter().zip(&self.delta).skip(i + 1) {
                sum -= *entry * *x;
            }
            self.delta[i % ROOM] = sum * row[i].inverse();
        }
    }

    /// Moves the pots by the extents of the last linearisation: every linear invariant is kept.
    fn book(&mut self, pots: &mut [Amounts; L], dt: f64) {
        for &(reaction, product) in &self.sinks {
            let term = &self.terms[reaction];
            let (a, da) = (self.y[term.first], self.delta[term.first]);
            let extent = if term.second == ABSENT {
                a + da
            } else {
                let (b, db) = (self.y[term.second], self.delta[term.second]);
                let linear = a * b + da * b + a * db;
                if term.third == ABSENT {
                    linear
                } else {
                    let (c, dc) = (self.y[term.third], self.delta[term.third]);
                    linear * c + a * b * dc
                }
            };
            let extent = extent * term.k * Lanes::all(dt);
            pots.iter_mut()
                .zip(extent.0)
                .for_each(|(pot, extent)| pot.add(product, extent));
        }
        for (i, species) in self.unknowns.iter().enumerate() {
            let end = self.y[i] + self.delta[i];
            pots.iter_mut()
                .zip(end.0)
                .for_each(|(pot, end)| pot.0[species.index()] = end);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::kinetics::Nudge;
    use crate::parameters::Values;
    use crate::program::Charge;
    use crate::reference::integrate;
    use crate::sample::{cell, cells, model};

    #[test]
    fn substrate_is_conserved_to_rounding() {
        let model = model();
        for cell in cells(&model) {
            let charge = Charge::of(&cell);
            let start = charge.start();
            let values = Values::means();
            let formed = march(&charge.forming(&cell, &values, [Nudge::default()]), [start]);
            let [end] = march(&charge.reacting(&cell, &values, [Nudge::default()]), formed);
            let charged = cell.conditions.concentration_m;
            let off = end.substrate_balance() / charged - 1.0;
            assert!(off.abs() < 1e-6, "{}: {off:e}", cell.base.record.name);
        }
    }

    /// One second-order step of two reagents, `A + B → P`.
    fn one_step(k: f64, hours: f64) -> Network {
        Network {
            reactions: vec![Reaction {
                first: Species::Substrate,
                second: Some(Species::Electrophile),
                third: None,
                products: [Some(Species::Product(0)), None, None],
                with: None,
                k,
            }],
            stages: vec![Stage {
                duration_s: hours * 3600.0,
                added: None,
            }],
            charged: [0.2, 0.0, 0.2],
        }
    }

    #[test]
    fn both_solvers_follow_the_second_order_law() {
        // equal amounts c: conversion = k·c·t/(1 + k·c·t)
        let mut start = Amounts::NONE;
        start.add(Species::Substrate, 0.2);
        start.add(Species::Electrophile, 0.2);
        for k in [1e-6, 1e-4, 1e-2, 1.0] {
            let network = one_step(k, 16.0);
            let kct = k * 0.2 * 16.0 * 3600.0;
            let exact = kct / (1.0 + kct);
            let [end] = march(std::array::from_ref(&network), [start]);
            let fast = end.product(0) / 0.2;
            let course = integrate(None, &network, start).expect("integrates");
            let reference = course.end.product(0) / 0.2;
            assert!(
                (reference - exact).abs() < 1e-4,
                "{k}: {reference} for {exact}"
            );
            // the tolerance of the design for one cell
            assert!((fast - exact).abs() < 0.05, "{k}: {fast} for {exact}");
        }
    }

    #[test]
    fn the_deprotonation_ends_at_the_equilibrium_of_its_constants() {
        use crate::kinetics::Kinetics;
        let model = model();
        let values = Values::means();
        // diethyl malonate with DBU in MeCN: neither side wins
        let cell = cells(&model)
            .into_iter()
            .find(|c| c.base.record.name == "DBU")
            .expect("a cell");
        let charge = Charge::of(&cell);
        let [network] = charge.forming(&cell, &values, [Nudge::default()]);
        let course = integrate(None, &network, charge.start()).expect("integrates");
        let end = course.end;
        let kinetics = Kinetics::new(
            &cell,
            cell.conditions.temperature_c,
            &values,
            Nudge::default(),
        );
        let log10_k = kinetics.pka_base() - kinetics.site_pka(&cell.substrate.carbon[0]);
        let quotient = end.of(Species::Carbanion(0)) * end.of(Species::BaseAcid)
            / (end.of(Species::Substrate) * end.of(Species::Base));
        assert!(
            (quotient.log10() - log10_k).abs() < 0.01,
            "{} for {log10_k}",
            quotient.log10()
        );
    }

    #[test]
    fn steps_of_very_different_speed_leave_every_amount_finite() {
        // a diffusion-controlled attack of the dianion beside adducts that fall apart at once
        let model = model();
        for (substrate, base, electrophile, solvent, temperature_c) in [
            ("CC(=O)CC(C)=O", "LDA", "CCOC(=O)N=NC(=O)OCC", "DMF", 60.0),
            (
                "CC(=O)CC(C)=O",
                "TMPMgCl.LiCl",
                "CCOC(=O)N=NC(=O)OCC",
                "MeCN",
                -20.0,
            ),
            (
                "CC(=O)CC(C)=O",
                "TMPMgCl.LiCl",
                "O=S(=O)(N=Cc1ccccc1)c1ccc(C)cc1",
                "MeCN",
                -20.0,
            ),
        ] {
            let mut cell = cell(&model, substrate, base, electrophile, solvent);
            cell.conditions.temperature_c = temperature_c;
            cell.conditions.formation_temperature_c = temperature_c;
            let charge = Charge::of(&cell);
            let values = Values::means();
            let start = charge.start();
            let formed = march(&charge.forming(&cell, &values, [Nudge::default()]), [start]);
            let [end] = march(&charge.reacting(&cell, &values, [Nudge::default()]), formed);
            assert!(end.0.iter().all(|x| x.is_finite()), "{base}: {end:?}");
            let off = end.substrate_balance() / cell.conditions.concentration_m - 1.0;
            assert!(off.abs() < 1e-6, "{base}: {off:e}");
        }
    }

    #[test]
    fn a_reagent_used_up_at_once_goes_where_the_reference_says() {
        // a fluorinating agent dosed into an enolate beside a little excess of base
        let model = model();
        let mut cell = cell(
            &model,
            "CCOC(=O)Cc1ccccc1",
            "LiHMDS",
            "O=S(=O)(c1ccccc1)N(F)S(=O)(=O)c1ccccc1",
            "THF",
        );
        cell.conditions.temperature_c = -78.0;
        cell.conditions.formation_temperature_c = -78.0;
        let charge = Charge::of(&cell);
        let values = Values::means();
        let forming = charge.forming(&cell, &values, [Nudge::default()]);
        let reacting = charge.reacting(&cell, &values, [Nudge::default()]);
        let [end] = march(&reacting, march(&forming, [charge.start()]));
        let course =
            integrate(Some(&forming[0]), &reacting[0], charge.start()).expect("integrates");
        let concentration_m = cell.conditions.concentration_m;
        let [fast, reference] = [&end, &course.end].map(|pot| pot.product(0) / concentration_m);
        assert!((fast - reference).abs() < 0.05, "{fast} for {reference}");
    }
}
