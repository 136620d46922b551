//! The rate constants of a cell, each with its uncertainty, its source and what goes through it.

use enolattice_reagents::BaseKind;

use crate::Cell;
use crate::explanation::ExplainedRate;
use crate::network::{Amounts, Network, Reaction, Species};
use crate::parameters::{P, PARAMETERS};
use crate::reference::Course;
use crate::screen::Spread;

/// The rate constants of steps that involve the electrophile or two molecules of substrate, and of the deprotonation by the
/// base: those through which most goes first, then the fastest.
pub(super) fn rates(cell: &Cell, network: &Network, course: &Course) -> Vec<ExplainedRate> {
    let extents = Extents { network, course };
    let mut rates: Vec<_> = network
        .reactions
        .iter()
        .filter(|r| r.k > 0.0)
        .filter_map(|r| {
            let (sigma, source) = origin_of_rate(cell, r)?;
            Some(ExplainedRate {
                step: step(cell, r),
                log10_k: enolattice_units::math::log10(r.k),
                sigma,
                source,
                extent: extents.of(r),
            })
        })
        .collect();
    rates.sort_by(|a, b| {
        let importance = |rate: &ExplainedRate| rate.extent.unwrap_or(0.0);
        importance(b)
            .total_cmp(&importance(a))
            .then(b.log10_k.total_cmp(&a.log10_k))
    });
    rates
}

/// How far the steps of a network have run over the time course.
struct Extents<'a> {
    network: &'a Network,
    course: &'a Course,
}

impl Extents<'_> {
    /// Net extent of a step in units of the substrate charged; `None` without a time course.
    ///
    /// The trapezoidal rule over the points of the course says how a product is divided among the steps that make it; how much
    /// of it there is in the end says how much that is, where nothing uses it up again.
    fn of(&self, r: &Reaction) -> Option<f64> {
        if self.course.points.is_empty() {
            return None;
        }
        let net = self.integral(r);
        let made = r.formed().find(|made| self.is_end(*made));
        let extent = match made {
            Some(end) => {
                let makes = |other: &&Reaction| other.formed().any(|s| s == end);
                let ways = self.network.reactions.iter().filter(makes);
                let all: f64 = ways.map(|way| self.integral(way)).sum();
                let there = self.course.end.of(end);
                if all > 0.0 { there * net / all } else { 0.0 }
            }
            None => net,
        };
        Some((extent / self.network.charged[0]).max(0.0))
    }

    /// Whether a species is made and never used up.
    fn is_end(&self, species: Species) -> bool {
        let uses = |r: &Reaction| r.used().any(|s| s == species);
        species.substrates() + species.electrophiles() > 0.0
            && !self.network.reactions.iter().any(uses)
    }

    /// ∫ rate dt of a step less that of its reverse since the electrophile came, not below 0, mol/L.
    fn integral(&self, r: &Reaction) -> f64 {
        let back = self.network.reactions.iter().find(|b| is_reverse(r, b));
        let rate = |r: &Reaction, pot: &Amounts| {
            let amounts = r.reactants().map(|s| pot.of(s).max(0.0));
            r.k * amounts.product::<f64>()
        };
        let net = |pot: &Amounts| rate(r, pot) - back.map_or(0.0, |reverse| rate(reverse, pot));
        let points = &self.course.points;
        let since = points.iter().position(|(time_s, _)| *time_s >= 0.0);
        let points = &points[since.unwrap_or(points.len())..];
        let pieces = points
            .windows(2)
            .map(|w| 0.5 * (net(&w[0].1) + net(&w[1].1)) * (w[1].0 - w[0].0));
        pieces.sum::<f64>().max(0.0)
    }
}

/// Whether one step undoes the other.
fn is_reverse(forth: &Reaction, back: &Reaction) -> bool {
    let sorted = |species: &mut dyn Iterator<Item = Species>| {
        let mut all: Vec<usize> = species.map(Species::index).collect();
        all.sort_unstable();
        all
    };
    sorted(&mut forth.used()) == sorted(&mut back.formed())
        && sorted(&mut forth.formed()) == sorted(&mut back.used())
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
    if let Some(p) = follow_up(cell.base.record.kind, r) {
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
fn follow_up(kind: BaseKind, r: &Reaction) -> Option<P> {
    let makes = |species: Species| r.products.contains(&Some(species));
    let by_base_alone = r.first == Species::Base && makes(Species::Taken);
    let comes_back = |species: Option<Species>| species.is_some() && r.products.contains(&species);
    match r.first {
        _ if by_base_alone && kind == BaseKind::Amide => Some(P::AMIDE_TO_ALDEHYDE),
        _ if by_base_alone && kind == BaseKind::Organolithium => Some(P::ORGANOLITHIUM_ADDITION),
        _ if by_base_alone && kind == BaseKind::Grignard => Some(P::GRIGNARD_ADDITION),
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

/// A step in the names of the cell's reagents.
fn step(cell: &Cell, reaction: &Reaction) -> String {
    let left: Vec<_> = reaction.reactants().map(|s| named(cell, s)).collect();
    let right: Vec<_> = reaction.formed().map(|s| named(cell, s)).collect();
    format!("{} → {}", left.join(" + "), right.join(" + "))
}

/// Name of a species; sites are told apart where the substrate has several.
fn named(cell: &Cell, species: Species) -> String {
    let carbon = &cell.substrate.carbon;
    let at = |site: usize| match carbon.get(site) {
        Some(found) if carbon.len() > 1 => format!(" at atom {}", found.acid.atom),
        _ => String::new(),
    };
    match species {
        Species::Carbanion(site) => format!("carbanion{}", at(site)),
        Species::Product(site) => format!("product{}", at(site)),
        Species::ProductAnion(site) => format!("anion of the product{}", at(site)),
        Species::Dehydrated(site) => format!("product{} without water", at(site)),
        Species::Electrophile => cell.electrophile.name.clone(),
        Species::Base => cell.base.record.name.clone(),
        Species::BaseAcid => format!("acid of {}", cell.base.record.name),
        Species::OverReacted => "product that reacted again".to_owned(),
        other => other.name(),
    }
}
