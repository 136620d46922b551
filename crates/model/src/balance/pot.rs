//! The acids and bases of a whole pot.

use enolattice_molecule::{AnionClass, Molecule};

use super::Acid;
use super::lyonium::lyonium;
use crate::Cell;
use crate::bonding::Bonding;
use crate::kinetics::{Kinetics, PKA_WATER};

/// pKa of the hydronium ion, with its own water at 55 mol/L (definition).
const PKA_HYDRONIUM: f64 = -1.7;

/// Where the reaction of a pot stands.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Reached {
    /// The electrophile is not there yet.
    BeforeElectrophile,
    /// The electrophile is there, and this share of the substrate has become the wanted product, 0–1.
    Converted(f64),
}

/// Distance of the steps of carbonate and phosphate, pK units: that of the effective pKa of hydrogencarbonate
/// and carbonate, and of hydrogenphosphate and phosphate, in the library's table of bases.
const STEP: f64 = 6.5;

/// All acids of a cell's pot with their pKa in its medium and what is charged of each: substrate, base with all
/// its steps, solvent as acid and as base, water with that of hydrates likewise, additive, electrophile, product and
/// leaving group, all base dissolved.
///
/// A product made from an anion takes a charge from the base: that much of the base is charged as its acid. Halides and
/// metal ions take no part.
pub(crate) fn whole_pot(kinetics: &Kinetics<'_>, reached: Reached) -> Vec<Acid> {
    let cell = kinetics.cell;
    let substrate_m = cell.conditions.concentration_m;
    let converted = match reached {
        Reached::BeforeElectrophile => 0.0,
        Reached::Converted(share) => share.clamp(0.0, limit(cell)),
    };
    let product_m = converted * substrate_m;
    let mut acids = vec![
        substrate(kinetics, substrate_m - product_m),
        base(kinetics, product_m),
    ];
    acids.extend(solvent(kinetics));
    acids.extend(water(kinetics));
    acids.extend(additive(kinetics));
    if reached != Reached::BeforeElectrophile {
        let left = substrate_m * cell.conditions.electrophile_equiv - product_m;
        acids.extend(electrophile(kinetics, left));
        acids.extend(product(kinetics, product_m));
        acids.extend(leaving_group(kinetics, product_m));
    }
    acids
}

/// The largest share of the substrate that base and electrophile suffice for.
fn limit(cell: &Cell) -> f64 {
    let conditions = &cell.conditions;
    conditions
        .base_equiv
        .min(conditions.electrophile_equiv)
        .min(1.0)
}

fn monobasic(kinetics: &Kinetics<'_>, name: &str, (pka, class): (f64, AnionClass)) -> Acid {
    Acid {
        name: name.to_owned(),
        charge: i8::from(class == AnionClass::Neutral),
        pkas: vec![pka],
        charged_m: vec![0.0, 0.0],
        log10_homoconjugation: homoconjugation(class, &kinetics.cell.solvent.record.name),
    }
}

/// log10 K of AH + A⁻ ⇌ AHA⁻, L/mol.
///
/// # Source
/// Acetic and benzoic acid in MeCN 3.67 and 3.6, in DMSO 1.48 and 1.78; 4-nitrophenol in MeCN 3.7 (Kolthoff and
/// Chantooni; Izutsu, Acid–Base Dissociation Constants in Dipolar Aprotic Solvents, 1990; all from memory). Water and
/// alcohols break such bonds; of other solvents none is known here.
fn homoconjugation(class: AnionClass, solvent: &str) -> Option<f64> {
    match (class, solvent) {
        (AnionClass::Carboxylate, "MeCN") => Some(3.6),
        (AnionClass::Carboxylate, "DMSO") => Some(1.6),
        (AnionClass::Phenoxide, "MeCN") => Some(3.7),
        _ => None,
    }
}

