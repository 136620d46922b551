//! Joint samples of everything uncertain, and what they make of a cell.
//!
//! A draw addresses quantities, not cells: a parameter, a coefficient of the acidity estimate, what is a molecule's own in
//! its acidity, the acidity of a base's acid, the electrophilicity of a reagent have one error each, and every cell they
//! take part in feels the same one. So cells succeed and fail together, as they do in the laboratory.

use std::sync::Arc;

use enolattice_units::math;
use sha2::{Digest, Sha256};

use crate::acidity::{SiteError, address, coefficient_errors};
use crate::kinetics::Nudge;
use crate::parameters::{P, PARAMETERS, Values};
use crate::screen::{Coverage, coverage, solve_at};
use crate::{AcidSite, Cell};

/// Dimensions of the Sobol sequence at hand; further parameters use it again, scrambled otherwise.
const SOBOL_DIMENSIONS: u32 = sobol_burley::NUM_DIMENSIONS;

/// One joint sample of all uncertain quantities; draw 0 has each at its mean.
#[derive(Clone, Debug, PartialEq)]
pub struct Draw {
    pub(crate) values: Values,
    /// Errors of the coefficients of the acidity estimate; none at the mean.
    coefficients: Vec<f64>,
    seed: u64,
    number: u32,
}

impl Draw {
    /// The draw with a number: points of a scrambled Sobol sequence, one pair of dimensions for each parameter and each
    /// coefficient of the acidity estimate.
    pub(crate) fn new(seed: u64, number: u32) -> Draw {
        let values = match number {
            0 => Values::means(),
            _ => Values::moved(|index| of_parameter(seed, number, index)),
        };
        let coefficients = match number {
            0 => Vec::new(),
            _ => coefficient_errors(|index| of_parameter(seed, number, PARAMETERS.len() + index)),
        };
        Draw {
            values,
            coefficients,
            seed,
            number,
        }
    }

    /// Means, but for a few parameters.
    pub(crate) fn changed(changes: &[(&str, f64)]) -> Draw {
        Draw {
            values: Values::changed(changes),
            coefficients: Vec::new(),
            seed: 0,
            number: 0,
        }
    }

    /// Standard normal deviate of a parameter.
    fn of_parameter(&self, index: usize) -> f64 {
        match self.number {
            0 => 0.0,
            number => of_parameter(self.seed, number, index),
        }
    }

    /// Standard normal deviate of a reagent's own value.
    fn of_reagent(&self, address: u64) -> f64 {
        if self.number == 0 {
            return 0.0;
        }
        let mut hash = Sha256::new();
        hash.update(self.seed.to_le_bytes());
        hash.update(self.number.to_le_bytes());
        hash.update(address.to_le_bytes());
        let bytes: [u8; 32] = hash.finalize().into();
        let uniform = |from: usize| {
            let word = u64::from_le_bytes(bytes[from..from + 8].try_into().expect("eight bytes"));
            ((word >> 11) as f64 + 0.5) / (1u64 << 53) as f64
        };
        normal(uniform(0), uniform(8))
    }

    /// Error of an acidity, pK units.
    pub(crate) fn acidity_error(&self, of: &SiteError) -> f64 {
        if self.number == 0 {
            return 0.0;
        }
        of.error(&self.coefficients, |address| self.of_reagent(address))
    }
}

/// Sobol points with Owen's scrambling after Burley, J. Comput. Graph. Tech. 2020, 9(4), 1.
fn of_parameter(seed: u64, number: u32, index: usize) -> f64 {
    let uniform = |dimension: u32| {
        let scrambling = seed as u32 ^ (seed >> 32) as u32 ^ (dimension / SOBOL_DIMENSIONS);
        let point = sobol_burley::sample(number - 1, dimension % SOBOL_DIMENSIONS, scrambling);
        // 24 bits of the unit interval, never 0
        f64::from(point) + 0.5 / f64::from(1 << 24)
    };
    let dimension = 2 * index as u32;
    normal(uniform(dimension), uniform(dimension + 1))
}

/// A standard normal deviate of two uniform ones: Box and Muller, Ann. Math. Stat. 1958, 29, 610.
fn normal(first: f64, second: f64) -> f64 {
    (-2.0 * math::ln(first)).sqrt() * math::cos_turn(second)
}

