//! A stock as a person makes it: masses, volumes, places on the deck, how long it lasts.

use std::collections::BTreeMap;

use enolattice_reagents::{Hazards, Library, Solvent, Supply, molar_mass_g_mol};
use enolattice_units::math;
use serde::{Deserialize, Serialize};

use crate::stocks::made_in::half_life_h;
use crate::stocks::{Dose, Form, Key, Source, Stock};
use crate::transfers::source_wells;
use crate::{Deck, Recipe, Role};

/// What a pipetting robot asks about a liquid.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Liquid {
    /// Viscosity of the solvent at 25 °C, mPa s.
    pub viscosity_mpa_s: f64,
    /// Density of the solvent at 25 °C, g/mL.
    pub density_g_ml: f64,
    /// Vapour pressure of the solvent (of a mixture its most volatile part) at 25 °C, kPa, from its boiling point.
    pub vapour_pressure_kpa: f64,
    /// Boiling point, °C.
    pub boiling_c: f64,
}

impl Liquid {
    fn of(solvent: &Solvent) -> Liquid {
        Liquid {
            viscosity_mpa_s: solvent.viscosity_mpa_s,
            density_g_ml: solvent.density_g_ml,
            vapour_pressure_kpa: vapour_pressure_kpa(solvent.boiling_c, 25.0),
            boiling_c: solvent.boiling_c,
        }
    }
}

/// Vapour pressure of a liquid from its boiling point, kPa: Clausius and Clapeyron with Trouton's entropy of boiling,
/// 88 J/(mol K); good within a third for liquids without hydrogen bonds, too high for alcohols and water.
pub(crate) fn vapour_pressure_kpa(boiling_c: f64, at_c: f64) -> f64 {
    const TROUTON: f64 = 88.0;
    const GAS_CONSTANT: f64 = 8.314_462_618;
    const ATMOSPHERE_KPA: f64 = 101.325;
    const ZERO_C: f64 = 273.15;
    let (boiling_k, at_k) = (boiling_c + ZERO_C, at_c + ZERO_C);
    ATMOSPHERE_KPA * math::exp(-TROUTON / GAS_CONSTANT * (boiling_k / at_k - 1.0))
}

/// What is known of the substance that a stock is of.
struct Substance {
    molar_mass_g_mol: Option<f64>,
    hazards: String,
    purity: f64,
    /// Where it is bought otherwise than pure.
    supplied: String,
    keep: String,
}

fn substance(recipe: &Recipe, role: Role) -> Substance {
    let cell = &recipe.cell;
    let plain = |molar_mass_g_mol: Option<f64>, hazards: String| Substance {
        molar_mass_g_mol,
        hazards,
        purity: 1.0,
        supplied: String::new(),
        keep: "closed, used on the day it is made (common practice)".to_owned(),
    };
    match role {
        Role::Substrate => plain(
            Some(cell.substrate.molecule.molar_mass()),
            "unknown".to_owned(),
        ),
        Role::Electrophile => match cell.electrophile.named() {
            Some(named) => plain(molar_mass_g_mol(&named.formula), statements(&named.hazards)),
            None => plain(
                Some(cell.electrophile.molecule.molar_mass()),
                "unknown".to_owned(),
            ),
        },
        Role::Additive => {
            let record = cell.additive.as_ref().map(|additive| &additive.record);
            let molar_mass = record.and_then(|record| molar_mass_g_mol(&record.formula));
            plain(
                molar_mass,
                record.map_or("unknown".to_owned(), |r| statements(&r.hazards)),
            )
        }
        Role::Base => {
            let record = &cell.base.record;
            // water of a hydrate is weighed with it
            let water = if record.supply == Supply::Solid {
                record.water_equiv
            } else {
                0.0
            };
            let molar_mass = molar_mass_g_mol(&record.formula);
            Substance {
                molar_mass_g_mol: molar_mass.map(|m| m + 18.015 * water),
                hazards: statements(&record.hazards),
                purity: purity(&record.supplied, record.supply),
                supplied: record.supplied.clone(),
                keep: kept(record.supply, record.pka_dmso.value).to_owned(),
            }
        }
        Role::Solvent | Role::Quench | Role::Diluent => plain(None, "unknown".to_owned()),
    }
}

