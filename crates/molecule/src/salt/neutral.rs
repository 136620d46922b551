//! The neutral form of an ion, with its atoms in the order in which they are written.

use crate::groups::{CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Molecule, StructureError, reading};

/// A molecule whose acidic cations and basic anions have been made neutral.
pub(super) struct Neutral {
    pub(super) molecule: Molecule,
    /// Protons taken from cations.
    pub(super) lost: u8,
    /// Protons given to anions.
    pub(super) gained: u8,
}

/// Takes a proton from each N–H⁺ and gives one to each anion of O, S, N and C; charges that stand
/// side by side (nitro, azide, N-oxide) stay.
pub(super) fn of(text: &str) -> Result<Neutral, StructureError> {
    let charged = Molecule::parse(text)?;
    let changes: Vec<i8> = (0..charged.atoms().len())
        .map(|atom| change(&charged, atom))
        .collect();
    let count = |wanted: i8| changes.iter().filter(|change| **change == wanted).count() as u8;
    let (lost, gained) = (count(-1), count(1));
    let molecule = if lost + gained == 0 {
        charged
    } else {
        Molecule::parse(&rewritten(text, &changes)?)?
    };
    Ok(Neutral {
        molecule,
        lost,
        gained,
    })
}

/// Protons that an atom gets (1) or loses (−1).
fn change(molecule: &Molecule, atom: usize) -> i8 {
    let this = molecule.atoms()[atom];
    let beside = |sign: i8| {
        let mut around = molecule.neighbours(atom).iter();
        around.any(|(other, _)| molecule.atoms()[*other].charge.signum() == sign)
    };
    match (this.charge, this.element) {
        (1, NITROGEN) if this.hydrogens > 0 && !beside(-1) => -1,
        (-1, OXYGEN | SULFUR | NITROGEN | CARBON) if !beside(1) => 1,
        _ => 0,
    }
}

/// The text with other hydrogens and charges in the brackets of the atoms that change.
fn rewritten(text: &str, changes: &[i8]) -> Result<String, StructureError> {
    let mut written = String::with_capacity(text.len() + 8);
    let mut atom = 0;
    let mut rest = text;
    while let Some(first) = rest.chars().next() {
        let length = match first {
            '[' => rest.find(']').map_or(rest.len(), |end| end + 1),
            _ if rest.starts_with("Cl") || rest.starts_with("Br") => 2,
            _ => first.len_utf8(),
        };
        let (token, after) = rest.split_at(length);
        rest = after;
        let is_hydrogen =
            token.starts_with("[H") && !token.contains("[He") && !token.contains("[Hg");
        if !first.is_ascii_alphabetic() && first != '[' || is_hydrogen {
            written.push_str(token);
            continue;
        }
        match changes.get(atom) {
            Some(change) if *change != 0 => written.push_str(&bracket(text, token, *change)?),
            _ => written.push_str(token),
        }
        atom += 1;
    }
    Ok(written)
}

/// A bracket atom with one hydrogen more or less and without its charge.
fn bracket(text: &str, token: &str, change: i8) -> Result<String, StructureError> {
    let inside = token.trim_matches(['[', ']']);
    let inside = inside.split(':').next().unwrap_or(inside);
    let inside = inside.trim_end_matches(|c: char| c.is_ascii_digit());
    let uncharged = inside.trim_end_matches(['+', '-']);
    let (symbol, hydrogens) = match uncharged.rfind('H') {
        Some(at) if at > 0 => {
            let count = &uncharged[at + 1..];
            let hydrogens = if count.is_empty() {
                Ok(1)
            } else {
                count.parse::<i8>()
            };
            (&uncharged[..at], hydrogens.unwrap_or(1))
        }
        _ => (uncharged, 0),
    };
    match hydrogens + change {
        0 => Ok(format!("[{symbol}]")),
        1 => Ok(format!("[{symbol}H]")),
        n if n > 1 => Ok(format!("[{symbol}H{n}]")),
        _ => Err(StructureError::new(
            format!(
                "the hydrogens of a cation of {} are atoms of their own",
                reading::quoted(text)
            ),
            "write hydrogens inside the brackets of their atom, for instance [NH3+]",
        )),
    }
}
