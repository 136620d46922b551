//! Rates of what befalls acceptors: chains, and the carbonyl group of enones and enals.

use enolattice_molecule::{Acceptor, AnionClass, ElectrophileKind};
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use super::{Kinetics, PKA_ALCOHOL};
use crate::parameters::P;
use crate::rates::{self, Nucleophile};

/// Acceptor taken up by a chain before chance ends it, at most (from memory).
const LONGEST_CHAIN: f64 = 100.0;

/// The growing end of a chain of acceptors.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Chain {
    /// pKa of its acid in the medium.
    pka: f64,
    /// Growth, 1/s with all the electrophile.
    growth_per_s: f64,
    /// log10 of its rate constant, L/(mol s).
    log10_growth: f64,
    /// End by the acids of the pot, 1/s.
    end_per_s: f64,
}

impl Kinetics<'_> {
    /// The chain that an open acceptor makes; `None` for acceptors with a substituent on the β carbon or with alkyl on the α carbon,
    /// which polymerise far less easily, and for other electrophiles.
    pub(crate) fn chain(&self) -> Option<Chain> {
        let Some(ElectrophileKind::Michael {
            acceptor,
            further_acceptors,
            beta_acceptors: 0,
            beta_alkyl: 0,
            beta_aryl: 0,
            alpha_alkyl: 0,
            ..
        }) = self.kind()
        else {
            return None;
        };
        let (pka_dmso, class) = chain_end(*acceptor, *further_acceptors);
        let end = Nucleophile {
            relative: 0.0,
            aggregated_at_m: Some(self.cell.conditions.concentration_m),
            crowding: u8::from(*further_acceptors > 0),
            ..self.oxygen_anion(pka_dmso, class)
        };
        let log10_growth = self.attack(&end)?;
        let conditions = &self.cell.conditions;
        let pka = self.pka(pka_dmso, class);
        let electrophile_m = conditions.concentration_m * conditions.electrophile_equiv;
        Some(Chain {
            pka,
            growth_per_s: math::exp10(log10_growth) * electrophile_m,
            log10_growth,
            end_per_s: self.end_of_chain(pka, class),
        })
    }

    /// Rate at which solvent, acid of the base and substrate protonate a carbanion, 1/s.
    fn end_of_chain(&self, pka: f64, class: AnionClass) -> f64 {
        let by = |donor_pka: f64, donor_m: f64| {
            let delta = donor_pka - pka;
            let log10_k = rates::exchange(-delta, class, 0.0, &self.medium, self.values);
            // the other way round: the base of the step is the chain
            donor_m * math::exp10(log10_k)
        };
        let solvent = self
            .solvent_donor()
            .map_or(0.0, |(pka, acid_m)| by(pka, acid_m));
        let substrate = self.cell.substrate.carbon.first();
        let substrate = substrate.map_or(0.0, |site| {
            let left = (1.0 - self.cell.conditions.base_equiv).max(0.05);
            by(
                self.site_pka(site),
                left * self.cell.conditions.concentration_m,
            )
        });
        let record = &self.cell.base.record;
        let gives_gas = matches!(
            record.kind,
            BaseKind::Hydride | BaseKind::Organolithium | BaseKind::Grignard
        );
        let base = if gives_gas {
            0.0
        } else {
            by(self.pka_base(), self.acid_of_base_m())
        };
        solvent + substrate + base
    }

    /// The base as what begins a chain: none where it is a hydride, a carbonate or its like that attacks nothing.
    pub(crate) fn base_initiator(&self) -> Option<Nucleophile> {
        let kind = self.cell.base.record.kind;
        let attacks = !matches!(
            kind,
            BaseKind::Hydride | BaseKind::Carbonate | BaseKind::Fluoride
        );
        attacks.then(|| self.base_nucleophile())
    }

    /// Rate constant at which a base uses up acceptor in chains, base kept:
    /// `k·f·ν`, f the share of the adducts that grow before they fall apart or are protonated, ν the length.
    pub(crate) fn polymerisation(
        &self,
        chain: &Chain,
        nucleophile: &Nucleophile,
        base_pka: f64,
    ) -> f64 {
        let Some(log10_k) = self.attack(nucleophile) else {
            return 0.0;
        };
        let rate = math::exp10(log10_k);
        // neutral amines make zwitterions, which need no proton to fall apart again
        let log10_equilibrium = self.log10_k(self.v(P::DG_HETERO_MICHAEL));
        let returns = match nucleophile.class {
            class if class.is_carbanion() => 0.0,
            _ => rate * math::exp10(chain.pka - log10_equilibrium - base_pka),
        };
        let grows = chain.growth_per_s;
        let begins = grows / (grows + chain.end_per_s + returns);
        let length = 1.0 + (grows / chain.end_per_s.max(f64::MIN_POSITIVE)).min(LONGEST_CHAIN);
        rate * begins * length
    }

    /// Rate constant at which the chain that two acceptors on a product have begun goes on; 0 where an acid of the
    /// pot ends it.
    pub(crate) fn polymerisation_from_product(&self, chain: &Chain) -> f64 {
        if chain.growth_per_s > chain.end_per_s && self.pka_base() > chain.pka {
            math::exp10(chain.log10_growth)
        } else {
            0.0
        }
    }

    /// log10 k of the addition of a metal enolate at a site to the carbonyl group of an enone or enal, and log10 of the
    /// ratio of its return; `None` for other acceptors and where no metal holds the alkoxide.
    pub(crate) fn addition_to_conjugated_carbonyl(&self, i: usize) -> Option<(f64, f64)> {
        let (e, free_energy) = match self.kind()? {
            ElectrophileKind::Michael {
                acceptor: Acceptor::Aldehyde,
                ..
            } => (P::E_ALDEHYDE, P::DG_ALDOL_ALKYL),
            ElectrophileKind::Michael {
                acceptor: Acceptor::Ketone,
                ..
            } => (P::E_KETONE, P::DG_ALDOL_KETONE_ACCEPTOR),
            _ => return None,
        };
        if !self.medium.binds_oxygen() || self.first_heteroatom().is_some() {
            return None;
        }
        let site = self.cell.substrate.carbon.get(i)?;
        let nucleophile = self.substrate_carbanion(site);
        let e = self.v(e) + self.v(P::E_CONJUGATED);
        let log10_k =
            rates::addition(&nucleophile, e, &self.medium, self.values) + self.v(P::CARBONYL_METAL);
        let entropy = self.v(P::DG_ENTROPY) * (self.medium.temperature_c - 25.0);
        let equilibrium = self.log10_k(self.v(free_energy) + self.v(P::DG_CONJUGATED) + entropy);
        let alkoxide = self.pka(PKA_ALCOHOL, AnionClass::Alkoxide) - self.chelation();
        Some((log10_k, alkoxide - equilibrium - self.site_pka(site)))
    }
}

