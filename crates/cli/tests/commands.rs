//! The program from outside: exit codes, streams, JSON, embedded and on a server.

use std::fs;
use std::io::{BufRead, BufReader, Write};
use std::path::Path;
use std::process::{Child, Command, Output, Stdio};

use serde_json::Value;
use tempfile::TempDir;

/// 2 × 2 × 2 × 2 cells; one electrophile, an epoxide, is not covered.
const CAMPAIGN: &str = r#"
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
const SUBSTRATES: &str = "name,smiles\nmalonate,CCOC(=O)CC(=O)OCC\npropiophenone,CCC(=O)c1ccccc1\n";

fn folder() -> TempDir {
    let folder = TempDir::new().expect("a folder");
    fs::write(folder.path().join("campaign.toml"), CAMPAIGN).expect("written");
    fs::write(folder.path().join("substrates.csv"), SUBSTRATES).expect("written");
    folder
}

fn program(folder: &Path, arguments: &[&str]) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_enolattice"));
    command
        .current_dir(folder)
        .args(arguments)
        .env_remove("ENOLATTICE_DATA")
        .env_remove("ENOLATTICE_LOG");
    command
}

fn run(folder: &Path, arguments: &[&str]) -> Output {
    program(folder, arguments)
        .stdin(Stdio::null())
        .output()
        .expect("runs")
}

/// The stdout of a command that succeeds.
fn stdout(folder: &Path, arguments: &[&str]) -> String {
    let output = run(folder, arguments);
    let stderr = String::from_utf8_lossy(&output.stderr);
    assert_eq!(output.status.code(), Some(0), "{arguments:?}: {stderr}");
    String::from_utf8(output.stdout).expect("UTF-8")
}

fn json(folder: &Path, arguments: &[&str]) -> Value {
    let text = stdout(folder, arguments);
    serde_json::from_str(&text).unwrap_or_else(|error| panic!("{arguments:?}: {error}: {text}"))
}

/// The exit code and stderr of a command that must print nothing on stdout.
fn refused(folder: &Path, arguments: &[&str]) -> (Option<i32>, String) {
    let output = run(folder, arguments);
    assert_eq!(String::from_utf8_lossy(&output.stdout), "", "{arguments:?}");
    (
        output.status.code(),
        String::from_utf8(output.stderr).expect("UTF-8"),
    )
}

fn lines(text: &str) -> Vec<Value> {
    text.lines()
        .map(|line| serde_json::from_str(line).expect("a JSON line"))
        .collect()
}

#[test]
fn a_campaign_from_file_to_explanation() {
    let folder = folder();
    let folder = folder.path();
    let screened = json(folder, &["screen", "campaign.toml", "--json"]);
    assert_eq!(screened["job"]["cells"], 16);
    assert_eq!(screened["job"]["cells_done"], 16);
    assert_eq!(screened["job"]["state"], "done");
    assert_eq!(screened["cells_not_covered"], 8);
    assert_eq!(
        screened["best_of_each_substrate"].as_array().map(Vec::len),
        Some(2)
    );
    assert!(
        folder.join("enolattice-data").is_dir(),
        "results are kept beside the campaign"
    );

    let jobs = json(folder, &["jobs", "--json"]);
    assert_eq!(jobs[0], screened["job"]);
    let job = jobs[0]["job"].as_str().expect("an id");

    let ranked = lines(&stdout(folder, &["rank", job, "--json", "--limit", "0"]));
    assert_eq!(ranked.len(), 16);
    let cells: std::collections::BTreeSet<_> =
        ranked.iter().map(|row| row["cell"].as_u64()).collect();
    assert_eq!(cells.len(), 16, "each cell once");
    let yields: Vec<f64> = ranked
        .iter()
        .map(|row| row["expected_yield"].as_f64().unwrap_or(-1.0))
        .collect();
    assert!(yields.is_sorted_by(|a, b| a >= b), "{yields:?}");
    for row in &ranked {
        let covered = row["electrophile"] == "MeI";
        assert_eq!(row["expected_yield"].is_number(), covered, "{row}");
        assert_eq!(row["p_hit"].is_number(), covered, "{row}");
    }
    let skipped = lines(&stdout(
        folder,
        &["rank", job, "--json", "--limit", "3", "--skip", "2"],
    ));
    assert_eq!(skipped, ranked[2..5]);
    let filtered = [
        "rank",
        job,
        "--json",
        "--filter",
        "base = LDA AND solvent = THF OR solvent = \"DMF\" AND expected_yield:*",
    ];
    assert_eq!(lines(&stdout(folder, &filtered)).len(), 4);
    let best = lines(&stdout(
        folder,
        &[
            "rank",
            job,
            "--json",
            "--best-per",
            "solvent",
            "--order",
            "p_hit",
        ],
    ));
    assert_eq!(best.len(), 2);

    let cell = ranked[0]["cell"].to_string();
    let explained = json(folder, &["explain", job, &cell, "--json"]);
    assert_eq!(explained["cell"]["cell"], ranked[0]["cell"]);
    assert_eq!(explained["cell"]["base"], ranked[0]["base"]);
    assert_eq!(explained["model"], jobs[0]["model_fingerprint"]);
    let (told, stored) = (
        explained["expected_yield"].as_f64(),
        ranked[0]["expected_yield"].as_f64(),
    );
    assert!(
        (told.expect("known") - stored.expect("known")).abs() < 1.0 / 65534.0,
        "{told:?} {stored:?}"
    );
}

