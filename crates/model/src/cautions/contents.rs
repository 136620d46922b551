//! The cautions of one cell with their reasons.

use enolattice_molecule::Molecule;
use enolattice_reagents::{Additive, Base, Hazards, NamedElectrophile, Solvent};
use enolattice_units::{R_KJ, ZERO_CELSIUS_K};

use super::rule::{Rule, Seat};
use super::share::{ALONE, JOINT};
use super::statements::{hazard_statements, of_statements};
use super::traits::Traits;
use super::{Category, Caution, temperature};
use crate::Cell;

/// What a cell holds, as far as cautions ask.
#[derive(Clone, Copy, Debug)]
pub struct Contents<'a> {
    /// Base.
    pub base: &'a Base,
    /// Solvent.
    pub solvent: &'a Solvent,
    /// Electrophile.
    pub electrophile: &'a Molecule,
    /// The electrophile's row of the library: hazard statements and a boiling point.
    pub named: Option<&'a NamedElectrophile>,
    /// Substrate.
    pub substrate: &'a Molecule,
    /// Additive, if any.
    pub additive: Option<&'a Additive>,
    /// Temperature of the reaction, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C.
    pub formation_temperature_c: f64,
}

impl<'a> From<&'a Cell> for Contents<'a> {
    fn from(cell: &'a Cell) -> Contents<'a> {
        Contents {
            base: &cell.base.record,
            solvent: &cell.solvent.record,
            electrophile: &cell.electrophile.molecule,
            named: cell.electrophile.named.as_ref(),
            substrate: &cell.substrate.molecule,
            additive: cell.additive.as_ref().map(|additive| &additive.record),
            temperature_c: cell.conditions.temperature_c,
            formation_temperature_c: cell.conditions.formation_temperature_c,
        }
    }
}

/// A caution with what brought it, to leave out what another says better.
struct Found {
    seat: Option<Seat>,
    rule: Option<&'static Rule>,
    caution: Caution,
}

/// All cautions of a cell, severest first, then by category.
pub fn cautions(contents: &Contents<'_>) -> Vec<Caution> {
    let mut all = said(found(contents));
    all.sort_by(|a, b| {
        let severity = b.severity.cmp(&a.severity);
        severity
            .then(a.category.cmp(&b.category))
            .then_with(|| a.text.cmp(&b.text))
    });
    all.dedup();
    all
}

/// Cautions of an additive by itself, severest first.
pub fn additive_cautions(additive: &Additive) -> Vec<Caution> {
    let mut all = own(Seat::Additive, &additive.name, Some(&additive.hazards));
    all.extend(alone(
        Seat::Additive,
        &additive.name,
        Traits::of_additive(additive),
    ));
    let mut all = said(all);
    all.sort_by(|a, b| {
        b.severity
            .cmp(&a.severity)
            .then(a.category.cmp(&b.category))
    });
    all
}

impl Contents<'_> {
    /// What is known of the hazards of each reagent, a sentence each; unknown where nothing is.
    pub fn hazards(&self) -> Vec<String> {
        Seat::ALL
            .into_iter()
            .filter_map(|seat| Some(hazard_statements(self.name(seat)?, self.stated(seat))))
            .collect()
    }

    fn name(&self, seat: Seat) -> Option<&str> {
        match seat {
            Seat::Base => Some(&self.base.name),
            Seat::Solvent => Some(&self.solvent.name),
            Seat::Electrophile => Some(self.named.map_or("the electrophile", |named| &named.name)),
            Seat::Substrate => Some("the substrate"),
            Seat::Additive => self.additive.map(|additive| additive.name.as_str()),
        }
    }

    fn stated(&self, seat: Seat) -> Option<&Hazards> {
        match seat {
            Seat::Base => Some(&self.base.hazards),
            Seat::Solvent => Some(&self.solvent.hazards),
            Seat::Electrophile => self.named.map(|named| &named.hazards),
            Seat::Substrate => None,
            Seat::Additive => self.additive.map(|additive| &additive.hazards),
        }
    }

    fn coldest_c(&self) -> f64 {
        self.temperature_c.min(self.formation_temperature_c)
    }

    fn hottest_c(&self) -> f64 {
        self.temperature_c.max(self.formation_temperature_c)
    }

    fn traits(&self, seat: Seat) -> Traits {
        match seat {
            Seat::Base => Traits::of_base(self.base),
            Seat::Solvent => Traits::of_solvent_structure(self.solvent)
                .of_solvent_record(self.solvent, self.hottest_c()),
            Seat::Electrophile => Traits::of_molecule(self.electrophile),
            Seat::Substrate => Traits::of_molecule(self.substrate),
            Seat::Additive => self.additive.map(Traits::of_additive).unwrap_or_default(),
        }
    }

    /// The reason of a rule about several reagents, with their names.
    fn reason(&self, rule: &Rule) -> String {
        let t = rule.temperature_c(self.temperature_c, self.formation_temperature_c);
        let text = filled(rule).replace("{t}", &t.to_string());
        Seat::ALL.into_iter().fold(text, |text, seat| {
            text.replace(seat.placeholder(), self.name(seat).unwrap_or_default())
        })
    }
}

