//! The form of the estimate: increments with pairwise saturation.

use std::collections::HashMap;

/// How the charge that an increment takes up saturates with that of others.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Uptake {
    /// C=O, C=S, C=N groups.
    Carbonyl,
    /// C≡N and N≡C.
    Nitrile,
    /// S(O)n and P=O groups.
    Sulfonyl,
    /// Nitro.
    Nitro,
    /// Phosphonium, sulfonium, ammonium: the charge stays at the carbon of the ylide.
    Onium,
    /// Pyridinium: the charge goes into the ring.
    Pyridinium,
    /// Aryl, vinyl, alkynyl.
    Aryl,
    /// Groups bound through a heteroatom.
    Heteroatom,
}

impl Uptake {
    /// Number of kinds.
    pub(crate) const COUNT: usize = 8;
}

/// What a coefficient does in the estimate.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    /// pKa of the class without corrections; one for each site.
    Anchor,
    /// Increment a that lowers the pKa, with saturation.
    Group(Uptake),
    /// Correction b that is added as often as its descriptor counts.
    Term,
    /// Saturation κ between two increments.
    Saturation,
}

impl Role {
    /// Reads the role as the tables write it.
    pub fn parse(text: &str) -> Option<Role> {
        Some(match text {
            "anchor" => Role::Anchor,
            "term" => Role::Term,
            "saturation" => Role::Saturation,
            "group carbonyl" => Role::Group(Uptake::Carbonyl),
            "group nitrile" => Role::Group(Uptake::Nitrile),
            "group sulfonyl" => Role::Group(Uptake::Sulfonyl),
            "group nitro" => Role::Group(Uptake::Nitro),
            "group onium" => Role::Group(Uptake::Onium),
            "group pyridinium" => Role::Group(Uptake::Pyridinium),
            "group aryl" => Role::Group(Uptake::Aryl),
            "group heteroatom" => Role::Group(Uptake::Heteroatom),
            _ => return None,
        })
    }
}

/// Name of the saturation κ between two increments.
fn saturation(first: Uptake, second: Uptake) -> &'static str {
    use Uptake::*;
    let pair = (first.min(second), first.max(second));
    match pair {
        (Nitrile, Heteroatom) => "heteroatom with nitrile",
        (Pyridinium, Heteroatom) => "pyridinium with any",
        (_, Heteroatom) => "heteroatom with any",
        (Nitrile, Pyridinium) => "pyridinium with nitrile",
        (Pyridinium, _) | (_, Pyridinium) => "pyridinium with any",
        (Onium, Aryl) => "onium with aryl",
        (Onium, _) | (_, Onium) => "onium with any",
        (Nitro, _) | (_, Nitro) => "nitro with any",
        (Aryl, Aryl) => "aryl with aryl",
        (Carbonyl, Aryl) => "aryl with carbonyl",
        (Nitrile, Aryl) => "aryl with nitrile",
        (_, Aryl) => "aryl with sulfonyl",
        (Carbonyl, Carbonyl) => "carbonyl with carbonyl",
        (Carbonyl, Nitrile) => "carbonyl with nitrile",
        (Carbonyl, Sulfonyl) => "carbonyl with sulfonyl",
        (Nitrile, Nitrile) => "nitrile with nitrile",
        (Nitrile, Sulfonyl) => "nitrile with sulfonyl",
        _ => "sulfonyl with sulfonyl",
    }
}

/// Descriptors of groups that nobody has described: their terms are zero with a wide error.
const STRANGE: [&str; 2] = ["unknown group", "other N–H"];

/// A pair of increments that saturate each other.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Pair {
    first: usize,
    second: usize,
    kappa: usize,
    count: f64,
}

/// The estimate of one site as a function of the coefficients.
///
/// `pKa = Σ p·x − Σ a·x + Σ_pairs κ·a_i·a_j/100 + Σ b·x`, with one anchor p, increments a
/// of the groups on the site, saturation κ and corrections b; x are the descriptors.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Contribution {
    /// Coefficient with the factor by which it enters linearly.
    linear: Vec<(usize, f64)>,
    pairs: Vec<Pair>,
    /// Descriptors without a coefficient, or of what the fit has never seen.
    unknown: usize,
}

impl Contribution {
    /// pKa for these coefficients.
    pub fn value(&self, coefficients: &[f64]) -> f64 {
        let linear: f64 = self
            .linear
            .iter()
            .map(|(i, factor)| factor * coefficients[*i])
            .sum();
        let saturation: f64 = self
            .pairs
            .iter()
            .map(|pair| {
                pair.count
                    * coefficients[pair.kappa]
                    * coefficients[pair.first]
                    * coefficients[pair.second]
                    / 100.0
            })
            .sum();
        linear + saturation
    }

