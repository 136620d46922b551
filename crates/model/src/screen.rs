//! The screened numbers of a cell: mean yield and probability of a hit by quadrature.

use enolattice_molecule::{ElectrophileKind, c_product};
use enolattice_units::math;

use crate::cautions::cautions;
use crate::formation::Pots;
use crate::kinetics::{Kinetics, Nudge};
use crate::march::march;
use crate::network::{Amounts, Network};
use crate::outcome::Outcome;
use crate::parameters::{P, PARAMETERS, Values};
use crate::program::Charge;
use crate::{Cell, Channel, Electrophile, Score, Substrate};

/// Distance of the outer points of the three-point rule from the mean, in σ: exact to the fifth moment.
const NODE: f64 = 1.732_050_807_568_877_2;
/// Yields are compared as logits within these bounds.
const LOGIT_BOUND: f64 = 9.0;
/// Points of the rule that averages over the two surfaces of logits.
const FINE: usize = 13;
/// Standard deviation of the smoothed step that counts hits where nothing else is uncertain: about the spacing of the fine
/// rule, units of logit.
const STEP_SIGMA: f64 = 0.45;
/// What all other parameters do to the logit of a yield, units of logit …
const OTHERS: f64 = 0.8;
/// … and beside it as a share of what one standard uncertainty of the main quantities does. Both were set on joint draws
/// of random cells (the page on uncertainty).
const OTHERS_OF_RESPONSE: f64 = 0.4;
/// Standard deviation of the logistic distribution of unit scale, π/√3.
const LOGISTIC_SIGMA: f64 = 1.813_799_364_234_218;
/// Largest deviate of the fine rule.
const FINE_REACH: f64 = 3.5;

/// Whether a cell is outside the model, or settled without solving its network.
pub(crate) enum Coverage {
    /// The model has rate constants for it.
    Covered,
    /// The model does not cover it, and why.
    Unknown(String),
    /// Nothing can happen, and the loss that says why.
    Nothing(Channel, String),
}

/// Whether the model covers a cell.
pub(crate) fn coverage(cell: &Cell) -> Coverage {
    if let Some(reason) = &cell.electrophile.not_covered {
        return Coverage::Unknown(format!("electrophile {}: {reason}", cell.electrophile.name));
    }
    if let Some(ElectrophileKind::Inert { reason }) =
        cell.electrophile.group.as_ref().map(|g| g.kind)
    {
        return Coverage::Nothing(Channel::SlowAttack, reason.to_owned());
    }
    if cell.substrate.carbon.is_empty() {
        return match &cell.substrate.heteroatom {
            Some(_) => Coverage::Nothing(
                Channel::CompetingAcid,
                "the substrate has no acidic C–H; its X–H takes the base".to_owned(),
            ),
            None => Coverage::Unknown(format!("substrate {}: no acidic C–H", cell.substrate.name)),
        };
    }
    if makes_alkene_of_ylide(&cell.substrate, &cell.electrophile) {
        return Coverage::Unknown(ALKENE_OF_YLIDE.to_owned());
    }
    if let Some(reason) = destroyed_by_solvent(cell) {
        return Coverage::Nothing(Channel::SolventLevelsBase, reason);
    }
    if cell.pair.by_site.iter().all(Option::is_none) {
        return Coverage::Unknown(NO_PRODUCT.to_owned());
    }
    Coverage::Covered
}

const ALKENE_OF_YLIDE: &str = "a phosphonate or phosphonium carbanion makes an alkene of a \
                               carbonyl compound, which is not covered";
const NO_PRODUCT: &str = "no product by one new bond at carbon could be drawn";

/// Why the model does not cover a substrate and an electrophile together, although it knows each
/// of them; none where it does, or where one of them is to blame alone.
pub(crate) fn pair_not_covered(
    substrate: &Substrate,
    electrophile: &Electrophile,
) -> Option<&'static str> {
    let group = electrophile.group.as_ref()?;
    if matches!(group.kind, ElectrophileKind::Inert { .. }) || substrate.carbon.is_empty() {
        return None;
    }
    if makes_alkene_of_ylide(substrate, electrophile) {
        return Some(ALKENE_OF_YLIDE);
    }
    let mut sites = substrate.carbon.iter();
    let is_drawn = sites.any(|site| {
        let (atom, reagent) = (site.acid.atom, &electrophile.molecule);
        c_product(&substrate.molecule, atom, reagent, group).is_ok()
    });
    (!is_drawn).then_some(NO_PRODUCT)
}

