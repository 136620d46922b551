//! The fast solver: few implicit steps, exact in mass, several networks side by side.
//!
//! Networks of one cell that differ in their rate constants alone are marched in lanes: every
//! amount is a short array, and one pass over the reactions serves all.
//!
//! Steps are those of RODAS3, a linearly implicit method of order 3 with an estimate of its error (Sandu et al.,
//! Atmos. Environ. 1997, 31, 3459): one linearisation a step, and every linear invariant is kept, so that substrate is
//! conserved to the rounding of the elimination. Where a reagent runs out or reactions of 1e9 per second begin, such a
//! step would have to be very short; it is then one of backward Euler, `y = y₀ + Δt·f(y)` by Newton's method.
//!
//! Steps are compiled twice, for any processor and for those with wide registers. Both give the same bits: nothing is
//! fused, and each lane is on its own.

mod system;

use pulp::{Arch, Simd, WithSimd};

use crate::lanes::Lanes;
use crate::network::{Amounts, Network, Stage};
use system::{ROOM, System, Vector};

/// γ of RODAS3.
const GAMMA: f64 = 0.5;
/// Error of a step that is accepted: this share of the substrate charged …
const ABSOLUTE: f64 = 5e-3;
/// … and this share of the amount.
const RELATIVE: f64 = 5e-2;
/// Step below zero that is accepted, as a share of the substrate charged.
const BELOW_ZERO: f64 = 1e-4;
/// First step of a program, as a share of its first stage.
const FIRST_SHARE: f64 = 1e-3;
/// Bounds of the change of the step from one to the next.
const SHORTEN: f64 = 0.1;
const LENGTHEN: f64 = 8.0;
/// Step as a share of that which would just be accepted.
const CAREFUL: f64 = 0.9;
/// Step as a share of the time after which one that was refused took an amount below zero.
const BEFORE_ZERO: f64 = 0.5;
/// A step is not made shorter than this share of the stage: backward Euler takes it instead.
const SHORTEST: f64 = 1e-3;
/// Step after one of backward Euler, as a multiple of it, and the next of its kind.
const AFTER_EULER: f64 = 2.0;
/// A step longer than this share of the time that is left takes all of it.
const LAST_SHARE: f64 = 0.7;
/// Refusals in a row after which backward Euler takes the step.
const REFUSALS: usize = 3;

/// Newton iterations of a backward Euler step at most.
const NEWTON: usize = 8;
/// Halvings at most of a step that Newton's method does not solve.
const HALVINGS: usize = 1;
/// Change of an amount, as a share of the substrate charged, at which Newton's method ends:
/// the change is still made, and what is left is of the order of its square.
const TOLERANCE: f64 = 1e-4;
/// Largest negative amount left by Newton's method, as a share of the substrate charged.
const NEGATIVE: f64 = 1e-8;
/// An iteration may overshoot all that is charged by this factor, mol/L of water included, no more.
const MOST: f64 = 2.0;
/// Least share of an amount that one iteration leaves.
const CUT: f64 = 0.01;

/// Marches networks of the same reactions and stages from the amounts given to the end.
pub(crate) fn march<const L: usize>(networks: &[Network; L], start: [Amounts; L]) -> [Amounts; L] {
    march_on(Arch::new(), networks, start)
}

/// The same with the steps compiled for a kind of processor.
fn march_on<const L: usize>(
    arch: Arch,
    networks: &[Network; L],
    start: [Amounts; L],
) -> [Amounts; L] {
    let mut pots = start;
    let mut marcher = Marcher::new(arch, networks, &pots);
    for stage in &networks[0].stages {
        marcher.stage(stage, &mut pots);
    }
    marcher.system.scatter(&marcher.y, &mut pots);
    pots
}

/// Networks on their way.
struct Marcher<const L: usize> {
    arch: Arch,
    system: System<L>,
    y: Vector<L>,
    /// Rate at which each species is added.
    added: Vector<L>,
    /// Substrate charged, mol/L.
    scale: f64,
    /// No amount can be larger: all that is charged, and water.
    most: f64,
    /// Step to try next, s.
    dt: f64,
    scratch: [Vector<L>; 5],
}

impl<const L: usize> Marcher<L> {
    fn new(arch: Arch, networks: &[Network; L], pots: &[Amounts; L]) -> Marcher<L> {
        let system = System::new(networks);
        Marcher {
            arch,
            y: system.gather(pots),
            added: [Lanes::all(0.0); ROOM],
            scale: networks[0].charged[0],
            most: MOST * (1.0 + networks[0].charged.iter().sum::<f64>()),
            dt: 0.0,
            scratch: [[Lanes::all(0.0); ROOM]; 5],
            system,
        }
    }

