//! Acidic sites.

use super::numbers::fixed;
use super::table::{Side, table, wrapped};
use crate::json::{MoleculeSites, SiteRecord};

/// A molecule with its sites, and why they have their pKa where that is asked for.
pub(crate) fn molecule_page(molecule: &MoleculeSites, with_reasons: bool) -> String {
    if molecule.sites.is_empty() {
        return format!(
            "{}\n  no acidic site is known to the model",
            molecule.smiles
        );
    }
    let mut page = format!(
        "{}\n{}",
        molecule.smiles,
        site_table(&molecule.sites, false)
    );
    if with_reasons {
        for site in &molecule.sites {
            page.push_str("\n\n");
            page.push_str(&reasons(site, false));
        }
    }
    page
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
        // the reasons below have it
        columns.pop();
    }
    table(&columns, sites.iter().map(|site| row(site, in_medium)))
}

fn row(site: &SiteRecord, in_medium: bool) -> Vec<String> {
    let mut row = vec![
        site.atom.to_string(),
        acid(site),
        fixed(Some(site.pka_dmso), 1),
        fixed(Some(site.sigma), 1),
        site.origin.to_owned(),
        site.source.clone(),
    ];
    if in_medium {
        row.insert(0, site.molecule.to_owned());
        row.insert(4, fixed(site.pka_medium, 1));
        row.pop();
    }
    row
}

/// Element and hydrogens: `C–H2`.
fn acid(site: &SiteRecord) -> String {
    match site.hydrogens {
        1 => format!("{}–H", site.element),
        several => format!("{}–H{several}", site.element),
    }
}

/// Why the site has the pKa that it has: its source where it was measured, else the terms of the estimate and the
/// measured acids most like it. In `explain` the molecule is named and all stands two columns further in.
pub(super) fn reasons(site: &SiteRecord, in_medium: bool) -> String {
    let (indent, molecule) = match in_medium {
        true => ("  ", format!("{}, ", site.molecule)),
        false => ("", String::new()),
    };
    let heading = format!(
        "{indent}{molecule}atom {}, {}: pKa {} ± {}, {}",
        site.atom,
        acid(site),
        fixed(Some(site.pka_dmso), 1),
        fixed(Some(site.sigma), 1),
        site.origin
    );
    let from = |source: &str| wrapped(&format!("{indent}  from "), source);
    if site.terms.is_empty() {
        return format!("{heading}\n{}", from(&site.source));
    }
    let mut parts = vec![heading, terms(site, indent)];
    if site.neighbours.is_empty() {
        parts.push(format!("{indent}  nothing alike was measured"));
        return parts.join("\n");
    }
    parts.push(neighbours(site, indent));
    let mut sources: Vec<&str> = site.neighbours.iter().map(|n| n.source.as_str()).collect();
    sources.sort_unstable();
    sources.dedup();
    parts.extend(sources.into_iter().map(from));
    parts.join("\n")
}

fn terms(site: &SiteRecord, indent: &str) -> String {
    use Side::{Left, Right};
    let heading = format!("{indent}  term");
    let columns = [(heading.as_str(), Left), ("adds", Right), ("± s.e.", Right)];
    let rows = site.terms.iter().map(|term| {
        vec![
            format!("{indent}  {}", term.name),
            fixed(Some(term.contribution), 2),
            fixed(Some(term.standard_error), 2),
        ]
    });
    table(&columns, rows)
}

fn neighbours(site: &SiteRecord, indent: &str) -> String {
    use Side::{Left, Right};
    let heading = format!("{indent}  measured, alike");
    let columns = [
        (heading.as_str(), Left),
        ("pKa", Right),
        ("likeness", Right),
        ("left unexplained", Right),
    ];
    let rows = site.neighbours.iter().map(|near| {
        vec![
            format!("{indent}  {}", near.smiles),
            fixed(Some(near.pka_dmso), 1),
            fixed(Some(near.similarity), 2),
            fixed(Some(near.residual), 1),
        ]
    });
    table(&columns, rows)
}
