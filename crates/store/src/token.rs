//! Page tokens: where a page ended, as opaque text.

use enolattice_model::Fingerprint;

use crate::{JobId, Order, Position};

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
    #[error("the page token belongs to another {argument}; repeat all arguments or ask for the first page again")]
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
    /// The token of the page that follows `position`: URL-safe text.
    pub fn encode(&self, position: &Position) -> String {
        unimplemented!("{position:?}")
    }

    /// Reads a token back.
    ///
    /// # Errors
    /// [`TokenError`] where the token is damaged or was made for other arguments.
    pub fn decode(&self, token: &str) -> Result<Position, TokenError> {
        unimplemented!("{token}{:?}", Fingerprint([0; 32]))
    }
}