/// Whether the carbanion sits beside phosphorus and the electrophile is an aldehyde or ketone: the adduct loses
/// phosphate (Wittig reaction and its kin).
fn makes_alkene_of_ylide(substrate: &Substrate, electrophile: &Electrophile) -> bool {
    const PHOSPHORUS: u8 = 15;
    let is_carbonyl = matches!(
        electrophile.group.as_ref().map(|g| g.kind),
        Some(ElectrophileKind::Aldehyde { .. } | ElectrophileKind::Ketone { .. })
    );
    let molecule = &substrate.molecule;
    let site = substrate.carbon[0].acid.atom;
    let mut beside = molecule.neighbours(site).iter();
    is_carbonyl && beside.any(|&(atom, _)| molecule.atoms()[atom].element == PHOSPHORUS)
}

/// A solvent more acidic than a metal amide or alkyllithium by more than this destroys it at once.
const DESTROYED_PKA: f64 = 5.0;

/// Why the base never meets the substrate: nobody charges a metal amide or an alkyllithium into a
/// solvent that it deprotonates; what is left is the solvent's own anion, to be charged as such.
fn destroyed_by_solvent(cell: &Cell) -> Option<String> {
    use enolattice_reagents::{BaseKind, SolventClass};
    let record = &cell.base.record;
    if !matches!(
        record.kind,
        BaseKind::Amide | BaseKind::Organolithium | BaseKind::Grignard
    ) {
        return None;
    }
    let (acid, _) = cell.solvent.record.acid.as_ref()?;
    let gap = record.pka_dmso.value - acid.value;
    let is_destroyed = match cell.solvent.record.class {
        // hydrogen bonds to the alkoxide make hydroxylic solvents far more acidic than in DMSO
        SolventClass::Alcohol | SolventClass::Water => true,
        SolventClass::Hydrocarbon => false,
        _ => gap > DESTROYED_PKA,
    };
    is_destroyed.then(|| {
        format!(
            "{} is destroyed by {}: charge the anion of the solvent as base, or change the solvent",
            record.name, cell.solvent.record.name
        )
    })
}

/// The standard uncertainties of a cell's two main quantities.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Spread {
    /// pKa gap between base and substrate.
    pub(crate) acidity: f64,
    /// log10 k of the attack.
    pub(crate) attack: f64,
}

impl Spread {
    /// Shift of the site's pKa at the outer points of the three-point rule.
    pub(crate) fn acidity_node(&self) -> f64 {
        NODE * self.acidity
    }

    /// Site, base and medium add in squares; the attack has its anchor, the electrophile and steric terms.
    pub(crate) fn of(cell: &Cell) -> Spread {
        let site = &cell.substrate.carbon[0].acid;
        let medium = crate::parameters::hydrogen_bond(site.class).map_or(0.0, |p| {
            PARAMETERS[p as usize].sigma * cell.solvent.record.hydrogen_bond_donation / 1.17
        });
        let base = cell.base.record.pka_dmso.sigma;
        let acidity = (site.sigma * site.sigma + medium * medium + base * base).sqrt();
        let sigma = |p: P| PARAMETERS[p as usize].sigma;
        let attack = match &cell.electrophile.e {
            Some((_, sigma_e, _)) => {
                let s_n = PARAMETERS[P::MAYR_S_N as usize].mean;
                let n = sigma(P::MAYR_N_INTERCEPT);
                s_n * (n * n + sigma_e * sigma_e).sqrt()
            }
            None => sigma(P::SN2_ANCHOR).hypot(sigma(P::PAIRED_LITHIUM)),
        };
        Spread { acidity, attack }
    }
}

/// A cell solved with the fast solver at the mean of all parameters.
pub(crate) struct Solved {
    pub(crate) outcome: Outcome,
    /// Amounts at the end.
    pub(crate) end: Amounts,
}

