//! Published reactions against the model: is the right product foretold, is any reported reaction given up?

use std::collections::BTreeMap;
use std::fmt::Write;
use std::sync::Arc;

use enolattice_model::{Addition, Cell, Conditions, Explanation, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::{Base, BaseKind};
use serde::Deserialize;

use crate::quality::Groups;
use crate::table::rows;

const REACTIONS: &str = include_str!("../data/reactions.tsv");
const REASONS: &str = include_str!("../data/given_up.tsv");

/// A yield that the model should think possible for a reported reaction.
pub(crate) const POSSIBLE: f64 = 0.3;
/// p_hit below this gives a reported reaction up; a hit is a tenth of the substrate.
pub(crate) const GIVEN_UP: f64 = 0.02;
pub(crate) const HIT: f64 = 0.1;

/// Liquids of the work-up, which the source lists among the solvents: taken only where there is no other.
const WORK_UP: [&str; 7] = ["water", "hexane", "EtOAc", "DCM", "Et2O", "AcOH", "MTBE"];

/// One reported reaction.
#[derive(Clone, Debug, Deserialize)]
pub(crate) struct Reported {
    pub(crate) id: String,
    pub(crate) class: String,
    substrate: String,
    electrophile: String,
    base: String,
    solvent: String,
    temperature_c: Option<f64>,
    yield_percent: Option<f64>,
    product: String,
    site_classes: u32,
    refluxed: String,
}

impl Reported {
    /// The same substrate and electrophile under other conditions.
    pub(crate) fn under(&self, base: &str, solvent: &str, temperature_c: f64) -> Reported {
        Reported {
            base: base.to_owned(),
            solvent: solvent.to_owned(),
            temperature_c: Some(temperature_c),
            ..self.clone()
        }
    }
}

/// What the model makes of a reported reaction.
#[derive(Clone, Debug)]
pub struct Judged {
    /// Identifier in the source.
    pub id: String,
    /// Class as the source has it.
    pub class: String,
    /// The cell in words.
    pub cell: String,
    /// Whether several kinds of α site compete.
    pub sites_compete: bool,
    /// Why the model does not cover it; none where it does.
    pub not_covered: Option<String>,
    /// Whether the major product by carbon is the reported one.
    pub right_product: bool,
    /// Expected yield.
    pub expected_yield: f64,
    /// Probability that a tenth of the substrate becomes the product.
    pub p_hit: f64,
    /// Largest loss.
    pub largest_loss: String,
    /// Yield as reported, isolated, where it was.
    pub reported_yield: Option<f64>,
    /// Where it is counted; none where its cell could not be made.
    pub groups: Option<Groups>,
}

impl Judged {
    /// Whether the model thinks a yield possible.
    pub fn is_possible(&self) -> bool {
        self.not_covered.is_none() && self.expected_yield >= POSSIBLE
    }

    /// Whether the model gives a covered reaction up.
    pub fn is_given_up(&self) -> bool {
        self.not_covered.is_none() && self.p_hit < GIVEN_UP
    }
}

/// All reactions of the table.
///
/// Where the source says nothing: the boiling point of the solvent where its text speaks of reflux, −78 °C for metal amides, alkyllithiums and Grignard reagents, else 25 °C;
/// THF for these, ethanol for alkoxides, DMF for hydrides and carbonates; 1.2 equivalents of base (2.4 where
/// the substrate has a more acidic X–H or the source names two strong bases), 1.5 of electrophile, 0.2 mol/L, 16 h; all together for acylations by
/// esters. Alkylations that begin in the cold are warmed to 0 °C or 25 °C.
///
/// # Errors
/// A sentence that names a row which cannot be read.
pub fn judge(model: &Model) -> Result<Vec<Judged>, String> {
    reported()?.iter().map(|row| judged(model, row)).collect()
}

/// The rows of the table.
pub(crate) fn reported() -> Result<Vec<Reported>, String> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(b'\t')
        .comment(Some(b'#'))
        .quoting(false)
        .from_reader(REACTIONS.as_bytes());
    let rows = reader.deserialize();
    rows.map(|row| row.map_err(|e| e.to_string())).collect()
}

fn judged(model: &Model, row: &Reported) -> Result<Judged, String> {
    let mut judged = Judged {
        id: row.id.clone(),
        class: row.class.clone(),
        cell: format!(
            "{} + {} / {} / {}",
            row.substrate, row.electrophile, row.base, row.solvent
        ),
        sites_compete: row.site_classes > 1,
        not_covered: None,
        right_product: false,
        expected_yield: 0.0,
        p_hit: 0.0,
        largest_loss: String::new(),
        reported_yield: row.yield_percent.map(|percent| percent / 100.0),
        groups: None,
    };
    let cell = match cell(model, row) {
        Ok(cell) => cell,
        Err(reason) => {
            judged.not_covered = Some(reason);
            return Ok(judged);
        }
    };
    judged.groups = Some(Groups::of(&cell));
    let explanation = model
        .explain(&cell, HIT)
        .map_err(|error| format!("{}: {error}", row.id))?;
    let (Some(expected_yield), Some(p_hit)) = (explanation.expected_yield, explanation.p_hit)
    else {
        judged.not_covered = Some(explanation.limits.join("; "));
        return Ok(judged);
    };
    judged.expected_yield = expected_yield;
    judged.p_hit = p_hit;
    judged.right_product = is_product(&explanation, &row.product);
    judged.largest_loss = explanation
        .losses
        .first()
        .map(|(channel, share)| format!("{} {share:.2}", channel.name()))
        .unwrap_or_default();
    Ok(judged)
}

