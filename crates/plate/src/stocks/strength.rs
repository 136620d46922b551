//! How concentrated a stock is.

use enolattice_grid::{FaultCode, InputError};

use crate::request::fault;
use crate::stocks::MadeIn;
use crate::{Deck, Role};

/// Share of a reaction's volume that the stock of a role may take (common practice: a third each for substrate and base).
fn share(role: Role) -> f64 {
    match role {
        Role::Substrate | Role::Base => 0.3,
        Role::Electrophile => 0.25,
        _ => 0.15,
    }
}

/// What wells need of a reagent in one solvent.
pub(super) struct Needs<'a> {
    pub(super) role: Role,
    pub(super) reagent: &'a str,
    pub(super) made_in: &'a MadeIn,
    pub(super) amounts_umol: Vec<f64>,
}

/// Concentrations of the stocks of one reagent: one, or a strong and a diluted one.
#[derive(Debug, PartialEq)]
pub(super) struct Strengths {
    pub(super) concentrations_m: Vec<f64>,
    smallest_nl: f64,
}

impl Strengths {
    /// The stock from which this amount is taken: the strongest whose volume can be transferred.
    pub(super) fn of(&self, amount_umol: f64) -> f64 {
        let can = |c: &&f64| 1000.0 * amount_umol / **c >= self.smallest_nl * (1.0 - 1e-9);
        let mut stocks = self.concentrations_m.iter();
        let last = self.concentrations_m[self.concentrations_m.len() - 1];
        *stocks.find(can).unwrap_or(&last)
    }
}

/// Chooses the concentrations.
///
/// The strongest well must fit its share of the reaction's volume, the weakest must be transferable. Where one stock
/// cannot do both, wells that need little draw on a dilution of it.
pub(super) fn strengths(
    needs: &Needs<'_>,
    volume_ul: f64,
    deck: &Deck,
) -> Result<Strengths, Box<InputError>> {
    let most = needs.amounts_umol.iter().copied().fold(0.0, f64::max);
    let least = needs
        .amounts_umol
        .iter()
        .copied()
        .fold(f64::INFINITY, f64::min);
    let room_ul = share(needs.role) * volume_ul;
    let from_room = most / room_ul;
    let limit = needs.made_in.most_m();
    let strongest = match needs.made_in.bought_m() {
        Some(bought) => bought,
        None => rounded_up(from_room).min(limit),
    };
    if 1000.0 * most / strongest > 1000.0 * room_ul * 2.0 {
        return Err(Box::new(too_weak(needs, most / strongest, limit)));
    }
    let transferable = 1000.0 * least / deck.smallest_nl;
    let concentrations_m = if strongest <= transferable {
        vec![strongest]
    } else if rounded_down(transferable) >= from_room {
        vec![rounded_down(transferable)]
    } else {
        let dilute = rounded_down(transferable);
        let by_dilute = needs
            .amounts_umol
            .iter()
            .filter(|amount| 1000.0 * **amount / strongest < deck.smallest_nl);
        let most_by_dilute = by_dilute.copied().fold(0.0, f64::max);
        if dilute <= 0.0 || most_by_dilute / dilute > 2.0 * room_ul {
            return Err(Box::new(too_small(needs, 1000.0 * least / strongest, deck)));
        }
        vec![strongest, dilute]
    };
    Ok(Strengths {
        concentrations_m,
        smallest_nl: deck.smallest_nl,
    })
}

fn too_weak(needs: &Needs<'_>, volume_ul: f64, limit_m: f64) -> InputError {
    fault(
        FaultCode::PlanImpossible,
        needs.role.name(),
        needs.reagent,
        format!(
            "a well would need {volume_ul:.1} uL of its solution in {}, which holds {limit_m:.3} mol/L at most",
            needs.made_in.solvent
        ),
        "declare `deck.slurries = true`, choose a more soluble reagent, screen at a lower concentration, or veto it \
         with `choice.limits` (`most = 0`)",
    )
}

fn too_small(needs: &Needs<'_>, volume_nl: f64, deck: &Deck) -> InputError {
    fault(
        FaultCode::PlanImpossible,
        needs.role.name(),
        needs.reagent,
        format!(
            "a well needs {volume_nl:.0} nL, below the smallest transfer of {:.0} nL, and no dilution serves all wells",
            deck.smallest_nl
        ),
        "raise `well.volume_ul`, or plan wells of similar equivalents together",
    )
}

/// Two digits, upwards: what is weighed for a round number is easier to read off.
fn rounded_up(value: f64) -> f64 {
    let unit = unit_of(value);
    (value / unit - 1e-9).ceil() * unit
}

fn rounded_down(value: f64) -> f64 {
    let unit = unit_of(value);
    (value / unit + 1e-9).floor() * unit
}

/// The place of the second digit.
fn unit_of(value: f64) -> f64 {
    10f64.powi(value.abs().max(1e-12).log10().floor() as i32 - 1)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::stocks::Form;

    fn needs(made_in: &MadeIn, amounts_umol: Vec<f64>) -> Needs<'_> {
        Needs {
            role: Role::Base,
            reagent: "a base",
            made_in,
            amounts_umol,
        }
    }

    #[test]
    fn the_largest_dose_fits_its_share_and_the_smallest_can_be_transferred() {
        let made_in = MadeIn::new("THF", Form::Solution, 2.0);
        let deck = Deck::default();
        // 22 umol into 0.3 · 100 uL: 0.734 mol/L
        let one = strengths(&needs(&made_in, vec![22.0, 11.0]), 100.0, &deck).expect("one stock");
        assert_eq!(one.concentrations_m, [0.74]);
        // 0.02 umol of 0.74 mol/L are 27 nL: that well draws on a dilution of which 500 nL hold it
        let two = strengths(&needs(&made_in, vec![22.0, 0.02]), 100.0, &deck).expect("two stocks");
        assert_eq!(two.concentrations_m.len(), 2);
        assert!(1000.0 * 0.02 / two.of(0.02) >= deck.smallest_nl);
        assert_eq!(two.of(22.0), 0.74);
    }

    #[test]
    fn a_stock_that_would_not_dissolve_is_refused_with_the_way_out() {
        let made_in = MadeIn::new("THF", Form::Solution, 0.05);
        let refused = strengths(&needs(&made_in, vec![22.0]), 100.0, &Deck::default());
        let refused = refused.expect_err("too weak").to_string();
        assert!(
            refused.contains("440.0 uL") && refused.contains("slurries"),
            "{refused}"
        );
    }
}
