//! A campaign whose every reagent is known and every number in range.

use std::collections::HashMap;
use std::sync::Arc;

use enolattice_model::{
    Addition, Additive, Base, Electrophile, MeasuredPka, Model, Solvent, Substrate,
};
use enolattice_reagents::Library;

use crate::axes::{
    Read, doses, merged, note_empty_axes, prepared, ranked, structure_of_electrophile,
    structure_of_substrate, substrates,
};
use crate::faults::Faults;
use crate::measured::{self, MeasuredYield, Measurement};
use crate::resolve::{self, NamedStructure, Reagents};
use crate::values::{additions, numbers, target};
use crate::warnings::Warnings;
use crate::{
    CampaignSpec, CellDigits, FaultCode, GridError, InputError, Lattice, Place, entries, load,
};

/// A checked campaign, prepared for the model. Axes in their order.
#[derive(Clone, Debug)]
pub struct Campaign {
    /// Title.
    pub title: String,
    /// Substrates.
    pub substrates: Vec<Arc<Substrate>>,
    /// The laboratory's own pKa of each substrate, in the order of `substrates`.
    pub own_pka: Vec<Option<MeasuredPka>>,
    /// Bases.
    pub bases: Vec<Arc<Base>>,
    /// Electrophiles.
    pub electrophiles: Vec<Arc<Electrophile>>,
    /// Solvents.
    pub solvents: Vec<Arc<Solvent>>,
    /// Additives with their amounts; `None`: no additive.
    pub additives: Vec<Option<Dose>>,
    /// Temperatures, °C.
    pub temperature_c: Vec<f64>,
    /// Temperatures of the deprotonation, °C; `None`: that of the reaction.
    pub formation_temperature_c: Vec<Option<f64>>,
    /// Equivalents of base.
    pub base_equiv: Vec<f64>,
    /// Equivalents of electrophile.
    pub electrophile_equiv: Vec<f64>,
    /// Concentrations of substrate, mol/L.
    pub concentration_m: Vec<f64>,
    /// Times, h.
    pub time_h: Vec<f64>,
    /// Dosing times, min.
    pub dosing_min: Vec<f64>,
    /// Orders of addition; `None`: the usual one of the base.
    pub addition: Vec<Option<Addition>>,
    /// Yield that makes a hit.
    pub yield_at_least: f64,
    /// Yields that the laboratory has measured, by cell. No score depends on them.
    pub measured: HashMap<CellDigits, MeasuredYield>,
    /// What was changed silently on the way in (duplicates merged, ...), for the user.
    pub warnings: Vec<String>,
}

/// An additive and how much of it.
#[derive(Clone, Debug)]
pub struct Dose {
    /// The additive.
    pub additive: Arc<Additive>,
    /// Equivalents on substrate.
    pub equiv: f64,
}

/// A specification whose every value is sound.
pub(crate) struct Checked<'l> {
    pub(crate) substrates: Vec<Read>,
    pub(crate) reagents: Reagents<'l>,
    /// Values of the condition axes, in the order of [`crate::conditions::CONDITIONS`].
    pub(crate) numbers: [Vec<f64>; 8],
    pub(crate) addition: Vec<Option<Addition>>,
    pub(crate) yield_at_least: f64,
}

/// Checks every value of a specification; one that is not to be screened may have empty axes.
pub(crate) fn checked<'l>(
    spec: &CampaignSpec,
    library: &'l Library,
    is_screened: bool,
    warnings: &mut Warnings,
) -> Result<(Checked<'l>, Vec<Measurement>), Vec<InputError>> {
    let mut faults = Faults::default();
    entries::check_text(&spec.title, Place::of_field("title"), &mut faults);
    if !load::is_bearable(spec, &mut faults) {
        return Err(faults.in_order(""));
    }
    let substrates = substrates(&spec.substrates, &mut faults);
    let reagents = resolve::reagents(spec, library, &mut faults);
    if is_screened {
        note_empty_axes(spec, &mut faults);
    }
    let checked = Checked {
        substrates,
        reagents,
        numbers: numbers(spec, &mut faults, warnings),
        addition: additions(&spec.conditions.addition, &mut faults, warnings),
        yield_at_least: target(spec.target.yield_at_least, &mut faults),
    };
    let measurements = measured::checked(spec, &checked, library, &mut faults);
    faults.unless_any((checked, measurements), "")
}

