//! Checks of single texts: names, SMILES, a laboratory's own pKa.

use enolattice_model::MeasuredPka;
use enolattice_molecule::Molecule;

use crate::conditions::{PKA_DMSO, PKA_SIGMA};
use crate::fault::{Faults, value_of_row};
use crate::{FaultCode, Place, SubstrateEntry};

/// Longest name or title, characters.
const LONGEST_NAME: usize = 200;

/// Whether a name can be printed in a table; notes why not.
pub(crate) fn check_name(name: &str, place: Place, faults: &mut Faults) -> bool {
    let reason = if name.chars().any(char::is_control) {
        "there is a control character in it"
    } else if name.chars().nth(LONGEST_NAME).is_some() {
        "it is longer than 200 characters"
    } else {
        return true;
    };
    faults.note(
        FaultCode::ValueOutOfRange,
        place,
        name,
        reason,
        "write a short name in one line",
    );
    false
}

/// Reads a SMILES; notes why it cannot be read.
pub(crate) fn molecule(smiles: &str, place: Place, faults: &mut Faults) -> Option<Molecule> {
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
    match Molecule::parse(smiles) {
        Ok(molecule) => Some(molecule),
        Err(error) => {
            faults.note(
                FaultCode::StructureInvalid,
                place,
                smiles,
                error.reason,
                error.remedy,
            );
            None
        }
    }
}

/// A substrate's structure and own pKa; notes every fault of the row.
pub(crate) fn substrate(
    entry: &SubstrateEntry,
    faults: &mut Faults,
) -> Option<(Molecule, Option<MeasuredPka>)> {
    let place = |value: &str| value_of_row(&entry.place, value);
    let named = check_name(&entry.name, place("name"), faults);
    let molecule = molecule(&entry.smiles, place("smiles"), faults);
    let own = own_pka(entry, faults);
    (named && own.is_ok()).then_some(molecule?).zip(own.ok())
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
