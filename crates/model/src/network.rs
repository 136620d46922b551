//! The network of a cell: species, rate constants at each temperature, and the program of additions.
//!
//! Two solvers use this one definition: [`crate::march`] for the screen and
//! [`crate::reference`] for explanations.

use crate::prepared::SITES;

/// Amounts in the pot, mol/L of the final volume, by index.
pub(crate) type Amounts = [f64; SPECIES];

/// Substrate with no C–H removed (its X–H may be ionised).
pub(crate) const S: usize = 0;
/// Carbanions of the substrate, by site.
pub(crate) const A: usize = 1;
/// Dianion.
pub(crate) const DIANION: usize = A + SITES;
/// C-products by site, all forms.
pub(crate) const PRODUCT: usize = DIANION + 1;
/// The part of each C-product that is a carbanion.
pub(crate) const PRODUCT_ANION: usize = PRODUCT + SITES;
/// C-products that have lost water, by site.
pub(crate) const DRY: usize = PRODUCT_ANION + SITES;
/// Electrophile.
pub(crate) const E: usize = DRY + SITES;
/// Base not yet dissolved.
pub(crate) const SOLID: usize = E + 1;
/// Dissolved base, basic and acid form.
pub(crate) const BASE: usize = SOLID + 1;
/// Carbanion of the solvent.
pub(crate) const SOLVENT_ANION: usize = BASE + 1;
/// O-product.
pub(crate) const O_PRODUCT: usize = SOLVENT_ANION + 1;
/// Product of attack by the substrate's heteroatom.
pub(crate) const X_PRODUCT: usize = O_PRODUCT + 1;
/// Products that reacted again.
pub(crate) const OVER: usize = X_PRODUCT + 1;
/// Self-condensed substrate (dimer).
pub(crate) const DIMER: usize = OVER + 1;
/// Substrate taken by the base.
pub(crate) const TAKEN: usize = DIMER + 1;
/// Electrophile lost by elimination.
pub(crate) const ELIMINATED: usize = TAKEN + 1;
/// Electrophile taken by the solvent or its anion.
pub(crate) const SOLVOLYSED: usize = ELIMINATED + 1;
/// Electrophile taken by the base, or ionised by it.
pub(crate) const SPENT: usize = SOLVOLYSED + 1;
/// Missing protons: negative charge on all acids' anions (free base included).
pub(crate) const CHARGE: usize = SPENT + 1;
/// Number of entries.
pub(crate) const SPECIES: usize = CHARGE + 1;

/// X–H acids that exchange protons at once.
pub(crate) const FAST: usize = 6;
/// The base's conjugate acid.
pub(crate) const FAST_BASE: usize = 0;
/// The solvent's O–H.
pub(crate) const FAST_SOLVENT: usize = 1;
/// Water in the solvent.
pub(crate) const FAST_WATER: usize = 2;
/// The substrate's X–H, where it is stronger than its C–H.
pub(crate) const FAST_SUBSTRATE: usize = 3;
/// The product's X–H: the hydroxyl of an aldol adduct, or the substrate's own X–H.
pub(crate) const FAST_PRODUCT: usize = 4;
/// The dimer's acid: the hydroxyl of an aldol, the C–H of a Claisen product.
pub(crate) const FAST_DIMER: usize = 5;

/// C–H acids, whose protons move at a rate.
pub(crate) const SLOW: usize = 2 * SITES + 2;
/// The substrate's sites are the first.
pub(crate) const SLOW_SITE: usize = 0;
/// The products follow.
pub(crate) const SLOW_PRODUCT: usize = SITES;
/// The second ionisation of the substrate.
pub(crate) const SLOW_DIANION: usize = 2 * SITES;
/// The solvent's C–H.
pub(crate) const SLOW_SOLVENT: usize = 2 * SITES + 1;

/// How the electrophile's bond forms.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(crate) enum Bonding {
    /// Substitution: the product is neutral, the charge leaves.
    #[default]
    Substitution,
    /// Conjugate addition: the product is a carbanion.
    Michael,
    /// Aldol and nitroaldol: the product is an alkoxide.
    Aldol,
}

