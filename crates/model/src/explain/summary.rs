//! What a colleague would say of a cell: which acid, which base, how far, what then happens, what competes, what limits.

use enolattice_molecule::element_symbol;
use enolattice_reagents::SolventClass;
use enolattice_units::math;

use super::Limiting;
use crate::bonding::Bonding;
use crate::kinetics::Kinetics;
use crate::network::{Network, Species};
use crate::outcome::Outcome;
use crate::prepared::CarbonSite;
use crate::{Cell, Channel, Explanation, Origin};

/// A loss below this share is not worth a sentence.
const WORTH_A_WORD: f64 = 0.02;
/// Competitors that are named.
const NAMED: usize = 3;

/// The sentences, each without a full stop.
pub(super) fn summary(
    cell: &Cell,
    kinetics: &Kinetics<'_>,
    network: &Network,
    outcome: &Outcome,
    told: &Explanation,
) -> Vec<String> {
    let telling = Telling {
        cell,
        kinetics,
        network,
        outcome,
        told,
    };
    let mut sentences = vec![telling.acid()];
    sentences.extend(telling.earlier_acid());
    sentences.push(telling.how_far());
    sentences.extend(telling.attack());
    sentences.push(telling.result());
    sentences.extend(telling.competitors());
    sentences.push(telling.limit());
    sentences.extend(telling.doubt());
    sentences
}

struct Telling<'a> {
    cell: &'a Cell,
    kinetics: &'a Kinetics<'a>,
    network: &'a Network,
    outcome: &'a Outcome,
    told: &'a Explanation,
}

