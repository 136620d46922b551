//! Errors of acidities in a joint draw: those of the coefficients move together, the rest is each molecule's own.
//!
//! The coefficients of the estimate have one error each for all sites that they enter, with the covariance of their fit. What
//! this gives a site, `J·C·Jᵀ` with J its slopes, is less than its σ, for a group contribution does not know everything: the
//! rest is one error of the molecule for all its estimated C–H, and one for its X–H. A measured value has an error of its own.

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use sha2::{Digest, Sha256};

use super::table::{curvature, values};
use super::{AcidSite, Origin};

/// L of `L·Lᵀ`, the inverse covariance of the coefficients: lower triangle, row after row.
static FACTOR: LazyLock<Vec<f64>> = LazyLock::new(|| factor(curvature(), values().len()));

/// Place of a row's first entry in a packed lower triangle.
fn row(i: usize) -> usize {
    i * (i + 1) / 2
}

/// The lower factor of a positive definite matrix of `n` rows, given by its entries in the lower triangle.
fn factor(entries: impl Iterator<Item = (usize, usize, f64)>, n: usize) -> Vec<f64> {
    let mut a = vec![0.0; row(n)];
    for (i, j, value) in entries {
        a[row(i) + j] = value;
    }
    for i in 0..n {
        for j in 0..=i {
            let (upper, lower) = (&a[row(j)..row(j) + j], &a[row(i)..row(i) + j]);
            let dot: f64 = upper.iter().zip(lower).map(|(x, y)| x * y).sum();
            let rest = a[row(i) + j] - dot;
            a[row(i) + j] = if i == j {
                rest.sqrt()
            } else {
                rest / a[row(j) + j]
            };
        }
    }
    a
}

/// Errors of the coefficients with the covariance of their fit, of independent standard normal deviates.
pub(crate) fn coefficient_errors(deviate: impl Fn(usize) -> f64) -> Vec<f64> {
    let factor = &*FACTOR;
    let n = values().len();
    let mut errors: Vec<f64> = (0..n).map(deviate).collect();
    // Lᵀ·x = z has the covariance (L·Lᵀ)⁻¹
    for i in (0..n).rev() {
        errors[i] /= factor[row(i) + i];
        let error = errors[i];
        for j in 0..i {
            errors[j] -= factor[row(i) + j] * error;
        }
    }
    errors
}

/// Variance of `slopes·x` where x has the covariance of the fit: the square of `L⁻¹·slopes`.
fn variance(slopes: &[(usize, f64)]) -> f64 {
    let factor = &*FACTOR;
    let n = values().len();
    let mut x = vec![0.0; n];
    for &(i, slope) in slopes {
        x[i] += slope;
    }
    let first = slopes.iter().map(|&(i, _)| i).min().unwrap_or(n);
    let mut square = 0.0;
    for i in first..n {
        let known = &factor[row(i) + first..row(i) + i];
        let dot: f64 = known.iter().zip(&x[first..i]).map(|(l, x)| l * x).sum();
        x[i] = (x[i] - dot) / factor[row(i) + i];
        square += x[i] * x[i];
    }
    square
}

/// What the error of a site's pKa is made of; its standard deviation is the site's σ.
#[derive(Clone, Debug)]
pub(crate) struct SiteError {
    /// Coefficients of the estimate with their slopes; none for a measured value.
    shared: Vec<(usize, f64)>,
    /// Standard deviation of what is the molecule's own.
    own: f64,
    /// Address of that.
    address: u64,
}

impl SiteError {
    /// The error of a site of a molecule.
    pub(crate) fn of(molecule: &Molecule, site: &AcidSite) -> SiteError {
        let element = if site.element == 6 { "C–H" } else { "X–H" };
        let origin = match site.origin {
            Origin::Measured => "measured",
            Origin::Estimated => "estimated",
        };
        let address = address(&[origin, element, molecule.canonical()]);
        if site.origin == Origin::Measured {
            return SiteError {
                shared: Vec::new(),
                own: site.sigma,
                address,
            };
        }
        let mut shared = site.contribution.slopes(values());
        let (all, of_coefficients) = (site.sigma * site.sigma, variance(&shared));
        // where the sites around were foretold better than the coefficients claim
        let scale = (all / of_coefficients).min(1.0).sqrt();
        shared.iter_mut().for_each(|(_, slope)| *slope *= scale);
        SiteError {
            shared,
            own: (all - scale * scale * of_coefficients).max(0.0).sqrt(),
            address,
        }
    }

    /// The error, pK units, for these errors of the coefficients and these standard normal deviates by address.
    pub(crate) fn error(&self, coefficients: &[f64], deviate: impl Fn(u64) -> f64) -> f64 {
        let shared = self
            .shared
            .iter()
            .map(|&(i, slope)| slope * coefficients[i]);
        shared.sum::<f64>() + self.own * deviate(self.address)
    }
}

/// The number under which a draw keeps an error.
pub(crate) fn address(parts: &[&str]) -> u64 {
    let mut hash = Sha256::new();
    for part in parts {
        hash.update(part.as_bytes());
        hash.update([0]);
    }
    let bytes: [u8; 32] = hash.finalize().into();
    u64::from_le_bytes(bytes[..8].try_into().expect("eight bytes"))
}

