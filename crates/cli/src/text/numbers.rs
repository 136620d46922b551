//! Numbers as a chemist reads them.

/// A fraction in percent; `unknown` where there is none.
pub(crate) fn percent(fraction: Option<f64>) -> String {
    fraction.map_or_else(
        || "unknown".to_owned(),
        // + 0.0 takes the sign off a zero
        |fraction| format!("{:.1} %", (1000.0 * fraction).round() / 10.0 + 0.0),
    )
}

/// A count with thousands apart.
pub(crate) fn count(number: u64) -> String {
    indicatif::HumanCount(number).to_string()
}

/// A number with as many decimals as it needs, at most three, and a true minus sign.
pub(super) fn short(number: f64) -> String {
    let rounded = format!("{number:.3}");
    let trimmed = rounded.trim_end_matches('0').trim_end_matches('.');
    minus(if trimmed == "-0" { "0" } else { trimmed })
}

/// A number with fixed decimals; `unknown` where there is none.
pub(super) fn fixed(number: Option<f64>, decimals: usize) -> String {
    number.map_or_else(
        || "unknown".to_owned(),
        |number| minus(&format!("{number:.decimals$}")),
    )
}

/// The program of temperatures: that of the deprotonation first where it is another.
pub(super) fn temperatures(formation_c: f64, reaction_c: f64) -> String {
    if formation_c == reaction_c {
        short(reaction_c)
    } else {
        format!("{} → {}", short(formation_c), short(reaction_c))
    }
}

fn minus(text: &str) -> String {
    text.replace('-', "−")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_read_as_on_paper() {
        for (number, text) in [
            (-78.0, "−78"),
            (0.2, "0.2"),
            (25.0, "25"),
            (1.0 / 3.0, "0.333"),
            (-0.0001, "0"),
        ] {
            assert_eq!(short(number), text);
        }
        assert_eq!(percent(Some(0.8314)), "83.1 %");
        assert_eq!(percent(Some(-1e-9)), "0.0 %");
        assert_eq!(percent(None), "unknown");
        assert_eq!(temperatures(-78.0, 25.0), "−78 → 25");
        assert_eq!(count(1_234_567), "1,234,567");
    }
}
