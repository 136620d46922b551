//! Tables of published values: tab-separated, with comments that begin with #.

use serde::de::DeserializeOwned;

/// The rows of a table.
///
/// # Errors
/// A sentence that names the line which cannot be read.
pub(crate) fn rows<T: DeserializeOwned>(text: &str) -> Result<Vec<T>, String> {
    csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(text.as_bytes())
        .deserialize()
        .map(|row| row.map_err(|error| error.to_string()))
        .collect()
}
