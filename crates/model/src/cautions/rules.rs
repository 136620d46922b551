//! The table of rules, by theme.
//!
//! Sources that several rules share stand here. All were quoted from memory.

mod activators;
mod bases;
mod energetic;
mod health;
mod media;
mod quench;
mod runaways;

use super::rule::Rule;
use super::traits::Trait;

/// All rules.
pub(super) const RULES: [&[Rule]; 7] = [
    bases::RULES,
    media::RULES,
    runaways::RULES,
    activators::RULES,
    energetic::RULES,
    health::RULES,
    quench::RULES,
];

/// Bases that deprotonate, eliminate or polymerise with much heat.
pub(super) const STRONG: &[Trait] = &[
    Trait::Organolithium,
    Trait::Grignard,
    Trait::MetalAmide,
    Trait::Hydride,
    Trait::Alkoxide,
    Trait::Hydroxide,
    Trait::Superbase,
];

/// Bases that water and alcohols destroy.
pub(super) const DESTROYED: &[Trait] = &[
    Trait::Organolithium,
    Trait::Grignard,
    Trait::MetalAmide,
    Trait::Hydride,
];

/// Bases that add to carbonyl groups and nitriles at once.
const ORGANOMETALLIC: &[Trait] = &[Trait::Organolithium, Trait::Grignard];

/// Bases that are weaker than alkoxides.
pub(super) const MILD: &[Trait] = &[Trait::AmineBase, Trait::WeakBase];

/// Any base.
pub(super) const ANY: &[Trait] = &[
    Trait::Organolithium,
    Trait::Grignard,
    Trait::MetalAmide,
    Trait::Hydride,
    Trait::Alkoxide,
    Trait::Hydroxide,
    Trait::AmineBase,
    Trait::WeakBase,
];

const HANDBOOK: &str = "Bretherick's Handbook of Reactive Chemical Hazards; quoted from memory";
const HYDRIDE_PAPER: &str =
    "Yang and others, Org. Process Res. Dev. 2019, 23, 2210; quoted from memory";
const DMSO_PAPER: &str =
    "Yang and others, Org. Process Res. Dev. 2020, 24, 916; quoted from memory";
const DIAZO_PAPER: &str =
    "Green and others, Org. Process Res. Dev. 2020, 24, 67; quoted from memory";
