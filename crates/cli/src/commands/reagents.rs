//! `reagents`: the library.

use clap::Args;

use super::EngineOptions;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::json::ReagentRecord;
use crate::output::{print, print_json, talk};
use crate::text::{reagent_table, safety_notice};

/// List the library of bases, solvents and electrophiles.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice reagents amide\n  \
    enolattice reagents --json")]
pub(super) struct Reagents {
    /// Only those with this in a name, synonym or CAS number.
    #[arg(default_value = "", hide_default_value = true)]
    word: String,
    #[command(flatten)]
    engine: EngineOptions,
    /// Print JSON: a list.
    #[arg(long)]
    json: bool,
}

impl Reagents {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let client = Client::open(&self.engine, Need::Chemistry).await?;
        let rows = client.reagents(&self.word).await;
        client.close().await?;
        let rows = rows?;
        if self.json {
            return print_json(
                &rows
                    .into_iter()
                    .map(ReagentRecord::from)
                    .collect::<Vec<_>>(),
            );
        }
        if rows.is_empty() {
            talk(&format!("the library has nothing like `{}`", self.word));
            return Ok(());
        }
        print(&format!("{}\n\n{}", reagent_table(&rows), safety_notice()))
    }
}
