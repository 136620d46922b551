//! Campaign files: what is read, and every fault with its place.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use enolattice_grid::{Campaign, CampaignSpec, InputError, Sources, Stock, files_named, read};
use enolattice_reagents::Library;

fn sources(campaign: &str, files: &[(&str, &str)]) -> Sources {
    Sources {
        campaign_name: "campaign.toml".into(),
        campaign: campaign.into(),
        files: files
            .iter()
            .map(|(name, text)| ((*name).to_owned(), text.as_bytes().to_vec()))
            .collect::<BTreeMap<_, _>>(),
    }
}

/// Reads a campaign and looks everything up; all faults, or the campaign.
fn checked(sources: &Sources) -> Result<CampaignSpec, Vec<InputError>> {
    static LIBRARY: LazyLock<Library> =
        LazyLock::new(|| Library::builtin().expect("the tables are sound"));
    let reading = read(sources);
    let faults = reading.with(Campaign::faults(&reading.spec, &LIBRARY));
    if faults.is_empty() {
        reading.sound()
    } else {
        Err(faults)
    }
}

/// File, line, field and code of each fault.
fn places(faults: &[InputError]) -> Vec<(&str, u32, &str, &str)> {
    faults
        .iter()
        .map(|fault| {
            (
                fault.place.file.as_str(),
                fault.place.line,
                fault.place.field.as_str(),
                fault.code,
            )
        })
        .collect()
}

const COMPLETE: &str = r#"
title = "Aryl acetates, Tuesday night"
[substrates]
file = "substrates.csv"
smiles = "CC(=O)c1ccccc1"
[[substrates.inline]]
name = "nitroethane of the house"
smiles = "CC[N+](=O)[O-]"
pka_dmso = 16.7
pka_sigma = 0.2
stock_mg = 500
lot = "L7"
location = "cabinet 3"
[[substrates.inline]]
smiles = "CC#N"
[bases]
library = ["LDA", "KOtBu"]
[electrophiles]
file = ["electrophiles.csv"]
library = "all"
smiles = ["BrCc1ccccc1"]
inline = [{ name = "an allyl bromide", smiles = "C=CCBr" }]
[solvents]
library = "THF"
[additives]
library = ["none", "HMPA"]
[conditions]
additive_equiv = [1.5]
temperature_c = [-20, 25.5]
formation_temperature_c = -78
base_equiv = [1.1]
electrophile_equiv = [1.2]
concentration_m = [0.2]
time_h = [16]
dosing_min = 10
addition = ["substrate into base"]
[target]
yield_at_least = 0.6
"#;

const SUBSTRATES: &str =
    "name,smiles,pka_dmso\nmethyl phenylacetate,COC(=O)Cc1ccccc1,22.6\n,CCOC(=O)CC(=O)OCC,\n";
const ELECTROPHILES: &str = "name,smiles\nbenzyl chloride,ClCc1ccccc1\n";

fn complete() -> CampaignSpec {
    let files = [
        ("substrates.csv", SUBSTRATES),
        ("electrophiles.csv", ELECTROPHILES),
    ];
    checked(&sources(COMPLETE, &files)).expect("a sound campaign")
}

#[test]
fn every_key_is_read() {
    let spec = complete();
    assert_eq!(spec.title, "Aryl acetates, Tuesday night");
    let substrates: Vec<_> = spec
        .substrates
        .iter()
        .map(|s| (s.name.as_str(), s.smiles.as_str(), s.pka_dmso, s.pka_sigma))
        .collect();
    assert_eq!(
        substrates,
        [
            ("methyl phenylacetate", "COC(=O)Cc1ccccc1", Some(22.6), None),
            ("CCOC(=O)CC(=O)OCC", "CCOC(=O)CC(=O)OCC", None, None),
            ("CC(=O)c1ccccc1", "CC(=O)c1ccccc1", None, None),
            (
                "nitroethane of the house",
                "CC[N+](=O)[O-]",
                Some(16.7),
                Some(0.2)
            ),
            ("CC#N", "CC#N", None, None),
        ]
    );
    let names = |axis: &enolattice_grid::AxisSpec| -> Vec<(String, String)> {
        axis.entries
            .iter()
            .map(|entry| (entry.name.clone(), entry.smiles.clone()))
            .collect()
    };
    let pair = |name: &str, smiles: &str| (name.to_owned(), smiles.to_owned());
    assert_eq!(names(&spec.bases), [pair("LDA", ""), pair("KOtBu", "")]);
    assert!(spec.electrophiles.all && !spec.bases.all);
    assert_eq!(
        names(&spec.electrophiles),
        [
            pair("benzyl chloride", "ClCc1ccccc1"),
            pair("", "BrCc1ccccc1"),
            pair("an allyl bromide", "C=CCBr"),
        ]
    );
    assert_eq!(names(&spec.solvents), [pair("THF", "")]);
    assert_eq!(names(&spec.additives), [pair("none", ""), pair("HMPA", "")]);
    let shelf = Stock {
        stock_mg: Some(500.0),
        lot: "L7".into(),
        location: "cabinet 3".into(),
        ..Stock::default()
    };
    assert_eq!(spec.substrates[3].stock, shelf);
    assert_eq!(spec.conditions.additive_equiv, [1.5]);
    assert_eq!(spec.conditions.temperature_c, [-20.0, 25.5]);
    assert_eq!(spec.conditions.formation_temperature_c, [-78.0]);
    assert_eq!(spec.conditions.base_equiv, [1.1]);
    assert_eq!(spec.conditions.electrophile_equiv, [1.2]);
    assert_eq!(spec.conditions.concentration_m, [0.2]);
    assert_eq!(spec.conditions.time_h, [16.0]);
    assert_eq!(spec.conditions.dosing_min, [10.0]);
    assert_eq!(spec.conditions.addition, ["substrate into base"]);
    assert_eq!(spec.target.yield_at_least, Some(0.6));
}

