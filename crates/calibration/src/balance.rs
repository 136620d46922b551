//! Proton balances of whole pots: kept to the last digit here, and as JSON for a check against an independent
//! equilibrium solver.

use std::sync::Arc;

use enolattice_model::{Acid, Cell, Conditions, Electrophile, Forms, Model, proton_balance};
use enolattice_molecule::Molecule;
use enolattice_reagents::Cation;
use serde_json::{Value, json};

use crate::random_cells::{Sampler, demo_substrates};

/// A pot and what our balance makes of it.
pub struct Balanced {
    /// What the pot holds, in words.
    pub name: String,
    /// Counter-ion of its anions.
    pub cation: Cation,
    /// The acids charged.
    pub acids: Vec<Acid>,
    /// Their forms at equilibrium, in the same order.
    pub forms: Vec<Forms>,
}

impl Balanced {
    fn new(name: String, cation: Cation, acids: Vec<Acid>) -> Balanced {
        Balanced {
            forms: proton_balance(&acids),
            name,
            cation,
            acids,
        }
    }

    /// Greatest change of the amount of any acid, mol/L.
    pub fn mass_deviation_m(&self) -> f64 {
        let pairs = self.acids.iter().zip(&self.forms);
        pairs
            .map(|(acid, forms)| (acid.charged_m.iter().sum::<f64>() - forms.total_m()).abs())
            .fold(0.0, f64::max)
    }

    /// Change of the charge of all acids together, mol/L: that of the metal ions, which take no part, stays.
    pub fn charge_deviation_m(&self) -> f64 {
        let pairs = self.acids.iter().zip(&self.forms);
        let change = |(acid, forms): (&Acid, &Forms)| {
            let charge = f64::from(acid.charge);
            let of = |free: &[f64]| -> f64 {
                let each = free.iter().enumerate();
                each.map(|(lost, amount)| (charge - lost as f64) * amount)
                    .sum()
            };
            of(&forms.free_m) + (2.0 * charge - 1.0) * forms.complex_m - of(&acid.charged_m)
        };
        pairs.map(change).sum::<f64>().abs()
    }
}

/// Balances that a laboratory meets, for which the pKa are published: in water and ethanol.
fn known() -> Vec<Balanced> {
    let acid = |name: &str, pkas: &[f64], charged_m: &[f64]| Acid {
        name: name.to_owned(),
        charge: 0,
        pkas: pkas.to_vec(),
        charged_m: charged_m.to_vec(),
        log10_homoconjugation: None,
    };
    let mut benzoic = acid("benzoic acid", &[21.5], &[0.1, 0.05]);
    benzoic.log10_homoconjugation = Some(3.6);
    let mut nitrophenol = acid("4-nitrophenol", &[20.7], &[0.02, 0.0]);
    nitrophenol.log10_homoconjugation = Some(3.7);
    let pots = [
        (
            "malonate and ethoxide in ethanol",
            vec![
                acid("diethyl malonate", &[13.6], &[0.2, 0.0]),
                acid("ethanol", &[20.3], &[16.9, 0.22]),
            ],
        ),
        (
            "malonate and carbonate in water",
            vec![
                acid("diethyl malonate", &[13.3], &[0.2, 0.0]),
                acid("carbonic acid", &[6.35, 10.33], &[0.0, 0.0, 0.3]),
                acid("water", &[15.7], &[55.0, 0.0]),
            ],
        ),
        (
            "phosphate and a 1,3-diketone in water",
            vec![
                acid("acetylacetone", &[8.9], &[0.1, 0.0]),
                acid(
                    "phosphoric acid",
                    &[2.15, 7.2, 12.35],
                    &[0.0, 0.0, 0.0, 0.1],
                ),
                acid("water", &[15.7], &[55.0, 0.0]),
            ],
        ),
        (
            "toluenesulfonic acid and acetate in water, levelled",
            vec![
                acid("toluenesulfonic acid", &[-2.8], &[0.1, 0.0]),
                acid("acetic acid", &[4.76], &[0.0, 0.04]),
                Acid {
                    charge: 1,
                    ..acid("water", &[-1.74, 15.7], &[0.0, 55.3, 0.0])
                },
            ],
        ),
        (
            "benzoic acid, benzoate and 4-nitrophenol in MeCN",
            vec![benzoic, nitrophenol],
        ),
    ];
    pots.into_iter()
        .map(|(name, acids)| Balanced::new(name.to_owned(), Cation::None, acids))
        .collect()
}

/// Pots in which acids and their anions pair up by hydrogen bonds.
const PAIRING: [(&str, &str); 6] = [
    ("NaOAc", "MeCN"),
    ("KOAc", "MeCN"),
    ("CsOAc", "DMSO"),
    ("NaOAc", "DMSO"),
    ("NaOPh", "MeCN"),
    ("Et3N", "MeCN"),
];