#[cfg(test)]
mod tests {
    use enolattice_reagents::Library;

    use super::*;
    use crate::acidity::acid_sites;
    use crate::acidity::coefficients;

    /// Covariance of two errors by their parts.
    fn covariance(first: &SiteError, second: &SiteError) -> f64 {
        // polarisation: (var(a + b) − var(a − b))/4
        let sum = |sign: f64| {
            let other = second.shared.iter().map(|&(i, slope)| (i, sign * slope));
            let all: Vec<_> = first.shared.iter().copied().chain(other).collect();
            variance(&all)
        };
        let own = if first.address == second.address {
            first.own * second.own
        } else {
            0.0
        };
        (sum(1.0) - sum(-1.0)) / 4.0 + own
    }

    fn correlation(first: &SiteError, second: &SiteError) -> f64 {
        let sigma = |of: &SiteError| covariance(of, of).sqrt();
        covariance(first, second) / (sigma(first) * sigma(second))
    }

    /// The site of an atom, estimated: the library is empty.
    fn estimated(smiles: &str, atom: usize) -> (f64, SiteError) {
        let molecule = Molecule::parse(smiles).expect("a structure");
        let sites = acid_sites(&molecule, &Library::default());
        let site = sites
            .iter()
            .find(|site| site.equivalent.contains(&atom))
            .unwrap_or_else(|| panic!("{smiles} has no acidic atom {atom}"));
        (site.sigma, SiteError::of(&molecule, site))
    }

    #[test]
    fn a_coefficient_has_the_standard_error_of_its_fit() {
        for (i, coefficient) in coefficients().iter().enumerate() {
            let sigma = variance(&[(i, 1.0)]).sqrt();
            // the table of standard errors has four decimals, and so has that of the curvature
            let off = (sigma / coefficient.standard_error - 1.0).abs();
            assert!(off < 1e-2, "{}: {sigma}", coefficient.name);
        }
    }

    #[test]
    fn the_parts_of_an_error_make_its_sigma() {
        for (smiles, atom) in [
            ("CCC(=O)CC", 1),
            ("CCOC(=O)CC(=O)OCC", 5),
            ("CC#N", 0),
            ("Oc1ccccc1", 0),
            ("CS(=O)(=O)c1ccccc1", 0),
        ] {
            let (sigma, error) = estimated(smiles, atom);
            let parts = covariance(&error, &error).sqrt();
            assert!((parts - sigma).abs() < 1e-9, "{smiles}: {parts} {sigma}");
        }
    }

    /// Sites that rest on the same coefficients go wrong together, the more the less well these are known; sites of one
    /// molecule share what is its own; sites that have nothing in common are apart.
    #[test]
    fn sites_alike_go_wrong_together() {
        let error = |smiles, atom| estimated(smiles, atom).1;
        let sulfoximines = correlation(
            &error("CN=S(C)(=O)c1ccccc1", 3),
            &error("CCN=S(C)(=O)c1ccccc1", 4),
        );
        let esters = correlation(&error("CCOC(=O)CCC", 5), &error("CCOC(=O)CCCC", 5));
        let ketone = "CC1CCCCC1=O";
        let one_molecule = correlation(&error(ketone, 1), &error(ketone, 5));
        let unlike = correlation(&error("CCC(=O)CC", 1), &error("Oc1ccccc1", 0));
        assert!(one_molecule > 0.7, "{one_molecule}");
        assert!(sulfoximines > esters, "{sulfoximines} {esters}");
        assert!(
            esters > 0.05 && sulfoximines > 0.2,
            "{esters} {sulfoximines}"
        );
        assert!(unlike.abs() < 0.02, "{unlike}");
    }

    #[test]
    fn drawn_errors_have_the_covariance_of_the_fit() {
        let (first, second) = (
            estimated("CCOC(=O)CC(=O)OCC", 5).1,
            estimated("CCOC(=O)CC(C)=O", 5).1,
        );
        let model = crate::sample::model();
        let draws: Vec<[f64; 2]> = (1..=4096)
            .map(|number| {
                let draw = model.draw(3, number);
                [&first, &second].map(|of| draw.acidity_error(of))
            })
            .collect();
        let n = draws.len() as f64;
        let moment = |a: usize, b: usize| draws.iter().map(|d| d[a] * d[b]).sum::<f64>() / n;
        for (a, b, x, y) in [
            (0, 0, &first, &first),
            (0, 1, &first, &second),
            (1, 1, &second, &second),
        ] {
            let (found, wanted) = (moment(a, b), covariance(x, y));
            // four standard errors of a product of two normal deviates: √((σx²σy² + cov²)/n)
            let squares = covariance(x, x) * covariance(y, y) + wanted * wanted;
            assert!(
                (found - wanted).abs() < 4.0 * (squares / n).sqrt(),
                "{a}{b}: {found}, not {wanted}"
            );
        }
    }
}
