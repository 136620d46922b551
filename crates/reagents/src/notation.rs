//! How registry numbers, hazard statements and dates are written.

/// Whether the text has the form of a CAS number and its check digit is right.
///
/// The check digit is the sum of the other digits, each times its place from the
/// right, modulo 10.
pub(crate) fn cas_is_valid(cas: &str) -> bool {
    let parts: Vec<&str> = cas.split('-').collect();
    let [head, middle, check] = parts[..] else {
        return false;
    };
    let lengths_fit = (2..=7).contains(&head.len()) && middle.len() == 2 && check.len() == 1;
    if !lengths_fit || !parts.concat().bytes().all(|b| b.is_ascii_digit()) {
        return false;
    }
    let digits = head
        .bytes()
        .chain(middle.bytes())
        .rev()
        .map(|b| u32::from(b - b'0'));
    let sum: u32 = (1..).zip(digits).map(|(place, digit)| place * digit).sum();
    sum % 10 == u32::from(check.as_bytes()[0] - b'0')
}

/// Whether the text is `H`, three digits that begin with 2, 3 or 4, and perhaps letters.
pub(crate) fn h_code_is_valid(code: &str) -> bool {
    let Some((digits, letters)) = code.strip_prefix('H').and_then(|c| c.split_at_checked(3)) else {
        return false;
    };
    digits.starts_with(['2', '3', '4'])
        && digits.bytes().all(|b| b.is_ascii_digit())
        && letters
            .bytes()
            .all(|b| matches!(b, b'D' | b'F' | b'd' | b'f' | b'i'))
}

/// Whether the text is a month, `YYYY-MM`.
pub(crate) fn month_is_valid(text: &str) -> bool {
    let digits = |text: &str| text.bytes().all(|b| b.is_ascii_digit());
    text.split_once('-').is_some_and(|(year, month)| {
        year.len() == 4
            && digits(year)
            && month.len() == 2
            && digits(month)
            && ("01"..="12").contains(&month)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cas_numbers_are_told_by_their_check_digit() {
        for cas in ["109-99-9", "7732-18-5", "1145881-09-9"] {
            assert!(cas_is_valid(cas), "{cas}");
        }
        for text in [
            "109-99-8", "109999", "1-99-9", "109-99-", "a09-99-9", "", "é-99-9",
        ] {
            assert!(!cas_is_valid(text), "{text}");
        }
    }

    #[test]
    fn h_codes_are_told_from_other_text() {
        for code in ["H225", "H360FD", "H361d", "H350i"] {
            assert!(h_code_is_valid(code), "{code}");
        }
        for text in ["P210", "H22", "H525", "H2255", "H225x", "225", "", "Hé25"] {
            assert!(!h_code_is_valid(text), "{text}");
        }
    }

    #[test]
    fn months_are_told_from_other_text() {
        for month in ["2026-12", "1999-01"] {
            assert!(month_is_valid(month), "{month}");
        }
        for text in [
            "2026-13", "2026-00", "2026", "12-2026", "2026-1", "2026-é", "",
        ] {
            assert!(!month_is_valid(text), "{text}");
        }
    }
}
