//! Why a site has the acidity that the estimate gives it.

use enolattice_reagents::Library;

use super::bounds::bounds;
use super::locality::{NEIGHBOURS, similarity};
use super::table::{coefficients, coverage, seen_sites, values};
use super::{AcidSite, Origin, Role};

/// What an estimate is made of, and the measured sites most like it.
///
/// Empty for a measured site, whose reason is its source.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SiteReasons {
    /// Terms of the estimate, the base value of the class of acid first, then by size. Their sum is the
    /// estimated pKa.
    pub terms: Vec<Term>,
    /// The nearest measured sites, most alike first: their errors when they were held out make the σ of
    /// the estimate.
    pub neighbours: Vec<Neighbour>,
}

/// One term of an estimate.
#[derive(Clone, Debug, PartialEq)]
pub struct Term {
    /// What it belongs to, in chemical words.
    pub name: String,
    /// What it adds to the pKa, pK units.
    pub contribution: f64,
    /// Standard error of the contribution from that of its own coefficient, pK units. Errors of coefficients
    /// that are fitted together are correlated: they do not add up in squares to the σ of the site.
    pub standard_error: f64,
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
    /// Predicted minus measured when the compound and its scaffold were held out of the fit, pK units.
    pub held_out_error: f64,
    /// Likeness, from 1 (same descriptors) to 0: its weight in σ.
    pub similarity: f64,
    /// Source of the measured value.
    pub source: String,
}

/// Neighbours shown.
const SHOWN: usize = 5;
/// Less alike than this is no neighbour: distance 6, where the estimate counts as outside.
const LEAST_SIMILARITY: f64 = 0.05;
/// Below this an estimate is where its terms put it.
const HELD: f64 = 1e-9;
/// Source of a neighbour that this library lacks: the fit had the built-in one.
const BUILT_IN: &str = "the built-in tables that the estimate was fitted on";

/// Terms and measured neighbours of a site of [`super::acid_sites`].
pub fn reasons(site: &AcidSite, library: &Library) -> SiteReasons {
    match site.origin {
        Origin::Measured => SiteReasons::default(),
        Origin::Estimated => SiteReasons {
            terms: terms(site),
            neighbours: neighbours(site, library),
        },
    }
}

fn terms(site: &AcidSite) -> Vec<Term> {
    let mut anchors = Vec::new();
    let mut rest = Vec::new();
    for (i, factor) in site.contribution.factors(values()) {
        let coefficient = &coefficients()[i];
        let term = Term {
            name: coefficient.name.to_owned(),
            contribution: factor * coefficient.value,
            standard_error: (factor * coefficient.standard_error).abs(),
        };
        match coefficient.role {
            Role::Anchor => anchors.push(term),
            _ => rest.push(term),
        }
    }
    rest.sort_by(|a, b| b.contribution.abs().total_cmp(&a.contribution.abs()));
    let estimated: f64 = anchors.iter().chain(&rest).map(|t| t.contribution).sum();
    rest.extend(held(site, estimated));
    anchors.extend(rest);
    anchors
}

/// What holds the site's pKa away from the sum of its terms.
fn held(site: &AcidSite, estimated: f64) -> Option<Term> {
    let by = site.pka_dmso - estimated;
    let (least, most) = bounds(site.class);
    let name = match (least..=most).contains(&estimated) {
        true => "no more acidic than the measured site of this compound",
        false => "held within what acids of its kind are known to have",
    };
    (by.abs() > HELD).then(|| Term {
        name: name.to_owned(),
        contribution: by,
        standard_error: 0.0,
    })
}

fn neighbours(site: &AcidSite, library: &Library) -> Vec<Neighbour> {
    let nearest = coverage().nearest(&site.contribution, NEIGHBOURS);
    let alike = nearest
        .into_iter()
        .map(|(i, distance)| (&seen_sites()[i], similarity(distance)))
        .take_while(|(_, similarity)| *similarity >= LEAST_SIMILARITY);
    // a derived value was never held out: it is no measurement
    let measured = alike.filter_map(|(seen, similarity)| {
        Some(Neighbour {
            smiles: seen.compound.to_owned(),
            atom: seen.atom,
            pka_dmso: seen.pka_dmso,
            residual: seen.residual,
            held_out_error: seen.held_out_error?,
            similarity,
            source: source(seen.compound, seen.pka_dmso, library),
        })
    });
    measured.take(SHOWN).collect()
}

/// Where the library has the measured value from.
fn source(smiles: &str, pka_dmso: f64, library: &Library) -> String {
    /// Values of the fit's table are rounded to one decimal.
    const ROUNDING: f64 = 0.051;
    library
        .acidities()
        .iter()
        .find(|acidity| {
            acidity.smiles == smiles && (acidity.pka_dmso.value - pka_dmso).abs() < ROUNDING
        })
        .map_or_else(
            || BUILT_IN.to_owned(),
            |acidity| acidity.pka_dmso.source.clone(),
        )
}

#[cfg(test)]
mod tests {
    use enolattice_molecule::Molecule;

    use super::*;
    use crate::acid_sites;

    fn library() -> Library {
        Library::builtin().unwrap()
    }

    fn of(smiles: &str) -> Vec<AcidSite> {
        acid_sites(&Molecule::parse(smiles).unwrap(), &library())
    }

    #[test]
    fn terms_add_up_to_the_estimate_and_the_base_value_comes_first() {
        for smiles in [
            "CCOC(=O)C(CC)C(C)=O",
            "CCCC(=O)OC",
            "O=C(C)Cc1ccccc1",
            "Nc1ccc(C#N)cc1",
            "COC(=O)C=C(C(=O)OC)C(C(=O)OC)C(=O)OC",
        ] {
            for site in of(smiles)
                .iter()
                .filter(|site| site.origin == Origin::Estimated)
            {
                let reasons = reasons(site, &library());
                let sum: f64 = reasons.terms.iter().map(|term| term.contribution).sum();
                assert!(
                    (sum - site.pka_dmso).abs() < 1e-9,
                    "{smiles} {sum} {}",
                    site.pka_dmso
                );
                let first = &reasons.terms[0];
                let base = coefficients()
                    .iter()
                    .find(|c| c.name == first.name)
                    .unwrap();
                assert_eq!(base.role, Role::Anchor, "{smiles}");
                assert!(first.standard_error > 0.0, "{smiles}");
            }
        }
    }

    /// Ethyl acetoacetate's neighbours are the 1,3-dicarbonyl compounds of Bordwell's tables, with the values
    /// and the sources that these have there.
    #[test]
    fn neighbours_are_compounds_alike_with_the_values_of_the_tables() {
        let library = library();
        let sites = of("CCOC(=O)CC(=O)CC");
        let found = reasons(&sites[0], &library).neighbours;
        assert!(
            found.iter().any(|near| near.smiles == "CCOC(=O)CC(C)=O"),
            "{found:?}"
        );
        assert!(found.is_sorted_by(|a, b| a.similarity >= b.similarity));
        for near in &found {
            let molecule = Molecule::parse(&near.smiles).unwrap();
            let measured = &library.acidities_of(molecule.canonical())[0];
            assert!((near.pka_dmso - measured.pka_dmso.value).abs() < 0.051);
            assert_eq!(near.source, measured.pka_dmso.source);
        }
    }

    #[test]
    fn a_measured_site_has_its_source_for_a_reason() {
        let sites = of("CC(C)=O");
        assert_eq!(sites[0].origin, Origin::Measured);
        assert_eq!(reasons(&sites[0], &library()), SiteReasons::default());
        assert!(!sites[0].source.is_empty());
    }
}
