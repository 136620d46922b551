//! Measured yields: which cell each belongs to, and what is wrong with a row.

use std::collections::BTreeMap;
use std::sync::{Arc, LazyLock};

use enolattice_grid::{Campaign, CampaignSpec, CellId, Grid, MeasuredYield, Sources, read};
use enolattice_model::Model;
use enolattice_reagents::Library;

static MODEL: LazyLock<Arc<Model>> = LazyLock::new(|| {
    let library = Library::builtin().expect("the tables are sound");
    Arc::new(Model::new(Arc::new(library)))
});

/// 2 × 2 × 2 × 2 reagents, three additives, two temperatures, two times.
const CAMPAIGN: &str = r#"
[[substrates.inline]]
name = "ketone"
smiles = "CC(=O)c1ccccc1"
[[substrates.inline]]
name = "malonate"
smiles = "CCOC(=O)CC(=O)OCC"
[bases]
library = ["LDA", "K2CO3"]
[electrophiles]
library = "MeI"
[[electrophiles.inline]]
name = "our bromide"
smiles = "BrCc1ccccc1"
[solvents]
library = ["THF", "THF/DMF 4:1"]
[additives]
library = ["none", "HMPA"]
[conditions]
additive_equiv = [1, 2]
temperature_c = [-20, 25]
time_h = [2, 16]
[measured]
file = "yields.csv"
"#;

const HEADING: &str = "substrate,base,electrophile,solvent,additive,additive_equiv,temperature_c,time_h,yield_fraction,sigma,note\n";

fn sources(campaign: &str, rows: &str) -> Sources {
    Sources {
        campaign_name: "c.toml".into(),
        campaign: campaign.into(),
        files: BTreeMap::from([(
            "yields.csv".to_owned(),
            format!("{HEADING}{rows}").into_bytes(),
        )]),
    }
}

fn spec(rows: &str) -> CampaignSpec {
    read(&sources(CAMPAIGN, rows)).sound().expect("is read")
}

fn grid(spec: &CampaignSpec) -> Grid {
    let campaign = Campaign::new(spec, &MODEL).expect("is sound");
    Grid::new(campaign, MODEL.clone()).expect("a small grid")
}

/// What was measured, each with its cell in words.
fn measured(grid: &Grid) -> Vec<(String, MeasuredYield)> {
    let cells = (0..grid.cells()).map(CellId);
    let known = cells.filter_map(|cell| Some((cell, grid.measured(cell)?.clone())));
    let told = known.map(|(number, value)| {
        let cell = grid.cell(number).expect("a cell");
        let additive = cell
            .additive
            .as_ref()
            .map_or("none", |known| known.record.name.as_str());
        let told = format!(
            "{} {} {} {} {additive} {} {} °C {} h",
            cell.substrate.name,
            cell.base.record.name,
            cell.electrophile.name,
            cell.solvent.record.name,
            cell.conditions.additive_equiv,
            cell.conditions.temperature_c,
            cell.conditions.time_h,
        );
        (told, value)
    });
    told.collect()
}

#[test]
fn a_yield_belongs_to_its_cell_however_its_row_is_written() {
    let rows = "\
        ketone,LDA,MeI,THF,none,,-20,2,0.85,0.03,isolated\n\
        c1ccccc1C(C)=O,lithium diisopropylamide,iodomethane,THF/DMF 4:1,HMPA,2,25.0,16,0,,\n\
        malonate,K2CO3,our bromide,C1CCOC1,none,,25,2,1,,\"by NMR, crude\"\n";
    let found = measured(&grid(&spec(rows)));
    let value = |yield_fraction, sigma, note: &str| MeasuredYield {
        yield_fraction,
        sigma,
        note: note.into(),
    };
    let expected = [
        (
            "ketone LDA MeI THF none 0 -20 °C 2 h",
            value(0.85, Some(0.03), "isolated"),
        ),
        (
            "ketone LDA MeI THF/DMF 4:1 HMPA 2 25 °C 16 h",
            value(0.0, None, ""),
        ),
        (
            "malonate K2CO3 our bromide THF none 0 25 °C 2 h",
            value(1.0, None, "by NMR, crude"),
        ),
    ];
    assert_eq!(
        found,
        expected.map(|(cell, value)| (cell.to_owned(), value))
    );
}

#[test]
fn what_a_row_leaves_out_is_that_of_a_campaign_with_one_value_of_it() {
    let one = CAMPAIGN
        .replace(
            "time_h = [2, 16]",
            "time_h = 4\nformation_temperature_c = -78",
        )
        .replace("library = [\"none\", \"HMPA\"]", "library = \"HMPA\"")
        .replace("additive_equiv = [1, 2]", "additive_equiv = 3");
    let rows = "ketone,LDA,MeI,THF,,,25,,0.5,,\n";
    let reading = read(&sources(&one, rows));
    let found = measured(&grid(&reading.sound().expect("is read")));
    assert_eq!(found[0].0, "ketone LDA MeI THF HMPA 3 25 °C 4 h");
    assert_eq!(found.len(), 1);
}

