//! Numbers and dates as they are read on paper.

use chrono::DateTime;

/// A share in whole percent; `unknown` where there is none.
///
/// What rounds to nothing or to everything says so: `< 1 %`, `> 99 %`.
pub(crate) fn percent(share: Option<f64>) -> String {
    share.map_or_else(
        || "unknown".to_owned(),
        |share| format!("{}\u{202f}%", whole(share)),
    )
}

/// The number of [`percent`] without its sign, for where there is no room; `?` where it is unknown.
pub(crate) fn bare_percent(share: Option<f64>) -> String {
    share.map_or_else(
        || "?".to_owned(),
        |share| format!("{:.0}", 100.0 * share + 0.0),
    )
}

fn whole(share: f64) -> String {
    let percent = 100.0 * share;
    if percent > 99.0 && percent < 99.95 {
        "> 99".to_owned()
    } else if percent > 0.05 && percent < 1.0 {
        "< 1".to_owned()
    } else {
        // + 0.0 takes the sign off a zero
        format!("{:.0}", percent.round() + 0.0)
    }
}

/// A count with its thousands apart.
pub(crate) fn count(number: u64) -> String {
    let digits = number.to_string();
    let mut text = String::new();
    for (i, digit) in digits.chars().enumerate() {
        if i > 0 && (digits.len() - i).is_multiple_of(3) {
            text.push(',');
        }
        text.push(digit);
    }
    text
}

/// A count with its noun: `1 cell`, `2 cells`.
pub(crate) fn counted(number: u64, noun: &str) -> String {
    let s = if number == 1 { "" } else { "s" };
    format!("{} {noun}{s}", count(number))
}

/// A number with as many decimals as it needs, at most three, and a true minus sign.
pub(crate) fn short(number: f64) -> String {
    let rounded = format!("{number:.3}");
    let trimmed = rounded.trim_end_matches('0').trim_end_matches('.');
    minus(if trimmed == "-0" { "0" } else { trimmed })
}

/// A number with fixed decimals and a true minus sign.
pub(crate) fn fixed(number: f64, decimals: usize) -> String {
    minus(&format!("{number:.decimals$}"))
}

fn minus(text: &str) -> String {
    text.replace('-', "\u{2212}")
}

/// A temperature, with that of the deprotonation first where it is another.
pub(crate) fn temperatures(formation_c: f64, reaction_c: f64) -> String {
    if formation_c == reaction_c {
        format!("{} °C", short(reaction_c))
    } else {
        format!("{} → {} °C", short(formation_c), short(reaction_c))
    }
}

/// A time in the unit in which it is read best.
pub(crate) fn time(seconds: f64) -> String {
    match seconds.abs() {
        s if s < 120.0 => format!("{} s", fixed(seconds, 0)),
        s if s < 7_200.0 => format!("{} min", fixed(seconds / 60.0, 0)),
        _ => format!("{} h", short((seconds / 360.0).round() / 10.0)),
    }
}

/// A time in UTC from milliseconds since 1970: `2026-12-02 05:10 UTC`; `unknown` for one that no calendar has.
pub(crate) fn date(unix_ms: u64) -> String {
    let time = i64::try_from(unix_ms)
        .ok()
        .and_then(DateTime::from_timestamp_millis);
    time.map_or("unknown".to_owned(), |time| {
        time.format("%Y-%m-%d %H:%M UTC").to_string()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Dates by the Unix command `date -u`.
    #[test]
    fn dates_are_those_of_the_calendar() {
        for (seconds, text) in [
            (0, "1970-01-01 00:00 UTC"),
            (951_782_399, "2000-02-28 23:59 UTC"),
            (951_782_400, "2000-02-29 00:00 UTC"),
            (4_107_542_400, "2100-03-01 00:00 UTC"),
            (1_796_187_000, "2026-12-02 04:50 UTC"),
        ] {
            assert_eq!(date(seconds * 1000), text);
        }
    }

    #[test]
    fn numbers_read_as_on_paper() {
        assert_eq!(percent(Some(0.834)), "83\u{202f}%");
        assert_eq!(percent(Some(0.998)), "> 99\u{202f}%");
        assert_eq!(percent(Some(1.0)), "100\u{202f}%");
        assert_eq!(percent(Some(0.004)), "< 1\u{202f}%");
        assert_eq!(percent(Some(-1e-9)), "0\u{202f}%");
        assert_eq!(percent(None), "unknown");
        assert_eq!(count(1_234_567), "1,234,567");
        assert_eq!(counted(1, "cell"), "1 cell");
        assert_eq!(short(-78.0), "\u{2212}78");
        assert_eq!(temperatures(-78.0, 25.0), "\u{2212}78 → 25 °C");
        assert_eq!(
            [time(-1_800.0), time(50.0), time(57_600.0)],
            ["\u{2212}30 min", "50 s", "16 h"]
        );
    }
}
