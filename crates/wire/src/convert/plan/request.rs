//! What a plan is asked to be, read. Paths of faults are those of the message, from `request`.

use enolattice_grid::InputError;
use enolattice_model::Category;
use enolattice_plate::{
    Aim, ChoiceRequest, Controls, Deck, Limit, LimitAxis, NamedCell, PlanRequest, PlateFormat,
    Plates, Weights, WellRequest,
};

use super::lists::{AIM_WORDS, COLUMNS_BY, DESIGNS, EDGE_WELLS, HITS_OF, LIMIT_AXES};
use crate::bad_field;
use crate::convert::enums;
use crate::v1::{self, ErrorReason};

/// What a request of `PlanPlates` asks for.
///
/// # Errors
/// Every fault of the message and every value out of its range.
pub fn plan_request(message: Option<v1::PlanRequest>) -> Result<PlanRequest, Vec<InputError>> {
    let mut reading = Reading::default();
    let request = reading.request(message.unwrap_or_default());
    // what is at fault in the message has its default here, so that nothing is told twice
    let mut faults = reading.faults;
    faults.extend(request.faults());
    if faults.is_empty() {
        return Ok(request);
    }
    for fault in &mut faults {
        fault.place.field = format!("request.{}", fault.place.field);
    }
    Err(faults)
}

/// Collects the faults of a message.
#[derive(Default)]
struct Reading {
    faults: Vec<InputError>,
}

impl Reading {
    fn request(&mut self, message: v1::PlanRequest) -> PlanRequest {
        PlanRequest {
            title: message.title,
            seed: message.seed,
            plates: self.plates(message.plates.unwrap_or_default()),
            choice: self.choice(message.choice.unwrap_or_default()),
            controls: self.controls(message.controls.unwrap_or_default()),
            well: well(message.well.unwrap_or_default()),
            deck: self.deck(message.deck.unwrap_or_default()),
        }
    }

    fn plates(&mut self, plates: v1::PlatesRequest) -> Plates {
        let usual = Plates::default();
        let edge = "plates.edge_wells";
        let columns = "plates.columns_by";
        Plates {
            wells: self.format("plates.wells", plates.wells, usual.wells),
            count: self.count("plates.count", plates.count, usual.count),
            edge_wells: self
                .listed::<_, v1::EdgeWells>(edge, &EDGE_WELLS, plates.edge_wells)
                .unwrap_or(usual.edge_wells),
            columns_by: self.listed::<_, v1::Axis>(columns, &COLUMNS_BY, plates.columns_by),
        }
    }

    fn choice(&mut self, choice: v1::ChoiceRequest) -> ChoiceRequest {
        let usual = ChoiceRequest::default();
        let hits = "choice.hits_of";
        ChoiceRequest {
            aim: match choice.aim {
                Some(aim) => self.aim(aim).unwrap_or(usual.aim),
                None => usual.aim,
            },
            hits_of: self
                .listed::<_, v1::HitsOf>(hits, &HITS_OF, choice.hits_of)
                .unwrap_or(usual.hits_of),
            design: self.listed::<_, v1::DesignKind>("choice.design", &DESIGNS, choice.design),
            replicates: self.count("choice.replicates", choice.replicates, usual.replicates),
            shortlist: self.count("choice.shortlist", choice.shortlist, usual.shortlist),
            draws: self.count("choice.draws", choice.draws, usual.draws),
            only: choice.only,
            pin: self.cells("choice.pin", choice.pin),
            veto: self.cells("choice.veto", choice.veto),
            limits: self.limits(choice.limits),
            only_in_stock: choice.only_in_stock,
            allow_stop: self.categories(&choice.allow_stop),
        }
    }

