//! Hostile files: nothing panics, and what is looked at is bounded by what the files hold.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, Entry, InputError, MAX_ATOMS, MAX_FAULTS, Sources,
    SubstrateEntry, files_named, read,
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

const FILES: &str = "[substrates]\nfile = ['s.csv', 's.smi', 's.sdf', 's.tsv']\n[bases]\nfile = 's.csv'\n\
     [measured]\nfile = 's.csv'\n";

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
fn more_structure_than_can_be_read_in_time_is_refused_before_it_is_read() {
    let chain = "C".repeat(300);
    let smiles = format!("{chain}\n").repeat(20_000);
    let sdf = {
        let counts = "  2  1  0  0  0  0  0  0  0  0999 V2000\n";
        let atoms = "    0.0000    0.0000    0.0000 C   0  0\n".repeat(2);
        let record = format!("t\n\n\n{counts}{atoms}  1  2  1  0\nM  END\n$$$$\n");
        record.repeat(30_000)
    };
    let csv = format!("name,smiles\n{}", "n,C\n".repeat(99_999));
    for (file, text) in [("s.smi", smiles), ("s.sdf", sdf), ("s.csv", csv)] {
        let campaign = format!(
            "[substrates]\nfile = '{file}'\n[bases]\nlibrary = 'LDA'\n[electrophiles]\n\
             library = 'MeI'\n[solvents]\nlibrary = 'THF'\n"
        );
        let faults = checked(&campaign, &[(file, text.as_bytes())]);
        let codes: Vec<&str> = faults.iter().map(|fault| fault.code).collect();
        assert_eq!(codes, ["CAMPAIGN_TOO_LARGE"], "{file}: {faults:?}");
        assert_eq!(faults[0].place.file, file);
        let told = faults[0].to_string();
        assert!(told.contains(&MAX_ATOMS.to_string()), "{told}");
    }
}

#[test]
fn a_row_without_an_end_is_not_read_to_its_end() {
    let commas = format!("name,smiles\na,CC{}\n", ",".repeat(1_000_000));
    let fields = format!("name,smiles\n{}", "\"\n\",".repeat(300_000));
    let blank = format!("name,smiles\na,CC{}b,CO\n", "\n".repeat(300_000));
    let lines = |text: &str| -> Vec<(u32, &'static str)> {
        let faults = checked(
            "[substrates]\nfile = 's.csv'",
            &[("s.csv", text.as_bytes())],
        );
        faults
            .iter()
            .filter(|fault| fault.place.file == "s.csv")
            .map(|fault| (fault.place.line, fault.code))
            .collect()
    };
    assert_eq!(lines(&commas), [(2, "FILE_SYNTAX")]);
    assert_eq!(lines(&fields), [(2, "FILE_SYNTAX")]);
    assert_eq!(lines(&blank), []);
}

