//! Poisons, carcinogens, lachrymators, stench, gases and peroxide formers, by structure.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::HANDBOOK;

/// The hot surface at which the vapour of carbon disulfide catches fire, less a margin of 10 °C
/// (autoignition near 90 °C).
const DISULFIDE_IGNITES_C: f64 = 80.0;

const PEROXIDE_REVIEW: &str = "Kelly, Chem. Health Saf. 1996, 3, 28; quoted from memory";

pub(super) const RULES: &[Rule] = &[
    // Carcinogens.
    Rule::note("alkylating agent", Carcinogen)
        .anyone(&[Alkylator, Epoxide, Aziridine, Thiirane])
        .reason("{reagent} is an alkylating agent: treat as a suspected carcinogen"),
    Rule::warning("strong carcinogen", Carcinogen)
        .anyone(&[
            FierceAlkylator, HaloEther, Aziridine, StrainedLactone, SulfurMustard, HalfMustard,
            CarbamoylHalide, Nitrosamine, Acrylamide, KnownCarcinogen, SmallAldehyde,
        ])
        .instead_of("alkylating agent")
        .reason("{reagent} is, or stands with, known carcinogens or mutagens of its class"),
    Rule::stop("bis(chloromethyl) ether", Carcinogen)
        .anyone(&[BisHaloEther])
        .instead_of("strong carcinogen")
        .reason("{reagent} is bis(chloromethyl) ether or its kin, a carcinogen that works at traces in air"),
    // Poisons.
    Rule::warning("fierce alkylating agent", AcutelyToxic)
        .anyone(&[FierceAlkylator])
        .reason("{reagent}: reactive sulfates, triflates and oxonium salts of small alkyls are poisons"),
    Rule::stop("sulfur mustard", AcutelyToxic)
        .anyone(&[SulfurMustard])
        .reason("{reagent} is a sulfur mustard: a chemical weapon"),
    Rule::warning("β-haloamine or β-halosulfide", AcutelyToxic)
        .anyone(&[HalfMustard])
        .reason("{reagent} closes to an aziridinium or episulfonium ion: a vesicant"),
    Rule::warning("aziridine", AcutelyToxic)
        .anyone(&[Aziridine])
        .reason("{reagent} is an aziridine: small ones are poisons through the skin"),
    Rule::stop("phosgene", AcutelyToxic)
        .anyone(&[Phosgene])
        .reason("{reagent} is phosgene or its kin: a deadly gas"),
    Rule::warning("chloroformate or masked phosgene", AcutelyToxic)
        .anyone(&[Chloroformate, MaskedPhosgene, OxalylHalide])
        .reason("{reagent} is a poison by inhalation and may give phosgene or carbon monoxide"),
    Rule::warning("cyanide set free", AcutelyToxic)
        .anyone(&[CyanideDonor])
        .reason("{reagent} sets cyanide free: hydrogen cyanide with acid, alcohol or moisture"),
    Rule::stop("cyanogen halide", AcutelyToxic)
        .anyone(&[CyanogenHalide])
        .reason("{reagent} is a cyanogen halide: a volatile, deadly poison"),
    Rule::warning("halogen", AcutelyToxic)
        .anyone(&[Halogen])
        .reason("{reagent} gives a poisonous vapour"),
    Rule::warning("isocyanate", AcutelyToxic)
        .anyone(&[Isocyanate])
        .reason("{reagent} is an isocyanate: a poison by inhalation that sensitises the lungs"),
    Rule::note("isothiocyanate or carbodiimide", AcutelyToxic)
        .anyone(&[Isothiocyanate, Carbodiimide])
        .reason("{reagent} sensitises skin and lungs"),
    Rule::warning("ketene or carbonyl sulfide", AcutelyToxic)
        .anyone(&[Ketene, CarbonylSulfide])
        .reason("{reagent} is a poison by inhalation"),
    Rule::warning("lachrymator", AcutelyToxic)
        .anyone(&[HaloCarbonyl, VinylAldehyde, VinylKetone])
        .reason("{reagent} is a lachrymator"),
    Rule::note("mild lachrymator", AcutelyToxic)
        .anyone(&[BenzylHalide, Nitroalkene, AcceptorAlkyne, Quinone, AcylHalide])
        .reason("{reagent} irritates eyes and lungs: a lachrymator"),
    Rule::warning("selenium compound", AcutelyToxic)
        .anyone(&[SeleniumCompound])
        .reason("{reagent} holds selenium: poisonous and a stench, as is what is made of it"),
    Rule::note("thiol", AcutelyToxic)
        .anyone(&[Thiol])
        .reason("{reagent} is a thiol: a stench, and the small ones are poisons"),
    Rule::note("thiol set free", AcutelyToxic)
        .anyone(&[ThiolateDonor, SulfenylHalide])
        .reason("{reagent} sets a thiol or sulfinate free: a stench; oxidise before it leaves the hood"),
    Rule::note("hydrogen fluoride set free", AcutelyToxic)
        .anyone(&[HydrogenFluorideDonor, Fluoride])
        .reason("{reagent} gives hydrogen fluoride with acid or moisture: poisonous, and attacks glass"),
    Rule::note("crown ether or quaternary salt", AcutelyToxic)
        .anyone(&[Crown, PhaseTransfer])
        .reason("{reagent} carries ions through membranes: poisonous when swallowed"),
    Rule::warning("dinitrohaloarene", AcutelyToxic)
        .anyone(&[HalogenoDinitroarene])
        .reason("{reagent} goes through the skin and sensitises it"),
    Rule::warning("phosphorus or thionyl halide", AcutelyToxic)
        .anyone(&[PhosphorusHalide, ThionylHalide])
        .reason("{reagent} is a poison by inhalation: hydrogen halide and worse with moisture"),
    // Gases and fire.
    Rule::warning("gas at room temperature", Gas)
        .anyone(&[GasAtRoomTemperature])
        .reason("{reagent} is a gas at room temperature: pressure in a closed well, loss from an open one"),
    Rule::warning("carbon dioxide in a closed well", Gas)
        .anyone(&[CarbonDioxide])
        .reason("{reagent} is a gas: {gas_ml} mL per mmol, pressure in a closed well"),
    Rule::warning("carbon disulfide", Flammable)
        .anyone(&[CarbonDisulfide])
        .reason("{reagent} burns below room temperature and catches fire on surfaces of about 90 °C")
        .source(HANDBOOK),
    Rule::stop("hot carbon disulfide", Flammable)
        .electrophile(&[CarbonDisulfide])
        .above_c(DISULFIDE_IGNITES_C)
        .instead_of("carbon disulfide")
        .reason("{electrophile} at {t} °C catches fire by itself")
        .source(HANDBOOK),
    Rule::stop("hot solvent carbon disulfide", Flammable)
        .solvent(&[CarbonDisulfide])
        .above_c(DISULFIDE_IGNITES_C)
        .instead_of("carbon disulfide")
        .reason("{solvent} at {t} °C catches fire by itself")
        .source(HANDBOOK),
    // Peroxides.
    Rule::note("solvent that forms peroxides", PeroxideFormer)
        .anyone(&[FormsPeroxides])
        .reason("{reagent} forms peroxides on storage: test before use")
        .source(PEROXIDE_REVIEW),
    Rule::note("ether that forms peroxides", PeroxideFormer)
        .anyone(&[AutoxidisableEther, AutoxidisableCarbon])
        .reason("{reagent} forms peroxides in air: test before it is concentrated")
        .source(PEROXIDE_REVIEW),
];
