//! A request from its text, with every value in range.

use enolattice_grid::{FaultCode, InputError, Place};
use enolattice_model::Category;

use super::{Aim, PlanRequest};

/// A fault of a request.
pub(crate) fn fault(
    code: FaultCode,
    field: impl Into<String>,
    value: impl ToString,
    reason: impl Into<String>,
    remedy: impl Into<String>,
) -> InputError {
    InputError::of_field(code.name(), field, value.to_string(), reason, remedy)
}

/// Longest text of a request, and of a line in it, bytes.
const LONGEST: usize = 1 << 20;
const LONGEST_TEXT: usize = 500;

impl PlanRequest {
    /// Reads a request file (TOML). An empty text asks for the defaults.
    ///
    /// # Errors
    /// A fault of form with its line, or every value out of range.
    pub fn read(name: &str, text: &str) -> Result<PlanRequest, Vec<InputError>> {
        if text.len() > LONGEST {
            let reason = "a request has at most 1 MiB";
            let remedy = "leave out what is no request";
            let code = FaultCode::CampaignTooLarge;
            return Err(vec![fault(code, name, text.len(), reason, remedy)]);
        }
        let request: PlanRequest = toml::from_str(text).map_err(|error| {
            let line = error.span().map_or(0, |span| {
                text[..span.start].matches('\n').count() as u32 + 1
            });
            vec![InputError {
                place: Place {
                    file: name.to_owned(),
                    line,
                    field: "request".to_owned(),
                },
                value: String::new(),
                code: FaultCode::CampaignSyntax.name(),
                reason: error.message().replace('\n', " "),
                remedy: "the page on plates lists every key with its range".to_owned(),
            }]
        })?;
        let faults = request.faults();
        match faults.is_empty() {
            true => Ok(request),
            false => Err(faults),
        }
    }

    /// Every value that is out of its range.
    pub fn faults(&self) -> Vec<InputError> {
        let mut faults = Vec::new();
        self.check_ranges(&mut faults);
        self.check_words(&mut faults);
        let by_worth = self.choice.pin.is_empty() && self.choice.limits.is_empty();
        if self.choice.design.is_some() && !by_worth {
            faults.push(fault(
                FaultCode::PlanImpossible,
                "choice.design",
                "",
                "a classical design knows neither pins nor limits",
                "leave out `choice.pin` and `choice.limits`, or the design",
            ));
        }
        if let Some(words) = self.deck.material_fault() {
            faults.push(words);
        }
        faults
    }

    fn check_ranges(&self, faults: &mut Vec<InputError>) {
        let PlanRequest {
            plates,
            choice,
            controls,
            well,
            deck,
            ..
        } = self;
        let mut within = |field: &str, value: f64, least: f64, most: f64, unit: &str| {
            if !(least..=most).contains(&value) {
                let reason = format!("must be {least} to {most}{unit}");
                let code = FaultCode::ValueOutOfRange;
                faults.push(fault(
                    code,
                    field,
                    value,
                    reason,
                    "give a number in this range",
                ));
            }
        };
        within("plates.count", plates.count.into(), 1.0, 32.0, "");
        within("choice.replicates", choice.replicates.into(), 1.0, 12.0, "");
        within(
            "choice.shortlist",
            choice.shortlist.into(),
            24.0,
            50_000.0,
            " cells",
        );
        within("choice.draws", choice.draws.into(), 16.0, 256.0, "");
        if let Aim::Numbers(weights) = choice.aim {
            for (field, weight) in [
                ("choice.aim.hits", weights.hits),
                ("choice.aim.information", weights.information),
                ("choice.aim.spread", weights.spread),
            ] {
                within(field, weight, 0.0, 1e6, "");
            }
            let sum = weights.hits + weights.information + weights.spread;
            within(
                "choice.aim",
                sum,
                f64::MIN_POSITIVE,
                f64::MAX,
                ", not all zero",
            );
        }
        for (i, limit) in choice.limits.iter().enumerate() {
            let most = limit.most.unwrap_or(u32::MAX).into();
            let field = format!("choice.limits[{i}].least");
            within(&field, limit.least.into(), 0.0, most, ", the upper limit");
        }
        let room = plates.wells.wells() as f64 - 1.0;
        within(
            "controls",
            controls.wells().into(),
            0.0,
            room,
            " wells of a plate",
        );
        if let Some(volume) = well.volume_ul {
            within("well.volume_ul", volume, 0.5, 20_000.0, " uL");
        }
        within("well.quench_share", well.quench_share, 0.0, 5.0, "");
        within("well.sample_ul", well.sample_ul, 0.0, 1_000.0, " uL");
        within("well.diluent_ul", well.diluent_ul, 0.0, 5_000.0, " uL");
        for (field, value, least, most, unit) in deck.ranges() {
            within(field, value, least, most, unit);
        }
    }