impl Telling<'_> {
    fn first_site(&self) -> &CarbonSite {
        &self.cell.substrate.carbon[0]
    }

    /// The site that the wanted product is made at.
    fn reacting_site(&self) -> &CarbonSite {
        let carbon = &self.cell.substrate.carbon;
        carbon.get(self.outcome.site).unwrap_or(&carbon[0])
    }

    fn acid(&self) -> String {
        let site = self.first_site();
        let known = match site.acid.origin {
            Origin::Measured => "measured",
            _ => "estimated",
        };
        let hydrogens = match site.acid.hydrogens {
            1 => "CH".to_owned(),
            n => format!("CH{n}"),
        };
        let mut sentence = format!(
            "the most acidic C–H of {} is the {hydrogens} at atom {}: pKa {:.1} ± {:.1} in DMSO ({known}), {:.1} here, in {} at {} °C",
            self.cell.substrate.name,
            site.acid.atom,
            site.acid.pka_dmso,
            site.acid.sigma,
            self.pka_shown("substrate", site.acid.atom),
            self.cell.solvent.record.name,
            signed(self.cell.conditions.temperature_c),
        );
        let reacting = self.reacting_site();
        if reacting.acid.atom != site.acid.atom {
            sentence += &format!(
                "; the new bond forms at atom {}, pKa {:.1} in DMSO",
                reacting.acid.atom, reacting.acid.pka_dmso
            );
        }
        sentence
    }

    /// pKa in the medium as the table of sites has it.
    fn pka_shown(&self, molecule: &str, atom: usize) -> f64 {
        let mut sites = self.told.sites.iter();
        let found = sites.find(|site| site.molecule == molecule && site.atom == atom);
        found.map_or(f64::NAN, |site| site.pka_medium)
    }

    /// An X–H that loses its proton before the carbon does.
    fn earlier_acid(&self) -> Option<String> {
        let x = self.kinetics.first_heteroatom()?;
        let needed = match self.kinetics.second_site() {
            Some(_) => {
                "the carbon reacts as the dianion or not at all, and that takes a second equivalent of base"
            }
            None => "the base goes there first",
        };
        Some(format!(
            "its {}–H at atom {} is the stronger acid, pKa {:.1} in DMSO: {needed}",
            element_symbol(x.element),
            x.atom,
            x.pka_dmso
        ))
    }

    fn how_far(&self) -> String {
        let base = &self.cell.base.record;
        let log10_k = self.told.log10_k.unwrap_or(0.0);
        let sigma = self.told.log10_k_sigma.unwrap_or(0.0);
        let fraction = self.told.enolate_fraction.unwrap_or(0.0);
        let strength = match log10_k {
            k if k > 4.0 => "is far the stronger base",
            k if k > 1.0 => "is the stronger base",
            k if k > -1.0 => "is about as strong a base as the carbanion",
            k if k > -6.0 => "is the weaker base",
            _ => "is far too weak a base",
        };
        let extent = match fraction {
            f if f > 0.97 => "all of it is carbanion".to_owned(),
            f if f > 0.005 => format!("{} of it is carbanion", percent(f)),
            f if f > 0.0 => format!(
                "at most {} % of it is carbanion at any time",
                tiny(100.0 * f)
            ),
            _ => "no carbanion is seen".to_owned(),
        };
        let when = match () {
            () if fraction <= 0.005 => "",
            () if crate::program::Charge::of(self.cell).forms_first() => {
                " when the electrophile comes"
            }
            () => " at most",
        };
        let mut sentence = format!(
            "{}, whose acid has pKa {:.1} here, {strength}: log10 K is {} ± {sigma:.1}, and {extent}{when}",
            base.name,
            self.pka_shown("base", 0),
            signed_to(log10_k, 1),
        );
        if self.kinetics.base_is_levelled() {
            let solvent = &self.cell.solvent.record;
            sentence += &match solvent.class {
                SolventClass::Water => format!("; in {} it is there as hydroxide", solvent.name),
                _ => format!(
                    "; in {} it is there as the anion of the solvent",
                    solvent.name
                ),
            };
        }
        let undissolved = self.kinetics.solubility_m().filter(|s| {
            let conditions = &self.cell.conditions;
            *s < 0.3 * conditions.concentration_m * conditions.base_equiv
        });
        if let Some(solubility_m) = undissolved {
            sentence += &format!("; it dissolves to about {} mol/L only", tiny(solubility_m));
        }
        sentence
    }

    /// How fast the carbanion takes the electrophile.
    fn attack(&self) -> Option<String> {
        let anion = Species::Carbanion(self.outcome.site);
        let makes = |species: Option<Species>| {
            matches!(
                species,
                Some(Species::Product(_) | Species::ProductAnion(_))
            )
        };
        let steps = self.network.reactions.iter().filter(|r| {
            r.first == anion
                && r.second == Some(Species::Electrophile)
                && r.third.is_none()
                && makes(r.products[0])
        });
        let k: f64 = steps.map(|r| r.k).sum();
        if k <= 0.0 {
            return None;
        }
        let conditions = &self.cell.conditions;
        let electrophile_m = conditions.concentration_m * conditions.electrophile_equiv;
        let half_life_s = std::f64::consts::LN_2 / (k * electrophile_m);
        let verb = match self.kinetics.bonding() {
            Bonding::Substitution => "takes",
            _ => "adds to",
        };
        let slow = if half_life_s > 3600.0 * conditions.time_h {
            ", longer than there is"
        } else {
            ""
        };
        Some(format!(
            "the carbanion {verb} {} with log10 k = {}: what there is of it has a half-life of {}{slow}",
            self.cell.electrophile.name,
            signed_to(math::log10(k), 1),
            duration(half_life_s),
        ))
    }

    fn result(&self) -> String {
        let expected = self.told.expected_yield.unwrap_or(0.0);
        let sigma = self.told.yield_sigma.unwrap_or(0.0);
        let mut sentence = format!(
            "expected are {} ± {} of the wanted product on the substrate charged",
            percent(expected),
            percent(sigma)
        );
        let limiting = Limiting::of(self.kinetics);
        if limiting.reagent != "substrate" {
            let on_limiting = self.told.yield_on_limiting.unwrap_or(0.0);
            sentence += &format!(
                ", {} on the {}, of which there is least",
                percent(on_limiting),
                limiting.reagent
            );
        }
        sentence
    }

    fn competitors(&self) -> Option<String> {
        let formed = self.outcome.losses.iter();
        let named: Vec<String> = formed
            .filter(|(channel, share)| {
                *share > WORTH_A_WORD && self.by_reaction(*channel).is_some()
            })
            .take(NAMED)
            .filter_map(|(channel, share)| {
                Some(format!(
                    "{} ({})",
                    self.by_reaction(*channel)?,
                    percent(*share)
                ))
            })
            .collect();
        (!named.is_empty()).then(|| format!("what competes: {}", named.join("; ")))
    }

    /// What a loss is, where substrate reacts to something else.
    fn by_reaction(&self, channel: Channel) -> Option<&'static str> {
        Some(match channel {
            Channel::OverAlkylation => "the product loses a proton in its turn and reacts again",
            Channel::SelfCondensation => {
                if self.kinetics.claisen() {
                    "the carbanion acylates itself with neutral substrate"
                } else {
                    "the carbanion adds to neutral substrate"
                }
            }
            Channel::OtherSite => "the electrophile goes to another site",
            Channel::OAttack => "the enolate reacts at oxygen",
            Channel::HeteroatomAttack => "the heteroatom takes the electrophile",
            Channel::BaseAddsToSubstrate => "the base or its hydroxide takes substrate or product",
            Channel::Elimination if self.outcome_splits() => "the carbanion loses a group in β",
            _ => return None,
        })
    }

    /// Whether elimination means that of a group of the substrate.
    fn outcome_splits(&self) -> bool {
        let mut carbon = self.cell.substrate.carbon.iter();
        carbon.any(|site| site.leaves_in_beta.is_some())
    }

    fn limit(&self) -> String {
        let Some((channel, share)) = self.outcome.losses.first().filter(|l| l.1 > WORTH_A_WORD)
        else {
            return "nothing of weight stands in its way".to_owned();
        };
        let base = &self.cell.base.record.name;
        let electrophile = &self.cell.electrophile.name;
        let solvent = &self.cell.solvent.record;
        let why = match channel {
            Channel::WeakBase if self.told.log10_k.is_some_and(|k| k > 1.0) => {
                format!("{base} is used up before it has ionised what is left")
            }
            Channel::WeakBase => format!("{base} is too weak for this acid"),
            Channel::SolventLevelsBase => {
                format!("{} is the stronger acid and takes the base", solvent.name)
            }
            Channel::InsolubleBase => format!("{base} hardly dissolves in {}", solvent.name),
            Channel::CompetingAcid => "another X–H takes the base first".to_owned(),
            Channel::ProductQuenchesEnolate => {
                "the product is an acid too and gives its proton to the carbanion that is left"
                    .to_owned()
            }
            Channel::BaseConsumedByElectrophile => {
                format!("{electrophile} is used up by the base or by itself")
            }
            Channel::Solvolysis if solvent.class == SolventClass::Water => {
                format!("water and its anion take {electrophile}")
            }
            Channel::Solvolysis => format!("the solvent or hydroxide takes {electrophile}"),
            Channel::Elimination if !self.outcome_splits() => {
                format!("{electrophile} is lost by elimination")
            }
            Channel::Reversible => "the new bond forms uphill and opens again".to_owned(),
            Channel::SlowAttack => {
                format!("the attack on {electrophile} is too slow for the time given")
            }
            Channel::TooLittleReagent => {
                format!(
                    "there is too little {}",
                    Limiting::of(self.kinetics).reagent
                )
            }
            other => self.by_reaction(*other).unwrap_or(other.name()).to_owned(),
        };
        format!("what limits: {why} ({} of the substrate)", percent(*share))
    }

    fn doubt(&self) -> Option<String> {
        let doubt = self
            .told
            .doubts
            .first()
            .filter(|doubt| doubt.share >= 0.1)?;
        Some(format!(
            "the estimate hangs most on the {} ({} ± {:.2}{}; {} of the variance)",
            doubt.quantity,
            signed_to(doubt.value, 2),
            doubt.sigma,
            unit(&doubt.unit),
            percent(doubt.share)
        ))
    }
}

