//! What holds of every network and of both solvers.

use crate::bonding::Bonding;
use crate::kinetics::{Kinetics, Nudge};
use crate::march::march;
use crate::network::{Amounts, Network, Reaction, Species, Stage};
use crate::parameters::Values;
use crate::prepared::SITES;
use crate::program::Charge;
use crate::reactions::Reactions;
use crate::reference::integrate;
use crate::sample::{cell, model};
use crate::screen::{Coverage, coverage};
use crate::{Cell, Model};

const SUBSTRATES: [&str; 7] = [
    "CC(=O)c1ccccc1",
    "CC(=O)CC(C)=O",
    "CCOC(=O)CC(=O)OCC",
    "CC(=O)CC",
    "CC[N+](=O)[O-]",
    "CCC=O",
    "O=C1CCCN1",
];
const ELECTROPHILES: [&str; 6] = [
    "BrCc1ccccc1",
    "C=CC(=O)OC",
    "O=Cc1ccccc1",
    "CC(=O)Cl",
    "CCOC(=O)C(=O)OCC",
    "O=C=Nc1ccccc1",
];
const SOLVENTS: [&str; 5] = ["THF", "DMF", "EtOH", "toluene", "MeCN"];

/// Cells over kinds of substrates and electrophiles, each with another base, solvent and temperature.
fn cells(model: &Model) -> Vec<Cell> {
    let bases = model.library().bases();
    let mut cells = Vec::new();
    for (i, substrate) in SUBSTRATES.iter().enumerate() {
        for (j, electrophile) in ELECTROPHILES.iter().enumerate() {
            let n = i * ELECTROPHILES.len() + j;
            let base = &bases[7 * n % bases.len()].name;
            let solvent = SOLVENTS[n % SOLVENTS.len()];
            let mut cell = cell(model, substrate, base, electrophile, solvent);
            cell.conditions.temperature_c = [-78.0, 0.0, 25.0, 60.0][n % 4];
            cell.conditions.formation_temperature_c = cell.conditions.temperature_c;
            if matches!(coverage(&cell), Coverage::Covered) {
                cells.push(cell);
            }
        }
    }
    assert!(cells.len() > 30, "{}", cells.len());
    cells
}

fn reacting(cell: &Cell) -> Network {
    let [network] = Charge::of(cell).reacting(cell, &Values::means(), [Nudge::default()]);
    network
}

/// Amounts when the electrophile comes and at the end, by the fast solver.
fn marched(cell: &Cell) -> [Amounts; 2] {
    let (charge, values) = (Charge::of(cell), Values::means());
    let mut formed = [charge.start()];
    if charge.forms_first() {
        formed = march(&charge.forming(cell, &values, [Nudge::default()]), formed);
    }
    let [end] = march(&[reacting(cell)], formed);
    [formed[0], end]
}

fn words(cell: &Cell) -> String {
    format!(
        "{} + {} + {} in {}",
        cell.substrate.name,
        cell.base.record.name,
        cell.electrophile.name,
        cell.solvent.record.name
    )
}

#[test]
fn every_species_has_its_index() {
    for (i, species) in Species::all().enumerate() {
        assert_eq!(species.index(), i, "{}", species.name());
    }
    assert_eq!(Species::all().count(), Species::COUNT);
}

/// Change of a property of the species in one event.
fn change(reaction: &Reaction, of: fn(Species) -> f64) -> f64 {
    reaction.formed().map(of).sum::<f64>() - reaction.used().map(of).sum::<f64>()
}

#[test]
fn every_step_keeps_substrate_and_electrophile_and_makes_no_charge() {
    let model = model();
    for cell in cells(&model) {
        for reaction in &reacting(&cell).reactions {
            let said = || format!("{}: {reaction:?}", words(&cell));
            assert_eq!(change(reaction, Species::substrates), 0.0, "{}", said());
            assert_eq!(change(reaction, Species::electrophiles), 0.0, "{}", said());
            // charge leaves with halides and with what no longer reacts; it never comes from nothing
            assert!(change(reaction, Species::basicity) <= 0.0, "{}", said());
        }
    }
}