/// Pots in which an additive gives or takes a proton, and strong acids in solvents that level them.
const ADDED: [(&str, &str, &str); 6] = [
    ("K2CO3", "MeCN", "TBAHSO4"),
    ("NaOH", "water", "TBAHSO4"),
    ("Et3N", "DCM", "TBAHSO4"),
    ("LDA", "THF", "TMEDA"),
    ("nBuLi", "Et2O", "TMEDA"),
    ("NaHCO3", "DMF", "TBAHSO4"),
];

/// One whole pot for each base of the library, with substrate, electrophile, solvent, temperature, amounts and conversion
/// drawn with a fixed seed, then [`PAIRING`] and [`ADDED`].
///
/// # Errors
/// A sentence if the demo's substrates or a reagent cannot be read.
pub fn pots(model: &Model) -> Result<Vec<Balanced>, String> {
    let substrates = demo_substrates(model)?;
    let library = model.library();
    let (bases, solvents) = (library.bases(), library.solvents());
    let electrophiles: Vec<Arc<Electrophile>> = library
        .electrophiles()
        .iter()
        // salts are no single molecule
        .filter_map(|named| {
            let structure = Molecule::parse(&named.smiles).ok()?;
            Some(Arc::new(model.electrophile(&named.name, structure)))
        })
        .collect();
    let mut sampler = Sampler::default();
    let drawn: Vec<(&str, &str, Option<&str>)> = bases
        .iter()
        .map(|base| {
            let solvent = &solvents[sampler.pick(solvents.len())];
            (base.name.as_str(), solvent.name.as_str(), None)
        })
        .collect();
    let pairing = PAIRING.map(|(base, solvent)| (base, solvent, None));
    let added = ADDED.map(|(base, solvent, additive)| (base, solvent, Some(additive)));
    let mut all = known();
    for (base, solvent, additive) in drawn.into_iter().chain(pairing).chain(added) {
        let base = library.base(base).ok_or(format!("{base}: no such base"))?;
        let solvent = library
            .solvent(solvent)
            .ok_or(format!("{solvent}: no such solvent"))?;
        let additive = additive
            .map(|name| {
                let record = library.additive(name);
                record.ok_or(format!("{name}: no such additive"))
            })
            .transpose()?;
        let electrophile = electrophiles[sampler.pick(electrophiles.len())].clone();
        let substrate = substrates[sampler.pick(substrates.len())].clone();
        let temperature_c = [-78.0, 0.0, 25.0, 60.0][sampler.pick(4)];
        let cell = Cell {
            pair: Arc::new(model.pair(&substrate, &electrophile)),
            substrate,
            electrophile,
            base: Arc::new(model.base(base)),
            solvent: Arc::new(model.solvent(solvent)),
            additive: additive.map(|record| Arc::new(model.additive(record))),
            conditions: Conditions {
                additive_equiv: if additive.is_some() { 0.5 } else { 0.0 },
                temperature_c,
                formation_temperature_c: temperature_c,
                base_equiv: [0.1, 1.1, 2.2][sampler.pick(3)],
                electrophile_equiv: [1.1, 2.0][sampler.pick(2)],
                concentration_m: [0.1, 0.4][sampler.pick(2)],
                time_h: 1.0,
                dosing_min: 10.0,
                addition: None,
            },
        };
        let converted = [0.0, 0.3, 0.9][sampler.pick(3)];
        let name = format!(
            "{} + {} + {} in {}, {temperature_c} °C, {:.0} % converted",
            cell.substrate.name,
            cell.base.record.name,
            cell.electrophile.name,
            cell.solvent.record.name,
            100.0 * converted
        );
        let cation = cell.base.record.cation;
        all.push(Balanced::new(name, cation, model.pot(&cell, converted)));
    }
    Ok(all)
}

/// All balances with our solution.
///
/// # Errors
/// As [`pots`].
pub fn to_json(model: &Model) -> Result<Value, String> {
    let cases: Vec<Value> = pots(model)?
        .into_iter()
        .map(|pot| {
            let acids: Vec<Value> = pot
                .acids
                .iter()
                .zip(&pot.forms)
                .map(|(acid, forms)| {
                    json!({
                        "name": acid.name,
                        "charge": acid.charge,
                        "pkas": acid.pkas,
                        "log10_homoconjugation": acid.log10_homoconjugation,
                        "charged_m": acid.charged_m,
                        "solution_m": forms.free_m,
                        "complex_m": forms.complex_m,
                    })
                })
                .collect();
            json!({ "name": pot.name, "cation": format!("{:?}", pot.cation), "acids": acids })
        })
        .collect();
    Ok(json!({ "cases": cases }))
}
