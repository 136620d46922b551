//! Reagents of the library.

use enolattice_engine::ReagentRow;

use super::ConversionError;
use crate::v1;

const KINDS: [(&str, v1::ReagentKind); 4] = [
    ("base", v1::ReagentKind::Base),
    ("solvent", v1::ReagentKind::Solvent),
    ("electrophile", v1::ReagentKind::Electrophile),
    ("additive", v1::ReagentKind::Additive),
];

impl From<&ReagentRow> for v1::LibraryReagent {
    fn from(row: &ReagentRow) -> Self {
        let kind = KINDS.iter().find(|(name, _)| *name == row.kind);
        v1::LibraryReagent {
            kind: kind
                .map_or(v1::ReagentKind::Unspecified, |(_, kind)| *kind)
                .into(),
            name: row.name.clone(),
            synonyms: row.synonyms.clone(),
            cas: row.cas.clone(),
            smiles: row.smiles.clone(),
            facts: row.facts.clone(),
            h_codes: row.h_codes.clone(),
        }
    }
}

impl TryFrom<v1::LibraryReagent> for ReagentRow {
    type Error = ConversionError;

    fn try_from(reagent: v1::LibraryReagent) -> Result<Self, ConversionError> {
        let (kind, _) = KINDS
            .iter()
            .find(|(_, kind)| *kind as i32 == reagent.kind)
            .ok_or(ConversionError::Unknown {
                field: "LibraryReagent.kind",
                value: reagent.kind.to_string(),
            })?;
        Ok(ReagentRow {
            kind: (*kind).to_owned(),
            name: reagent.name,
            synonyms: reagent.synonyms,
            cas: reagent.cas,
            smiles: reagent.smiles,
            facts: reagent.facts,
            h_codes: reagent.h_codes,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_of_every_kind_come_back() {
        for (kind, _) in KINDS {
            let row = ReagentRow {
                kind: kind.into(),
                name: "LDA".into(),
                synonyms: vec!["lithium diisopropylamide".into()],
                cas: "4111-54-0".into(),
                smiles: "[Li]N(C(C)C)C(C)C".into(),
                facts: "pKa 35.7".into(),
                h_codes: vec!["H250".into()],
            };
            assert_eq!(
                ReagentRow::try_from(v1::LibraryReagent::from(&row)),
                Ok(row)
            );
        }
    }
}
