//! The published pairs, as acids that the model knows.

use enolattice_model::{AcidSite, Model, Onium, Solvent, acid_sites};
use enolattice_molecule::{AnionClass, Molecule, sites};
use enolattice_reagents::Cation;
use serde::Deserialize;

const PAIRS: &str = include_str!("../../data/medium_pairs.tsv");

/// How a medium of lithium ion pairs is marked.
const PAIRED: &str = ", Li⁺";

/// Kind of the acids whose anions are spread over arenes.
const FLUORENES: &str = "fluorenes";

/// One acid in one solvent.
#[derive(Deserialize)]
struct Row {
    name: String,
    smiles: String,
    pka_dmso: f64,
    solvent: String,
    cation: String,
    pka: f64,
}

/// An acid with its published pKa in DMSO and in another medium.
pub(super) struct Pair {
    pub(super) name: String,
    pub(super) medium: String,
    pub(super) kind: &'static str,
    pub(super) pka_dmso: f64,
    pub(super) published: f64,
    class: AnionClass,
    onium: Onium,
    solvent: Solvent,
    cation: Cation,
}

impl Pair {
    /// Whether its pKa is that of a lithium ion pair, which has no zero of its own.
    pub(super) fn is_relative(&self) -> bool {
        self.medium.contains(PAIRED)
    }

    /// Whether the parameters are fitted to it: those of no class of anion are for fluorenes.
    pub(super) fn settles(&self) -> bool {
        self.kind != FLUORENES
    }

    /// The model's pKa on the solvent's own scale, with parameters changed.
    pub(super) fn predicted(&self, model: &Model, changes: &[(&str, f64)]) -> Option<f64> {
        let acid = (self.pka_dmso, self.class, self.onium);
        model.pka_in_medium(acid, &self.solvent, self.cation, 25.0, changes)
    }
}

/// All pairs.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub(super) fn pairs(model: &Model) -> Result<Vec<Pair>, String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(PAIRS.as_bytes());
    reader
        .deserialize()
        .map(|row| pair(model, row.map_err(|error| error.to_string())?))
        .collect()
}

fn pair(model: &Model, row: Row) -> Result<Pair, String> {
    let fault = |what: &str| format!("{}: {what}", row.name);
    let library = model.library();
    let molecule = Molecule::parse(&row.smiles).map_err(|error| fault(&error.to_string()))?;
    let solvent = library
        .solvent(&row.solvent)
        .ok_or_else(|| fault("the library lacks its solvent"))?;
    let cation = match row.cation.as_str() {
        "none" => Cation::None,
        "Li" => Cation::Lithium,
        _ => return Err(fault("its counter-ion is unknown")),
    };
    let onium = Onium::of(&molecule);
    let (class, kind) = match onium {
        Some(onium) => (AnionClass::Neutral, onium.kind.bases()),
        None => {
            let acids = acid_sites(&molecule, library);
            let off = |site: &AcidSite| (site.pka_dmso - row.pka_dmso).abs();
            let meant = acids
                .iter()
                .min_by(|a, b| off(a).total_cmp(&off(b)))
                .ok_or_else(|| fault("it has no acidic site"))?;
            (meant.class, kind(&molecule, meant))
        }
    };
    Ok(Pair {
        medium: match cation {
            Cation::Lithium => format!("{}{PAIRED}", row.solvent),
            _ => row.solvent.clone(),
        },
        kind,
        pka_dmso: row.pka_dmso,
        published: row.pka,
        class,
        onium: onium.unwrap_or(Onium::TERTIARY),
        solvent: model.solvent(solvent),
        cation,
        name: row.name,
    })
}

fn kind(molecule: &Molecule, site: &AcidSite) -> &'static str {
    use AnionClass::*;
    let spread_over_arene = || {
        let all = sites(molecule);
        let this = all.iter().find(|one| one.atom == site.atom);
        this.is_some_and(|one| {
            let mut names = one.descriptors.iter().map(|(name, _)| *name);
            names.any(|name| name == "cyclopentadienide ring")
        })
    };
    match site.class {
        class if class.is_carbanion() && spread_over_arene() => FLUORENES,
        class if class.is_carbanion() => "carbon acids",
        Alkoxide | Hydroxide => "alcohols and water",
        Phenoxide | Carboxylate => "phenols and carboxylic acids",
        Thiolate => "thiols",
        _ => "N–H acids",
    }
}