fn statements(hazards: &Hazards) -> String {
    match (hazards.is_unknown(), hazards.h_codes.is_empty()) {
        (true, _) => "unknown".to_owned(),
        (false, true) => "no statement is known to be assigned".to_owned(),
        (false, false) => hazards.h_codes.join(", "),
    }
}

/// Mass fraction of a dispersion, from how it is supplied: `60 % dispersion in mineral oil`.
fn purity(supplied: &str, supply: Supply) -> f64 {
    if supply != Supply::Dispersion {
        return 1.0;
    }
    let percent = supplied
        .split('%')
        .next()
        .and_then(|text| text.trim().parse().ok());
    percent.map_or(1.0, |percent: f64| percent / 100.0)
}

/// How a base's stock is kept (common practice).
fn kept(supply: Supply, pka_dmso: f64) -> &'static str {
    const WATER: f64 = 31.0;
    match supply {
        _ if pka_dmso < 20.0 => "closed, used on the day it is made (common practice)",
        Supply::MadeInThePot => {
            "cold, under inert gas, used within hours of making it (common practice)"
        }
        _ if pka_dmso < WATER => "closed under dry inert gas, used on the day (common practice)",
        _ => "cold, under dry inert gas, titrated before use (common practice)",
    }
}

/// A stock of a reagent that is dosed as a liquid.
pub(super) fn stock(
    recipe: &Recipe,
    key: &Key,
    concentration_m: f64,
    gives_ul: &[f64],
    deck: &Deck,
    library: &Library,
) -> Stock {
    let known = substance(recipe, key.role);
    let solvent = library.solvent_or_mixture(&key.made_in.solvent).ok();
    let mut notes = Vec::new();
    let mut made_ul = made(gives_ul, deck);
    let bought = key.made_in.bought_m();
    let mass = |made_ul: f64| {
        let of_reagent = known.molar_mass_g_mol? * concentration_m * made_ul / 1000.0;
        Some(of_reagent / known.purity)
    };
    let mut weigh_mg = mass(made_ul).filter(|_| bought.is_none());
    if let Some(mg) = weigh_mg.filter(|mg| *mg < deck.smallest_mass_mg && *mg > 0.0) {
        made_ul *= deck.smallest_mass_mg / mg;
        weigh_mg = mass(made_ul);
        notes.push("more is made than is needed, for less cannot be weighed".to_owned());
    }
    if known.supplied.starts_with("made in the pot") {
        notes.push(format!("to be made first: {}", known.supplied));
    } else if key.made_in.form == Form::Bought {
        notes.push(format!("bought as {}", known.supplied));
    } else if known.purity < 1.0 {
        notes.push(format!("weighed as {}", known.supplied));
    }
    if key.made_in.form == Form::Suspension {
        notes.push("does not dissolve: stir while it is dispensed, use wide tips".to_owned());
    }
    let is_unknown = |role| matches!(role, Role::Substrate | Role::Electrophile | Role::Additive);
    if is_unknown(key.role) && concentration_m > 0.3 {
        notes.push("its solubility is unknown: try it before the plate is filled".to_owned());
    }
    let half_life = (key.role == Role::Base)
        .then(|| {
            solvent
                .as_ref()
                .and_then(|solvent| half_life_h(&recipe.cell.base.record, solvent))
        })
        .flatten();
    Stock {
        role: key.role,
        reagent: key.reagent.clone(),
        solvent: key.made_in.solvent.clone(),
        form: key.made_in.form,
        concentration_m,
        made_ul,
        weigh_mg,
        molar_mass_g_mol: known.molar_mass_g_mol,
        purity: known.purity,
        take: bought.map(|bought| (made_ul * concentration_m / bought, bought)),
        liquid: solvent.as_ref().map(Liquid::of),
        // the time in which a twentieth is gone, first order
        lasts_h: half_life.map(|half_life| half_life * (1.0f64 / 0.95).log2()),
        keep: known.keep,
        hazards: known.hazards,
        notes,
        ..nothing(key.role, &key.reagent)
    }
}

/// A solid that is weighed into wells.
pub(super) fn solid(recipe: &Recipe, key: &Key) -> Stock {
    let known = substance(recipe, key.role);
    Stock {
        form: Form::Solid,
        molar_mass_g_mol: known.molar_mass_g_mol,
        purity: known.purity,
        hazards: known.hazards,
        keep: known.keep,
        notes: vec!["weighed into each well before anything else".to_owned()],
        ..nothing(key.role, &key.reagent)
    }
}

