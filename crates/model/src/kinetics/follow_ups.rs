//! Rates of what follows: groups that leave, rings that close, esters that are attacked.

use enolattice_molecule::LeavingGroup;
use enolattice_reagents::{BaseKind, SolventClass};

use super::Kinetics;
use crate::carbonyl::Carbonyl;
use crate::features::{Closure, halide_on};
use crate::parameters::P;
use crate::prepared::CarbonSite;
use crate::rates;

/// A tert-alkyl ester is attacked about a hundred times more slowly (common practice).
const TERT_ALKYL: f64 = -2.0;
/// Lithium aldolates in ethers are chelated and keep their halide and their oxygen in the cold (common practice).
const CHELATED: f64 = -4.0;

impl Kinetics<'_> {
    fn unimolecular(&self, at_25: f64) -> f64 {
        rates::at_temperature(at_25, 25.0, self.medium.temperature_c, 0.0)
    }

    fn bimolecular(&self, at_25: f64) -> f64 {
        let (to_c, entropy) = (self.medium.temperature_c, self.v(P::DS_SN2));
        enolattice_units::math::exp10(rates::at_temperature(at_25, 25.0, to_c, entropy))
    }

    /// log10 of the rate at which the carbanion of a site loses a group in β, 1/s.
    ///
    /// `log k(25 °C) = k₀(group) − b·(25 − pKa)` for carbanions stabler than that of a ketone.
    pub(crate) fn departure_in_beta(&self, site: &CarbonSite, group: P) -> f64 {
        // the enolate of a simple ketone or ester loses a group as the parameters say
        const KETONE_PKA: f64 = 25.0;
        let stabler = (KETONE_PKA - self.site_pka_dmso(site)).max(0.0);
        self.unimolecular(self.v(group) - self.v(P::BETA_BRONSTED) * stabler)
    }

    /// log10 of the rate at which the product's anion at a site closes a ring, 1/s; `None` where the anion is not the one
    /// that closes it.
    pub(crate) fn ring_closure(&self, i: usize, closure: Closure) -> Option<f64> {
        // a carbanion of an ester displaces as the parameter says, a stabler one more slowly (the Brønsted term of SN2)
        const ESTER_PKA: f64 = 30.0;
        let substrate = &self.cell.substrate;
        let atom = substrate.carbon.get(i)?.acid.atom;
        let halide = match halide_on(&substrate.molecule, atom)? {
            LeavingGroup::Chloride => 0.0,
            better => rates::leaving_group(better) - rates::leaving_group(LeavingGroup::Chloride),
        };
        let at_25 = match (closure, self.product_heteroatom(i)) {
            (Closure::Epoxide, Some(_)) if self.medium.binds_oxygen() => {
                self.v(P::CLOSURE_EPOXIDE) + CHELATED
            }
            (Closure::Epoxide, Some(_)) => self.v(P::CLOSURE_EPOXIDE),
            (Closure::Cyclopropane, None) => {
                let pka = self
                    .product_carbon(i)
                    .map_or(ESTER_PKA, |site| site.acid.pka_dmso);
                self.v(P::CLOSURE_CYCLOPROPANE)
                    - self.v(P::SN2_BRONSTED) * (ESTER_PKA - pka).max(0.0)
            }
            _ => return None,
        };
        Some(self.unimolecular(at_25 + halide))
    }

    /// Rate constant of hydroxide or of a foreign alkoxide with the neutral ester.
    pub(crate) fn attack_on_ester(&self, ester: Carbonyl, by_hydroxide: bool) -> f64 {
        let (at_25, in_alcohol) = if by_hydroxide {
            (P::SAPONIFICATION, self.v(P::SAPONIFICATION_ALCOHOL))
        } else {
            (P::TRANSESTERIFICATION, 0.0)
        };
        let crowded = match ester {
            Carbonyl::TertAlkylEster => TERT_ALKYL,
            _ => 0.0,
        };
        let solvent = match self.cell.solvent.record.class {
            SolventClass::Alcohol => in_alcohol,
            _ => 0.0,
        };
        self.bimolecular(self.v(at_25) + crowded + solvent)
    }

    /// Rate constant of the cleavage of a neutral 1,3-dicarbonyl compound, by its weaker acceptor.
    pub(crate) fn cleavage(&self, acceptor: Carbonyl) -> f64 {
        let keto_ester = match acceptor {
            Carbonyl::Ester | Carbonyl::TertAlkylEster => self.v(P::RETRO_CLAISEN_KETO_ESTER),
            _ => 0.0,
        };
        self.bimolecular(self.v(P::RETRO_CLAISEN) + keto_ester)
    }

    /// Rate constant of an aldolate of the substrate with one more of its aldehyde, to the ester of a glycol.
    pub(crate) fn aldol_tishchenko(&self) -> f64 {
        let (to_c, entropy) = (self.medium.temperature_c, self.v(P::DS_ADDITION));
        let at_25 = self.v(P::ALDOL_TISHCHENKO);
        enolattice_units::math::exp10(rates::at_temperature(at_25, 25.0, to_c, entropy))
    }

    /// Rate at which the aldolate of the substrate's own aldehyde expels hydroxide, 1/s; in media with protons the neutral
    /// dimer loses water instead.
    pub(crate) fn expulsion_from_aldolate(&self) -> f64 {
        if self.medium.is_protic() || !self.cell.substrate.keeps_hydrogen_on_condensing() {
            return 0.0;
        }
        let chelated = if self.medium.binds_oxygen() {
            CHELATED
        } else {
            0.0
        };
        let at_25 = self.v(P::ALDOLATE_EXPULSION) + chelated;
        enolattice_units::math::exp10(self.unimolecular(at_25))
    }

    /// Whether the pot brings so much water that hydroxide counts for the product too.
    pub(crate) fn is_wet(&self) -> bool {
        // of the substrate (a working rule)
        const COUNTS: f64 = 0.1;
        let (record, solvent) = (&self.cell.base.record, &self.cell.solvent);
        let conditions = &self.cell.conditions;
        let water = solvent.water_m()
            + conditions.concentration_m * conditions.base_equiv * record.water_equiv;
        record.kind == BaseKind::Hydroxide
            || solvent.record.class == SolventClass::Water
            || water > COUNTS * conditions.concentration_m
    }
}
