//! A rule: which reagents together make which caution, and who says so.

use super::traits::{Trait, Traits};
use super::{Category, Severity};

/// A condition on one reagent: any of the traits; empty for none.
type AnyOf = &'static [Trait];

/// A reagent's seat in the cell, as far as rules ask for it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Seat {
    Base,
    Solvent,
    Electrophile,
    Substrate,
    Additive,
}

impl Seat {
    pub(super) const ALL: [Seat; 5] = [
        Seat::Base,
        Seat::Solvent,
        Seat::Electrophile,
        Seat::Substrate,
        Seat::Additive,
    ];

    /// What a reason calls the reagent: `{base}` is replaced by its name.
    pub(super) fn placeholder(self) -> &'static str {
        match self {
            Seat::Base => "{base}",
            Seat::Solvent => "{solvent}",
            Seat::Electrophile => "{electrophile}",
            Seat::Substrate => "{substrate}",
            Seat::Additive => "{additive}",
        }
    }
}

/// One rule of the table.
///
/// A rule about one reagent (`anyone`) holds for whichever reagent of the cell has the trait; its
/// reason calls it `{reagent}`. Any other rule asks for one trait on each of its seats.
#[derive(Clone, Debug)]
pub(super) struct Rule {
    /// Name of the rule, for tests and the page of rules.
    pub(super) id: &'static str,
    pub(super) category: Category,
    pub(super) severity: Severity,
    /// Whichever reagent has one of these.
    pub(super) anyone: AnyOf,
    /// What each seat must have, in the order of [`Seat::ALL`].
    pub(super) seats: [AnyOf; 5],
    /// Only where the cell gets hotter than this, °C.
    pub(super) above_c: Option<f64>,
    /// Rule of the same category and less severity that is not said where this one is.
    pub(super) instead_of: Option<&'static str>,
    /// Reason, with placeholders.
    pub(super) reason: &'static str,
    /// A publication, `common practice` or `from memory`.
    pub(super) source: &'static str,
}

impl Rule {
    const fn new(id: &'static str, category: Category, severity: Severity) -> Rule {
        Rule {
            id,
            category,
            severity,
            anyone: &[],
            seats: [&[]; 5],
            above_c: None,
            instead_of: None,
            reason: "",
            source: "common practice",
        }
    }

    pub(super) const fn note(id: &'static str, category: Category) -> Rule {
        Rule::new(id, category, Severity::Note)
    }

    pub(super) const fn warning(id: &'static str, category: Category) -> Rule {
        Rule::new(id, category, Severity::Warning)
    }

    pub(super) const fn stop(id: &'static str, category: Category) -> Rule {
        Rule::new(id, category, Severity::Stop)
    }

    pub(super) const fn anyone(mut self, any_of: AnyOf) -> Rule {
        self.anyone = any_of;
        self
    }

    pub(super) const fn base(mut self, any_of: AnyOf) -> Rule {
        self.seats[Seat::Base as usize] = any_of;
        self
    }

    pub(super) const fn solvent(mut self, any_of: AnyOf) -> Rule {
        self.seats[Seat::Solvent as usize] = any_of;
        self
    }

    pub(super) const fn electrophile(mut self, any_of: AnyOf) -> Rule {
        self.seats[Seat::Electrophile as usize] = any_of;
        self
    }

    pub(super) const fn substrate(mut self, any_of: AnyOf) -> Rule {
        self.seats[Seat::Substrate as usize] = any_of;
        self
    }

    pub(super) const fn additive(mut self, any_of: AnyOf) -> Rule {
        self.seats[Seat::Additive as usize] = any_of;
        self
    }

    pub(super) const fn above_c(mut self, temperature_c: f64) -> Rule {
        self.above_c = Some(temperature_c);
        self
    }

    pub(super) const fn instead_of(mut self, milder: &'static str) -> Rule {
        self.instead_of = Some(milder);
        self
    }

    pub(super) const fn reason(mut self, reason: &'static str) -> Rule {
        self.reason = reason;
        self
    }

    pub(super) const fn source(mut self, source: &'static str) -> Rule {
        self.source = source;
        self
    }

    /// Whether it asks for one reagent alone, whatever the temperature.
    pub(super) fn is_of_one(&self) -> bool {
        !self.anyone.is_empty()
    }

    /// Whether the reagent on this seat leaves the rule open.
    pub(super) fn allows(&self, seat: Seat, traits: Traits) -> bool {
        let any_of = self.seats[seat as usize];
        any_of.is_empty() || traits.has_any(any_of)
    }

    /// The temperature that counts, °C: an electrophile is there at the temperature of the reaction
    /// alone, everything else at that of the deprotonation too.
    pub(super) fn temperature_c(&self, reaction_c: f64, formation_c: f64) -> f64 {
        if self.seats[Seat::Electrophile as usize].is_empty() {
            reaction_c.max(formation_c)
        } else {
            reaction_c
        }
    }

    /// Whether the temperature leaves the rule open.
    pub(super) fn allows_temperature(&self, temperature_c: f64) -> bool {
        self.above_c.is_none_or(|above| temperature_c > above)
    }
}
