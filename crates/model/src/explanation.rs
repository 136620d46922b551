//! Everything about one cell, with sources.

use crate::{Caution, Channel, Doubt, Origin, SiteReasons};

/// Everything the model has to say about one cell.
#[derive(Clone, Debug, Default)]
pub struct Explanation {
    /// What a colleague would say of the cell, a sentence each: which acid, which base, how far, what then happens, what
    /// competes, what limits.
    pub summary: Vec<String>,
    /// Mean yield of the wanted product on substrate, 0–1; unknown where not covered.
    pub expected_yield: Option<f64>,
    /// Standard deviation of the yield over the uncertain parameters.
    pub yield_sigma: Option<f64>,
    /// Mean yield on the limiting reagent.
    pub yield_on_limiting: Option<f64>,
    /// The limiting reagent: `substrate`, `base` or `electrophile`; a base that comes back limits nothing.
    pub limiting_reagent: Option<String>,
    /// Probability that the yield reaches the target.
    pub p_hit: Option<f64>,
    /// Thermodynamic ceiling.
    pub feasibility: Option<f64>,
    /// Wanted / converted.
    pub selectivity: Option<f64>,
    /// Yield of the stiff reference at the mean of all parameters.
    pub reference_yield: Option<f64>,
    /// Yield of the fast solver at the mean of all parameters.
    pub fast_yield: Option<f64>,
    /// Canonical SMILES of the wanted product.
    pub product_smiles: Option<String>,
    /// Its formula.
    pub product_formula: Option<String>,
    /// Its monoisotopic mass, Da.
    pub product_mass: Option<f64>,
    /// Canonical SMILES of the dehydrated product of an aldol adduct.
    pub condensation_smiles: Option<String>,
    /// Standard free energy of the deprotonation of the favoured site in the medium, kJ/mol.
    pub delta_g_deprotonation_kj_mol: Option<f64>,
    /// log10 K of the deprotonation at the temperature of the reaction.
    pub log10_k: Option<f64>,
    /// Standard uncertainty of `log10_k`: both pKa, the medium, and the entropy that is taken as zero.
    pub log10_k_sigma: Option<f64>,
    /// Fraction of the substrate that is carbanion when the electrophile comes, 0–1.
    pub enolate_fraction: Option<f64>,
    /// Acidic sites of all molecules of the cell.
    pub sites: Vec<ExplainedSite>,
    /// Rate constants that matter, those of the steps through which most goes first.
    pub rates: Vec<ExplainedRate>,
    /// What the uncertainty of the yield rests on, greatest share first.
    pub doubts: Vec<Doubt>,
    /// Losses of substrate, largest first; fractions of the substrate charged.
    pub losses: Vec<(Channel, f64)>,
    /// What can be in the pot at the end, as far as it can be drawn: largest share first, those without one last.
    pub products: Vec<ExplainedProduct>,
    /// Time course of the reference at the mean parameters.
    pub course: Vec<CoursePoint>,
    /// Cautions, severest first.
    pub cautions: Vec<Caution>,
    /// What is known of the hazards of each reagent, a sentence each; unknown where nothing is.
    pub hazards: Vec<String>,
    /// What limits the cell or what the model does not cover, in sentences.
    pub limits: Vec<String>,
    /// What one change would bring, best first, those that harm among them; each was computed.
    pub advice: Vec<Advice>,
    /// Fingerprint of the model, hexadecimal.
    pub model: String,
}

/// An acidic site of a molecule in the cell.
#[derive(Clone, Debug)]
pub struct ExplainedSite {
    /// `substrate`, `substrate anion` (its second proton), `product`, `electrophile`, `solvent` or `base`.
    pub molecule: &'static str,
    /// Atom index from 0 in the order of the molecule's SMILES.
    pub atom: usize,
    /// Symbol of the element.
    pub element: &'static str,
    /// Hydrogens on the atom.
    pub hydrogens: u8,
    /// pKa on the DMSO scale.
    pub pka_dmso: f64,
    /// pKa in the cell's medium at its temperature.
    pub pka_medium: f64,
    /// Standard uncertainty of `pka_dmso`.
    pub sigma: f64,
    /// Measured or estimated.
    pub origin: Origin,
    /// Source of the value.
    pub source: String,
    /// Terms of an estimate and the measured neighbours that it rests on; empty for a measured value.
    pub reasons: SiteReasons,
}

/// A rate constant of the cell.
#[derive(Clone, Debug)]
pub struct ExplainedRate {
    /// What reacts.
    pub step: String,
    /// log10 of the rate constant at the cell's temperature, L/(mol s) or 1/s.
    pub log10_k: f64,
    /// Standard uncertainty, log10 units.
    pub sigma: f64,
    /// Where it comes from.
    pub source: String,
    /// How far the step has run in all, less what came back, in units of the substrate charged; unknown without a time
    /// course.
    pub extent: Option<f64>,
}

/// A product that one channel leads to, neutral as after work-up.
#[derive(Clone, Debug, PartialEq)]
pub struct ExplainedProduct {
    /// The loss; `None` for the wanted product, before and after loss of water.
    pub channel: Option<Channel>,
    /// Canonical SMILES.
    pub smiles: String,
    /// Formula.
    pub formula: String,
    /// Monoisotopic mass, Da; that of the ion for an ammonium ion.
    pub monoisotopic_mass: f64,
    /// Share of the substrate charged that ends in it; for what holds no substrate, electrophile that ends in it per
    /// substrate charged. `None` where the channel leads to several and nothing tells how much to each.
    pub fraction: Option<f64>,
}

impl ExplainedProduct {
    /// Name of the channel, as it is printed: `wanted product` or that of the loss.
    pub fn channel_name(&self) -> &'static str {
        self.channel.map_or("wanted product", Channel::name)
    }
}

/// A point of the time course; amounts are fractions of the substrate charged.
#[derive(Clone, Debug)]
pub struct CoursePoint {
    /// Time after the electrophile begins to be added, s.
    pub time_s: f64,
    /// Substrate, neutral.
    pub substrate: f64,
    /// All anions of the substrate.
    pub anions: f64,
    /// Electrophile in the pot.
    pub electrophile: f64,
    /// Wanted product, neutral and anion.
    pub product: f64,
    /// Substrate in what the losses have made of it, the channels in the order of [`Explanation::losses`]; what has not
    /// reacted is in the first two.
    pub losses: Vec<(Channel, f64)>,
}

/// What one change of the cell would bring.
#[derive(Clone, Debug)]
pub struct Advice {
    /// The change, e.g. `temperature -20 → 25 °C`.
    pub change: String,
    /// Expected yield after the change.
    pub expected_yield: f64,
    /// Probability that the yield reaches the target then.
    pub p_hit: Option<f64>,
    /// Selectivity then.
    pub selectivity: Option<f64>,
    /// Main loss then, if there is any.
    pub largest_loss: Option<Channel>,
}

/// Where the material of a cell goes: the short form of an explanation.
#[derive(Clone, Debug, PartialEq)]
pub struct Fate {
    /// Yield of the wanted product on substrate by the stiff reference at the mean of all parameters, 0–1.
    pub product: f64,
    /// Substrate that is left, neutral and as anion, on the substrate charged, 0–1.
    pub left: f64,
    /// Time after which half of that product is there, s from the first electrophile; `None` where there is none.
    pub half_time_s: Option<f64>,
    /// Losses of substrate, largest first; fractions of the substrate charged.
    pub losses: Vec<(Channel, f64)>,
    /// What can be in the pot at the end, as in [`Explanation::products`].
    pub products: Vec<ExplainedProduct>,
}
