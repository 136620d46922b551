//! The page of all figures on acidity, medium and proton balance.

mod acidity;
mod medium;

use std::fmt::Write;

use enolattice_model::Model;

use crate::{balance, dianions};

/// The page, as `docs/figures.md` has it.
///
/// Errors of held-out compounds come from the tables that `acidity` writes beside the coefficients; all else is worked
/// out anew.
///
/// # Errors
/// A sentence that names a row of a table which cannot be used.
pub fn page(model: &Model) -> Result<String, String> {
    let mut text = String::from(
        "# Acidity, medium and proton balance in figures\n\n\
         Written by `cargo run -p enolattice-calibration -- figures`; do not edit. More on the estimate: [acidity.md](acidity.md);\n\
         every acid in every medium: [medium.md](medium.md).\n",
    );
    acidity::section(&mut text)?;
    medium::section(&mut text, model)?;
    second_acidities(&mut text, model)?;
    proton_balance(&mut text, model)?;
    Ok(text)
}

fn second_acidities(text: &mut String, model: &Model) -> Result<(), String> {
    text.push_str(
        "\n## Dianions\n\n\
         Second pKa, free ions at 25 °C. Few were measured; most rows hold it between the acids of a base that leaves the\n\
         second proton and of one that takes it. Site: the atom that loses it and reacts then, by the model and, where one is known, as found.\n\n\
         Not reached: the O,C-dianions of 3-hydroxy esters and the N,C-dianion of 2-indolinone. Which proton goes first is settled by the pKa in DMSO,\n\
         and there C–H is the stronger acid of both; that lithium prefers alkoxides in ethers does not turn it round.\n\n\
         | acid | medium | first pKa | second pKa | measured | left by | taken by | site | found | source |\n\
         | --- | --- | --- | --- | --- | --- | --- | --- | --- | --- |\n",
    );
    let base = |base: &Option<(String, f64)>| match base {
        Some((name, pka)) => format!("{name} ({pka:.1})"),
        None => String::new(),
    };
    for one in dianions::compare(model)? {
        let measured = one.published.map(|pka| format!("{pka:.1}"));
        let _ = writeln!(
            text,
            "| {} `{}` | {} | {:.1} | {:.1} | {} | {} | {} | {} | {} | {} |",
            one.name,
            one.smiles,
            one.medium,
            one.first,
            one.second,
            measured.unwrap_or_default(),
            base(&one.left_by),
            base(&one.taken_by),
            one.site,
            one.known_site
                .map(|site| site.to_string())
                .unwrap_or_default(),
            one.source
        );
    }
    Ok(())
}

fn proton_balance(text: &mut String, model: &Model) -> Result<(), String> {
    let pots = balance::pots(model)?;
    let greatest = |deviation: fn(&balance::Balanced) -> f64| {
        let worst = pots.iter().map(deviation).fold(0.0, f64::max);
        if worst < 1e-9 {
            "below 1e-9"
        } else {
            "above 1e-9"
        }
    };
    let acids = pots.iter().flat_map(|pot| &pot.acids);
    let polybasic = acids.clone().filter(|acid| acid.pkas.len() > 1).count();
    let paired = acids.filter(|acid| acid.log10_homoconjugation.is_some());
    let _ = writeln!(
        text,
        "\n## Proton balance\n\n\
         One whole pot for each base of the library and a few with published pKa: substrate, base with all its steps, solvent as\n\
         acid and base, water and hydrates likewise, additive, electrophile, product, leaving group. `tests/python/check_balance.py` compares every amount with\n\
         Cantera's minimisation of the Gibbs energy, to 1e-8 of the acid's amount.\n\n\
         | pots | acids in more than one step | with homoconjugation | change of mass, mol/L | change of charge, mol/L |\n\
         | --- | --- | --- | --- | --- |\n\
         | {} | {polybasic} | {} | {} | {} |",
        pots.len(),
        paired.count(),
        greatest(balance::Balanced::mass_deviation_m),
        greatest(balance::Balanced::charge_deviation_m)
    );
    Ok(())
}
