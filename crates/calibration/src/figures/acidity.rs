//! Figures of the acidity estimate.

use std::collections::{BTreeMap, HashMap};
use std::fmt::Write;

use enolattice_model::{Role, acid_sites, coefficients};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

const HELD_OUT: &str = include_str!("../../../model/data/acidity_held_out.tsv");
const SEEN: &str = include_str!("../../../model/data/acidity_seen.tsv");
const CHECKS: &str = include_str!("../../../model/testdata/acidity_checks.tsv");

/// Share of the compounds that is flagged: those to which the model gives the greatest σ.
const FLAGGED: f64 = 0.1;
/// A term on fewer sites is drawn to its start.
const FEW_SITES: usize = 3;

/// A compound that was held out of the fit.
struct Held {
    /// Base value of its class, or what its C–H belongs to.
    kind: String,
    in_scope: bool,
    is_carbon: bool,
    one_in_five: Prediction,
    scaffold: Prediction,
}

/// Predicted minus measured, and the σ that the model gave.
#[derive(Clone, Copy)]
struct Prediction {
    error: f64,
    sigma: f64,
}

/// A way of holding out, and how to read it.
type Way = (&'static str, fn(&Held) -> Prediction);

/// Compounds that belong together, and which they are.
type Family = (&'static str, fn(&Held) -> bool);

const WAYS: [Way; 2] = [
    ("one in five", |held| held.one_in_five),
    ("one scaffold group", |held| held.scaffold),
];

fn rows(text: &'static str) -> impl Iterator<Item = Vec<&'static str>> {
    text.lines()
        .filter(|line| !line.starts_with('#'))
        .skip(1)
        .map(|line| line.split('\t').collect())
}

/// Compound and atom with the anchor that its descriptors name.
fn kinds() -> HashMap<(&'static str, &'static str), &'static str> {
    let anchors: Vec<&str> = coefficients()
        .iter()
        .filter(|coefficient| coefficient.role == Role::Anchor)
        .map(|coefficient| coefficient.name)
        .collect();
    rows(SEEN)
        .filter_map(|row| {
            let names = row.get(4)?.split("; ");
            let mut names = names.filter_map(|entry| Some(entry.rsplit_once(':')?.0));
            let anchor = names.find(|name| anchors.contains(name))?;
            Some(((row[0], row[1]), anchor))
        })
        .collect()
}

fn held_out() -> Result<Vec<Held>, String> {
    let kinds = kinds();
    rows(HELD_OUT)
        .map(|row| {
            let fault = || format!("acidity_held_out.tsv: {}", row.join(" "));
            let number = |i: usize| row.get(i)?.parse::<f64>().ok();
            let prediction = |error: usize, sigma: usize| {
                let (error, sigma) = number(error).zip(number(sigma)).ok_or_else(fault)?;
                Ok::<_, String>(Prediction { error, sigma })
            };
            let kind = kinds.get(&(row[0], row[1])).ok_or_else(fault)?;
            Ok(Held {
                kind: (*kind).to_owned(),
                in_scope: row.get(6) == Some(&"yes"),
                is_carbon: kind.ends_with("C–H") || *kind == "carbon acid",
                one_in_five: prediction(2, 5)?,
                scaffold: prediction(3, 4)?,
            })
        })
        .collect()
}

/// The figures of the estimate.
pub(super) fn section(text: &mut String) -> Result<(), String> {
    let held = held_out()?;
    text.push_str(
        "\n## Acidity, compounds held out\n\n\
         C–H in scope: beside C=O, C≡N, NO2 or S(O)n. Flagged: the tenth of the compounds with the greatest σ.\n\n\
         | held out | n | MAE | wanted | RMSE | worst, not flagged | wanted | worst, flagged |\n\
         | --- | --- | --- | --- | --- | --- | --- | --- |\n",
    );
    for ((way, of), wanted) in WAYS.into_iter().zip([1.35, 1.50]) {
        let in_scope = held.iter().filter(|one| one.in_scope).map(of).collect();
        in_scope_line(text, way, wanted, in_scope);
    }
    competing(text, &held);
    coverage(text, &held);
    terms(text);
    checks(text)
}

fn mean_absolute(errors: &[Prediction]) -> f64 {
    errors.iter().map(|one| one.error.abs()).sum::<f64>() / errors.len().max(1) as f64
}

fn worst(errors: &[Prediction]) -> f64 {
    errors.iter().map(|one| one.error.abs()).fold(0.0, f64::max)
}

fn in_scope_line(text: &mut String, way: &str, wanted: f64, mut errors: Vec<Prediction>) {
    errors.sort_by(|a, b| a.sigma.total_cmp(&b.sigma));
    let kept = errors.len() - (FLAGGED * errors.len() as f64).round() as usize;
    let squares: f64 = errors.iter().map(|one| one.error * one.error).sum();
    let _ = writeln!(
        text,
        "| {way} | {} | {:.2} | ≤ {wanted:.2} | {:.2} | {:.1} | ≤ 6 | {:.1} |",
        errors.len(),
        mean_absolute(&errors),
        (squares / errors.len().max(1) as f64).sqrt(),
        worst(&errors[..kept]),
        worst(&errors[kept..])
    );
}

/// MAE of the acids that compete with C–H, by class.
fn competing(text: &mut String, held: &[Held]) {
    text.push_str(
        "\n## Acids that compete, held out\n\n\
         | class | n | MAE, one in five | MAE, one scaffold group | worst | wanted |\n\
         | --- | --- | --- | --- | --- | --- |\n",
    );
    let mut classes: BTreeMap<&str, Vec<&Held>> = BTreeMap::new();
    for one in held.iter().filter(|one| one.kind != "carbon acid") {
        classes.entry(&one.kind).or_default().push(one);
    }
    let families: [Family; 3] = [
        ("all O–H", |one| one.kind.ends_with("O–H")),
        ("all N–H", |one| one.kind.ends_with("N–H")),
        ("all S–H", |one| one.kind.ends_with("S–H")),
    ];
    let families = families.map(|(name, belongs)| {
        let members: Vec<&Held> = held.iter().filter(|one| belongs(one)).collect();
        (name, members)
    });
    for (class, members) in families.into_iter().chain(classes) {
        let [five, scaffold] = WAYS.map(|(_, of)| {
            let errors: Vec<Prediction> = members.iter().map(|one| of(one)).collect();
            errors
        });
        let wanted = if class.starts_with("all") {
            "≤ 1.30"
        } else {
            ""
        };
        let _ = writeln!(
            text,
            "| {class} | {} | {:.2} | {:.2} | {:.1} | {wanted} |",
            members.len(),
            mean_absolute(&five),
            mean_absolute(&scaffold),
            worst(&scaffold)
        );
    }
}

/// How often a measured value lies within one and two σ.
fn coverage(text: &mut String, held: &[Held]) {
    text.push_str(
        "\n## σ of each site\n\n\
         Share of measured values within one and two σ of the estimate; a normal distribution asks for 68 and 95 %.\n\n\
         | held out | compounds | n | mean σ | within 1 σ | within 2 σ |\n\
         | --- | --- | --- | --- | --- | --- |\n",
    );
    let kinds: [Family; 4] = [
        ("all", |_| true),
        ("C–H in scope", |one| one.in_scope),
        ("all C–H", |one| one.is_carbon),
        ("O–H, N–H, S–H", |one| !one.is_carbon),
    ];
    for (way, of) in WAYS {
        for (name, belongs) in kinds {
            let chosen: Vec<Prediction> = held.iter().filter(|one| belongs(one)).map(of).collect();
            let n = chosen.len().max(1) as f64;
            let within = |k: f64| {
                let inside = chosen.iter().filter(|one| one.error.abs() <= k * one.sigma);
                100.0 * inside.count() as f64 / n
            };
            let _ = writeln!(
                text,
                "| {way} | {name} | {} | {:.2} | {:.0} % | {:.0} % |",
                chosen.len(),
                chosen.iter().map(|one| one.sigma).sum::<f64>() / n,
                within(1.0),
                within(2.0)
            );
        }
    }
}

fn terms(text: &mut String) {
    let all = coefficients();
    let with_error = all.iter().filter(|term| term.standard_error > 0.0).count();
    let few = all
        .iter()
        .filter(|term| (1..FEW_SITES).contains(&term.training_sites));
    let none = all.iter().filter(|term| term.training_sites == 0).count();
    let _ = writeln!(
        text,
        "\n## Terms\n\n\
         Every term is drawn to a chemically expected start by a normal prior: the fewer sites it rests on, the nearer it stays.\n\n\
         | terms | with a standard error | on fewer than {FEW_SITES} sites, shrunk | on none, at their start |\n\
         | --- | --- | --- | --- |\n\
         | {} | {with_error} | {} | {none} |",
        all.len(),
        few.count()
    );
}

/// The estimate, nothing looked up, against a published value for each class.
fn checks(text: &mut String) -> Result<(), String> {
    text.push_str(
        "\n## Each class against a published value\n\n\
         The library is empty, so that nothing is looked up; the fit has seen most of these compounds.\n\n\
         | class | acid | published | estimate | σ | difference |\n\
         | --- | --- | --- | --- | --- | --- |\n",
    );
    for row in rows(CHECKS) {
        let fault = || format!("acidity_checks.tsv: {}", row.join(" "));
        let [class, smiles, atom, published, ..] = row.as_slice() else {
            return Err(fault());
        };
        let atom: usize = atom.parse().map_err(|_| fault())?;
        let published: f64 = published.parse().map_err(|_| fault())?;
        let molecule = Molecule::parse(smiles).map_err(|error| format!("{smiles}: {error}"))?;
        let site = acid_sites(&molecule, &Library::default())
            .into_iter()
            .find(|site| site.equivalent.contains(&atom))
            .ok_or_else(fault)?;
        let _ = writeln!(
            text,
            "| {class} | `{smiles}` | {published:.1} | {:.1} | {:.1} | {:+.1} |",
            site.pka_dmso,
            site.sigma,
            site.pka_dmso - published
        );
    }
    Ok(())
}