#[test]
fn tables_are_for_chemists_and_end_with_the_safety_notice() {
    let folder = folder();
    let page = stdout(
        folder.path(),
        &["screen", "campaign.toml", "--data", "kept"],
    );
    for part in [
        "16 cells in",
        "8 not covered",
        "The top 16 cells",
        "The best cell of each substrate",
        "T/°C",
        "malonate",
    ] {
        assert!(page.contains(part), "{part}: {page}");
    }
    assert!(page.contains("no substitute for a hazard assessment"));
    assert!(
        page.lines().all(|line| line.chars().count() <= 200),
        "{page}"
    );
    let reagents = stdout(folder.path(), &["reagents", "diisopropyl"]);
    assert!(reagents.contains("LDA"), "{reagents}");
}

#[test]
fn a_given_cell_needs_no_job_and_leaves_nothing_behind() {
    let folder = TempDir::new().expect("a folder");
    let given = [
        "explain",
        "--json",
        "--substrate",
        "CCOC(=O)CC(=O)OCC",
        "--base",
        "lithium diisopropylamide",
        "--electrophile",
        "CI",
        "--solvent",
        "C1CCOC1",
        "--temperature-c",
        "-78",
        "--time-h",
        "2",
    ];
    let explained = json(folder.path(), &given);
    assert_eq!(explained["product_formula"], "C8H14O4");
    assert_eq!(explained["cell"]["base"], "LDA");
    assert_eq!(explained["cell"]["solvent"], "THF");
    assert_eq!(explained["cell"]["cell"], Value::Null);
    assert_eq!(explained["cell"]["addition"], "substrate into base");
    let page = stdout(
        folder.path(),
        &given
            .iter()
            .copied()
            .filter(|word| *word != "--json")
            .collect::<Vec<_>>(),
    );
    for heading in [
        "Cell",
        "Numbers",
        "Product",
        "Acidic sites",
        "Rates",
        "Losses",
        "Cautions",
        "Limits",
    ] {
        assert!(
            page.lines().any(|line| line.starts_with(heading)),
            "{heading}: {page}"
        );
    }
    assert_eq!(
        fs::read_dir(folder.path()).expect("readable").count(),
        0,
        "no data directory was made"
    );
}

#[test]
fn sites_from_arguments_and_stdin_are_the_same() {
    let folder = TempDir::new().expect("a folder");
    let from_arguments = json(folder.path(), &["sites", "--json", "CC(C)=O", "CC#N"]);
    let mut child = program(folder.path(), &["sites", "--json"])
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .spawn()
        .expect("runs");
    child
        .stdin
        .take()
        .expect("piped")
        .write_all(b"CC(C)=O\n\n  CC#N  \n")
        .expect("written");
    let output = child.wait_with_output().expect("ends");
    let from_stdin: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    assert_eq!(from_arguments, from_stdin);
    let site = &from_arguments[0]["sites"][0];
    assert_eq!(
        (&site["element"], &site["hydrogens"]),
        (&Value::from("C"), &Value::from(3))
    );
    // Bordwell, Acc. Chem. Res. 1988, 21, 456: acetone 26.5, acetonitrile 31.3 in DMSO
    for (molecule, pka) in [(0, 26.5), (1, 31.3)] {
        let found = from_arguments[molecule]["sites"][0]["pka_dmso"]
            .as_f64()
            .expect("a number");
        assert!((found - pka).abs() < 0.11, "{found}");
        assert_eq!(from_arguments[molecule]["sites"][0]["origin"], "measured");
        assert_eq!(
            from_arguments[molecule]["sites"][0]["pka_medium"],
            Value::Null
        );
    }
}

