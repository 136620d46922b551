//! Everything about one cell.

use enolattice_engine::CellDescription;
use enolattice_model::{
    Advice, Caution, Channel, CoursePoint, Doubt, ExplainedProduct, ExplainedRate, Explanation,
};
use serde::Serialize;

use super::SiteRecord;

/// The document of `explain --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ExplanationDocument {
    summary: Vec<String>,
    expected_yield: Option<f64>,
    yield_sigma: Option<f64>,
    yield_on_limiting: Option<f64>,
    limiting_reagent: Option<String>,
    p_hit: Option<f64>,
    feasibility: Option<f64>,
    selectivity: Option<f64>,
    reference_yield: Option<f64>,
    fast_yield: Option<f64>,
    product_smiles: Option<String>,
    product_formula: Option<String>,
    product_mass: Option<f64>,
    condensation_smiles: Option<String>,
    delta_g_deprotonation_kj_mol: Option<f64>,
    log10_k: Option<f64>,
    log10_k_sigma: Option<f64>,
    enolate_fraction: Option<f64>,
    sites: Vec<SiteRecord>,
    rates: Vec<RateRecord>,
    doubts: Vec<DoubtRecord>,
    losses: Vec<LossRecord>,
    products: Vec<ProductRecord>,
    course: Vec<CourseRecord>,
    cautions: Vec<CautionRecord>,
    hazards: Vec<String>,
    limits: Vec<String>,
    advice: Vec<AdviceRecord>,
    model: String,
    cell: CellRecord,
}

#[derive(Clone, Debug, Serialize)]
pub(super) struct CellRecord {
    cell: Option<u64>,
    substrate: String,
    substrate_smiles: String,
    base: String,
    electrophile: String,
    electrophile_smiles: String,
    solvent: String,
    additive: Option<String>,
    temperature_c: f64,
    formation_temperature_c: f64,
    base_equiv: f64,
    electrophile_equiv: f64,
    additive_equiv: Option<f64>,
    concentration_m: f64,
    time_h: f64,
    dosing_min: f64,
    addition: String,
    measured_yield: Option<f64>,
    measured_sigma: Option<f64>,
    measured_note: Option<String>,
}

