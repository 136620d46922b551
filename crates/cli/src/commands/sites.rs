//! `sites`: acidic sites of molecules.

use std::io::{BufRead, IsTerminal};

use clap::Args;
use enolattice_grid::{InputError, Place};

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::MoleculeSites;
use crate::output::{print, print_json};
use crate::text::molecule_page;

/// Find the acidic sites of molecules, with pKa on the DMSO scale.
///
/// Atoms count from 0 in the order of the SMILES.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice sites 'CC(=O)CC(C)=O'\n  \
    enolattice sites --reasons < molecules.smi")]
pub(super) struct Sites {
    /// Molecules; none: one a line from stdin.
    smiles: Vec<String>,
    #[command(flatten)]
    engine: EngineOptions,
    /// Add the terms of each estimate and the measured acids most like it.
    #[arg(long)]
    reasons: bool,
    /// Print JSON: a list; the reasons are in it.
    #[arg(long)]
    json: bool,
}

impl Sites {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let (smiles, places) = self.molecules()?;
        let client = Client::open(&self.engine, Need::Chemistry).await?;
        let found = client
            .sites(&smiles)
            .await
            .map_err(|fault| placed(fault, &places));
        client.close().await?;
        let molecules: Vec<MoleculeSites> = found?.into_iter().map(MoleculeSites::from).collect();
        if self.json {
            return print_json(&molecules);
        }
        let page = |molecule: &MoleculeSites| molecule_page(molecule, self.reasons);
        let pages: Vec<String> = molecules.iter().map(page).collect();
        print(&pages.join("\n\n"))
    }

    /// The molecules and where each was written.
    fn molecules(&self) -> Result<(Vec<String>, Vec<Place>), Fault> {
        if !self.smiles.is_empty() {
            let places = (1..=self.smiles.len())
                .map(|i| Place {
                    field: format!("SMILES {i}"),
                    ..Place::default()
                })
                .collect();
            return Ok((self.smiles.clone(), places));
        }
        let stdin = std::io::stdin();
        if stdin.is_terminal() {
            let remedy = "give SMILES as arguments, or one a line on stdin";
            return Err(Fault::option(
                "SMILES",
                "",
                "VALUE_MISSING",
                "no molecule is given",
                remedy,
            ));
        }
        let (mut smiles, mut places) = (Vec::new(), Vec::new());
        for (line, text) in (1..).zip(stdin.lock().lines()) {
            let text = text.map_err(|error| {
                Fault::option(
                    "stdin",
                    "",
                    "FILE_SYNTAX",
                    &error.to_string(),
                    "give text in UTF-8",
                )
            })?;
            if !text.trim().is_empty() {
                smiles.push(text.trim().to_owned());
                places.push(Place {
                    file: "stdin".to_owned(),
                    line,
                    field: "smiles".to_owned(),
                });
            }
        }
        Ok((smiles, places))
    }
}

/// Puts each fault, which names its molecule as `smiles[i]`, where the molecule was written.
fn placed(fault: Fault, places: &[Place]) -> Fault {
    let place = |fault: InputError| {
        let number = fault
            .place
            .field
            .strip_prefix("smiles[")
            .and_then(|rest| rest.strip_suffix(']'));
        let place = number
            .and_then(|number| places.get(number.parse::<usize>().ok()?))
            .cloned();
        InputError {
            place: place.unwrap_or(fault.place),
            ..fault
        }
    };
    match fault {
        Fault::Input(faults) => Fault::Input(faults.into_iter().map(place).collect()),
        other => other,
    }
}
