//! The head of a plan.

use enolattice_model::Severity;
use enolattice_plate::{Finding, Gains, LeftOut, Movements, Plan, Plate, ProgramStep, Worth};

use super::balance::{balance, balance_message};
use super::{given, plan_request};
use crate::convert::job::{timestamp, unix_ms};
use crate::convert::{ConversionError, enums, numbers};
use crate::v1;

impl From<&Plan> for v1::Plan {
    fn from(plan: &Plan) -> Self {
        let Plan {
            precedence,
            id,
            made_unix_ms,
            title,
            job,
            campaign,
            model,
            request,
            target,
            volume_ul,
            plates,
            gains,
            left_out,
            stocks,
            program,
            transfers: _,
            movements,
            findings,
        } = plan;
        v1::Plan {
            plan_id: id.clone(),
            job_id: job.clone(),
            create_time: (*made_unix_ms > 0).then(|| timestamp(*made_unix_ms)),
            title: title.clone(),
            campaign_title: campaign.clone(),
            model_fingerprint: model.clone(),
            precedence: precedence.clone(),
            request: Some(request.into()),
            yield_at_least: *target,
            volume_ul: *volume_ul,
            plates: plates.iter().map(Into::into).collect(),
            gains: Some(gains.into()),
            left_out: left_out.iter().map(left_out_message).collect(),
            program: program.iter().map(step_message).collect(),
            movements: Some(movements_message(movements)),
            findings: findings.iter().map(finding_message).collect(),
            stock_count: numbers::index_to_wire(stocks.len()),
        }
    }
}

/// The plan of a head, without wells, stocks and transfers.
pub(super) fn headed(head: v1::Plan) -> Result<Plan, ConversionError> {
    let request = plan_request(head.request).map_err(|faults| ConversionError::Unknown {
        field: "Plan.request",
        value: faults.first().map(ToString::to_string).unwrap_or_default(),
    })?;
    let plates = head.plates.into_iter().map(plate);
    let left_out = head.left_out.into_iter().map(left_out);
    let program = head.program.into_iter().map(step);
    let findings = head.findings.into_iter().map(finding);
    Ok(Plan {
        precedence: head.precedence,
        id: head.plan_id,
        made_unix_ms: match head.create_time {
            Some(time) => unix_ms("Plan.create_time", &time)?,
            None => 0,
        },
        title: head.title,
        job: head.job_id,
        campaign: head.campaign_title,
        model: head.model_fingerprint,
        request,
        target: head.yield_at_least,
        volume_ul: head.volume_ul,
        plates: plates.collect::<Result<_, _>>()?,
        gains: given("Plan.gains", head.gains)?.try_into()?,
        left_out: left_out.collect::<Result<_, _>>()?,
        stocks: Vec::new(),
        program: program.collect::<Result<_, _>>()?,
        transfers: Vec::new(),
        movements: movements(given("Plan.movements", head.movements)?)?,
        findings: findings.collect::<Result<_, _>>()?,
    })
}

impl From<&Plate> for v1::PlannedPlate {
    fn from(plate: &Plate) -> Self {
        v1::PlannedPlate {
            name: plate.name.clone(),
            temperature_c: plate.temperature_c,
            formation_temperature_c: plate.formation_temperature_c,
            time_h: plate.time_h,
            dosing_min: plate.dosing_min,
            well_count: numbers::index_to_wire(plate.wells.len()),
            balance: Some(balance_message(&plate.balance)),
        }
    }
}

fn plate(plate: v1::PlannedPlate) -> Result<Plate, ConversionError> {
    Ok(Plate {
        name: plate.name,
        temperature_c: plate.temperature_c,
        formation_temperature_c: plate.formation_temperature_c,
        time_h: plate.time_h,
        dosing_min: plate.dosing_min,
        wells: Vec::new(),
        balance: balance(given("PlannedPlate.balance", plate.balance)?)?,
    })
}

impl From<&Gains> for v1::ChoiceGains {
    fn from(gains: &Gains) -> Self {
        let [unlimited_relative, top_list_relative, random_relative] = gains.relative;
        v1::ChoiceGains {
            chosen: Some(worth_message(&gains.chosen)),
            unlimited: Some(worth_message(&gains.unlimited)),
            top_list: Some(worth_message(&gains.top_list)),
            random: Some(worth_message(&gains.random)),
            unlimited_relative,
            top_list_relative,
            random_relative,
            at_least_of_best: gains.at_least_of_best,
            shortlist: numbers::to_wire(gains.shortlist as u64),
            draws: numbers::index_to_wire(gains.draws),
            exchanged: numbers::to_wire(gains.exchanged as u64),
        }
    }
}