/// Its X–H where that goes first, its most acidic C–H, and a second C–H where the anion loses one more.
fn substrate(kinetics: &Kinetics<'_>, amount_m: f64) -> Acid {
    let carbon = &kinetics.cell.substrate.carbon;
    let first = match (kinetics.first_heteroatom(), carbon.first()) {
        (Some(x), _) => Some((kinetics.pka(x.pka_dmso, x.class), x.class)),
        (None, site) => site.map(|site| (kinetics.site_pka(site), site.acid.class)),
    };
    let mut acid = match first {
        Some(first) => monobasic(kinetics, "substrate", first),
        None => Acid {
            name: "substrate".to_owned(),
            charge: 0,
            pkas: Vec::new(),
            charged_m: vec![0.0],
            log10_homoconjugation: None,
        },
    };
    if let Some((site, second)) = kinetics.second_site() {
        acid.pkas
            .push(kinetics.pka(second, carbon[site].acid.class));
        acid.charged_m.push(0.0);
    }
    acid.charged_m[0] = amount_m;
    acid
}

/// The base with all its steps; `spent_m` of it has handed its charge to what the reaction made.
fn base(kinetics: &Kinetics<'_>, spent_m: f64) -> Acid {
    let cell = kinetics.cell;
    let record = &cell.base.record;
    let mut acid = monobasic(kinetics, "base", (kinetics.pka_base(), record.class));
    let (below, above) = further_steps(&record.conjugate_acid);
    let step = |k: f64| kinetics.pka(record.pka_dmso.value + k * STEP, record.class);
    for k in 1..=below {
        acid.pkas.insert(0, step(-f64::from(k)));
    }
    for k in 1..=above {
        acid.pkas.push(step(f64::from(k)));
    }
    if below + above > 0 {
        acid.log10_homoconjugation = None;
    }
    acid.charged_m = vec![0.0; acid.pkas.len() + 1];
    let charged = cell.conditions.concentration_m * cell.conditions.base_equiv;
    let form = usize::from(below) + 1;
    acid.charged_m[form] = charged - spent_m;
    acid.charged_m[form - 1] += spent_m;
    acid
}

/// Steps of a carbonate or phosphate before and after the one that its conjugate acid takes; counter-ions are
/// fragments of their own.
fn further_steps(conjugate_acid: &str) -> (u8, u8) {
    let fragments = conjugate_acid.split('.');
    let mut oxoacids = fragments.filter_map(|fragment| steps_of(&Molecule::parse(fragment).ok()?));
    oxoacids.next().unwrap_or((0, 0))
}

fn steps_of(molecule: &Molecule) -> Option<(u8, u8)> {
    let atoms = molecule.atoms();
    let oxygens = |centre: usize| {
        let beside = molecule.neighbours(centre).iter();
        beside.filter(|(other, _)| atoms[*other].element == 8)
    };
    let oxoacid = (0..atoms.len()).find_map(|centre| {
        match (atoms[centre].element, oxygens(centre).count()) {
            (6, 3) => Some((centre, 2_u8)),
            (15, 4) => Some((centre, 3)),
            _ => None,
        }
    });
    let (centre, protons) = oxoacid?;
    let held: u8 = oxygens(centre)
        .map(|(oxygen, _)| atoms[*oxygen].hydrogens)
        .sum();
    Some((protons.saturating_sub(held), held.saturating_sub(1)))
}

/// As acid, as base, or as both where the same molecules are.
fn solvent(kinetics: &Kinetics<'_>) -> Vec<Acid> {
    let record = &kinetics.cell.solvent.record;
    let acid = record.acid.as_ref().map(|(acid, class)| {
        let pka = kinetics.pka(acid.value, *class);
        let mut acid = monobasic(kinetics, "solvent", (pka, *class));
        acid.charged_m[0] = record.acid_m;
        acid
    });
    let base = lyonium(record).map(|base| {
        let pka = kinetics.medium.pka_lyonium(base.pka, kinetics.values);
        let mut acid = monobasic(kinetics, "solvent as base", (pka, AnionClass::Neutral));
        acid.charged_m[1] = base.amount_m;
        acid
    });
    match (acid, base) {
        (Some(acid), Some(base)) if record.parts.is_empty() => vec![amphoteric(acid, &base)],
        (acid, base) => acid.into_iter().chain(base).collect(),
    }
}

