//! What the fit is made on.

use enolattice_model::{Contribution, Form};
use enolattice_molecule::{AnionClass, Molecule, Site, sites};
use enolattice_reagents::{Acidity, Library};

use super::{FitError, Term};

const ANCHORS: &str = include_str!("../../data/acidity_anchors.tsv");
const SET_ASIDE: &str = include_str!("../../data/acidity_set_aside.tsv");
const EQUILIBRIA: &str = include_str!("../../data/acidity_equilibria.tsv");

/// Least σ of values beyond the range of the solvent, pK units: what the table gives most of them.
const EXTRAPOLATED: f64 = 2.0;

/// A site that an observation may be about.
#[derive(Clone, Debug)]
pub(crate) struct Candidate {
    pub(crate) site: Site,
    pub(crate) contribution: Contribution,
}

/// What was observed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Observed {
    /// The pKa of the site `at`, or of the most acidic candidate.
    Acidity { at: Option<usize> },
    /// The difference pKa(first candidate) − pKa(second candidate).
    Difference,
}

/// One row of the fit.
#[derive(Clone, Debug)]
pub(crate) struct Observation {
    pub(crate) name: String,
    pub(crate) candidates: Vec<Candidate>,
    pub(crate) observed: Observed,
    pub(crate) value: f64,
    pub(crate) sigma: f64,
    pub(crate) scaffold: String,
    /// Whether it is a measured value of the library, not an anchor.
    pub(crate) measured: bool,
    /// C–H beside C=O, C≡N, NO2 or S(O)n, of common elements and charges: what
    /// cross-validation is quoted on.
    pub(crate) in_scope: bool,
}

