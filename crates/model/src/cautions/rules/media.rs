//! Bases in solvents.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::{ANY, DESTROYED, DMSO_PAPER, HANDBOOK, HYDRIDE_PAPER, MILD, ORGANOMETALLIC, STRONG};

/// Above this the mixtures of hydrides with these solvents decompose in reach of a working day.
const HYDRIDE_STOP_C: f64 = 50.0;
/// DMSO decomposes by itself at lower temperature where halides, acids or bases are in it.
const DMSO_WARM_C: f64 = 100.0;
/// DMSO decomposes by itself from some 190 °C when pure; a margin for what is in it.
const DMSO_HOT_C: f64 = 150.0;
/// Hydrogencarbonates give off carbon dioxide from about here.
const HYDROGENCARBONATE_C: f64 = 60.0;
/// Amides are hydrolysed by warm strong bases.
const AMIDE_WARM_C: f64 = 80.0;
/// Alkyllithiums take a proton from cyclic ethers within an hour or so above this.
const ETHER_WARM_C: f64 = 0.0;
/// Nitronates decompose when they are heated.
const NITRONATE_WARM_C: f64 = 60.0;

pub(super) const RULES: &[Rule] = &[
    // Hydrides.
    Rule::warning("hydride in amide or sulfoxide", Runaway)
        .base(&[AlkaliHydride])
        .solvent(&[Amide, Sulfoxide])
        .reason("{base} in {solvent} decomposes with heat and gas after a delay; runaways are published")
        .source(HYDRIDE_PAPER),
    Rule::stop("warm hydride in amide or sulfoxide", Runaway)
        .base(&[AlkaliHydride])
        .solvent(&[Amide, Sulfoxide])
        .above_c(HYDRIDE_STOP_C)
        .instead_of("hydride in amide or sulfoxide")
        .reason("{base} in {solvent} at {t} °C runs away with heat and gas; explosions are published")
        .source(HYDRIDE_PAPER),
    Rule::warning("hydrogen over a warm solvent", Flammable)
        .base(&[Hydride])
        .solvent(&[AboveFlash])
        .reason("hydrogen from {base} over {solvent} above its flash point: vent, no source of ignition"),
    // Protic media.
    Rule::warning("strong base in alcohol", Violent)
        .base(&[Hydride, MetalAmide, Grignard])
        .solvent(&[Alcohol])
        .reason("{base} reacts violently with {solvent}"),
    Rule::stop("organolithium in alcohol", Violent)
        .base(&[Organolithium])
        .solvent(&[Alcohol])
        .reason("{base} reacts violently with {solvent}, and the vapour may catch fire"),
    Rule::stop("strong base in water", Violent)
        .base(DESTROYED)
        .solvent(&[Water])
        .instead_of("strong base in alcohol")
        .reason("{base} reacts violently with the water of {solvent}, and what it gives off may catch fire"),
    Rule::stop("strong base in acid", Violent)
        .base(DESTROYED)
        .solvent(&[Acid])
        .reason("{base} reacts violently with {solvent}"),
    Rule::warning("hydroxide in acid", Violent)
        .base(&[Hydroxide, Alkoxide])
        .solvent(&[Acid])
        .reason("{base} is neutralised by {solvent} with much heat"),
    Rule::warning("hydrogen from a protic solvent", Gas)
        .base(&[Hydride])
        .solvent(&[Alcohol, Water, Acid])
        .reason("{base} gives off hydrogen in {solvent} at once, {gas_ml} mL per mmol of H⁻"),
    Rule::warning("organometallic gas from a protic solvent", Gas)
        .base(&[GasOnQuench])
        .solvent(&[Alcohol, Water, Acid])
        .reason("{base} gives off a flammable gas in {solvent} at once, {gas_ml} mL per mmol"),
    Rule::warning("ammonia from a protic solvent", Gas)
        .base(&[AmmoniaOnQuench])
        .solvent(&[Alcohol, Water, Acid])
        .reason("{base} gives off ammonia or a gaseous amine in {solvent} at once, {gas_ml} mL per mmol"),
    Rule::warning("strong base in an amide with N–H", Violent)
        .base(DESTROYED)
        .solvent(&[AmideNh])
        .reason("{base} is destroyed by {solvent}, with heat and, from hydrides, gas"),
    Rule::note("strong base in a wet solvent", Violent)
        .base(DESTROYED)
        .solvent(&[Wet])
        .reason("the water in {solvent} destroys {base}, with heat"),
    Rule::note("carbonate in acid", Gas)
        .base(&[Carbonate])
        .solvent(&[Acid])
        .reason("{base} gives off carbon dioxide in {solvent}, {gas_ml} mL per mmol of hydrogencarbonate or carbonate"),
    Rule::note("warm hydrogencarbonate", Gas)
        .base(&[Carbonate])
        .above_c(HYDROGENCARBONATE_C)
        .reason("hydrogencarbonate from {base} gives off carbon dioxide at {t} °C"),
    // Halogenated solvents.
    Rule::warning("strong base in a halogenated solvent", Violent)
        .base(STRONG)
        .solvent(&[Haloalkane])
        .reason("{base} may react violently with {solvent}; solid tert-butoxide has set it on fire")
        .source(HANDBOOK),
    Rule::warning("strong base in a halogenated solvent, delayed", Runaway)
        .base(STRONG)
        .solvent(&[Haloalkane])
        .reason("{base} in {solvent} makes carbenoids or eliminates, and may run away after a delay")
        .source(HANDBOOK),
    Rule::stop("organolithium in a halogenated solvent", Violent)
        .base(&[Organolithium])
        .solvent(&[Haloalkane])
        .instead_of("strong base in a halogenated solvent")
        .reason("{base} reacts violently with {solvent}")
        .source(HANDBOOK),
    Rule::stop("organolithium in a halogenated solvent, on warming", Runaway)
        .base(&[Organolithium])
        .solvent(&[Haloalkane])
        .instead_of("strong base in a halogenated solvent, delayed")
        .reason("the carbenoid of {base} and {solvent} decomposes violently when it warms"),
    Rule::stop("strong base in chloroform", Violent)
        .base(STRONG)
        .solvent(&[Haloform])
        .instead_of("strong base in a halogenated solvent")
        .reason("{base} makes dihalocarbene of {solvent}, violently; worse with acetone and other ketones")
        .source(HANDBOOK),
    Rule::stop("strong base in chloroform, delayed", Runaway)
        .base(STRONG)
        .solvent(&[Haloform])
        .instead_of("strong base in a halogenated solvent, delayed")
        .reason("{base} in {solvent} runs away, sometimes after a delay")
        .source(HANDBOOK),
    Rule::stop("chloroform, ketone and base", Violent)
        .base(STRONG)
        .solvent(&[Haloform])
        .substrate(&[Ketone])
        .reason("{base} adds {solvent} to ketones, violently; the mixture with acetone has exploded")
        .source(HANDBOOK),
    Rule::warning("hydroxide, phase transfer and a halogenated solvent", Runaway)
        .base(&[Hydroxide])
        .solvent(&[Haloalkane])
        .additive(&[PhaseTransfer, Crown])
        .reason("{additive} carries {base} into {solvent}: carbene or elimination, with heat"),
    Rule::warning("vinyl halide gas from the solvent", Gas)
        .base(STRONG)
        .solvent(&[VicinalDihalide])
        .reason("{base} makes vinyl halide of {solvent}: a gas"),
    Rule::warning("vinyl halide from the solvent", Carcinogen)
        .base(STRONG)
        .solvent(&[VicinalDihalide])
        .reason("{base} makes vinyl halide of {solvent}: vinyl chloride and bromide are carcinogens"),
    Rule::note("amine in dichloromethane", Runaway)
        .base(&[OpenAmine])
        .solvent(&[MethyleneHalide])
        .reason("{base} is alkylated by {solvent} in hours to days, with heat when concentrated")
        .source("Nevstad and Songstad, Acta Chem. Scand. B 1984, 38, 469; quoted from memory"),
    Rule::warning("amine in a tetrahalide", Runaway)
        .base(&[AmineBase])
        .solvent(&[Tetrahalide])
        .reason("{base} and {solvent} react by electron transfer, with heat after a delay")
        .source(HANDBOOK),
    Rule::note("metal amide in a haloarene", Violent)
        .base(&[Organolithium, MetalAmide])
        .solvent(&[ArylHalide])
        .reason("{base} makes benzyne of {solvent} when it warms, with heat"),
    // Solvents that condense with themselves.
    Rule::note("base in ketone, nitrile or ester", Runaway)
        .base(&[Alkoxide, Hydroxide])
        .solvent(&[EnolisableKetone, AlkylNitrile, Ester])
        .reason("{base} makes {solvent} condense with itself, with heat")
        .source(HANDBOOK),
    Rule::warning("strong base in ketone, nitrile or ester", Runaway)
        .base(DESTROYED)
        .solvent(&[EnolisableKetone, AlkylNitrile, Ester])
        .reason("{base} deprotonates {solvent} or adds to it, with much heat and, from hydrides, gas"),
    Rule::warning("alkoxide in acetone", Runaway)
        .base(&[Alkoxide])
        .solvent(&[EnolisableKetone])
        .instead_of("base in ketone, nitrile or ester")
        .reason("{base} makes {solvent} condense with much heat; solid tert-butoxide has set it on fire")
        .source(HANDBOOK),
    Rule::warning("organometallic in an electrophilic solvent", Violent)
        .base(ORGANOMETALLIC)
        .solvent(&[Amide, Ketone, Nitrile, Ester, Sulfoxide, CarbonDisulfide])
        .reason("{base} adds to {solvent} at once, with much heat"),
    Rule::warning("dimsyl from a metal amide", Runaway)
        .base(&[Organolithium, MetalAmide])
        .solvent(&[Sulfoxide])
        .reason("{base} makes the dimsyl anion of {solvent}, which decomposes with heat when it is warm")
        .source(DMSO_PAPER),
    // Heat.
    Rule::warning("hot sulfoxide", Runaway)
        .solvent(&[Sulfoxide])
        .above_c(DMSO_HOT_C)
        .reason("{solvent} at {t} °C decomposes by itself, explosively in a closed vessel")
        .source(DMSO_PAPER),
    Rule::warning("base in warm sulfoxide", Runaway)
        .base(ANY)
        .solvent(&[Sulfoxide])
        .above_c(DMSO_WARM_C)
        .reason("{solvent} with {base} at {t} °C may decompose by itself")
        .source(DMSO_PAPER),
    Rule::stop("strong base in hot sulfoxide", Runaway)
        .base(STRONG)
        .solvent(&[Sulfoxide])
        .above_c(DMSO_HOT_C)
        .instead_of("base in warm sulfoxide")
        .reason("{solvent} with {base} at {t} °C runs away")
        .source(DMSO_PAPER),
    Rule::note("strong base in a warm amide", Gas)
        .base(&[Hydroxide, Alkoxide])
        .solvent(&[Formamide])
        .above_c(AMIDE_WARM_C)
        .reason("{base} splits {solvent} at {t} °C: carbon monoxide and dimethylamine"),
    Rule::note("alkyllithium in a warm cyclic ether", Gas)
        .base(&[Organolithium])
        .solvent(&[Oxolane])
        .above_c(ETHER_WARM_C)
        .reason("{base} splits {solvent} above 0 °C: ethylene")
        .source("Stanetty and Mihovilovic, J. Org. Chem. 1997, 62, 1514; quoted from memory"),
    Rule::note("hydroxide in an old ether", PeroxideFormer)
        .base(&[Hydroxide])
        .solvent(&[FormsPeroxides])
        .reason("{base} in {solvent} that holds peroxides has exploded: test first")
        .source(HANDBOOK),
    // Nitroalkanes as media.
    Rule::stop("strong base in a nitroalkane", Explosive)
        .base(STRONG)
        .solvent(&[Nitroalkane])
        .reason("{base} makes an explosive salt of {solvent}")
        .source(HANDBOOK),
    Rule::warning("mild base in a nitroalkane", Explosive)
        .base(MILD)
        .solvent(&[Nitroalkane])
        .reason("{base} makes {solvent} sensitive to shock and heat")
        .source(HANDBOOK),
    // Nitroalkanes as substrates.
    Rule::note("nitroalkane with a mild base", Explosive)
        .base(MILD)
        .substrate(&[Nitroalkane])
        .reason("the salt of the nitro compound with {base} explodes when dry: never let the well go dry")
        .source(HANDBOOK),
    Rule::warning("nitroalkane with a strong base", Explosive)
        .base(STRONG)
        .substrate(&[Nitroalkane])
        .reason("the salt of the nitro compound with {base} explodes when dry: never let the well go dry")
        .source(HANDBOOK),
    Rule::warning("nitromethane with an amine", Explosive)
        .base(&[AmineBase])
        .substrate(&[Nitromethane])
        .instead_of("nitroalkane with a mild base")
        .reason("{base} makes nitromethane sensitive to shock; the salt explodes when dry")
        .source(HANDBOOK),
    Rule::warning("hot nitronate", Explosive)
        .base(ANY)
        .substrate(&[Nitroalkane])
        .above_c(NITRONATE_WARM_C)
        .instead_of("nitroalkane with a mild base")
        .reason("the salt of the nitro compound with {base} decomposes at {t} °C, violently when concentrated")
        .source(HANDBOOK),
    Rule::warning("organolithium with TMEDA or its kin", Pyrophoric)
        .base(&[Organolithium])
        .additive(&[Amine])
        .reason("{additive} makes {base} more reactive: it catches fire in air all the sooner"),
];
