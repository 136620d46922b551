//! The model: prepares reagents, scores cells, explains them.

use std::sync::Arc;

use enolattice_molecule::{AnionClass, Molecule};
use enolattice_reagents::{Cation, Library};
use enolattice_units::math;
use sha2::{Digest, Sha256};

use crate::acidity::acidity_texts;
use crate::balance::{Reached, whole_pot};
use crate::draws::{doubts, yields};
use crate::explain::{explain, fate};
use crate::formation::{FormationTable, Pots};
use crate::kinetics::{Kinetics, Nudge, nucleophilicity_of};
use crate::medium::{Loosening, Medium, Onium};
use crate::network::Species;
use crate::parameters::{PARAMETERS, Parameter, Values};
use crate::screen::{self, Coverage, score, solve_at};
use crate::{
    Acid, Additive, Base, Cell, Doubt, Draw, Electrophile, Explanation, Fate, MeasuredPka, Pair,
    PlainNetwork, Score, Solutions, Solvent, Substrate,
};

/// SHA-256 over code version, data, coefficients and arithmetic.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Fingerprint(pub [u8; 32]);

impl std::fmt::Display for Fingerprint {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        self.0.iter().try_for_each(|byte| write!(f, "{byte:02x}"))
    }
}

/// Why the model cannot treat an input.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum ModelError {
    /// The reference integration failed.
    #[error("the reference integration failed: {reason}")]
    Integration {
        /// What the integrator said.
        reason: String,
    },
}

/// Raised whenever the meaning of a score changes without a change of data.
const ARITHMETIC_VERSION: u32 = 9;

/// The model with its library and parameters.
#[derive(Debug)]
pub struct Model {
    library: Arc<Library>,
    means: Values,
}

impl Model {
    /// A model over a library, all parameters at their means.
    pub fn new(library: Arc<Library>) -> Model {
        Model {
            library,
            means: Values::means(),
        }
    }

    /// The library.
    pub fn library(&self) -> &Arc<Library> {
        &self.library
    }