#[test]
fn a_dry_run_says_what_a_campaign_takes_and_leaves_nothing_behind() {
    let folder = folder();
    let folder = folder.path();
    let run = json(folder, &["screen", "campaign.toml", "--dry-run", "--json"]);
    let screened = json(
        folder,
        &["screen", "campaign.toml", "--json", "--data", "kept"],
    );
    assert_eq!(run["cells"], screened["job"]["cells"]);
    assert_eq!(
        run["cells_scored_not_covered"],
        screened["cells_not_covered"]
    );
    assert_eq!(
        run["campaign_fingerprint"],
        screened["job"]["campaign_fingerprint"]
    );
    assert_eq!(run["not_covered"][0]["axis"], "electrophile");
    for measure in ["seconds", "disk_bytes", "memory_bytes"] {
        assert!(
            run[measure].as_f64().is_some_and(|number| number > 0.0),
            "{measure}"
        );
    }
    let page = stdout(folder, &["screen", "campaign.toml", "--dry-run"]);
    for part in [
        "cells: ",
        "what it takes",
        "Not covered by the model",
        "Severe cautions",
    ] {
        assert!(page.contains(part), "{part}: {page}");
    }
    assert!(
        !folder.join("enolattice-data").exists(),
        "no data directory is made"
    );
}

#[test]
fn a_cell_may_have_a_mixture_and_an_additive() {
    let folder = folder();
    let given = [
        "explain",
        "--substrate",
        "CCOC(=O)CC(=O)OCC.Cl",
        "--base",
        "K2CO3",
        "--electrophile",
        "MeI",
        "--solvent",
        "THF/DMF 4:1",
        "--additive",
        "18-crown-6",
        "--temperature-c",
        "25",
        "--json",
    ];
    let told = json(folder.path(), &given);
    assert_eq!(told["cell"]["additive"], "18-crown-6");
    assert_eq!(told["cell"]["additive_equiv"], 1.1);
    assert!(
        told["cell"]["solvent"]
            .as_str()
            .is_some_and(|name| name.contains('/'))
    );
    let limits = told["limits"].to_string();
    assert!(limits.contains("hydrogen chloride"), "{limits}");
}

#[test]
fn all_faults_of_the_input_are_told_at_once() {
    let folder = folder();
    let folder = folder.path();
    let unread = CAMPAIGN
        .replace("temperature_c", "temprature_c")
        .replace("LDA", "LDE");
    fs::write(folder.join("unread.toml"), unread).expect("written");
    let unknown = CAMPAIGN
        .replace("LDA", "LDE")
        .replace("MeI", "MeIodide!")
        .replace("substrates.csv", "other.csv");
    fs::write(folder.join("unknown.toml"), unknown).expect("written");
    let broken = "name,smiles\na,CC(C)=O\nb,C1CC\nc,CC(\n";
    fs::write(folder.join("substrates.csv"), broken).expect("written");
    fs::write(folder.join("other.csv"), SUBSTRATES).expect("written");
    for (file, parts) in [
        (
            "unread.toml",
            [
                "substrates.csv:3: smiles: `C1CC`: ",
                "substrates.csv:4: smiles: `CC(`: ",
                "unread.toml:6: bases.library[0]: `LDE`: ",
                "unread.toml:13: ",
                "did you mean `temperature_c`?",
            ],
        ),
        (
            "unknown.toml",
            [
                "unknown.toml:6: ",
                "`LDE`",
                "LDA",
                "MeIodide!",
                "unknown.toml:8: ",
            ],
        ),
    ] {
        let (code, told) = refused(folder, &["screen", file]);
        assert_eq!(code, Some(2));
        for part in parts {
            assert!(told.contains(part), "{part}: {told}");
        }
    }
    let jobs = json(folder, &["jobs", "--json"]);
    assert_eq!(jobs.as_array().map(Vec::len), Some(0), "nothing is queued");

    let given = [
        "explain",
        "--substrate",
        "CC(",
        "--base",
        "LDE",
        "--electrophile",
        "MeX",
        "--solvent",
        "THG",
        "--temperature-c",
        "25",
        "--time-h",
        "-3",
    ];
    let (code, told) = refused(folder, &given);
    assert_eq!(code, Some(2));
    for field in [
        "substrate: ",
        "base: ",
        "electrophile: ",
        "solvent: ",
        "time_h: ",
    ] {
        assert!(
            told.lines().any(|line| line.starts_with(field)),
            "{field}: {told}"
        );
    }
}