    /// ∂pKa/∂coefficient, as (coefficient, slope); a coefficient may occur several times.
    pub fn slopes(&self, coefficients: &[f64]) -> Vec<(usize, f64)> {
        let mut slopes = self.linear.clone();
        for pair in &self.pairs {
            let (a, b) = (coefficients[pair.first], coefficients[pair.second]);
            let kappa = pair.count * coefficients[pair.kappa] / 100.0;
            slopes.push((pair.first, kappa * b));
            slopes.push((pair.second, kappa * a));
            slopes.push((pair.kappa, pair.count * a * b / 100.0));
        }
        slopes
    }

    /// The factor of each coefficient at these coefficients, by coefficient: factor times coefficient is
    /// what it adds to the pKa, and the sum of that is [`Contribution::value`]. A saturation has the product of
    /// its increments in its factor.
    pub(crate) fn factors(&self, coefficients: &[f64]) -> Vec<(usize, f64)> {
        let linear = self.linear.iter().copied();
        let saturation = self.pairs.iter().map(|pair| {
            let charge = coefficients[pair.first] * coefficients[pair.second] / 100.0;
            (pair.kappa, pair.count * charge)
        });
        let mut factors: Vec<(usize, f64)> = Vec::new();
        for (i, factor) in linear.chain(saturation) {
            match factors.iter_mut().find(|(known, _)| *known == i) {
                Some((_, sum)) => *sum += factor,
                None => factors.push((i, factor)),
            }
        }
        factors
    }

    /// Error that coefficients with next to no measurements behind them bring in, pK units: those on
    /// fewer than three sites count with their standard error.
    pub fn error_of_thin_terms(
        &self,
        coefficients: &[f64],
        standard_errors: &[f64],
        training_sites: &[usize],
    ) -> f64 {
        /// A coefficient that rests on fewer sites brings its own standard error into σ.
        const WELL_SUPPORTED: usize = 3;
        let variance: f64 = self
            .slopes(coefficients)
            .into_iter()
            .filter(|(i, _)| training_sites[*i] < WELL_SUPPORTED)
            .map(|(i, slope)| (slope * standard_errors[i]) * (slope * standard_errors[i]))
            .sum();
        variance.sqrt()
    }

    /// Indices of the coefficients that enter, without those of saturation.
    pub fn used(&self) -> impl Iterator<Item = usize> + '_ {
        self.linear.iter().map(|(i, _)| *i)
    }

    /// Indices of the saturation coefficients that enter.
    pub fn saturations(&self) -> impl Iterator<Item = usize> + '_ {
        self.pairs.iter().map(|pair| pair.kappa)
    }

    /// Number of descriptors for which there is no coefficient, or one that says that nothing is known.
    pub fn unknown(&self) -> usize {
        self.unknown
    }

    /// Coefficient and factor of each linear part, by coefficient.
    pub(crate) fn linear(&self) -> &[(usize, f64)] {
        &self.linear
    }
}

/// The list of coefficients by name: turns descriptors into contributions.
#[derive(Clone, Debug)]
pub struct Form {
    roles: Vec<Role>,
    index: HashMap<String, usize>,
}

impl Form {
    /// A form over coefficients of these names and roles, in this order.
    pub fn new<'a>(coefficients: impl Iterator<Item = (&'a str, Role)>) -> Form {
        let mut form = Form {
            roles: Vec::new(),
            index: HashMap::new(),
        };
        for (i, (name, role)) in coefficients.enumerate() {
            form.roles.push(role);
            form.index.insert(name.to_owned(), i);
        }
        form
    }

    /// Roles of the coefficients, in their order.
    pub(crate) fn roles(&self) -> &[Role] {
        &self.roles
    }

    /// The estimate for a site with these descriptors.
    pub fn contribution(&self, descriptors: &[(&'static str, f64)]) -> Contribution {
        let mut contribution = Contribution::default();
        let mut groups: Vec<(usize, Uptake, f64)> = Vec::new();
        for (name, x) in descriptors {
            contribution.unknown += usize::from(STRANGE.contains(name));
            let Some(&i) = self.index.get(*name) else {
                contribution.unknown += 1;
                continue;
            };
            match self.roles[i] {
                Role::Group(uptake) => {
                    contribution.linear.push((i, -x));
                    groups.push((i, uptake, *x));
                }
                _ => contribution.linear.push((i, *x)),
            }
        }
        contribution.linear.sort_by_key(|(i, _)| *i);
        contribution.pairs = self.pairs(&groups);
        contribution
    }

    fn pairs(&self, groups: &[(usize, Uptake, f64)]) -> Vec<Pair> {
        let mut pairs = Vec::new();
        for (k, (first, first_uptake, x)) in groups.iter().enumerate() {
            for (second, second_uptake, y) in &groups[k..] {
                let count = if first == second {
                    x * (x - 1.0) / 2.0
                } else {
                    x * y
                };
                let kappa = self.index.get(saturation(*first_uptake, *second_uptake));
                if let Some(kappa) = kappa.filter(|_| count > 0.0) {
                    pairs.push(Pair {
                        first: *first,
                        second: *second,
                        kappa: *kappa,
                        count,
                    });
                }
            }
        }
        pairs
    }
}
