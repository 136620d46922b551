//! Stocks: what is weighed and dissolved, in what, how much, for how long.
//!
//! A stock is made in the solvent of the wells that it serves, so that they hold what their cells say. Where that cannot
//! be (the base is sold in another solvent, the solvent destroys the reagent) the other solvent is dosed with it, and the
//! plan scores the well again in what it then holds.

mod liquid;
mod made_in;
mod strength;

use std::collections::{BTreeMap, BTreeSet};

use enolattice_grid::{FaultCode, InputError};
use enolattice_reagents::{Library, Solvent};
use serde::{Deserialize, Serialize};

use crate::request::fault;
use crate::transfers::source_wells;
use crate::{Deck, Recipe, Role, Well};
pub use liquid::Liquid;
use made_in::{MadeIn, made_in};
use strength::{Needs, strengths};

/// Roles of what is dosed from stocks, in the order of the stock sheet.
const DOSED: [Role; 4] = [
    Role::Substrate,
    Role::Base,
    Role::Electrophile,
    Role::Additive,
];

/// How a stock is had.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Form {
    /// Weighed or measured, and dissolved.
    Solution,
    /// A suspension that must be stirred while it is dispensed.
    Suspension,
    /// A solution as it is bought, undiluted or diluted.
    Bought,
    /// A liquid as it is.
    Liquid,
    /// A solid that is weighed into each well.
    Solid,
}

impl Form {
    /// The word for it.
    pub fn name(self) -> &'static str {
        match self {
            Form::Solution => "solution",
            Form::Suspension => "suspension",
            Form::Bought => "bought solution",
            Form::Liquid => "liquid",
            Form::Solid => "solid",
        }
    }
}

/// A well of a source plate.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Source {
    /// Plate.
    pub plate: String,
    /// Well.
    pub well: Well,
    /// Volume that is filled in, uL.
    pub filled_ul: f64,
    /// Volume that is taken out, uL.
    pub taken_ul: f64,
}

/// A stock.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Stock {
    /// Its number on the stock sheet, `B2`.
    pub label: String,
    /// What it is there for.
    pub role: Role,
    /// What it is of.
    pub reagent: String,
    /// What it is made in; of a liquid or a solid the reagent itself.
    pub solvent: String,
    /// How it is had.
    pub form: Form,
    /// Concentration, mol/L; 0 for liquids that are no reagents and for solids.
    pub concentration_m: f64,
    /// Volume that is made, uL; 0 of a solid.
    pub made_ul: f64,
    /// Mass to weigh, mg; none where a solution is bought, and of solvents.
    pub weigh_mg: Option<f64>,
    /// Molar mass, g/mol.
    pub molar_mass_g_mol: Option<f64>,
    /// Mass fraction of the reagent in what is weighed, 0–1.
    pub purity: f64,
    /// Volume of the bought solution, uL, and its concentration, mol/L.
    pub take: Option<(f64, f64)>,
    /// Wells that it serves.
    pub wells: usize,
    /// Where it stands on the deck.
    pub sources: Vec<Source>,
    /// Properties of the liquid; none of a solid.
    pub liquid: Option<Liquid>,
    /// Time in which a twentieth of it is lost at room temperature, h; none where that is not known.
    pub lasts_h: Option<f64>,
    /// How it is kept until it is used.
    pub keep: String,
    /// GHS statements of the reagent; `unknown` where none are known.
    pub hazards: String,
    /// What else the person who makes it should know.
    pub notes: Vec<String>,
}

/// What a well gets of a stock.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Dose {
    /// Index of the stock.
    pub stock: usize,
    /// Volume, nL; 0 of a solid.
    pub volume_nl: f64,
    /// Mass, mg, of a solid; 0 of a liquid.
    pub mass_mg: f64,
}

/// Stocks and what every well gets of them.
#[derive(Clone, Debug, PartialEq)]
pub struct Supply {
    /// Stocks, in the order of the stock sheet.
    pub stocks: Vec<Stock>,
    /// Doses of each recipe.
    pub doses: Vec<Vec<Dose>>,
    /// Volume of each reaction, uL.
    pub volume_ul: f64,
}

/// Which stock a well draws on.
#[derive(Clone, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
struct Key {
    role: Role,
    reagent: String,
    made_in: MadeIn,
}

/// Wells that draw on a stock.
#[derive(Debug, Default)]
struct Needed {
    /// Recipes with the amounts that they need, umol.
    wells: Vec<(usize, f64)>,
    /// Why it is not made in the solvents of its wells.
    because: BTreeSet<String>,
}