    /// The uncertain parameters, in the order of their indices. The coefficients of the acidity
    /// estimate are listed by [`crate::coefficients`].
    pub fn parameters(&self) -> &'static [Parameter] {
        PARAMETERS
    }

    /// A joint sample of all parameters: the same seed and number give the same sample everywhere.
    pub fn draw(&self, seed: u64, number: u32) -> Draw {
        Draw::new(seed, number)
    }

    /// The means of all parameters, but for those named: what a fit of a few of them tries.
    pub fn draw_with(&self, changes: &[(&str, f64)]) -> Draw {
        Draw::changed(changes)
    }

    /// The carbanions of a cell's substrate when the electrophile comes: atom of the site, share of all
    /// carbanions, by the fast solver.
    pub fn enolates(&self, cell: &Cell, draw: &Draw) -> Vec<(usize, f64)> {
        let pot = Pots::form(cell, &draw.values).mean;
        let all = pot.over_sites(Species::Carbanion).max(f64::MIN_POSITIVE);
        let sites = cell.substrate.carbon.iter().enumerate();
        sites
            .map(|(i, site)| (site.acid.atom, pot.of(Species::Carbanion(i)) / all))
            .collect()
    }

    /// The carbanions of a cell's substrate once they have exchanged their protons: atom of the site, share of
    /// all carbanions, by the pKa of the sites in the medium.
    pub fn equilibrated_enolates(&self, cell: &Cell, draw: &Draw) -> Vec<(usize, f64)> {
        let temperature_c = cell.conditions.formation_temperature_c;
        let kinetics = Kinetics::new(cell, temperature_c, &draw.values, Nudge::default());
        let sites = &cell.substrate.carbon;
        let weights = sites
            .iter()
            .map(|site| math::exp10(-kinetics.site_pka(site)));
        let all: f64 = weights.clone().sum();
        let atoms = sites.iter().map(|site| site.acid.atom);
        atoms.zip(weights.map(|weight| weight / all)).collect()
    }

    /// Mayr's N in DMSO of a substrate's favoured carbanion, the room it takes counted in.
    pub fn nucleophilicity(&self, substrate: &Substrate, draw: &Draw) -> Option<f64> {
        let site = substrate.carbon.first()?;
        Some(nucleophilicity_of(site, &draw.values))
    }

    /// log10 of the rate of attack by the oxygen of the substrate's favoured anion over that by its carbon;
    /// `None` where its oxygen does not attack.
    pub fn oxygen_over_carbon(&self, cell: &Cell, draw: &Draw) -> Option<f64> {
        let nudge = Nudge::default();
        let temperature_c = cell.conditions.temperature_c;
        let site = cell.substrate.carbon.first()?;
        Kinetics::new(cell, temperature_c, &draw.values, nudge).oxygen_over_carbon(site)
    }

    /// Yield of a cell's wanted product at the mean of all parameters by the fast solver; `None` where the model does
    /// not cover the cell.
    pub fn yield_at_mean(&self, cell: &Cell) -> Option<f64> {
        match screen::coverage(cell) {
            Coverage::Unknown(_) => None,
            Coverage::Nothing(..) => Some(0.0),
            Coverage::Covered => {
                let solved = solve_at(cell, &self.means, Nudge::default());
                Some(solved.outcome.product)
            }
        }
    }

    /// Yields of a cell in draws by the fast solver, of the product that is wanted at the mean of all parameters;
    /// `None` where the model does not cover the cell. The error of a parameter or of a reagent's own value is one
    /// number for all cells, so that they succeed and fail together.
    pub fn yields(&self, cell: &Cell, draws: &[Draw]) -> Option<Vec<f64>> {
        yields(cell, draws)
    }

    /// What the variance of a covered cell's `yields` in `draws` rests on, greatest share first.
    pub fn doubts(&self, cell: &Cell, draws: &[Draw], yields: &[f64]) -> Vec<Doubt> {
        doubts(cell, draws, yields)
    }

    /// Version of what a score means beside data and parameters; a part of the fingerprint.
    pub fn arithmetic(&self) -> u32 {
        ARITHMETIC_VERSION
    }

    /// Fingerprint of code version, data, coefficients and arithmetic.
    pub fn fingerprint(&self) -> Fingerprint {
        let mut hash = Sha256::new();
        hash.update(b"enolattice model\0");
        hash.update(env!("CARGO_PKG_VERSION").as_bytes());
        hash.update(ARITHMETIC_VERSION.to_le_bytes());
        hash.update(self.library.digest());
        for p in PARAMETERS {
            hash.update(p.name.as_bytes());
            hash.update(p.mean.to_le_bytes());
            hash.update(p.sigma.to_le_bytes());
        }
        for text in acidity_texts() {
            hash.update(text.as_bytes());
        }
        Fingerprint(hash.finalize().into())
    }

    /// Prepares a substrate.
    pub fn substrate(
        &self,
        name: &str,
        molecule: Molecule,
        measured: Option<MeasuredPka>,
    ) -> Substrate {
        Substrate::new(name, molecule, measured, &self.library)
    }

    /// Prepares a base.
    pub fn base(&self, record: &enolattice_reagents::Base) -> Base {
        Base::new(record)
    }

    /// Prepares a solvent.
    pub fn solvent(&self, record: &enolattice_reagents::Solvent) -> Solvent {
        Solvent::new(record)
    }

    /// pKa of an acid in a solvent on the solvent's own scale, from its pKa in DMSO; `None` where no scale of
    /// the solvent is known and lithium, sodium and other counter-ions do not define one.
    ///
    /// `onium` says what a cationic acid is (class [`AnionClass::Neutral`]); it is without meaning for others.
    /// `changes` are parameters by name with other values than their means; names that are no parameter's change
    /// nothing.
    pub fn pka_in_medium(
        &self,
        (pka_dmso, class, onium): (f64, AnionClass, Onium),
        solvent: &Solvent,
        cation: Cation,
        temperature_c: f64,
        changes: &[(&str, f64)],
    ) -> Option<f64> {
        let values = Values::changed(changes);
        let medium = Medium {
            solvent,
            cation,
            additive: Loosening::default(),
            temperature_c,
        };
        let anchored = match class {
            AnionClass::Neutral => medium.pka_cationic_free(pka_dmso, onium, &values),
            _ => medium.pka(pka_dmso, class, &values),
        };
        // ion-pair acidities are relative to each other: they have no scale of free ions to be put on
        let own = match cation {
            Cation::None => medium.own_scale(&values)?,
            _ => 0.0,
        };
        Some(anchored + own)
    }

    /// Prepares an additive.
    pub fn additive(&self, record: &enolattice_reagents::Additive) -> Additive {
        Additive::new(record, &self.library)
    }

    /// Prepares an electrophile.
    pub fn electrophile(&self, name: &str, molecule: Molecule) -> Electrophile {
        Electrophile::new(name, molecule, &self.library)
    }

    /// Prepares what a substrate and an electrophile make together (products and their acidities).
    pub fn pair(&self, substrate: &Substrate, electrophile: &Electrophile) -> Pair {
        Pair::new(substrate, electrophile, &self.library)
    }

    /// Why the model does not cover a substrate and an electrophile together, although it knows
    /// each of them; none where it does, or where one of them is to blame alone.
    pub fn pair_not_covered(
        &self,
        substrate: &Substrate,
        electrophile: &Electrophile,
    ) -> Option<&'static str> {
        screen::pair_not_covered(substrate, electrophile)
    }

    /// Screens one cell with the fast solver and quadrature. `cautions` are the cell's caution
    /// bits, which depend on few axes at a time and are tabled by the caller.
    pub fn score(&self, cell: &Cell, yield_at_least: f64, cautions: u32) -> Score {
        score(cell, &self.means, yield_at_least, cautions, || {
            Pots::form(cell, &self.means)
        })
    }

    /// The same score, with the deprotonation looked up in a table of the cell's substrate. Cells
    /// with the same `key` must differ in the electrophile and in conditions after its addition alone.
    pub fn score_with(
        &self,
        cell: &Cell,
        yield_at_least: f64,
        cautions: u32,
        table: &FormationTable,
        key: u64,
    ) -> Score {
        let pots = || table.of(key, cell, &self.means);
        score(cell, &self.means, yield_at_least, cautions, pots)
    }

    /// A cell at the mean of all parameters by the fast solver and by the stiff reference; `None` where the
    /// model does not cover the cell or needs no network to know that nothing happens.
    ///
    /// # Errors
    /// [`ModelError::Integration`] if the reference integrator gives up.
    pub fn both_solvers(&self, cell: &Cell) -> Result<Option<Solutions>, ModelError> {
        crate::comparison::both_solvers(cell, &self.means)
    }

    /// The network of a cell in plain numbers, with the solution of the stiff reference; `None` as for
    /// [`Model::both_solvers`].
    ///
    /// # Errors
    /// [`ModelError::Integration`] if the reference integrator gives up.
    pub fn plain_network(&self, cell: &Cell) -> Result<Option<PlainNetwork>, ModelError> {
        crate::comparison::plain_network(cell, &self.means)
    }

    /// All acids and bases of a cell's pot with their pKa in its medium, `converted` of its substrate having become
    /// the wanted product (0–1, at most what base and electrophile suffice for): what [`crate::proton_balance`] takes.
    pub fn pot(&self, cell: &Cell, converted: f64) -> Vec<Acid> {
        let temperature_c = cell.conditions.temperature_c;
        let kinetics = Kinetics::new(cell, temperature_c, &self.means, Nudge::default());
        whole_pot(&kinetics, Reached::Converted(converted))
    }

    /// The carbon atom of a cell's substrate that loses its second proton, where bases of the trade reach one.
    pub fn second_site(&self, cell: &Cell) -> Option<usize> {
        let temperature_c = cell.conditions.temperature_c;
        let kinetics = Kinetics::new(cell, temperature_c, &self.means, Nudge::default());
        let (site, _) = kinetics.second_site()?;
        Some(cell.substrate.carbon[site].acid.atom)
    }

    /// Where the material of a cell goes, by the stiff reference; `None` where the model does not cover it or nothing can
    /// happen. Much quicker than [`Model::explain`].
    ///
    /// # Errors
    /// [`ModelError::Integration`] if the reference integrator gives up.
    pub fn fate(&self, cell: &Cell) -> Result<Option<Fate>, ModelError> {
        fate(self, cell, &self.means)
    }

    /// Explains one cell: reference integration, every number with its source.
    ///
    /// # Errors
    /// [`ModelError::Integration`] if the reference integrator gives up.
    pub fn explain(&self, cell: &Cell, yield_at_least: f64) -> Result<Explanation, ModelError> {
        explain(self, cell, &self.means, yield_at_least)
    }
}

#[cfg(test)]
mod tests {
    use crate::sample::{cells, model};

    #[test]
    fn draw_zero_is_the_mean_and_a_draw_is_the_same_every_time() {
        let model = model();
        for cell in cells(&model) {
            let fast = model
                .both_solvers(&cell)
                .expect("integrates")
                .map(|solutions| solutions.fast.product);
            let at_mean = model.yield_at_mean(&cell).expect("covered");
            // lanes beside it change the lengths of the steps, no more
            let apart = (fast.expect("covered") - at_mean).abs();
            assert!(apart < 5e-3, "{}: {apart}", cell.base.record.name);
            let drawn = model.yields(&cell, &[model.draw(7, 0)]);
            assert_eq!(drawn, Some(vec![at_mean]), "{}", cell.base.record.name);
            assert_eq!(model.draw(7, 3), model.draw(7, 3));
            assert_ne!(model.draw(7, 3), model.draw(8, 3));
        }
    }
}
