//! Random cells over the demo's substrates and the reagents of the library, the same in every run.

use std::sync::Arc;

use enolattice_model::{Base, Cell, Conditions, Electrophile, Model, Solvent, Substrate};
use enolattice_molecule::Molecule;

/// Picks from lists with a fixed seed.
pub(crate) struct Sampler {
    state: u64,
}

impl Default for Sampler {
    fn default() -> Sampler {
        Sampler { state: 20_261_201 }
    }
}

impl Sampler {
    /// A sampler with a seed of its own.
    pub(crate) fn seeded(state: u64) -> Sampler {
        Sampler { state }
    }

    /// Knuth's MMIX generator: good enough to pick cells.
    pub(crate) fn pick(&mut self, n: usize) -> usize {
        self.state = self
            .state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        ((self.state >> 33) as usize) % n
    }
}

/// Random cells.
pub(crate) struct RandomCells {
    substrates: Vec<Arc<Substrate>>,
    bases: Vec<Arc<Base>>,
    electrophiles: Vec<Arc<Electrophile>>,
    solvents: Vec<Arc<Solvent>>,
    sampler: Sampler,
}

impl RandomCells {
    /// Prepares the reagents.
    ///
    /// # Errors
    /// A sentence if the demo's substrates cannot be read.
    pub(crate) fn new(model: &Model) -> Result<RandomCells, String> {
        let library = model.library();
        let bases = library.bases().iter();
        let solvents = library.solvents().iter();
        Ok(RandomCells {
            substrates: demo_substrates(model)?,
            bases: bases.map(|b| Arc::new(model.base(b))).collect(),
            electrophiles: library
                .electrophiles()
                .iter()
                // salts are no single molecule
                .filter_map(|named| {
                    let structure = Molecule::parse(&named.smiles).ok()?;
                    Some(Arc::new(model.electrophile(&named.name, structure)))
                })
                .collect(),
            solvents: solvents.map(|s| Arc::new(model.solvent(s))).collect(),
            sampler: Sampler::default(),
        })
    }

    /// The next cell.
    pub(crate) fn next(&mut self, model: &Model) -> Cell {
        let sampler = &mut self.sampler;
        let substrate = self.substrates[sampler.pick(self.substrates.len())].clone();
        let electrophile = self.electrophiles[sampler.pick(self.electrophiles.len())].clone();
        let temperature_c = [-78.0, -20.0, 0.0, 25.0, 60.0][sampler.pick(5)];
        Cell {
            pair: Arc::new(model.pair(&substrate, &electrophile)),
            substrate,
            electrophile,
            base: self.bases[sampler.pick(self.bases.len())].clone(),
            solvent: self.solvents[sampler.pick(self.solvents.len())].clone(),
            additive: None,
            conditions: Conditions {
                additive_equiv: 0.0,
                temperature_c,
                formation_temperature_c: temperature_c,
                base_equiv: [0.1, 1.1, 2.2][sampler.pick(3)],
                electrophile_equiv: [1.1, 2.0][sampler.pick(2)],
                concentration_m: [0.1, 0.4][sampler.pick(2)],
                time_h: [1.0, 16.0][sampler.pick(2)],
                dosing_min: 10.0,
                addition: None,
            },
        }
    }
}

pub(crate) fn demo_substrates(model: &Model) -> Result<Vec<Arc<Substrate>>, String> {
    let text = include_str!("../../../deploy/demo/substrates.csv");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    reader
        .records()
        .map(|row| {
            let row = row.map_err(|error| error.to_string())?;
            let molecule = Molecule::parse(&row[1]).map_err(|e| format!("{}: {e}", &row[0]))?;
            Ok(Arc::new(model.substrate(&row[0], molecule, None)))
        })
        .collect()
}
