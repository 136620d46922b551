//! The store from outside: what it keeps, ranks and survives.

mod common;
mod copies;
mod damage;
mod health;
mod jobs;
mod orders;
mod plans;
mod ranking;
