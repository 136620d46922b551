//! A reagent of any kind, for lists and searches.

use crate::{Additive, Base, Hazards, NamedElectrophile, Solvent};

/// What a reagent is used as.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum ReagentKind {
    /// A base.
    Base,
    /// A solvent.
    Solvent,
    /// An electrophile.
    Electrophile,
    /// An additive.
    Additive,
}

impl ReagentKind {
    /// The name of its table, as in `# table: bases`.
    pub(crate) fn table(self) -> &'static str {
        match self {
            ReagentKind::Base => "bases",
            ReagentKind::Solvent => "solvents",
            ReagentKind::Electrophile => "electrophiles",
            ReagentKind::Additive => "additives",
        }
    }

    /// The word for it.
    pub fn name(self) -> &'static str {
        match self {
            ReagentKind::Base => "base",
            ReagentKind::Solvent => "solvent",
            ReagentKind::Electrophile => "electrophile",
            ReagentKind::Additive => "additive",
        }
    }
}

/// A row of one of the tables of reagents.
#[derive(Clone, Copy, Debug)]
pub enum Reagent<'a> {
    /// A base.
    Base(&'a Base),
    /// A solvent.
    Solvent(&'a Solvent),
    /// An electrophile.
    Electrophile(&'a NamedElectrophile),
    /// An additive.
    Additive(&'a Additive),
}

impl<'a> Reagent<'a> {
    /// What it is used as.
    pub fn kind(self) -> ReagentKind {
        match self {
            Reagent::Base(_) => ReagentKind::Base,
            Reagent::Solvent(_) => ReagentKind::Solvent,
            Reagent::Electrophile(_) => ReagentKind::Electrophile,
            Reagent::Additive(_) => ReagentKind::Additive,
        }
    }
    /// The trade's short name.
    pub fn name(self) -> &'a str {
        match self {
            Reagent::Base(b) => &b.name,
            Reagent::Solvent(s) => &s.name,
            Reagent::Electrophile(e) => &e.name,
            Reagent::Additive(a) => &a.name,
        }
    }
    /// Other names.
    pub fn synonyms(self) -> &'a [String] {
        match self {
            Reagent::Base(b) => &b.synonyms,
            Reagent::Solvent(s) => &s.synonyms,
            Reagent::Electrophile(e) => &e.synonyms,
            Reagent::Additive(a) => &a.synonyms,
        }
    }
    /// CAS registry number; empty where none is known.
    pub fn cas(self) -> &'a str {
        match self {
            Reagent::Base(b) => &b.cas,
            Reagent::Solvent(s) => &s.cas,
            Reagent::Electrophile(e) => &e.cas,
            Reagent::Additive(a) => &a.cas,
        }
    }
    /// SMILES as in the table.
    pub fn smiles(self) -> &'a str {
        match self {
            Reagent::Base(b) => &b.smiles,
            Reagent::Solvent(s) => &s.smiles,
            Reagent::Electrophile(e) => &e.smiles,
            Reagent::Additive(a) => &a.smiles,
        }
    }
    /// Hazard statements.
    pub fn hazards(self) -> &'a Hazards {
        match self {
            Reagent::Base(b) => &b.hazards,
            Reagent::Solvent(s) => &s.hazards,
            Reagent::Electrophile(e) => &e.hazards,
            Reagent::Additive(a) => &a.hazards,
        }
    }
    /// Name, synonyms and CAS number.
    pub(crate) fn names(self) -> impl Iterator<Item = &'a str> {
        let synonyms = self.synonyms().iter().map(String::as_str);
        std::iter::once(self.name())
            .chain(synonyms)
            .chain(std::iter::once(self.cas()))
    }
}
