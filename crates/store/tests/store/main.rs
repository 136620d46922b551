//! The store from outside: what it keeps, ranks and survives.

mod common;
mod damage;
mod jobs;
mod plans;
mod ranking;
