//! The store from outside: what it keeps, ranks and survives.

mod common;
mod damage;
mod jobs;
mod orders;
mod plans;
mod ranking;