#[test]
fn both_solvers_keep_substrate_electrophile_and_charge() {
    let model = model();
    let mut with_charge = 0;
    for (n, cell) in cells(&model).into_iter().enumerate() {
        let network = reacting(&cell);
        let charged = network.charged;
        let [formed, fast] = marched(&cell);
        let keeps_charge = network
            .reactions
            .iter()
            .all(|r| change(r, Species::basicity) == 0.0);
        with_charge += usize::from(keeps_charge);
        let check = |end: &Amounts, tolerance: f64, solver: &str| {
            let kept = |amount: f64, whole: f64, what: &str| {
                let off = (amount / whole - 1.0).abs();
                assert!(
                    off < tolerance,
                    "{}: {solver}, {what} {off:e}",
                    words(&cell)
                );
            };
            kept(end.total(Species::substrates), charged[0], "substrate");
            kept(
                end.total(Species::electrophiles),
                charged[2],
                "electrophile",
            );
            if keeps_charge {
                kept(
                    end.total(Species::basicity),
                    formed.total(Species::basicity),
                    "charge",
                );
            }
        };
        check(&fast, 1e-6, "fast");
        // the tight one takes its time
        if n % 4 == 0 {
            let course = integrate(None, &network, formed).expect("integrates");
            check(&course.end, 1e-8, "reference");
        }
    }
    assert!(with_charge > 0);
}

/// Whether two steps are each other's way back.
fn are_opposite(a: &Reaction, b: &Reaction) -> bool {
    let sorted = |species: &mut dyn Iterator<Item = Species>| {
        let mut all: Vec<usize> = species.map(Species::index).collect();
        all.sort_unstable();
        all
    };
    sorted(&mut a.reactants()) == sorted(&mut b.formed())
        && sorted(&mut b.reactants()) == sorted(&mut a.formed())
}

#[test]
fn forward_and_back_stand_in_the_ratio_of_their_equilibrium() {
    let model = model();
    let values = Values::means();
    let (mut transfers, mut additions) = (0, 0);
    for cell in cells(&model) {
        let temperature_c = cell.conditions.temperature_c;
        let kinetics = Kinetics::new(&cell, temperature_c, &values, Nudge::default());
        let network = reacting(&cell);
        let reactions = &network.reactions;
        for forth in reactions {
            let Species::Carbanion(site) = forth
                .products
                .into_iter()
                .flatten()
                .last()
                .unwrap_or(Species::Water)
            else {
                continue;
            };
            let acid = kinetics.site_pka(&cell.substrate.carbon[site]);
            // base + substrate → acid of the base + carbanion
            let is_transfer = forth.reactants().any(|s| s == Species::Base)
                && forth.reactants().any(|s| s == Species::Substrate)
                && forth.formed().any(|s| s == Species::BaseAcid);
            let back = reactions.iter().find(|back| are_opposite(forth, back));
            if let (true, Some(back)) = (is_transfer, back) {
                let off = (forth.k / back.k).log10() - (kinetics.pka_base() - acid);
                assert!(off.abs() < 1e-6, "{}: {off}", words(&cell));
                transfers += 1;
            }
        }
        for forth in reactions {
            let (Species::Carbanion(site), Some(Species::Electrophile), None) =
                (forth.first, forth.second, forth.third)
            else {
                continue;
            };
            let gives_adduct = forth.products == [Some(Species::ProductAnion(site)), None, None];
            let back = reactions.iter().find(|back| are_opposite(forth, back));
            let (true, Some(back)) = (
                gives_adduct && kinetics.bonding() != Bonding::Substitution,
                back,
            ) else {
                continue;
            };
            let carbon = &cell.substrate.carbon[site];
            let log10_k = kinetics.addition_log10_k(carbon).expect("it comes back");
            let expected = log10_k + kinetics.site_pka(carbon) - kinetics.adduct_pka(site);
            let off = (forth.k / back.k).log10() - expected;
            assert!(off.abs() < 1e-6, "{}: {off}", words(&cell));
            additions += 1;
        }
    }
    assert!(transfers > 10 && additions > 3, "{transfers}, {additions}");
}

