//! Pages of short lists (AIP-158).
//!
//! A token says after which row the page begins, so rows that are added in
//! front (new jobs) shift nothing. It is bound to its list and arguments by a
//! checksum; that guards against mistakes, not against forgery, which would
//! gain nothing.

use enolattice_engine::EngineError;
use enolattice_wire::page_size;

use crate::status::Refusal;

/// What was asked for.
pub(crate) struct Asked<'a> {
    /// Name of the list.
    pub(crate) list: &'static str,
    /// Arguments that must stay the same from page to page.
    pub(crate) arguments: &'a str,
    /// Rows wanted.
    pub(crate) page_size: i32,
    /// Token of the page before.
    pub(crate) page_token: &'a str,
}

/// A page.
pub(crate) struct Page<'a, T> {
    /// Rows.
    pub(crate) rows: &'a [T],
    /// Token of the next page; empty at the end.
    pub(crate) next_page_token: String,
}

impl Asked<'_> {
    /// The page of `rows`, whose keys are unique.
    pub(crate) fn page<'a, T>(
        &self,
        rows: &'a [T],
        key: impl Fn(&T) -> String,
    ) -> Result<Page<'a, T>, Refusal> {
        let size = page_size(self.page_size)?;
        let start = if self.page_token.is_empty() {
            0
        } else {
            let after = self.read()?;
            let row = rows.iter().position(|row| key(row) == after);
            row.ok_or_else(|| invalid("its row is no longer there"))? + 1
        };
        let end = rows.len().min(start + size as usize);
        let last = rows[start..end].last().filter(|_| end < rows.len());
        let next_page_token = last.map(|row| self.token(&key(row))).unwrap_or_default();
        Ok(Page {
            rows: &rows[start..end],
            next_page_token,
        })
    }

    fn token(&self, after: &str) -> String {
        let bytes = after.bytes().map(|byte| format!("{byte:02x}"));
        format!("{:08x}{}", self.checksum(after), bytes.collect::<String>())
    }

    fn read(&self) -> Result<String, Refusal> {
        let damaged = || invalid("it is damaged");
        let (checksum, after) = self.page_token.split_at_checked(8).ok_or_else(damaged)?;
        let bytes = (0..after.len()).step_by(2).map(|i| {
            let digits = after.get(i..i + 2)?;
            u8::from_str_radix(digits, 16).ok()
        });
        let after = bytes.collect::<Option<Vec<u8>>>().ok_or_else(damaged)?;
        let after = String::from_utf8(after).map_err(|_| damaged())?;
        if format!("{:08x}", self.checksum(&after)) != checksum {
            return Err(invalid("it belongs to other arguments, or is damaged"));
        }
        Ok(after)
    }

    fn checksum(&self, after: &str) -> u32 {
        let mut hasher = crc32fast::Hasher::new();
        for part in [self.list, self.arguments, after] {
            hasher.update(&(part.len() as u64).to_le_bytes());
            hasher.update(part.as_bytes());
        }
        hasher.finalize()
    }
}

fn invalid(reason: &str) -> Refusal {
    Refusal::from(EngineError::PageToken {
        reason: reason.to_owned(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    const ROWS: [u32; 7] = [70, 60, 50, 40, 30, 20, 10];

    fn asked<'a>(arguments: &'a str, page_size: i32, page_token: &'a str) -> Asked<'a> {
        Asked {
            list: "rows",
            arguments,
            page_size,
            page_token,
        }
    }

    fn refused(token: &str, arguments: &str) -> bool {
        asked(arguments, 2, token)
            .page(&ROWS, u32::to_string)
            .is_err()
    }

    #[test]
    fn pages_end_to_end_are_the_list() {
        for size in 1..9 {
            let (mut seen, mut token) = (Vec::new(), String::new());
            loop {
                let page = asked("a", size, &token).page(&ROWS, u32::to_string);
                let page = page.expect("a page");
                seen.extend_from_slice(page.rows);
                token = page.next_page_token;
                if token.is_empty() {
                    break;
                }
            }
            assert_eq!(seen, ROWS, "page size {size}");
        }
    }

    #[test]
    fn rows_added_in_front_shift_nothing() {
        let first = asked("a", 3, "")
            .page(&ROWS, u32::to_string)
            .expect("a page");
        let grown = [&[90, 80], ROWS.as_slice()].concat();
        let second = asked("a", 3, &first.next_page_token).page(&grown, u32::to_string);
        assert_eq!(second.expect("a page").rows, [40, 30, 20]);
    }

    #[test]
    fn tokens_that_do_not_fit_are_refused() {
        let page = asked("a", 2, "")
            .page(&ROWS, u32::to_string)
            .expect("a page");
        let token = page.next_page_token;
        assert!(!refused(&token, "a"));
        assert!(refused(&token, "b"));
        assert!(refused(&token[1..], "a"));
        assert!(refused("zz", "a"));
        assert!(refused("ä€ä€ä€", "a"));
        assert!(refused(&asked("a", 2, "").token("65"), "a"));
    }
}