/// A value of a reagent, with its uncertainty and its error.
struct OwnValue {
    name: String,
    value: f64,
    sigma: f64,
    unit: &'static str,
    source: String,
    error: OwnError,
}

/// Where the error of a reagent's value comes from.
enum OwnError {
    /// An acidity of a structure.
    Site(SiteError),
    /// A value of its own, by the address of its deviate.
    Address(u64),
}

impl OwnValue {
    fn error(&self, draw: &Draw) -> f64 {
        match &self.error {
            OwnError::Site(site) => draw.acidity_error(site),
            OwnError::Address(address) => self.sigma * draw.of_reagent(*address),
        }
    }
}

/// The reagents' own values on which a cell rests most.
struct OwnValues {
    substrate: OwnValue,
    base: OwnValue,
    electrophile: Option<OwnValue>,
}

impl OwnValues {
    fn of(cell: &Cell) -> OwnValues {
        const PKA: &str = "pK in DMSO";
        let substrate = &cell.substrate;
        let site = &substrate.carbon[0].acid;
        let base = &cell.base.record;
        let electrophile = cell.electrophile.e.as_ref();
        OwnValues {
            substrate: OwnValue {
                name: format!("pKa of {}", substrate.name),
                value: site.pka_dmso,
                sigma: site.sigma,
                unit: PKA,
                source: site.source.clone(),
                error: OwnError::Site(SiteError::of(&substrate.molecule, site)),
            },
            base: OwnValue {
                name: format!("pKa of the acid of {}", base.name),
                value: base.pka_dmso.value,
                sigma: base.pka_dmso.sigma,
                unit: PKA,
                source: base.pka_dmso.source.clone(),
                error: OwnError::Address(address(&["base", &base.name])),
            },
            electrophile: electrophile.map(|(e, sigma, source)| OwnValue {
                name: format!("electrophilicity E of {}", cell.electrophile.name),
                value: *e,
                sigma: *sigma,
                unit: "log10",
                source: source.clone(),
                error: OwnError::Address(address(&[
                    "electrophile",
                    cell.electrophile.molecule.canonical(),
                ])),
            }),
        }
    }

    fn all(self) -> impl IntoIterator<Item = OwnValue> {
        [Some(self.substrate), Some(self.base), self.electrophile]
            .into_iter()
            .flatten()
    }
}

/// A cell whose acidities are those of one draw after the other.
struct Moved {
    cell: Cell,
    own: OwnValues,
    /// Mean and error of each acid, in the order of [`acids`].
    acids: Vec<(f64, SiteError)>,
}

impl Moved {
    fn new(cell: &Cell) -> Moved {
        let mut cell = cell.clone();
        let (substrate, pair) = (&cell.substrate, &cell.pair);
        let of_substrate = substrate.carbon.iter().map(|site| &site.acid);
        let of_substrate = of_substrate.chain(&substrate.heteroatom);
        let mut errors: Vec<SiteError> = of_substrate
            .map(|acid| SiteError::of(&substrate.molecule, acid))
            .collect();
        for product in pair.by_site.iter().flatten() {
            let carbon = product.carbon.iter().map(|site| &site.acid);
            let acids = carbon.chain(&product.heteroatom);
            errors.extend(acids.map(|acid| SiteError::of(&product.product.molecule, acid)));
        }
        let electrophile = &cell.electrophile;
        let acid = electrophile.acid.iter();
        errors.extend(acid.map(|acid| SiteError::of(&electrophile.molecule, acid)));
        let own = OwnValues::of(&cell);
        let means: Vec<f64> = acids(&mut cell).map(|acid| acid.pka_dmso).collect();
        Moved {
            cell,
            own,
            acids: means.into_iter().zip(errors).collect(),
        }
    }

    /// Moves the acidities to those of a draw. Of the pKa of the base only the gap to the other acids counts.
    fn to(&mut self, draw: &Draw) {
        let base = self.own.base.error(draw);
        for (acid, (mean, error)) in acids(&mut self.cell).zip(&self.acids) {
            acid.pka_dmso = mean + draw.acidity_error(error) - base;
        }
    }

