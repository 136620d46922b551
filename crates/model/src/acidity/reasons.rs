//! Why a site has the acidity that the estimate gives it.

use super::locality::similarity;
use super::table::{coefficients, coverage, seen_sites, values};
use super::{AcidSite, Origin};

/// What an estimate is made of, and the measured sites most like it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SiteReasons {
    /// Terms of the estimate, pK units each, the anchor first, then by size. Their sum is the estimated
    /// pKa; for a measured site, what the estimate would have been.
    pub terms: Vec<Term>,
    /// The nearest measured sites, most alike first.
    pub neighbours: Vec<Neighbour>,
}

/// One term of an estimate.
#[derive(Clone, Debug, PartialEq)]
pub struct Term {
    /// What it belongs to, in chemical words.
    pub name: String,
    /// What it adds to the pKa, pK units.
    pub contribution: f64,
}

/// A measured site with surroundings like those of the one in question.
#[derive(Clone, Debug, PartialEq)]
pub struct Neighbour {
    /// The compound.
    pub smiles: String,
    /// Atom of the site, in the order of that SMILES.
    pub atom: usize,
    /// Measured pKa in DMSO.
    pub pka_dmso: f64,
    /// Measured minus estimated, pK units: what the estimate leaves unexplained there.
    pub residual: f64,
    /// Predicted minus measured when the compound and its scaffold were held out of the fit, pK units;
    /// `None` for a derived value, which never was.
    pub held_out_error: Option<f64>,
    /// Likeness, from 1 (same descriptors) to 0.
    pub similarity: f64,
}

/// Neighbours shown.
const SHOWN: usize = 5;
/// Less alike than this is no neighbour: distance 6, where the estimate counts as outside.
const LEAST_SIMILARITY: f64 = 0.05;
/// A term smaller than this changes no decimal that is shown.
const LEAST_TERM: f64 = 0.005;

/// Terms and measured neighbours of a site of [`super::acid_sites`].
pub fn reasons(site: &AcidSite) -> SiteReasons {
    let mut terms: Vec<Term> = site
        .contribution
        .parts(values())
        .into_iter()
        .map(|(i, contribution)| Term {
            name: coefficients()[i].name.to_owned(),
            contribution,
        })
        .collect();
    let estimated: f64 = terms.iter().map(|term| term.contribution).sum();
    let raised = site.pka_dmso - estimated;
    if site.origin == Origin::Estimated && raised > LEAST_TERM && !terms.is_empty() {
        terms.push(Term {
            name: "no more acidic than the measured site of this compound".to_owned(),
            contribution: raised,
        });
    }
    let (anchors, mut rest): (Vec<Term>, Vec<Term>) =
        terms.into_iter().partition(|term| is_anchor(&term.name));
    rest.retain(|term| term.contribution.abs() >= LEAST_TERM);
    rest.sort_by(|a, b| b.contribution.abs().total_cmp(&a.contribution.abs()));
    SiteReasons {
        terms: anchors.into_iter().chain(rest).collect(),
        neighbours: neighbours(site),
    }
}

fn is_anchor(name: &str) -> bool {
    coefficients()
        .iter()
        .any(|coefficient| coefficient.role == super::Role::Anchor && coefficient.name == name)
}

fn neighbours(site: &AcidSite) -> Vec<Neighbour> {
    coverage()
        .nearest(&site.contribution, SHOWN)
        .into_iter()
        .map(|(i, distance)| (&seen_sites()[i], similarity(distance)))
        .filter(|(_, similarity)| *similarity >= LEAST_SIMILARITY)
        .map(|(seen, similarity)| Neighbour {
            smiles: seen.compound.to_owned(),
            atom: seen.atom,
            pka_dmso: seen.pka_dmso,
            residual: seen.residual,
            held_out_error: seen.held_out_error,
            similarity,
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use enolattice_molecule::Molecule;
    use enolattice_reagents::Library;

    use super::*;
    use crate::acid_sites;

    fn of(smiles: &str) -> Vec<AcidSite> {
        let molecule = Molecule::parse(smiles).unwrap();
        acid_sites(&molecule, &Library::builtin().unwrap())
    }

    #[test]
    fn terms_add_up_to_the_estimate() {
        for smiles in [
            "CCOC(=O)C(CC)C(C)=O",
            "CCCC(=O)OC",
            "O=C(C)Cc1ccccc1",
            "Nc1ccc(C#N)cc1",
        ] {
            for site in of(smiles)
                .iter()
                .filter(|site| site.origin == Origin::Estimated)
            {
                let reasons = reasons(site);
                let sum: f64 = reasons.terms.iter().map(|term| term.contribution).sum();
                assert!(
                    (sum - site.pka_dmso).abs() < 0.05,
                    "{smiles} {sum} {}",
                    site.pka_dmso
                );
                assert!(is_anchor(&reasons.terms[0].name), "{smiles}");
            }
        }
    }

    /// Ethyl acetoacetate's neighbours are the 1,3-dicarbonyl compounds of Bordwell's tables.
    #[test]
    fn neighbours_are_compounds_alike() {
        let sites = of("CCOC(=O)CC(=O)CC");
        let found = reasons(&sites[0]).neighbours;
        assert!(
            found.iter().any(|near| near.smiles == "CCOC(=O)CC(C)=O"),
            "{found:?}"
        );
        assert!(found.is_sorted_by(|a, b| a.similarity >= b.similarity));
        assert!(
            found.iter().all(|near| (near.pka_dmso - 14.0).abs() < 6.0),
            "{found:?}"
        );
    }
}