/// Cells whose networks have the reversible steps that those of [`cells`] lack: an enone with a lithium enolate, enamine
/// catalysis.
fn with_rarer_steps(model: &Model) -> Vec<Cell> {
    [
        ["CC(=O)OC(C)(C)C", "LDA", "O=C1C=CCCC1", "THF"],
        ["CC(=O)c1ccccc1", "LiHMDS", "C=CC=O", "Et2O"],
        [
            "CC(C)CC=O",
            "pyrrolidine",
            "O=[N+]([O-])/C=C/c1ccccc1",
            "DCM",
        ],
        [
            "CC(C)=O",
            "pyrrolidine",
            "O=Cc1ccc([N+](=O)[O-])cc1",
            "EtOH",
        ],
        ["CC(=O)CC(C)=O", "piperidine", "CCC=O", "EtOH"],
    ]
    .map(|[substrate, base, electrophile, solvent]| {
        cell(model, substrate, base, electrophile, solvent)
    })
    .to_vec()
}

/// Wegscheider's condition: the constants of all reversible steps of a network follow from one free energy a species,
/// so that no circle of steps runs for ever.
#[test]
fn all_reversible_steps_agree_on_one_free_energy_a_species() {
    let model = model();
    let (mut pairs, mut circles) = (0, 0);
    for cell in cells(&model).into_iter().chain(with_rarer_steps(&model)) {
        let reactions = reacting(&cell).reactions;
        let mut solved: Vec<(usize, [f64; Species::COUNT], f64)> = Vec::new();
        for (i, forth) in reactions.iter().enumerate() {
            let back = reactions[i + 1..].iter().find(|back| {
                are_opposite(forth, back) && forth.with.is_none() && back.with.is_none()
            });
            let Some(back) = back else { continue };
            pairs += 1;
            let mut row = [0.0; Species::COUNT];
            forth.reactants().for_each(|s| row[s.index()] -= 1.0);
            forth.formed().for_each(|s| row[s.index()] += 1.0);
            let mut right = (forth.k / back.k).log10();
            for (pivot, known, of_known) in &solved {
                let factor = row[*pivot];
                for (entry, other) in row.iter_mut().zip(known) {
                    *entry -= factor * other;
                }
                right -= factor * of_known;
            }
            let pivot = (0..row.len()).max_by(|a, b| row[*a].abs().total_cmp(&row[*b].abs()));
            let pivot = pivot.expect("species");
            if row[pivot].abs() < 1e-9 {
                circles += 1;
                assert!(
                    right.abs() < 1e-6,
                    "{}: {forth:?} is off by {right}",
                    words(&cell)
                );
                continue;
            }
            let scale = row[pivot].recip();
            solved.push((pivot, row.map(|entry| entry * scale), right * scale));
        }
    }
    assert!(pairs > 500 && circles > 200, "{pairs}, {circles}");
}

/// The fast solver marches networks of one cell side by side that differ in the nudge: their steps must be the same.
#[test]
fn a_nudge_changes_no_step() {
    let model = model();
    let means = Values::means();
    let steps = |cell: &Cell, nudge: Nudge| {
        let kinetics = Kinetics::new(cell, cell.conditions.temperature_c, &means, nudge);
        Reactions::of(&kinetics)
            .iter()
            .map(|r| (r.first, r.second, r.third, r.products, r.with))
            .collect::<Vec<_>>()
    };
    let alpha_halo = ["CCOC(=O)CCl", "KOtBu", "O=Cc1ccccc1", "tBuOH"];
    let [substrate, base, electrophile, solvent] = alpha_halo;
    let closing = cell(&model, substrate, base, electrophile, solvent);
    let all = cells(&model).into_iter().chain(with_rarer_steps(&model));
    for cell in all.chain([closing]) {
        let usual = steps(&cell, Nudge::default());
        for (acidity, attack) in [(-3.0, 2.0), (3.0, -2.0)] {
            let nudged = steps(&cell, Nudge { acidity, attack });
            assert!(nudged == usual, "{}", words(&cell));
        }
    }
}

