//! The fast solver: few implicit steps, exact in mass.
//!
//! Only species that react are unknowns; what can only be formed is booked from the extents.
//! Each step is a backward Euler step solved by Newton's method, `y = y₀ + Δt·f(y)`; Newton's
//! steps keep every linear invariant, so substrate is conserved to rounding however few are taken.

use crate::network::{Amounts, Network, Reaction, Species, Stage};

/// Steps of a stage with additions.
const ADDING_STEPS: usize = 6;
/// First step of a stage without additions, s.
const FIRST_STEP_S: f64 = 5.0;
/// Growth of the steps of a stage without additions.
const STEP_GROWTH: f64 = 2.2;
/// Newton iterations of a step at most.
const NEWTON: usize = 12;
/// Change of an amount, as a share of the substrate charged, at which a step is taken as solved.
const TOLERANCE: f64 = 1e-4;
/// Largest negative amount left by Newton's method, as a share of the substrate charged.
const NEGATIVE: f64 = 1e-9;
/// Least share of an amount that one iteration leaves.
const CUT: f64 = 0.1;

/// What the march found.
#[derive(Clone, Debug)]
pub(crate) struct Marched {
    /// Amounts at the end.
    pub(crate) end: Amounts,
    /// Amounts when the electrophile begins to be added.
    pub(crate) formed: Amounts,
}