    fn stage(&mut self, stage: &Stage, pots: &mut [Amounts; L]) {
        self.added = [Lanes::all(0.0); ROOM];
        if let Some((species, amount)) = stage.added {
            match self.system.place(species) {
                Some(place) => self.added[place] = Lanes::all(amount / stage.duration_s),
                // nothing happens to it
                None => pots.iter_mut().for_each(|pot| pot.add(species, amount)),
            }
        }
        if self.dt == 0.0 {
            self.dt = FIRST_SHARE * stage.duration_s;
        }
        let shortest = SHORTEST * stage.duration_s;
        let mut left = stage.duration_s;
        let mut refused = 0;
        // the last step if it was one of backward Euler
        let mut last_euler = 0.0;
        while left > 0.0 {
            let is_stuck = refused == REFUSALS || self.dt < shortest;
            self.dt = self.dt.max(shortest);
            let is_last = self.dt > LAST_SHARE * left;
            let mut dt = if is_last { left } else { self.dt };
            let tried = (!is_stuck).then(|| self.arch.dispatch(RodasStep(self, dt)));
            match tried {
                Some(Step::Taken { change }) => {
                    last_euler = 0.0;
                    // a step cut short by the end of the stage says little about the next one
                    self.dt = if is_last {
                        self.dt.max(dt * change)
                    } else {
                        dt * change
                    };
                }
                Some(Step::Refused { change }) if last_euler == 0.0 => {
                    refused += 1;
                    self.dt = dt * change;
                    continue;
                }
                refused_again => {
                    // the same trouble as a step ago: a longer step of the kind that got over it
                    if refused_again.is_some() {
                        dt = dt.min(AFTER_EULER * last_euler);
                    }
                    self.euler(dt, HALVINGS);
                    self.dt = AFTER_EULER * dt;
                    last_euler = dt;
                }
            }
            left -= dt;
            refused = 0;
        }
    }

    /// A step of RODAS3, taken if its error, as a share of what is accepted, is not above 1.
    #[inline(always)]
    fn rodas(&mut self, dt: f64) -> Step {
        let n = self.system.len();
        let per_s = Lanes::all(1.0 / dt);
        let [k1, k2, k3, k4, y] = &mut self.scratch;
        k1[..n].copy_from_slice(&self.added[..n]);
        self.system.factor(&self.y, GAMMA * dt, k1);
        k2[..n].copy_from_slice(&k1[..n]);
        self.system.solve(k1);
        let four = Lanes::all(4.0) * per_s;
        let two = Lanes::all(2.0);
        for i in 0..n {
            k2[i] += four * k1[i];
            y[i] = self.y[i] + two * k1[i];
        }
        self.system.solve(k2);
        for i in 0..n {
            k4[i] = self.added[i] + per_s * (k1[i] - k2[i]);
        }
        k3[..n].copy_from_slice(&k4[..n]);
        self.system.rates(y, k3);
        self.system.solve(k3);
        let of_third = Lanes::all(8.0 / 3.0) * per_s;
        for i in 0..n {
            y[i] += k3[i];
            k4[i] -= of_third * k3[i];
        }
        self.system.rates(y, k4);
        self.system.solve(k4);
        let (absolute, relative) = (ABSOLUTE * self.scale, RELATIVE);
        let below_zero = BELOW_ZERO * self.scale;
        let mut worst = 0.0_f64;
        let mut is_finite = true;
        let mut until_zero = 0.0_f64;
        for i in 0..n {
            y[i] += k4[i];
            for l in 0..L {
                let (before, after) = (self.y[i].0[l], y[i].0[l]);
                worst = worst.max(k4[i].0[l].abs() / (absolute + relative * after.abs()));
                // an amount that was negative before is no fault of this step
                let below = (before.min(0.0) - after) / below_zero;
                if below > 1.0 && before > 0.0 {
                    let share = before / (before - after);
                    until_zero = if until_zero == 0.0 {
                        share
                    } else {
                        until_zero.min(share)
                    };
                }
                worst = worst.max(below);
                is_finite &= after.is_finite();
            }
        }
        if !is_finite {
            return Step::Refused { change: SHORTEN };
        }
        let change = (CAREFUL / cube_root(worst)).clamp(SHORTEN, LENGTHEN);
        if worst > 1.0 {
            let change = change.max(BEFORE_ZERO * until_zero);
            return Step::Refused { change };
        }
        std::mem::swap(&mut self.y, y);
        Step::Taken { change }
    }

    /// A step of backward Euler, in two halves where Newton's method finds no solution.
    fn euler(&mut self, dt: f64, halvings: usize) {
        let start = self.y;
        let is_solved = self.arch.dispatch(EulerStep(self, dt));
        let is_finite = self.is_finite();
        if halvings == 0 && !is_finite {
            // no numbers: the pot stays as it was, and its mass with it
            self.y = start;
        }
        if is_solved && is_finite || halvings == 0 {
            return;
        }
        self.y = start;
        for _ in 0..2 {
            self.euler(0.5 * dt, halvings - 1);
        }
    }

