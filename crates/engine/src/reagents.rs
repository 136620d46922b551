//! The library, in rows.

use enolattice_reagents::{
    Additive, AdditiveKind, Base, Cation, NamedElectrophile, Reagent, Solvent,
};

use crate::{Engine, EngineError, ReagentRow};

impl Engine {
    /// The library; `word` narrows it by name, synonym or CAS number, empty gives all.
    ///
    /// # Errors
    /// None yet; a word that nothing has gives an empty list.
    pub async fn reagents(&self, word: &str) -> Result<Vec<ReagentRow>, EngineError> {
        Ok(self
            .model()
            .library()
            .search(word)
            .into_iter()
            .map(row)
            .collect())
    }
}

fn row(reagent: Reagent<'_>) -> ReagentRow {
    ReagentRow {
        kind: reagent.kind().name().to_owned(),
        name: reagent.name().to_owned(),
        synonyms: reagent.synonyms().to_vec(),
        cas: reagent.cas().to_owned(),
        smiles: reagent.smiles().to_owned(),
        facts: match reagent {
            Reagent::Base(base) => base_facts(base),
            Reagent::Solvent(solvent) => solvent_facts(solvent),
            Reagent::Electrophile(electrophile) => electrophile_facts(electrophile),
            Reagent::Additive(additive) => additive_facts(additive),
        },
        h_codes: reagent.hazards().h_codes.clone(),
    }
}

fn base_facts(base: &Base) -> String {
    let cation = match base.cation {
        Cation::Lithium => ", Li",
        Cation::Sodium => ", Na",
        Cation::Potassium => ", K",
        Cation::Caesium => ", Cs",
        Cation::Ammonium => ", NR4",
        Cation::Magnesium => ", Mg",
        Cation::Calcium => ", Ca",
        Cation::Barium => ", Ba",
        Cation::Zinc => ", Zn",
        Cation::None => "",
    };
    format!(
        "pKa of the conjugate acid {:.1} ± {:.1} (DMSO){cation}; {}",
        base.pka_dmso.value, base.pka_dmso.sigma, base.supplied
    )
}

fn solvent_facts(solvent: &Solvent) -> String {
    format!(
        "ε {:.1}, α {:.2}, bp {:.0} °C, mp {:.0} °C, water {:.0} ppm",
        solvent.permittivity,
        solvent.hydrogen_bond_donation,
        solvent.boiling_c,
        solvent.melting_c,
        solvent.water_ppm
    )
}

fn additive_facts(additive: &Additive) -> String {
    let kind = match additive.kind {
        AdditiveKind::Crown => "takes up the counter-ion",
        AdditiveKind::PhaseTransfer => "carries anions into the organic phase",
        AdditiveKind::Donor => "solvates the counter-ion",
        AdditiveKind::Salt => "breaks aggregates",
    };
    kind.to_owned()
}

fn electrophile_facts(electrophile: &NamedElectrophile) -> String {
    match electrophile.boiling_c {
        Some(boiling_c) => format!("bp {boiling_c:.0} °C"),
        None => String::new(),
    }
}
