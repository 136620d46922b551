//! `plan`: from a ranking to filled plates.

use std::path::PathBuf;

use clap::Args;
use enolattice_grid::FaultCode;
use enolattice_plate::{PlanRequest, PlateFormat};

use super::EngineOptions;
use crate::campaign_file::read_text;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::output::{print, print_json, talk};
use crate::plan_folder::PlanFolder;
use crate::text::plan_page;

/// Turn a job into plates that a robot can fill.
///
/// Chooses cells as a set (expected hits, what the plate would teach, spread), lays them out, works out stocks,
/// transfers and expected masses, and checks all of it. What the deck can do is declared in a request file; what is not
/// declared is not assumed. The plan is kept; `--kept PLAN` shows it again.
#[derive(Debug, Args)]
pub(super) struct Plan {
    /// The job.
    #[arg(required_unless_present = "kept")]
    job: Option<String>,
    /// Make no new plan but show this one, which was kept; `plans` lists them.
    #[arg(long, value_name = "PLAN", conflicts_with_all = ["job", "request", "wells", "plates", "seed"])]
    kept: Option<String>,
    /// Request file (TOML): plates, choice, controls, wells, deck.
    #[arg(long, value_name = "FILE")]
    request: Option<PathBuf>,
    /// Wells of a plate: 24, 96, 384 or 1536; over the request's.
    #[arg(long, value_name = "N")]
    wells: Option<u16>,
    /// Number of plates; over the request's.
    #[arg(long, value_name = "N")]
    plates: Option<u32>,
    /// Seed of the layout and of all draws; over the request's.
    #[arg(long, value_name = "N")]
    seed: Option<u64>,
    /// Write the plan's files into this new folder.
    #[arg(long, value_name = "DIR")]
    out: Option<PathBuf>,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print the whole plan as JSON.
    #[arg(long)]
    json: bool,
}

impl Plan {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let request = self.request()?;
        let folder = self.out.as_deref().map(PlanFolder::new).transpose()?;
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let planned = match &self.kept {
            Some(plan) => client.kept_plan(plan).await,
            None => {
                client
                    .plan(self.job.as_deref().unwrap_or_default(), request)
                    .await
            }
        };
        client.close().await?;
        let plan = planned?;
        if self.kept.is_none() {
            talk(&format!("kept as plan {}", plan.id));
        }
        if let Some(folder) = folder {
            let files = plan
                .files()
                .map_err(|error| Fault::service(error.to_string()))?;
            folder.write(&files)?;
            let names: Vec<&str> = files.iter().map(|file| file.name).collect();
            talk(&format!("wrote {} to {}", names.join(", "), folder.shown()));
        }
        if self.json {
            return print_json(&plan);
        }
        print(&plan_page(&plan))
    }

    /// The request of the file, with what the command line says over it.
    fn request(&self) -> Result<PlanRequest, Fault> {
        let mut request = match &self.request {
            None => PlanRequest::default(),
            Some(path) => {
                let (name, text) = read_text("--request", path)?;
                PlanRequest::read(&name, &text).map_err(Fault::Input)?
            }
        };
        if let Some(wells) = self.wells {
            request.plates.wells = PlateFormat::try_from(wells).map_err(|_| {
                let (reason, remedy) = ("no plate has so many wells", "give 24, 96, 384 or 1536");
                let code = FaultCode::ValueUnknown.name();
                Fault::option("--wells", &wells.to_string(), code, reason, remedy)
            })?;
        }
        if let Some(plates) = self.plates {
            request.plates.count = plates;
        }
        if let Some(seed) = self.seed {
            request.seed = seed;
        }
        let faults = request.faults();
        match faults.is_empty() {
            true => Ok(request),
            false => Err(Fault::Input(faults)),
        }
    }
}