#[test]
fn values_keep_their_places() {
    let spec = complete();
    assert_eq!(
        (
            spec.substrates[1].place.file.as_str(),
            spec.substrates[1].place.line
        ),
        ("substrates.csv", 3)
    );
    assert_eq!(spec.bases.entries[1].place.field, "bases.library[1]");
    assert_eq!(spec.bases.entries[1].place.line, 17);
    assert_eq!(spec.solvents.entries[0].place.field, "solvents.library");
}

#[test]
fn the_files_a_campaign_wants_are_known_before_they_are_read() {
    assert_eq!(
        files_named(COMPLETE),
        ["substrates.csv", "electrophiles.csv"]
    );
    assert_eq!(
        files_named("[substrates]\nfile = [\"a.csv\", \"b.csv\", \"a.csv\"]\nx = =\n"),
        ["a.csv", "b.csv"]
    );
    assert_eq!(files_named("substrates = 3"), Vec::<String>::new());
}

/// A shelf in three forms: the same substrates, the same reagents.
#[test]
fn all_forms_of_files_give_the_same_rows() {
    let campaign = |ending: &str| {
        format!(
            "[substrates]\nfile = 's.{ending}'\n[electrophiles]\nfile = 'e.{ending}'\n\
             [bases]\nfile = 'b.csv'\n[solvents]\nfile = 'v.tsv'\n"
        )
    };
    let csv =
        "name,smiles,pka_dmso,stock_mg,lot\nester,CCOC(C)=O,29.5,120,L1\nsalt,CCOC(=O)CN.Cl,,,\n";
    let electrophiles = "smiles,name,stock_mg\nCCOC(C)=O,,120\n";
    let smi = "CCOC(C)=O ester\n# a comment\nCCOC(=O)CN.Cl\tsalt\n";
    let sdf = include_str!("../testdata/shelf.sdf");
    let bases =
        "name,stock_ml,supplied_concentration_m,price_per_ml,currency\nLDA,100,2.0,0.45,EUR\n";
    let solvents = "smiles\tlocation\nC1CCOC1\tcabinet 3\n";
    let read = |ending: &str, text: &str| {
        let files = [
            (format!("s.{ending}"), text),
            (
                format!("e.{ending}"),
                if ending == "csv" { electrophiles } else { text },
            ),
            ("b.csv".to_owned(), bases),
            ("v.tsv".to_owned(), solvents),
        ];
        let files: Vec<(&str, &str)> = files
            .iter()
            .map(|(name, text)| (name.as_str(), *text))
            .collect();
        checked(&sources(&campaign(ending), &files)).expect("a sound campaign")
    };
    let library = Library::builtin().expect("the tables are sound");
    let model = enolattice_model::Model::new(std::sync::Arc::new(library));
    let structures = |spec: &CampaignSpec| -> Vec<(String, String)> {
        let campaign = Campaign::new(spec, &model).expect("a sound campaign");
        let structures = campaign.substrates.iter();
        structures
            .map(|s| (s.name.clone(), s.molecule.canonical().to_owned()))
            .collect()
    };
    let (csv, smi, sdf) = (read("csv", csv), read("SMI", smi), read("sdf", sdf));
    assert_eq!(structures(&csv), structures(&smi));
    assert_eq!(structures(&csv), structures(&sdf));
    assert_eq!(csv.substrates[0].pka_dmso, Some(29.5));
    assert_eq!(sdf.substrates[0].pka_dmso, Some(29.5));
    assert_eq!(sdf.substrates[0].stock, csv.substrates[0].stock);
    assert_eq!(csv.electrophiles.entries[0].stock.stock_mg, Some(120.0));
    let left_out = "data fields that are no columns of a campaign were left out:";
    assert_eq!(
        sdf.notes,
        [
            format!("s.sdf: {left_out} `Vendor.ID`"),
            format!("e.sdf: {left_out} `PKA_DMSO`, `Vendor.ID`"),
        ]
    );
    let base = &csv.bases.entries[0].stock;
    assert_eq!(
        (base.supplied_concentration_m, base.price_per_ml),
        (Some(2.0), Some(0.45))
    );
    assert_eq!(csv.solvents.entries[0].stock.location, "cabinet 3");
}

