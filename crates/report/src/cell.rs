//! A cell as it is shown.

use enolattice_model::Channel;
use maud::{Markup, html};

use crate::numbers::{fixed, short, temperatures};
use crate::page::name;

/// A cell as it is shown: what is in it and what is expected of it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ShownCell {
    /// Number in its job.
    pub cell: u64,
    /// Substrate's name.
    pub substrate: String,
    /// Its SMILES as given.
    pub substrate_smiles: String,
    /// Base's name.
    pub base: String,
    /// Electrophile's name.
    pub electrophile: String,
    /// Its SMILES as given.
    pub electrophile_smiles: String,
    /// Solvent's name.
    pub solvent: String,
    /// Additive's name with its equivalents; none without one.
    pub additive: Option<(String, f64)>,
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Temperature of the deprotonation, °C.
    pub formation_temperature_c: f64,
    /// Equivalents of base.
    pub base_equiv: f64,
    /// Equivalents of electrophile.
    pub electrophile_equiv: f64,
    /// Concentration of the substrate, mol/L.
    pub concentration_m: f64,
    /// Time, h.
    pub time_h: f64,
    /// Dosing time, min.
    pub dosing_min: f64,
    /// Order of addition.
    pub addition: String,
    /// Expected yield, 0–1; unknown where the model does not cover the cell.
    pub expected_yield: Option<f64>,
    /// Probability of a hit.
    pub p_hit: Option<f64>,
    /// Severity and category of its cautions, severest first.
    pub cautions: Vec<(String, String)>,
    /// Yield that the laboratory has measured.
    pub measured_yield: Option<f64>,
    /// SMILES of the wanted product; none where none can be drawn.
    pub product_smiles: Option<String>,
    /// Where the substrate ends, the wanted product first; empty where that is unknown.
    pub shares: Vec<Share>,
}

/// A share of the substrate charged, 0–1, and what became of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Share {
    /// What became of it.
    pub end: End,
    /// The share.
    pub share: f64,
}

/// What became of a share of the substrate.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum End {
    /// The wanted product.
    Wanted,
    /// Something else, by this channel.
    Lost(Channel),
    /// It is left, for this reason where one is known.
    Left(Option<Channel>),
}

impl Share {
    /// The wanted product and the losses of a cell, in the order in which a bar shows them: product, what has become
    /// something else, what is left of the substrate.
    pub fn of(product: f64, losses: &[(Channel, f64)]) -> Vec<Share> {
        let wanted = Share {
            end: End::Wanted,
            share: product,
        };
        let losses = losses.iter().map(|(channel, share)| Share {
            end: match is_left(*channel) {
                true => End::Left(Some(*channel)),
                false => End::Lost(*channel),
            },
            share: *share,
        });
        let (lost, left): (Vec<Share>, Vec<Share>) =
            losses.partition(|share| matches!(share.end, End::Lost(_)));
        [wanted].into_iter().chain(lost).chain(left).collect()
    }

    /// What became of it, in words.
    pub(crate) fn name(&self) -> String {
        match self.end {
            End::Wanted => "wanted product".to_owned(),
            End::Lost(channel) => channel.name().to_owned(),
            End::Left(None) => "substrate left".to_owned(),
            End::Left(Some(channel)) => format!("left ({})", channel.name()),
        }
    }
}

/// Whether a channel is a reason why substrate has not reacted, not something that was made of it.
pub(crate) fn is_left(channel: Channel) -> bool {
    matches!(
        channel,
        Channel::WeakBase
            | Channel::SolventLevelsBase
            | Channel::InsolubleBase
            | Channel::CompetingAcid
            | Channel::ProductQuenchesEnolate
            | Channel::BaseConsumedByElectrophile
            | Channel::Solvolysis
            | Channel::Reversible
            | Channel::SlowAttack
            | Channel::TooLittleReagent
    )
}

impl ShownCell {
    /// Base, solvent and additive in a line.
    pub(crate) fn conditions(&self) -> Markup {
        html! {
            (name(&self.base)) " · " (name(&self.solvent))
            @if let Some((additive, equiv)) = &self.additive {
                " · " (name(additive)) " (" (short(*equiv)) " equiv)"
            }
            " · " (temperatures(self.formation_temperature_c, self.temperature_c))
        }
    }

    /// Everything else that a chemist would need to repeat it.
    pub(crate) fn amounts(&self) -> String {
        format!(
            "{} equiv of base, {} of electrophile, {} mol/L, {} h, electrophile over {} min, {}",
            short(self.base_equiv),
            short(self.electrophile_equiv),
            short(self.concentration_m),
            short(self.time_h),
            fixed(self.dosing_min, 0),
            self.addition,
        )
    }

    /// The severest caution.
    pub(crate) fn severest(&self) -> Option<&str> {
        self.cautions.first().map(|(severity, _)| severity.as_str())
    }
}
