//! What the deck can do, as the laboratory declares it.

use enolattice_grid::{FaultCode, InputError};
use enolattice_reagents::{Base, BaseKind, Solvent, SolventClass};
use serde::{Deserialize, Serialize};

use crate::PlateFormat;
use crate::request::fault;

/// What the deck can do. What is not declared is not assumed: without `inert` no base that air destroys is used.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Deck {
    /// Lowest temperature of the block, °C; none: the usual one of the format.
    pub lowest_temperature_c: Option<f64>,
    /// Highest temperature of the block, °C; none: the usual one of the format.
    pub highest_temperature_c: Option<f64>,
    /// Whether it works under inert gas.
    pub inert: bool,
    /// Most wells of a plate on which pyrophoric liquids may be dispensed.
    pub pyrophoric_wells: u32,
    /// Whether wells are stirred or shaken, so that solids react.
    pub stirred: bool,
    /// Whether wells are sealed while they react.
    pub sealed: bool,
    /// Gas above the liquid of a well, uL; none: the rest of the usual volume of the format.
    pub head_space_ul: Option<f64>,
    /// Pressure above that of the room that a sealed well holds, bar.
    pub holds_bar: f64,
    /// Material of the plates: `glass`, `polypropylene`, `cyclic olefin` or `polystyrene`.
    pub material: String,
    /// Smallest volume that is transferred, nL.
    pub smallest_nl: f64,
    /// Largest volume of one transfer, nL.
    pub largest_nl: f64,
    /// Step of volumes, nL.
    pub step_nl: f64,
    /// Channels of the head that work at once on wells of a column; 1: one tip or nozzle.
    pub channels: u32,
    /// Time of one transfer (of all channels at once), s.
    pub seconds_per_transfer: f64,
    /// Format of the source plates: 24, 96, 384 or 1536.
    pub source_wells: PlateFormat,
    /// What a source well holds, uL.
    pub source_capacity_ul: f64,
    /// What cannot be taken out of a source well, uL.
    pub source_dead_ul: f64,
    /// What is made more than is needed, %.
    pub excess_percent: f64,
    /// Whether suspensions are dispensed.
    pub slurries: bool,
    /// Whether solids are weighed into wells.
    pub solids: bool,
    /// Smallest mass that is weighed, mg.
    pub smallest_mass_mg: f64,
}

impl Default for Deck {
    /// What a plain pipetting deck does (common practice).
    fn default() -> Deck {
        Deck {
            lowest_temperature_c: None,
            highest_temperature_c: None,
            inert: false,
            pyrophoric_wells: 384,
            stirred: true,
            sealed: true,
            head_space_ul: None,
            holds_bar: 1.0,
            material: "glass".to_owned(),
            smallest_nl: 500.0,
            largest_nl: 200_000.0,
            step_nl: 100.0,
            channels: 1,
            seconds_per_transfer: 2.0,
            source_wells: PlateFormat::Wells96,
            source_capacity_ul: 1_800.0,
            source_dead_ul: 50.0,
            excess_percent: 10.0,
            slurries: true,
            solids: false,
            smallest_mass_mg: 1.0,
        }
    }
}

/// Materials of plates.
const MATERIALS: [&str; 4] = ["glass", "polypropylene", "cyclic olefin", "polystyrene"];

impl Deck {
    /// Lowest and highest temperature of the block with plates of this many wells, °C.
    ///
    /// Small wells warm up and dry out on the way, so what a block reaches is less use to them (common practice).
    pub fn temperatures_c(&self, plates: PlateFormat) -> (f64, f64) {
        let (lowest, highest) = match plates {
            PlateFormat::Wells24 => (-20.0, 120.0),
            PlateFormat::Wells96 => (-10.0, 100.0),
            PlateFormat::Wells384 => (0.0, 80.0),
            PlateFormat::Wells1536 => (10.0, 50.0),
        };
        (
            self.lowest_temperature_c.unwrap_or(lowest),
            self.highest_temperature_c.unwrap_or(highest),
        )
    }

    /// Why a base cannot be used in a solvent between two temperatures (°C) on plates of this format; none where it can.
    pub fn refusal(
        &self,
        base: &Base,
        solvent: &Solvent,
        [formation_c, reaction_c]: [f64; 2],
        plates: PlateFormat,
    ) -> Option<String> {
        let wells = plates.wells();
        let (lowest, highest) = self.temperatures_c(plates);
        for temperature in [formation_c, reaction_c] {
            if temperature < lowest {
                return Some(format!(
                    "colder than the block with {wells} wells goes ({lowest} °C; `deck.lowest_temperature_c` declares another)"
                ));
            }
            if temperature > highest {
                return Some(format!(
                    "hotter than the block with {wells} wells goes ({highest} °C; `deck.highest_temperature_c` declares another)"
                ));
            }
        }
        let kind = base.kind;
        let needs_inert = matches!(
            kind,
            BaseKind::Amide | BaseKind::Organolithium | BaseKind::Grignard | BaseKind::Hydride
        );
        if needs_inert && !self.inert {
            return Some(
                "a base that air and moisture destroy (`deck.inert = true` declares inert gas)"
                    .to_owned(),
            );
        }
        let pyrophoric = matches!(kind, BaseKind::Organolithium) || base.hazards.has("H250");
        if pyrophoric && wells > self.pyrophoric_wells as usize {
            return Some(format!(
                "a pyrophoric liquid in {wells} wells (`deck.pyrophoric_wells` declares up to how many)"
            ));
        }
        self.refusal_of_solvent(solvent, formation_c.max(reaction_c))
    }