    /// A word, three numbers, or nothing.
    fn aim(&mut self, aim: v1::Aim) -> Option<Aim> {
        let word = self.listed::<_, v1::AimWord>("choice.aim.word", &AIM_WORDS, aim.word);
        let (reason, why) = match (word, aim.hits, aim.information, aim.spread) {
            (word, None, None, None) => return word.map(Aim::Word),
            (None, Some(hits), Some(information), Some(spread)) => {
                return Some(Aim::Numbers(Weights {
                    hits,
                    information,
                    spread,
                }));
            }
            (None, ..) => (
                ErrorReason::ValueMissing,
                "some of the three weights are missing",
            ),
            (Some(_), ..) => (ErrorReason::ValueRepeated, "a word and weights are given"),
        };
        let remedy = "give `word`, or all of `hits`, `information` and `spread`";
        self.faults
            .push(bad_field(reason, "choice.aim", "", why, remedy));
        None
    }

    fn cells(&mut self, list: &str, cells: Vec<v1::NamedCell>) -> Vec<NamedCell> {
        let mut named = Vec::with_capacity(cells.len());
        for (i, v1::NamedCell { cell, note }) in cells.into_iter().enumerate() {
            match u64::try_from(cell) {
                Ok(cell) => named.push(NamedCell { cell, note }),
                Err(_) => self.negative(&format!("{list}[{i}].cell"), cell),
            }
        }
        named
    }

    fn limits(&mut self, limits: Vec<v1::AxisLimit>) -> Vec<Limit> {
        let mut read = Vec::with_capacity(limits.len());
        for (i, limit) in limits.into_iter().enumerate() {
            let field = |name: &str| format!("choice.limits[{i}].{name}");
            let axis = self.listed::<_, v1::Axis>(&field("axis"), &LIMIT_AXES, limit.axis);
            let least = self.count(&field("least"), Some(limit.least), 0);
            let most = limit
                .most
                .map(|most| self.count(&field("most"), Some(most), u32::MAX));
            if limit.axis == 0 {
                self.faults.push(bad_field(
                    ErrorReason::ValueMissing,
                    field("axis"),
                    "",
                    "it is missing",
                    "say which axis is limited",
                ));
            }
            read.push(Limit {
                // one that is at fault keeps its place, by which the others are told
                axis: axis.unwrap_or(LimitAxis::Substrate),
                value: limit.value,
                least,
                most,
            });
        }
        read
    }

    fn categories(&mut self, numbers: &[i32]) -> Vec<String> {
        let mut names = Vec::with_capacity(numbers.len());
        for (i, number) in numbers.iter().enumerate() {
            let field = format!("choice.allow_stop[{i}]");
            let category = self.listed::<_, v1::CautionCategory>(&field, &Category::ALL, *number);
            names.extend(category.map(|category| category.name().to_owned()));
        }
        names
    }

    fn controls(&mut self, controls: v1::ControlsRequest) -> Controls {
        let usual = Controls::default();
        let mut count =
            |name: &str, given, usual| self.count(&format!("controls.{name}"), given, usual);
        Controls {
            no_base: count("no_base", controls.no_base, usual.no_base),
            no_electrophile: count(
                "no_electrophile",
                controls.no_electrophile,
                usual.no_electrophile,
            ),
            solvent_only: count("solvent_only", controls.solvent_only, usual.solvent_only),
            positive: count("positive", controls.positive, usual.positive),
            deuterium: count("deuterium", controls.deuterium, usual.deuterium),
        }
    }

    fn deck(&mut self, deck: v1::Deck) -> Deck {
        let usual = Deck::default();
        Deck {
            lowest_temperature_c: deck.lowest_temperature_c,
            highest_temperature_c: deck.highest_temperature_c,
            inert: deck.inert,
            pyrophoric_wells: self.count(
                "deck.pyrophoric_wells",
                deck.pyrophoric_wells,
                usual.pyrophoric_wells,
            ),
            stirred: deck.stirred.unwrap_or(usual.stirred),
            sealed: deck.sealed.unwrap_or(usual.sealed),
            head_space_ul: deck.head_space_ul,
            holds_bar: deck.holds_bar.unwrap_or(usual.holds_bar),
            material: deck.material.unwrap_or(usual.material),
            smallest_nl: deck.smallest_nl.unwrap_or(usual.smallest_nl),
            largest_nl: deck.largest_nl.unwrap_or(usual.largest_nl),
            step_nl: deck.step_nl.unwrap_or(usual.step_nl),
            channels: self.count("deck.channels", deck.channels, usual.channels),
            seconds_per_transfer: deck
                .seconds_per_transfer
                .unwrap_or(usual.seconds_per_transfer),
            source_wells: self.format("deck.source_wells", deck.source_wells, usual.source_wells),
            source_capacity_ul: deck.source_capacity_ul.unwrap_or(usual.source_capacity_ul),
            source_dead_ul: deck.source_dead_ul.unwrap_or(usual.source_dead_ul),
            excess_percent: deck.excess_percent.unwrap_or(usual.excess_percent),
            slurries: deck.slurries.unwrap_or(usual.slurries),
            solids: deck.solids,
            smallest_mass_mg: deck.smallest_mass_mg.unwrap_or(usual.smallest_mass_mg),
        }
    }

