//! Molfiles of RDKit, and hostile ones.

use enolattice_molecule::Molecule;
use proptest::prelude::*;

const REFERENCE: &str = include_str!("../testdata/rdkit_molfiles.sdf");

/// Fragments of a SMILES, each canonical where it is a molecule, in order.
fn canonical(smiles: &str) -> Vec<String> {
    let canonical = |part: &str| match Molecule::parse(part) {
        Ok(molecule) => molecule.canonical().to_owned(),
        Err(_) => part.to_owned(),
    };
    let mut parts: Vec<String> = smiles.split('.').map(canonical).collect();
    parts.sort();
    parts
}

#[test]
fn both_forms_give_the_molecules_that_rdkit_reads() {
    let mut records = 0;
    for record in REFERENCE
        .split("$$$$\n")
        .filter(|record| !record.is_empty())
    {
        let (block, fields) = record.split_once(">  <canonical>\n").expect("a field");
        let expected = fields.lines().next().expect("a SMILES");
        let smiles = Molecule::smiles_of_molfile(block).expect("a molfile");
        let title = block.lines().next().unwrap_or_default();
        assert_eq!(canonical(&smiles), canonical(expected), "{title}: {smiles}");
        records += 1;
    }
    assert!(records >= 200, "{records}");
}

fn refusal(block: &str) -> String {
    Molecule::smiles_of_molfile(block)
        .expect_err("no molfile")
        .to_string()
}

#[test]
fn what_is_beyond_the_caps_is_not_parsed() {
    let counts =
        |counts: &str| format!("t\n\n\n{counts}  0  0  0  0  0  0  0  0999 V2000\nM  END\n");
    assert!(refusal(&counts("999999")).contains("999 atoms"));
    assert!(refusal(&counts("  2601")).contains("601 bonds"));
    assert!(refusal(&counts("  x  1")).contains("does not count"));
    assert!(refusal(&counts("  0  0")).contains("no atoms"));
    let v3000 = |counts: &str| {
        format!(
            "t\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS {counts}\nM  END\n"
        )
    };
    assert!(refusal(&v3000("4000000000 1 0 0 0")).contains("4000000000 atoms"));
    assert!(refusal(&v3000("99999999999999999999999 1 0 0 0")).contains("does not count"));
    assert!(refusal(&"C".repeat(Molecule::MAX_MOLFILE_BYTES + 1)).contains("bytes"));
}

proptest! {
    #[test]
    fn no_text_makes_the_reader_panic(
        block in "\\PC{0,120}|([ \n]|M  V30 |COUNTS|BEGIN|END|ATOM|BOND|CTAB|[0-9]{1,3}|C|N|R#|V2000|V3000|M  CHG|M  ISO|-|\\.){0,80}",
        cut in 0usize..4000,
        flip in any::<u8>(),
    ) {
        let _ = Molecule::smiles_of_molfile(&block);
        let _ = Molecule::smiles_of_molfile(&format!("t\n\n\n{block}"));
        let mut bytes = REFERENCE.as_bytes()[..4000].to_vec();
        bytes[cut] = flip;
        let text = String::from_utf8_lossy(&bytes).into_owned();
        for record in text.split("$$$$\n") {
            let _ = Molecule::smiles_of_molfile(record);
        }
        let _ = Molecule::smiles_of_molfile(text.get(..cut).unwrap_or_default());
    }
}
