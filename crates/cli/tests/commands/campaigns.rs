//! Campaigns: from a file to a ranking, dry runs, the queue.

use std::fs;

use serde_json::Value;

use crate::program::{CAMPAIGN, folder, json, lines, run, stdout};

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

#[test]
fn measured_yields_stand_in_rankings_and_explanations() {
    let folder = folder();
    let folder = folder.path();
    let campaign = format!("{CAMPAIGN}[measured]\nfile = \"yields.csv\"\n");
    fs::write(folder.join("campaign.toml"), campaign).expect("written");
    let yields = "substrate,base,electrophile,solvent,temperature_c,yield_fraction,sigma,note\n\
                  malonate,LDA,MeI,THF,25,0.81,0.04,by GC\n\
                  malonate,LDA,MeI,THF,60,0.4,,\n";
    fs::write(folder.join("yields.csv"), yields).expect("written");
    let output = run(folder, &["screen", "campaign.toml", "--json"]);
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(told.contains("yields.csv:3 is of no cell"), "{told}");
    let screened: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    let job = screened["job"]["job"].as_str().expect("an id");
    let filter = ["rank", job, "--json", "--filter", "measured_yield:*"];
    let rows = lines(&stdout(folder, &filter));
    assert_eq!(rows.len(), 1);
    assert_eq!(rows[0]["measured_yield"], 0.81);
    let all = lines(&stdout(folder, &["rank", job, "--json"]));
    let unmeasured = all.iter().filter(|row| row["measured_yield"].is_null());
    assert_eq!(unmeasured.count(), 15);
    let cell = rows[0]["cell"].to_string();
    let explained = json(folder, &["explain", job, &cell, "--json"]);
    assert_eq!(explained["cell"]["measured_note"], "by GC");
    let page = stdout(folder, &["explain", job, &cell]);
    assert!(page.contains("81.0 % ± 4.0 % (by GC)"), "{page}");
    assert!(stdout(folder, &["rank", job]).contains("measured"));
}
