//! Mixtures of solvents: how they are written.

/// Why a text is no mixture that the library can make.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum MixtureError {
    /// A name that is not in the library.
    #[error("no solvent `{name}` in the library{}", did_you_mean(.suggestion))]
    Unknown {
        /// The name.
        name: String,
        /// The nearest name that the library has.
        suggestion: Option<String>,
    },
    /// More parts than a mixture may have, or fewer than two.
    #[error("{found} parts: a mixture has two or three, written `THF/DMF 4:1`")]
    Parts {
        /// How many there were.
        found: usize,
    },
    /// One solvent twice.
    #[error("`{name}` is there twice: write each part of a mixture once")]
    Repeated {
        /// Name in the library.
        name: String,
    },
    /// As many volumes as parts are needed, or none.
    #[error(
        "{volumes} volumes for {parts} parts: write one for each, as in `THF/DMF 4:1`, or none for equal volumes"
    )]
    Volumes {
        /// How many parts there were.
        parts: usize,
        /// How many volumes.
        volumes: usize,
    },
    /// A volume that is none.
    #[error("`{volume}` is no volume of a part: write a number from 0.001 to 1000")]
    Volume {
        /// The number as given.
        volume: String,
    },
}

fn did_you_mean(suggestion: &Option<String>) -> String {
    let offer = |name: &String| format!("; did you mean `{name}`?");
    suggestion.as_ref().map(offer).unwrap_or_default()
}

/// Names and volumes of a text `A/B 4:1`; equal volumes where there are none.
pub(crate) fn parse(text: &str) -> Result<Vec<(&str, f64)>, MixtureError> {
    let text = text.trim();
    let (names, ratio) = match text.rsplit_once(char::is_whitespace) {
        Some((names, last)) if last.contains(':') => (names, Some(last)),
        _ => (text, None),
    };
    let names: Vec<&str> = names.split('/').map(str::trim).collect();
    let Some(ratio) = ratio else {
        return Ok(names.into_iter().map(|name| (name, 1.0)).collect());
    };
    let volumes: Vec<&str> = ratio.split(':').collect();
    if volumes.len() != names.len() {
        return Err(MixtureError::Volumes {
            parts: names.len(),
            volumes: volumes.len(),
        });
    }
    let volume = |text: &str| {
        text.parse::<f64>().map_err(|_| MixtureError::Volume {
            volume: text.to_owned(),
        })
    };
    names
        .into_iter()
        .zip(volumes)
        .map(|(name, text)| Ok((name, volume(text)?)))
        .collect()
}
