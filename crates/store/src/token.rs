//! Page tokens: where a page ended, as opaque text.

use base64::Engine as _;
use base64::engine::general_purpose::URL_SAFE_NO_PAD;
use sha2::{Digest, Sha256};

use crate::{JobId, Order, Position};

/// Version of the token.
const VERSION: u8 = 1;

/// Why a page token was refused.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum TokenError {
    /// Not a token of ours, or changed on its way.
    #[error("the page token is damaged; copy it whole or ask for the first page again")]
    Damaged,
    /// Made by a version with other tokens.
    #[error("the page token is of another version; ask for the first page again")]
    OtherVersion,
    /// The other arguments are not those of the page before.
    #[error(
        "the page token belongs to another {argument}; repeat all arguments or ask for the first page again"
    )]
    OtherArguments {
        /// The argument that changed.
        argument: &'static str,
    },
}

/// The arguments of a ranking that must stay the same from page to page.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PageToken {
    /// Job.
    pub job: JobId,
    /// Order.
    pub order: Order,
    /// Filter as the user wrote it; empty: none.
    pub filter: String,
    /// Axis of `best_per`, by name; empty: none.
    pub best_per: String,
}

impl PageToken {
    /// The token of the page that follows `position`: 80 URL-safe characters.
    pub fn encode(&self, position: &Position) -> String {
        let mut bytes = vec![VERSION];
        bytes.extend(self.job.number().to_le_bytes());
        bytes.push(self.order.number() as u8);
        bytes.extend(self.query_hash());
        bytes.extend(position.key.to_le_bytes());
        bytes.extend(position.cell.to_le_bytes());
        bytes.extend(position.passed.to_le_bytes());
        bytes.extend(position.snapshot.to_le_bytes());
        bytes.extend(position.total.to_le_bytes());
        bytes.extend(position.generation.to_le_bytes());
        bytes.extend(crc32fast::hash(&bytes).to_le_bytes());
        URL_SAFE_NO_PAD.encode(bytes)
    }

    /// Reads a token back.
    ///
    /// # Errors
    /// [`TokenError`] where the token is damaged or was made for other arguments.
    pub fn decode(&self, token: &str) -> Result<Position, TokenError> {
        let bytes = URL_SAFE_NO_PAD
            .decode(token)
            .map_err(|_| TokenError::Damaged)?;
        let (body, crc) = bytes.split_last_chunk::<4>().ok_or(TokenError::Damaged)?;
        if crc32fast::hash(body) != u32::from_le_bytes(*crc) {
            return Err(TokenError::Damaged);
        }
        let (version, body) = body.split_first().ok_or(TokenError::Damaged)?;
        if *version != VERSION {
            return Err(TokenError::OtherVersion);
        }
        self.read(body)
    }

    fn read(&self, mut rest: &[u8]) -> Result<Position, TokenError> {
        let rest = &mut rest;
        let same = |argument, same| {
            if same {
                Ok(())
            } else {
                Err(TokenError::OtherArguments { argument })
            }
        };
        same("job", u64::from_le_bytes(take(rest)?) == self.job.number())?;
        same("order", take::<1>(rest)? == [self.order.number() as u8])?;
        same("filter or `best per`", take(rest)? == self.query_hash())?;
        Ok(Position {
            key: u16::from_le_bytes(take(rest)?),
            cell: u64::from_le_bytes(take(rest)?),
            passed: u64::from_le_bytes(take(rest)?),
            snapshot: u64::from_le_bytes(take(rest)?),
            total: u64::from_le_bytes(take(rest)?),
            generation: u32::from_le_bytes(take(rest)?),
        })
    }

    fn query_hash(&self) -> [u8; 8] {
        let mut hash = Sha256::new();
        hash.update((self.filter.len() as u64).to_le_bytes());
        hash.update(&self.filter);
        hash.update(&self.best_per);
        let digest: [u8; 32] = hash.finalize().into();
        std::array::from_fn(|i| digest[i])
    }
}

fn take<const N: usize>(rest: &mut &[u8]) -> Result<[u8; N], TokenError> {
    let (head, tail) = rest.split_first_chunk::<N>().ok_or(TokenError::Damaged)?;
    *rest = tail;
    Ok(*head)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn token() -> PageToken {
        PageToken {
            job: JobId::from_number(99),
            order: Order::PHit,
            filter: "p_hit > 0.5".into(),
            best_per: "substrate".into(),
        }
    }

    const POSITION: Position = Position {
        key: 65535,
        cell: 1 << 40,
        passed: 200,
        snapshot: 12,
        total: 5000,
        generation: 2,
    };

    #[test]
    fn a_token_reads_back_for_the_same_arguments() {
        let text = token().encode(&POSITION);
        assert!(
            text.bytes()
                .all(|b| b.is_ascii_alphanumeric() || b == b'-' || b == b'_'),
            "{text}"
        );
        assert_eq!(token().decode(&text), Ok(POSITION));
    }

    #[test]
    fn changed_arguments_are_refused_by_name() {
        let text = token().encode(&POSITION);
        let refused = |other: PageToken| match other.decode(&text) {
            Err(TokenError::OtherArguments { argument }) => argument,
            other => panic!("{other:?}"),
        };
        assert_eq!(
            refused(PageToken {
                job: JobId::from_number(98),
                ..token()
            }),
            "job"
        );
        assert_eq!(
            refused(PageToken {
                order: Order::Selectivity,
                ..token()
            }),
            "order"
        );
        for (filter, best_per) in [
            ("p_hit > 0.6", "substrate"),
            ("p_hit > 0.5", ""),
            ("p_hit > 0.5s", "ubstrate"),
        ] {
            let other = PageToken {
                filter: filter.into(),
                best_per: best_per.into(),
                ..token()
            };
            assert_eq!(refused(other), "filter or `best per`");
        }
    }

    #[test]
    fn damaged_and_foreign_tokens_are_refused() {
        let text = token().encode(&POSITION);
        for i in 0..text.len() {
            let mut changed = text.clone().into_bytes();
            changed[i] = if changed[i] == b'A' { b'B' } else { b'A' };
            let changed = String::from_utf8(changed).unwrap();
            assert_eq!(
                token().decode(&changed),
                Err(TokenError::Damaged),
                "character {i}"
            );
        }
        for foreign in ["", "AAAA", "not a token!", &text[..40]] {
            assert_eq!(
                token().decode(foreign),
                Err(TokenError::Damaged),
                "{foreign}"
            );
        }
        let mut later = vec![2, 1, 1];
        later.extend(crc32fast::hash(&later).to_le_bytes());
        assert_eq!(
            token().decode(&URL_SAFE_NO_PAD.encode(later)),
            Err(TokenError::OtherVersion)
        );
    }
}