    fn check_words(&self, faults: &mut Vec<InputError>) {
        for (i, word) in self.choice.allow_stop.iter().enumerate() {
            if !Category::ALL.iter().any(|category| category.name() == word) {
                let names = Category::ALL.map(Category::name).join(", ");
                faults.push(fault(
                    FaultCode::ValueUnknown,
                    format!("choice.allow_stop[{i}]"),
                    word,
                    "is no category of caution",
                    format!("give one of {names}"),
                ));
            }
        }
        for (field, text) in [
            ("title", &self.title),
            ("well.quench", &self.well.quench),
            ("well.diluent", &self.well.diluent),
            ("well.internal_standard", &self.well.internal_standard),
        ] {
            if text.len() > LONGEST_TEXT || text.chars().any(char::is_control) {
                let shown: String = text.chars().filter(|c| !c.is_control()).take(40).collect();
                let reason = format!("must be one line of at most {LONGEST_TEXT} bytes");
                let code = FaultCode::ValueOutOfRange;
                faults.push(fault(code, field, shown, reason, "shorten it"));
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::PlateFormat;

    fn refused(text: &str) -> Vec<String> {
        let faults = PlanRequest::read("plan.toml", text).expect_err("a request at fault");
        faults.iter().map(ToString::to_string).collect()
    }

    #[test]
    fn an_empty_request_asks_for_one_plate_of_96_wells() {
        let request = PlanRequest::read("plan.toml", "").expect("defaults");
        assert_eq!(
            (request.plates.wells, request.plates.count),
            (PlateFormat::Wells96, 1)
        );
    }

    #[test]
    fn an_aim_is_a_word_or_numbers() {
        let word = PlanRequest::read("", "[choice]\naim = \"explore\"").expect("a word");
        let numbers = "[choice]\naim = { hits = 0.3, information = 0.5, spread = 0.2 }";
        let numbers = PlanRequest::read("", numbers).expect("numbers");
        assert_eq!(word.choice.aim.weights(), numbers.choice.aim.weights());
    }

    #[test]
    fn every_value_out_of_range_is_named_at_once() {
        let faults = refused(
            "[plates]\ncount = 0\n[choice]\nreplicates = 99\nallow_stop = [\"boredom\"]\n[deck]\nsmallest_nl = -1.0",
        );
        for part in [
            "plates.count",
            "choice.replicates",
            "boredom",
            "deck.smallest_nl",
        ] {
            assert!(
                faults.iter().any(|fault| fault.contains(part)),
                "{part}: {faults:?}"
            );
        }
    }

    #[test]
    fn a_plate_that_nobody_sells_is_refused() {
        let faults = refused("[plates]\nwells = 95");
        assert!(
            faults[0].starts_with("plan.toml:2: ") && faults[0].contains("24, 96, 384"),
            "{faults:?}"
        );
    }

    #[test]
    fn an_unknown_key_is_refused_with_its_line() {
        let faults = refused("title = \"x\"\n[plates]\nwels = 96");
        assert!(faults[0].starts_with("plan.toml:3: "), "{faults:?}");
        assert!(faults[0].contains("wels"), "{faults:?}");
    }
}
