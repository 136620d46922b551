//! Acidic sites.

use enolattice_engine::{ReasonedSite, SiteReport};
use enolattice_model::{AcidSite, Contribution, Neighbour, SiteReasons, Term};
use enolattice_molecule::AnionClass;

use super::{ConversionError, enums, numbers};
use crate::v1;

impl From<&SiteReport> for v1::MoleculeSites {
    fn from(report: &SiteReport) -> Self {
        v1::MoleculeSites {
            smiles: report.smiles.clone(),
            sites: report.sites.iter().map(Into::into).collect(),
        }
    }
}

impl TryFrom<v1::MoleculeSites> for SiteReport {
    type Error = ConversionError;

    fn try_from(molecule: v1::MoleculeSites) -> Result<Self, ConversionError> {
        let sites = molecule.sites.into_iter().map(TryInto::try_into);
        Ok(SiteReport {
            smiles: molecule.smiles,
            sites: sites.collect::<Result<_, _>>()?,
        })
    }
}

impl From<&ReasonedSite> for v1::AcidSite {
    fn from(reasoned: &ReasonedSite) -> Self {
        let site = &reasoned.site;
        v1::AcidSite {
            atom: numbers::index_to_wire(site.atom),
            element: site.element.into(),
            hydrogens: site.hydrogens.into(),
            equivalent_atoms: site
                .equivalent
                .iter()
                .copied()
                .map(numbers::index_to_wire)
                .collect(),
            anion_class: v1::AnionClass::from(site.class).into(),
            pka_dmso: site.pka_dmso,
            sigma: site.sigma,
            origin: v1::AcidityOrigin::from(site.origin).into(),
            source: site.source.clone(),
            outside_fit: site.outside,
            reasons: reasons_to_wire(&reasoned.reasons),
        }
    }
}

impl TryFrom<v1::AcidSite> for ReasonedSite {
    type Error = ConversionError;

    fn try_from(site: v1::AcidSite) -> Result<Self, ConversionError> {
        let equivalent = site.equivalent_atoms.into_iter();
        let reasons = reasons_from_wire(site.reasons)?;
        let site = AcidSite {
            atom: numbers::from_wire("AcidSite.atom", site.atom)?,
            element: numbers::from_wire("AcidSite.element", site.element)?,
            hydrogens: numbers::from_wire("AcidSite.hydrogens", site.hydrogens)?,
            equivalent: equivalent
                .map(|atom| numbers::from_wire("AcidSite.equivalent_atoms", atom))
                .collect::<Result<_, _>>()?,
            class: enums::from_wire::<_, v1::AnionClass>(
                "AcidSite.anion_class",
                &ANION_CLASSES,
                site.anion_class,
            )?,
            pka_dmso: site.pka_dmso,
            sigma: site.sigma,
            origin: enums::from_wire::<_, v1::AcidityOrigin>(
                "AcidSite.origin",
                &enums::ORIGINS,
                site.origin,
            )?,
            source: site.source,
            outside: site.outside_fit,
            // How an estimate hangs on the coefficients stays with the engine that draws them.
            contribution: Contribution::default(),
        };
        Ok(ReasonedSite { site, reasons })
    }
}

/// Nothing where there are no reasons: a measured value.
pub(super) fn reasons_to_wire(reasons: &SiteReasons) -> Option<v1::AcidityReasons> {
    (*reasons != SiteReasons::default()).then(|| v1::AcidityReasons {
        terms: reasons.terms.iter().map(Into::into).collect(),
        neighbours: reasons.neighbours.iter().map(Into::into).collect(),
    })
}

pub(super) fn reasons_from_wire(
    reasons: Option<v1::AcidityReasons>,
) -> Result<SiteReasons, ConversionError> {
    let reasons = reasons.unwrap_or_default();
    let neighbours = reasons.neighbours.into_iter().map(TryInto::try_into);
    Ok(SiteReasons {
        terms: reasons.terms.into_iter().map(Into::into).collect(),
        neighbours: neighbours.collect::<Result<_, _>>()?,
    })
}

impl From<&Term> for v1::AcidityTerm {
    fn from(term: &Term) -> Self {
        v1::AcidityTerm {
            name: term.name.clone(),
            contribution: term.contribution,
            standard_error: term.standard_error,
        }
    }
}

impl From<v1::AcidityTerm> for Term {
    fn from(term: v1::AcidityTerm) -> Self {
        Term {
            name: term.name,
            contribution: term.contribution,
            standard_error: term.standard_error,
        }
    }
}

impl From<&Neighbour> for v1::AcidityNeighbour {
    fn from(near: &Neighbour) -> Self {
        v1::AcidityNeighbour {
            smiles: near.smiles.clone(),
            atom: numbers::index_to_wire(near.atom),
            pka_dmso: near.pka_dmso,
            residual: near.residual,
            held_out_error: near.held_out_error,
            similarity: near.similarity,
            source: near.source.clone(),
        }
    }
}

impl TryFrom<v1::AcidityNeighbour> for Neighbour {
    type Error = ConversionError;

