//! A plan as files: CSV by RFC 4180 with units by UCUM in the headings, and JSON.

use crate::{Dose, Form, IonKind, Plan, PlannedWell, Plate, Reagent};

/// A file of a plan.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PlanFile {
    /// Name.
    pub name: &'static str,
    /// Bytes, UTF-8.
    pub bytes: Vec<u8>,
}

/// Why a plan could not be written as files.
#[derive(Debug, thiserror::Error)]
#[error("the plan cannot be written: {reason}")]
pub struct PlanFileError {
    reason: String,
}

impl From<csv::Error> for PlanFileError {
    fn from(error: csv::Error) -> PlanFileError {
        PlanFileError {
            reason: error.to_string(),
        }
    }
}

impl From<serde_json::Error> for PlanFileError {
    fn from(error: serde_json::Error) -> PlanFileError {
        PlanFileError {
            reason: error.to_string(),
        }
    }
}

impl Plan {
    /// All files of the plan.
    ///
    /// # Errors
    /// [`PlanFileError`] where a value cannot be written.
    pub fn files(&self) -> Result<Vec<PlanFile>, PlanFileError> {
        let file = |name: &'static str, bytes: Vec<u8>| PlanFile { name, bytes };
        let mut json = serde_json::to_vec_pretty(self)?;
        json.push(b'\n');
        Ok(vec![
            file("wells.csv", self.wells_csv()?),
            file("stocks.csv", self.stocks_csv()?),
            file("transfers.csv", self.transfers_csv()?),
            file("weighings.csv", self.weighings_csv()?),
            file("program.csv", self.program_csv()?),
            file("masses.csv", self.masses_csv()?),
            file("checks.csv", self.checks_csv()?),
            file("plan.json", json),
        ])
    }

