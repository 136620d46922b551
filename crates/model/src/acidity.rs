//! Acidities on the DMSO scale: measured where known, else estimated.

mod analogue;
mod contribution;
mod table;

use enolattice_molecule::{AnionClass, Molecule, Site, sites};
use enolattice_reagents::{Acidity, Library};

pub use analogue::{Analogue, Analogues};
pub use contribution::{Contribution, Form, Role, Uptake};
pub use table::{Coefficient, analogues, coefficients, form, typical_error};

/// Where an acidity comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// A published measurement of this compound.
    Measured,
    /// A group-contribution estimate.
    Estimated,
}

/// An acidic site with its acidity.
#[derive(Clone, Debug)]
pub struct AcidSite {
    /// Atom index in the order of the SMILES.
    pub atom: usize,
    /// Atomic number.
    pub element: u8,
    /// Hydrogens on the atom.
    pub hydrogens: u8,
    /// All atoms equivalent by symmetry, itself included.
    pub equivalent: Vec<usize>,
    /// Class of the anion.
    pub class: AnionClass,
    /// pKa in DMSO at 25 °C of the site with all its equivalents: the number of
    /// hydrogens is in it, as in a measured value.
    pub pka_dmso: f64,
    /// Standard uncertainty.
    pub sigma: f64,
    /// Measured or estimated.
    pub origin: Origin,
    /// Source of the value.
    pub source: String,
    /// Whether the surroundings are outside what the fit has seen.
    pub outside: bool,
    /// How the estimate depends on the coefficients: in a draw, an estimated pKa moves by the
    /// difference of [`Contribution::value`] between drawn and mean coefficients.
    pub contribution: Contribution,
}

/// Least standard uncertainty given to a measured value: laboratories and indicators
/// differ by about so much (common practice).
const LEAST_MEASURED_SIGMA: f64 = 0.2;
/// An estimated site of the element that was measured is at least this much weaker than
/// the measured one, for the measurement is of the most acidic site.
const WEAKER_THAN_MEASURED: f64 = 0.3;
/// Factor on σ outside of what the fit has seen: the ratio of the errors of leave-one-group-out
/// and five-fold cross-validation is 1.1 on average and about twice that for the worst groups.
const OUTSIDE_FACTOR: f64 = 1.7;

/// All acidic sites of a molecule, most acidic first.
///
/// C–H that nothing activates is left out unless it was measured.
pub fn acid_sites(molecule: &Molecule, library: &Library) -> Vec<AcidSite> {
    let candidates = sites(molecule);
    let estimates: Vec<(Contribution, f64)> = candidates
        .iter()
        .map(|site| {
            let contribution = form().contribution(&site.descriptors);
            let pka = contribution.value(table::values()) + analogues().correction(&contribution);
            (contribution, pka)
        })
        .collect();
    let measured = measured_sites(molecule, library, &candidates, &estimates);
    let mut acids: Vec<AcidSite> = candidates
        .into_iter()
        .zip(estimates)
        .enumerate()
        .filter(|(i, (site, _))| site.activated || measured.iter().any(|(at, _)| at == i))
        .map(|(i, (site, (contribution, pka)))| {
            let value = measured
                .iter()
                .find(|(at, _)| *at == i)
                .map(|(_, acidity)| *acidity);
            match value {
                Some(acidity) => from_measurement(site, contribution, acidity),
                None => {
                    let floor = measured
                        .iter()
                        .filter(|(_, acidity)| acidity.element == site.element)
                        .map(|(_, acidity)| acidity.pka_dmso.value + WEAKER_THAN_MEASURED)
                        .fold(f64::NEG_INFINITY, f64::max);
                    from_estimate(site, contribution, pka.max(floor))
                }
            }
        })
        .collect();
    acids.sort_by(|a, b| a.pka_dmso.total_cmp(&b.pka_dmso).then(a.atom.cmp(&b.atom)));
    acids
}

fn from_measurement(site: Site, contribution: Contribution, acidity: &Acidity) -> AcidSite {
    AcidSite {
        atom: site.atom,
        element: site.element,
        hydrogens: site.hydrogens,
        equivalent: site.equivalent,
        class: site.class,
        pka_dmso: acidity.pka_dmso.value,
        sigma: acidity.pka_dmso.sigma.max(LEAST_MEASURED_SIGMA),
        origin: Origin::Measured,
        source: acidity.pka_dmso.source.clone(),
        outside: false,
        contribution,
    }
}

fn from_estimate(site: Site, contribution: Contribution, pka: f64) -> AcidSite {
    let outside = !analogues().cover(&contribution);
    let sigma = typical_error(site.class) * if outside { OUTSIDE_FACTOR } else { 1.0 };
    AcidSite {
        atom: site.atom,
        element: site.element,
        hydrogens: site.hydrogens,
        equivalent: site.equivalent,
        class: site.class,
        pka_dmso: pka,
        sigma,
        origin: Origin::Estimated,
        source: "group contributions fitted on measured acidities in DMSO".to_owned(),
        outside,
        contribution,
    }
}

/// The measured values of this compound, each with the candidate that it belongs to.
fn measured_sites<'a>(
    molecule: &Molecule,
    library: &'a Library,
    candidates: &[Site],
    estimates: &[(Contribution, f64)],
) -> Vec<(usize, &'a Acidity)> {
    let exact = library.acidities_of(molecule.canonical());
    let found = if exact.is_empty() && molecule.canonical().contains(['@', '/', '\\']) {
        library.acidities_of(&molecule.canonical_flat())
    } else {
        exact
    };
    found
        .iter()
        .filter_map(|acidity| {
            let place = place_of(acidity, candidates)
                .or_else(|| most_acidic(acidity.element, candidates, estimates))?;
            Some((place, acidity))
        })
        .collect()
}

/// The candidate with the surroundings of the atom that the table names.
fn place_of(acidity: &Acidity, candidates: &[Site]) -> Option<usize> {
    let atom = acidity.atom?;
    let reference = Molecule::parse(&acidity.smiles).ok()?;
    let site = sites(&reference)
        .into_iter()
        .find(|site| site.equivalent.contains(&atom))?;
    candidates.iter().position(|candidate| {
        candidate.element == site.element
            && candidate.hydrogens == site.hydrogens
            && candidate.equivalent.len() == site.equivalent.len()
            && candidate.descriptors == site.descriptors
    })
}

fn most_acidic(
    element: u8,
    candidates: &[Site],
    estimates: &[(Contribution, f64)],
) -> Option<usize> {
    (0..candidates.len())
        .filter(|i| candidates[*i].element == element)
        .min_by(|a, b| estimates[*a].1.total_cmp(&estimates[*b].1))
}

/// pKa in DMSO of a site with these descriptors, for these coefficients, in the order of
/// [`coefficients`].
pub fn estimate(descriptors: &[(&'static str, f64)], coefficients: &[f64]) -> f64 {
    form().contribution(descriptors).value(coefficients)
}
