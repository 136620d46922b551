//! Replicates and controls of each plate.

use std::collections::BTreeSet;

use enolattice_grid::CellId;
use enolattice_model::Cell;

use crate::planning::Ground;
use crate::{Candidate, Choice, Content, LayoutItem, Role};

/// What needs a well.
#[derive(Clone, Debug)]
pub(super) struct Placed {
    pub(super) plate: usize,
    /// Index of its candidate.
    pub(super) candidate: usize,
    pub(super) content: Content,
    /// Which replicate, from 1.
    pub(super) replicate: u32,
    pub(super) cell: Cell,
    digits: [u32; 4],
}

impl Placed {
    pub(super) fn item(&self) -> LayoutItem {
        let roles = [
            Role::Substrate,
            Role::Base,
            Role::Electrophile,
            Role::Solvent,
        ];
        let groups = roles
            .into_iter()
            .zip(self.digits)
            .map(|(role, digit)| self.content.holds(role).then_some(digit))
            .collect();
        LayoutItem {
            plate: self.plate as u32,
            groups,
            control: self.content.is_control().then_some(self.content as u32),
            replicates: Some(self.candidate as u32),
            fixed: None,
        }
    }
}

/// All wells of all plates: chosen cells with their replicates, then controls.
pub(super) fn with_controls(ground: &Ground<'_>, choice: &Choice) -> Vec<Placed> {
    let mut all = Vec::new();
    for (plate, chosen) in choice.plates.iter().enumerate() {
        let placed = |candidate: usize, content: Content, replicate: u32| {
            let of = &ground.candidates[candidate];
            let digits = of.digits;
            Some(Placed {
                plate,
                candidate,
                content,
                replicate,
                cell: ground.grid.cell(CellId(of.cell))?,
                digits: [
                    digits.substrate,
                    digits.base,
                    digits.electrophile,
                    digits.solvent,
                ],
            })
        };
        for &candidate in &chosen.members {
            for replicate in 1..=ground.request.choice.replicates {
                all.extend(placed(candidate, Content::Cell, replicate));
            }
        }
        let surest = surest_first(ground, &chosen.members);
        let of_substrates = of_different_substrates(ground, &surest);
        let controls = ground.request.controls;
        let asked = [
            (
                Content::Positive,
                controls.positive,
                &surest[..1.min(surest.len())],
            ),
            (Content::NoBase, controls.no_base, &of_substrates[..]),
            (
                Content::NoElectrophile,
                controls.no_electrophile,
                &of_substrates[..],
            ),
            (Content::Deuterium, controls.deuterium, &of_substrates[..]),
            (Content::SolventOnly, controls.solvent_only, &surest[..]),
        ];
        for (content, wells, cells) in asked {
            let cells = cells.iter().cycle().take(wells as usize);
            for (replicate, candidate) in (1..).zip(cells) {
                all.extend(placed(*candidate, content, replicate));
            }
        }
    }
    all
}

fn surest_first(ground: &Ground<'_>, members: &[usize]) -> Vec<usize> {
    let target = ground.grid.campaign().yield_at_least;
    let sure = |candidate: &Candidate| (candidate.p_hit(target), candidate.mean_yield());
    let mut surest = members.to_vec();
    surest.sort_by(|&a, &b| {
        let (a_sure, b_sure) = (sure(&ground.candidates[a]), sure(&ground.candidates[b]));
        let by_yield = b_sure.1.total_cmp(&a_sure.1);
        b_sure.0.total_cmp(&a_sure.0).then(by_yield).then(a.cmp(&b))
    });
    surest
}

/// The surest cell of each substrate.
fn of_different_substrates(ground: &Ground<'_>, surest: &[usize]) -> Vec<usize> {
    let mut seen = BTreeSet::new();
    let first = |candidate: &&usize| seen.insert(ground.candidates[**candidate].digits.substrate);
    surest.iter().filter(first).copied().collect()
}