/// Solves a cell's network at the mean of all parameters.
pub(crate) fn solve(cell: &Cell, values: &Values, pots: &Pots) -> Solved {
    let networks = Charge::of(cell).reacting(cell, values, [Nudge::default()]);
    let [end] = march(&networks, [pots.mean]);
    read(cell, values, &networks[0], &end, &pots.mean)
}

fn read(
    cell: &Cell,
    values: &Values,
    network: &Network,
    end: &Amounts,
    formed: &Amounts,
) -> Solved {
    let kinetics = Kinetics::new(
        cell,
        cell.conditions.temperature_c,
        values,
        Nudge::default(),
    );
    Solved {
        outcome: Outcome::read(cell, &kinetics, network, end, formed),
        end: *end,
    }
}

/// Solves a cell's network, its deprotonation included, at `values` and nudged.
pub(crate) fn solve_at(cell: &Cell, values: &Values, nudge: Nudge) -> Solved {
    let charge = Charge::of(cell);
    let mut pots = [charge.start()];
    if charge.forms_first() {
        pots = march(&charge.forming(cell, values, [nudge]), pots);
    }
    let networks = charge.reacting(cell, values, [nudge]);
    let [end] = march(&networks, pots);
    read(cell, values, &networks[0], &end, &pots[0])
}

/// Yields over the uncertainty of a cell.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Uncertain {
    /// Mean.
    pub(crate) mean: f64,
    /// Standard deviation.
    pub(crate) sigma: f64,
    /// Probability that the yield reaches the target.
    pub(crate) p_hit: f64,
}

/// Solves a cell at the mean and around it; mean, deviation and probability of a hit over the two
/// main uncertainties.
///
/// The network is solved at the centre and at ±√3 σ on each axis. Through the logits of the three
/// yields of an axis goes a piecewise line; the two axes add. Mean and probability are sums over
/// a fine grid of that surface, which costs no further solution. For the probability a distribution of what all other
/// parameters do stands around each point of it, unless a reagent that is short bounds the yield, which nothing changes.
pub(crate) fn over_uncertainty(
    cell: &Cell,
    values: &Values,
    pots: &Pots,
    target: f64,
) -> (Solved, Uncertain) {
    let spread = Spread::of(cell);
    let (acidity, attack) = (spread.acidity_node(), NODE * spread.attack);
    let nudge = |acidity, attack| Nudge { acidity, attack };
    let nudges = [
        Nudge::default(),
        nudge(-acidity, 0.0),
        nudge(acidity, 0.0),
        nudge(0.0, -attack),
        nudge(0.0, attack),
    ];
    let networks = Charge::of(cell).reacting(cell, values, nudges);
    let starts = [pots.mean, pots.lowered, pots.raised, pots.mean, pots.mean];
    let ends = march(&networks, starts);
    let centre = read(cell, values, &networks[0], &ends[0], &pots.mean);
    let wanted = centre.outcome.site;
    let logits = ends.map(|end| logit(end.product(wanted) / networks[0].charged[0]));
    let largest_loss = centre.outcome.losses.first().map(|loss| loss.0);
    let others = match largest_loss {
        Some(Channel::TooLittleReagent) => 0.0,
        _ => {
            let by_response = OTHERS_OF_RESPONSE * response(logits);
            (OTHERS * OTHERS + by_response * by_response).sqrt()
        }
    };
    let uncertain = average(logits, logit(target), others);
    (centre, uncertain)
}

/// By how much one standard uncertainty of the main quantity that matters more moves the logit.
fn response(logits: [f64; 5]) -> f64 {
    let [_, lowered, raised, slower, faster] = logits;
    (lowered - raised).abs().max((slower - faster).abs()) / (2.0 * NODE)
}

