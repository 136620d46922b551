//! `plan`: from a ranking to filled plates.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::PlanOrder;
use enolattice_grid::FaultCode;
use enolattice_plate::{Plan as KeptPlan, PlanRequest, PlateFormat};
use enolattice_reagents::Library;
use enolattice_records::{Person, Structures, dataset, json, protobuf};

use super::EngineOptions;
use super::terms::TermsOptions;
use crate::campaign_file::read_text;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::JobRecord;
use crate::out_file::OutFile;
use crate::output::{print, print_json, talk};
use crate::plan_folder::PlanFolder;
use crate::text::{LetteredAxis, plan_page, plates_page, width};

/// Turn a job into plates that a robot can fill.
///
/// Chooses cells as a set (expected hits, what the plate would teach, spread), lays them out, works out stocks,
/// transfers and expected masses, and checks all of it. What the deck can do is declared in a request file; what is not
/// declared is not assumed. The plan is kept; `--kept PLAN` shows it again.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice plan JOB --wells 96 --out tonight\n  \
    enolattice plan JOB --request plan.toml\n  \
    enolattice plan JOB --request plan.toml --later\n  \
    enolattice plan --kept PLAN --show --by base\n  \
    enolattice plan --kept PLAN --ord plan.pb --person-email planner@example.org")]
pub(super) struct Plan {
    /// The job; `enolattice jobs` lists them.
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
    /// Let a job of its own make the plan once JOB has ended, and print its id; the plan will have the same one.
    #[arg(long, conflicts_with_all = ["kept", "out", "show", "ord"])]
    later: bool,
    /// Your id of this request: sent again, it gives the same job.
    #[arg(
        long,
        value_name = "ID",
        default_value = "",
        hide_default_value = true,
        requires = "later"
    )]
    request_id: String,
    /// Write the plan's files into this new folder.
    #[arg(long, value_name = "DIR")]
    out: Option<PathBuf>,
    /// Print the plates alone: what is in each well, by letters that a key explains.
    #[arg(long, conflicts_with = "json")]
    show: bool,
    /// What the letters of `--show` stand for.
    #[arg(
        long,
        value_enum,
        value_name = "AXIS",
        default_value_t,
        requires = "show"
    )]
    by: LetteredAxis,
    /// Write the plan as a dataset of the Open Reaction Database, `.pb` or `.json`.
    #[arg(long, value_name = "FILE", requires = "person_email")]
    ord: Option<PathBuf>,
    /// Who makes the record of `--ord`.
    #[arg(
        long,
        value_name = "NAME",
        default_value = "",
        hide_default_value = true,
        requires = "ord"
    )]
    person_name: String,
    /// E-mail address of who makes the record; the schema asks for it.
    #[arg(long, value_name = "ADDRESS", requires = "ord", value_parser = address)]
    person_email: Option<String>,
    /// Organisation of who makes the record.
    #[arg(
        long,
        value_name = "NAME",
        default_value = "",
        hide_default_value = true,
        requires = "ord"
    )]
    organization: String,
    /// Write over a file of `--ord` that is there already.
    #[arg(long, requires = "ord")]
    force: bool,
    #[command(flatten)]
    engine: EngineOptions,
    #[command(flatten)]
    terms: TermsOptions,
    /// Print the whole plan as JSON.
    #[arg(long)]
    json: bool,
}

impl Plan {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let request = self.request()?;
        let folder = self.out.as_deref().map(PlanFolder::new).transpose()?;
        let record = self.record()?;
        let client = Client::open(&self.engine, Need::Jobs).await?;
        if self.later {
            return self.order(client, request).await;
        }
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
        if let Some((form, file)) = record {
            self.write_record(&plan, form, &file)?;
        }
        if self.json {
            return print_json(&plan);
        }
        if self.show {
            return print(&plates_page(&plan, self.by, width()));
        }
        print(&plan_page(&plan))
    }

    /// Queues a job that makes the plan.
    async fn order(&self, client: Client, request: PlanRequest) -> Result<(), Fault> {
        let order = PlanOrder {
            job: self.job.clone().unwrap_or_default(),
            request,
            request_id: self.request_id.clone(),
            terms: self.terms.terms(),
        };
        let ordered = client.order_plan(order).await;
        client.close().await?;
        let job = ordered?;
        let engine = self.engine.repeated();
        talk(&format!(
            "ordered; next: enolattice watch {0}{engine}, then enolattice plan --kept {0}{engine}",
            job.job
        ));
        match self.json {
            true => print_json(&JobRecord::from(job)),
            false => print(&job.job),
        }
    }

    /// Where the dataset goes and in which form.
    fn record(&self) -> Result<Option<(RecordForm, OutFile)>, Fault> {
        let Some(path) = &self.ord else {
            return Ok(None);
        };
        let form = match path.extension().and_then(|ending| ending.to_str()) {
            Some("pb") => RecordForm::Protobuf,
            Some("json") => RecordForm::Json,
            _ => {
                let (reason, remedy) = (
                    "does not say in which form it is to be written",
                    "name a file that ends on .pb or .json",
                );
                let code = FaultCode::ValueUnknown.name();
                let shown = path.display().to_string();
                return Err(Fault::option("--ord", &shown, code, reason, remedy));
            }
        };
        Ok(Some((form, OutFile::new("--ord", path, self.force)?)))
    }

    fn write_record(&self, plan: &KeptPlan, form: RecordForm, file: &OutFile) -> Result<(), Fault> {
        let person = Person {
            name: self.person_name.clone(),
            email: self.person_email.clone().unwrap_or_default(),
            organization: self.organization.clone(),
        };
        let library = Library::builtin().map_err(|error| Fault::service(error.to_string()))?;
        let dataset = dataset(plan, &person, &Structures::of(&library));
        let bytes = match form {
            RecordForm::Protobuf => protobuf(&dataset),
            RecordForm::Json => json(&dataset)
                .map_err(|error| Fault::service(error.to_string()))?
                .into_bytes(),
        };
        file.write(&bytes)?;
        talk(&format!(
            "wrote {} reactions to {}",
            dataset.reactions.len(),
            file.shown().unwrap_or_default()
        ));
        Ok(())
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

/// Form of a dataset.
#[derive(Clone, Copy, Debug)]
enum RecordForm {
    Protobuf,
    Json,
}

/// An address as the schema takes it: something, an @, something.
fn address(text: &str) -> Result<String, String> {
    match text.split_once('@') {
        Some((name, host)) if !name.is_empty() && host.contains('.') => Ok(text.to_owned()),
        _ => Err("is no e-mail address".to_owned()),
    }
}
