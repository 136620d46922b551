//! What a base is by itself.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::HANDBOOK;

pub(super) const RULES: &[Rule] = &[
    Rule::warning("organolithium in air", Pyrophoric)
        .anyone(&[Organolithium])
        .reason("{reagent} catches fire in air: inert gas, no open transfer"),
    Rule::stop("tertiary alkyllithium in air", Pyrophoric)
        .anyone(&[TertAlkyllithium])
        .instead_of("organolithium in air")
        .reason("{reagent} catches fire in air at once, in the syringe too: closed transfer by trained staff only"),
    Rule::note("Grignard reagent in air", Pyrophoric)
        .anyone(&[Grignard])
        .reason("{reagent} heats up and may catch fire in moist air: inert gas"),
    Rule::note("metal amide in air", Pyrophoric)
        .anyone(&[AlkaliAmide])
        .reason("{reagent} may catch fire in moist air: handle as pyrophoric"),
    Rule::note("hydride out of oil", Pyrophoric)
        .anyone(&[AlkaliHydride])
        .reason("{reagent} washed free of oil may catch fire in moist air"),
    Rule::warning("potassium hydride out of oil", Pyrophoric)
        .anyone(&[PotassiumHydride])
        .instead_of("hydride out of oil")
        .reason("{reagent} catches fire in air once the oil is washed off"),
    Rule::warning("old sodium amide", Explosive)
        .anyone(&[SodiumAmide])
        .reason("{reagent} grows explosive on storage in air: discard what is yellow or brown")
        .source(HANDBOOK),
    Rule::note("amide gives ammonia", Gas)
        .anyone(&[AmmoniaOnQuench])
        .reason("{reagent} gives off ammonia or a gaseous amine with every acid, {gas_ml} mL per mmol"),
    Rule::note("hydride gives hydrogen", Gas)
        .anyone(&[Hydride])
        .reason("{reagent} gives off hydrogen with every acid, {gas_ml} mL per mmol of H⁻: vent the well"),
    Rule::note("organometallic gives gas", Gas)
        .anyone(&[GasOnQuench])
        .reason("{reagent} gives off a flammable gas with every acid, {gas_ml} mL per mmol"),
    Rule::warning("phenyl metal gives benzene", Carcinogen)
        .anyone(&[BenzeneOnQuench])
        .reason("{reagent} gives benzene with every acid"),
    Rule::note("solid alkoxide heats itself", Flammable)
        .anyone(&[SolidAlkoxide])
        .reason("{reagent} as a fine solid heats itself in moist air and may catch fire")
        .source(HANDBOOK),
];
