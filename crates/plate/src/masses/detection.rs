//! Which detectors see a molecule.

use enolattice_molecule::Molecule;
use serde::{Deserialize, Serialize};

use super::groups;

/// How well a detector sees a group.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum Strength {
    /// As a rule at the concentrations of a plate.
    Strong,
    /// Where nothing stronger is beside it, or as an adduct only; not to be relied on.
    Weak,
}

/// That a detector sees a molecule, and by what.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct SeenBy {
    /// How well.
    pub strength: Strength,
    /// The group that is seen.
    pub group: String,
}

/// Which detectors see a molecule; `common practice`, and no promise of a response.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Detection {
    /// Absorption above 220 nm.
    pub uv: Option<SeenBy>,
    /// Electrospray, positive mode.
    pub positive: Option<SeenBy>,
    /// Electrospray, negative mode.
    pub negative: Option<SeenBy>,
    /// What to do where neither UV nor electrospray sees it well: look by another method, and why.
    pub other_method: Option<String>,
}

pub(super) fn detection(molecule: &Molecule) -> Detection {
    let charge: i32 = molecule
        .atoms()
        .iter()
        .map(|atom| i32::from(atom.charge))
        .sum();
    let seen = |found: Option<(Strength, &str)>| {
        found.map(|(strength, group)| SeenBy {
            strength,
            group: group.to_owned(),
        })
    };
    let ion = |group: &str| {
        Some(SeenBy {
            strength: Strength::Strong,
            group: group.to_owned(),
        })
    };
    let uv = seen(groups::chromophore(molecule));
    let (positive, negative) = match charge {
        0 => (
            seen(groups::taking_a_cation(molecule)),
            seen(groups::losing_a_proton(molecule)),
        ),
        1.. => (ion("charge of its own"), None),
        _ => (None, ion("charge of its own")),
    };
    let other_method = other_method(&uv, &positive, &negative);
    Detection {
        uv,
        positive,
        negative,
        other_method,
    }
}

/// Look elsewhere where nothing is strong: weak responses alone give no number to trust.
fn other_method(
    uv: &Option<SeenBy>,
    positive: &Option<SeenBy>,
    negative: &Option<SeenBy>,
) -> Option<String> {
    let all = [uv, positive, negative].map(Option::as_ref);
    let found = || all.into_iter().flatten();
    if found().any(|seen| seen.strength == Strength::Strong) {
        return None;
    }
    let weak: Vec<&str> = found().map(|seen| seen.group.as_str()).collect();
    let reason = if weak.is_empty() {
        "no chromophore above 220 nm and no group that takes or loses a charge".to_owned()
    } else {
        let mut weak = weak;
        weak.dedup();
        format!("seen weakly at best, by {}", weak.join(" and "))
    };
    Some(format!("look by another method (GC, NMR, ELSD): {reason}"))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Facts of the trade: UV, positive mode, negative mode; + strong, w weak, - none.
    #[test]
    fn common_compounds_are_seen_as_the_trade_knows() {
        for (smiles, expected) in [
            ("CC(=O)c1ccccc1", "+w-"),
            ("CC(=O)CCCC", "ww-"),
            ("CC(=O)/C=C/C", "+w-"),
            ("C=CC=O", "+w-"),
            ("COC(=O)C=C", "-w-"),
            ("C=CC=C", "+--"),
            ("CCCCCC", "---"),
            ("CCCCBr", "---"),
            ("CCCCI", "w--"),
            ("CCOCC", "---"),
            ("COCCOCCOC", "-w-"),
            ("CCOC(=O)CCC", "-w-"),
            ("CC(=O)CC(C)=O", "+w+"),
            ("CCOC(=O)CC(C)=O", "ww+"),
            ("CCOC(=O)CC(=O)OCC", "-ww"),
            ("CCOC(=O)C(C)(C)C(C)=O", "ww-"),
            ("N#CCC#N", "--+"),
            ("CCCC#N", "---"),
            ("CC[N+](=O)[O-]", "--w"),
            ("C=C[N+](=O)[O-]", "+--"),
            ("CCN(CC)CC", "-+-"),
            ("c1ccncc1", "++-"),
            ("Nc1ccccc1", "++-"),
            ("CC(=O)N(C)C", "-w-"),
            ("CS(C)=O", "-+-"),
            ("CS(C)(=O)=O", "-w-"),
            ("CCCC(=O)O", "-w+"),
            ("Oc1ccccc1", "+-+"),
            ("O=C1CCC(=O)N1", "-w+"),
            ("C[N+](C)(C)Cc1ccccc1", "++-"),
            ("[O-]C(=O)CC", "--+"),
            ("CC1=NCCN1", "-+-"),
            ("O=P(c1ccccc1)(c1ccccc1)c1ccccc1", "++-"),
            ("CCSSCC", "w--"),
            ("CC(=O)C=C(C)OC", "+w-"),
            ("O=Cc1ccco1", "+w-"),
            ("CC(C)(C)[Si](C)(C)OC=C", "---"),
        ] {
            let found = detection(&Molecule::parse(smiles).unwrap());
            let code = |seen: &Option<SeenBy>| match seen {
                None => '-',
                Some(seen) if seen.strength == Strength::Strong => '+',
                Some(_) => 'w',
            };
            let codes: String = [&found.uv, &found.positive, &found.negative]
                .map(code)
                .iter()
                .collect();
            assert_eq!(codes, expected, "{smiles}: {found:?}");
            assert_eq!(
                found.other_method.is_none(),
                expected.contains('+'),
                "{smiles}"
            );
        }
    }

    #[test]
    fn the_flag_gives_its_grounds() {
        let flag = |smiles: &str| {
            detection(&Molecule::parse(smiles).unwrap())
                .other_method
                .unwrap()
        };
        assert!(flag("CCCCCC").contains("no chromophore above 220 nm"));
        assert!(flag("CCC(=O)CC").contains("ketone or aldehyde and carbonyl group"));
    }
}