#[test]
fn a_row_of_no_cell_is_kept_and_told() {
    let rows = "\
        ketone,LDA,MeI,THF,none,,40,2,0.1,,\n\
        CCC(=O)CC,LDA,MeI,THF,none,,25,2,0.2,,\n\
        ketone,LDA,EtI,THF,HMPA,5,25,2,0.3,,\n\
        ketone,KOtBu,MeI,THF,none,,25,2,0.4,,\n";
    let spec = spec(rows);
    assert_eq!(spec.measured.len(), 4);
    let grid = grid(&spec);
    assert_eq!(measured(&grid), []);
    let told: Vec<&String> = grid
        .campaign()
        .warnings
        .iter()
        .filter(|text| text.starts_with("measured: "))
        .collect();
    assert_eq!(told.len(), 4);
    for (text, part) in told.iter().zip([
        "yields.csv:2 is of no cell of this campaign, which lacks temperature_c 40",
        "yields.csv:3 is of no cell of this campaign, which lacks substrate CCC(=O)CC",
        "yields.csv:4",
        "base KOtBu",
    ]) {
        assert!(text.contains(part), "{part}: {text}");
    }
}

#[test]
fn every_fault_of_every_row_is_told() {
    let rows = "\
        keton,LDA,MeI,THF,none,,-20,2,0.85,,\n\
        ketone,LDE,MeX,THG,HMPB,1,-200,2,1.2,2,\n\
        ,,,,,,,,,,\n\
        ketone,LDA,MeI,THF,none,1,25,,0.5,,\n\
        ketone,LDA,MeI,THF,HMPA,,25,2,much,,\n\
        ketone,LDA,MeI,THF,none,,25,2,0.5,,\n\
        CC(=O)c1ccccc1,LDA,CI,THF,none,0,25,2,0.6,,\n\
        ketone,LDA,MeI,THF/DMFF 4:1,HMPA + LiCl,1,25,2,0.5,,\n";
    let reading = read(&sources(CAMPAIGN, rows));
    let faults = reading.with(Campaign::faults(&reading.spec, MODEL.library()));
    let told: Vec<(u32, &str, &str)> = faults
        .iter()
        .map(|fault| (fault.place.line, fault.place.field.as_str(), fault.code))
        .collect();
    let expected = [
        (2, "substrate", "REAGENT_UNKNOWN"),
        (3, "base", "REAGENT_UNKNOWN"),
        (3, "electrophile", "REAGENT_UNKNOWN"),
        (3, "solvent", "REAGENT_UNKNOWN"),
        (3, "additive", "REAGENT_UNKNOWN"),
        (3, "temperature_c", "VALUE_OUT_OF_RANGE"),
        (3, "yield_fraction", "VALUE_OUT_OF_RANGE"),
        (3, "sigma", "VALUE_OUT_OF_RANGE"),
        (4, "substrate", "VALUE_MISSING"),
        (4, "base", "VALUE_MISSING"),
        (4, "electrophile", "VALUE_MISSING"),
        (4, "solvent", "VALUE_MISSING"),
        (4, "additive", "VALUE_MISSING"),
        (4, "temperature_c", "VALUE_MISSING"),
        (4, "time_h", "VALUE_MISSING"),
        (4, "yield_fraction", "VALUE_MISSING"),
        (5, "additive_equiv", "VALUE_MISSING"),
        (5, "time_h", "VALUE_MISSING"),
        (6, "yield_fraction", "VALUE_TYPE"),
        (6, "additive_equiv", "VALUE_MISSING"),
        (8, "yield_fraction", "VALUE_REPEATED"),
        (9, "solvent", "REAGENT_UNKNOWN"),
        (9, "additive", "NOT_YET_ALLOWED"),
    ];
    assert_eq!(told, expected);
    let percent = &faults[6];
    assert!(percent.remedy.contains("0.85 for 85 %"), "{percent}");
    assert!(faults[0].remedy.contains("`ketone`"), "{}", faults[0]);
    assert!(faults[20].reason.contains("yields.csv:7"), "{}", faults[20]);
}

#[test]
fn a_row_of_a_substrate_at_fault_is_not_at_fault_itself() {
    let broken = CAMPAIGN.replace("CC(=O)c1ccccc1", "CC(=O)c1ccccc");
    let reading = read(&sources(&broken, "ketone,LDA,MeI,THF,none,,25,2,0.5,,\n"));
    let faults = reading.with(Campaign::faults(&reading.spec, MODEL.library()));
    let codes: Vec<&str> = faults.iter().map(|fault| fault.code).collect();
    assert_eq!(codes, ["STRUCTURE_INVALID"]);
}

#[test]
fn files_of_structures_and_tables_without_a_file_hold_no_yields() {
    for (table, file, code) in [
        (
            "[measured]\nfile = 'yields.smi'\n",
            "yields.smi",
            "FILE_SYNTAX",
        ),
        ("[measured]\n", "", "VALUE_MISSING"),
        ("[measured]\nfile = 'other.csv'\n", "c.toml", "FILE_MISSING"),
    ] {
        let (sound, _) = CAMPAIGN.split_once("[measured]").expect("the table");
        let mut sources = sources(&format!("{sound}{table}"), "");
        let rows = sources.files["yields.csv"].clone();
        sources.files.insert("yields.smi".into(), rows);
        let faults = read(&sources).sound().expect_err("is refused");
        assert_eq!((faults.len(), faults[0].code), (1, code), "{table}");
        if !file.is_empty() {
            assert_eq!(faults[0].place.file, file);
        }
    }
}

#[test]
fn a_campaign_with_other_yields_is_the_same_campaign() {
    let with = grid(&spec("ketone,LDA,MeI,THF,none,,-20,2,0.85,0.03,isolated\n"));
    let without = grid(&spec(""));
    assert_eq!(with.fingerprint(), without.fingerprint());
}