#[test]
fn the_example_of_the_page_can_be_read() {
    let page = include_str!("../docs/campaign.md");
    let example = |kind: &str| {
        let (_, rest) = page.split_once(kind).expect("the page has an example");
        rest.split_once("```").expect("the example ends").0
    };
    let substrates = "name,smiles\nethyl phenylacetate,CCOC(=O)Cc1ccccc1\n";
    let files = [
        ("substrates.csv", substrates),
        ("yields.csv", example("```csv\n")),
    ];
    let spec = checked(&sources(example("```toml\n"), &files)).expect("is sound");
    assert_eq!((spec.substrates.len(), spec.measured.len()), (1, 2));
}

#[test]
fn the_demo_can_be_read() {
    let campaign = include_str!("../../../deploy/demo/campaign.toml");
    assert_eq!(files_named(campaign), ["substrates.csv"]);
    let files = [(
        "substrates.csv",
        include_str!("../../../deploy/demo/substrates.csv"),
    )];
    let read = checked(&sources(campaign, &files));
    assert!(read.is_ok_and(|spec| spec.substrates.len() >= 12));
}

#[test]
fn all_faults_of_all_files_are_listed_at_once() {
    let campaign = r#"titel = "misspelt"
[substrates]
file = ["substrates.csv", "lost.csv"]
smiles = ["CC(=O)C", "not a smiles"]
[[substrates.inline]]
name = "no structure"
[[substrates.inline]]
smiles = "CC#N"
pka_dmso = "high"
[bases]
library = ["LDA", "KOtBuu", 7]
[electrophiles]
smiles = "C1CC"
[solvents]
library = ["THF", ["THF", "DMF"], "THF/DMFF 1:1"]
[additives]
library = "18-crown-66"
[conditions]
temperature = 25
temperature_c = [25, 400, nan]
base_equiv = 0
concentration_m = "0.2 M"
addition = "substrate in base"
[target]
yield_at_least = 50
"#;
    let substrates = "name,smiles,pka_dmso,pka_sigma\n\
        sound,CCOC(C)=O,,\n\
        no ring end,C1CC,,\n\
        comma,\"CC(=O)C\",\"19,3\",\n\
        lonely sigma,CC(=O)CC,,0.5\n\
        short row,CC\n\
        two faults,C(,-99,\n\
        empty,,,\n";
    let faults = checked(&sources(campaign, &[("substrates.csv", substrates)]))
        .expect_err("a broken campaign");
    let toml = |line, field, code| ("campaign.toml", line, field, code);
    let csv = |line, field, code| ("substrates.csv", line, field, code);
    assert_eq!(
        places(&faults),
        [
            toml(1, "titel", "KEY_UNKNOWN"),
            toml(3, "substrates.file[1]", "FILE_MISSING"),
            toml(4, "substrates.smiles[1]", "STRUCTURE_INVALID"),
            toml(5, "substrates.inline[0].smiles", "VALUE_MISSING"),
            toml(9, "substrates.inline[1].pka_dmso", "VALUE_TYPE"),
            toml(11, "bases.library[2]", "VALUE_TYPE"),
            toml(11, "bases.library[1]", "REAGENT_UNKNOWN"),
            toml(13, "electrophiles.smiles", "STRUCTURE_INVALID"),
            toml(15, "solvents.library[1]", "VALUE_TYPE"),
            toml(15, "solvents.library[2]", "REAGENT_UNKNOWN"),
            toml(17, "additives.library", "REAGENT_UNKNOWN"),
            toml(19, "conditions.temperature", "KEY_UNKNOWN"),
            toml(20, "conditions.temperature_c[1]", "VALUE_OUT_OF_RANGE"),
            toml(20, "conditions.temperature_c[2]", "VALUE_OUT_OF_RANGE"),
            toml(21, "conditions.base_equiv", "VALUE_OUT_OF_RANGE"),
            toml(22, "conditions.concentration_m", "VALUE_TYPE"),
            toml(23, "conditions.addition", "VALUE_UNKNOWN"),
            toml(25, "target.yield_at_least", "VALUE_OUT_OF_RANGE"),
            csv(3, "smiles", "STRUCTURE_INVALID"),
            csv(4, "pka_dmso", "VALUE_TYPE"),
            csv(5, "pka_sigma", "VALUE_MISSING"),
            csv(6, "row", "FILE_SYNTAX"),
            csv(7, "smiles", "STRUCTURE_INVALID"),
            csv(7, "pka_dmso", "VALUE_OUT_OF_RANGE"),
            csv(8, "smiles", "VALUE_MISSING"),
        ]
    );
    let remedy = |field: &str| {
        let fault = faults.iter().find(|fault| fault.place.field == field);
        fault.map(|fault| (fault.value.as_str(), fault.remedy.as_str()))
    };
    assert_eq!(remedy("titel"), Some(("titel", "did you mean `title`?")));
    assert_eq!(
        remedy("conditions.temperature"),
        Some(("temperature", "did you mean `temperature_c`?"))
    );
    assert_eq!(
        remedy("bases.library[1]"),
        Some(("KOtBuu", "did you mean `KOtBu`?"))
    );
    assert_eq!(
        remedy("conditions.addition"),
        Some(("substrate in base", "did you mean `substrate into base`?"))
    );
    assert!(
        faults
            .iter()
            .all(|fault| !fault.reason.is_empty() && !fault.remedy.is_empty())
    );
}