/// Everything that is found, whether or not it need be said.
fn found(contents: &Contents<'_>) -> Vec<Found> {
    let traits = Seat::ALL.map(|seat| contents.traits(seat));
    let mut all = Vec::new();
    for (seat, traits) in Seat::ALL.into_iter().zip(traits) {
        let Some(name) = contents.name(seat) else {
            continue;
        };
        all.extend(own(seat, name, contents.stated(seat)));
        all.extend(alone(seat, name, traits));
    }
    let (coldest_c, hottest_c) = (contents.coldest_c(), contents.hottest_c());
    let mut temperatures = temperature::of_solvent(contents.solvent, coldest_c, hottest_c);
    let named = contents.named;
    temperatures.extend(
        named.and_then(|named| temperature::of_electrophile(named, contents.temperature_c)),
    );
    all.extend(temperatures.into_iter().map(|caution| Found {
        seat: None,
        rule: None,
        caution,
    }));
    let applies = |rule: &&&'static Rule| {
        let t = rule.temperature_c(contents.temperature_c, contents.formation_temperature_c);
        let mut seats = Seat::ALL.into_iter().zip(traits);
        rule.allows_temperature(t) && seats.all(|(seat, traits)| rule.allows(seat, traits))
    };
    all.extend(JOINT.iter().filter(applies).map(|rule| Found {
        seat: None,
        rule: Some(rule),
        caution: caution(rule, contents.reason(rule)),
    }));
    all
}

/// Cautions of the hazard statements of one reagent.
fn own(seat: Seat, name: &str, hazards: Option<&Hazards>) -> Vec<Found> {
    let stated = hazards.map(|hazards| of_statements(name, hazards));
    let found = |caution| Found {
        seat: Some(seat),
        rule: None,
        caution,
    };
    stated.into_iter().flatten().map(found).collect()
}

/// Cautions of the rules about one reagent.
fn alone(seat: Seat, name: &str, traits: Traits) -> Vec<Found> {
    let rules = ALONE.iter().filter(|rule| traits.has_any(rule.anyone));
    let found = rules.map(|rule| Found {
        seat: Some(seat),
        rule: Some(rule),
        caution: caution(rule, filled(rule).replace("{reagent}", name)),
    });
    found.collect()
}

fn caution(rule: &Rule, text: String) -> Caution {
    Caution {
        category: rule.category,
        severity: rule.severity,
        text,
        source: rule.source.to_owned(),
    }
}

/// Leaves out what another says as severely: the rule that another stands instead of, and the rule
/// of thumb about a reagent whose hazard statements say the same.
fn said(found: Vec<Found>) -> Vec<Caution> {
    let is_said = |one: &Found| {
        let Some(rule) = one.rule else { return true };
        !found.iter().any(|other| match other.rule {
            Some(better) => {
                let of_the_same = other.seat.is_none() || one.seat == other.seat;
                better.instead_of == Some(rule.id) && of_the_same
            }
            None => {
                is_of_health(rule.category)
                    && one.seat.is_some()
                    && one.seat == other.seat
                    && other.caution.category == rule.category
                    && other.caution.severity >= rule.severity
            }
        })
    };
    let kept: Vec<bool> = found.iter().map(is_said).collect();
    let pairs = found.into_iter().zip(kept);
    pairs
        .filter(|(_, kept)| *kept)
        .map(|(one, _)| one.caution)
        .collect()
}

fn is_of_health(category: Category) -> bool {
    matches!(category, Category::Carcinogen | Category::AcutelyToxic)
}

/// Volume of gas per mmol at 25 °C and one atmosphere, mL: V = RT/p, the ideal gas.
pub(super) fn gas_ml_per_mmol() -> f64 {
    const ATMOSPHERE_KPA: f64 = 101.325;
    // a kJ/kPa is a m³, and a m³/mol is 1000 mL/mmol
    1e3 * R_KJ * (ZERO_CELSIUS_K + 25.0) / ATMOSPHERE_KPA
}

/// A reason with the volume of gas in it.
fn filled(rule: &Rule) -> String {
    rule.reason
        .replace("{gas_ml}", &format!("{:.0}", gas_ml_per_mmol()))
}

/// The ids of the rules that apply to a cell.
#[cfg(test)]
pub(super) fn rules_of(contents: &Contents<'_>) -> Vec<&'static str> {
    let rules = found(contents).into_iter().filter_map(|one| one.rule);
    rules.map(|rule| rule.id).collect()
}
