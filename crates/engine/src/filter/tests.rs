//! Filters against a small campaign.

use std::collections::BTreeMap;
use std::sync::{Arc, OnceLock};

use enolattice_grid::{Campaign, CellId, Grid, Sources};
use enolattice_model::{Category, Channel, Model, Score, Severity};
use enolattice_reagents::Library;

use super::Filter;

/// 2 substrates × 2 electrophiles × 3 bases × 2 solvents × 2 temperatures × 2 formation temperatures.
const CAMPAIGN: &str = r#"
title = "filters"
[substrates]
smiles = ["CC(=O)c1ccccc1", "CCOC(=O)CC(=O)OCC"]
[bases]
library = ["LDA", "KOtBu", "K2CO3"]
[electrophiles]
library = ["MeI"]
smiles = ["BrCc1ccccc1"]
[solvents]
library = ["THF", "DMF"]
[conditions]
temperature_c = [-78, 25]
formation_temperature_c = -78
[measured]
file = "yields.csv"
"#;

/// Two of the 48 cells.
const YIELDS: &str = "substrate,base,electrophile,solvent,temperature_c,yield_fraction
CC(=O)c1ccccc1,LDA,MeI,THF,-78,0.85
CC(=O)c1ccccc1,LDA,MeI,THF,25,0.4
";

fn grid() -> &'static Grid {
    static GRID: OnceLock<Grid> = OnceLock::new();
    GRID.get_or_init(|| {
        let sources = Sources {
            campaign_name: "c.toml".into(),
            campaign: CAMPAIGN.into(),
            files: BTreeMap::from([("yields.csv".to_owned(), YIELDS.into())]),
        };
        let spec = enolattice_grid::read(&sources).sound().expect("reads");
        let model = Arc::new(Model::new(Arc::new(Library::builtin().expect("library"))));
        Grid::new(Campaign::new(&spec, &model).expect("campaign"), model).expect("grid")
    })
}

fn score() -> Score {
    Score {
        expected_yield: Some(0.5),
        p_hit: Some(0.25),
        selectivity: Some(1.0),
        feasibility: Some(0.75),
        largest_loss: Some(Channel::SlowAttack),
        cautions: Category::Pyrophoric.bit() | Category::Flammable.bit() | Severity::Warning.bits(),
    }
}

/// How many of the 48 cells pass, each with the same score.
fn passing(filter: &str, score: &Score) -> usize {
    let grid = grid();
    let filter = Filter::read(filter).and_then(|read| read.bind(grid.campaign()));
    let filter = filter.unwrap_or_else(|fault| panic!("{fault}"));
    let digits = (0..grid.cells()).map(|cell| grid.digits(CellId(cell)).expect("a cell"));
    digits.filter(|digits| filter.passes(digits, score)).count()
}

fn fault(filter: &str) -> String {
    let grid = grid();
    match Filter::read(filter).and_then(|read| read.bind(grid.campaign())) {
        Ok(_) => panic!("`{filter}` is read"),
        Err(fault) => fault.to_string(),
    }
}

#[test]
fn axes_split_the_lattice_in_proportion() {
    assert_eq!(grid().cells(), 48);
    for (filter, cells) in [
        ("", 48),
        ("  ", 48),
        ("base = LDA", 16),
        ("base = lda", 16),
        ("base = \"lithium diisopropylamide\"", 16),
        ("base != 'LDA'", 32),
        ("base = K*", 32),
        ("base = *O*", 32),
        ("base != *O*", 16),
        ("base:OtB", 16),
        ("substrate = \"CC(=O)c1ccccc1\"", 24),
        ("electrophile = MeI", 24),
        ("electrophile = \"CI\"", 24),
        ("solvent = \"nothing*\"", 0),
        ("temperature_c < 0", 24),
        ("temperature_c = 25.0", 24),
        ("formation_temperature_c = -78", 48),
        ("formation_temperature_c > -78", 0),
        ("addition = \"substrate into base\"", 16),
        ("base_equiv >= 1.2", 0),
    ] {
        assert_eq!(passing(filter, &score()), cells, "{filter}");
    }
}

#[test]
fn or_binds_tighter_than_and() {
    let either_base = "base = LDA OR base = KOtBu";
    assert_eq!(
        passing(&format!("{either_base} AND solvent = THF"), &score()),
        16
    );
    assert_eq!(
        passing(&format!("solvent = THF AND {either_base}"), &score()),
        16
    );
    assert_eq!(
        passing(
            "solvent = THF AND base = LDA OR (base = KOtBu AND temperature_c = 25)",
            &score()
        ),
        12
    );
}

#[test]
fn negation_is_the_complement() {
    for filter in [
        "base = LDA",
        "base = LDA OR solvent = DMF",
        "(base = LDA AND temperature_c < 0)",
    ] {
        let negated = [
            format!("NOT ({filter})"),
            format!("-({filter})"),
            format!("NOT NOT NOT ({filter})"),
        ];
        for negated in negated {
            assert_eq!(
                passing(filter, &score()) + passing(&negated, &score()),
                48,
                "{negated}"
            );
        }
    }
    assert_eq!(
        passing("-base = LDA", &score()),
        passing("base != LDA", &score())
    );
}