/// A structure without stereo, and with a formyl group where it is written as the hydroxymethylene group that it is in
/// equilibrium with: sources write the products of formylation either way.
fn flat(smiles: &str) -> Option<String> {
    let flat = |smiles: &str| Molecule::parse(smiles).ok().map(|m| m.canonical_flat());
    let written = flat(smiles)?;
    let formyl = match written.strip_prefix("OC=C") {
        Some(rest) => format!("O=CC{rest}"),
        None => match written.strip_suffix("=CO") {
            Some(rest) => format!("{rest}C=O"),
            None => written.replace("=CO)", "C=O)"),
        },
    };
    flat(&formyl)
}

/// Whether the adduct or its dehydration product is the reported one, stereo and the enols of aldehydes aside.
fn is_product(explanation: &Explanation, reported: &str) -> bool {
    let found = [
        &explanation.product_smiles,
        &explanation.condensation_smiles,
    ];
    let reported = flat(reported);
    found
        .into_iter()
        .flatten()
        .any(|smiles| reported.is_some() && flat(smiles) == reported)
}

/// The cell of a reported reaction, as [`judge`] takes it.
pub(crate) fn cell(model: &Model, row: &Reported) -> Result<Cell, String> {
    let library = model.library();
    let parse = |smiles: &str| Molecule::parse(smiles).map_err(|e| e.to_string());
    let bases: Vec<&Base> = row
        .base
        .split("; ")
        .filter_map(|name| library.base(name))
        .collect();
    let is_strong = |base: &&&Base| {
        matches!(
            base.kind,
            BaseKind::Hydride | BaseKind::Amide | BaseKind::Organolithium
        )
    };
    // sodium hydride, then butyllithium: a dianion is meant
    let strong_bases = bases.iter().filter(is_strong).count();
    let base = bases
        .into_iter()
        .max_by(|a, b| a.pka_dmso.value.total_cmp(&b.pka_dmso.value))
        .ok_or_else(|| format!("the library has no base {}", row.base))?;
    let names: Vec<&str> = row
        .solvent
        .split("; ")
        .filter(|name| !name.is_empty())
        .collect();
    let chosen = names
        .iter()
        .find(|name| !WORK_UP.contains(name))
        .or(names.first())
        .copied()
        .unwrap_or(usual_solvent(base));
    let solvent = library
        .solvent(chosen)
        .ok_or_else(|| format!("the library has no solvent {chosen}"))?;
    let substrate = model.substrate(&row.substrate, parse(&row.substrate)?, None);
    let electrophile = model.electrophile(&row.electrophile, parse(&row.electrophile)?);
    let pair = model.pair(&substrate, &electrophile);
    let takes_cold = matches!(
        base.kind,
        BaseKind::Amide | BaseKind::Organolithium | BaseKind::Grignard
    );
    let reflux = (row.refluxed == "yes" && !takes_cold).then_some(solvent.boiling_c);
    let formation_temperature_c = if takes_cold { -78.0 } else { 25.0 };
    let is_alkylation = row.class.starts_with("alkylation");
    let is_claisen = row.class.starts_with("Claisen");
    let has_stronger_acid = substrate
        .sites
        .first()
        .is_some_and(|site| site.element != 6);
    Ok(Cell {
        substrate: Arc::new(substrate),
        base: Arc::new(model.base(base)),
        electrophile: Arc::new(electrophile),
        solvent: Arc::new(model.solvent(solvent)),
        additive: None,
        pair: Arc::new(pair),
        conditions: Conditions {
            temperature_c: match row.temperature_c {
                // alkylations begun in the cold are warmed up before the quench (common practice)
                Some(t) if takes_cold && is_alkylation => t.max(0.0),
                Some(t) => t,
                None if takes_cold && !is_alkylation => -78.0,
                None => reflux.unwrap_or(25.0),
            },
            formation_temperature_c: row.temperature_c.unwrap_or(formation_temperature_c),
            base_equiv: if has_stronger_acid || strong_bases > 1 {
                2.4
            } else {
                1.2
            },
            electrophile_equiv: 1.5,
            additive_equiv: 0.0,
            concentration_m: 0.2,
            time_h: 16.0,
            dosing_min: 10.0,
            addition: is_claisen.then_some(Addition::AllTogether),
        },
    })
}

fn usual_solvent(base: &Base) -> &'static str {
    match base.kind {
        BaseKind::Alkoxide | BaseKind::Hydroxide => "EtOH",
        BaseKind::Hydride | BaseKind::Carbonate => "DMF",
        _ => "THF",
    }
}