/// Rate and equilibrium constants of a cell at one temperature; L, mol, s.
#[derive(Clone, Debug, Default)]
pub(crate) struct Constants {
    /// 10^−pKa of the fast acids; 0 where there is none.
    pub(crate) fast_k: [f64; FAST],
    /// 10^−pKa of the slow acids; 0 where there is none.
    pub(crate) slow_k: [f64; SLOW],
    /// Deprotonation of slow acid `j` by the anion of fast acid `x`: `[j][x]`.
    pub(crate) exchange: [[f64; FAST]; SLOW],
    /// Deprotonation of slow acid `j` by carbanion `i`: `[j][i]`.
    pub(crate) carbon_exchange: [[f64; SLOW]; SLOW],
    /// Bond formation of carbanion `i` with the electrophile, at carbon.
    pub(crate) attack: [f64; SITES],
    /// The same at oxygen.
    pub(crate) attack_oxygen: [f64; SITES],
    /// The same, back, of the adduct anion; 1/s.
    pub(crate) retro: [f64; SITES],
    /// Elimination and ionisation of the electrophile by carbanion `i`.
    pub(crate) eliminate: [f64; SITES],
    /// Ionisation of the electrophile by carbanion `i`.
    pub(crate) ionise: [f64; SITES],
    /// Attack of the dianion.
    pub(crate) attack_dianion: f64,
    /// Attack of the product's anion.
    pub(crate) attack_again: [f64; SITES],
    /// Attack of the substrate's heteroatom anion.
    pub(crate) attack_heteroatom: f64,
    /// Attack of the base.
    pub(crate) attack_base: f64,
    /// Elimination by the base.
    pub(crate) eliminate_base: f64,
    /// Ionisation of the electrophile by the base.
    pub(crate) ionise_base: f64,
    /// Attack of the solvent's carbanion.
    pub(crate) attack_solvent_anion: f64,
    /// Attack of the solvent's alkoxide or of hydroxide: `[solvent, water]`.
    pub(crate) attack_lyate: [f64; 2],
    /// Elimination by the same.
    pub(crate) eliminate_lyate: [f64; 2],
    /// Attack of the neutral solvent, 1/s.
    pub(crate) solvolysis: f64,
    /// Self-condensation of carbanion `i` with neutral substrate.
    pub(crate) dimerise: [f64; SITES],
    /// The same, back: of the dimer's anion (aldol, 1/s) or of neutral dimer and
    /// alkoxide (Claisen, L/(mol s)).
    pub(crate) dimer_retro: [f64; SITES],
    /// Addition of the base and of hydroxide or alkoxide to the substrate: `[base, solvent, water]`.
    pub(crate) take_substrate: [f64; 3],
    /// Loss of water from the adduct, by strong base.
    pub(crate) dehydrate: f64,
    /// Dissolution of the base, 1/s, and its solubility, mol/L.
    pub(crate) dissolution: f64,
    /// Solubility of the base, mol/L; infinite where it dissolves.
    pub(crate) solubility_m: f64,
}

/// A stretch of time at one temperature, with constant additions.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Stage {
    /// Duration, s.
    pub(crate) duration_s: f64,
    /// Whether the constants of the deprotonation (else of the reaction) hold.
    pub(crate) forming: bool,
    /// Substrate added over the stage, mol/L.
    pub(crate) substrate_m: f64,
    /// Base added over the stage, mol/L.
    pub(crate) base_m: f64,
    /// Electrophile added over the stage, mol/L.
    pub(crate) electrophile_m: f64,
}

/// A cell as a network of reactions with a program of additions.
#[derive(Clone, Debug)]
pub(crate) struct Network {
    /// Constants at the temperature of the deprotonation.
    pub(crate) forming: Constants,
    /// Constants at the temperature of the reaction.
    pub(crate) reacting: Constants,
    /// Bonding.
    pub(crate) bonding: Bonding,
    /// Whether the substrate loses its X–H proton first; its carbanions are then dianions.
    pub(crate) heteroatom_first: bool,
    /// Site at which a dianion reacts.
    pub(crate) dianion_site: usize,
    /// Whether the dimer is a Claisen product (its acid is a C–H).
    pub(crate) claisen: bool,
    /// Solvent's O–H, mol/L.
    pub(crate) solvent_oh_m: f64,
    /// Solvent's C–H, mol/L.
    pub(crate) solvent_ch_m: f64,
    /// Water, mol/L.
    pub(crate) water_m: f64,
    /// Substrate, base and electrophile charged, mol/L.
    pub(crate) charged: [f64; 3],
    /// What is in the pot before the first stage.
    pub(crate) start: Amounts,
    /// The program.
    pub(crate) stages: Vec<Stage>,
    /// Index of the first stage with electrophile.
    pub(crate) first_reacting_stage: usize,
}

impl Network {
    /// Charge of one carbanion of the substrate.
    pub(crate) fn anion_charge(&self) -> f64 {
        if self.heteroatom_first { 2.0 } else { 1.0 }
    }

    /// Constants of a stage.
    pub(crate) fn constants(&self, stage: &Stage) -> &Constants {
        if stage.forming { &self.forming } else { &self.reacting }
    }

    /// Total concentrations of the fast acids.
    #[inline]
    pub(crate) fn fast_totals(&self, n: &Amounts) -> [f64; FAST] {
        let products: f64 = n[PRODUCT..PRODUCT + SITES].iter().sum();
        [
            n[BASE],
            self.solvent_oh_m,
            self.water_m,
            if self.heteroatom_first { n[S] } else { 0.0 },
            if self.heteroatom_first || self.bonding == Bonding::Aldol { products } else { 0.0 },
            n[DIMER],
        ]
    }

    /// Charge on carbanions: what the fast acids do not carry.
    #[inline]
    pub(crate) fn carbanion_charge(&self, n: &Amounts) -> f64 {
        let sites: f64 = n[A..A + SITES].iter().sum();
        let products: f64 = n[PRODUCT_ANION..PRODUCT_ANION + SITES].iter().sum();
        self.anion_charge() * sites + 2.0 * n[DIANION] + products + n[SOLVENT_ANION]
    }

    /// Substrate in all its fates, mol/L: constant in time once all is charged.
    pub(crate) fn substrate_balance(n: &Amounts) -> f64 {
        let range = |from: usize| n[from..from + SITES].iter().sum::<f64>();
        n[S] + range(A)
            + n[DIANION]
            + range(PRODUCT)
            + range(DRY)
            + n[O_PRODUCT]
            + n[X_PRODUCT]
            + n[OVER]
            + 2.0 * n[DIMER]
            + n[TAKEN]
    }

    /// Substrate that has not reacted, mol/L.
    pub(crate) fn unreacted(n: &Amounts) -> f64 {
        n[S] + n[A..A + SITES].iter().sum::<f64>() + n[DIANION]
    }
}
