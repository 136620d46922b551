//! The fields of a filter and what each compares.

use enolattice_model::{Addition, Category, Channel, Severity};

/// A field of a ranked cell.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Field {
    Substrate,
    Base,
    Electrophile,
    Solvent,
    Additive,
    TemperatureC,
    FormationTemperatureC,
    BaseEquiv,
    ElectrophileEquiv,
    AdditiveEquiv,
    ConcentrationM,
    TimeH,
    DosingMin,
    Addition,
    MeasuredYield,
    ExpectedYield,
    PHit,
    Selectivity,
    Feasibility,
    LargestLoss,
    Cautions,
    Severity,
}

/// What a field's values are.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    /// Names; compared whatever the case, `*` at an end stands for anything.
    Name,
    /// Any finite number.
    Number,
    /// A number from 0 to 1, which may be unknown.
    Fraction,
    /// A set of names.
    Set,
    /// Names in an order: none, note, warning, stop.
    Level,
}

impl Field {
    pub(super) const ALL: [(Field, &'static str, Kind); 22] = [
        (Field::Substrate, "substrate", Kind::Name),
        (Field::Base, "base", Kind::Name),
        (Field::Electrophile, "electrophile", Kind::Name),
        (Field::Solvent, "solvent", Kind::Name),
        (Field::Additive, "additive", Kind::Name),
        (Field::TemperatureC, "temperature_c", Kind::Number),
        (
            Field::FormationTemperatureC,
            "formation_temperature_c",
            Kind::Number,
        ),
        (Field::BaseEquiv, "base_equiv", Kind::Number),
        (Field::ElectrophileEquiv, "electrophile_equiv", Kind::Number),
        (Field::AdditiveEquiv, "additive_equiv", Kind::Number),
        (Field::ConcentrationM, "concentration_m", Kind::Number),
        (Field::TimeH, "time_h", Kind::Number),
        (Field::DosingMin, "dosing_min", Kind::Number),
        (Field::Addition, "addition", Kind::Name),
        // of names that are equally near to a misspelt one the last is offered: `yield` is expected
        (Field::MeasuredYield, "measured_yield", Kind::Fraction),
        (Field::ExpectedYield, "expected_yield", Kind::Fraction),
        (Field::PHit, "p_hit", Kind::Fraction),
        (Field::Selectivity, "selectivity", Kind::Fraction),
        (Field::Feasibility, "feasibility", Kind::Fraction),
        (Field::LargestLoss, "largest_loss", Kind::Name),
        (Field::Cautions, "cautions", Kind::Set),
        (Field::Severity, "severity", Kind::Level),
    ];

    pub(super) fn from_name(name: &str) -> Option<Field> {
        Self::ALL
            .iter()
            .find(|(_, known, _)| *known == name)
            .map(|(field, _, _)| *field)
    }

    pub(super) fn name(self) -> &'static str {
        Self::ALL[self as usize].1
    }

    pub(super) fn kind(self) -> Kind {
        Self::ALL[self as usize].2
    }

    /// The names that the field can have in any campaign; empty where the campaign decides.
    pub(super) fn vocabulary(self) -> Vec<&'static str> {
        match self {
            Field::Addition => Addition::ALL.iter().map(|order| order.name()).collect(),
            Field::LargestLoss => Channel::ALL.iter().map(|channel| channel.name()).collect(),
            Field::Cautions => Category::ALL
                .iter()
                .map(|category| category.name())
                .collect(),
            Field::Severity => LEVELS.iter().map(|(name, _)| *name).collect(),
            _ => Vec::new(),
        }
    }
}

/// Levels of severity by name, ascending.
pub(super) const LEVELS: [(&str, Option<Severity>); 4] = [
    ("none", None),
    ("note", Some(Severity::Note)),
    ("warning", Some(Severity::Warning)),
    ("stop", Some(Severity::Stop)),
];

/// A comparison.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Operator {
    Equal,
    NotEqual,
    Less,
    LessOrEqual,
    Greater,
    GreaterOrEqual,
    Has,
}

impl Operator {
    pub(super) fn sign(self) -> &'static str {
        match self {
            Operator::Equal => "=",
            Operator::NotEqual => "!=",
            Operator::Less => "<",
            Operator::LessOrEqual => "<=",
            Operator::Greater => ">",
            Operator::GreaterOrEqual => ">=",
            Operator::Has => ":",
        }
    }

    /// Whether a value compares so with another; `:` compares as `=`.
    pub(super) fn holds<T: PartialOrd>(self, value: T, with: T) -> bool {
        match self {
            Operator::Equal | Operator::Has => value == with,
            Operator::NotEqual => value != with,
            Operator::Less => value < with,
            Operator::LessOrEqual => value <= with,
            Operator::Greater => value > with,
            Operator::GreaterOrEqual => value >= with,
        }
    }
}

impl Kind {
    /// The operators that make sense.
    pub(super) fn operators(self) -> &'static [Operator] {
        use Operator::*;
        match self {
            Kind::Name => &[Equal, NotEqual, Has],
            Kind::Set => &[Has],
            Kind::Number | Kind::Fraction | Kind::Level => &[
                Equal,
                NotEqual,
                Less,
                LessOrEqual,
                Greater,
                GreaterOrEqual,
                Has,
            ],
        }
    }
}
