//! How long does reading a campaign take, and does the limit on its structures keep that below a
//! second whatever they are?
//!
//! Files of drug-like molecules and of the structures that take the readers longest are filled up to
//! [`MAX_ATOMS`] and read; others are far beyond the limits and must be refused as fast:
//! `cargo bench -p enolattice-grid --bench reading`, with an argument only the cases whose names hold
//! it. Each case is read with all threads as a campaign is when it is submitted: the files, every
//! structure, the tables of the model, the grid and its fingerprint. Absolute figures depend on the
//! machine and on what else it does: where it is busy, compare the processor time of the program.
#![allow(clippy::print_stdout, reason = "a benchmark prints its answer")]

use std::collections::BTreeMap;
use std::fmt::Write;
use std::sync::Arc;
use std::time::{Duration, Instant};

use enolattice_grid::{Campaign, Grid, MAX_ATOMS, MAX_FILE_BYTES, Sources, read};
use enolattice_model::Model;
use enolattice_reagents::Library;

const DRUG_LIKE: [&str; 4] = [
    "CC(=O)Nc1ccc(cc1)S(=O)(=O)N1CCN(CC1)C(=O)Cc1ccc(OCC(=O)OCC)cc1",
    "COc1ccc(cc1)C(=O)CC(=O)N1CCN(CC1)c1ncnc2cc(OC)c(OCCCN3CCOCC3)cc12",
    "CC(C)[C@H](NC(=O)Cc1ccc(F)cc1)C(=O)N1CCC[C@H]1C(=O)Nc1ccc(C(C)=O)cc1",
    "CCOC(=O)CC(=O)c1cc2c(cc1OC)OCO2",
];

fn main() {
    let only = std::env::args().skip(1).find(|word| !word.starts_with('-'));
    let model = Arc::new(Model::new(Arc::new(
        Library::builtin().expect("the tables are sound"),
    )));
    println!(
        "{:<34} {:>9} {:>8} {:>7} {:>7} {:>7} {:>8}",
        "case", "count", "files s", "check s", "grid s", "whole s", "answer"
    );
    for (name, file, bytes) in cases() {
        if only
            .as_ref()
            .is_none_or(|only| name.contains(only.as_str()))
        {
            let axis = match name.ends_with("as electrophiles") {
                true => "electrophiles",
                false => "substrates",
            };
            time(name, axis, file, bytes, &model);
        }
    }
}

/// A campaign with one file, read and made ready to be screened.
fn time(name: &str, axis: &str, file: &str, bytes: Vec<u8>, model: &Arc<Model>) {
    let other = match axis {
        "substrates" => "[electrophiles]\nlibrary = 'MeI'",
        _ => "[substrates]\nsmiles = 'CC(C)=O'",
    };
    let sources = Sources {
        campaign_name: "c.toml".to_owned(),
        campaign: format!(
            "[{axis}]\nfile = '{file}'\n{other}\n[bases]\nlibrary = 'LDA'\n[solvents]\n\
             library = 'THF'\n"
        ),
        files: BTreeMap::from([(file.to_owned(), bytes)]),
    };
    let (reading, reading_took) = timed(|| read(&sources));
    let rows = reading.spec.substrates.len() + reading.spec.electrophiles.entries.len() - 1;
    let (campaign, checking_took) = timed(|| Campaign::new(&reading.spec, model));
    let (answer, grid_took) = timed(|| match campaign {
        Ok(campaign) => {
            let grid = Grid::new(campaign, model.clone()).expect("a grid within limits");
            let _fingerprint = grid.fingerprint();
            "read"
        }
        Err(_) => "refused",
    });
    let [files, check, grid] =
        [reading_took, checking_took, grid_took].map(|took| took.as_secs_f64());
    let whole = files + check + grid;
    println!("{name:<34} {rows:>9} {files:>8.3} {check:>7.3} {grid:>7.3} {whole:>7.3} {answer:>8}");
}

fn timed<T>(work: impl FnOnce() -> T) -> (T, Duration) {
    let start = Instant::now();
    let result = work();
    (result, start.elapsed())
}

type Case = (&'static str, &'static str, Vec<u8>);

