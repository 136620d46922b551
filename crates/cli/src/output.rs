//! Data on stdout, talk on stderr.

use std::io::{self, Write};

use serde::Serialize;

use crate::fault::Fault;

/// Says something to the person at the terminal; never part of the data.
pub(crate) fn talk(text: &str) {
    // Nobody may be listening; then there is nobody to tell.
    let _ = writeln!(io::stderr().lock(), "{text}");
}

/// Writes text to stdout as it is, with an end of line.
pub(crate) fn print(text: &str) -> Result<(), Fault> {
    let mut out = io::stdout().lock();
    writeln!(out, "{}", text.trim_end_matches('\n'))?;
    Ok(out.flush()?)
}

/// Writes a value as JSON on one line.
pub(crate) fn print_json_line(value: &impl Serialize) -> Result<(), Fault> {
    print(&serde_json::to_string(value).map_err(unprintable)?)
}

/// Writes a value as JSON over several lines.
pub(crate) fn print_json(value: &impl Serialize) -> Result<(), Fault> {
    print(&serde_json::to_string_pretty(value).map_err(unprintable)?)
}

fn unprintable(error: serde_json::Error) -> Fault {
    Fault::service(format!("the answer cannot be written as JSON: {error}"))
}
