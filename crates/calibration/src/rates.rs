//! The page on rates and selectivity.

use enolattice_model::Model;

use crate::{conditions, nucleophilicity, practice, quality, reactions, selectivity, substitution};

/// The pages that rest on common and published reactions.
pub struct Pages {
    /// `docs/rates.md`.
    pub rates: String,
    /// `docs/quality.md`.
    pub quality: String,
}

/// The pages, as `docs/` has them.
///
/// # Errors
/// A sentence that names a row of a table which cannot be used.
pub fn pages(model: &Model) -> Result<Pages, String> {
    let (mut common, second) = (practice::judge(model)?, practice::judge_second(model)?);
    let published = reactions::judge(model)?;
    let rates = format!(
        "{}{}\n## Published reactions\n\n\
         Reactions from patents (`crates/calibration/data/reactions.tsv`), whose conditions are partly guessed where the source is silent.\n\
         A yield is possible where the model expects 30 % and more; given up is what it thinks a hit with less than 2 %.\n\
         The rows marked x2 bind the electrophile twice, which the model counts as a loss.\n\
         `enolattice-calibration reactions` lists the cells behind the counts.\n\n{}{}{}",
        quick_sections(model)?,
        practice::section(&common, &second),
        reactions::counts(&published),
        reactions::given_up_section(&published)?,
        conditions::section(model)?
    );
    common.extend(second);
    let quality = quality::page(&common, &published)?;
    Ok(Pages { rates, quality })
}

/// The head of the page and the sections that take little time.
///
/// # Errors
/// As [`pages`].
pub fn quick_sections(model: &Model) -> Result<String, String> {
    let head = "# Rates and selectivity in figures\n\n\
         Written by `cargo run -p enolattice-calibration -- rates`; do not edit.\n\n\
         *Left out*: the parameters named below a table are fitted to its other rows, so that the row was not seen; all other\n\
         parameters are those of the model. *Model*: as it is.\n";
    Ok(format!(
        "{head}{}{}{}",
        selectivity::sections(model)?,
        substitution::section(model)?,
        nucleophilicity::section(model)?
    ))
}
