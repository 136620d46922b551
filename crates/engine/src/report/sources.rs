//! Sources of what occurs in a report.

use std::collections::BTreeSet;

use enolattice_model::Explanation;
use enolattice_reagents::{Hazards, Library};
use enolattice_report::{ExplainedCell, Source};

/// Sources, each with what was taken from it.
#[derive(Debug, Default)]
pub(super) struct Sources(BTreeSet<Source>);

impl Sources {
    pub(super) fn into_list(self) -> Vec<Source> {
        self.0.into_iter().collect()
    }

    pub(super) fn add(&mut self, text: &str, of: impl Into<String>) {
        if !text.is_empty() && text != "unknown" {
            let (text, of) = (text.to_owned(), of.into());
            self.0.insert(Source { text, of });
        }
    }

    fn hazards(&mut self, hazards: &Hazards, name: &str) {
        self.add(&hazards.source, format!("hazards of {name}"));
    }

    pub(super) fn base(&mut self, library: &Library, name: &str) {
        if let Some(base) = library.base(name) {
            self.add(&base.source, name);
            self.add(&base.pka_dmso.source, format!("pKa of the acid of {name}"));
            self.hazards(&base.hazards, name);
        }
    }

    pub(super) fn electrophile(&mut self, library: &Library, name: &str) {
        if let Some(electrophile) = library.electrophile(name) {
            self.add(&electrophile.source, name);
            self.hazards(&electrophile.hazards, name);
        }
    }

    /// A solvent, or each part of a mixture.
    pub(super) fn solvent(&mut self, library: &Library, name: &str) {
        let Ok(solvent) = library.solvent_or_mixture(name) else {
            return;
        };
        for part in solvent.components() {
            if let Some(known) = library.solvent(part.name) {
                self.add(&known.source, part.name);
                self.hazards(&known.hazards, part.name);
            }
        }
    }

    pub(super) fn additive(&mut self, library: &Library, name: &str) {
        if let Some(additive) = library.additive(name) {
            self.add(&additive.source, name);
            self.hazards(&additive.hazards, name);
        }
    }

    pub(super) fn explained(&mut self, cells: &[ExplainedCell]) {
        for ExplainedCell {
            cell, explanation, ..
        } in cells
        {
            self.explanation(explanation, &cell.substrate);
        }
    }

    fn explanation(&mut self, explanation: &Explanation, substrate: &str) {
        for site in &explanation.sites {
            let of = match site.molecule {
                "substrate" | "substrate anion" => substrate,
                other => other,
            };
            self.add(&site.source, format!("acidity of {of}"));
        }
        for rate in &explanation.rates {
            self.add(&rate.source, rate.step.clone());
        }
        for doubt in &explanation.doubts {
            self.add(&doubt.source, doubt.quantity.clone());
        }
        for caution in &explanation.cautions {
            self.add(
                &caution.source,
                format!("caution: {}", caution.category.name()),
            );
        }
    }
}
