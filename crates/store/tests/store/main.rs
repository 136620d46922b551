//! The store from outside: what it keeps, ranks and survives.

mod common;
mod crash;
mod damage;
mod jobs;
mod ranking;