/// Works out the stocks of all recipes.
///
/// # Errors
/// Every reagent that cannot be dosed on this deck, with the way out.
pub(crate) fn supply(
    recipes: &[Recipe],
    volume_ul: f64,
    deck: &Deck,
    library: &Library,
    carrier: Option<&Solvent>,
) -> Result<Supply, Vec<InputError>> {
    let mut faults = Vec::new();
    let mut needed: BTreeMap<Key, Needed> = BTreeMap::new();
    for (at, recipe) in recipes.iter().enumerate() {
        for role in DOSED {
            let amount = recipe.amount_umol(role, volume_ul);
            let Some(reagent) = recipe.reagent(role).filter(|_| amount > 0.0) else {
                continue;
            };
            match made_in(recipe, role, volume_ul, deck, library, carrier) {
                Ok(chosen) => {
                    let key = Key {
                        role,
                        reagent: reagent.to_owned(),
                        made_in: chosen.made_in,
                    };
                    let of_stock = needed.entry(key).or_default();
                    of_stock.wells.push((at, amount));
                    of_stock.because.extend(chosen.because);
                }
                Err(refusal) => faults.push(*refusal),
            }
        }
    }
    faults.dedup_by(|a, b| a.value == b.value && a.reason == b.reason);
    let mut making = Making {
        recipes,
        volume_ul,
        deck,
        library,
        stocks: Vec::new(),
        doses: vec![Vec::new(); recipes.len()],
        faults,
    };
    for (key, needed) in &needed {
        making.reagent(key, needed);
    }
    making.fill_up();
    making.finish()
}

struct Making<'a> {
    recipes: &'a [Recipe],
    volume_ul: f64,
    deck: &'a Deck,
    library: &'a Library,
    stocks: Vec<Stock>,
    doses: Vec<Vec<Dose>>,
    faults: Vec<InputError>,
}

impl Making<'_> {
    /// The stock or stocks of one reagent in one solvent, and the doses that wells get of them.
    fn reagent(&mut self, key: &Key, needed: &Needed) {
        let wells = &needed.wells;
        let first = &self.recipes[wells[0].0];
        if key.made_in.form == Form::Solid {
            return self.solid(key, wells);
        }
        let needs = Needs {
            role: key.role,
            reagent: &key.reagent,
            made_in: &key.made_in,
            amounts_umol: wells.iter().map(|(_, amount)| *amount).collect(),
        };
        let strengths = match strengths(&needs, self.volume_ul, self.deck) {
            Ok(strengths) => strengths,
            Err(refusal) => return self.faults.push(*refusal),
        };
        for concentration_m in &strengths.concentrations_m {
            let stock = self.stocks.len();
            let mut served = 0;
            for (at, amount) in wells {
                if strengths.of(*amount) != *concentration_m {
                    continue;
                }
                let volume_nl = self.rounded_nl(1000.0 * amount / concentration_m);
                served += 1;
                self.doses[*at].push(Dose {
                    stock,
                    volume_nl,
                    mass_mg: 0.0,
                });
            }
            let mut made = liquid::stock(
                first,
                key,
                *concentration_m,
                &self.gives_ul(stock, key.role),
                self.deck,
                self.library,
            );
            made.wells = served;
            made.notes.extend(needed.because.iter().map(|because| {
                format!(
                    "in {}, not in the solvent of its wells: {because}",
                    made.solvent
                )
            }));
            self.stocks.push(made);
        }
    }

    fn solid(&mut self, key: &Key, wells: &[(usize, f64)]) {
        let first = &self.recipes[wells[0].0];
        let stock = self.stocks.len();
        let made = liquid::solid(first, key);
        let molar_mass = made.molar_mass_g_mol.unwrap_or(0.0);
        let mut total_mg = 0.0;
        for (at, amount) in wells {
            let mass_mg = amount * molar_mass / 1000.0 / made.purity;
            total_mg += mass_mg;
            self.doses[*at].push(Dose {
                stock,
                volume_nl: 0.0,
                mass_mg,
            });
        }
        self.stocks.push(Stock {
            wells: wells.len(),
            weigh_mg: Some(total_mg * (1.0 + self.deck.excess_percent / 100.0)),
            ..made
        });
    }

    /// Solvent that fills each well up to the volume of its reaction.
    fn fill_up(&mut self) {
        let mut rest: BTreeMap<String, Vec<(usize, f64)>> = BTreeMap::new();
        for (at, recipe) in self.recipes.iter().enumerate() {
            let dosed_nl: f64 = self.doses[at].iter().map(|dose| dose.volume_nl).sum();
            let room_nl = 1000.0 * self.volume_ul - dosed_nl;
            if room_nl < -self.deck.step_nl {
                self.faults.push(fault(
                    FaultCode::PlanImpossible,
                    "well.volume_ul",
                    self.volume_ul,
                    format!(
                        "the stocks of one well come to {:.1} uL (cell with {}, {}, {})",
                        dosed_nl / 1000.0,
                        recipe.cell.substrate.name,
                        recipe.cell.base.record.name,
                        recipe.cell.electrophile.name,
                    ),
                    "screen at a lower concentration, or leave the reagent out whose solution is weakest",
                ));
                continue;
            }
            // what is smaller than a transfer is left out, or lost in rounding
            if room_nl >= self.deck.smallest_nl {
                let solvent = recipe.cell.solvent.record.name.clone();
                rest.entry(solvent).or_default().push((at, room_nl));
            }
        }
        for (solvent, wells) in rest {
            let stock = self.stocks.len();
            for (at, room_nl) in &wells {
                let volume_nl = self.rounded_nl(*room_nl);
                self.doses[*at].push(Dose {
                    stock,
                    volume_nl,
                    mass_mg: 0.0,
                });
            }
            let record = &self.recipes[wells[0].0].cell.solvent.record;
            let gives_ul = self.gives_ul(stock, Role::Solvent);
            let made = liquid::solvent(record, Role::Solvent, &solvent, &gives_ul, self.deck);
            self.stocks.push(Stock {
                wells: wells.len(),
                ..made
            });
        }
    }

    /// What each source well of a stock gives to the doses that are there, uL.
    fn gives_ul(&self, stock: usize, role: Role) -> Vec<f64> {
        source_wells(stock, role, self.recipes, &self.doses, self.deck)
    }

    fn rounded_nl(&self, volume_nl: f64) -> f64 {
        (volume_nl / self.deck.step_nl).round() * self.deck.step_nl
    }

    fn finish(mut self) -> Result<Supply, Vec<InputError>> {
        if !self.faults.is_empty() {
            return Err(self.faults);
        }
        liquid::place(&mut self.stocks, self.recipes, &self.doses, self.deck);
        Ok(Supply {
            stocks: self.stocks,
            doses: self.doses,
            volume_ul: self.volume_ul,
        })
    }
}

