//! The keys of a campaign file and what was probably meant by a wrong word.

/// Key paths of a campaign file, table by table. `docs/campaign.md` has a row for each.
pub(crate) const KEYS: [&str; 48] = [
    "title",
    "library.file",
    "substrates.file",
    "substrates.smiles",
    "substrates.inline",
    "substrates.inline.name",
    "substrates.inline.smiles",
    "substrates.inline.pka_dmso",
    "substrates.inline.pka_sigma",
    "substrates.inline.stock_mg",
    "substrates.inline.stock_ml",
    "substrates.inline.supplied_concentration_m",
    "substrates.inline.price_per_g",
    "substrates.inline.price_per_ml",
    "substrates.inline.currency",
    "substrates.inline.lot",
    "substrates.inline.location",
    "bases.file",
    "bases.library",
    "electrophiles.file",
    "electrophiles.library",
    "electrophiles.smiles",
    "electrophiles.inline",
    "electrophiles.inline.name",
    "electrophiles.inline.smiles",
    "electrophiles.inline.stock_mg",
    "electrophiles.inline.stock_ml",
    "electrophiles.inline.supplied_concentration_m",
    "electrophiles.inline.price_per_g",
    "electrophiles.inline.price_per_ml",
    "electrophiles.inline.currency",
    "electrophiles.inline.lot",
    "electrophiles.inline.location",
    "solvents.file",
    "solvents.library",
    "additives.file",
    "additives.library",
    "conditions.temperature_c",
    "conditions.formation_temperature_c",
    "conditions.base_equiv",
    "conditions.electrophile_equiv",
    "conditions.additive_equiv",
    "conditions.concentration_m",
    "conditions.time_h",
    "conditions.dosing_min",
    "conditions.addition",
    "target.yield_at_least",
    "measured.file",
];

/// Names of the keys directly in a table; `""` is the top of the file, where tables count too.
pub(crate) fn keys_of(table: &str) -> Vec<&'static str> {
    let mut names: Vec<&str> = Vec::new();
    for key in KEYS {
        let below = match table {
            "" => Some(key),
            table => key
                .strip_prefix(table)
                .and_then(|rest| rest.strip_prefix('.')),
        };
        if let Some(name) = below.and_then(|rest| rest.split('.').next())
            && !names.contains(&name)
        {
            names.push(name);
        }
    }
    names
}

/// What to do about a key that its table does not have.
pub(crate) fn remedy_for_key(table: &str, key: &str) -> String {
    let names = keys_of(table);
    let elsewhere = KEYS.iter().filter_map(|path| path.rsplit_once('.'));
    let homes: Vec<String> = elsewhere
        .filter(|(_, name)| *name == key)
        .map(|(home, _)| format!("[{home}]"))
        .collect();
    if let Some(near) = nearest(key, names.iter().copied()) {
        format!("did you mean `{near}`?")
    } else if !homes.is_empty() {
        format!("`{key}` belongs in {}", homes.join(" or "))
    } else {
        format!("the keys here are {}", quoted(&names))
    }
}

/// The known word that a wrong one probably meant, whatever the case.
pub(crate) fn nearest<'k>(word: &str, known: impl IntoIterator<Item = &'k str>) -> Option<&'k str> {
    // below this similarity a suggestion misleads more than it helps
    const SIMILAR: f64 = 0.8;
    // nobody misspells a known word into one so long, and comparing takes its length squared
    const LONGEST: usize = 100;
    if word.len() > LONGEST {
        return None;
    }
    let word = word.to_lowercase();
    let mut best = None;
    let mut similarity = SIMILAR;
    for candidate in known {
        let likeness = strsim::jaro_winkler(&word, &candidate.to_lowercase());
        if likeness > similarity {
            (best, similarity) = (Some(candidate), likeness);
        }
    }
    best
}

/// Words in backquotes, separated by commas.
pub(crate) fn quoted(words: &[&str]) -> String {
    words
        .iter()
        .map(|word| format!("`{word}`"))
        .collect::<Vec<_>>()
        .join(", ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::FaultCode;
    use crate::conditions::{CONDITIONS, YIELD_AT_LEAST};

    const PAGE: &str = include_str!("../docs/campaign.md");

    /// Cells of the rows of the table under a heading of the page.
    fn table(heading: &str) -> Vec<Vec<&'static str>> {
        let (_, after) = PAGE.split_once(heading).expect("the page has the heading");
        let rows = after
            .lines()
            .skip_while(|line| !line.starts_with('|'))
            .skip(2);
        rows.take_while(|line| line.starts_with('|'))
            .map(|line| line.trim_matches('|').split('|').map(str::trim).collect())
            .collect()
    }

    #[test]
    fn the_page_has_a_row_for_each_key_and_no_other() {
        let documented: Vec<&str> = table("## Keys")
            .iter()
            .map(|row| row[0].trim_matches('`'))
            .collect();
        assert_eq!(documented, KEYS);
    }

    #[test]
    fn the_page_has_the_ranges_and_defaults_of_the_code() {
        for row in table("## Keys") {
            let key = row[0].trim_matches('`');
            let quantity = CONDITIONS
                .iter()
                .chain([&YIELD_AT_LEAST])
                .find(|q| q.key == key);
            if let Some(quantity) = quantity {
                assert!(row[1].contains(&quantity.to_string()), "{key}: {quantity}");
                if let Some(default) = quantity.default {
                    assert_eq!(row[2], default.to_string(), "{key}");
                }
            }
        }
    }

    #[test]
    fn the_page_has_a_row_for_each_reason_and_no_other() {
        let documented: Vec<&str> = table("## Reasons")
            .iter()
            .map(|row| row[0].trim_matches('`'))
            .collect();
        assert_eq!(documented, FaultCode::ALL.map(FaultCode::name));
    }

    #[test]
    fn a_wrong_key_is_led_to_the_right_one() {
        assert_eq!(
            remedy_for_key("conditions", "temperature"),
            "did you mean `temperature_c`?"
        );
        assert_eq!(remedy_for_key("", "base"), "did you mean `bases`?");
        assert_eq!(
            remedy_for_key("", "time_h"),
            "`time_h` belongs in [conditions]"
        );
        assert_eq!(
            remedy_for_key("bases", "smiles"),
            "`smiles` belongs in [substrates] or [substrates.inline] or [electrophiles] or [electrophiles.inline]"
        );
        assert_eq!(
            remedy_for_key("bases", "xyz"),
            "the keys here are `file`, `library`"
        );
    }
}
