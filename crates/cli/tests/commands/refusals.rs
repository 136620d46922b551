//! What is refused, with which exit code and words.

use std::fs;
use std::process::Stdio;

use tempfile::TempDir;

use crate::program::{CAMPAIGN, SUBSTRATES, folder, json, program, refused};

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
        (vec!["plan", "nojob"], "there is no job `nojob`"),
        (
            vec!["plan", "--kept", "noplan"],
            "there is no plan `noplan`",
        ),
        (vec!["plan", job, "--kept", "noplan"], "cannot be used with"),
        (vec!["plan"], "JOB"),
        (vec!["plans", "nojob"], "there is no job `nojob`"),
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