/// An acid whose molecules take a proton too.
fn amphoteric(mut acid: Acid, base: &Acid) -> Acid {
    acid.charge = base.charge;
    acid.pkas.splice(0..0, base.pkas.iter().copied());
    acid.charged_m.insert(0, 0.0);
    // the complex of homoconjugation is one of the two most protonated forms
    acid.log10_homoconjugation = None;
    acid
}

/// Its most acidic X–H, or the amine that it is.
fn additive(kinetics: &Kinetics<'_>) -> Option<Acid> {
    let conditions = &kinetics.cell.conditions;
    let amount_m = conditions.concentration_m * conditions.additive_equiv;
    let proton = kinetics.cell.additive.as_ref()?.proton?;
    let pka = match proton.onium {
        Some(onium) => kinetics
            .medium
            .pka_cationic(proton.pka_dmso, onium, kinetics.values),
        None => kinetics.pka(proton.pka_dmso, proton.class),
    };
    let mut acid = monobasic(kinetics, "additive", (pka, proton.class));
    acid.charge = proton.charge;
    acid.charged_m[usize::from(proton.as_base)] = amount_m;
    (amount_m > 0.0).then_some(acid)
}

/// The solvent's own and that of a hydrate.
fn water(kinetics: &Kinetics<'_>) -> Option<Acid> {
    let cell = kinetics.cell;
    let conditions = &cell.conditions;
    let hydrate = conditions.concentration_m * conditions.base_equiv * cell.base.record.water_equiv;
    let amount_m = cell.solvent.water_m() + hydrate;
    let class = AnionClass::Hydroxide;
    let mut acid = monobasic(kinetics, "water", (kinetics.pka(PKA_WATER, class), class));
    acid.charged_m[0] = amount_m;
    let hydronium = kinetics.medium.pka_lyonium(PKA_HYDRONIUM, kinetics.values);
    let base = monobasic(kinetics, "water", (hydronium, AnionClass::Neutral));
    (amount_m > 0.0).then(|| amphoteric(acid, &base))
}

fn electrophile(kinetics: &Kinetics<'_>, amount_m: f64) -> Option<Acid> {
    let mut acid = monobasic(kinetics, "electrophile", kinetics.electrophile_acid()?);
    acid.charged_m[0] = amount_m;
    Some(acid)
}

/// An adduct is made as anion; a product of substitution as neutral molecule.
fn product(kinetics: &Kinetics<'_>, amount_m: f64) -> Option<Acid> {
    let heteroatom = kinetics.product_heteroatom(0);
    let carbon = kinetics.product_carbon(0);
    let carbon = carbon.map(|site| {
        let class = site.acid.class;
        (kinetics.pka(site.acid.pka_dmso, class), class)
    });
    let mut acid = monobasic(kinetics, "product", heteroatom.or(carbon)?);
    let made_as = usize::from(kinetics.bonding() != Bonding::Substitution);
    acid.charged_m[made_as] = amount_m;
    Some(acid)
}

/// The leaving group where it is the anion of an acid of the medium.
fn leaving_group(kinetics: &Kinetics<'_>, amount_m: f64) -> Option<Acid> {
    let mut acid = monobasic(kinetics, "leaving group", kinetics.leaving_acid()?);
    acid.charged_m[1] = amount_m;
    Some(acid)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Carbonic acid has two protons, phosphoric acid three (common knowledge).
    #[test]
    fn carbonates_and_phosphates_have_all_their_steps() {
        for (acid, steps) in [
            ("[K+].OC([O-])=O", (1, 0)),
            ("OC(O)=O", (0, 1)),
            ("[K+].[K+].OP([O-])([O-])=O", (2, 0)),
            ("[K+].OP(O)([O-])=O", (1, 1)),
            ("CC(O)=O", (0, 0)),
            ("CC(C)(C)O", (0, 0)),
        ] {
            assert_eq!(further_steps(acid), steps, "{acid}");
        }
    }
}