/// All rows, and what was left out.
pub(crate) struct Observations {
    pub(crate) rows: Vec<Observation>,
    /// Compounds that are not used, and why.
    pub(crate) left_out: Vec<(String, &'static str)>,
}

impl Observations {
    pub(crate) fn load(library: &Library, terms: &[Term]) -> Result<Observations, FitError> {
        let form = Form::new(terms.iter().map(|term| (term.name, term.role)));
        let mut all = Observations {
            rows: Vec::new(),
            left_out: Vec::new(),
        };
        for acidity in library.acidities() {
            let set_aside =
                rows(SET_ASIDE).find(|(_, row)| row.first() == Some(&acidity.smiles.as_str()));
            let reason = set_aside.and_then(|(_, row)| row.get(1).copied());
            match (reason, measured(acidity, &form)) {
                (None, Some(row)) => all.rows.push(row),
                (reason, _) => {
                    let reason = reason.unwrap_or("no site that the descriptors describe");
                    all.left_out.push((acidity.smiles.clone(), reason));
                }
            }
        }
        for (line, row) in rows(ANCHORS) {
            all.rows
                .push(anchor(&row, &form).ok_or(fault("acidity_anchors.tsv", line))?);
        }
        for (line, row) in rows(EQUILIBRIA) {
            all.rows
                .push(equilibrium(&row, &form).ok_or(fault("acidity_equilibria.tsv", line))?);
        }
        Ok(all)
    }
}

/// Lines of a table without comments and heading, with their number.
pub(crate) fn rows(text: &'static str) -> impl Iterator<Item = (usize, Vec<&'static str>)> {
    text.lines()
        .enumerate()
        .filter(|(_, line)| !line.starts_with('#'))
        .skip(1)
        .map(|(i, line)| (i + 1, line.split('\t').collect()))
}

pub(crate) fn fault(table: &'static str, line: usize) -> FitError {
    FitError::Table { table, line }
}

/// The sites of an element that may be acidic: the activated ones, or `at`, the one measured.
fn candidates(molecule: &Molecule, element: u8, at: Option<usize>, form: &Form) -> Vec<Candidate> {
    sites(molecule)
        .into_iter()
        .filter(|site| site.element == element)
        .filter(|site| site.activated || at.is_some_and(|atom| site.equivalent.contains(&atom)))
        .map(|site| Candidate {
            contribution: form.contribution(&site.descriptors),
            site,
        })
        .collect()
}

fn measured(acidity: &Acidity, form: &Form) -> Option<Observation> {
    let molecule = Molecule::parse(&acidity.smiles).ok()?;
    let described = sites(&molecule)
        .iter()
        .flat_map(|site| &site.descriptors)
        .all(|(name, _)| !matches!(*name, "unknown group" | "other N–H"));
    let candidates = candidates(&molecule, acidity.element, acidity.atom, form);
    let at = match acidity.atom {
        Some(atom) => Some(place(&candidates, atom)?),
        None => None,
    };
    if candidates.is_empty() || !described {
        return None;
    }
    Some(Observation {
        name: acidity.smiles.clone(),
        in_scope: acidity.element == 6 && in_scope(&molecule, &candidates),
        candidates,
        observed: Observed::Acidity { at },
        value: acidity.pka_dmso.value,
        sigma: acidity.pka_dmso.sigma.max(if acidity.extrapolated {
            EXTRAPOLATED
        } else {
            0.0
        }),
        scaffold: acidity.scaffold.clone(),
        measured: true,
    })
}

/// Elements and charges as in ordinary substrates, and an acceptor among the four kinds.
fn in_scope(molecule: &Molecule, candidates: &[Candidate]) -> bool {
    const KINDS: [&str; 9] = [
        "alkyl ketone",
        "aryl ketone",
        "ester",
        "amide",
        "nitrile",
        "nitro",
        "sulfone",
        "triflone",
        "sulfoxide",
    ];
    let ordinary = molecule.atoms().iter().all(|atom| {
        matches!(atom.element, 1 | 6 | 7 | 8 | 9 | 15 | 16 | 17 | 35 | 53)
            && !(atom.charge > 0 && matches!(atom.element, 15 | 16))
    });
    let trivalent_phosphorus = (0..molecule.atoms().len())
        .any(|i| molecule.atoms()[i].element == 15 && molecule.neighbours(i).len() < 4);
    ordinary
        && !trivalent_phosphorus
        && candidates.iter().any(|candidate| {
            candidate
                .site
                .descriptors
                .iter()
                .any(|(name, _)| KINDS.contains(name))
        })
}

fn place(candidates: &[Candidate], atom: usize) -> Option<usize> {
    candidates
        .iter()
        .position(|candidate| candidate.site.equivalent.contains(&atom))
}

fn anchor(row: &[&str], form: &Form) -> Option<Observation> {
    let [_, smiles, atom, value, sigma, ..] = row else {
        return None;
    };
    let molecule = Molecule::parse(smiles).ok()?;
    let atom: usize = atom.parse().ok()?;
    let candidates = candidates(
        &molecule,
        molecule.atoms().get(atom)?.element,
        Some(atom),
        form,
    );
    let at = Some(place(&candidates, atom)?);
    Some(Observation {
        name: (*smiles).to_owned(),
        candidates,
        observed: Observed::Acidity { at },
        value: value.parse().ok()?,
        sigma: sigma.parse().ok()?,
        scaffold: String::new(),
        measured: false,
        in_scope: false,
    })
}

fn equilibrium(row: &[&str], form: &Form) -> Option<Observation> {
    let [name, smiles, more, less, percent, sigma, ..] = row else {
        return None;
    };
    let molecule = Molecule::parse(smiles).ok()?;
    let all = candidates(&molecule, 6, None, form);
    let pick = |atom: &str| Some(all[place(&all, atom.parse().ok()?)?].clone());
    let percent: f64 = percent.parse().ok()?;
    Some(Observation {
        name: format!("enolates of {name}"),
        candidates: vec![pick(less)?, pick(more)?],
        observed: Observed::Difference,
        value: (percent / (100.0 - percent)).log10(),
        sigma: sigma.parse().ok()?,
        scaffold: String::new(),
        measured: false,
        in_scope: false,
    })
}

impl Observation {
    /// The candidate that an acidity belongs to, for these coefficients.
    pub(crate) fn assigned(&self, coefficients: &[f64]) -> usize {
        match self.observed {
            Observed::Acidity { at: Some(at) } => at,
            _ => self.most_acidic(|candidate| candidate.contribution.value(coefficients)),
        }
    }

    /// The candidate with the lowest value.
    pub(crate) fn most_acidic(&self, value: impl Fn(&Candidate) -> f64) -> usize {
        (0..self.candidates.len())
            .min_by(|a, b| value(&self.candidates[*a]).total_cmp(&value(&self.candidates[*b])))
            .unwrap_or(0)
    }

    /// Class of the anion of a candidate.
    pub(crate) fn class(&self, candidate: usize) -> AnionClass {
        self.candidates[candidate].site.class
    }
}
