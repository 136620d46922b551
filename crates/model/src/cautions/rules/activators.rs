//! Acylating, silylating, halogenating and oxidising agents in media and with bases.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::{self, *};
use super::{DESTROYED, HANDBOOK, STRONG};

/// Acid halides and their kin that attack DMSO explosively.
const HARSH: &[Trait] = &[
    AcylHalide,
    SulfonylHalide,
    SulfonicAnhydride,
    FluorinatedAnhydride,
    PhosphorusHalide,
    ThionylHalide,
    SulfenylHalide,
    ImidoylHalide,
    Chlorotriazine,
    Phosgene,
    MaskedPhosgene,
];

/// Acid halides that make Vilsmeier salts of DMF with gas.
const VILSMEIER: &[Trait] = &[
    OxalylHalide,
    ThionylHalide,
    PhosphorusHalide,
    Phosgene,
    MaskedPhosgene,
    Chlorotriazine,
    SulfonicAnhydride,
    FluorinatedAnhydride,
];

/// Milder ones.
const ACYLATING: &[Trait] = &[
    Anhydride,
    SilylHalide,
    SilylSulfonate,
    AcylFluoride,
    Dicarbonate,
];

/// Agents that hand a halogen over.
const HALOGENATING: &[Trait] = &[Halogen, NHalo, Hypohalite];

/// Oxidants beside them.
const OXIDISING: &[Trait] = &[Peroxide, HypervalentIodine, Oxaziridine];

const NBS_PAPER: &str =
    "Shimizu and others, Org. Process Res. Dev. 2014, 18, 354; quoted from memory";
const CARBAMOYL_PAPER: &str = "Levin, Org. Process Res. Dev. 1997, 1, 182; quoted from memory";