    fn try_from(near: v1::AcidityNeighbour) -> Result<Self, ConversionError> {
        Ok(Neighbour {
            smiles: near.smiles,
            atom: numbers::from_wire("AcidityNeighbour.atom", near.atom)?,
            pka_dmso: near.pka_dmso,
            residual: near.residual,
            held_out_error: near.held_out_error,
            similarity: near.similarity,
            source: near.source,
        })
    }
}

const ANION_CLASSES: [AnionClass; 27] = [
    AnionClass::Ketone,
    AnionClass::ArylKetone,
    AnionClass::Aldehyde,
    AnionClass::Ester,
    AnionClass::Amide,
    AnionClass::Nitrile,
    AnionClass::Nitronate,
    AnionClass::Sulfone,
    AnionClass::BetaDicarbonyl,
    AnionClass::CyclicBetaDicarbonyl,
    AnionClass::CyclicDiester,
    AnionClass::Carbanion,
    AnionClass::Alkoxide,
    AnionClass::Hydroxide,
    AnionClass::Phenoxide,
    AnionClass::Carboxylate,
    AnionClass::Carbonate,
    AnionClass::AmideNitrogen,
    AnionClass::ImideNitrogen,
    AnionClass::AzoleNitrogen,
    AnionClass::ArylNitrogen,
    AnionClass::AlkylNitrogen,
    AnionClass::SilylNitrogen,
    AnionClass::Thiolate,
    AnionClass::Hydride,
    AnionClass::Neutral,
    AnionClass::Fluoride,
];

impl From<AnionClass> for v1::AnionClass {
    fn from(class: AnionClass) -> Self {
        match class {
            AnionClass::Ketone => v1::AnionClass::Ketone,
            AnionClass::ArylKetone => v1::AnionClass::ArylKetone,
            AnionClass::Aldehyde => v1::AnionClass::Aldehyde,
            AnionClass::Ester => v1::AnionClass::Ester,
            AnionClass::Amide => v1::AnionClass::Amide,
            AnionClass::Nitrile => v1::AnionClass::Nitrile,
            AnionClass::Nitronate => v1::AnionClass::Nitronate,
            AnionClass::Sulfone => v1::AnionClass::Sulfone,
            AnionClass::BetaDicarbonyl => v1::AnionClass::BetaDicarbonyl,
            AnionClass::CyclicBetaDicarbonyl => v1::AnionClass::CyclicBetaDicarbonyl,
            AnionClass::CyclicDiester => v1::AnionClass::CyclicDiester,
            AnionClass::Carbanion => v1::AnionClass::Carbanion,
            AnionClass::Alkoxide => v1::AnionClass::Alkoxide,
            AnionClass::Hydroxide => v1::AnionClass::Hydroxide,
            AnionClass::Phenoxide => v1::AnionClass::Phenoxide,
            AnionClass::Carboxylate => v1::AnionClass::Carboxylate,
            AnionClass::Carbonate => v1::AnionClass::Carbonate,
            AnionClass::AmideNitrogen => v1::AnionClass::AmideNitrogen,
            AnionClass::ImideNitrogen => v1::AnionClass::ImideNitrogen,
            AnionClass::AzoleNitrogen => v1::AnionClass::AzoleNitrogen,
            AnionClass::ArylNitrogen => v1::AnionClass::ArylNitrogen,
            AnionClass::AlkylNitrogen => v1::AnionClass::AlkylNitrogen,
            AnionClass::SilylNitrogen => v1::AnionClass::SilylNitrogen,
            AnionClass::Thiolate => v1::AnionClass::Thiolate,
            AnionClass::Hydride => v1::AnionClass::Hydride,
            AnionClass::Neutral => v1::AnionClass::Neutral,
            AnionClass::Fluoride => v1::AnionClass::Fluoride,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_model::Origin;

    #[test]
    fn sites_of_every_class_come_back() {
        for class in ANION_CLASSES {
            let site = AcidSite {
                atom: 3,
                element: 7,
                hydrogens: 1,
                equivalent: vec![3, 9],
                class,
                pka_dmso: 17.25,
                sigma: 0.5,
                origin: Origin::Estimated,
                source: "group contributions".into(),
                outside: true,
                contribution: Contribution::default(),
            };
            let reasoned = ReasonedSite {
                site,
                reasons: SiteReasons {
                    terms: vec![Term {
                        name: "nitrile".into(),
                        contribution: -20.5,
                        standard_error: 0.5,
                    }],
                    neighbours: vec![Neighbour {
                        smiles: "CC#N".into(),
                        atom: 0,
                        pka_dmso: 31.3,
                        residual: 0.25,
                        held_out_error: -0.5,
                        similarity: 1.0,
                        source: "bordwell".into(),
                    }],
                },
            };
            let back = ReasonedSite::try_from(v1::AcidSite::from(&reasoned)).expect("converts");
            assert_eq!(format!("{back:?}"), format!("{reasoned:?}"));
        }
    }

    #[test]
    fn a_measured_site_sends_no_reasons() {
        assert_eq!(reasons_to_wire(&SiteReasons::default()), None);
        assert_eq!(reasons_from_wire(None).ok(), Some(SiteReasons::default()));
    }
}
