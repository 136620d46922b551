//! Hazards of a cell.
//!
//! What is known to be dangerous is said; what is not said is not known. Nothing here calls
//! anything safe: safety data sheets, local rules and qualified staff decide.
//!
//! Rules stand as data in `rules/`; they ask for traits of the reagents (`traits/`) that are read
//! off structures and records. A screen asks each reagent once for its [`CautionShare`] and joins
//! the shares cell by cell; an explanation asks for [`cautions`] with their reasons.

mod contents;
mod phrases;
mod rule;
mod rules;
mod share;
mod statements;
mod temperature;
mod traits;

pub use contents::{Contents, additive_cautions, cautions};
pub use share::CautionShare;
pub use statements::hazard_statements;

/// Category of a caution.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
#[repr(u8)]
pub enum Category {
    /// A reaction that may run away.
    Runaway = 0,
    /// A violent reaction of a pair.
    Violent = 1,
    /// Gas is given off.
    Gas = 2,
    /// Catches fire in air.
    Pyrophoric = 3,
    /// May explode.
    Explosive = 4,
    /// Carcinogen, mutagen or suspected.
    Carcinogen = 5,
    /// Acutely toxic.
    AcutelyToxic = 6,
    /// Flammable.
    Flammable = 7,
    /// Forms peroxides.
    PeroxideFormer = 8,
    /// Above a boiling point.
    AboveBoilingPoint = 9,
    /// Below a melting point.
    BelowMeltingPoint = 10,
}

impl Category {
    /// All categories, by number.
    pub const ALL: [Category; 11] = [
        Category::Runaway,
        Category::Violent,
        Category::Gas,
        Category::Pyrophoric,
        Category::Explosive,
        Category::Carcinogen,
        Category::AcutelyToxic,
        Category::Flammable,
        Category::PeroxideFormer,
        Category::AboveBoilingPoint,
        Category::BelowMeltingPoint,
    ];

    /// The category's name as it is printed and filtered.
    pub fn name(self) -> &'static str {
        match self {
            Category::Runaway => "runaway",
            Category::Violent => "violent",
            Category::Gas => "gas",
            Category::Pyrophoric => "pyrophoric",
            Category::Explosive => "explosive",
            Category::Carcinogen => "carcinogen",
            Category::AcutelyToxic => "acutely toxic",
            Category::Flammable => "flammable",
            Category::PeroxideFormer => "peroxide former",
            Category::AboveBoilingPoint => "above boiling point",
            Category::BelowMeltingPoint => "below melting point",
        }
    }

    /// The category's bit in [`crate::Score::cautions`].
    pub fn bit(self) -> u32 {
        1 << self as u32
    }
}

/// How severe a caution is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
#[repr(u8)]
pub enum Severity {
    /// To be known.
    Note = 1,
    /// To be acted on.
    Warning = 2,
    /// Never on a plate unless the campaign says so by name.
    Stop = 3,
}

impl Severity {
    /// All severities, ascending.
    pub const ALL: [Severity; 3] = [Severity::Note, Severity::Warning, Severity::Stop];

    /// The severity's name as it is printed and filtered.
    pub fn name(self) -> &'static str {
        match self {
            Severity::Note => "note",
            Severity::Warning => "warning",
            Severity::Stop => "stop",
        }
    }

    /// The severity in the two highest bits of [`crate::Score::cautions`].
    pub fn bits(self) -> u32 {
        (self as u32) << 30
    }

    /// The highest severity in [`crate::Score::cautions`]; none without cautions.
    pub fn from_bits(cautions: u32) -> Option<Severity> {
        Severity::ALL
            .into_iter()
            .find(|severity| severity.bits() == cautions & (3 << 30))
    }
}

/// A hazard of the cell.
#[derive(Clone, Debug, PartialEq)]
pub struct Caution {
    /// Category.
    pub category: Category,
    /// Severity.
    pub severity: Severity,
    /// Reason, for a person.
    pub text: String,
    /// Who says so: a publication, a table of the library, `common practice` or `from memory`.
    pub source: String,
}

impl Caution {
    fn note(category: Category, text: impl Into<String>, source: &str) -> Caution {
        Caution {
            category,
            severity: Severity::Note,
            text: text.into(),
            source: source.to_owned(),
        }
    }

    fn warning(category: Category, text: impl Into<String>, source: &str) -> Caution {
        Caution {
            severity: Severity::Warning,
            ..Caution::note(category, text, source)
        }
    }
}

/// The bits of cautions: those of their categories and the highest severity.
pub fn caution_bits(cautions: &[Caution]) -> u32 {
    let bits = cautions
        .iter()
        .map(|caution| caution.category.bit() | caution.severity.bits());
    bits.fold(0, join_caution_bits)
}

/// The bits of two sets of cautions together: categories are joined, the higher severity stays.
pub fn join_caution_bits(a: u32, b: u32) -> u32 {
    const SEVERITY: u32 = 3 << 30;
    ((a | b) & !SEVERITY) | (a & SEVERITY).max(b & SEVERITY)
}

#[cfg(test)]
mod tests;
