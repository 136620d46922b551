//! What one reagent brings to the cautions of any cell that holds it.

use std::sync::LazyLock;

use enolattice_molecule::Molecule;
use enolattice_reagents::{Additive, Base, NamedElectrophile, Solvent};

use super::rule::{Rule, Seat};
use super::rules::RULES;
use super::traits::Traits;
use super::{Caution, Severity, statements, temperature};

/// Rules that ask for more than one reagent or for a temperature.
pub(super) static JOINT: LazyLock<Vec<&'static Rule>> = LazyLock::new(|| {
    let rules = RULES.iter().copied().flatten();
    rules.filter(|rule| !rule.is_of_one()).collect()
});

/// Rules that ask for one reagent.
pub(super) static ALONE: LazyLock<Vec<&'static Rule>> = LazyLock::new(|| {
    let rules = RULES.iter().copied().flatten();
    rules.filter(|rule| rule.is_of_one()).collect()
});

/// Severity and category bit of the joint rules, in their order.
static JOINT_BITS: LazyLock<Vec<(usize, u32)>> = LazyLock::new(|| {
    let bits = |rule: &&Rule| (row_of(rule.severity), rule.category.bit());
    JOINT.iter().map(bits).collect()
});

/// Words of 64 bits that a share has for joint rules; a test counts the rules.
const WORDS: usize = 3;
/// Most joint rules that a share has room for.
#[cfg(test)]
pub(super) const JOINT_MOST: usize = 64 * WORDS;

/// Bits of categories at each severity, in the order of [`Severity::ALL`].
type Categories = [u32; Severity::ALL.len()];

/// Index of a severity among [`Severity::ALL`].
fn row_of(severity: Severity) -> usize {
    severity as usize - 1
}

/// What one reagent brings to the cautions of any cell that holds it.
///
/// It has the reagent's own cautions, and for each joint rule whether the reagent
/// leaves it open; a rule that all reagents of a cell leave open applies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CautionShare {
    own: Categories,
    open: [u64; WORDS],
}

impl CautionShare {
    /// Share of a base.
    pub fn of_base(base: &Base) -> CautionShare {
        let traits = Traits::of_base(base);
        let own = statements::of_statements(&base.name, &base.hazards);
        CautionShare::new(Seat::Base, traits, &own)
    }

    /// Shares of a solvent at pairs of temperatures of reaction and deprotonation, °C; the
    /// temperatures that rules ask for are settled here.
    pub fn of_solvent(solvent: &Solvent, temperatures_c: &[(f64, f64)]) -> Vec<CautionShare> {
        let structure = Traits::of_solvent_structure(solvent);
        let stated = statements::of_statements(&solvent.name, &solvent.hazards);
        let at = |&(reaction_c, formation_c): &(f64, f64)| {
            let (coldest_c, hottest_c) = (reaction_c.min(formation_c), reaction_c.max(formation_c));
            let mut own = stated.clone();
            own.extend(temperature::of_solvent(solvent, coldest_c, hottest_c));
            let traits = structure.of_solvent_record(solvent, hottest_c);
            let mut share = CautionShare::new(Seat::Solvent, traits, &own);
            for (k, rule) in JOINT.iter().enumerate() {
                if !rule.allows_temperature(rule.temperature_c(reaction_c, formation_c)) {
                    share.open[k / 64] &= !(1 << (k % 64));
                }
            }
            share
        };
        temperatures_c.iter().map(at).collect()
    }

    /// Shares of an electrophile at temperatures of the reaction, °C. The row of the library,
    /// where it has one, brings hazard statements and a boiling point.
    pub fn of_electrophile(
        electrophile: &Molecule,
        named: Option<&NamedElectrophile>,
        temperatures_c: &[f64],
    ) -> Vec<CautionShare> {
        let traits = Traits::of_molecule(electrophile);
        let stated = named.map(|named| statements::of_statements(&named.name, &named.hazards));
        let at = |&temperature_c: &f64| {
            let mut own = stated.clone().unwrap_or_default();
            own.extend(named.and_then(|named| temperature::of_electrophile(named, temperature_c)));
            CautionShare::new(Seat::Electrophile, traits, &own)
        };
        temperatures_c.iter().map(at).collect()
    }

    /// Share of a substrate.
    pub fn of_substrate(substrate: &Molecule) -> CautionShare {
        CautionShare::new(Seat::Substrate, Traits::of_molecule(substrate), &[])
    }

    /// Share of an additive; of its absence where there is none.
    pub fn of_additive(additive: Option<&Additive>) -> CautionShare {
        let Some(additive) = additive else {
            return CautionShare::new(Seat::Additive, Traits::default(), &[]);
        };
        let own = statements::of_statements(&additive.name, &additive.hazards);
        CautionShare::new(Seat::Additive, Traits::of_additive(additive), &own)
    }

    fn new(seat: Seat, traits: Traits, own: &[Caution]) -> CautionShare {
        let alone = ALONE.iter().filter(|rule| traits.has_any(rule.anyone));
        let alone = alone.map(|rule| (rule.severity, rule.category));
        let stated = own
            .iter()
            .map(|caution| (caution.severity, caution.category));
        let mut own = Categories::default();
        for (severity, category) in alone.chain(stated) {
            own[row_of(severity)] |= category.bit();
        }
        let mut open = [0; WORDS];
        for (k, rule) in JOINT.iter().enumerate() {
            open[k / 64] |= u64::from(rule.allows(seat, traits)) << (k % 64);
        }
        CautionShare { own, open }
    }

    /// The caution bits of the cell with these reagents: base, solvent, electrophile, substrate
    /// and additive, in any order.
    pub fn joined(shares: [CautionShare; 5]) -> u32 {
        let categories = CautionShare::categories(shares);
        let severest = Severity::ALL
            .into_iter()
            .rfind(|severity| categories[row_of(*severity)] != 0);
        let all = categories.into_iter().fold(0, |all, of_one| all | of_one);
        all | severest.map_or(0, Severity::bits)
    }

    /// The bits of the categories of caution of that cell at each severity, in the order of
    /// [`Severity::ALL`]. A category may be there at several severities.
    pub fn categories(shares: [CautionShare; 5]) -> [u32; 3] {
        let mut categories = Categories::default();
        for share in &shares {
            for (all, own) in categories.iter_mut().zip(share.own) {
                *all |= own;
            }
        }
        let rules: &[(usize, u32)] = &JOINT_BITS;
        for word in 0..WORDS {
            let all = shares.iter().map(|share| share.open[word]);
            let mut open = all.fold(u64::MAX, |open, of_one| open & of_one);
            while open != 0 {
                let (severity, category) = rules[64 * word + open.trailing_zeros() as usize];
                categories[severity] |= category;
                open &= open - 1;
            }
        }
        categories
    }
}