/// Averages over the surface of logits: centre, acidity down and up, attack down and up; `others` is the standard
/// deviation of the logit around it.
fn average(logits: [f64; 5], target: f64, others: f64) -> Uncertain {
    let middle = logits[0];
    let sharpness = LOGISTIC_SIGMA / (STEP_SIGMA * STEP_SIGMA + others * others).sqrt();
    let line = |z: f64, low: f64, high: f64| {
        if z < 0.0 {
            -z / NODE * (low - middle)
        } else {
            z / NODE * (high - middle)
        }
    };
    let (mut weights, mut mean, mut square, mut hit) = (0.0, 0.0, 0.0, 0.0);
    for i in 0..FINE {
        let (x, wx) = fine_point(i);
        let by_acidity = line(x, logits[1], logits[2]);
        for j in 0..FINE {
            let (y, wy) = fine_point(j);
            let value = middle + by_acidity + line(y, logits[3], logits[4]);
            let value = value.clamp(-LOGIT_BOUND, LOGIT_BOUND);
            let share = 1.0 / (1.0 + math::exp(-value));
            let w = wx * wy;
            weights += w;
            mean += w * share;
            square += w * share * share;
            // a step smoothed by the grid's spacing and by what else is uncertain
            hit += w / (1.0 + math::exp(-(value - target) * sharpness));
        }
    }
    let mean = mean / weights;
    let sigma = (square / weights - mean * mean).max(0.0).sqrt();
    Uncertain {
        mean,
        sigma,
        p_hit: (hit / weights).clamp(0.0, 1.0),
    }
}

fn fine_point(i: usize) -> (f64, f64) {
    let z = FINE_REACH * (2.0 * i as f64 / (FINE - 1) as f64 - 1.0);
    (z, math::exp(-0.5 * z * z))
}

fn logit(share: f64) -> f64 {
    if share <= 0.0 {
        -LOGIT_BOUND
    } else if share >= 1.0 {
        LOGIT_BOUND
    } else {
        math::ln(share / (1.0 - share)).clamp(-LOGIT_BOUND, LOGIT_BOUND)
    }
}

/// What stoichiometry and equilibria alone would allow, given time without end.
pub(crate) fn feasibility(cell: &Cell, kinetics: &Kinetics<'_>) -> f64 {
    let conditions = &cell.conditions;
    let (base, electrophile) = (conditions.base_equiv, conditions.electrophile_equiv);
    let site = &cell.substrate.carbon[0];
    let regenerated = kinetics.regenerates_base();
    let cap = electrophile
        .min(if regenerated { 1.0 } else { base })
        .min(1.0);
    match kinetics.addition_log10_k(site) {
        // an irreversible step carries the deprotonation along, as far as its driving force goes
        None => {
            let uphill = kinetics.site_pka(site) - kinetics.pka_base();
            cap / (1.0 + math::exp10(uphill - SUBSTITUTION_LOG10_K))
        }
        Some(log10_k) => {
            // the loss of water carries the addition along
            let dehydrates = cell
                .pair
                .by_site
                .first()
                .and_then(Option::as_ref)
                .is_some_and(|product| product.dehydrated.is_some());
            let condensation = kinetics.condensation_log10_k().filter(|_| dehydrates);
            let log10_k = condensation.unwrap_or(log10_k);
            // the adduct's anion is stabilised where it is the weaker base
            let gain = (kinetics.site_pka(site) - kinetics.adduct_pka(0)).max(0.0) * base.min(1.0);
            cap.min(addition_conversion(
                math::exp10(log10_k + gain),
                conditions.concentration_m,
                electrophile,
            ))
        }
    }
}

/// log10 K of a carbanion with an alkyl halide, about −20 kcal/mol (from memory).
const SUBSTITUTION_LOG10_K: f64 = 15.0;

/// Conversion x at equilibrium of S + E ⇌ P: `x = K·c·(1 − x)·(e − x)`.
fn addition_conversion(k: f64, concentration_m: f64, electrophile_equiv: f64) -> f64 {
    let kc = k * concentration_m;
    if kc > 1e12 {
        return electrophile_equiv.min(1.0);
    }
    let b = 1.0 + electrophile_equiv + 1.0 / kc;
    // the smaller root, in the form that keeps its digits
    2.0 * electrophile_equiv / (b + (b * b - 4.0 * electrophile_equiv).sqrt())
}

