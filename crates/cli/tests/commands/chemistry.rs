//! Questions of chemistry that need no job.

use std::fs;
use std::io::Write;
use std::process::Stdio;

use serde_json::Value;
use tempfile::TempDir;

use crate::program::{folder, json, program, stdout};

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

/// Measured pKa of a compound in the library's tables: columns `smiles` and `pka_dmso`.
fn tabled(smiles: &str) -> Vec<f64> {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/../reagents/data");
    let tables = [
        "acidities_ch.tsv",
        "acidities_xh.tsv",
        "acidities_remembered.tsv",
    ];
    let text = tables.map(|table| fs::read_to_string(format!("{folder}/{table}")).expect("there"));
    let rows = text.iter().flat_map(|text| text.lines());
    rows.map(|line| line.split('\t').collect::<Vec<_>>())
        .filter(|row| row.get(1) == Some(&smiles))
        .map(|row| row[4].parse().expect("a number"))
        .collect()
}

#[test]
fn the_reasons_of_an_estimate_add_up_and_its_neighbours_are_those_of_the_tables() {
    let folder = TempDir::new().expect("a folder");
    let keto_ester = "CCOC(=O)C(CCCC)C(=O)CC";
    let molecules = json(folder.path(), &["sites", "--json", keto_ester, "CC(C)=O"]);
    let site = &molecules[0]["sites"][0];
    assert_eq!(site["origin"], "estimated");
    let number = |value: &Value| value.as_f64().expect("a number");
    let terms = site["terms"].as_array().expect("a list");
    let sum: f64 = terms.iter().map(|term| number(&term["contribution"])).sum();
    assert!((sum - number(&site["pka_dmso"])).abs() < 1e-9, "{sum}");
    let neighbours = site["neighbours"].as_array().expect("a list");
    assert!(!neighbours.is_empty());
    for near in neighbours {
        let measured = tabled(near["smiles"].as_str().expect("text"));
        let told = number(&near["pka_dmso"]);
        assert!(
            measured.iter().any(|pka| (pka - told).abs() < 0.051),
            "{near}: {measured:?}"
        );
    }
    let measured = &molecules[1]["sites"][0];
    assert_eq!(measured["terms"], Value::Array(Vec::new()));
    assert!(
        measured["source"]
            .as_str()
            .expect("text")
            .contains("Bordwell")
    );

    let page = stdout(folder.path(), &["sites", "--reasons", keto_ester]);
    for told in ["carbon acid", "alkyl ketone", "CCOC(=O)CC(C)=O"] {
        assert!(page.contains(told), "{told}: {page}");
    }
}
