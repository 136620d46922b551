//! The medium against published pKa of the same acid in several solvents.

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::{AcidSite, Model, acid_sites};
use enolattice_molecule::{AnionClass, Bond, Molecule};
use enolattice_reagents::Cation;
use serde::Deserialize;

const PAIRS: &str = include_str!("../data/medium_pairs.tsv");

/// How a medium of lithium ion pairs is marked.
const PAIRED: &str = ", Li⁺";

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

/// One acid, as published and as the model has it.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// The acid.
    pub name: String,
    /// Solvent and counter-ion.
    pub medium: String,
    /// Kind of the acid.
    pub kind: &'static str,
    /// pKa in DMSO.
    pub pka_dmso: f64,
    /// Published pKa in the solvent.
    pub published: f64,
    /// The model's, on the solvent's own scale.
    pub model: f64,
}

impl Comparison {
    fn error(&self) -> f64 {
        self.model - self.published
    }
}

/// All acids of the table.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn compare(model: &Model) -> Result<Vec<Comparison>, String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .from_reader(PAIRS.as_bytes());
    reader
        .deserialize()
        .map(|row| compared(model, &row.map_err(|e| e.to_string())?))
        .collect::<Result<Vec<_>, _>>()
        .map(relative_to_each_other)
}

/// Ion-pair acidities are relative to each other: their zero is put where the errors have no mean.
fn relative_to_each_other(mut compared: Vec<Comparison>) -> Vec<Comparison> {
    let paired = |one: &Comparison| one.medium.contains(PAIRED);
    let errors: Vec<f64> = compared
        .iter()
        .filter(|one| paired(one))
        .map(Comparison::error)
        .collect();
    let mean = errors.iter().sum::<f64>() / errors.len().max(1) as f64;
    compared
        .iter_mut()
        .filter(|one| one.medium.contains(PAIRED))
        .for_each(|one| one.model -= mean);
    compared
}

fn compared(model: &Model, row: &Row) -> Result<Comparison, String> {
    let fault = |what: &str| format!("{}: {what}", row.name);
    let library = model.library();
    let molecule = Molecule::parse(&row.smiles).map_err(|e| fault(&e.to_string()))?;
    let solvent = library
        .solvent(&row.solvent)
        .ok_or_else(|| fault("the library lacks its solvent"))?;
    let cation = match row.cation.as_str() {
        "none" => Cation::None,
        "Li" => Cation::Lithium,
        _ => return Err(fault("its counter-ion is unknown")),
    };
    let (class, donors) = match cationic_donors(&molecule) {
        0 => {
            let sites = acid_sites(&molecule, library);
            let off = |site: &AcidSite| (site.pka_dmso - row.pka_dmso).abs();
            let meant = sites
                .iter()
                .min_by(|a, b| off(a).total_cmp(&off(b)))
                .ok_or_else(|| fault("it has no acidic site"))?;
            (meant.class, 1)
        }
        donors => (AnionClass::Neutral, donors),
    };
    let pka = model
        .pka_in_medium(
            row.pka_dmso,
            class,
            donors,
            &model.solvent(solvent),
            cation,
            25.0,
        )
        .ok_or_else(|| fault("its solvent has no scale of its own"))?;
    Ok(Comparison {
        name: row.name.clone(),
        medium: match cation {
            Cation::Lithium => format!("{}{PAIRED}", row.solvent),
            _ => row.solvent.clone(),
        },
        kind: match class {
            AnionClass::Neutral => kind_of_base(&molecule),
            class => kind(class),
        },
        pka_dmso: row.pka_dmso,
        published: row.pka,
        model: pka,
    })
}

/// N–H of a cationic acid; 0 for a neutral one.
fn cationic_donors(molecule: &Molecule) -> u8 {
    let is_cation = molecule
        .atoms()
        .iter()
        .map(|atom| i32::from(atom.charge))
        .sum::<i32>()
        > 0;
    let charged = molecule.atoms().iter().filter(|atom| atom.charge > 0);
    let donors: u8 = charged.map(|atom| atom.hydrogens).sum();
    if is_cation { donors } else { 0 }
}

/// Kind of the base whose cationic acid this is, by what its charged nitrogen is bound to.
fn kind_of_base(molecule: &Molecule) -> &'static str {
    let atoms = molecule.atoms();
    let Some(nitrogen) = (0..atoms.len()).find(|i| atoms[*i].charge > 0) else {
        return "bases";
    };
    let beside = molecule.neighbours(nitrogen);
    if atoms[nitrogen].aromatic {
        "pyridines and imidazole"
    } else if beside.iter().any(|(other, _)| atoms[*other].element == 15) {
        "phosphazenes"
    } else if beside.iter().any(|(_, bond)| *bond == Bond::Double) {
        "amidines and guanidines"
    } else if beside.iter().any(|(other, _)| atoms[*other].aromatic) {
        "anilines"
    } else {
        "alkylamines"
    }
}

fn kind(class: AnionClass) -> &'static str {
    use AnionClass::*;
    match class {
        class if class.is_carbanion() => "carbon acids",
        Alkoxide | Hydroxide => "alcohols and water",
        Phenoxide | Carboxylate => "phenols and carboxylic acids",
        Thiolate => "thiols",
        _ => "N–H acids",
    }
}

/// The page: RMS by solvent and kind, then every acid.
///
/// # Errors
/// As [`compare`].
pub fn page(model: &Model) -> Result<String, String> {
    let compared = compare(model)?;
    let mut by_kind: BTreeMap<(&str, &str), Vec<f64>> = BTreeMap::new();
    for one in &compared {
        let key = (one.kind, one.medium.as_str());
        by_kind.entry(key).or_default().push(one.error());
    }
    let mut page = String::from(
        "# The medium and how good it is\n\n\
         Written by `cargo run -p enolattice-calibration -- medium`; do not edit.\n\n\
         pKa of the same acid in other solvents from its pKa in DMSO, on the scale of each solvent, against\n\
         published values (`crates/calibration/data/medium_pairs.tsv`, from memory). Several parameters of the medium rest on\n\
         these very pairs: the table says how well one form serves them all, not how well it foretells others.\n\
         Acidities of lithium ion pairs are relative to each other: their zero is put where the errors have no mean.\n\
         Other solvents have no published scale here; the model interpolates them by permittivity and by the Kamlet–Taft\n\
         constants α and β.\n\n\
         | acids | solvent | n | RMS | mean error | worst |\n\
         | --- | --- | --- | --- | --- | --- |\n",
    );
    for ((kind, medium), errors) in &by_kind {
        let n = errors.len() as f64;
        let rms = (errors.iter().map(|e| e * e).sum::<f64>() / n).sqrt();
        let mean = errors.iter().sum::<f64>() / n;
        let worst = errors
            .iter()
            .fold(0.0_f64, |a, &b| if b.abs() > a.abs() { b } else { a });
        let _ = writeln!(
            page,
            "| {kind} | {medium} | {n} | {rms:.2} | {mean:+.2} | {worst:+.2} |"
        );
    }
    page.push_str("\n| acid | DMSO | solvent | published | model | error |\n| --- | --- | --- | --- | --- | --- |\n");
    for one in &compared {
        let _ = writeln!(
            page,
            "| {} | {:.1} | {} | {:.1} | {:.1} | {:+.1} |",
            one.name,
            one.pka_dmso,
            one.medium,
            one.published,
            one.model,
            one.error()
        );
    }
    Ok(page)
}