impl Campaign {
    /// Every fault in the values of a specification: names, structures, ranges.
    pub fn faults(spec: &CampaignSpec, library: &Library) -> Vec<InputError> {
        checked(spec, library, true, &mut Warnings::default())
            .err()
            .unwrap_or_default()
    }

    /// Checks a specification against the model's library and prepares every reagent.
    ///
    /// Where a campaign says nothing: 25 °C, 1.1 equivalents of base, 1.2 of electrophile,
    /// no additive, 0.2 mol/L, 16 h, dosing in 10 min, hits from a yield of 0.5.
    ///
    /// # Errors
    /// Every fault at once.
    pub fn new(spec: &CampaignSpec, model: &Model) -> Result<Campaign, Vec<InputError>> {
        let mut warnings = Warnings::default();
        let (sound, measurements) = checked(spec, model.library(), true, &mut warnings)?;
        let Checked {
            substrates,
            reagents,
            numbers,
            addition,
            yield_at_least,
        } = sound;
        let [
            temperature_c,
            formation,
            base_equiv,
            electrophile_equiv,
            additive_equiv,
            concentration_m,
            time_h,
            dosing_min,
        ] = numbers;
        spec.notes.iter().for_each(|note| warnings.noted(note));
        ranked(&substrates, |read| &read.salt);
        ranked(&reagents.electrophiles, |named| &named.salt);
        let substrates = merged(
            "substrates",
            substrates,
            structure_of_substrate,
            &mut warnings,
        );
        let bases = merged(
            "bases",
            reagents.bases,
            |base| (base.name.clone(), base.name.clone()),
            &mut warnings,
        );
        let solvents = merged(
            "solvents",
            reagents.solvents,
            |known| (known.name.clone(), known.name.clone()),
            &mut warnings,
        );
        let electrophiles = merged(
            "electrophiles",
            reagents.electrophiles,
            structure_of_electrophile,
            &mut warnings,
        );
        let additives = doses(&reagents.additives, &additive_equiv, model, &mut warnings);
        for Read { name, salt, .. } in &substrates {
            warnings.of_salt("substrates", name, salt);
        }
        for NamedStructure { name, salt } in &electrophiles {
            warnings.of_salt("electrophiles", name, salt);
        }
        let own_pka = substrates
            .iter()
            .map(|substrate| substrate.own_pka)
            .collect();
        let campaign = Campaign {
            title: spec.title.clone(),
            own_pka,
            substrates: prepared(substrates, |s| {
                model.substrate(&s.name, s.salt.molecule, s.own_pka)
            }),
            bases: bases
                .into_iter()
                .map(|base| Arc::new(model.base(base)))
                .collect(),
            electrophiles: prepared(electrophiles, |e| {
                model.electrophile(&e.name, e.salt.molecule)
            }),
            solvents: solvents
                .into_iter()
                .map(|known| Arc::new(model.solvent(&known)))
                .collect(),
            additives,
            temperature_c,
            formation_temperature_c: match formation.is_empty() {
                true => vec![None],
                false => formation.into_iter().map(Some).collect(),
            },
            base_equiv,
            electrophile_equiv,
            concentration_m,
            time_h,
            dosing_min,
            addition,
            yield_at_least,
            measured: HashMap::new(),
            warnings: Vec::new(),
        };
        warnings.of_prepared(&campaign);
        check_size(&campaign)?;
        Ok(Campaign {
            measured: measured::by_cell(measurements, &campaign, &mut warnings),
            warnings: warnings.into_list(),
            ..campaign
        })
    }
}

fn check_size(campaign: &Campaign) -> Result<(), Vec<InputError>> {
    let mut faults = Faults::default();
    if let Err(error @ GridError::TooLarge) = campaign.sizes().and_then(Lattice::new) {
        let remedy = "cut an axis";
        faults.note(
            FaultCode::CampaignTooLarge,
            Place::of_field("campaign"),
            "",
            error.to_string(),
            remedy,
        );
    }
    faults.unless_any((), "")
}