/// A unit in a sentence; a pure number has none.
fn unit(unit: &str) -> String {
    match unit {
        "1" => String::new(),
        unit => format!(" {unit}"),
    }
}

/// Whole per cent.
fn percent(share: f64) -> String {
    format!("{:.0} %", 100.0 * share)
}

/// A small number with one digit that counts.
fn tiny(number: f64) -> String {
    match number {
        n if n >= 0.1 => format!("{n:.1}"),
        n if n >= 1e-4 => format!("{n:.4}").trim_end_matches('0').to_owned(),
        n => format!("10^{:.0}", math::log10(n.max(f64::MIN_POSITIVE))).replace('-', "−"),
    }
}

fn signed(number: f64) -> String {
    number.to_string().replace('-', "−")
}

fn signed_to(number: f64, decimals: usize) -> String {
    format!("{number:.decimals$}").replace('-', "−")
}

/// A time as one says it.
fn duration(seconds: f64) -> String {
    match seconds {
        s if s < 1.0 => "less than a second".to_owned(),
        s if s < 90.0 => format!("{s:.0} s"),
        s if s < 5400.0 => format!("{:.0} min", s / 60.0),
        s if s < 1.7e5 => format!("{:.0} h", s / 3600.0),
        s if s < 3e7 => format!("{:.0} days", s / 86_400.0),
        _ => "more than a year".to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use crate::sample::{cell, model};

    /// The sentences tell strong and weak bases, first X–H and insoluble bases apart, in the names of the cell.
    #[test]
    fn a_colleague_says_what_matters() {
        let model = model();
        for (substrate, base, electrophile, solvent, said) in [
            (
                "CC(=O)c1ccccc1",
                "LDA",
                "BrCc1ccccc1",
                "THF",
                "LDA, whose acid",
            ),
            (
                "CC(=O)c1ccccc1",
                "LDA",
                "BrCc1ccccc1",
                "THF",
                "far the stronger base",
            ),
            (
                "CC(=O)c1ccccc1",
                "Et3N",
                "BrCc1ccccc1",
                "THF",
                "far too weak a base",
            ),
            (
                "CC(=O)c1ccccc1",
                "Et3N",
                "BrCc1ccccc1",
                "THF",
                "is used up by the base or by itself",
            ),
            (
                "CC(=O)Nc1ccccc1",
                "LDA",
                "CI",
                "THF",
                "its N–H at atom 3 is the stronger acid",
            ),
            ("CCOC(=O)CC(C)=O", "K2CO3", "CI", "acetone", "mol/L only"),
        ] {
            let cell = cell(&model, substrate, base, electrophile, solvent);
            let told = model.explain(&cell, 0.5).expect("explains");
            let found = told.summary.iter().any(|sentence| sentence.contains(said));
            assert!(found, "{said}: {:#?}", told.summary);
        }
    }
}
