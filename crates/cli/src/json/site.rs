//! An acidic site.

use enolattice_engine::SiteReport;
use enolattice_model::{AcidSite, ExplainedSite, Origin};
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
}

/// An element of the list of `sites --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct MoleculeSites {
    pub(crate) smiles: String,
    pub(crate) sites: Vec<SiteRecord>,
}

impl From<ExplainedSite> for SiteRecord {
    fn from(site: ExplainedSite) -> SiteRecord {
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
        }
    }
}

impl From<AcidSite> for SiteRecord {
    fn from(site: AcidSite) -> SiteRecord {
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