/// Screens one cell; `cautions` are its caution bits, which the caller has tabled.
pub(crate) fn score(
    cell: &Cell,
    values: &Values,
    yield_at_least: f64,
    cautions: u32,
    pots: impl FnOnce() -> Pots,
) -> Score {
    let nothing = |channel| Score {
        expected_yield: Some(0.0),
        p_hit: Some(0.0),
        selectivity: Some(0.0),
        feasibility: Some(0.0),
        largest_loss: Some(channel),
        cautions,
    };
    match coverage(cell) {
        Coverage::Unknown(_) => Score {
            cautions,
            ..Score::default()
        },
        Coverage::Nothing(channel, _) => nothing(channel),
        Coverage::Covered => {
            let kinetics = Kinetics::new(
                cell,
                cell.conditions.temperature_c,
                values,
                Nudge::default(),
            );
            let pots = pots();
            let (centre, uncertain) = if is_negligible(cell, &kinetics) {
                let centre = solve(cell, values, &pots);
                let mean = centre.outcome.product;
                (
                    centre,
                    Uncertain {
                        mean,
                        sigma: 0.0,
                        p_hit: 0.0,
                    },
                )
            } else {
                over_uncertainty(cell, values, &pots, yield_at_least)
            };
            Score {
                expected_yield: Some(uncertain.mean),
                p_hit: Some(uncertain.p_hit),
                selectivity: Some(centre.outcome.selectivity),
                feasibility: Some(feasibility(cell, &kinetics)),
                largest_loss: centre.outcome.losses.first().map(|loss| loss.0),
                cautions,
            }
        }
    }
}

/// Standard uncertainties by which a bound must miss before a cell counts as hopeless.
const HOPELESS_SIGMAS: f64 = 3.0;
/// log10 of the conversion below which nothing is worth averaging.
const HOPELESS_LOG10: f64 = -3.0;

/// Whether the wanted product stays negligible however the parameters fall: a cheap exact bound.
///
/// With every carbanion comes one molecule of the base's acid, so that at equilibrium
/// `[A] ≤ √(K·[S]·[B])`, and no more than all of the substrate; the conversion in time t is at most
/// `k·[E]·t·[A]/[S]₀`. Both are taken at three standard uncertainties on the hopeful side.
pub(crate) fn is_negligible(cell: &Cell, kinetics: &Kinetics<'_>) -> bool {
    let spread = Spread::of(cell);
    let conditions = &cell.conditions;
    let base = math::log10(conditions.base_equiv);
    let electrophile = math::log10(conditions.electrophile_equiv * conditions.concentration_m);
    let time = math::log10(conditions.time_h * 3600.0);
    let hope = |site: &crate::prepared::CarbonSite| {
        let log10_k =
            kinetics.pka_base() - kinetics.site_pka(site) + HOPELESS_SIGMAS * spread.acidity;
        let carbanion = (0.5 * (log10_k + base)).min(0.0);
        let attack = kinetics
            .attack(&kinetics.substrate_carbanion(site))
            .map_or(f64::NEG_INFINITY, |k| k + HOPELESS_SIGMAS * spread.attack);
        carbanion + attack + electrophile + time
    };
    kinetics.second_site().is_none()
        && cell
            .substrate
            .carbon
            .iter()
            .map(hope)
            .fold(f64::NEG_INFINITY, f64::max)
            < HOPELESS_LOG10
}

/// All cautions of a cell.
pub(crate) fn cautions_of(cell: &Cell) -> Vec<crate::Caution> {
    cautions(&cell.into())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Where the logit is linear in both quantities, it is normal with the sum of the variances: one standard deviation
    /// above the target stand 84.13 % of it, two below 2.28 %; the logistic distribution of the rest is off by 0.0185 at most
    /// there.
    #[test]
    fn probability_of_a_hit_is_that_of_a_normal_logit() {
        for (by_acidity, by_attack, others) in [(0.5, 1.0, 0.0), (0.2, 0.3, 1.0), (1.0, 1.5, 1.5)] {
            let sigma = [by_acidity, by_attack, others, STEP_SIGMA]
                .map(|part: f64| part * part)
                .iter()
                .sum::<f64>()
                .sqrt();
            for (above, share) in [(1.0, 0.8413), (0.0, 0.5), (-2.0, 0.0228)] {
                let middle = above * sigma;
                let axis = |slope: f64| [middle - NODE * slope, middle + NODE * slope];
                let ([a, b], [c, d]) = (axis(by_acidity), axis(by_attack));
                let found = average([middle, a, b, c, d], 0.0, others).p_hit;
                assert!((found - share).abs() < 0.02, "{above} σ: {found}");
            }
        }
    }
}
