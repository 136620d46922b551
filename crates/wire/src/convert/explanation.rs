//! Explanations.

use enolattice_model::{
    Advice, Category, Caution, Channel, CoursePoint, Doubt, ExplainedProduct, ExplainedRate,
    ExplainedSite, Explanation, Severity,
};

use super::acidity::{reasons_from_wire, reasons_to_wire};
use super::{ConversionError, enums, numbers};
use crate::v1;

impl From<&Explanation> for v1::Explanation {
    fn from(explanation: &Explanation) -> Self {
        let e = explanation;
        v1::Explanation {
            expected_yield: e.expected_yield,
            yield_sigma: e.yield_sigma,
            yield_on_limiting: e.yield_on_limiting,
            p_hit: e.p_hit,
            feasibility: e.feasibility,
            selectivity: e.selectivity,
            reference_yield: e.reference_yield,
            fast_yield: e.fast_yield,
            product_smiles: e.product_smiles.clone(),
            product_formula: e.product_formula.clone(),
            product_mass: e.product_mass,
            condensation_smiles: e.condensation_smiles.clone(),
            delta_g_deprotonation_kj_mol: e.delta_g_deprotonation_kj_mol,
            log10_k: e.log10_k,
            log10_k_sigma: e.log10_k_sigma,
            enolate_fraction: e.enolate_fraction,
            sites: e.sites.iter().map(Into::into).collect(),
            rates: e.rates.iter().map(Into::into).collect(),
            doubts: e.doubts.iter().map(Into::into).collect(),
            summary: e.summary.clone(),
            limiting_reagent: e.limiting_reagent.clone(),
            losses: e.losses.iter().map(loss).collect(),
            products: e.products.iter().map(Into::into).collect(),
            course: e.course.iter().map(Into::into).collect(),
            cautions: e.cautions.iter().map(Into::into).collect(),
            hazards: e.hazards.clone(),
            limits: e.limits.clone(),
            advice: e.advice.iter().map(Into::into).collect(),
            model: e.model.clone(),
        }
    }
}

impl TryFrom<v1::Explanation> for Explanation {
    type Error = ConversionError;

    fn try_from(e: v1::Explanation) -> Result<Self, ConversionError> {
        Ok(Explanation {
            expected_yield: e.expected_yield,
            yield_sigma: e.yield_sigma,
            yield_on_limiting: e.yield_on_limiting,
            p_hit: e.p_hit,
            feasibility: e.feasibility,
            selectivity: e.selectivity,
            reference_yield: e.reference_yield,
            fast_yield: e.fast_yield,
            product_smiles: e.product_smiles,
            product_formula: e.product_formula,
            product_mass: e.product_mass,
            condensation_smiles: e.condensation_smiles,
            delta_g_deprotonation_kj_mol: e.delta_g_deprotonation_kj_mol,
            log10_k: e.log10_k,
            log10_k_sigma: e.log10_k_sigma,
            enolate_fraction: e.enolate_fraction,
            sites: e
                .sites
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            rates: e.rates.into_iter().map(Into::into).collect(),
            doubts: e.doubts.into_iter().map(Into::into).collect(),
            summary: e.summary,
            limiting_reagent: e.limiting_reagent,
            losses: e.losses.iter().map(loss_from).collect::<Result<_, _>>()?,
            products: e
                .products
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            course: e
                .course
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            cautions: e
                .cautions
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            hazards: e.hazards,
            limits: e.limits,
            advice: e
                .advice
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            model: e.model,
        })
    }
}

impl From<&Doubt> for v1::Doubt {
    fn from(doubt: &Doubt) -> Self {
        v1::Doubt {
            quantity: doubt.quantity.clone(),
            parameter: doubt.parameter.clone(),
            value: doubt.value,
            sigma: doubt.sigma,
            unit: doubt.unit.clone(),
            source: doubt.source.clone(),
            share: doubt.share,
            raises_yield: doubt.raises_yield,
        }
    }
}

