//! The rate constants of a cell, each with its uncertainty and source.

use enolattice_reagents::BaseKind;

use crate::Cell;
use crate::explanation::ExplainedRate;
use crate::network::{Network, Reaction, Species};
use crate::parameters::{P, PARAMETERS};
use crate::screen::Spread;

/// The rate constants of steps that involve the electrophile or two molecules of substrate, and of
/// the deprotonation by the base, fastest first.
pub(super) fn rates(cell: &Cell, network: &Network) -> Vec<ExplainedRate> {
    let mut rates: Vec<_> = network
        .reactions
        .iter()
        .filter(|r| r.k > 0.0)
        .filter_map(|r| {
            let (sigma, source) = origin_of_rate(cell, r)?;
            Some(ExplainedRate {
                step: step(r),
                log10_k: enolattice_units::math::log10(r.k),
                sigma,
                source,
            })
        })
        .collect();
    rates.sort_by(|a, b| b.log10_k.total_cmp(&a.log10_k));
    rates
}

/// Standard uncertainty of log10 k of a step that is worth a line, and where k comes from.
fn origin_of_rate(cell: &Cell, r: &Reaction) -> Option<(f64, String)> {
    let of = |p: P| (PARAMETERS[p as usize].sigma, PARAMETERS[p as usize].source);
    let electrophile = Species::Electrophile;
    if r.first == Species::Base && matches!(r.products[1], Some(Species::Carbanion(_))) {
        let p = match cell.base.record.kind {
            BaseKind::Amide => P::AMIDE_EXCHANGE,
            BaseKind::Organolithium => P::ORGANOLITHIUM_EXCHANGE,
            BaseKind::Grignard => P::GRIGNARD_EXCHANGE,
            _ => P::EXCHANGE_PROTIC,
        };
        let (sigma, source) = of(p);
        return Some((sigma, source.to_owned()));
    }
    if r.second == Some(Species::Substrate) && r.products[0] == Some(Species::DimerAnion) {
        let acceptor = of(cell.substrate.acceptor?.electrophilicity()).0;
        let sigma =
            PARAMETERS[P::MAYR_S_N as usize].mean * of(P::MAYR_N_INTERCEPT).0.hypot(acceptor);
        let source = "log k = sN (N + E) with the carbonyl group of the substrate";
        return Some((sigma, source.to_owned()));
    }
    if let Some(p) = follow_up(r) {
        let (sigma, source) = of(p);
        return Some((sigma, source.to_owned()));
    }
    if r.first == electrophile {
        let (sigma, source) = of(P::SOLVOLYSIS_PRIMARY);
        return Some((sigma, source.to_owned()));
    }
    if r.second != Some(electrophile) {
        return None;
    }
    if r.products.contains(&Some(Species::Eliminated)) {
        let (sigma, source) = of(P::E2_ANCHOR);
        return Some((sigma, source.to_owned()));
    }
    let attack = Spread::of(cell).attack;
    // a base is a nucleophile by an estimate of its own
    let sigma = match r.first {
        Species::Base => attack.hypot(cell.base.record.nucleophilicity.sigma),
        _ => attack,
    };
    let source = match &cell.electrophile.e {
        Some((e, sigma, source)) => {
            format!("log k = sN (N + E), E = {e:.1} ± {sigma:.1}: {source}")
        }
        None => format!("SN2 relative rates on: {}", of(P::SN2_ANCHOR).1),
    };
    Some((sigma, source))
}

/// The parameter on which a step rests that is no attack of the carbanion on the electrophile.
fn follow_up(r: &Reaction) -> Option<P> {
    let makes = |species: Species| r.products.contains(&Some(species));
    let comes_back = |species: Option<Species>| species.is_some() && r.products.contains(&species);
    match r.first {
        _ if makes(Species::Split) => Some(P::BETA_HALIDE),
        _ if makes(Species::Trimer) => Some(P::ALDOL_TISHCHENKO),
        _ if makes(Species::CarbonylAdduct) => Some(P::E_CONJUGATED),
        _ if r.third == Some(Species::Electrophile) => Some(P::ENAMINE_N),
        Species::ProductAnion(i) if r.second.is_none() && makes(Species::Dehydrated(i)) => {
            Some(P::CLOSURE_EPOXIDE)
        }
        _ if makes(Species::Spent) && comes_back(Some(r.first)) => Some(P::DG_HETERO_MICHAEL),
        Species::Hydroxide if makes(Species::Taken) => Some(P::SAPONIFICATION),
        Species::Base | Species::Lyate if makes(Species::Taken) && comes_back(Some(r.first)) => {
            Some(P::TRANSESTERIFICATION)
        }
        _ => None,
    }
}

fn step(reaction: &Reaction) -> String {
    let left: Vec<_> = reaction.reactants().map(Species::name).collect();
    let right: Vec<_> = reaction
        .products
        .iter()
        .flatten()
        .map(|s| s.name())
        .collect();
    format!("{} → {}", left.join(" + "), right.join(" + "))
}