#[test]
fn what_the_user_gets_wrong_exits_with_2() {
    let folder = folder();
    let folder = folder.path();
    let screened = json(folder, &["screen", "campaign.toml", "--json"]);
    let job = screened["job"]["job"].as_str().expect("an id");
    for (arguments, says) in [
        (vec!["screen", "missing.toml"], "missing.toml"),
        (vec!["rank", "nojob"], "there is no job `nojob`"),
        (vec!["explain", "nojob", "0"], "there is no job `nojob`"),
        (vec!["cancel", "nojob"], "there is no job `nojob`"),
        (vec!["watch", "nojob"], "there is no job `nojob`"),
        (vec!["cancel", job], "is done"),
        (vec!["explain", job, "16"], "its cells are 0 to 15"),
        (
            vec!["rank", job, "--filter", "yield > 0.5"],
            "did you mean `expected_yield`?",
        ),
        (
            vec!["rank", job, "--filter", "base = LDE"],
            "did you mean \"LDA\"?",
        ),
        (vec!["rank", job, "--order", "colour"], "colour"),
        (vec!["sites", "C1CC"], "SMILES 1"),
        (vec!["explain"], "--substrate"),
        (
            vec!["jobs", "--data", "a", "--server", "b"],
            "cannot be used with",
        ),
    ] {
        let (code, told) = refused(folder, &arguments);
        assert_eq!(code, Some(2), "{arguments:?}: {told}");
        assert!(told.contains(says), "{arguments:?}: {told}");
    }
}

#[test]
fn a_service_that_is_not_there_exits_with_3() {
    let folder = folder();
    for arguments in [
        vec!["jobs"],
        vec!["screen", "campaign.toml"],
        vec!["sites", "CC(C)=O"],
        vec!["reagents"],
        vec!["rank", "nojob"],
    ] {
        let arguments = [arguments, vec!["--server", "http://127.0.0.1:1"]].concat();
        let (code, told) = refused(folder.path(), &arguments);
        assert_eq!(code, Some(3), "{arguments:?}: {told}");
        assert!(told.contains("127.0.0.1:1"), "{told}");
    }
    fs::write(folder.path().join("file"), "").expect("written");
    let (code, told) = refused(folder.path(), &["jobs", "--data", "file"]);
    assert_eq!(code, Some(3), "{told}");
}

