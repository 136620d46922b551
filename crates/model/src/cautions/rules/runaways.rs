//! Bases with electrophiles and substrates: polymerisation, condensation, alkylation.

use super::super::Category::*;
use super::super::rule::Rule;
use super::super::traits::Trait::*;
use super::{ANY, DESTROYED, HANDBOOK, MILD, ORGANOMETALLIC, STRONG};

/// Nitroarenes with strong bases decompose from about here; a margin of common practice.
const NITROARENE_WARM_C: f64 = 80.0;
/// Carbodiimides, isocyanates and small epoxides are kept below this with bases.
const HOT_C: f64 = 60.0;

pub(super) const RULES: &[Rule] = &[
    // Acceptors that polymerise.
    Rule::note("acrylic compound with a mild base", Runaway)
        .base(MILD)
        .electrophile(&[Acrylate, VinylNitrile, VinylSulfone])
        .reason("{electrophile} may polymerise with {base}, with heat: keep the inhibitor in and add it slowly")
        .source(HANDBOOK),
    Rule::warning("acrylic compound with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Acrylate, VinylNitrile, VinylSulfone])
        .reason("{electrophile} polymerises with {base}, with much heat: add it slowly")
        .source(HANDBOOK),
    Rule::warning("vinyl carbonyl compound with a base", Runaway)
        .base(ANY)
        .electrophile(&[VinylAldehyde, VinylKetone])
        .reason("{electrophile} polymerises with {base}, with much heat: add it slowly")
        .source(HANDBOOK),
    Rule::warning("doubly activated alkene with a base", Runaway)
        .base(ANY)
        .electrophile(&[DoublyActivated, VinylNitro])
        .reason("{electrophile} polymerises with {base}, and with moisture alone, with much heat"),
    Rule::note("nitroalkene with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Nitroalkene])
        .reason("{electrophile} makes oligomers with {base}, with heat"),
    Rule::note("aldehyde with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[EnolisableAldehyde])
        .reason("{base} makes an aldehyde with an α-hydrogen condense, with heat"),
    Rule::warning("small aldehyde with a base", Runaway)
        .base(STRONG)
        .electrophile(&[SmallAldehyde])
        .instead_of("aldehyde with a strong base")
        .reason("{base} makes {electrophile} condense or polymerise, with much heat")
        .source(HANDBOOK),
    Rule::note("epoxide or aziridine with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Epoxide, Aziridine, Thiirane, StrainedLactone])
        .reason("{electrophile} in excess may polymerise with {base}, with heat"),
    Rule::warning("small epoxide with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[SmallEpoxide, Aziridine])
        .instead_of("epoxide or aziridine with a strong base")
        .reason("{electrophile} polymerises with {base}, with much heat and pressure")
        .source(HANDBOOK),
    Rule::warning("isocyanate with a base", Runaway)
        .base(&[
            Organolithium, Grignard, MetalAmide, Hydride, Alkoxide, Hydroxide, AmineBase,
        ])
        .electrophile(&[Isocyanate])
        .reason("{electrophile} forms its trimer with {base}, with much heat")
        .source(HANDBOOK),
    Rule::note("hot carbodiimide or isothiocyanate with a base", Runaway)
        .base(STRONG)
        .electrophile(&[Carbodiimide, Isothiocyanate])
        .above_c(HOT_C)
        .reason("{electrophile} oligomerises with {base} at {t} °C, with heat"),
    Rule::warning("ketene with a base", Runaway)
        .base(&[AmineBase, Alkoxide, Hydroxide])
        .electrophile(&[Ketene])
        .reason("{electrophile} dimerises and polymerises with {base}, with much heat"),
    Rule::note("carbon disulfide with an amine", Violent)
        .base(&[AmineNh, MetalAmide])
        .electrophile(&[CarbonDisulfide])
        .reason("{base} adds to carbon disulfide, with heat"),
    // Alkylating agents.
    Rule::note("alkylating agent with an amine", Violent)
        .base(&[AmineBase])
        .electrophile(&[Alkylator])
        .reason("{base} is alkylated, with heat when concentrated"),
    Rule::warning("fierce alkylating agent with an amine", Violent)
        .base(&[AmineBase])
        .electrophile(&[FierceAlkylator])
        .instead_of("alkylating agent with an amine")
        .reason("{base} is alkylated at once, with much heat"),
    Rule::warning("fierce alkylating agent with a strong base", Violent)
        .base(STRONG)
        .electrophile(&[FierceAlkylator])
        .reason("{base} reacts violently with sulfates, triflates and oxonium salts")
        .source(HANDBOOK),
    Rule::note("organometallic with an alkyl halide", Violent)
        .base(ORGANOMETALLIC)
        .electrophile(&[AlkylHalide])
        .reason("{base} exchanges or couples with alkyl halides, with heat"),
    Rule::stop("haloform as electrophile", Violent)
        .base(STRONG)
        .electrophile(&[Haloform])
        .reason("{base} makes dihalocarbene of {electrophile}, violently")
        .source(HANDBOOK),
    Rule::warning("polyhalide with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Tetrahalide, MethyleneHalide])
        .reason("{base} makes a carbenoid of {electrophile}, which decomposes when it warms"),
    Rule::warning("vinyl halide from a dihalide", Carcinogen)
        .base(STRONG)
        .electrophile(&[VicinalDihalide])
        .reason("{base} makes vinyl halide of {electrophile}: a gas and a carcinogen"),
    Rule::note("vinyl halide gas from a dihalide", Gas)
        .base(STRONG)
        .electrophile(&[VicinalDihalide])
        .reason("{base} makes vinyl halide of {electrophile}: a gas"),
    // Nitroarenes.
    Rule::warning("warm nitroarene electrophile with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[Nitroarene])
        .above_c(NITROARENE_WARM_C)
        .reason("{electrophile} with {base} at {t} °C may decompose with much heat")
        .source(HANDBOOK),
    Rule::warning("warm nitroarene substrate with a strong base", Runaway)
        .base(STRONG)
        .substrate(&[Nitroarene])
        .above_c(NITROARENE_WARM_C)
        .reason("the nitroarene with {base} at {t} °C may decompose with much heat")
        .source(HANDBOOK),
    Rule::note("halodinitroarene with a base", Runaway)
        .base(MILD)
        .electrophile(&[HalogenoDinitroarene])
        .reason("{electrophile} is substituted by {base} or what it deprotonates, with heat"),
    Rule::warning("halodinitroarene with a strong base", Runaway)
        .base(STRONG)
        .electrophile(&[HalogenoDinitroarene])
        .reason("{electrophile} with {base} gives much heat; dinitrophenolates explode when dry")
        .source(HANDBOOK),
    // Gas from acids.
    Rule::note("carbonate with an acid", Gas)
        .base(&[Carbonate])
        .substrate(&[Acid])
        .reason("{base} and the acid give off carbon dioxide, {gas_ml} mL per mmol"),
    Rule::note("strong base with an acid group", Violent)
        .base(DESTROYED)
        .substrate(&[Acid])
        .reason("{base} is neutralised by the acid at once, with heat: add slowly in the cold"),
];