    /// What a source well gives at most when it is filled with its excess, uL.
    pub(crate) fn source_room_ul(&self) -> f64 {
        (self.source_capacity_ul - self.source_dead_ul) / (1.0 + self.excess_percent / 100.0)
    }

    /// Gas above a well's liquid, uL: as declared, or what the usual well of the format leaves (common practice).
    pub fn gas_space_ul(&self, plates: PlateFormat, liquid_ul: f64) -> f64 {
        let well_ul = match plates {
            PlateFormat::Wells24 => 4_000.0,
            PlateFormat::Wells96 => 1_000.0,
            PlateFormat::Wells384 => 110.0,
            PlateFormat::Wells1536 => 12.0,
        };
        self.head_space_ul
            .unwrap_or((well_ul - liquid_ul).max(0.1 * well_ul))
    }

    fn refusal_of_solvent(&self, solvent: &Solvent, temperature_c: f64) -> Option<String> {
        if !self.sealed && temperature_c > solvent.boiling_c - 20.0 {
            return Some(
                "an open well near the boiling point of its solvent (`deck.sealed`)".to_owned(),
            );
        }
        let attacked = |class: SolventClass| match self.material.as_str() {
            // which plastics swell or dissolve in what: common practice
            "polystyrene" => !matches!(class, SolventClass::Alcohol | SolventClass::Water),
            "cyclic olefin" => matches!(
                class,
                SolventClass::Hydrocarbon | SolventClass::Halogenated | SolventClass::Ether
            ),
            "polypropylene" => {
                temperature_c > 40.0
                    && matches!(class, SolventClass::Hydrocarbon | SolventClass::Halogenated)
            }
            _ => false,
        };
        solvent
            .components()
            .any(|part| attacked(part.class))
            .then(|| {
                format!(
                    "a solvent that attacks {} at this temperature (`deck.material`)",
                    self.material
                )
            })
    }

    pub(crate) fn ranges(&self) -> Vec<(&'static str, f64, f64, f64, &'static str)> {
        let mut ranges = vec![
            (
                "deck.pyrophoric_wells",
                self.pyrophoric_wells.into(),
                0.0,
                1536.0,
                " wells",
            ),
            ("deck.holds_bar", self.holds_bar, 0.0, 100.0, " bar"),
            ("deck.smallest_nl", self.smallest_nl, 0.5, 1e6, " nL"),
            (
                "deck.largest_nl",
                self.largest_nl,
                self.smallest_nl.max(0.5),
                1e8,
                " nL",
            ),
            ("deck.step_nl", self.step_nl, 0.1, 1e5, " nL"),
            ("deck.channels", self.channels.into(), 1.0, 384.0, ""),
            (
                "deck.seconds_per_transfer",
                self.seconds_per_transfer,
                0.001,
                600.0,
                " s",
            ),
            (
                "deck.source_capacity_ul",
                self.source_capacity_ul,
                1.0,
                1e6,
                " uL",
            ),
            (
                "deck.source_dead_ul",
                self.source_dead_ul,
                0.0,
                self.source_capacity_ul / 2.0,
                " uL, half the capacity",
            ),
            ("deck.excess_percent", self.excess_percent, 0.0, 400.0, " %"),
            (
                "deck.smallest_mass_mg",
                self.smallest_mass_mg,
                0.001,
                1e5,
                " mg",
            ),
        ];
        let optional = [
            (
                "deck.lowest_temperature_c",
                self.lowest_temperature_c,
                -110.0,
                250.0,
                " °C",
            ),
            (
                "deck.highest_temperature_c",
                self.highest_temperature_c,
                -110.0,
                250.0,
                " °C",
            ),
            ("deck.head_space_ul", self.head_space_ul, 1.0, 1e6, " uL"),
        ];
        for (field, value, least, most, unit) in optional {
            ranges.extend(value.map(|value| (field, value, least, most, unit)));
        }
        ranges
    }

    pub(crate) fn material_fault(&self) -> Option<InputError> {
        (!MATERIALS.contains(&self.material.as_str())).then(|| {
            fault(
                FaultCode::ValueUnknown,
                "deck.material",
                &self.material,
                "is no material the deck knows",
                format!("give one of {}", MATERIALS.join(", ")),
            )
        })
    }
}
