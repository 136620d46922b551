//! System tests: a real server with a real client, crash runs, the direction of the crates.
//!
//! What needs Python is in `python/`.

mod agreement;
mod campaigns;
mod crash;
mod damage;
mod directions;
mod hostile;
mod kills;
mod lifecycle;
mod live;
mod maps;
mod plans;
mod portable;
mod queue;
mod random_plans;
mod ranking;
mod refusals;
mod reports;
mod standards;