    /// A number that is not negative.
    fn count(&mut self, field: &str, given: Option<i32>, usual: u32) -> u32 {
        match given.map(u32::try_from) {
            None => usual,
            Some(Ok(count)) => count,
            Some(Err(_)) => {
                self.negative(field, given.unwrap_or_default().into());
                usual
            }
        }
    }

    fn negative(&mut self, field: &str, value: i64) {
        self.faults.push(bad_field(
            ErrorReason::ValueOutOfRange,
            field,
            value.to_string(),
            "it is negative",
            "use 0 or more",
        ));
    }

    fn format(&mut self, field: &str, given: Option<i32>, usual: PlateFormat) -> PlateFormat {
        let Some(wells) = given else { return usual };
        let format = u16::try_from(wells).ok();
        if let Some(format) = format.and_then(|wells| PlateFormat::try_from(wells).ok()) {
            return format;
        }
        self.faults.push(bad_field(
            ErrorReason::ValueUnknown,
            field,
            wells.to_string(),
            "no plate has so many wells",
            "give 24, 96, 384 or 1536",
        ));
        usual
    }

    /// A value of a closed list; none where it is unspecified.
    fn listed<T, W>(&mut self, field: &str, all: &[T], number: i32) -> Option<T>
    where
        T: Copy + Into<W>,
        W: Into<i32>,
    {
        enums::optional_from_wire::<T, W>("", all, number).unwrap_or_else(|_| {
            self.faults.push(bad_field(
                ErrorReason::ValueUnknown,
                field,
                number.to_string(),
                "it is none of the values that this field can have",
                "the comment of the field lists them",
            ));
            None
        })
    }
}