/// Counts by class as a table.
pub fn counts(all: &[Judged]) -> String {
    let mut page = String::from(
        "| class | n | not covered | right product | yield possible | given up |\n| --- | --- | --- | --- | --- | --- |\n",
    );
    let mut by_class: BTreeMap<&str, Vec<&Judged>> = BTreeMap::new();
    for one in all {
        by_class.entry(&one.class).or_default().push(one);
    }
    let line = |page: &mut String, name: &str, some: &[&Judged]| {
        let count = |holds: &dyn Fn(&Judged) -> bool| {
            some.iter()
                .filter(|one| one.not_covered.is_none() && holds(one))
                .count()
        };
        let covered = count(&|_| true);
        let _ = writeln!(
            page,
            "| {name} | {} | {} | {} of {covered} | {} of {covered} | {} |",
            some.len(),
            some.len() - covered,
            count(&|one| one.right_product),
            count(&|one| one.is_possible()),
            count(&|one| one.is_given_up()),
        );
    };
    for (class, some) in &by_class {
        line(&mut page, class, some);
    }
    line(&mut page, "all", &all.iter().collect::<Vec<_>>());
    let compete: Vec<_> = all.iter().filter(|one| one.sites_compete).collect();
    line(&mut page, "where sites compete", &compete);
    page
}

/// Why a reaction is given up, by a chemist's judgement.
#[derive(Clone, Debug, Deserialize)]
pub struct Reason {
    /// Identifier of the reaction.
    pub id: String,
    /// What is at fault: `record`, `not modelled` or `model`.
    pub fault: String,
    /// In words.
    pub reason: String,
}

/// Why reactions are given up.
///
/// # Errors
/// A sentence that names a row which cannot be read.
pub fn reasons() -> Result<Vec<Reason>, String> {
    rows(REASONS)
}

/// Identifiers of the covered reactions that the screen gives up.
///
/// # Errors
/// As [`judge`].
pub fn given_up(model: &Model) -> Result<Vec<String>, String> {
    let given_up = |row: &Reported| {
        let p_hit = model.score(&cell(model, row).ok()?, HIT, 0).p_hit?;
        (p_hit < GIVEN_UP).then(|| row.id.clone())
    };
    Ok(reported()?.iter().filter_map(given_up).collect())
}

/// The reactions that the model gives up, each with the reason.
///
/// # Errors
/// As [`reasons`].
pub fn given_up_section(all: &[Judged]) -> Result<String, String> {
    let reasons = reasons()?;
    let given_up: Vec<&Judged> = all.iter().filter(|one| one.is_given_up()).collect();
    let reason = |one: &Judged| reasons.iter().find(|reason| reason.id == one.id);
    let at_fault = |fault: &str| {
        let those = given_up
            .iter()
            .filter(|one| reason(one).is_some_and(|r| r.fault == fault));
        those.count()
    };
    let mut page = format!(
        "\n## Published reactions that the model gives up\n\n\
         Every covered reaction to which it gives a p_hit below {GIVEN_UP} (a hit is a tenth of the substrate), with a chemist's judgement \
         (`crates/calibration/data/given_up.tsv`). *Record*: what the table has cannot be what was done, {}. *Not modelled*: it goes another way than by \
         the carbanion, {}. *Model*: the model is wrong, {}.\n\n\
         | reaction | p_hit | largest loss | at fault | why |\n| --- | --- | --- | --- | --- |\n",
        at_fault("record"),
        at_fault("not modelled"),
        at_fault("model")
    );
    for one in &given_up {
        let (fault, why) = match reason(one) {
            Some(reason) => (&*reason.fault, &*reason.reason),
            None => ("", "not judged yet"),
        };
        let _ = writeln!(
            page,
            "| {} | {:.3} | {} | {fault} | {why} |",
            one.cell, one.p_hit, one.largest_loss
        );
    }
    Ok(page)
}

/// Counts by class, what is not covered, and the reactions that the model gives up.
///
/// # Errors
/// As [`judge`].
pub fn page(model: &Model) -> Result<String, String> {
    let all = judge(model)?;
    let mut page = counts(&all);
    let covered = || all.iter().filter(|one| one.not_covered.is_none());
    page.push_str("\nNot covered:\n\n");
    for one in all.iter() {
        if let Some(reason) = &one.not_covered {
            let _ = writeln!(
                page,
                "- {} ({}): {} — {reason}",
                one.id, one.class, one.cell
            );
        }
    }
    page.push_str("\nAnother product than the reported one:\n\n");
    for one in covered().filter(|one| !one.right_product) {
        let _ = writeln!(page, "- {} ({}): {}", one.id, one.class, one.cell);
    }
    page.push_str("\nYield thought impossible:\n\n");
    for one in covered().filter(|one| one.expected_yield < POSSIBLE) {
        let _ = writeln!(
            page,
            "- {} ({}): {}; yield {:.2}, p_hit {:.2}, {}",
            one.id, one.class, one.cell, one.expected_yield, one.p_hit, one.largest_loss
        );
    }
    Ok(page)
}
