//! The known name that a misspelt one most likely means.

/// The nearest of the known names, if one is near enough to be offered.
///
/// A name of several words is also near where one of its words is: `yield` means `expected_yield`.
pub(crate) fn nearest<'a>(
    given: &str,
    known: impl IntoIterator<Item = &'a str>,
) -> Option<&'a str> {
    let given = given.to_lowercase();
    known
        .into_iter()
        .map(|name| (likeness(&given, &name.to_lowercase()), name))
        .filter(|(likeness, _)| *likeness >= 0.5)
        .max_by(|(a, _), (b, _)| a.total_cmp(b))
        .map(|(_, name)| name)
}

fn likeness(given: &str, name: &str) -> f64 {
    let words = name.split(['_', ' ', '-']).filter(|word| word.len() > 3);
    // A word alone counts less than the whole name, so that `base` is nearer to `base` than `base_equiv` is.
    let of_words = words.map(|word| 0.9 * strsim::normalized_damerau_levenshtein(given, word));
    of_words.fold(
        strsim::normalized_damerau_levenshtein(given, name),
        f64::max,
    )
}
