//! Hostile files: nothing panics, and what is looked at is bounded by what the files hold.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, Entry, InputError, MAX_FAULTS, Sources, SubstrateEntry,
    files_named, read,
};
use enolattice_reagents::Library;
use proptest::prelude::*;

static LIBRARY: LazyLock<Library> =
    LazyLock::new(|| Library::builtin().expect("the tables are sound"));

fn checked(campaign: &str, files: &[(&str, &[u8])]) -> Vec<InputError> {
    let files: BTreeMap<String, Vec<u8>> = files
        .iter()
        .map(|(name, bytes)| ((*name).to_owned(), bytes.to_vec()))
        .collect();
    let _ = files_named(campaign);
    let reading = read(&Sources {
        campaign_name: "c.toml".into(),
        campaign: campaign.into(),
        files,
    });
    let faults = reading.with(Campaign::faults(&reading.spec, &LIBRARY));
    assert!(faults.len() <= MAX_FAULTS + 1);
    for fault in &faults {
        let told = fault.to_string();
        assert!(told.len() < 4_000, "{} bytes", told.len());
        assert!(!told.chars().any(char::is_control), "{told:?}");
    }
    faults
}

const FILES: &str =
    "[substrates]\nfile = ['s.csv', 's.smi', 's.sdf', 's.tsv']\n[bases]\nfile = 's.csv'\n";

/// All four forms made of the same bytes.
fn all_forms(bytes: &[u8]) -> Vec<InputError> {
    let files = ["s.csv", "s.smi", "s.sdf", "s.tsv"].map(|name| (name, bytes));
    checked(FILES, &files)
}

#[test]
fn long_lines_and_long_values_are_refused_without_being_parsed() {
    let long = "C".repeat(1_000_000);
    let long = long.as_str();
    let forms: [(&str, Vec<u8>); 7] = [
        ("one line", long.into()),
        ("a row", format!("name,smiles\n{long},{long}\n").into()),
        ("a quoted value", format!("name,smiles\n\"{long}\n").into()),
        ("zeros", vec![0; 1_000_000]),
        ("empty lines", vec![b'\n'; 1_000_000]),
        ("columns", vec![b','; 1_000_000]),
        ("quotation marks", vec![b'"'; 999_999]),
    ];
    for (what, bytes) in forms {
        assert!(!all_forms(&bytes).is_empty(), "{what}");
    }
    let campaigns = [
        ("a SMILES", format!("[substrates]\nsmiles = '{long}'")),
        ("a base", format!("[bases]\nlibrary = '{long}'")),
        (
            "a mixture",
            format!("[solvents]\nlibrary = '{long}/{long}'"),
        ),
        ("a key", format!("{long} = 1")),
        ("a title", format!("title = '{long}'")),
        ("brackets", "[".repeat(100_000)),
        ("lists", format!("a = {}", "[".repeat(100_000))),
        ("tables", format!("a = {}", "{a=".repeat(100_000))),
        ("dotted keys", "a.".repeat(100_000)),
    ];
    for (what, campaign) in campaigns {
        assert!(!checked(&campaign, &[]).is_empty(), "{what}");
    }
}

#[test]
fn counts_that_promise_too_much_are_refused_at_their_line() {
    let v2000 = "t\n\n\n999999  0  0  0  0  0  0  0  0999 V2000\nM  END\n$$$$\n";
    let v3000 = "t\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\n\
                 M  V30 COUNTS 4000000000 4000000000 0 0 0\nM  V30 END CTAB\nM  END\n$$$$\n";
    let file = format!("{v2000}{v3000}");
    let faults = checked(
        "[substrates]\nfile = 's.sdf'",
        &[("s.sdf", file.as_bytes())],
    );
    let lines: Vec<u32> = faults
        .iter()
        .filter(|fault| fault.place.file == "s.sdf")
        .map(|fault| fault.place.line)
        .collect();
    assert_eq!(lines, [1, 7]);
    let endless = format!(
        "t\n\n\n  1  0  0  0  0  0  0  0  0  0999 V2000\n{}",
        "x\n".repeat(1_000_000)
    );
    assert!(
        !checked(
            "[substrates]\nfile = 's.sdf'",
            &[("s.sdf", endless.as_bytes())]
        )
        .is_empty()
    );
}

#[test]
fn a_file_of_nothing_but_faults_is_not_looked_at_to_its_end() {
    let rows = "x,C1CC\n".repeat(200_000);
    let faults = checked(
        "[substrates]\nfile = 's.csv'",
        &[("s.csv", format!("name,smiles\n{rows}").as_bytes())],
    );
    assert_eq!(faults.len(), MAX_FAULTS + 1);
    let counted: usize = faults[MAX_FAULTS].value.parse().expect("a number");
    // a run of rows is looked at side by side; the next one is not begun
    assert!(counted < 10_000, "{counted}");
    let names = AxisSpec {
        all: false,
        entries: vec![
            Entry {
                name: "unobtainium".into(),
                ..Entry::default()
            };
            200_000
        ],
    };
    let spec = CampaignSpec {
        substrates: vec![SubstrateEntry::default()],
        bases: names.clone(),
        solvents: names.clone(),
        electrophiles: names,
        ..CampaignSpec::default()
    };
    assert_eq!(Campaign::faults(&spec, &LIBRARY).len(), MAX_FAULTS + 1);
}

proptest! {
    #[test]
    fn no_bytes_make_the_readers_panic(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        all_forms(&bytes);
        checked(&String::from_utf8_lossy(&bytes), &[]);
    }

    #[test]
    fn no_words_of_the_forms_make_the_readers_panic(
        words in "(name|smiles|pka_dmso|stock_mg|,|\t|\"|\r\n|\n|\\$\\$\\$\\$|M  END|M  V30 |COUNTS|V2000|V3000|>  <name>|  1  0|C1CC|CC=O|\\.|\\[Na\\+\\]|\u{0}|é|0.5|nan|1e999){0,60}",
    ) {
        all_forms(words.as_bytes());
    }

    #[test]
    fn no_names_make_the_check_panic(name in "\\PC{0,30}|(THF|DMF|/|:| |4|1|0|none){0,8}", number in any::<f64>()) {
        let entry = Entry { name: name.clone(), equiv: Some(number), ..Entry::default() };
        let axis = AxisSpec { all: false, entries: vec![entry] };
        let spec = CampaignSpec {
            title: name.clone(),
            substrates: vec![SubstrateEntry { name: name.clone(), smiles: name, pka_dmso: Some(number), ..SubstrateEntry::default() }],
            bases: axis.clone(),
            electrophiles: axis.clone(),
            solvents: axis.clone(),
            additives: axis,
            ..CampaignSpec::default()
        };
        Campaign::faults(&spec, &LIBRARY);
    }
}
