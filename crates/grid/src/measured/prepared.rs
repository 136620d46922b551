//! What a laboratory has measured, prepared for the model: each yield with its cell, whether or not a
//! campaign has that cell, and each pKa with its molecule.

use std::collections::HashMap;
use std::sync::Arc;

use enolattice_model::{
    Additive, Base, Cell, Conditions, Electrophile, MeasuredPka, Model, Pair, Solvent, Substrate,
};
use enolattice_molecule::Molecule;

use super::{MeasuredYield, Measurement, Pot};
use crate::axes::Read;
use crate::campaign::checked;
use crate::resolve::NO_ADDITIVE;
use crate::warnings::Warnings;
use crate::{CampaignSpec, InputError};

/// What a laboratory has measured, prepared for the model.
#[derive(Clone, Debug)]
pub struct Measured {
    /// Yields, in the order of [`CampaignSpec::measured`].
    pub yields: Vec<MeasuredCell>,
    /// pKa, in the order of the substrates that have one.
    pub acidities: Vec<MeasuredAcidity>,
    /// Yield that makes a hit.
    pub yield_at_least: f64,
}

/// A cell of which a yield was measured.
#[derive(Clone, Debug)]
pub struct MeasuredCell {
    /// The cell.
    pub cell: Cell,
    /// Its yield.
    pub measured: MeasuredYield,
}

/// A compound with the pKa that a laboratory has measured of its most acidic C–H.
#[derive(Clone, Debug)]
pub struct MeasuredAcidity {
    /// Name.
    pub name: String,
    /// The compound, without counter-ions.
    pub molecule: Molecule,
    /// Its pKa on the DMSO scale.
    pub pka: MeasuredPka,
}

impl Measured {
    /// The measured yields of a specification and the pKa of its substrates. Its axes may be empty; a
    /// substrate with a pKa of its own keeps it in the cells, as it does in a campaign.
    ///
    /// # Errors
    /// Every fault at once.
    pub fn of(spec: &CampaignSpec, model: &Model) -> Result<Measured, Vec<InputError>> {
        let mut warnings = Warnings::default();
        let (sound, measurements) = checked(spec, model.library(), false, &mut warnings)?;
        let mut shelf = Shelf::new(model, &sound.substrates);
        // no row was refused, so that each has its measurement
        let rows = spec.measured.iter().zip(measurements);
        let yields = rows.filter_map(|(row, Measurement { of, value, .. })| {
            Some(MeasuredCell {
                cell: shelf.cell(&of, &row.substrate, &row.electrophile)?,
                measured: value,
            })
        });
        Ok(Measured {
            yields: yields.collect(),
            acidities: sound.substrates.iter().filter_map(acidity).collect(),
            yield_at_least: sound.yield_at_least,
        })
    }
}

fn acidity(read: &Read) -> Option<MeasuredAcidity> {
    Some(MeasuredAcidity {
        name: read.name.clone(),
        molecule: read.salt.molecule.clone(),
        pka: read.own_pka?,
    })
}

/// Reagents that were prepared, each once.
struct Shelf<'m> {
    model: &'m Model,
    own_pka: HashMap<String, MeasuredPka>,
    substrates: HashMap<String, Arc<Substrate>>,
    electrophiles: HashMap<String, Arc<Electrophile>>,
    pairs: HashMap<(String, String), Arc<Pair>>,
    bases: HashMap<String, Arc<Base>>,
    solvents: HashMap<String, Arc<Solvent>>,
    additives: HashMap<String, Arc<Additive>>,
}

impl<'m> Shelf<'m> {
    fn new(model: &'m Model, substrates: &[Read]) -> Shelf<'m> {
        let own = substrates
            .iter()
            .filter_map(|read| Some((read.salt.molecule.canonical().to_owned(), read.own_pka?)));
        Shelf {
            model,
            own_pka: own.collect(),
            substrates: HashMap::new(),
            electrophiles: HashMap::new(),
            pairs: HashMap::new(),
            bases: HashMap::new(),
            solvents: HashMap::new(),
            additives: HashMap::new(),
        }
    }

    /// The cell of a pot; its names were found when the row was checked, so that none is missing.
    fn cell(&mut self, pot: &Pot, substrate_name: &str, electrophile_name: &str) -> Option<Cell> {
        let (model, library) = (self.model, self.model.library());
        let substrate = kept(&mut self.substrates, &pot.substrate, |canonical| {
            let own_pka = self.own_pka.get(canonical).copied();
            let molecule = Molecule::parse(canonical).ok()?;
            Some(model.substrate(substrate_name, molecule, own_pka))
        })?;
        let electrophile = kept(&mut self.electrophiles, &pot.electrophile, |canonical| {
            let molecule = Molecule::parse(canonical).ok()?;
            Some(model.electrophile(electrophile_name, molecule))
        })?;
        let pair = (pot.substrate.clone(), pot.electrophile.clone());
        let prepare = || Arc::new(model.pair(&substrate, &electrophile));
        let pair = self.pairs.entry(pair).or_insert_with(prepare).clone();
        let additive = match pot.additive.as_str() {
            NO_ADDITIVE => None,
            name => Some(kept(&mut self.additives, name, |name| {
                Some(model.additive(library.additive(name)?))
            })?),
        };
        Some(Cell {
            base: kept(&mut self.bases, &pot.base, |name| {
                Some(model.base(library.base(name)?))
            })?,
            solvent: kept(&mut self.solvents, &pot.solvent, |name| {
                Some(model.solvent(&library.solvent_or_mixture(name).ok()?))
            })?,
            substrate,
            electrophile,
            additive,
            pair,
            conditions: conditions(pot),
        })
    }
}

/// What is kept under a name, made when it is first asked for.
fn kept<T>(
    all: &mut HashMap<String, Arc<T>>,
    name: &str,
    make: impl FnOnce(&str) -> Option<T>,
) -> Option<Arc<T>> {
    if let Some(known) = all.get(name) {
        return Some(known.clone());
    }
    let made = Arc::new(make(name)?);
    all.insert(name.to_owned(), made.clone());
    Some(made)
}

fn conditions(pot: &Pot) -> Conditions {
    let [
        temperature_c,
        formation_temperature_c,
        base_equiv,
        electrophile_equiv,
        additive_equiv,
        concentration_m,
        time_h,
        dosing_min,
    ] = pot.numbers.map(|number| number.get());
    Conditions {
        temperature_c,
        formation_temperature_c,
        base_equiv,
        electrophile_equiv,
        additive_equiv,
        concentration_m,
        time_h,
        dosing_min,
        addition: Some(pot.addition),
    }
}
