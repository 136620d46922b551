//! The wrong inputs of `docs/faults.md` are answered with the messages that stand there.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use enolattice_grid::{Campaign, Sources, read};
use enolattice_reagents::Library;

const PAGE: &str = include_str!("../docs/faults.md");

/// What stands in for the tables that an input does not show.
const SOUND: [(&str, &str); 4] = [
    ("substrates", "smiles = \"CCOC(=O)CC(=O)OCC\""),
    ("bases", "library = \"LDA\""),
    ("electrophiles", "library = \"MeI\""),
    ("solvents", "library = \"THF\""),
];

/// An input of the page, with what is said about it.
#[derive(Default)]
struct Input {
    title: String,
    campaign: String,
    files: BTreeMap<String, Vec<u8>>,
    said: String,
}

/// The sections of the page: fenced blocks of TOML, of files by name, and the messages as text.
fn inputs() -> Vec<Input> {
    let mut inputs: Vec<Input> = Vec::new();
    let mut lines = PAGE.lines();
    while let Some(line) = lines.next() {
        if let Some(title) = line.strip_prefix("## ") {
            inputs.push(Input {
                title: title.to_owned(),
                ..Input::default()
            });
        }
        let (Some(kind), Some(input)) = (line.strip_prefix("```"), inputs.last_mut()) else {
            continue;
        };
        let block: Vec<&str> = lines.by_ref().take_while(|line| *line != "```").collect();
        let text = block.join("\n") + "\n";
        match kind.split_once(' ') {
            None if kind == "toml" => input.campaign = text,
            None => input.said = text,
            Some((_, file)) => drop(input.files.insert(file.to_owned(), text.into_bytes())),
        }
    }
    inputs
}

/// The messages for an input, a line each.
fn said(input: &Input) -> String {
    static LIBRARY: LazyLock<Library> =
        LazyLock::new(|| Library::builtin().expect("the tables are sound"));
    let mut campaign = input.campaign.clone();
    for (table, line) in SOUND {
        let is_shown =
            campaign.contains(&format!("[{table}")) || campaign.contains(&format!("{table}."));
        if !is_shown && !campaign.contains("[]") {
            campaign += &format!("[{table}]\n{line}\n");
        }
    }
    let reading = read(&Sources {
        campaign_name: "campaign.toml".into(),
        campaign,
        files: input.files.clone(),
    });
    let faults = reading.with(Campaign::faults(&reading.spec, &LIBRARY));
    faults.iter().map(|fault| format!("{fault}\n")).collect()
}

#[test]
fn the_page_shows_what_is_said() {
    let inputs = inputs();
    assert!(inputs.len() >= 30, "{}", inputs.len());
    for input in inputs {
        assert_eq!(said(&input), input.said, "{}", input.title);
    }
}
