//! Acidity in the medium, proton balance, rates, channels, yield with uncertainty, cautions, reasons.
//!
//! Does no I/O and has never heard of jobs.

mod acidity;
mod advice;
mod balance;
mod bonding;
mod carbonyl;
mod cautions;
mod cell;
mod channel;
mod comparison;
mod draws;
mod electrophilicity;
mod explain;
mod explanation;
mod features;
mod formation;
mod kinetics;
mod lanes;
mod march;
mod medium;
mod model;
mod network;
mod outcome;
mod parameters;
mod prepared;
mod program;
#[cfg(test)]
mod properties;
mod rates;
mod reactions;
mod reference;
#[cfg(test)]
mod sample;
mod score;
mod screen;
mod substitution;

pub use acidity::{
    AcidSite, Coefficient, Contribution, Coverage, Form, Neighbour, Origin, Role, SiteReasons,
    Term, Uptake, acid_sites, coefficients, estimate, local_sigma, reasons, similarity,
};
pub use balance::{Acid, Forms, proton_balance};
pub use cautions::{
    Category, Caution, CautionShare, Contents, Severity, additive_cautions, caution_bits, cautions,
    hazard_statements, join_caution_bits,
};
pub use cell::{Addition, Cell, Conditions};
pub use channel::Channel;
pub use comparison::{PlainNetwork, Solution, Solutions, Step, Stretch};
pub use draws::{Doubt, Draw};
pub use explanation::{
    Advice, CoursePoint, ExplainedProduct, ExplainedRate, ExplainedSite, Explanation, Fate,
};
pub use formation::FormationTable;
pub use medium::{Onium, OniumKind};
pub use model::{Fingerprint, Model, ModelError};
pub use parameters::Parameter;
pub use prepared::{Additive, Base, Electrophile, MeasuredPka, Pair, Solvent, Substrate};
pub use score::Score;
