//! Checks of single texts: names, SMILES, a laboratory's own pKa.

use enolattice_model::MeasuredPka;
use enolattice_molecule::{Molecule, Salt};

use crate::conditions::{PKA_DMSO, PKA_SIGMA};
use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::{FaultCode, Place, SubstrateEntry, stock};

/// Longest name, title or other text, characters.
const LONGEST_TEXT: usize = 200;

/// Whether a name or another text of the user can be printed in a table; notes why not.
pub(crate) fn check_text(name: &str, place: Place, faults: &mut Faults) -> bool {
    let reason = if name.chars().any(char::is_control) {
        "there is a control character in it"
    } else if name.chars().nth(LONGEST_TEXT).is_some() {
        "it is longer than 200 characters"
    } else {
        return true;
    };
    faults.note(
        FaultCode::ValueOutOfRange,
        place,
        name,
        reason,
        "write a short text in one line",
    );
    false
}

/// Reads a SMILES, of a salt too; notes why it cannot be read.
pub(crate) fn structure(smiles: &str, place: Place, faults: &mut Faults) -> Option<Salt> {
    if smiles.is_empty() {
        let remedy = "give a SMILES or leave the whole row out";
        faults.note(
            FaultCode::ValueMissing,
            place,
            smiles,
            "there is no structure",
            remedy,
        );
        return None;
    }
    match Molecule::parse_salt(smiles) {
        Ok(salt) => Some(salt),
        Err(error) => {
            let reason = match without_smiles(&error.reason, smiles) {
                Some(rest) => format!("it {rest}"),
                None => error.reason,
            };
            let remedy = if looks_like_a_name(smiles) {
                "this looks like a name: give the structure as SMILES".to_owned()
            } else {
                error.remedy
            };
            faults.note(FaultCode::StructureInvalid, place, smiles, reason, remedy);
            None
        }
    }
}

/// A reason without the SMILES, whole or cut, at its beginning: the fault shows it before the reason.
fn without_smiles<'r>(reason: &'r str, smiles: &str) -> Option<&'r str> {
    let (shown, rest) = reason.strip_prefix('`')?.split_once("` ")?;
    let beginning = shown.strip_suffix('…').unwrap_or(shown);
    smiles.trim().starts_with(beginning).then_some(rest)
}

/// Whether a text has letters that no SMILES without brackets has.
fn looks_like_a_name(text: &str) -> bool {
    const OF_NAMES_ONLY: &str = "adfghjkmqtuvwxyz";
    !text.contains('[')
        && !text.contains(char::is_whitespace)
        && text.chars().take(100).any(|c| OF_NAMES_ONLY.contains(c))
}

/// A substrate's structure and own pKa; notes every fault of the row.
pub(crate) fn substrate(
    entry: &SubstrateEntry,
    faults: &mut Faults,
) -> Option<(Salt, Option<MeasuredPka>)> {
    let place = |value: &str| value_of_row(&entry.place, value);
    // a row without a name goes by its SMILES, of which the structure's own check says more
    let named = entry.name == entry.smiles || check_text(&entry.name, place("name"), faults);
    let structure = structure(&entry.smiles, place("smiles"), faults);
    let own = own_pka(entry, faults);
    stock::check(&entry.stock, &entry.place, faults);
    (named && own.is_ok()).then_some(structure?).zip(own.ok())
}

fn own_pka(entry: &SubstrateEntry, faults: &mut Faults) -> Result<Option<MeasuredPka>, ()> {
    let mut check = |quantity: crate::conditions::Quantity, value: Option<f64>| {
        let checked = value.map(|value| quantity.check(value)).transpose();
        checked.map_err(|reason| {
            let place = value_of_row(&entry.place, quantity.key);
            let shown = value.unwrap_or_default().to_string();
            let remedy = "give a number in this range, or none";
            faults.note(FaultCode::ValueOutOfRange, place, &shown, reason, remedy);
        })
    };
    let (pka_dmso, sigma) = (
        check(PKA_DMSO, entry.pka_dmso),
        check(PKA_SIGMA, entry.pka_sigma),
    );
    match (pka_dmso?, sigma?) {
        (Some(pka_dmso), sigma) => {
            let sigma = sigma.or(PKA_SIGMA.default).unwrap_or_default();
            Ok(Some(MeasuredPka { pka_dmso, sigma }))
        }
        (None, None) => Ok(None),
        (None, Some(sigma)) => {
            let place = value_of_row(&entry.place, "pka_sigma");
            let reason = "an uncertainty without a pKa";
            let remedy = "give `pka_dmso` too, or leave `pka_sigma` out";
            faults.note(
                FaultCode::ValueMissing,
                place,
                &sigma.to_string(),
                reason,
                remedy,
            );
            Err(())
        }
    }
}