/// Marches a network through its program.
pub(crate) fn march(network: &Network) -> Marched {
    let mut pot = network.start;
    let mut formed = pot;
    let mut solver = Solver::new(network);
    for (index, stage) in network.stages.iter().enumerate() {
        if index == network.first_reacting_stage {
            formed = pot;
        }
        solver.set_temperature(&network.reactions, stage.temperature);
        for_each_step(stage, |dt, share| {
            if let Some((species, amount)) = stage.added {
                pot.add(species, amount * share);
            }
            solver.step(&mut pot, dt);
        });
    }
    Marched { end: pot, formed }
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

const ABSENT: usize = usize::MAX;

/// A reaction in terms of unknowns.
#[derive(Clone, Copy)]
struct Term {
    k: f64,
    first: usize,
    second: usize,
    /// Unknowns that change, with the change per extent.
    changes: [(usize, f64); 5],
}

/// Scratch of one network.
struct Solver {
    /// Species of each unknown.
    unknowns: Vec<Species>,
    terms: Vec<Term>,
    /// Species that are only formed, by reaction and number of products.
    sinks: Vec<(usize, Species)>,
    scale: f64,
    y: Vec<f64>,
    residual: Vec<f64>,
    matrix: Vec<f64>,
    delta: Vec<f64>,
}

impl Solver {
    fn new(network: &Network) -> Solver {
        let mut place = [ABSENT; Species::COUNT];
        let mut unknowns = Vec::with_capacity(20);
        let mut enter = |species: Species| {
            if place[species.index()] == ABSENT {
                place[species.index()] = unknowns.len();
                unknowns.push(species);
            }
        };
        for reaction in &network.reactions {
            enter(reaction.first);
            reaction
                .second
                .into_iter()
                .chain(reaction.with)
                .for_each(&mut enter);
        }
        let mut sinks = Vec::new();
        let terms = network
            .reactions
            .iter()
            .enumerate()
            .map(|(index, reaction)| {
                for product in reaction.products.iter().flatten() {
                    if place[product.index()] == ABSENT {
                        sinks.push((index, *product));
                    }
                }
                term(reaction, &place)
            })
            .collect();
        let n = unknowns.len();
        Solver {
            unknowns,
            terms,
            sinks,
            scale: network.charged[0],
            y: vec![0.0; n],
            residual: vec![0.0; n],
            matrix: vec![0.0; n * n],
            delta: vec![0.0; n],
        }
    }

    fn set_temperature(&mut self, reactions: &[Reaction], temperature: usize) {
        for (term, reaction) in self.terms.iter_mut().zip(reactions) {
            term.k = reaction.k[temperature];
        }
    }

    /// One backward Euler step.
    fn step(&mut self, pot: &mut Amounts, dt: f64) {
        for (y, species) in self.y.iter_mut().zip(&self.unknowns) {
            *y = pot.of(*species).max(0.0);
        }
        for iteration in 1..=NEWTON {
            self.linearise(pot, dt);
            solve(&mut self.matrix, &mut self.residual, &mut self.delta);
            let (mut change, mut least) = (0.0_f64, 0.0_f64);
            for (y, delta) in self.y.iter().zip(&self.delta) {
                change = change.max(delta.abs());
                least = least.min(y + delta);
            }
            let solved = change < TOLERANCE * self.scale && least > -NEGATIVE * self.scale;
            if solved || iteration == NEWTON {
                break;
            }
            // a step that would leave the positive root is cut; the next full one mends the mass
            for (y, delta) in self.y.iter_mut().zip(&self.delta) {
                *y = (*y + delta).max(CUT * *y);
            }
        }
        self.book(pot, dt);
    }

    /// Residual `y₀ + Δt·f(y) − y` and matrix `1 − Δt·∂f/∂y`.
    fn linearise(&mut self, pot: &Amounts, dt: f64) {
        let n = self.y.len();
        self.matrix.fill(0.0);
        for i in 0..n {
            self.matrix[i * n + i] = 1.0;
            self.residual[i] = pot.of(self.unknowns[i]) - self.y[i];
        }
        for term in &self.terms {
            let a = self.y[term.first];
            let kdt = term.k * dt;
            if term.second == ABSENT {
                for &(i, change) in term.changes.iter().take_while(|c| c.0 != ABSENT) {
                    self.residual[i] += change * kdt * a;
                    self.matrix[i * n + term.first] -= change * kdt;
                }
            } else {
                let b = self.y[term.second];
                for &(i, change) in term.changes.iter().take_while(|c| c.0 != ABSENT) {
                    self.residual[i] += change * kdt * a * b;
                    self.matrix[i * n + term.first] -= change * kdt * b;
                    self.matrix[i * n + term.second] -= change * kdt * a;
                }
            }
        }
    }

    /// Moves the pot by the extents of the last linearisation: every linear invariant is kept.
    fn book(&mut self, pot: &mut Amounts, dt: f64) {
        for &(reaction, product) in &self.sinks {
            let term = &self.terms[reaction];
            let (a, da) = (self.y[term.first], self.delta[term.first]);
            let extent = if term.second == ABSENT {
                a + da
            } else {
                let (b, db) = (self.y[term.second], self.delta[term.second]);
                a * b + da * b + a * db
            };
            pot.add(product, term.k * dt * extent);
        }
        for (i, species) in self.unknowns.iter().enumerate() {
            pot.0[species.index()] = self.y[i] + self.delta[i];
        }
    }
}

fn term(reaction: &Reaction, place: &[usize; Species::COUNT]) -> Term {
    let mut changes = [(ABSENT, 0.0); 5];
    let mut add = |species: Species, change: f64| {
        let i = place[species.index()];
        if i == ABSENT {
            return;
        }
        let slot = changes
            .iter_mut()
            .find(|c| c.0 == i || c.0 == ABSENT)
            .expect("five suffice");
        *slot = (i, slot.1 + change);
    };
    add(reaction.first, -1.0);
    reaction
        .second
        .into_iter()
        .chain(reaction.with)
        .for_each(|s| add(s, -1.0));
    reaction
        .products
        .into_iter()
        .flatten()
        .for_each(|s| add(s, 1.0));
    Term {
        k: 0.0,
        first: place[reaction.first.index()],
        second: reaction.second.map_or(ABSENT, |s| place[s.index()]),
        changes,
    }
}

/// Solves `matrix · x = rhs` by Gaussian elimination with partial pivoting, in place.
fn solve(matrix: &mut [f64], rhs: &mut [f64], x: &mut [f64]) {
    let n = rhs.len();
    for column in 0..n {
        let pivot = (column..n)
            .max_by(|&a, &b| {
                matrix[a * n + column]
                    .abs()
                    .total_cmp(&matrix[b * n + column].abs())
            })
            .unwrap_or(column);
        if pivot != column {
            for j in column..n {
                matrix.swap(column * n + j, pivot * n + j);
            }
            rhs.swap(column, pivot);
        }
        let (above, below) = matrix.split_at_mut((column + 1) * n);
        let pivot_row = &above[column * n..];
        let inverse = 1.0 / pivot_row[column];
        for (i, row) in below.chunks_exact_mut(n).enumerate() {
            let factor = row[column] * inverse;
            if factor != 0.0 {
                for j in column + 1..n {
                    row[j] -= factor * pivot_row[j];
                }
                rhs[column + 1 + i] -= factor * rhs[column];
            }
        }
    }
    for i in (0..n).rev() {
        let sum: f64 = (i + 1..n).map(|j| matrix[i * n + j] * x[j]).sum();
        x[i] = (rhs[i] - sum) / matrix[i * n + i];
    }
}
