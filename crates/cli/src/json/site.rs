//! An acidic site.

use enolattice_engine::{ReasonedSite, SiteReport};
use enolattice_model::{ExplainedSite, Neighbour, Origin, SiteReasons, Term};
use serde::Serialize;

/// A site as `explain` and `sites` print it.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct SiteRecord {
    pub(crate) molecule: &'static str,
    pub(crate) atom: usize,
    pub(crate) element: &'static str,
    pub(crate) hydrogens: u8,
    pub(crate) pka_dmso: f64,
    /// Null in `sites`, which knows no medium.
    pub(crate) pka_medium: Option<f64>,
    pub(crate) sigma: f64,
    pub(crate) origin: &'static str,
    pub(crate) source: String,
    /// Empty for a measured value, like `neighbours`.
    pub(crate) terms: Vec<TermRecord>,
    pub(crate) neighbours: Vec<NeighbourRecord>,
}

/// A term of an estimated pKa.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct TermRecord {
    pub(crate) name: String,
    pub(crate) contribution: f64,
    pub(crate) standard_error: f64,
}

/// A measured acid like the one in question.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct NeighbourRecord {
    pub(crate) smiles: String,
    pub(crate) atom: usize,
    pub(crate) pka_dmso: f64,
    pub(crate) residual: f64,
    pub(crate) held_out_error: f64,
    pub(crate) similarity: f64,
    pub(crate) source: String,
}

/// An element of the list of `sites --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct MoleculeSites {
    pub(crate) smiles: String,
    pub(crate) sites: Vec<SiteRecord>,
}

impl From<ExplainedSite> for SiteRecord {
    fn from(site: ExplainedSite) -> SiteRecord {
        let (terms, neighbours) = records(site.reasons);
        SiteRecord {
            molecule: site.molecule,
            atom: site.atom,
            element: site.element,
            hydrogens: site.hydrogens,
            pka_dmso: site.pka_dmso,
            pka_medium: Some(site.pka_medium),
            sigma: site.sigma,
            origin: origin_name(site.origin),
            source: site.source,
            terms,
            neighbours,
        }
    }
}

impl From<ReasonedSite> for SiteRecord {
    fn from(reasoned: ReasonedSite) -> SiteRecord {
        let site = reasoned.site;
        let (terms, neighbours) = records(reasoned.reasons);
        SiteRecord {
            molecule: "substrate",
            atom: site.atom,
            element: enolattice_engine::element_symbol(site.element),
            hydrogens: site.hydrogens,
            pka_dmso: site.pka_dmso,
            pka_medium: None,
            sigma: site.sigma,
            origin: origin_name(site.origin),
            source: site.source,
            terms,
            neighbours,
        }
    }
}

fn records(reasons: SiteReasons) -> (Vec<TermRecord>, Vec<NeighbourRecord>) {
    let terms = reasons.terms.into_iter().map(TermRecord::from);
    let neighbours = reasons.neighbours.into_iter().map(NeighbourRecord::from);
    (terms.collect(), neighbours.collect())
}

impl From<Term> for TermRecord {
    fn from(term: Term) -> TermRecord {
        TermRecord {
            name: term.name,
            contribution: term.contribution,
            standard_error: term.standard_error,
        }
    }
}

impl From<Neighbour> for NeighbourRecord {
    fn from(near: Neighbour) -> NeighbourRecord {
        NeighbourRecord {
            smiles: near.smiles,
            atom: near.atom,
            pka_dmso: near.pka_dmso,
            residual: near.residual,
            held_out_error: near.held_out_error,
            similarity: near.similarity,
            source: near.source,
        }
    }
}

impl From<SiteReport> for MoleculeSites {
    fn from(report: SiteReport) -> MoleculeSites {
        MoleculeSites {
            smiles: report.smiles,
            sites: report.sites.into_iter().map(SiteRecord::from).collect(),
        }
    }
}

fn origin_name(origin: Origin) -> &'static str {
    match origin {
        Origin::Measured => "measured",
        Origin::Estimated => "estimated",
    }
}
