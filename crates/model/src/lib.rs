//! Acidity in the medium, proton balance, rates, channels, yield with uncertainty, cautions, reasons.
//!
//! Does no I/O and has never heard of jobs.

mod acidity;
mod cautions;
mod cell;
mod channel;
mod explanation;
mod prepared;
mod score;
mod screen;

pub use acidity::{
    AcidSite, Analogue, Analogues, Coefficient, Contribution, Form, Origin, Role, Uptake, acid_sites,
    coefficients, estimate,
};
pub use cautions::{Category, Caution, Severity};
pub use cell::{Addition, Cell, Conditions};
pub use channel::Channel;
pub use explanation::{Advice, CoursePoint, ExplainedRate, ExplainedSite, Explanation};
pub use prepared::{Base, Electrophile, MeasuredPka, Pair, Solvent, Substrate};
pub use score::Score;
pub use screen::{Fingerprint, Model, ModelError};
