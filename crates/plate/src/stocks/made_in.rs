//! What a stock is made in.

use enolattice_grid::{FaultCode, InputError};
use enolattice_molecule::{AcylDonor, ElectrophileKind, recognise};
use enolattice_reagents::{Base, BaseKind, Library, Solvent, SolventClass, Supply};
use enolattice_units::math;

use crate::request::fault;
use crate::stocks::Form;
use crate::{Deck, Recipe, Role};

/// Most that is dissolved of a substance whose solubility nobody has told us, mol/L (common practice).
const USUAL_M: f64 = 1.0;
/// The same where another solvent has to be brought into the well: as little of it as can be.
const CONCENTRATED_M: f64 = 2.0;
/// Most base in a suspension that can be dispensed, mol/L (common practice).
const SUSPENDED_M: f64 = 1.0;
/// Of the solubility so much is used: a saturated stock crystallises.
const OF_SOLUBILITY: f64 = 0.8;
/// A stock must lose less than half of itself in this time, h.
const MUST_LAST_H: f64 = 12.0;

/// Solvents in which a reagent is dissolved that its well's solvent destroys, in order (common practice).
const OTHERS: [&str; 3] = ["THF", "toluene", "MeCN"];

/// What a stock is made in, and how strong it may be.
#[derive(Clone, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub(super) struct MadeIn {
    pub(super) solvent: String,
    pub(super) form: Form,
    /// umol/L, so that it can be compared.
    most: u64,
    bought: bool,
}

impl MadeIn {
    pub(super) fn new(solvent: &str, form: Form, most_m: f64) -> MadeIn {
        MadeIn {
            solvent: solvent.to_owned(),
            form,
            most: (most_m * 1e6).round() as u64,
            bought: form == Form::Bought,
        }
    }

    /// With no reason to give: it is made in the well's own solvent, or bought so.
    fn plainly(self) -> Chosen {
        Chosen {
            made_in: self,
            because: None,
        }
    }

    /// With the reason why it is not made in the well's own solvent.
    fn because(self, why: String) -> Chosen {
        Chosen {
            made_in: self,
            because: Some(why),
        }
    }

    pub(super) fn most_m(&self) -> f64 {
        self.most as f64 / 1e6
    }

    /// Concentration of the bought solution.
    pub(super) fn bought_m(&self) -> Option<f64> {
        self.bought.then(|| self.most_m())
    }
}

/// What a stock is made in, and why not in the solvent of the well that asked.
pub(super) struct Chosen {
    pub(super) made_in: MadeIn,
    pub(super) because: Option<String>,
}

/// Chooses what the stock of one role is made in.
pub(super) fn made_in(
    recipe: &Recipe,
    role: Role,
    volume_ul: f64,
    deck: &Deck,
    library: &Library,
    carrier: Option<&Solvent>,
) -> Result<Chosen, Box<InputError>> {
    let solvent = &recipe.cell.solvent.record;
    if let Some(carrier) = carrier.filter(|carrier| carries(carrier, recipe, role, volume_ul)) {
        let made_in = MadeIn::new(&carrier.name, Form::Solution, CONCENTRATED_M);
        return Ok(match carrier.name == solvent.name {
            true => made_in.plainly(),
            false => made_in.because("`well.carrier` asks for it".to_owned()),
        });
    }
    match role {
        Role::Base => {
            let needed_umol = recipe.amount_umol(role, volume_ul);
            of_base(
                &recipe.cell.base.record,
                solvent,
                needed_umol,
                volume_ul,
                deck,
                library,
            )
        }
        Role::Electrophile => {
            let molecule = &recipe.cell.electrophile.molecule;
            let kind = recognise(molecule).ok().map(|group| group.kind);
            Ok(match kind.filter(is_solvolysed) {
                Some(_) if is_protic(solvent) => {
                    MadeIn::new("MeCN", Form::Solution, CONCENTRATED_M)
                        .because(format!("{} would destroy it", solvent.name))
                }
                _ => of_organic(solvent),
            })
        }
        _ => Ok(of_organic(solvent)),
    }
}

/// Whether a carrier can hold what has a role: not a base that is bought in another solvent, does not dissolve in it or dies
/// in it, nor an electrophile that it takes up.
fn carries(carrier: &Solvent, recipe: &Recipe, role: Role, volume_ul: f64) -> bool {
    match role {
        Role::Base => {
            let base = &recipe.cell.base.record;
            let least_m = recipe.amount_umol(role, volume_ul) / (0.3 * volume_ul);
            let dissolves = base
                .log_solubility_for(carrier)
                .is_none_or(|log| OF_SOLUBILITY * math::exp10(log) >= least_m);
            base.supply != Supply::Solution && dissolves && lasts(base, carrier)
        }
        Role::Electrophile => {
            let group = recognise(&recipe.cell.electrophile.molecule);
            !(is_protic(carrier) && group.is_ok_and(|group| is_solvolysed(&group.kind)))
        }
        _ => true,
    }
}

/// Whether a base can stand in a solvent while a plate is filled.
fn lasts(base: &Base, solvent: &Solvent) -> bool {
    let takes_protons_at_once = matches!(
        base.kind,
        BaseKind::Hydride | BaseKind::Amide | BaseKind::Organolithium | BaseKind::Grignard
    );
    let half_life = half_life_h(base, solvent);
    !(takes_protons_at_once && is_protic(solvent))
        && half_life.is_none_or(|half_life| half_life > MUST_LAST_H)
}