#[test]
fn faults_of_syntax_do_not_hide_the_others_nor_invent_any() {
    let campaign =
        "title = \"open\nunknown = 3\n[substrates]\nsmiles = [\"C1CC\"]\n[bases]\nlibrary = LDA\n";
    let faults = checked(&sources(campaign, &[])).expect_err("a broken campaign");
    assert_eq!(
        places(&faults),
        [
            ("campaign.toml", 1, "syntax", "CAMPAIGN_SYNTAX"),
            ("campaign.toml", 2, "unknown", "KEY_UNKNOWN"),
            (
                "campaign.toml",
                4,
                "substrates.smiles[0]",
                "STRUCTURE_INVALID"
            ),
            ("campaign.toml", 6, "syntax", "CAMPAIGN_SYNTAX"),
        ]
    );
    assert_eq!(faults[3].value, "library = LDA");
}

#[test]
fn an_axis_without_values_is_named() {
    let campaign = "[substrates]\nsmiles = []\n[bases]\nlibrary = \"all\"\n[solvents]\n";
    let faults = checked(&sources(campaign, &[])).expect_err("three axes are empty");
    assert_eq!(
        places(&faults),
        [
            ("campaign.toml", 0, "electrophiles", "AXIS_EMPTY"),
            ("campaign.toml", 1, "substrates", "AXIS_EMPTY"),
            ("campaign.toml", 5, "solvents", "AXIS_EMPTY"),
        ]
    );
}

mod hostile {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn no_text_makes_the_reader_panic(
            campaign in "\\PC{0,60}|(\\[|\\]|=|\"|\n|substrates|file|smiles|1e999|\\.|\\{|\\}){0,40}",
            csv in "\\PC{0,80}|(name|smiles|,|\"|\r|\n|C1CC|\u{0}){0,40}",
        ) {
            let named = files_named(&campaign);
            let files: Vec<(&str, &str)> = named.iter().map(|name| (name.as_str(), csv.as_str())).collect();
            let _ = checked(&sources(&campaign, &files));
        }
    }
}

#[test]
fn a_campaign_too_large_to_read_is_refused_with_the_way_out() {
    let reading = read(&Sources {
        campaign_name: "night.toml".to_owned(),
        campaign: "[substrates]\nsmiles = [".to_owned() + &"\"CCO\",".repeat(200_000),
        files: BTreeMap::new(),
    });
    let faults = reading.sound().expect_err("too large");
    let [fault] = faults.as_slice() else {
        panic!("one fault, not {faults:?}");
    };
    assert!(
        fault.remedy.contains("files that the campaign names"),
        "{fault:?}"
    );
}