fn well(well: v1::WellRequest) -> WellRequest {
    let usual = WellRequest::default();
    WellRequest {
        volume_ul: well.volume_ul,
        carrier: well.carrier,
        quench: well.quench.unwrap_or(usual.quench),
        quench_share: well.quench_share.unwrap_or(usual.quench_share),
        diluent: well.diluent.unwrap_or(usual.diluent),
        internal_standard: well.internal_standard.unwrap_or(usual.internal_standard),
        sample_ul: well.sample_ul.unwrap_or(usual.sample_ul),
        diluent_ul: well.diluent_ul.unwrap_or(usual.diluent_ul),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_plate::{AimWord, ColumnsBy, DesignKind, EdgeWells, HitsOf};

    /// A request in which nothing has its default.
    fn request() -> PlanRequest {
        let named = |cell, note: &str| NamedCell {
            cell,
            note: note.into(),
        };
        PlanRequest {
            title: "Invented esters".into(),
            seed: u64::MAX,
            plates: Plates {
                wells: PlateFormat::Wells384,
                count: 3,
                edge_wells: EdgeWells::ControlsOnly,
                columns_by: Some(ColumnsBy::Electrophile),
            },
            choice: ChoiceRequest {
                aim: Aim::Numbers(Weights {
                    hits: 0.1,
                    information: 0.7,
                    spread: 0.2,
                }),
                hits_of: HitsOf::Products,
                design: None,
                replicates: 2,
                shortlist: 9_000,
                draws: 128,
                only: "p_hit >= 0.2".into(),
                pin: vec![named(1 << 47, "asked for"), named(7, "")],
                veto: vec![named(0, "tried")],
                limits: vec![
                    Limit {
                        axis: LimitAxis::Base,
                        value: Some("LDA".into()),
                        least: 4,
                        most: None,
                    },
                    Limit {
                        axis: LimitAxis::Solvent,
                        value: None,
                        least: 0,
                        most: Some(40),
                    },
                ],
                only_in_stock: true,
                allow_stop: vec!["gas".into(), "pyrophoric".into()],
            },
            controls: Controls {
                no_base: 2,
                no_electrophile: 0,
                solvent_only: 3,
                positive: 4,
                deuterium: 5,
            },
            well: WellRequest {
                volume_ul: Some(40.5),
                carrier: Some("DMSO".into()),
                quench: "water".into(),
                quench_share: 0.25,
                diluent: "methanol".into(),
                internal_standard: String::new(),
                sample_ul: 1.5,
                diluent_ul: 90.0,
            },
            deck: Deck {
                lowest_temperature_c: Some(-40.0),
                highest_temperature_c: Some(90.0),
                inert: true,
                pyrophoric_wells: 96,
                stirred: false,
                sealed: false,
                head_space_ul: Some(30.0),
                holds_bar: 0.5,
                material: "polypropylene".into(),
                smallest_nl: 25.0,
                largest_nl: 5_000.0,
                step_nl: 2.5,
                channels: 8,
                seconds_per_transfer: 0.4,
                source_wells: PlateFormat::Wells24,
                source_capacity_ul: 9_000.0,
                source_dead_ul: 80.0,
                excess_percent: 20.0,
                slurries: false,
                solids: true,
                smallest_mass_mg: 5.0,
            },
        }
    }

    #[test]
    fn requests_come_back() {
        let mut request = request();
        assert_eq!(plan_request(Some((&request).into())), Ok(request.clone()));
        // a design takes no other wishes
        request.choice = ChoiceRequest {
            aim: Aim::Word(AimWord::Explore),
            design: Some(DesignKind::SpaceFilling),
            ..ChoiceRequest::default()
        };
        assert_eq!(plan_request(Some((&request).into())), Ok(request));
    }

    #[test]
    fn what_is_left_out_has_the_defaults_of_a_request_file() {
        assert_eq!(plan_request(None), Ok(PlanRequest::default()));
        let parts = v1::PlanRequest {
            plates: Some(Default::default()),
            choice: Some(Default::default()),
            controls: Some(Default::default()),
            well: Some(Default::default()),
            deck: Some(Default::default()),
            ..Default::default()
        };
        assert_eq!(plan_request(Some(parts)), Ok(PlanRequest::default()));
    }

    #[test]
    fn faults_of_the_message_and_of_its_values_are_told_together() {
        let mut message = v1::PlanRequest::from(&request());
        let plates = message.plates.as_mut().expect("plates");
        (plates.wells, plates.columns_by) = (Some(95), v1::Axis::Additive.into());
        let choice = message.choice.as_mut().expect("choice");
        choice.draws = Some(-3);
        choice.pin[1].cell = -1;
        choice.limits[0].axis = 0;
        choice.allow_stop[1] = 4711;
        choice.aim = Some(v1::Aim {
            word: v1::AimWord::Explore.into(),
            hits: Some(1.0),
            ..Default::default()
        });
        message.deck.as_mut().expect("deck").smallest_nl = Some(f64::NAN);
        let faults = plan_request(Some(message)).expect_err("is refused");
        let mut told: Vec<_> = faults
            .iter()
            .map(|fault| (fault.place.field.as_str(), fault.code))
            .collect();
        told.sort_unstable();
        assert_eq!(
            told,
            [
                ("request.choice.aim", "VALUE_REPEATED"),
                ("request.choice.allow_stop[1]", "VALUE_UNKNOWN"),
                ("request.choice.draws", "VALUE_OUT_OF_RANGE"),
                ("request.choice.limits[0].axis", "VALUE_MISSING"),
                ("request.choice.pin[1].cell", "VALUE_OUT_OF_RANGE"),
                ("request.deck.smallest_nl", "VALUE_OUT_OF_RANGE"),
                ("request.plates.columns_by", "VALUE_UNKNOWN"),
                ("request.plates.wells", "VALUE_UNKNOWN"),
            ]
        );
    }
}