/// Whether a species is the product at a site or made of it.
fn is_product(species: Species) -> bool {
    matches!(
        species,
        Species::Product(_) | Species::ProductAnion(_) | Species::Dehydrated(_)
    )
}

#[test]
fn conversion_never_falls_where_nothing_takes_the_product() {
    let model = model();
    for cell in cells(&model).into_iter().step_by(4) {
        let mut network = reacting(&cell);
        let products = |s: Species| f64::from(u8::from(is_product(s)));
        network.reactions.retain(|r| change(r, products) >= 0.0);
        let [formed, _] = marched(&cell);
        let course = integrate(None, &network, formed).expect("integrates");
        let made: Vec<f64> = course
            .points
            .iter()
            .map(|(_, pot)| pot.total(products))
            .collect();
        for pair in made.windows(2) {
            assert!(pair[1] >= pair[0] - 1e-9, "{}: {made:?}", words(&cell));
        }
    }
}

#[test]
fn without_a_reagent_or_without_meeting_nothing_forms() {
    let model = model();
    for mut cell in cells(&model) {
        let usual = cell.conditions;
        let product = |cell: &Cell| {
            let [_, end] = marched(cell);
            (0..SITES).map(|site| end.product(site)).sum::<f64>() / cell.conditions.concentration_m
        };
        cell.conditions.electrophile_equiv = 1e-9;
        assert!(product(&cell) < 1e-6, "electrophile: {}", words(&cell));
        cell.conditions = usual;
        cell.conditions.base_equiv = 1e-12;
        assert!(product(&cell) < 1e-3, "base: {}", words(&cell));
        cell.conditions = usual;
        cell.conditions.concentration_m = 1e-15;
        assert!(product(&cell) < 1e-2, "dilution: {}", words(&cell));
    }
}

#[test]
fn equivalent_sites_share_alike() {
    let step = |first, second, products: [Option<Species>; 3], k| Reaction {
        first,
        second: Some(second),
        third: None,
        products,
        with: None,
        k,
    };
    let mut reactions = Vec::new();
    for site in 0..2 {
        let anion = Species::Carbanion(site);
        let (acid, product) = (Some(Species::BaseAcid), Some(Species::Product(site)));
        reactions.push(step(
            Species::Substrate,
            Species::Base,
            [Some(anion), acid, None],
            1e3,
        ));
        reactions.push(step(
            anion,
            Species::BaseAcid,
            [Some(Species::Substrate), Some(Species::Base), None],
            1e5,
        ));
        reactions.push(step(
            anion,
            Species::Electrophile,
            [product, None, None],
            0.3,
        ));
    }
    let network = Network {
        reactions,
        stages: vec![Stage {
            duration_s: 7200.0,
            added: None,
        }],
        charged: [0.2, 0.3, 0.2],
    };
    let mut start = Amounts::NONE;
    for (species, amount) in [
        (Species::Substrate, 0.2),
        (Species::Base, 0.3),
        (Species::Electrophile, 0.2),
    ] {
        start.add(species, amount);
    }
    let [fast] = march(std::array::from_ref(&network), [start]);
    let reference = integrate(None, &network, start).expect("integrates").end;
    for end in [fast, reference] {
        assert!(end.product(0) > 0.02);
        assert!(
            (end.product(0) / end.product(1) - 1.0).abs() < 1e-9,
            "{end:?}"
        );
    }
}