impl From<v1::Doubt> for Doubt {
    fn from(doubt: v1::Doubt) -> Self {
        Doubt {
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

fn loss((channel, fraction): &(Channel, f64)) -> v1::Loss {
    v1::Loss {
        channel: v1::Channel::from(*channel).into(),
        fraction: *fraction,
    }
}

fn loss_from(loss: &v1::Loss) -> Result<(Channel, f64), ConversionError> {
    let channel = enums::from_wire::<_, v1::Channel>("Loss.channel", &Channel::ALL, loss.channel)?;
    Ok((channel, loss.fraction))
}

const MOLECULES: [(&str, v1::CellMolecule); 6] = [
    ("substrate", v1::CellMolecule::Substrate),
    ("substrate anion", v1::CellMolecule::SubstrateAnion),
    ("product", v1::CellMolecule::Product),
    ("electrophile", v1::CellMolecule::Electrophile),
    ("solvent", v1::CellMolecule::Solvent),
    ("base", v1::CellMolecule::Base),
];

impl From<&ExplainedSite> for v1::ExplainedSite {
    fn from(site: &ExplainedSite) -> Self {
        let molecule = MOLECULES.iter().find(|(name, _)| *name == site.molecule);
        v1::ExplainedSite {
            molecule: molecule
                .map_or(v1::CellMolecule::Unspecified, |(_, value)| *value)
                .into(),
            atom: numbers::index_to_wire(site.atom),
            element: site.element.to_owned(),
            hydrogens: site.hydrogens.into(),
            pka_dmso: site.pka_dmso,
            pka_medium: site.pka_medium,
            sigma: site.sigma,
            origin: v1::AcidityOrigin::from(site.origin).into(),
            source: site.source.clone(),
            reasons: reasons_to_wire(&site.reasons),
        }
    }
}

impl TryFrom<v1::ExplainedSite> for ExplainedSite {
    type Error = ConversionError;

    fn try_from(site: v1::ExplainedSite) -> Result<Self, ConversionError> {
        let molecule = MOLECULES
            .iter()
            .find(|(_, value)| *value as i32 == site.molecule);
        let (molecule, _) = molecule.ok_or(ConversionError::Unknown {
            field: "ExplainedSite.molecule",
            value: site.molecule.to_string(),
        })?;
        Ok(ExplainedSite {
            molecule,
            atom: numbers::from_wire("ExplainedSite.atom", site.atom)?,
            element: element(&site.element),
            hydrogens: numbers::from_wire("ExplainedSite.hydrogens", site.hydrogens)?,
            pka_dmso: site.pka_dmso,
            pka_medium: site.pka_medium,
            sigma: site.sigma,
            origin: enums::from_wire::<_, v1::AcidityOrigin>(
                "ExplainedSite.origin",
                &enums::ORIGINS,
                site.origin,
            )?,
            source: site.source,
            reasons: reasons_from_wire(site.reasons)?,
        })
    }
}

/// Elements that bear the hydrogens of an acid.
const ELEMENTS: [&str; 19] = [
    "H", "B", "C", "N", "O", "F", "Al", "Si", "P", "S", "Cl", "Ga", "Ge", "As", "Se", "Br", "Sn",
    "Te", "I",
];

/// The symbol as the model's types want it; `?` as the model has it for any other element.
fn element(symbol: &str) -> &'static str {
    ELEMENTS
        .into_iter()
        .find(|element| *element == symbol)
        .unwrap_or("?")
}

impl From<&ExplainedRate> for v1::ExplainedRate {
    fn from(rate: &ExplainedRate) -> Self {
        v1::ExplainedRate {
            step: rate.step.clone(),
            log10_k: rate.log10_k,
            sigma: rate.sigma,
            source: rate.source.clone(),
            extent: rate.extent,
        }
    }
}

impl From<v1::ExplainedRate> for ExplainedRate {
    fn from(rate: v1::ExplainedRate) -> Self {
        ExplainedRate {
            step: rate.step,
            log10_k: rate.log10_k,
            sigma: rate.sigma,
            source: rate.source,
            extent: rate.extent,
        }
    }
}

impl From<&ExplainedProduct> for v1::ExplainedProduct {
    fn from(product: &ExplainedProduct) -> Self {
        v1::ExplainedProduct {
            channel: product
                .channel
                .map_or(v1::Channel::Unspecified, v1::Channel::from)
                .into(),
            smiles: product.smiles.clone(),
            formula: product.formula.clone(),
            monoisotopic_mass: product.monoisotopic_mass,
            fraction: product.fraction,
        }
    }
}

impl TryFrom<v1::ExplainedProduct> for ExplainedProduct {
    type Error = ConversionError;

    fn try_from(product: v1::ExplainedProduct) -> Result<Self, ConversionError> {
        Ok(ExplainedProduct {
            channel: enums::optional_from_wire::<_, v1::Channel>(
                "ExplainedProduct.channel",
                &Channel::ALL,
                product.channel,
            )?,
            smiles: product.smiles,
            formula: product.formula,
            monoisotopic_mass: product.monoisotopic_mass,
            fraction: product.fraction,
        })
    }
}

impl From<&CoursePoint> for v1::CoursePoint {
    fn from(point: &CoursePoint) -> Self {
        v1::CoursePoint {
            time_s: point.time_s,
            substrate: point.substrate,
            anions: point.anions,
            electrophile: point.electrophile,
            product: point.product,
            losses: point.losses.iter().map(loss).collect(),
        }
    }
}

impl TryFrom<v1::CoursePoint> for CoursePoint {
    type Error = ConversionError;

    fn try_from(point: v1::CoursePoint) -> Result<Self, ConversionError> {
        Ok(CoursePoint {
            time_s: point.time_s,
            substrate: point.substrate,
            anions: point.anions,
            electrophile: point.electrophile,
            product: point.product,
            losses: point
                .losses
                .iter()
                .map(loss_from)
                .collect::<Result<_, _>>()?,
        })
    }
}

impl From<&Caution> for v1::Caution {
    fn from(caution: &Caution) -> Self {
        v1::Caution {
            category: v1::CautionCategory::from(caution.category).into(),
            severity: v1::CautionSeverity::from(caution.severity).into(),
            text: caution.text.clone(),
            source: caution.source.clone(),
        }
    }
}

impl TryFrom<v1::Caution> for Caution {
    type Error = ConversionError;

    fn try_from(caution: v1::Caution) -> Result<Self, ConversionError> {
        Ok(Caution {
            category: enums::from_wire::<_, v1::CautionCategory>(
                "Caution.category",
                &Category::ALL,
                caution.category,
            )?,
            severity: enums::from_wire::<_, v1::CautionSeverity>(
                "Caution.severity",
                &Severity::ALL,
                caution.severity,
            )?,
            text: caution.text,
            source: caution.source,
        })
    }
}

impl From<&Advice> for v1::Advice {
    fn from(advice: &Advice) -> Self {
        v1::Advice {
            change: advice.change.clone(),
            expected_yield: advice.expected_yield,
            p_hit: advice.p_hit,
            selectivity: advice.selectivity,
            largest_loss: advice
                .largest_loss
                .map_or(v1::Channel::Unspecified, v1::Channel::from)
                .into(),
        }
    }
}

impl TryFrom<v1::Advice> for Advice {
    type Error = ConversionError;

    fn try_from(advice: v1::Advice) -> Result<Self, ConversionError> {
        Ok(Advice {
            change: advice.change,
            expected_yield: advice.expected_yield,
            p_hit: advice.p_hit,
            selectivity: advice.selectivity,
            largest_loss: enums::optional_from_wire::<_, v1::Channel>(
                "Advice.largest_loss",
                &Channel::ALL,
                advice.largest_loss,
            )?,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_model::{Origin, SiteReasons, Term};

    /// Every field has a value of its own, so that a swapped pair is seen.
    fn explanation() -> Explanation {
        Explanation {
            summary: vec!["the base is strong".into(), "the attack is fast".into()],
            limiting_reagent: Some("electrophile".into()),
            expected_yield: Some(0.81),
            yield_sigma: Some(0.12),
            yield_on_limiting: Some(0.84),
            p_hit: Some(0.9),
            feasibility: Some(0.99),
            selectivity: Some(0.88),
            reference_yield: Some(0.8),
            fast_yield: Some(0.79),
            product_smiles: Some("CCOC(=O)C(C)Cc1ccccc1".into()),
            product_formula: Some("C12H16O2".into()),
            product_mass: Some(192.11503),
            condensation_smiles: Some("CC=C".into()),
            delta_g_deprotonation_kj_mol: Some(-31.5),
            log10_k: Some(5.5),
            log10_k_sigma: Some(1.4),
            enolate_fraction: Some(0.97),
            sites: MOLECULES
                .iter()
                .map(|(molecule, _)| ExplainedSite {
                    molecule,
                    atom: 4,
                    element: "S",
                    hydrogens: 2,
                    pka_dmso: 29.5,
                    pka_medium: 30.1,
                    sigma: 0.4,
                    origin: Origin::Measured,
                    source: "a table".into(),
                    reasons: SiteReasons {
                        terms: vec![Term {
                            name: "thiol S–H".into(),
                            contribution: 29.5,
                            standard_error: 0.3,
                        }],
                        neighbours: Vec::new(),
                    },
                })
                .collect(),
            rates: vec![ExplainedRate {
                step: "enolate + BnBr".into(),
                log10_k: -1.5,
                sigma: 0.6,
                source: "a line".into(),
                extent: Some(0.77),
            }],
            doubts: vec![Doubt {
                quantity: "pKa of an ester".into(),
                parameter: Some("H_ESTER".into()),
                value: 29.5,
                sigma: 0.41,
                unit: "pK".into(),
                source: "another table".into(),
                share: 0.37,
                raises_yield: true,
            }],
            losses: vec![(Channel::OverAlkylation, 0.11), (Channel::SlowAttack, 0.08)],
            products: vec![
                ExplainedProduct {
                    channel: None,
                    smiles: "CCOC(=O)C(C)Cc1ccccc1".into(),
                    formula: "C12H16O2".into(),
                    monoisotopic_mass: 192.11503,
                    fraction: Some(0.8),
                },
                ExplainedProduct {
                    channel: Some(Channel::Solvolysis),
                    smiles: "OCc1ccccc1".into(),
                    formula: "C7H8O".into(),
                    monoisotopic_mass: 108.05751,
                    fraction: None,
                },
            ],
            course: vec![CoursePoint {
                time_s: 60.0,
                substrate: 0.1,
                anions: 0.5,
                electrophile: 0.3,
                product: 0.4,
                losses: vec![(Channel::OAttack, 0.02), (Channel::OtherSite, 0.01)],
            }],
            cautions: vec![Caution {
                category: Category::Pyrophoric,
                severity: Severity::Warning,
                text: "the base catches fire in air".into(),
                source: "common practice".into(),
            }],
            hazards: vec!["hazards of the substrate: unknown".into()],
            limits: vec!["the attack is slow".into()],
            advice: vec![Advice {
                change: "solvent THF → DMF".into(),
                expected_yield: 0.86,
                p_hit: Some(0.92),
                selectivity: Some(0.87),
                largest_loss: Some(Channel::Solvolysis),
            }],
            model: "ef".into(),
        }
    }

    #[test]
    fn explanations_come_back() {
        let explanation = explanation();
        let back = Explanation::try_from(v1::Explanation::from(&explanation)).expect("converts");
        assert_eq!(format!("{back:?}"), format!("{explanation:?}"));
    }

    #[test]
    fn unknown_numbers_stay_unknown() {
        let explanation = Explanation {
            expected_yield: None,
            p_hit: None,
            log10_k: None,
            ..explanation()
        };
        let message = v1::Explanation::from(&explanation);
        assert_eq!(message.expected_yield, None);
        let back = Explanation::try_from(message).expect("converts");
        assert_eq!(format!("{back:?}"), format!("{explanation:?}"));
    }

    #[test]
    fn unknown_values_of_closed_lists_are_named() {
        let loss = v1::Loss {
            channel: 99,
            fraction: 0.5,
        };
        assert_eq!(
            loss_from(&loss),
            Err(ConversionError::Unknown {
                field: "Loss.channel",
                value: "99".into()
            })
        );
    }
}
