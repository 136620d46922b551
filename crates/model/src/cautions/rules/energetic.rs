//! Groups that may explode, and what sets them off.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::{ANY, DIAZO_PAPER, HANDBOOK, STRONG};

/// Azo and diazo compounds and azides decompose slowly from about here; a margin of common practice.
const WARM_C: f64 = 60.0;

/// Diazonium salts decompose within hours from about here, and faster in bulk; a margin of common practice.
const DIAZONIUM_C: f64 = 30.0;

const DIAZONIUM_PAPER: &str = "Firth and Fairlamb, Org. Lett. 2020, 22, 7057; quoted from memory";
const AZIDE_REVIEW: &str =
    "Bräse and others, Angew. Chem. Int. Ed. 2005, 44, 5188; quoted from memory";
const AZIDE_IN_DCM: &str =
    "Conrow and Dean, Org. Process Res. Dev. 2008, 12, 1285; quoted from memory";
const HYDRAZOIC_PAPER: &str =
    "Wiss and others, Org. Process Res. Dev. 2007, 11, 1096; quoted from memory";
const AZO_PAPER: &str =
    "Berger and Wehrstedt, J. Loss Prev. Process Ind. 2010, 23, 734; quoted from memory";

pub(super) const RULES: &[Rule] = &[
    Rule::warning("azide", Explosive)
        .anyone(&[Azide])
        .reason("{reagent} has an azide group: shock, heat, acids and metals may set it off")
        .source(AZIDE_REVIEW),
    Rule::stop("azide rich in nitrogen", Explosive)
        .anyone(&[ThinAzide])
        .instead_of("azide")
        .reason("{reagent} has an azide group and (C + O) / N below 3: it may detonate")
        .source(AZIDE_REVIEW),
    Rule::note("alkyl azide in a halogenated solvent", Explosive)
        .electrophile(&[Azide])
        .solvent(&[Haloalkane])
        .reason("azide ion from {electrophile} makes explosive diazidomethane and its kin of {solvent}")
        .source(AZIDE_IN_DCM),
    Rule::note("azide substrate in a halogenated solvent", Explosive)
        .substrate(&[Azide])
        .solvent(&[Haloalkane])
        .reason("azide ion from the substrate makes explosive diazidomethane and its kin of {solvent}")
        .source(AZIDE_IN_DCM),
    Rule::warning("releasing azide in a halogenated solvent", Explosive)
        .electrophile(&[ReleasingAzide])
        .solvent(&[Haloalkane])
        .instead_of("alkyl azide in a halogenated solvent")
        .reason("{electrophile} gives up azide ion, which makes explosive diazidomethane and its kin of {solvent}: use another solvent")
        .source(AZIDE_IN_DCM),
    Rule::warning("releasing azide with an acid", AcutelyToxic)
        .anyone(&[ReleasingAzide])
        .reason("{reagent} with acid or moisture gives hydrazoic acid: a volatile poison")
        .source(HYDRAZOIC_PAPER),
    Rule::warning("releasing azide with an acid, gas", Explosive)
        .anyone(&[ReleasingAzide])
        .reason("{reagent} with acid gives hydrazoic acid, whose vapour detonates: never quench with acid")
        .source(HYDRAZOIC_PAPER),
    Rule::note("azide set free by a strong base", Explosive)
        .base(STRONG)
        .electrophile(&[ReleasingAzide])
        .reason("{base} sets azide ion free from {electrophile}: no acid, no halogenated solvent in the work-up")
        .source(DIAZO_PAPER),
    Rule::warning("warm azide", Runaway)
        .electrophile(&[Azide])
        .above_c(WARM_C)
        .reason("{electrophile} at {t} °C gives off nitrogen with much heat")
        .source(DIAZO_PAPER),
    Rule::warning("warm azide substrate", Runaway)
        .substrate(&[Azide])
        .above_c(WARM_C)
        .reason("the azide at {t} °C may give off nitrogen with much heat")
        .source(AZIDE_REVIEW),
    Rule::warning("diazo compound", Explosive)
        .anyone(&[Diazo])
        .reason("{reagent} has a diazo group: shock, heat, acids and metals may set it off")
        .source(DIAZO_PAPER),
    Rule::note("diazo compound from a diazo transfer", Explosive)
        .anyone(&[SulfonylAzide])
        .reason("{reagent} makes a diazo compound of the substrate: keep it dilute and cold")
        .source(DIAZO_PAPER),
    Rule::note("diazo compound with an acid", Gas)
        .anyone(&[Diazo])
        .reason("{reagent} gives off nitrogen with acids, {gas_ml} mL per mmol"),
    Rule::warning("diazonium salt", Explosive)
        .anyone(&[Diazonium])
        .reason("{reagent} is a diazonium salt: explosive when dry, decomposes when warm")
        .source(HANDBOOK),
    Rule::stop("warm diazonium salt", Runaway)
        .electrophile(&[Diazonium])
        .above_c(DIAZONIUM_C)
        .reason("{electrophile} at {t} °C decomposes with nitrogen and much heat: keep it below 5 °C in solution")
        .source(DIAZONIUM_PAPER),
    Rule::stop("warm diazonium substrate", Runaway)
        .substrate(&[Diazonium])
        .above_c(DIAZONIUM_C)
        .reason("the diazonium salt at {t} °C decomposes with nitrogen and much heat")
        .source(DIAZONIUM_PAPER),
    Rule::note("nitrogen from a diazonium salt", Gas)
        .anyone(&[Diazonium])
        .reason("{reagent} gives off nitrogen when it warms, {gas_ml} mL per mmol"),
    Rule::warning("diazonium salt with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Diazonium])
        .reason("{base} makes diazo anhydrides of {electrophile}, which explode when dry")
        .source(HANDBOOK),
    Rule::stop("diazoalkane from a base", Explosive)
        .base(ANY)
        .electrophile(&[DiazoalkaneSource])
        .reason("{base} makes a diazoalkane of {electrophile}: an explosive gas")
        .source(HANDBOOK),
    Rule::stop("poison from a diazoalkane source", AcutelyToxic)
        .anyone(&[DiazoalkaneSource])
        .reason("{reagent} with a base makes a diazoalkane, which is a deadly gas"),
    Rule::warning("azodicarboxylate", Explosive)
        .anyone(&[Azodicarbonyl])
        .reason("{reagent} is sensitive to heat and shock when it is neat: use it as a solution, never distil")
        .source(AZO_PAPER),
    Rule::warning("warm azodicarboxylate", Runaway)
        .electrophile(&[Azodicarbonyl])
        .above_c(WARM_C)
        .reason("{electrophile} at {t} °C decomposes with nitrogen and much heat")
        .source(AZO_PAPER),
    Rule::warning("warm azoalkane", Runaway)
        .electrophile(&[AzoAlkane])
        .above_c(WARM_C)
        .reason("{electrophile} at {t} °C gives off nitrogen and radicals, with heat"),
    Rule::note("azoalkane", Gas)
        .anyone(&[AzoAlkane])
        .reason("{reagent} gives off nitrogen when it warms, {gas_ml} mL per mmol"),
    Rule::warning("alkyl nitrite", AcutelyToxic)
        .anyone(&[AlkylNitrite])
        .reason("{reagent} is an alkyl nitrite: its vapour drops the blood pressure"),
    Rule::note("alkyl nitrite, heat", Explosive)
        .anyone(&[AlkylNitrite])
        .reason("{reagent} decomposes by heat and light and builds up pressure")
        .source(HANDBOOK),
    Rule::warning("nitrosamine from an amine base", Carcinogen)
        .base(&[AmineNh])
        .electrophile(&[AlkylNitrite, Nitrosamine])
        .reason("{electrophile} makes a nitrosamine of {base}"),
    Rule::warning("nitrosamine from an amine substrate", Carcinogen)
        .electrophile(&[AlkylNitrite, Nitrosamine])
        .substrate(&[AmineNh])
        .reason("{electrophile} makes a nitrosamine of the substrate"),
    Rule::warning("nitrosamine from an amide medium", Carcinogen)
        .electrophile(&[AlkylNitrite])
        .solvent(&[Amide, Amine])
        .reason("{electrophile} may make nitrosamines of the amine in {solvent}"),
    Rule::note("C-nitroso compound", Runaway)
        .anyone(&[Nitroso])
        .reason("{reagent} is a nitroso compound: it decomposes with heat when it is warm and neat")
        .source(HANDBOOK),
    Rule::warning("nitrate ester or nitramine", Explosive)
        .anyone(&[Nitrate])
        .reason("{reagent} has a nitrate or nitramine group: shock and heat may set it off")
        .source(HANDBOOK),
    Rule::warning("peroxide", Explosive)
        .anyone(&[Peroxide])
        .reason("{reagent} has a peroxide group: shock, heat and metals may set it off")
        .source(HANDBOOK),
    Rule::warning("polynitro compound", Explosive)
        .anyone(&[Polynitro])
        .reason("{reagent} has several nitro groups at one place: shock and heat may set it off")
        .source(HANDBOOK),
    Rule::warning("chain of nitrogens", Explosive)
        .anyone(&[NitrogenChain])
        .reason("{reagent} has a tetrazole or N-hydroxytriazole ring: shock and heat may set it off")
        .source(HANDBOOK),
    Rule::warning("haloalkyne", Explosive)
        .anyone(&[HaloAlkyne])
        .reason("{reagent} is a haloalkyne: shock and heat may set it off")
        .source(HANDBOOK),
    Rule::warning("perchlorate", Explosive)
        .anyone(&[Perchlorate])
        .reason("{reagent} is a perchlorate: explosive with organic matter when dry")
        .source(HANDBOOK),
    Rule::warning("propargyl halide", Explosive)
        .anyone(&[PropargylHalide])
        .reason("{reagent} is a propargyl halide: it detonates by shock or heat when undiluted")
        .source(HANDBOOK),
    Rule::warning("aminating hydroxylamine", Explosive)
        .anyone(&[AminatingOxygen])
        .reason("{reagent} decomposes violently when dry or warm: make it fresh, keep it wet and cold")
        .source("Mendiola and others, Org. Process Res. Dev. 2009, 13, 263; quoted from memory"),
    Rule::note("nitrogen trihalide from an N-halo compound", Explosive)
        .electrophile(&[NHalo, Halogen, Hypohalite])
        .base(&[AmineNh])
        .reason("{electrophile} makes N-halo amines of {base}, which decompose violently when neat")
        .source(HANDBOOK),
];