    fn wells_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let heading = [
            "plate",
            "well",
            "content",
            "cell",
            "replicate",
            "substrate",
            "substrate_smiles",
            "substrate/umol",
            "base",
            "base/umol",
            "electrophile",
            "electrophile_smiles",
            "electrophile/umol",
            "additive",
            "additive/umol",
            "solvent",
            "medium_as_dosed",
            "temperature/Cel",
            "formation_temperature/Cel",
            "time/h",
            "dosing/min",
            "addition",
            "expected_yield",
            "p_hit",
            "yield_as_dosed",
            "reference_yield",
            "water_per_base",
            "worst_caution",
            "cautions",
            "note",
        ];
        write(
            &heading,
            self.wells().map(|(plate, well)| well_row(plate, well)),
        )
    }

    fn stocks_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let heading = [
            "stock",
            "role",
            "reagent",
            "form",
            "made_in",
            "concentration/(mol/L)",
            "made/uL",
            "weigh/mg",
            "molar_mass/(g/mol)",
            "mass_fraction",
            "bought_solution/uL",
            "bought_concentration/(mol/L)",
            "wells",
            "source_plate",
            "source_well",
            "fill/uL",
            "taken/uL",
            "viscosity/(mPa.s)",
            "density/(g/mL)",
            "vapour_pressure/kPa",
            "loses_5_percent_in/h",
            "keep",
            "hazard_statements",
            "notes",
        ];
        let rows = self.stocks.iter().flat_map(|stock| {
            let n = stock.sources.len().max(1);
            (0..n).map(move |i| {
                let source = stock.sources.get(i);
                let liquid = stock.liquid.as_ref();
                let bought = stock.take;
                // what is made is said once, in the row of the first source well
                let once = |value: Option<f64>| value.filter(|_| i == 0);
                vec![
                    text(&stock.label),
                    stock.role.name().to_owned(),
                    text(&stock.reagent),
                    stock.form.name().to_owned(),
                    text(&stock.solvent),
                    number((stock.concentration_m > 0.0).then_some(stock.concentration_m)),
                    number(once((stock.form != Form::Solid).then_some(stock.made_ul))),
                    number(once(stock.weigh_mg)),
                    number(stock.molar_mass_g_mol),
                    number(stock.weigh_mg.map(|_| stock.purity)),
                    number(once(bought.map(|(volume_ul, _)| volume_ul))),
                    number(bought.map(|(_, molar)| molar)),
                    stock.wells.to_string(),
                    source.map_or(String::new(), |source| source.plate.clone()),
                    source.map_or(String::new(), |source| source.well.to_string()),
                    number(source.map(|source| source.filled_ul)),
                    number(source.map(|source| source.taken_ul)),
                    number(liquid.map(|liquid| liquid.viscosity_mpa_s)),
                    number(liquid.map(|liquid| liquid.density_g_ml)),
                    number(liquid.map(|liquid| liquid.vapour_pressure_kpa)),
                    stock
                        .lasts_h
                        .map_or("unknown".to_owned(), |h| number(Some(h))),
                    text(&stock.keep),
                    text(&stock.hazards),
                    text(&stock.notes.join("; ")),
                ]
            })
        });
        write(&heading, rows)
    }

    fn transfers_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let heading = [
            "order_group",
            "source_plate",
            "source_well",
            "plate",
            "well",
            "volume/nL",
            "stock",
            "liquid",
        ];
        let rows = self.transfers.iter().map(|transfer| {
            let stock = transfer.stock.map(|stock| &self.stocks[stock]);
            vec![
                transfer.group.to_string(),
                transfer.source_plate.clone(),
                transfer.source_well.to_string(),
                transfer.plate.clone(),
                transfer.well.to_string(),
                number(Some(transfer.volume_nl)),
                stock.map_or(String::new(), |stock| stock.label.clone()),
                text(&transfer.liquid),
            ]
        });
        write(&heading, rows)
    }

    fn weighings_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let solids = self.wells().flat_map(|(plate, well)| {
            let of_solids = well.doses.iter().filter(|dose| dose.mass_mg > 0.0);
            of_solids.map(move |dose: &Dose| {
                let stock = &self.stocks[dose.stock];
                vec![
                    plate.name.clone(),
                    well.well.to_string(),
                    text(&stock.reagent),
                    number(Some(dose.mass_mg)),
                ]
            })
        });
        write(&["plate", "well", "solid", "mass/mg"], solids)
    }

    fn program_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let rows = self.program.iter().map(|step| {
            vec![
                step.plate.clone(),
                step.group.map_or(String::new(), |group| group.to_string()),
                text(&step.what),
                number(Some(step.temperature_c)),
                number(Some(step.wait_min)),
            ]
        });
        let heading = [
            "plate",
            "order_group",
            "step",
            "block_temperature/Cel",
            "then_wait/min",
        ];
        write(&heading, rows)
    }

    fn masses_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let heading = [
            "plate",
            "well",
            "species",
            "smiles",
            "formula",
            "expected_share",
            "monoisotopic/Da",
            "[M+H]+",
            "[M+Na]+",
            "[M+NH4]+",
            "[M-H]-",
            "isotopes",
            "uv",
            "esi_positive",
            "esi_negative",
            "other_method",
            "same_mass_as",
        ];
        let rows = self.wells().flat_map(|(plate, well)| {
            well.masses
                .species
                .iter()
                .enumerate()
                .map(move |(i, species)| {
                    let ion = |kind: IonKind| {
                        let found = species.ions.iter().find(|ion| ion.kind == kind);
                        found.map_or(String::new(), |ion| format!("{:.4}", ion.mz))
                    };
                    let seen = |by: &Option<crate::SeenBy>| {
                        by.as_ref().map_or("no".to_owned(), |by| by.group.clone())
                    };
                    let isotopes = species
                        .isotopes
                        .iter()
                        .map(|peak| format!("M{:+}: {:.1} %", peak.offset, 100.0 * peak.height));
                    let same = well.masses.clashes.iter().filter_map(|clash| {
                        let other = match (clash.one == i, clash.other == i) {
                            (true, _) => clash.other,
                            (_, true) => clash.one,
                            _ => return None,
                        };
                        Some(well.masses.species[other].name.clone())
                    });
                    vec![
                        plate.name.clone(),
                        well.well.to_string(),
                        species.name.clone(),
                        species.smiles.clone(),
                        species.formula.clone(),
                        number(Some(species.share)),
                        format!("{:.4}", species.monoisotopic_da),
                        ion(IonKind::Protonated),
                        ion(IonKind::Sodiated),
                        ion(IonKind::Ammoniated),
                        ion(IonKind::Deprotonated),
                        isotopes.collect::<Vec<_>>().join("; "),
                        seen(&species.detection.uv),
                        seen(&species.detection.positive),
                        seen(&species.detection.negative),
                        text(
                            species
                                .detection
                                .other_method
                                .as_deref()
                                .unwrap_or_default(),
                        ),
                        same.collect::<Vec<_>>().join("; "),
                    ]
                })
        });
        write(&heading, rows)
    }

    fn checks_csv(&self) -> Result<Vec<u8>, PlanFileError> {
        let precedence = vec![
            "warning".to_owned(),
            "safety".to_owned(),
            text(&self.precedence),
        ];
        let findings = self.findings.iter().map(|finding| {
            vec![
                finding.severity.clone(),
                finding.check.clone(),
                text(&finding.text),
            ]
        });
        write(
            &["severity", "check", "finding"],
            std::iter::once(precedence).chain(findings),
        )
    }
}

