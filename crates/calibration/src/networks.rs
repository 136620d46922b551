//! Networks of random cells as JSON, for a check of the stiff reference against another integrator.

use std::collections::BTreeMap;

use enolattice_model::{Cell, Model, PlainNetwork, Step};
use enolattice_molecule::recognise;
use serde_json::{Value, json};

use crate::random_cells::RandomCells;
use crate::solvers::words;

/// Networks of each kind of electrophile.
const OF_EACH_KIND: usize = 3;
/// Cells that are tried; among so many every kind that the model covers has come.
const TRIED: usize = 6_000;
/// The yield of a network that tells something lies between these.
const TELLING: std::ops::RangeInclusive<f64> = 0.02..=0.98;

/// Networks over all kinds of electrophiles, of cells in which neither nothing nor everything happens.
///
/// # Errors
/// A sentence if the demo's substrates cannot be read or the reference gives up.
pub fn to_json(model: &Model) -> Result<Value, String> {
    let mut cells = RandomCells::new(model)?;
    let mut of_kind: BTreeMap<String, usize> = BTreeMap::new();
    let mut cases = Vec::new();
    for _ in 0..TRIED {
        let cell = cells.next(model);
        let Some(kind) = kind(&cell) else { continue };
        let so_far = of_kind.entry(kind.clone()).or_default();
        let tells = |cell: &Cell| {
            let product = model.yield_at_mean(cell);
            product.is_some_and(|product| TELLING.contains(&product))
        };
        if *so_far == OF_EACH_KIND || !tells(&cell) {
            continue;
        }
        let name = words(&cell);
        let network = model
            .plain_network(&cell)
            .map_err(|error| format!("{name}: {error}"))?;
        if let Some(network) = network {
            *so_far += 1;
            cases.push(case(&name, &kind, &network));
        }
    }
    Ok(json!({ "cases": cases }))
}

/// The kind of the electrophile: the name of its variant.
fn kind(cell: &Cell) -> Option<String> {
    let group = recognise(&cell.electrophile.molecule).ok()?;
    let told = format!("{:?}", group.kind);
    let name = told.split(|c: char| !c.is_alphanumeric()).next()?;
    Some(name.to_owned())
}

fn case(name: &str, kind: &str, network: &PlainNetwork) -> Value {
    let steps = |steps: &Vec<Step>| -> Vec<Value> {
        let step = |step: &Step| {
            json!({
                "reactants": step.reactants,
                "used": step.used,
                "formed": step.formed,
                "k": step.k,
            })
        };
        steps.iter().map(step).collect()
    };
    let reactions: Vec<_> = network.reactions.iter().map(steps).collect();
    let stretches: Vec<_> = network
        .stretches
        .iter()
        .map(|stretch| {
            json!({
                "reactions": stretch.reactions,
                "duration_s": stretch.duration_s,
                "added": stretch.added,
            })
        })
        .collect();
    json!({
        "name": name,
        "kind": kind,
        "species": network.species,
        "start_m": network.start_m,
        "reactions": reactions,
        "stretches": stretches,
        "product": network.product,
        "substrate_m": network.substrate_m,
        "end_m": network.end_m,
    })
}