    fn is_finite(&self) -> bool {
        let amounts = self.y[..self.system.len()].iter();
        amounts.flat_map(|y| y.0).all(f64::is_finite)
    }

    /// Newton's method for a step of backward Euler; whether it found the solution.
    #[inline(always)]
    fn newton(&mut self, dt: f64) -> bool {
        let (n, coupled) = (self.system.len(), self.system.coupled());
        let per_s = Lanes::all(1.0 / dt);
        let start = self.y;
        for iteration in 1..=NEWTON {
            let mut x = self.added;
            for ((x, start), y) in x.iter_mut().zip(&start).zip(&self.y).take(n) {
                *x += per_s * (*start - *y);
            }
            self.system.factor(&self.y, dt, &mut x);
            self.system.solve(&mut x);
            let is_solved = self.is_solved(&start, &x, dt);
            let is_last = is_solved || iteration == NEWTON;
            for (i, x) in x.iter().enumerate().take(n) {
                let y = self.y[i] + *x;
                // an iteration that would leave the positive root is cut; the next full one mends the mass
                let is_cut = !is_last && i < coupled;
                let (before, start) = (self.y[i], start[i]);
                self.y[i] = if is_cut {
                    Lanes::each(|l| y.0[l].max(least(before.0[l], start.0[l])).min(self.most))
                } else {
                    y
                };
            }
            if is_last {
                return is_solved;
            }
        }
        false
    }

    /// Whether what Newton's method would change after the step `x` is below the tolerance.
    #[inline(always)]
    fn is_solved(&self, start: &Vector<L>, x: &Vector<L>, dt: f64) -> bool {
        let (mut change, mut least) = (0.0_f64, 0.0_f64);
        for i in 0..self.system.coupled() {
            for l in 0..L {
                let step = x[i].0[l];
                change = change.max(step.abs());
                // an amount that was negative before the step is no fault of it
                least = least.min(self.y[i].0[l] + step - start[i].0[l].min(0.0));
            }
        }
        let tolerance = TOLERANCE * self.scale;
        change < tolerance
            && least > -NEGATIVE * self.scale
            && dt * self.system.left_out(&self.y, x) < tolerance
    }
}

/// What became of a step of RODAS3; the step to try next, as a multiple of it.
enum Step {
    Taken { change: f64 },
    Refused { change: f64 },
}

/// A step of RODAS3, to be compiled for several kinds of processors.
struct RodasStep<'a, const L: usize>(&'a mut Marcher<L>, f64);

impl<const L: usize> WithSimd for RodasStep<'_, L> {
    type Output = Step;

    #[inline(always)]
    fn with_simd<S: Simd>(self, _: S) -> Step {
        self.0.rodas(self.1)
    }
}

/// Newton's method, to be compiled for several kinds of processors.
struct EulerStep<'a, const L: usize>(&'a mut Marcher<L>, f64);

impl<const L: usize> WithSimd for EulerStep<'_, L> {
    type Output = bool;

    #[inline(always)]
    fn with_simd<S: Simd>(self, _: S) -> bool {
        self.0.newton(self.1)
    }
}

/// The least that an iteration of Newton's method leaves of an amount; one that was negative before the step may stay so.
fn least(amount: f64, start: f64) -> f64 {
    if amount > 0.0 {
        CUT * amount
    } else {
        start.min(0.0)
    }
}

/// The same on every machine; 0 has a small one.
fn cube_root(x: f64) -> f64 {
    use enolattice_units::math;
    math::exp(math::ln(x.max(1e-12)) / 3.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::kinetics::Nudge;
    use crate::network::{Reaction, Species};
    use crate::parameters::Values;
    use crate::program::Charge;
    use crate::reference::integrate;
    use crate::sample::{cell, cells, model};

    #[test]
    fn wide_registers_change_no_bit() {
        let model = model();
        let values = Values::means();
        let nudges = [-2.0, -1.0, 0.0, 1.0, 2.0].map(|attack| Nudge {
            acidity: 0.5 * attack,
            attack,
        });
        for cell in cells(&model) {
            let charge = Charge::of(&cell);
            let networks = charge.reacting(&cell, &values, nudges);
            let [any, wide] = [Arch::Scalar, Arch::new()]
                .map(|arch| march_on(arch, &networks, [charge.start(); 5]));
            for (any, wide) in any.iter().zip(&wide) {
                assert_eq!(any.0.map(f64::to_bits), wide.0.map(f64::to_bits));
            }
        }
    }

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
            assert!(off.abs() < 1e-7, "{}: {off:e}", cell.base.record.name);
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