/// A solvent that wells are filled up with.
pub(super) fn solvent(
    record: &Solvent,
    role: Role,
    name: &str,
    gives_ul: &[f64],
    deck: &Deck,
) -> Stock {
    Stock {
        made_ul: made(gives_ul, deck),
        liquid: Some(Liquid::of(record)),
        hazards: statements(&record.hazards),
        keep: format!("closed; grade: {}", record.grade),
        ..nothing(role, name)
    }
}

/// A liquid that the library does not have: quench and diluent, as the user names them.
pub(super) fn unknown(role: Role, name: &str, gives_ul: &[f64], deck: &Deck) -> Stock {
    Stock {
        made_ul: made(gives_ul, deck),
        hazards: "unknown".to_owned(),
        ..nothing(role, name)
    }
}

fn nothing(role: Role, reagent: &str) -> Stock {
    Stock {
        label: String::new(),
        role,
        reagent: reagent.to_owned(),
        solvent: reagent.to_owned(),
        form: Form::Liquid,
        concentration_m: 0.0,
        made_ul: 0.0,
        weigh_mg: None,
        molar_mass_g_mol: None,
        purity: 1.0,
        take: None,
        wells: 0,
        sources: Vec::new(),
        liquid: None,
        lasts_h: None,
        keep: String::new(),
        hazards: "unknown".to_owned(),
        notes: Vec::new(),
    }
}

/// What is made of a stock for what its source wells give: excess, and what stays behind in each, uL.
fn made(gives_ul: &[f64], deck: &Deck) -> f64 {
    gives_ul.iter().map(|gives| filled(*gives, deck)).sum()
}

fn filled(gives_ul: f64, deck: &Deck) -> f64 {
    gives_ul * (1.0 + deck.excess_percent / 100.0) + deck.source_dead_ul
}

/// Letter of the source plates of a role: what must not meet in a spill stands on different plates.
fn letter(role: Role) -> char {
    match role {
        Role::Substrate | Role::Additive => 'A',
        Role::Base => 'B',
        Role::Electrophile => 'C',
        Role::Solvent => 'D',
        Role::Quench | Role::Diluent => 'E',
    }
}

/// Gives each stock its label and its wells on source plates.
pub(super) fn place(stocks: &mut [Stock], recipes: &[Recipe], doses: &[Vec<Dose>], deck: &Deck) {
    let mut labels: BTreeMap<char, usize> = BTreeMap::new();
    let mut wells: BTreeMap<char, usize> = BTreeMap::new();
    for (at, stock) in stocks.iter_mut().enumerate() {
        let plate = letter(stock.role);
        let number = labels.entry(plate).or_default();
        *number += 1;
        stock.label = format!("{plate}{number}");
        stock.sources.clear();
        if stock.form == Form::Solid {
            continue;
        }
        let taken = wells.entry(plate).or_default();
        for gives_ul in source_wells(at, stock.role, recipes, doses, deck) {
            let per_plate = deck.source_wells.wells();
            let well = deck.source_wells.by_columns().nth(*taken % per_plate);
            stock.sources.push(Source {
                plate: format!("source {plate}{}", *taken / per_plate + 1),
                well: well.expect("below the number of wells"),
                filled_ul: filled(gives_ul, deck),
                taken_ul: 0.0,
            });
            *taken += 1;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn vapour_pressures_are_near_published_ones() {
        // at 25 °C: THF 21.6 kPa, toluene 3.8, dichloromethane 58 (from memory)
        for (boiling_c, published) in [(66.0, 21.6), (110.6, 3.8), (39.6, 58.0)] {
            let ratio = vapour_pressure_kpa(boiling_c, 25.0) / published;
            assert!((0.67..1.5).contains(&ratio), "{boiling_c}: {ratio}");
        }
        assert!((vapour_pressure_kpa(66.0, 66.0) - 101.325).abs() < 1e-9);
    }

    #[test]
    fn dispersions_are_weighed_with_their_oil() {
        assert_eq!(
            purity("60 % dispersion in mineral oil", Supply::Dispersion),
            0.6
        );
        assert_eq!(purity("pellets, 85 %, the rest water", Supply::Solid), 1.0);
    }
}