#[test]
fn a_file_of_nothing_but_faults_is_not_looked_at_to_its_end() {
    let rows = "x,C1CC\n".repeat(14_000);
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

#[test]
fn measured_yields_of_nothing_but_faults_are_not_looked_at_to_their_end() {
    let heading = "substrate,base,electrophile,solvent,temperature_c,yield_fraction\n";
    let long = "C".repeat(1_000_000);
    let rows = [
        "x,y,z,w,25,0.5\n".repeat(200_000),
        "CC(C)=O,LDA,MeI,THF,25,0.5\n".repeat(200_000),
        format!("{long},{long},{long},{long},{long},{long}\n"),
        format!("{}\n", ["a/".repeat(100_000).as_str(); 6].join(",")),
    ];
    for rows in rows {
        let campaign = "[substrates]\nsmiles = 'CC(C)=O'\n[measured]\nfile = 'y.csv'";
        let file = format!("{heading}{rows}");
        let faults = checked(campaign, &[("y.csv", file.as_bytes())]);
        assert!(faults.iter().any(|fault| fault.place.file == "y.csv"));
    }
}

/// A sound campaign with a file of each form.
const SOUND: [(&str, &str); 6] = [
    (
        "c.toml",
        "title = \"sound\"\n[substrates]\nfile = [\"s.csv\", \"s.smi\", \"s.sdf\"]\nsmiles = \"CC#N\"\n\
         [[substrates.inline]]\nname = \"k\"\nsmiles = \"CC(C)=O\"\npka_dmso = 26.5\npka_sigma = 0.1\n\
         [bases]\nfile = \"b.tsv\"\nlibrary = [\"KOtBu\", \"all\"]\n[electrophiles]\nlibrary = \"MeI\"\n\
         smiles = [\"BrCc1ccccc1\"]\n[solvents]\nlibrary = [\"THF\", \"THF/DMF 4:1\"]\n[additives]\n\
         library = [\"none\", \"HMPA\"]\n[conditions]\ntemperature_c = [-78, 0x10, 25.5]\n\
         addition = \"all together\"\n[target]\nyield_at_least = 0.5\n[measured]\nfile = \"y.csv\"\n",
    ),
    (
        "s.csv",
        "name,smiles,pka_dmso,stock_mg,price_per_g,currency\n\"a, b\",CCOC(=O)CC(=O)OCC,16.4,20,1.5,EUR\n",
    ),
    (
        "s.smi",
        "# shelf\nCC(=O)c1ccccc1 acetophenone\n[Na+].CC(=O)[CH-]C(C)=O\n",
    ),
    (
        "s.sdf",
        "t\n\n\n  2  1  0  0  0  0  0  0  0  0999 V2000\n\
         \x20   0.0000    0.0000    0.0000 C   0  0\n    1.5000    0.0000    0.0000 O   0  0\n\
         \x20 1  2  1  0\nM  END\n>  <pka_dmso>\n29.0\n\n$$$$\n",
    ),
    (
        "b.tsv",
        "name\tsmiles\tlot\nLDA\t\tL7\n\tCC(C)(C)[O-].[Na+]\t\n",
    ),
    (
        "y.csv",
        "substrate,base,electrophile,solvent,additive,temperature_c,yield_fraction,sigma,note\n\
         k,LDA,MeI,THF,none,-78,0.85,0.03,\"isolated, twice\"\nCC#N,LDA,CI,THF/DMF 4:1,HMPA,25.5,0,,\n",
    ),
];

/// What a change of a file does to it.
#[derive(Clone, Debug)]
enum Change {
    Remove(usize, usize),
    Repeat(usize, usize),
    Insert(usize, Vec<u8>),
}

impl Change {
    fn apply(&self, bytes: &mut Vec<u8>) {
        let span = |at: usize, length: usize| {
            let at = at % (bytes.len() + 1);
            at..(at + length).min(bytes.len())
        };
        match self {
            Change::Remove(at, length) => drop(bytes.drain(span(*at, *length))),
            Change::Repeat(at, length) => {
                let span = span(*at, *length);
                let end = span.end;
                let twice = bytes[span].to_vec();
                bytes.splice(end..end, twice);
            }
            Change::Insert(at, new) => {
                let at = at % (bytes.len() + 1);
                bytes.splice(at..at, new.iter().copied());
            }
        }
    }
}

fn change() -> impl Strategy<Value = Change> {
    let at = || any::<usize>();
    let words = prop::sample::select(vec![
        "\"",
        "'",
        "[",
        "]",
        "[[",
        "=",
        ",",
        "\n",
        "\t",
        "é",
        "\0",
        "nan",
        "inf",
        "-1e999",
        "1_0",
        "all",
        "none",
        "/",
        "4:1:",
        "C1",
        "(",
        ".",
        "{}",
        "#",
        "$$$$",
        "M  END",
        "999",
        "true",
        "1979-05-27",
    ]);
    let word = words.prop_map(|word| word.as_bytes().to_vec());
    prop_oneof![
        (at(), 0usize..40).prop_map(|(at, length)| Change::Remove(at, length)),
        (at(), 0usize..80).prop_map(|(at, length)| Change::Repeat(at, length)),
        (at(), word).prop_map(|(at, word)| Change::Insert(at, word)),
        (at(), prop::collection::vec(any::<u8>(), 1..4))
            .prop_map(|(at, bytes)| Change::Insert(at, bytes)),
    ]
}

#[test]
fn the_campaign_that_is_changed_is_sound() {
    let (_, campaign) = SOUND[0];
    let files = SOUND.map(|(name, text)| (name, text.as_bytes()));
    assert_eq!(checked(campaign, &files[1..]), []);
}

proptest! {
    #[test]
    fn no_change_of_a_sound_campaign_makes_its_check_panic(
        changes in prop::collection::vec((0usize..6, change()), 1..6),
    ) {
        let mut files = SOUND.map(|(name, text)| (name, text.as_bytes().to_vec()));
        for (file, change) in changes {
            change.apply(&mut files[file].1);
        }
        let campaign = String::from_utf8_lossy(&files[0].1).into_owned();
        let files: Vec<(&str, &[u8])> = files[1..].iter().map(|(name, bytes)| (*name, bytes.as_slice())).collect();
        checked(&campaign, &files);
    }

    #[test]
    fn no_bytes_make_the_readers_panic(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        all_forms(&bytes);
        checked(&String::from_utf8_lossy(&bytes), &[]);
    }

    #[test]
    fn no_words_of_the_forms_make_the_readers_panic(
        words in "(name|smiles|pka_dmso|stock_mg|,|\t|\"|\r\n|\n|\\$\\$\\$\\$|M  END|M  V30 |COUNTS|V2000|V3000|>  <name>|substrate|base|electrophile|solvent|temperature_c|yield_fraction|  1  0|C1CC|CC=O|\\.|\\[Na\\+\\]|\u{0}|é|0.5|nan|1e999){0,60}",
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