#[derive(Clone, Debug, Serialize)]
struct RateRecord {
    step: String,
    log10_k: f64,
    sigma: f64,
    source: String,
    extent: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
struct DoubtRecord {
    quantity: String,
    parameter: Option<String>,
    value: f64,
    sigma: f64,
    unit: String,
    source: String,
    share: f64,
    raises_yield: bool,
}

#[derive(Clone, Debug, Serialize)]
struct LossRecord {
    channel: &'static str,
    fraction: f64,
}

#[derive(Clone, Debug, Serialize)]
struct ProductRecord {
    channel: &'static str,
    smiles: String,
    formula: String,
    monoisotopic_mass: f64,
    fraction: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
struct CourseRecord {
    time_s: f64,
    substrate: f64,
    anions: f64,
    electrophile: f64,
    product: f64,
    losses: Vec<LossRecord>,
}

#[derive(Clone, Debug, Serialize)]
struct CautionRecord {
    category: &'static str,
    severity: &'static str,
    text: String,
    source: String,
}

#[derive(Clone, Debug, Serialize)]
struct AdviceRecord {
    change: String,
    expected_yield: f64,
    p_hit: Option<f64>,
    selectivity: Option<f64>,
    largest_loss: Option<&'static str>,
}

impl ExplanationDocument {
    pub(crate) fn new(cell: CellDescription, told: Explanation) -> ExplanationDocument {
        ExplanationDocument {
            cell: cell.into(),
            summary: told.summary,
            expected_yield: told.expected_yield,
            yield_sigma: told.yield_sigma,
            yield_on_limiting: told.yield_on_limiting,
            limiting_reagent: told.limiting_reagent,
            p_hit: told.p_hit,
            feasibility: told.feasibility,
            selectivity: told.selectivity,
            reference_yield: told.reference_yield,
            fast_yield: told.fast_yield,
            product_smiles: told.product_smiles,
            product_formula: told.product_formula,
            product_mass: told.product_mass,
            condensation_smiles: told.condensation_smiles,
            delta_g_deprotonation_kj_mol: told.delta_g_deprotonation_kj_mol,
            log10_k: told.log10_k,
            log10_k_sigma: told.log10_k_sigma,
            enolate_fraction: told.enolate_fraction,
            sites: told.sites.into_iter().map(SiteRecord::from).collect(),
            rates: told.rates.into_iter().map(RateRecord::from).collect(),
            doubts: told.doubts.into_iter().map(DoubtRecord::from).collect(),
            losses: told.losses.into_iter().map(LossRecord::from).collect(),
            products: told.products.into_iter().map(ProductRecord::from).collect(),
            course: told.course.into_iter().map(CourseRecord::from).collect(),
            cautions: told.cautions.into_iter().map(CautionRecord::from).collect(),
            hazards: told.hazards,
            limits: told.limits,
            advice: told.advice.into_iter().map(AdviceRecord::from).collect(),
            model: told.model,
        }
    }
}

impl From<CellDescription> for CellRecord {
    fn from(cell: CellDescription) -> CellRecord {
        CellRecord {
            cell: cell.cell,
            substrate: cell.substrate,
            substrate_smiles: cell.substrate_smiles,
            base: cell.base,
            electrophile: cell.electrophile,
            electrophile_smiles: cell.electrophile_smiles,
            solvent: cell.solvent,
            additive: cell.additive,
            temperature_c: cell.temperature_c,
            formation_temperature_c: cell.formation_temperature_c,
            base_equiv: cell.base_equiv,
            electrophile_equiv: cell.electrophile_equiv,
            additive_equiv: cell.additive_equiv,
            concentration_m: cell.concentration_m,
            time_h: cell.time_h,
            dosing_min: cell.dosing_min,
            addition: cell.addition,
            measured_yield: cell.measured.as_ref().map(|known| known.yield_fraction),
            measured_sigma: cell.measured.as_ref().and_then(|known| known.sigma),
            measured_note: cell
                .measured
                .map(|known| known.note)
                .filter(|note| !note.is_empty()),
        }
    }
}

impl From<Doubt> for DoubtRecord {
    fn from(doubt: Doubt) -> DoubtRecord {
        DoubtRecord {
            quantity: doubt.quantity,
            parameter: doubt.parameter,
            value: doubt.value,
            sigma: doubt.sigma,
            unit: doubt.unit,
            source: doubt.source,
            share: doubt.share,
            raises_yield: doubt.raises_yield,
        }
    }
}

impl From<ExplainedRate> for RateRecord {
    fn from(rate: ExplainedRate) -> RateRecord {
        RateRecord {
            step: rate.step,
            log10_k: rate.log10_k,
            sigma: rate.sigma,
            source: rate.source,
            extent: rate.extent,
        }
    }
}

impl From<(Channel, f64)> for LossRecord {
    fn from((channel, fraction): (Channel, f64)) -> LossRecord {
        LossRecord {
            channel: channel.name(),
            fraction,
        }
    }
}

impl From<ExplainedProduct> for ProductRecord {
    fn from(product: ExplainedProduct) -> ProductRecord {
        ProductRecord {
            channel: product.channel_name(),
            smiles: product.smiles,
            formula: product.formula,
            monoisotopic_mass: product.monoisotopic_mass,
            fraction: product.fraction,
        }
    }
}

impl From<CoursePoint> for CourseRecord {
    fn from(point: CoursePoint) -> CourseRecord {
        CourseRecord {
            time_s: point.time_s,
            substrate: point.substrate,
            anions: point.anions,
            electrophile: point.electrophile,
            product: point.product,
            losses: point.losses.into_iter().map(LossRecord::from).collect(),
        }
    }
}

impl From<Caution> for CautionRecord {
    fn from(caution: Caution) -> CautionRecord {
        CautionRecord {
            category: caution.category.name(),
            severity: caution.severity.name(),
            text: caution.text,
            source: caution.source,
        }
    }
}

impl From<Advice> for AdviceRecord {
    fn from(advice: Advice) -> AdviceRecord {
        AdviceRecord {
            change: advice.change,
            expected_yield: advice.expected_yield,
            p_hit: advice.p_hit,
            selectivity: advice.selectivity,
            largest_loss: advice.largest_loss.map(Channel::name),
        }
    }
}