/// pKa (DMSO) of the acid of the carbanion at the growing end, and its class.
///
/// # Source
/// Nitroalkanes 17, ketones 26, aldehydes 27, sulfones 31, esters 29.5, nitriles 31, amides 34; malonates and cyanoacetates with
/// one substituent 14 (Bordwell 1988, from memory).
fn chain_end(acceptor: Acceptor, further_acceptors: u8) -> (f64, AnionClass) {
    match acceptor {
        _ if further_acceptors > 0 => (14.0, AnionClass::BetaDicarbonyl),
        Acceptor::Nitro => (17.0, AnionClass::Nitronate),
        Acceptor::Aldehyde => (27.0, AnionClass::Aldehyde),
        Acceptor::Ketone | Acceptor::Quinone | Acceptor::QuinoneMethide => {
            (26.0, AnionClass::Ketone)
        }
        Acceptor::Imide | Acceptor::Thioester => (27.0, AnionClass::Ester),
        Acceptor::Ester => (29.5, AnionClass::Ester),
        Acceptor::Amide => (34.0, AnionClass::Amide),
        Acceptor::Nitrile => (31.0, AnionClass::Nitrile),
        Acceptor::Sulfone | Acceptor::Sulfonate | Acceptor::Sulfoxide | Acceptor::Phosphonate => {
            (31.0, AnionClass::Sulfone)
        }
        Acceptor::Pyridyl => (32.0, AnionClass::Carbanion),
    }
}
