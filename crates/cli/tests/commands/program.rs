//! The program, its folder and what it says.

use std::fs;
use std::path::Path;
use std::process::{Command, Output, Stdio};

use serde_json::Value;
use tempfile::TempDir;

/// 2 × 2 × 2 × 2 cells; one electrophile, an allene, is not covered.
pub(crate) const CAMPAIGN: &str = r#"
title = "Sixteen cells, invented"
[substrates]
file = "substrates.csv"
[bases]
library = ["LDA", "K2CO3"]
[electrophiles]
library = ["MeI"]
smiles = ["C=C=C"]
[solvents]
library = ["THF", "DMF"]
[conditions]
temperature_c = 25
"#;

pub(crate) const SUBSTRATES: &str =
    "name,smiles\nmalonate,CCOC(=O)CC(=O)OCC\npropiophenone,CCC(=O)c1ccccc1\n";

pub(crate) fn folder() -> TempDir {
    let folder = TempDir::new().expect("a folder");
    fs::write(folder.path().join("campaign.toml"), CAMPAIGN).expect("written");
    fs::write(folder.path().join("substrates.csv"), SUBSTRATES).expect("written");
    folder
}

pub(crate) fn program(folder: &Path, arguments: &[&str]) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_enolattice"));
    command
        .current_dir(folder)
        .args(arguments)
        .env_remove("ENOLATTICE_DATA")
        .env_remove("ENOLATTICE_LOG");
    command
}

pub(crate) fn run(folder: &Path, arguments: &[&str]) -> Output {
    program(folder, arguments)
        .stdin(Stdio::null())
        .output()
        .expect("runs")
}

/// The stdout of a command that succeeds.
pub(crate) fn stdout(folder: &Path, arguments: &[&str]) -> String {
    let output = run(folder, arguments);
    let stderr = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(0), "{arguments:?}: {stderr}");
    String::from_utf8(output.stdout).expect("UTF-8")
}

pub(crate) fn json(folder: &Path, arguments: &[&str]) -> Value {
    let text = stdout(folder, arguments);
    serde_json::from_str(&text).unwrap_or_else(|error| panic!("{arguments:?}: {error}: {text}"))
}

/// The exit code and stderr of a command that must print nothing on stdout.
pub(crate) fn refused(folder: &Path, arguments: &[&str]) -> (Option<i32>, String) {
    let output = run(folder, arguments);
    assert_eq!(String::from_utf8_lossy(&output.stdout), "", "{arguments:?}");
    (
        output.status.code(),
        String::from_utf8(output.stderr).expect("UTF-8"),
    )
}

pub(crate) fn lines(text: &str) -> Vec<Value> {
    text.lines()
        .map(|line| serde_json::from_str(line).expect("a JSON line"))
        .collect()
}
