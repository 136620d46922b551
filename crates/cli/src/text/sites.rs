//! Acidic sites.

use super::numbers::fixed;
use super::table::{Side, table};
use crate::json::{MoleculeSites, SiteRecord};

/// A molecule with its sites.
pub(crate) fn molecule_page(molecule: &MoleculeSites) -> String {
    if molecule.sites.is_empty() {
        return format!(
            "{}\n  no acidic site is known to the model",
            molecule.smiles
        );
    }
    format!(
        "{}\n{}",
        molecule.smiles,
        site_table(&molecule.sites, false)
    )
}

/// A table of sites; with the molecule and the pKa in the medium where there is one.
pub(super) fn site_table(sites: &[SiteRecord], in_medium: bool) -> String {
    use Side::{Left, Right};
    let mut columns = vec![
        ("atom", Right),
        ("X–H", Left),
        ("pKa (DMSO)", Right),
        ("σ", Right),
        ("origin", Left),
        ("source", Left),
    ];
    if in_medium {
        columns.insert(0, ("molecule", Left));
        columns.insert(4, ("pKa (here)", Right));
    }
    table(&columns, sites.iter().map(|site| row(site, in_medium)))
}

fn row(site: &SiteRecord, in_medium: bool) -> Vec<String> {
    let hydrogens = match site.hydrogens {
        1 => format!("{}–H", site.element),
        several => format!("{}–H{several}", site.element),
    };
    let mut row = vec![
        site.atom.to_string(),
        hydrogens,
        fixed(Some(site.pka_dmso), 1),
        fixed(Some(site.sigma), 1),
        site.origin.to_owned(),
        site.source.clone(),
    ];
    if in_medium {
        row.insert(0, site.molecule.to_owned());
        row.insert(4, fixed(site.pka_medium, 1));
    }
    row
}