    /// What a draw does to a cell beyond parameters and acidities.
    fn nudge(&self, draw: &Draw) -> Nudge {
        let e = self.own.electrophile.as_ref();
        Nudge {
            acidity: 0.0,
            attack: draw.values.get(P::MAYR_S_N) * e.map_or(0.0, |e| e.error(draw)),
        }
    }
}

/// The acids of a cell that take part in its network: of the substrate, of its products, of the electrophile.
fn acids(cell: &mut Cell) -> impl Iterator<Item = &mut AcidSite> {
    let substrate = Arc::make_mut(&mut cell.substrate);
    let of_substrate = substrate.carbon.iter_mut().map(|site| &mut site.acid);
    let products = Arc::make_mut(&mut cell.pair).by_site.iter_mut().flatten();
    let of_products = products.flat_map(|product| {
        let carbon = product.carbon.iter_mut().map(|site| &mut site.acid);
        carbon.chain(&mut product.heteroatom)
    });
    of_substrate
        .chain(&mut substrate.heteroatom)
        .chain(of_products)
        .chain(&mut Arc::make_mut(&mut cell.electrophile).acid)
}

/// Yield of a cell in each draw of the product that is wanted at the mean; `None` where the model does not cover it.
pub(crate) fn yields(cell: &Cell, draws: &[Draw]) -> Option<Vec<f64>> {
    match coverage(cell) {
        Coverage::Unknown(_) => return None,
        Coverage::Nothing(..) => return Some(vec![0.0; draws.len()]),
        Coverage::Covered => {}
    }
    let mut moved = Moved::new(cell);
    let site = solve_at(cell, &Values::means(), Nudge::default())
        .outcome
        .site;
    // one after the other: what moves the parameters can change the order of the steps
    let product = |draw: &Draw| {
        moved.to(draw);
        let solved = solve_at(&moved.cell, &draw.values, moved.nudge(draw));
        let charged = cell.conditions.concentration_m;
        (solved.end.product(site) / charged).clamp(0.0, 1.0)
    };
    Some(draws.iter().map(product).collect())
}

/// How much of the variance of a cell's yield one uncertain quantity explains.
#[derive(Clone, Debug, PartialEq)]
pub struct Doubt {
    /// The quantity in words: a parameter's title, or a value of a reagent.
    pub quantity: String,
    /// Name of the parameter; none for a value of a reagent.
    pub parameter: Option<String>,
    /// Its mean.
    pub value: f64,
    /// Its standard uncertainty.
    pub sigma: f64,
    /// Unit of both.
    pub unit: String,
    /// Where it comes from.
    pub source: String,
    /// Squared correlation of its error with the yield over joint draws, 0–1.
    pub share: f64,
    /// Whether more of the quantity brings more of the product.
    pub raises_yield: bool,
}

/// What the variance of the yields in draws rests on, greatest share first; what the draws do not tell from nothing is
/// left out.
///
/// The squared correlation `r²` is the share that is linear in the quantity. Of quantities without any influence it is
/// below `9/n` in 99.7 % of samples of n draws.
pub(crate) fn doubts(cell: &Cell, draws: &[Draw], yields: &[f64]) -> Vec<Doubt> {
    let noise = 9.0 / draws.len() as f64;
    let doubt = |r: f64| Doubt {
        quantity: String::new(),
        parameter: None,
        value: 0.0,
        sigma: 0.0,
        unit: String::new(),
        source: String::new(),
        share: r * r,
        raises_yield: r > 0.0,
    };
    let correlated = |deviate: &dyn Fn(&Draw) -> f64| {
        let deviates: Vec<f64> = draws.iter().map(deviate).collect();
        Some(correlation(&deviates, yields)).filter(|r| r * r > noise)
    };
    let parameters = PARAMETERS.iter().enumerate().filter_map(|(index, known)| {
        let r = correlated(&|draw| draw.of_parameter(index))?;
        Some(Doubt {
            quantity: known.title.to_owned(),
            parameter: Some(known.name.to_owned()),
            value: known.mean,
            sigma: known.sigma,
            unit: known.unit.to_owned(),
            source: known.source.to_owned(),
            ..doubt(r)
        })
    });
    let own = OwnValues::of(cell);
    let of_reagents = own.all().into_iter().filter_map(|known| {
        let r = correlated(&|draw| known.error(draw))?;
        Some(Doubt {
            quantity: known.name,
            value: known.value,
            sigma: known.sigma,
            unit: known.unit.to_owned(),
            source: known.source,
            ..doubt(r)
        })
    });
    let mut doubts: Vec<Doubt> = parameters.chain(of_reagents).collect();
    doubts.sort_by(|a, b| b.share.total_cmp(&a.share));
    doubts
}

