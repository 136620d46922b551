//! Structures of solvents, of which a plan has names alone.

use std::collections::BTreeMap;

use enolattice_reagents::Library;

use crate::ord::{CompoundIdentifier, compound_identifier::CompoundIdentifierType};

/// Structures of solvents by name.
#[derive(Clone, Debug, Default)]
pub struct Structures {
    smiles: BTreeMap<String, String>,
}

impl Structures {
    /// The solvents of a library.
    pub fn of(library: &Library) -> Structures {
        let known = library.solvents().iter();
        Structures {
            smiles: known
                .map(|solvent| (solvent.name.clone(), solvent.smiles.clone()))
                .collect(),
        }
    }

    /// A solvent by its name, and its structure where the library has it.
    pub(crate) fn solvent(&self, name: &str) -> Vec<CompoundIdentifier> {
        match self.smiles.get(name).filter(|smiles| !smiles.is_empty()) {
            Some(smiles) => named(name, smiles),
            // a name alone would be taken for carelessness
            None => vec![
                identifier(CompoundIdentifierType::Name, "", name),
                identifier(
                    CompoundIdentifierType::Custom,
                    "name in the laboratory's own table of solvents",
                    name,
                ),
            ],
        }
    }
}

/// A compound by its structure and its name.
pub(crate) fn named(name: &str, smiles: &str) -> Vec<CompoundIdentifier> {
    let structure = identifier(CompoundIdentifierType::Smiles, "", smiles);
    match name == smiles || name.trim().is_empty() {
        true => vec![structure],
        false => vec![
            structure,
            identifier(CompoundIdentifierType::Name, "", name.trim()),
        ],
    }
}

fn identifier(kind: CompoundIdentifierType, details: &str, value: &str) -> CompoundIdentifier {
    CompoundIdentifier {
        r#type: kind.into(),
        details: details.to_owned(),
        value: value.to_owned(),
    }
}