impl Supply {
    /// Adds a liquid that each wanted well gets the same volume of; the volume is rounded to the deck's step.
    pub(crate) fn add_for_all(
        &mut self,
        role: Role,
        name: &str,
        recipes: &[Recipe],
        wanted: impl Fn(&Recipe) -> bool,
        volume_ul: f64,
        deck: &Deck,
    ) {
        let volume_nl = (1000.0 * volume_ul / deck.step_nl).round() * deck.step_nl;
        let wells: Vec<usize> = (0..recipes.len())
            .filter(|at| wanted(&recipes[*at]))
            .collect();
        if wells.is_empty() || volume_nl <= 0.0 {
            return;
        }
        let stock = self.stocks.len();
        for &at in &wells {
            self.doses[at].push(Dose {
                stock,
                volume_nl,
                mass_mg: 0.0,
            });
        }
        let gives_ul = source_wells(stock, role, recipes, &self.doses, deck);
        self.stocks.push(Stock {
            wells: wells.len(),
            ..liquid::unknown(role, name, &gives_ul, deck)
        });
        liquid::place(&mut self.stocks, recipes, &self.doses, deck);
    }

    /// Volume fractions of the solvents that a well holds once all reagents are in, largest first.
    ///
    /// The volume of a reagent counts as its stock's solvent; quench and diluent do not count.
    pub fn medium(&self, at: usize, library: &Library) -> Vec<(String, f64)> {
        let mut parts: BTreeMap<String, f64> = BTreeMap::new();
        for dose in &self.doses[at] {
            let stock = &self.stocks[dose.stock];
            if matches!(stock.role, Role::Quench | Role::Diluent) || dose.volume_nl <= 0.0 {
                continue;
            }
            match library.solvent_or_mixture(&stock.solvent) {
                Ok(solvent) => solvent.components().for_each(|part| {
                    *parts.entry(part.name.to_owned()).or_default() +=
                        dose.volume_nl * part.volume_fraction;
                }),
                Err(_) => *parts.entry(stock.solvent.clone()).or_default() += dose.volume_nl,
            }
        }
        let all: f64 = parts.values().sum();
        let mut parts: Vec<(String, f64)> = parts
            .into_iter()
            .map(|(name, volume)| (name, volume / all))
            .collect();
        parts.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
        parts
    }
}
