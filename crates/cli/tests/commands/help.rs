//! What a newcomer and a shell are told: help, manual, completion, exports and maps without a word too many.

use std::collections::BTreeSet;
use std::fs;

use crate::program::{folder, json, lines, refused, stdout};

/// The names of the commands, as `--help` lists them.
fn commands() -> BTreeSet<String> {
    let folder = folder();
    let help = stdout(folder.path(), &["--help"]);
    let listed = help.lines().skip_while(|line| *line != "Commands:").skip(1);
    listed
        .take_while(|line| line.starts_with("  "))
        .filter_map(|line| line.split_whitespace().next())
        .map(str::to_owned)
        .collect()
}

#[test]
fn every_command_has_an_example_that_names_it() {
    let folder = folder();
    for command in commands().iter().filter(|name| *name != "help") {
        let help = stdout(folder.path(), &[command, "--help"]);
        let example = help.split_once("Example").map(|(_, examples)| examples);
        let named = format!("enolattice {command} ");
        let says =
            example.is_some_and(|text| text.contains(&named) || text.contains(named.trim_end()));
        assert!(says, "{command}: {help}");
    }
}

#[test]
fn the_manual_has_a_page_of_each_command() {
    let folder = folder();
    fs::create_dir(folder.path().join("man1")).expect("a folder");
    stdout(folder.path(), &["man", "--out", "man1"]);
    let pages = fs::read_dir(folder.path().join("man1")).expect("lists");
    let names: BTreeSet<String> = pages
        .map(|page| {
            page.expect("a page")
                .file_name()
                .into_string()
                .expect("UTF-8")
        })
        .collect();
    let mut expected: BTreeSet<String> = commands()
        .iter()
        .filter(|name| *name != "help")
        .map(|name| format!("enolattice-{name}.1"))
        .collect();
    expected.insert("enolattice.1".into());
    assert_eq!(names, expected);
    let (code, said) = refused(folder.path(), &["man", "--out", "nowhere"]);
    assert!(code == Some(2) && said.contains("is no folder"), "{said}");
}

#[test]
fn every_shell_learns_every_command() {
    let folder = folder();
    for shell in ["bash", "zsh", "fish", "elvish", "powershell"] {
        let script = stdout(folder.path(), &["completion", shell]);
        for command in commands() {
            assert!(script.contains(&command), "{shell} lacks {command}");
        }
    }
}

#[test]
fn maps_and_exports_agree_with_the_ranking() {
    let folder = folder();
    let at = folder.path();
    let screened = json(at, &["screen", "campaign.toml", "--data", "d", "--json"]);
    let job = screened["job"]["job"].as_str().expect("an id");
    let ranked = stdout(at, &["rank", job, "--data", "d", "--limit", "0", "--json"]);

    stdout(at, &["export", job, "--data", "d", "--out", "cells.jsonl"]);
    let exported = fs::read_to_string(at.join("cells.jsonl")).expect("is there");
    assert_eq!(exported, ranked);
    let piped = stdout(
        at,
        &[
            "export", job, "--data", "d", "--out", "-", "--format", "csv",
        ],
    );
    assert_eq!(piped.matches("\r\n").count(), 17);

    let map = ["rank", job, "--data", "d", "--map", "substrate,base"];
    let fields = lines(&stdout(at, &[&map[..], &["--json"]].concat()));
    let best = ranked.lines().next().expect("a cell");
    let best: serde_json::Value = serde_json::from_str(best).expect("JSON");
    let of_best = fields
        .iter()
        .find(|field| field["row"] == best["substrate"] && field["column"] == best["base"]);
    assert_eq!(
        of_best.map(|field| &field["best_cell"]),
        Some(&best["cell"])
    );
    assert_eq!(fields.len(), 4);
    let drawn = stdout(at, &map);
    assert!(
        !drawn.contains('\u{1b}'),
        "no colour where nobody looks: {drawn}"
    );
    assert!(
        drawn.contains("propiophenone") && drawn.contains("K2CO3"),
        "{drawn}"
    );
}

#[test]
fn what_cannot_be_exported_is_refused_before_anything_is_computed() {
    let folder = folder();
    fs::write(folder.path().join("there.csv"), "mine").expect("written");
    for (out, said) in [
        ("cells.xlsx", "give csv, jsonl, arrow or parquet"),
        ("there.csv", "is there already"),
        ("none/cells.csv", "lies in no folder"),
    ] {
        let (code, told) = refused(folder.path(), &["export", "none", "--out", out]);
        assert!(code == Some(2) && told.contains(said), "{told}");
    }
    let (code, told) = refused(
        folder.path(),
        &["export", "none", "--out", "-", "--format", "parquet"],
    );
    assert!(
        code == Some(2) && told.contains("cannot be piped"),
        "{told}"
    );
    let there = fs::read_to_string(folder.path().join("there.csv"));
    assert_eq!(there.expect("reads"), "mine");
}

#[cfg(not(feature = "columnar"))]
#[test]
fn a_program_without_columns_says_how_to_build_one_with_them() {
    let folder = folder();
    for out in ["cells.arrow", "cells.parquet"] {
        let (code, told) = refused(folder.path(), &["export", "none", "--out", out]);
        assert!(
            code == Some(2) && told.contains("--features columnar"),
            "{told}"
        );
    }
}