impl TryFrom<v1::ChoiceGains> for Gains {
    type Error = ConversionError;

    fn try_from(gains: v1::ChoiceGains) -> Result<Self, ConversionError> {
        Ok(Gains {
            chosen: worth(given("ChoiceGains.chosen", gains.chosen)?),
            unlimited: worth(given("ChoiceGains.unlimited", gains.unlimited)?),
            top_list: worth(given("ChoiceGains.top_list", gains.top_list)?),
            random: worth(given("ChoiceGains.random", gains.random)?),
            relative: [
                gains.unlimited_relative,
                gains.top_list_relative,
                gains.random_relative,
            ],
            at_least_of_best: gains.at_least_of_best,
            shortlist: numbers::from_wire("ChoiceGains.shortlist", gains.shortlist)?,
            draws: numbers::from_wire("ChoiceGains.draws", gains.draws)?,
            exchanged: numbers::from_wire("ChoiceGains.exchanged", gains.exchanged)?,
        })
    }
}

fn worth_message(worth: &Worth) -> v1::ChoiceWorth {
    let Worth {
        units_with_hit,
        cells_that_hit,
        mean_yield,
        information_nats,
        spread,
    } = *worth;
    v1::ChoiceWorth {
        units_with_hit,
        cells_that_hit,
        mean_yield,
        information_nats,
        spread,
    }
}

fn worth(worth: v1::ChoiceWorth) -> Worth {
    Worth {
        units_with_hit: worth.units_with_hit,
        cells_that_hit: worth.cells_that_hit,
        mean_yield: worth.mean_yield,
        information_nats: worth.information_nats,
        spread: worth.spread,
    }
}

fn left_out_message(left: &LeftOut) -> v1::LeftOut {
    v1::LeftOut {
        reason: left.reason.clone(),
        cells: numbers::to_wire(left.cells),
    }
}

fn left_out(left: v1::LeftOut) -> Result<LeftOut, ConversionError> {
    Ok(LeftOut {
        reason: left.reason,
        cells: numbers::from_wire("LeftOut.cells", left.cells)?,
    })
}

fn step_message(step: &ProgramStep) -> v1::ProgramStep {
    v1::ProgramStep {
        plate: step.plate.clone(),
        group: step
            .group
            .map(|group| numbers::index_to_wire(group as usize)),
        what: step.what.clone(),
        temperature_c: step.temperature_c,
        wait_min: step.wait_min,
    }
}

fn step(step: v1::ProgramStep) -> Result<ProgramStep, ConversionError> {
    let group = step
        .group
        .map(|group| numbers::from_wire("ProgramStep.group", group));
    Ok(ProgramStep {
        plate: step.plate,
        group: group.transpose()?,
        what: step.what,
        temperature_c: step.temperature_c,
        wait_min: step.wait_min,
    })
}

fn movements_message(movements: &Movements) -> v1::Movements {
    v1::Movements {
        uptakes: numbers::to_wire(movements.uptakes as u64),
        deliveries: numbers::to_wire(movements.deliveries as u64),
        transfers: numbers::to_wire(movements.transfers as u64),
    }
}

fn movements(movements: v1::Movements) -> Result<Movements, ConversionError> {
    Ok(Movements {
        uptakes: numbers::from_wire("Movements.uptakes", movements.uptakes)?,
        deliveries: numbers::from_wire("Movements.deliveries", movements.deliveries)?,
        transfers: numbers::from_wire("Movements.transfers", movements.transfers)?,
    })
}

fn finding_message(finding: &Finding) -> v1::Finding {
    v1::Finding {
        severity: severity_message(&finding.severity),
        check: finding.check.clone(),
        text: finding.text.clone(),
    }
}

fn finding(finding: v1::Finding) -> Result<Finding, ConversionError> {
    Ok(Finding {
        severity: severity("Finding.severity", finding.severity)?,
        check: finding.check,
        text: finding.text,
    })
}

/// A severity by its name.
pub(super) fn severity_message(name: &str) -> i32 {
    let severity = Severity::ALL.into_iter().find(|known| known.name() == name);
    severity
        .map_or(v1::CautionSeverity::Unspecified, Into::into)
        .into()
}

/// The name of a severity.
pub(super) fn severity(field: &'static str, number: i32) -> Result<String, ConversionError> {
    let severity = enums::from_wire::<_, v1::CautionSeverity>(field, &Severity::ALL, number)?;
    Ok(severity.name().to_owned())
}