pub(super) const RULES: &[Rule] = &[
    // Sulfoxides.
    Rule::stop("acid halide in sulfoxide", Runaway)
        .electrophile(HARSH)
        .solvent(&[Sulfoxide])
        .reason("{electrophile} reacts explosively with {solvent}")
        .source(HANDBOOK),
    Rule::warning("mild acylating or silylating agent in sulfoxide", Runaway)
        .electrophile(ACYLATING)
        .solvent(&[Sulfoxide])
        .reason("{electrophile} activates {solvent}, which decomposes with heat")
        .source(HANDBOOK),
    Rule::stop("halogen in sulfoxide", Runaway)
        .electrophile(&[Halogen, Hypohalite, Perchlorate])
        .solvent(&[Sulfoxide])
        .reason("{electrophile} oxidises {solvent}, violently")
        .source(HANDBOOK),
    Rule::warning("N-halo compound or oxidant in sulfoxide", Runaway)
        .electrophile(&[NHalo, NFluoro, HypervalentIodine, Peroxide, Oxaziridine])
        .solvent(&[Sulfoxide])
        .reason("{electrophile} oxidises {solvent}, with heat")
        .source(HANDBOOK),
    Rule::note("isocyanate in sulfoxide", Gas)
        .electrophile(&[Isocyanate])
        .solvent(&[Sulfoxide])
        .reason("{electrophile} and {solvent} slowly give off carbon dioxide"),
    Rule::note("alkylating agent in sulfoxide", Runaway)
        .electrophile(&[Alkylator])
        .solvent(&[Sulfoxide])
        .reason("{electrophile} alkylates {solvent} slowly, and the salt lowers the temperature at which it decomposes")
        .source(super::DMSO_PAPER),
    Rule::warning("fierce alkylating agent in sulfoxide", Runaway)
        .electrophile(&[FierceAlkylator, HaloCarbonyl])
        .solvent(&[Sulfoxide])
        .instead_of("alkylating agent in sulfoxide")
        .reason("{electrophile} alkylates or oxidises with {solvent}, with heat")
        .source(super::DMSO_PAPER),
    // Amides.
    Rule::note("acid halide in amide", Violent)
        .electrophile(HARSH)
        .solvent(&[Amide, AmideNh, Phosphoramide])
        .reason("{electrophile} activates {solvent}, with heat")
        .source(HANDBOOK),
    Rule::warning("Vilsmeier reagent from amide", Violent)
        .electrophile(VILSMEIER)
        .solvent(&[Amide])
        .instead_of("acid halide in amide")
        .reason("{electrophile} reacts with {solvent} at once, with much heat")
        .source(HANDBOOK),
    Rule::warning("Vilsmeier gas from amide", Gas)
        .electrophile(&[OxalylHalide, Phosgene, MaskedPhosgene, ThionylHalide])
        .solvent(&[Amide])
        .reason("{electrophile} and {solvent} give off gas (carbon dioxide and monoxide, or sulfur dioxide)"),
    Rule::warning("carbamoyl chloride from formamide", Carcinogen)
        .electrophile(&[OxalylHalide, Phosgene, MaskedPhosgene, ThionylHalide, AcylHalide])
        .solvent(&[Formamide])
        .reason("{electrophile} and {solvent} make traces of dimethylcarbamoyl chloride, a carcinogen")
        .source(CARBAMOYL_PAPER),
    Rule::warning("halogenating agent in amide", Runaway)
        .electrophile(HALOGENATING)
        .solvent(&[Amide])
        .reason("{electrophile} oxidises {solvent}, with heat after a delay; closed vessels have burst")
        .source(NBS_PAPER),
    Rule::warning("N-fluoro compound in amide", Runaway)
        .electrophile(&[NFluoro])
        .solvent(&[Amide])
        .reason("{electrophile} reacts with {solvent}, with heat when it is warm")
        .source("from memory"),
    Rule::warning("oxidant in amide", Runaway)
        .electrophile(OXIDISING)
        .solvent(&[Amide])
        .reason("{electrophile} oxidises {solvent}, with heat")
        .source(HANDBOOK),
    Rule::warning("triflate in a donor solvent", Runaway)
        .electrophile(&[Triflate])
        .solvent(&[Amide, AlkylNitrile, EnolisableKetone, Phosphoramide])
        .reason("{electrophile} alkylates {solvent}, with heat"),
    // Ethers, ketones, alcohols, water.
    Rule::warning("triflate in ether", Runaway)
        .electrophile(&[Triflate, SilylSulfonate, SulfonicAnhydride])
        .solvent(&[Ether])
        .reason("{electrophile} alkylates or splits {solvent} and may polymerise cyclic ethers"),
    Rule::note("acid halide in cyclic ether", Runaway)
        .electrophile(HARSH)
        .solvent(&[Oxolane])
        .reason("{electrophile} splits {solvent} where there is a trace of acid, with heat"),
    Rule::warning("halogenating agent in ether", Runaway)
        .electrophile(HALOGENATING)
        .solvent(&[Ether])
        .reason("{electrophile} and {solvent} react by a radical chain, with heat after a delay")
        .source(NBS_PAPER),
    Rule::warning("halogenating agent in ketone", Runaway)
        .electrophile(HALOGENATING)
        .solvent(&[EnolisableKetone])
        .reason("{electrophile} halogenates {solvent}, with heat after a delay")
        .source(HANDBOOK),
    Rule::warning("lachrymator from ketone", AcutelyToxic)
        .electrophile(HALOGENATING)
        .solvent(&[EnolisableKetone])
        .reason("{electrophile} makes α-halo ketones of {solvent}: lachrymators"),
    Rule::warning("halogenating agent in alcohol", Runaway)
        .electrophile(HALOGENATING)
        .solvent(&[Alcohol])
        .reason("{electrophile} makes hypohalites of {solvent} or oxidises it, with heat after a delay")
        .source(HANDBOOK),
    Rule::warning("halogenating agent in an amine", Violent)
        .electrophile(HALOGENATING)
        .solvent(&[Amine])
        .reason("{electrophile} reacts violently with {solvent}")
        .source(HANDBOOK),
    Rule::stop("halogenating agent in ammonia", Explosive)
        .electrophile(&[Halogen, Iodine, NHalo, Hypohalite])
        .solvent(&[Ammonia])
        .reason("{electrophile} makes nitrogen trihalides of {solvent}, which detonate")
        .source(HANDBOOK),
    Rule::stop("peroxy acid in ketone", Explosive)
        .electrophile(&[PeroxyAcid])
        .solvent(&[Ketone])
        .reason("{electrophile} makes cyclic peroxides of {solvent}, which detonate by touch")
        .source(HANDBOOK),
    Rule::warning("acid halide in a protic solvent", Violent)
        .electrophile(HARSH)
        .solvent(&[Water, Alcohol])
        .reason("{electrophile} reacts violently with {solvent}"),
    Rule::warning("acid gas in a protic solvent", Gas)
        .electrophile(&[
            AcylHalide, SulfonylHalide, PhosphorusHalide, ThionylHalide, SilylHalide, SulfenylHalide,
            ImidoylHalide, Phosgene, MaskedPhosgene,
        ])
        .solvent(&[Water, Alcohol])
        .reason("{electrophile} gives off hydrogen halide in {solvent}, {gas_ml} mL per mmol"),
    Rule::note("mild acylating or silylating agent in a protic solvent", Violent)
        .electrophile(ACYLATING)
        .solvent(&[Water, Alcohol])
        .reason("{electrophile} reacts with {solvent}, with heat"),
    Rule::warning("fierce alkylating agent in a protic solvent", Violent)
        .electrophile(&[Triflate])
        .solvent(&[Water, Alcohol])
        .reason("{electrophile} reacts violently with {solvent}"),
    Rule::warning("isocyanate in water", Gas)
        .electrophile(&[Isocyanate])
        .solvent(&[Water, Acid])
        .reason("{electrophile} gives off carbon dioxide in {solvent}, {gas_ml} mL per mmol"),
    Rule::note("isocyanate in alcohol", Violent)
        .electrophile(&[Isocyanate])
        .solvent(&[Alcohol])
        .reason("{electrophile} and {solvent} make a carbamate, with heat once a base is there"),
    Rule::warning("alkylating agent in an amine", Violent)
        .electrophile(&[Alkylator, AcylHalide, SulfonylHalide, Anhydride, Chloroformate])
        .solvent(&[Amine])
        .reason("{electrophile} reacts with {solvent}, with much heat"),
    Rule::warning("hypohalite", Runaway)
        .anyone(&[Hypohalite])
        .reason("{reagent} decomposes by light, heat and rubber, violently: keep it dark, cold and dilute")
        .source(HANDBOOK),
    // With bases.
    Rule::note("acid halide with an amine", Violent)
        .base(&[AmineBase])
        .electrophile(HARSH)
        .reason("{base} and {electrophile} react at once, with heat and fumes"),
    Rule::warning("acid halide with a strong base", Violent)
        .base(STRONG)
        .electrophile(HARSH)
        .reason("{base} and {electrophile} react violently when they meet undiluted"),
    Rule::note("mild acylating or silylating agent with a strong base", Violent)
        .base(STRONG)
        .electrophile(ACYLATING)
        .reason("{base} and {electrophile} react at once, with heat"),
    Rule::warning("halogenating agent with an amine", Violent)
        .base(&[AmineBase])
        .electrophile(HALOGENATING)
        .reason("{electrophile} oxidises {base}, violently when concentrated")
        .source(HANDBOOK),
    Rule::stop("halogenating agent with ammonia's amide", Explosive)
        .base(&[AmmoniaOnQuench, Ammonia])
        .electrophile(&[Halogen, Iodine, NHalo, Hypohalite])
        .reason("{base} and {electrophile} make nitrogen trihalides, which detonate")
        .source(HANDBOOK),
    Rule::warning("halogenating agent with a reducing base", Violent)
        .base(DESTROYED)
        .electrophile(HALOGENATING)
        .reason("{base} and {electrophile} react violently when they meet undiluted")
        .source(HANDBOOK),
    Rule::note("halogenating agent with an amine substrate", Violent)
        .electrophile(HALOGENATING)
        .substrate(&[AmineNh])
        .reason("{electrophile} makes an N-halo amine of the substrate, which decomposes with heat")
        .source(HANDBOOK),
    Rule::warning("N-fluoro compound with a strong base", Violent)
        .base(STRONG)
        .electrophile(&[NFluoro])
        .reason("{base} and {electrophile} react with much heat when they meet undiluted"),
    Rule::warning("oxidant with a reducing base", Violent)
        .base(DESTROYED)
        .electrophile(OXIDISING)
        .reason("{base} and {electrophile} react violently when they meet undiluted")
        .source(HANDBOOK),
    Rule::note("carbon dioxide from a dicarbonate", Gas)
        .base(&[AmineBase, Hydroxide, Alkoxide])
        .electrophile(&[Dicarbonate, Chloroformate])
        .reason("{electrophile} gives off carbon dioxide with {base}, up to {gas_ml} mL per mmol"),
    Rule::warning("phosgene set free by an amine", AcutelyToxic)
        .base(&[AmineBase, WeakBase])
        .electrophile(&[MaskedPhosgene])
        .reason("{base} sets phosgene free from {electrophile}")
        .source(HANDBOOK),
    Rule::warning("halogenating agent with an additive amine", Violent)
        .electrophile(HALOGENATING)
        .additive(&[Amine])
        .reason("{electrophile} oxidises {additive}, violently when concentrated"),
    Rule::note("alkylating agent with an additive amine", Violent)
        .electrophile(&[Alkylator])
        .additive(&[Amine])
        .reason("{electrophile} alkylates {additive}, with heat when concentrated"),
];
