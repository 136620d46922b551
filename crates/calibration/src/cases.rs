//! What chemists know to happen, held against the model.

use enolattice_model::{Addition, Cell, Conditions, Explanation, Model, Score};
use enolattice_molecule::Molecule;
use serde::Deserialize;

use crate::cell::cell;

/// Least yield of the better cell of a comparison.
const LEAST_YIELD: f64 = 0.15;
/// Least ratio of the yields of a comparison.
const LEAST_RATIO: f64 = 1.25;

/// One statement of the trade.
#[derive(Clone, Debug, Deserialize)]
pub struct Case {
    /// Name of the case.
    pub id: String,
    kind: Kind,
    a: Option<Recipe>,
    b: Option<Recipe>,
    cell: Option<Recipe>,
    product: Option<String>,
    #[serde(default)]
    any_of: Vec<String>,
    category: Option<String>,
    /// Where the statement comes from.
    pub source: String,
}

#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(rename_all = "lowercase")]
enum Kind {
    Prefer,
    Site,
    Loss,
    Caution,
}

#[derive(Clone, Debug, Deserialize)]
struct Recipe {
    substrate: String,
    base: String,
    electrophile: String,
    solvent: String,
    temperature_c: f64,
    formation_temperature_c: Option<f64>,
    base_equiv: f64,
    electrophile_equiv: f64,
    time_h: f64,
    concentration_m: f64,
    dosing_min: Option<f64>,
    addition: Option<String>,
}

/// Whether a case holds, and what was found.
#[derive(Clone, Debug)]
pub struct Verdict {
    /// Whether it holds; `None` where the library or the model does not cover it.
    pub holds: Option<bool>,
    /// The numbers found.
    pub found: String,
}

/// The cases kept with the project.
///
/// # Errors
/// A sentence if the file is not what it should be.
pub fn all() -> Result<Vec<Case>, String> {
    serde_json::from_str(include_str!("../data/trade_cases.json"))
        .map_err(|error| format!("trade_cases.json: {error}"))
}

impl Case {
    /// Holds the case against the model.
    pub fn verdict(&self, model: &Model) -> Verdict {
        self.check(model).unwrap_or_else(|reason| Verdict {
            holds: None,
            found: reason,
        })
    }

    fn check(&self, model: &Model) -> Result<Verdict, String> {
        match self.kind {
            Kind::Prefer => self.prefer(model),
            Kind::Site => self.site(model),
            Kind::Loss => self.loss(model),
            Kind::Caution => self.caution(model),
        }
    }

    fn prefer(&self, model: &Model) -> Result<Verdict, String> {
        let (a, b) = (
            self.a.as_ref().ok_or("no cell a")?,
            self.b.as_ref().ok_or("no cell b")?,
        );
        let (a, b) = (score(model, a)?, score(model, b)?);
        let (ya, yb) = (
            a.expected_yield.ok_or("cell a is not covered")?,
            b.expected_yield.ok_or("cell b is not covered")?,
        );
        let name = |s: &Score| s.largest_loss.map_or("-", |l| l.name());
        Ok(Verdict {
            holds: Some(ya >= LEAST_YIELD && ya >= LEAST_RATIO * yb),
            found: format!("a {ya:.3} ({}), b {yb:.3} ({})", name(&a), name(&b)),
        })
    }

    fn site(&self, model: &Model) -> Result<Verdict, String> {
        let explanation = explain(model, self.cell.as_ref().ok_or("no cell")?)?;
        let wanted = flat(self.product.as_ref().ok_or("no product")?)?;
        let found = explanation
            .product_smiles
            .clone()
            .ok_or("no product found")?;
        let flat_found = flat(&found)?;
        let dry = explanation
            .condensation_smiles
            .as_deref()
            .map(flat)
            .transpose()?;
        Ok(Verdict {
            holds: Some(flat_found == wanted || dry.as_ref() == Some(&wanted)),
            found: format!(
                "{found}, yield {:.3}",
                explanation.expected_yield.unwrap_or(f64::NAN)
            ),
        })
    }

    fn loss(&self, model: &Model) -> Result<Verdict, String> {
        let explanation = explain(model, self.cell.as_ref().ok_or("no cell")?)?;
        let losses: Vec<_> = explanation
            .losses
            .iter()
            .map(|(channel, share)| format!("{} {share:.2}", channel.name()))
            .collect();
        let largest = explanation.losses.first().map(|loss| loss.0.name());
        Ok(Verdict {
            holds: Some(largest.is_some_and(|name| self.any_of.iter().any(|any| any == name))),
            found: format!(
                "{}; yield {:.3}",
                losses.join(", "),
                explanation.expected_yield.unwrap_or(f64::NAN)
            ),
        })
    }

    fn caution(&self, model: &Model) -> Result<Verdict, String> {
        let explanation = explain(model, self.cell.as_ref().ok_or("no cell")?)?;
        let category = self.category.as_ref().ok_or("no category")?;
        let found: Vec<_> = explanation
            .cautions
            .iter()
            .map(|caution| format!("{} ({})", caution.category.name(), caution.severity.name()))
            .collect();
        let holds = explanation
            .cautions
            .iter()
            .any(|c| c.category.name() == category);
        Ok(Verdict {
            holds: Some(holds),
            found: found.join(", "),
        })
    }
}

fn flat(smiles: &str) -> Result<String, String> {
    Molecule::parse(smiles)
        .map(|m| m.canonical_flat())
        .map_err(|e| format!("{smiles}: {e}"))
}

fn score(model: &Model, recipe: &Recipe) -> Result<Score, String> {
    Ok(model.score(&cell_of(model, recipe)?, 0.5, 0))
}

fn explain(model: &Model, recipe: &Recipe) -> Result<Explanation, String> {
    model
        .explain(&cell_of(model, recipe)?, 0.5)
        .map_err(|error| error.to_string())
}

fn cell_of(model: &Model, recipe: &Recipe) -> Result<Cell, String> {
    let names = [
        &recipe.substrate,
        &recipe.base,
        &recipe.electrophile,
        &recipe.solvent,
    ];
    let conditions = Conditions {
        additive_equiv: 0.0,
        temperature_c: recipe.temperature_c,
        formation_temperature_c: recipe
            .formation_temperature_c
            .unwrap_or(recipe.temperature_c),
        base_equiv: recipe.base_equiv,
        electrophile_equiv: recipe.electrophile_equiv,
        concentration_m: recipe.concentration_m,
        time_h: recipe.time_h,
        dosing_min: recipe.dosing_min.unwrap_or(10.0),
        addition: recipe.addition.as_deref().and_then(Addition::from_name),
    };
    cell(model, names.map(String::as_str), conditions)
}

/// Prints every case and the counts.
///
/// # Errors
/// A sentence if the file is not what it should be.
pub fn print(model: &Model, out: &mut impl std::io::Write) -> Result<(), String> {
    let (mut holding, mut failing, mut uncovered) = (0, 0, 0);
    for case in all()? {
        let verdict = case.verdict(model);
        let mark = match verdict.holds {
            Some(true) => {
                holding += 1;
                "holds"
            }
            Some(false) => {
                failing += 1;
                "FAILS"
            }
            None => {
                uncovered += 1;
                "not covered"
            }
        };
        writeln!(out, "{:12} {:11} {}", case.id, mark, verdict.found).map_err(|e| e.to_string())?;
    }
    writeln!(
        out,
        "{holding} hold, {failing} fail, {uncovered} are not covered"
    )
    .map_err(|e| e.to_string())
}