/// What organic substances are dissolved in: the well's solvent, but for water.
fn of_organic(solvent: &Solvent) -> Chosen {
    let water = solvent
        .components()
        .filter(|part| part.class == SolventClass::Water)
        .map(|part| part.volume_fraction)
        .sum::<f64>();
    if water > 0.5 {
        return MadeIn::new("MeCN", Form::Solution, CONCENTRATED_M)
            .because(format!("{} dissolves too little", solvent.name));
    }
    MadeIn::new(&solvent.name, Form::Solution, USUAL_M).plainly()
}

fn of_base(
    base: &Base,
    solvent: &Solvent,
    needed_umol: f64,
    volume_ul: f64,
    deck: &Deck,
    library: &Library,
) -> Result<Chosen, Box<InputError>> {
    if let (Supply::Solution, Some(bought), Some(bought_in)) =
        (base.supply, base.supply_m, &base.supply_solvent)
    {
        return Ok(MadeIn::new(bought_in, Form::Bought, bought).plainly());
    }
    // the weakest stock that still fits the well
    let least_m = needed_umol / (0.6 * volume_ul);
    let dissolves = |solvent: &Solvent| match base.log_solubility_for(solvent) {
        None => Some(USUAL_M),
        Some(log) => Some(OF_SOLUBILITY * math::exp10(log)).filter(|most| *most >= least_m),
    };
    if lasts(base, solvent)
        && let Some(most) = dissolves(solvent)
    {
        return Ok(MadeIn::new(&solvent.name, Form::Solution, most.min(USUAL_M)).plainly());
    }
    if !lasts(base, solvent) {
        let others = OTHERS.iter().filter_map(|name| library.solvent(name));
        for other in others.filter(|other| other.name != solvent.name && lasts(base, other)) {
            if dissolves(other).is_some() {
                return Ok(MadeIn::new(&other.name, Form::Solution, CONCENTRATED_M)
                    .because(format!("{} destroys it", solvent.name)));
            }
        }
    }
    let suspended_in = match lasts(base, solvent) {
        true => Some(solvent.name.clone()),
        false => OTHERS
            .iter()
            .filter_map(|name| library.solvent(name))
            .find(|other| lasts(base, other))
            .map(|other| other.name.clone()),
    };
    if deck.slurries
        && deck.stirred
        && let Some(name) = suspended_in
    {
        let made_in = MadeIn::new(&name, Form::Suspension, SUSPENDED_M);
        return Ok(match name == solvent.name {
            true => made_in.plainly(),
            false => made_in.because(format!("{} destroys it", solvent.name)),
        });
    }
    let molar_mass = enolattice_reagents::molar_mass_g_mol(&base.formula).unwrap_or(0.0);
    let mass_mg = needed_umol * molar_mass / 1000.0;
    if deck.solids && mass_mg >= deck.smallest_mass_mg {
        return Ok(MadeIn::new("", Form::Solid, 0.0).plainly());
    }
    let reason = match deck.solids {
        true => format!(
            "does not dissolve in {} as it is needed, and {mass_mg:.2} mg a well are below the {} mg that the deck weighs",
            solvent.name, deck.smallest_mass_mg
        ),
        false => format!(
            "does not dissolve in {} as it is needed, and the deck dispenses neither suspensions nor solids",
            solvent.name
        ),
    };
    Err(Box::new(fault(
        FaultCode::PlanImpossible,
        "base",
        &base.name,
        reason,
        "declare `deck.slurries = true` (a stirred suspension), weigh it as coated beads, take a soluble base (an \
         amidine, guanidine or phosphazene), raise `well.volume_ul`, or veto it with `choice.limits` (`most = 0`)",
    )))
}

/// Half-life of a base in a medium at about 20 °C, h; none where none is known. Where it is known at another temperature, it
/// is halved for every 10 °C above and doubled for every 10 °C below (common practice).
pub(super) fn half_life_h(base: &Base, solvent: &Solvent) -> Option<f64> {
    const ROOM_C: f64 = 20.0;
    let parts = solvent.components();
    let of_part = |part: enolattice_reagents::Component<'_>| {
        let known = base.decay_in(&part).into_iter().min_by(|a, b| {
            let distance = |row: &enolattice_reagents::Decay| (row.temperature_c - ROOM_C).abs();
            distance(a).total_cmp(&distance(b))
        })?;
        let warmer_by = ROOM_C - known.temperature_c;
        Some(known.half_life_h * math::exp(-warmer_by / 10.0 * std::f64::consts::LN_2))
    };
    parts.filter_map(of_part).min_by(f64::total_cmp)
}

fn is_protic(solvent: &Solvent) -> bool {
    solvent.components().any(|part| part.class.is_protic())
}

/// Electrophiles that alcohols and water take up within the time that a stock stands (common practice).
fn is_solvolysed(kind: &ElectrophileKind) -> bool {
    match kind {
        ElectrophileKind::Acyl { donor, .. } => matches!(
            donor,
            AcylDonor::Halide
                | AcylDonor::Anhydride
                | AcylDonor::Azole
                | AcylDonor::Cyanide
                | AcylDonor::Chloroformate
                | AcylDonor::CarbamoylChloride
                | AcylDonor::ActiveEster
                | AcylDonor::Oxalate
                | AcylDonor::Sulfonyl
        ),
        ElectrophileKind::Silyl { .. } | ElectrophileKind::Cumulene { .. } => true,
        _ => false,
    }
}
