//! What happens when the cell is quenched.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::HANDBOOK;

pub(super) const RULES: &[Rule] = &[
    Rule::note("quench of a strong base", Violent)
        .anyone(&[Organolithium, Grignard, MetalAmide, Hydride])
        .reason("at the quench: what is left of {reagent} reacts violently with water; first tert-butanol or 2-propanol, cold and slowly"),
    Rule::note("quench of a carbonate", Gas)
        .anyone(&[Carbonate])
        .reason("at the quench: {reagent} foams with acid, {gas_ml} mL of carbon dioxide per mmol"),
    Rule::note("quench of an acid halide", Violent)
        .anyone(&[
            AcylHalide, SulfonylHalide, SulfonicAnhydride, FluorinatedAnhydride, PhosphorusHalide,
            ThionylHalide, SilylHalide, SilylSulfonate, SulfenylHalide, ImidoylHalide,
        ])
        .reason("at the quench: {reagent} reacts with water, with heat and acid fumes, sometimes after a delay"),
    Rule::note("quench of a halogenating agent", Gas)
        .anyone(&[Hypohalite, NHalo])
        .reason("at the quench: {reagent} with acid gives off chlorine or bromine; reduce it first with thiosulfate or sulfite, slowly")
        .source(HANDBOOK),
    Rule::note("quench of an oxidant", Violent)
        .anyone(&[Halogen, Peroxide, HypervalentIodine, Oxaziridine, NFluoro])
        .reason("at the quench: {reagent} is reduced with heat; add the reductant slowly in the cold"),
    Rule::note("quench of a nitrite", Gas)
        .anyone(&[AlkylNitrite])
        .reason("at the quench: {reagent} with acid gives off nitrous gases"),
    Rule::note("quench of a dicarbonate or isocyanate", Gas)
        .anyone(&[Isocyanate, Dicarbonate])
        .reason("at the quench: {reagent} gives off carbon dioxide with water or acid, {gas_ml} mL per mmol or more"),
    Rule::warning("quench of a cyanide", Gas)
        .anyone(&[CyanideDonor])
        .reason("at the quench: {reagent} has left cyanide in the pot, and acid gives off hydrogen cyanide; keep it above pH 10"),
    Rule::warning("quench of carbon disulfide", Gas)
        .anyone(&[CarbonDisulfide, CarbonylSulfide])
        .reason("at the quench: dithiocarboxylates of {reagent} with acid give off hydrogen sulfide and carbon disulfide"),
    Rule::note("quench of a nitronate", Explosive)
        .anyone(&[Nitroalkane])
        .reason("at the quench: acidify the salt of {reagent} cold, slowly and dilute, and never let it go dry")
        .source(HANDBOOK),
    Rule::note("quench of an alkylating agent", AcutelyToxic)
        .anyone(&[FierceAlkylator, Aziridine, HaloEther, HalfMustard])
        .reason("at the quench: destroy what is left of {reagent} with ammonia or diethylamine before work-up"),
];