fn cases() -> Vec<Case> {
    let drug_like = |i: usize| {
        let chain = "C".repeat(i / DRUG_LIKE.len() % 7);
        format!("{chain}{}", DRUG_LIKE[i % DRUG_LIKE.len()])
    };
    vec![
        ("3,000 drug-like molecules", "s.csv", csv(3_000, drug_like)),
        ("drug-like, to the limit", "s.csv", filled(drug_like)),
        ("one atom", "s.csv", filled(|_| "C".to_owned())),
        (
            "small esters",
            "s.csv",
            filled(|i| format!("CCOC(=O)CC(=O){}", "C".repeat(i % 9))),
        ),
        ("peptides of 140 atoms", "s.csv", filled(|i| peptide(12, i))),
        ("peptides of 300 atoms", "s.csv", filled(|i| peptide(25, i))),
        (
            "chains of 300 atoms",
            "s.csv",
            filled(|i| chain_with(i, "O", 299)),
        ),
        (
            "polyketones of 300 atoms",
            "s.csv",
            filled(|i| format!("{}{}", "CC(=O)".repeat(90), "C".repeat(i % 20))),
        ),
        (
            "polyphenylenes of 300 atoms",
            "s.csv",
            filled(|i| format!("{}{}", "c1ccc(cc1)".repeat(48), "C".repeat(1 + i % 9))),
        ),
        (
            "crossed rings of 180 atoms",
            "s.csv",
            filled(|i| format!("{}{}", crossed_rings(90), "C".repeat(1 + i % 100))),
        ),
        (
            "polyols of 300 atoms",
            "s.csv",
            filled(|i| format!("C{}{}", "[C@H](O)".repeat(130), "C".repeat(1 + i % 30))),
        ),
        (
            "phosphoryl compounds",
            "s.csv",
            filled(|i| {
                format!(
                    "{}{}",
                    "P(=O)(C)[C@H](O)N1C(=O)CC1".repeat(2),
                    "C".repeat(1 + i % 9)
                )
            }),
        ),
        (
            "drug-like, as electrophiles",
            "s.csv",
            filled(|i| format!("BrC{}", drug_like(i))),
        ),
        (
            "bromides, as electrophiles",
            "s.csv",
            filled(|i| format!("BrCC(=O)C{}", "C".repeat(i % 200))),
        ),
        (
            "peptides, as electrophiles",
            "s.csv",
            filled(|i| format!("{}Cl", peptide(24, i).trim_end_matches('O'))),
        ),
        ("SDF of chains", "s.sdf", sdf_of_chains(30)),
        ("SDF of long chains", "s.sdf", sdf_of_chains(299)),
        (
            "beyond: a million structures",
            "s.smi",
            "C\n".repeat(1_000_000).into_bytes(),
        ),
        (
            "beyond: 20,000 long chains",
            "s.smi",
            format!("{}\n", "C".repeat(300)).repeat(20_000).into_bytes(),
        ),
        (
            "beyond: a file of commas",
            "s.csv",
            vec![b','; MAX_FILE_BYTES],
        ),
        (
            "beyond: a file of empty lines",
            "s.csv",
            vec![b'\n'; MAX_FILE_BYTES],
        ),
        (
            "beyond: rows of faults",
            "s.csv",
            csv(1_000_000, |_| "C1CC".to_owned()),
        ),
        (
            "beyond: an SDF of empty records",
            "s.sdf",
            "$$$$\n".repeat(MAX_FILE_BYTES / 5).into_bytes(),
        ),
    ]
}

/// As many rows as a campaign may have, told by trying.
fn filled(smiles: impl Fn(usize) -> String) -> Vec<u8> {
    let atoms = |i: usize| {
        let written = smiles(i)
            .bytes()
            .filter(|b| b.is_ascii_alphabetic())
            .count() as u64;
        written.max(8).max(written * written / 64)
    };
    let mut sum = 0;
    let rows = (0..).take_while(|i| {
        sum += atoms(*i);
        sum <= MAX_ATOMS
    });
    csv(rows.count(), smiles)
}

fn csv(rows: usize, smiles: impl Fn(usize) -> String) -> Vec<u8> {
    let mut text = "name,smiles\n".to_owned();
    for i in 0..rows {
        writeln!(text, "s{i},{}", smiles(i)).expect("a text can be written to");
    }
    text.into_bytes()
}

fn peptide(residues: usize, variant: usize) -> String {
    let chain = "N[C@@H](Cc1ccccc1)C(=O)".repeat(residues);
    let place = 23 * (variant % residues);
    format!("CC(=O){}NCC(=O){}O", &chain[..place], &chain[place..])
}

/// A chain of carbon with one other atom in it.
fn chain_with(place: usize, atom: &str, length: usize) -> String {
    let place = 1 + place % (length / 2);
    format!("{}{atom}{}", "C".repeat(place), "C".repeat(length - place))
}

/// Two chains, each atom of the first bound to that of the second.
fn crossed_rings(labels: usize) -> String {
    let chain: String = (0..labels)
        .map(|label| format!("C%{}", label + 10))
        .collect();
    format!("{chain}{chain}")
}

fn sdf_of_chains(atoms: usize) -> Vec<u8> {
    let mut record = format!(
        "chain\n\n\n{atoms:>3}{:>3}  0  0  0  0  0  0  0  0999 V2000\n",
        atoms - 1
    );
    for _ in 0..atoms {
        record += "    0.0000    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0\n";
    }
    for atom in 1..atoms {
        writeln!(record, "{atom:>3}{:>3}  1  0", atom + 1).expect("a text can be written to");
    }
    record += "M  END\n$$$$\n";
    let counted = atoms.max(8).max(atoms * atoms / 64);
    record.repeat(MAX_ATOMS as usize / counted).into_bytes()
}