#[test]
fn a_reader_that_goes_away_is_no_failure() {
    let folder = TempDir::new().expect("a folder");
    let mut child = program(folder.path(), &["reagents", "--json"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("runs");
    drop(child.stdout.take());
    let output = child.wait_with_output().expect("ends");
    assert_eq!(String::from_utf8_lossy(&output.stderr), "");
    assert_eq!(output.status.code(), Some(0));
}

#[test]
fn a_submitted_job_waits_until_somebody_watches() {
    let folder = folder();
    let folder = folder.path();
    let checked = json(
        folder,
        &["submit", "campaign.toml", "--validate-only", "--json"],
    );
    assert_eq!(
        (&checked["job"], &checked["cells"]),
        (&Value::from(""), &Value::from(16))
    );
    let first = stdout(
        folder,
        &["submit", "campaign.toml", "--request-id", "tuesday"],
    );
    let again = stdout(
        folder,
        &["submit", "campaign.toml", "--request-id", "tuesday"],
    );
    assert_eq!(first, again, "the same request gives the same job");
    let other = stdout(folder, &["submit", "campaign.toml"]);
    assert_ne!(first, other);
    let jobs = json(folder, &["jobs", "--json"]);
    let states: Vec<_> = jobs
        .as_array()
        .expect("a list")
        .iter()
        .map(|job| &job["state"])
        .collect();
    assert_eq!(states, ["queued", "queued"]);
    assert_eq!(
        json(folder, &["cancel", other.trim(), "--json"])["state"],
        "cancelled"
    );
    let told = lines(&stdout(folder, &["watch", first.trim(), "--json"]));
    let last = told.last().expect("at least the end");
    assert_eq!(
        (&last["state"], &last["cells_done"]),
        (&Value::from("done"), &Value::from(16))
    );
    let output = run(folder, &["watch", other.trim()]);
    assert_eq!(output.status.code(), Some(1), "a cancelled job is not done");
}

/// A server that is killed with the test.
struct Server {
    child: Child,
    url: String,
}

impl Server {
    fn start(folder: &Path) -> Server {
        let mut child = program(
            folder,
            &["serve", "--listen", "127.0.0.1:0", "--data", "served"],
        )
        .stdout(Stdio::piped())
        .stderr(Stdio::null())
        .spawn()
        .expect("runs");
        let mut line = String::new();
        BufReader::new(child.stdout.as_mut().expect("piped"))
            .read_line(&mut line)
            .expect("a line");
        let address = line
            .trim()
            .strip_prefix("listening on ")
            .expect("the address");
        Server {
            url: format!("http://{address}"),
            child,
        }
    }
}

impl Drop for Server {
    fn drop(&mut self) {
        // It has ended already where the test stopped it.
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}

fn on_server<'a>(url: &'a str, arguments: &[&'a str]) -> Vec<&'a str> {
    [arguments, &["--server", url]].concat()
}

#[test]
fn a_server_answers_as_the_embedded_engine_does() {
    let folder = folder();
    let folder = folder.path();
    let mut server = Server::start(folder);
    let url = server.url.clone();
    let embedded = json(folder, &["screen", "campaign.toml", "--json"]);
    let served = json(
        folder,
        &on_server(&url, &["screen", "campaign.toml", "--json"]),
    );
    for part in ["top", "best_of_each_substrate", "cells_not_covered"] {
        assert_eq!(embedded[part], served[part], "{part}");
    }
    let (here, there) = (
        embedded["job"]["job"].as_str(),
        served["job"]["job"].as_str(),
    );
    let (here, there) = (here.expect("an id"), there.expect("an id"));
    let filter = [
        "--json",
        "--filter",
        "expected_yield > 0.01",
        "--order",
        "selectivity",
    ];
    let rank_here = stdout(folder, &[&["rank", here], filter.as_slice()].concat());
    let rank_there = stdout(
        folder,
        &on_server(&url, &[&["rank", there], filter.as_slice()].concat()),
    );
    assert_eq!(rank_here, rank_there);
    assert_eq!(
        stdout(folder, &["explain", here, "3"]),
        stdout(folder, &on_server(&url, &["explain", there, "3"]))
    );
    let given = [
        "explain",
        "--json",
        "--substrate",
        "CC(C)=O",
        "--base",
        "LDA",
        "--electrophile",
        "MeI",
        "--solvent",
        "THF",
        "--temperature-c",
        "-78",
        "--addition",
        "all together",
    ];
    assert_eq!(
        stdout(folder, &given),
        stdout(folder, &on_server(&url, &given))
    );
    for same in [
        vec!["sites", "--json", "CC(C)=O"],
        vec!["reagents", "--json"],
        vec!["reagents", "Me"],
    ] {
        assert_eq!(
            stdout(folder, &same),
            stdout(folder, &on_server(&url, &same)),
            "{same:?}"
        );
    }
    for wrong in [
        vec!["explain", there, "16"],
        vec!["rank", there, "--filter", "yield > 0.5"],
        vec!["explain", "nojob", "1"],
        vec!["sites", "C1CC"],
        vec![
            "explain",
            "--substrate",
            "CC(",
            "--base",
            "LDE",
            "--electrophile",
            "X",
            "--solvent",
            "THF",
            "--temperature-c",
            "25",
        ],
    ] {
        let embedded: Vec<&str> = wrong
            .iter()
            .map(|word| if *word == there { here } else { word })
            .collect();
        let (code, told) = refused(folder, &on_server(&url, &wrong));
        let (code_here, told_here) = refused(folder, &embedded);
        assert_eq!(
            (code, told.replace(there, here)),
            (code_here, told_here),
            "{wrong:?}"
        );
    }
    let (code, told) = refused(folder, &["jobs", "--data", "served"]);
    assert_eq!(code, Some(3), "the server has the directory: {told}");
    assert_eq!(
        json(folder, &on_server(&url, &["jobs", "--json"]))[0]["job"],
        there
    );

    let terminated = Command::new("kill")
        .args(["-TERM", &server.child.id().to_string()])
        .status();
    assert!(terminated.expect("kill runs").success());
    assert_eq!(server.child.wait().expect("ends").code(), Some(0));
    assert_eq!(
        json(folder, &["jobs", "--data", "served", "--json"])[0]["job"],
        there
    );
}

#[test]
fn the_log_of_a_service_can_be_read_by_programs() {
    let folder = folder();
    let mut child = program(
        folder.path(),
        &["serve", "--listen", "127.0.0.1:0", "--log-format", "json"],
    )
    .stdout(Stdio::piped())
    .stderr(Stdio::piped())
    .spawn()
    .expect("runs");
    let mut line = String::new();
    BufReader::new(child.stdout.as_mut().expect("piped"))
        .read_line(&mut line)
        .expect("a line");
    let terminated = Command::new("kill")
        .args(["-TERM", &child.id().to_string()])
        .status();
    assert!(terminated.expect("kill runs").success());
    let output = child.wait_with_output().expect("ends");
    assert_eq!(output.status.code(), Some(0));
    let log = lines(&String::from_utf8(output.stderr).expect("UTF-8"));
    assert!(
        log.iter().any(|entry| entry["message"] == "shutting down"),
        "{log:?}"
    );
}