#[test]
fn scores_are_compared() {
    for (filter, passes) in [
        ("expected_yield >= 0.5", true),
        ("expected_yield > 0.5", false),
        (
            "p_hit < 0.5 AND selectivity = 1 AND feasibility <= 0.75",
            true,
        ),
        ("largest_loss = \"slow attack\"", true),
        ("largest_loss != \"Slow Attack\"", false),
        ("largest_loss : slow", true),
        ("cautions:\"pyrophoric\"", true),
        ("cautions:gas", false),
        ("cautions:*", true),
        ("severity = warning", true),
        ("severity < stop AND severity >= note", true),
        ("severity = none", false),
    ] {
        assert_eq!(
            passing(filter, &score()),
            if passes { 48 } else { 0 },
            "{filter}"
        );
    }
}

#[test]
fn measured_yields_are_those_of_their_cells() {
    for (filter, cells) in [
        ("measured_yield:*", 2),
        ("NOT measured_yield:*", 46),
        ("measured_yield >= 0.5", 1),
        ("measured_yield >= 0.5 AND temperature_c = 25", 0),
        ("measured_yield != 0.85", 1),
    ] {
        assert_eq!(passing(filter, &score()), cells, "{filter}");
    }
}

#[test]
fn what_is_unknown_passes_no_comparison() {
    let unknown = Score::default();
    for (filter, passes) in [
        ("expected_yield >= 0", false),
        ("expected_yield != 0.5", false),
        ("expected_yield:*", false),
        ("NOT expected_yield:*", true),
        ("largest_loss:*", false),
        ("largest_loss != \"slow attack\"", true),
        ("cautions:*", false),
        ("severity = none", true),
        ("severity:*", false),
    ] {
        assert_eq!(
            passing(filter, &unknown),
            if passes { 48 } else { 0 },
            "{filter}"
        );
    }
}

#[test]
fn faults_name_position_and_remedy() {
    for (filter, says) in [
        (
            "yield > 0.5",
            [
                "at character 1: there is no such field",
                "did you mean `expected_yield`?",
            ],
        ),
        (
            "solvnt = THF",
            ["at character 1:", "did you mean `solvent`?"],
        ),
        ("base = LDE", ["at character 8:", "did you mean \"LDA\"?"]),
        (
            "largest_loss = slow",
            ["at character 16:", "did you mean \"slow attack\"?"],
        ),
        ("cautions = gas", ["at character 10:", "use one of :"]),
        ("base > LDA", ["at character 6:", "use one of = != :"]),
        (
            "expected_yield >= 50",
            ["at character 19:", "write 0.5 for 50 %"],
        ),
        (
            "temperature_c = warm",
            ["at character 17:", "write a number"],
        ),
        (
            "temperature_c = nan",
            ["at character 17:", "write a number"],
        ),
        ("(base = LDA", ["at character 12:", "add a )"]),
        ("base = LDA)", ["at character 11:", "remove it"]),
        (
            "base = LDA solvent = THF",
            ["at character 12:", "write AND or OR"],
        ),
        ("base = \"LDA", ["at character 8:", "close it with \""]),
        ("base == LDA", ["at character 6:", "write ="]),
        ("base ! LDA", ["at character 6:", "write !="]),
        ("base = LDA AND", ["at character 15:", "add a comparison"]),
        ("base", ["at character 5:", "write one of = != :"]),
        (
            "base =",
            ["at character 7:", "write a number or a name in quotes"],
        ),
        (
            "base = L*A",
            ["at character 8:", "put * at the beginning or the end"],
        ),
        (
            "severity = high",
            ["at character 12:", "none, note, warning or stop"],
        ),
        (
            "= LDA",
            ["at character 1:", "begin a comparison with a field"],
        ),
    ] {
        let fault = fault(filter);
        for part in says {
            assert!(fault.contains(part), "{filter}: {fault}");
        }
    }
}

#[test]
fn hostile_filters_are_refused_quickly() {
    let deep = format!("{}base = LDA{}", "(".repeat(2000), ")".repeat(2000));
    assert!(fault(&deep).contains("nested more than 50 deep"));
    assert!(fault(&vec!["NOT"; 1000].join(" ")).contains("nested"));
    let long = vec!["base = LDA"; 51].join(" AND ");
    assert!(fault(&long).contains("more than 50 comparisons"));
    assert!(fault(&"x".repeat(5000)).contains("more than 4096"));
    let fifty = vec!["base = LDA"; 50].join(" OR ");
    assert_eq!(passing(&fifty, &score()), 16);
    for odd in [
        "é = è",
        "\u{0}",
        "((((",
        "'\\",
        "\"\\\"",
        "base:::",
        "-",
        "- -",
        "- base = LDA)",
    ] {
        fault(odd);
    }
}