/// Pearson's correlation; 0 where one side does not vary.
fn correlation(x: &[f64], y: &[f64]) -> f64 {
    let mean = |of: &[f64]| of.iter().sum::<f64>() / of.len().max(1) as f64;
    let (mean_x, mean_y) = (mean(x), mean(y));
    let (mut xx, mut yy, mut xy) = (0.0, 0.0, 0.0);
    for (x, y) in x.iter().zip(y) {
        let (dx, dy) = (x - mean_x, y - mean_y);
        xx += dx * dx;
        yy += dy * dy;
        xy += dx * dy;
    }
    if xx <= 0.0 || yy <= 0.0 {
        return 0.0;
    }
    xy / (xx * yy).sqrt()
}

#[cfg(test)]
mod tests {
    use crate::sample::{cell, model};
    use crate::{Cell, Doubt};

    #[test]
    fn deviates_of_parameters_and_reagents_are_standard_normal_and_apart() {
        let model = model();
        let draws: Vec<_> = (1..=2048).map(|number| model.draw(5, number)).collect();
        let last = model.parameters().len() - 1;
        let of = |deviate: &dyn Fn(&super::Draw) -> f64| -> Vec<f64> {
            draws.iter().map(deviate).collect()
        };
        let all = [
            of(&|draw| draw.of_parameter(0)),
            of(&|draw| draw.of_parameter(1)),
            of(&|draw| draw.of_parameter(last)),
            of(&|draw| draw.of_reagent(17)),
            of(&|draw| draw.of_reagent(18)),
        ];
        let n = draws.len() as f64;
        for (i, x) in all.iter().enumerate() {
            let mean = x.iter().sum::<f64>() / n;
            let variance = x.iter().map(|x| x * x).sum::<f64>() / n - mean * mean;
            // four standard errors of independent samples: 4/√n of the mean, 4·√(2/n) of the variance
            assert!(mean.abs() < 4.0 / n.sqrt(), "{i}: {mean}");
            assert!(
                (variance - 1.0).abs() < 4.0 * (2.0 / n).sqrt(),
                "{i}: {variance}"
            );
            for y in &all[i + 1..] {
                let r = super::correlation(x, y);
                assert!(r.abs() < 4.0 / n.sqrt(), "{i}: {r}");
            }
        }
    }

    fn doubts(cell: &Cell) -> Vec<Doubt> {
        let model = model();
        let draws: Vec<_> = (1..=512).map(|number| model.draw(1, number)).collect();
        let yields = model.yields(cell, &draws).expect("covered");
        model.doubts(cell, &draws, &yields)
    }

    #[test]
    fn a_slow_addition_hangs_on_the_reactivity_of_the_acceptor_and_more_of_it_helps() {
        // a quantitative enolate and an acceptor that it reaches in hours: E decides, not acidity
        let mut slow = cell(
            &model(),
            "CCOC(=O)CC(=O)OCC",
            "NaH",
            "COC(=O)C=Cc1ccccc1",
            "DMF",
        );
        slow.conditions.time_h = 4.0;
        let doubts = doubts(&slow);
        let of_e = doubts
            .iter()
            .find(|doubt| doubt.quantity.starts_with("electrophilicity E of "));
        let of_e = of_e.unwrap_or_else(|| panic!("E is not among {doubts:?}"));
        assert!(of_e.raises_yield, "{of_e:?}");
    }

    #[test]
    fn shares_of_variance_are_of_one_whole() {
        // the squared correlations of independent quantities add up to 1 at most, but for what 512 draws let seem
        let weak = cell(&model(), "CCOC(=O)CC(=O)OCC", "DBU", "CCBr", "MeCN");
        let shares: f64 = doubts(&weak).iter().map(|doubt| doubt.share).sum();
        assert!(shares > 0.1 && shares < 1.2, "{shares}");
    }
}
