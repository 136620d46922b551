//! The program from outside: exit codes, streams, JSON, embedded and on a server.

mod campaigns;
mod care;
mod chemistry;
mod help;
mod program;
mod refusals;
mod server;
