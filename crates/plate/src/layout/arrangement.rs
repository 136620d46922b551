//! An assignment of the items of a plate to wells.

use super::{EdgeWells, LayoutItem};
use crate::{PlateFormat, Well};

/// A class of wells or of items: only items of one class change places.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Freedom {
    Fixed,
    /// Goes into every well that is used.
    Free,
    /// May not stand at the edge.
    InnerOnly,
}

/// Item `i` stands in slot `slot_of[i]`; there are as many slots as items.
#[derive(Clone, Debug)]
pub(super) struct Arrangement {
    wells: Vec<Well>,
    at_edge: Vec<bool>,
    freedom: Vec<Freedom>,
    slot_of: Vec<usize>,
    item_in: Vec<usize>,
}

impl Arrangement {
    /// Item `i` in the `i`-th well.
    pub(super) fn new(
        format: PlateFormat,
        edges: EdgeWells,
        items: &[&LayoutItem],
        wells: Vec<Well>,
    ) -> Arrangement {
        let freedom = |item: &&LayoutItem| match (item.fixed, edges, item.control) {
            (Some(_), ..) => Freedom::Fixed,
            (None, EdgeWells::ControlsOnly, None) => Freedom::InnerOnly,
            (None, ..) => Freedom::Free,
        };
        Arrangement {
            at_edge: wells.iter().map(|well| format.is_edge(*well)).collect(),
            freedom: items.iter().map(freedom).collect(),
            slot_of: (0..items.len()).collect(),
            item_in: (0..items.len()).collect(),
            wells,
        }
    }

    /// Items, and as many slots.
    pub(super) fn len(&self) -> usize {
        self.wells.len()
    }

    /// The wells in the order of the slots.
    pub(super) fn wells(&self) -> &[Well] {
        &self.wells
    }

    pub(super) fn slot_of(&self, item: usize) -> usize {
        self.slot_of[item]
    }

    pub(super) fn item_in(&self, slot: usize) -> usize {
        self.item_in[slot]
    }

    pub(super) fn well_of(&self, item: usize) -> Well {
        self.wells[self.slot_of[item]]
    }

    /// The well of each item, in the order of the items.
    pub(super) fn wells_of_items(&self) -> Vec<Well> {
        let items = 0..self.len();
        items.map(|item| self.well_of(item)).collect()
    }

    /// Whether two items may change places.
    pub(super) fn may_swap(&self, one: usize, other: usize) -> bool {
        let may_go = |item: usize, to: usize| match self.freedom[item] {
            Freedom::Fixed => false,
            Freedom::Free => true,
            Freedom::InnerOnly => !self.at_edge[self.slot_of[to]],
        };
        one != other && may_go(one, other) && may_go(other, one)
    }

    pub(super) fn swap(&mut self, one: usize, other: usize) {
        self.slot_of.swap(one, other);
        self.item_in[self.slot_of[one]] = one;
        self.item_in[self.slot_of[other]] = other;
    }

    /// Takes over the places of another arrangement of the same items and slots.
    pub(super) fn copy_places(&mut self, other: &Arrangement) {
        self.slot_of.copy_from_slice(&other.slot_of);
        self.item_in.copy_from_slice(&other.item_in);
    }
}
