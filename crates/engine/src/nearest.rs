//! The known name that a misspelt one most likely means.

/// The nearest of the known names, if one is near enough to be offered.
pub(crate) fn nearest<'a>(given: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let given = given.to_lowercase();
    known
        .into_iter()
        .map(|name| (strsim::normalized_damerau_levenshtein(&given, &name.to_lowercase()), name))
        .filter(|(likeness, _)| *likeness >= 0.5)
        .max_by(|(a, _), (b, _)| a.total_cmp(b))
        .map(|(_, name)| name)
}