fn well_row(plate: &Plate, well: &PlannedWell) -> Vec<String> {
    let name =
        |reagent: &Option<Reagent>| reagent.as_ref().map_or(String::new(), |r| text(&r.name));
    let smiles =
        |reagent: &Option<Reagent>| reagent.as_ref().map_or(String::new(), |r| r.smiles.clone());
    let amount = |reagent: &Option<Reagent>| number(reagent.as_ref().map(|r| r.amount_umol));
    let medium: Vec<String> = well
        .medium
        .iter()
        .map(|(solvent, share)| format!("{solvent} {:.1} %", 100.0 * share))
        .collect();
    let cautions: Vec<String> = well
        .cautions
        .iter()
        .map(|caution| format!("{}: {}", caution.category, caution.text))
        .collect();
    vec![
        plate.name.clone(),
        well.well.to_string(),
        well.content.name().to_owned(),
        well.cell.to_string(),
        well.replicate.to_string(),
        name(&well.substrate),
        smiles(&well.substrate),
        amount(&well.substrate),
        name(&well.base),
        amount(&well.base),
        name(&well.electrophile),
        smiles(&well.electrophile),
        amount(&well.electrophile),
        name(&well.additive),
        amount(&well.additive),
        text(&well.solvent),
        medium.join("; "),
        number(Some(plate.temperature_c)),
        number(Some(plate.formation_temperature_c)),
        number(Some(plate.time_h)),
        number(Some(plate.dosing_min)),
        well.addition.clone(),
        number(well.expected_yield),
        number(well.p_hit),
        number(well.yield_as_dosed),
        number(well.reference_yield),
        number(well.water_per_base),
        well.cautions
            .first()
            .map_or(String::new(), |worst| worst.severity.clone()),
        text(&cautions.join("; ")),
        text(&well.note),
    ]
}

/// Text of a user that a spreadsheet must not take for a formula. SMILES are written as they are.
fn text(text: &str) -> String {
    match text.starts_with(['=', '+', '-', '@']) {
        true => format!("'{text}"),
        false => text.to_owned(),
    }
}

/// Four digits after the point at most, none that say nothing.
fn number(value: Option<f64>) -> String {
    value.map_or(String::new(), |value| {
        let text = format!("{value:.4}");
        match text.contains('.') {
            true => text.trim_end_matches('0').trim_end_matches('.').to_owned(),
            false => text,
        }
    })
}

fn write(
    heading: &[&str],
    rows: impl Iterator<Item = Vec<String>>,
) -> Result<Vec<u8>, PlanFileError> {
    let mut writer = csv::WriterBuilder::new()
        .terminator(csv::Terminator::CRLF)
        .from_writer(Vec::new());
    writer.write_record(heading)?;
    for row in rows {
        writer.write_record(row)?;
    }
    writer.into_inner().map_err(|error| PlanFileError {
        reason: error.to_string(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn formulas_are_neutralised_and_numbers_are_short() {
        assert_eq!(text("=HYPERLINK(\"x\")"), "'=HYPERLINK(\"x\")");
        assert_eq!(text("LDA"), "LDA");
        assert_eq!(number(Some(22.0)), "22");
        assert_eq!(number(Some(0.07)), "0.07");
        assert_eq!(number(Some(-20.0)), "-20");
        assert_eq!(number(None), "");
    }
}
