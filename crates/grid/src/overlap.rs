//! The cells that two campaigns share, whatever their numbers.

use std::collections::HashMap;
use std::hash::Hash;

use crate::resolve::NO_ADDITIVE;
use crate::{AXES, BlockId, Campaign, CellDigits, CellId, Grid, Lattice};

/// Axes of structures, which are always matched by value.
const STRUCTURES: [usize; 2] = [0, 1];

/// The cells that two campaigns share.
///
/// Values are matched by what they are: structures by their canonical SMILES, reagents by their names in
/// the library, additives by name and amount, numbers as they are. An axis of bases, solvents, additives or
/// conditions on which each campaign has one value is matched whatever the values are: it is what was
/// changed between the two.
#[derive(Clone, Debug)]
pub struct Overlap<'g> {
    left: &'g Lattice,
    right: &'g Lattice,
    /// For each value of the left campaign its number in the right one.
    partners: [Vec<Option<u32>>; 13],
    axes: Vec<AxisOverlap>,
}

/// What two campaigns share on one axis.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct AxisOverlap {
    /// Name of the axis, as in [`AXES`].
    pub axis: &'static str,
    /// Values that both have.
    pub shared: u64,
    /// Values that the left campaign alone has.
    pub left_only: u64,
    /// Values that the right campaign alone has.
    pub right_only: u64,
    /// The one value of each, where they differ and were matched all the same.
    pub changed: Option<(String, String)>,
}

impl<'g> Overlap<'g> {
    /// Matches the values of two campaigns, axis by axis.
    pub fn of(left: &'g Grid, right: &'g Grid) -> Overlap<'g> {
        let (of_left, of_right) = (values(left.campaign()), values(right.campaign()));
        let mut axes = Vec::with_capacity(AXES.len());
        let partners = std::array::from_fn(|axis| {
            let (left, right) = (&of_left[axis], &of_right[axis]);
            let mut partners = matched(left, right);
            let mut changed = None;
            if let ([one], [other]) = (left.as_slice(), right.as_slice())
                && !STRUCTURES.contains(&axis)
                && one != other
            {
                partners = vec![Some(0)];
                changed = Some((one.clone(), other.clone()));
            }
            let shared = partners.iter().flatten().count() as u64;
            axes.push(AxisOverlap {
                axis: AXES[axis],
                shared,
                left_only: left.len() as u64 - shared,
                right_only: right.len() as u64 - shared,
                changed,
            });
            partners
        });
        Overlap {
            left: left.lattice(),
            right: right.lattice(),
            partners,
            axes,
        }
    }

    /// What is shared on each axis, slowest first.
    pub fn axes(&self) -> &[AxisOverlap] {
        &self.axes
    }

    /// Number of cells that both have.
    pub fn cells(&self) -> u64 {
        self.axes.iter().map(|axis| axis.shared).product()
    }

    /// The cells of a block of the left campaign that the right one has too, each with its number there, in
    /// order.
    pub fn of_block(&self, block: BlockId) -> impl Iterator<Item = (CellId, CellId)> + '_ {
        let cells = self.left.block_cells(block);
        let mut walk = self.left.locate(CellId(cells.start)).map(|(at, offset)| {
            let segment = &self.left.segments()[at];
            (segment, segment.digits(offset))
        });
        cells.filter_map(move |cell| {
            let (segment, digits) = walk.as_mut()?;
            let partner = self.partner(digits);
            segment.advance(digits);
            Some((CellId(cell), partner?))
        })
    }

    fn partner(&self, digits: &[u32; 13]) -> Option<CellId> {
        let mut partner = [0; 13];
        for ((digit, partners), known) in digits.iter().zip(&self.partners).zip(&mut partner) {
            *known = partners[*digit as usize]?;
        }
        self.right.cell_of(CellDigits::from_array(partner))
    }
}

/// The number of each left value among the right ones.
fn matched<T: Hash + Eq>(left: &[T], right: &[T]) -> Vec<Option<u32>> {
    let numbers: HashMap<&T, u32> = right.iter().zip(0..).collect();
    let number = |value| numbers.get(value).copied();
    left.iter().map(number).collect()
}

/// The values of each axis in words that tell them apart, in the order of [`AXES`].
fn values(campaign: &Campaign) -> [Vec<String>; 13] {
    let numbers = |values: &[f64]| values.iter().map(f64::to_string).collect();
    let formation = campaign.formation_temperature_c.iter();
    let additives = campaign.additives.iter().map(|dose| match dose {
        Some(dose) => format!("{}, {} equivalents", dose.additive.record.name, dose.equiv),
        None => NO_ADDITIVE.to_owned(),
    });
    let orders = campaign.addition.iter().map(|order| match order {
        Some(order) => order.name().to_owned(),
        None => "usual for the base".to_owned(),
    });
    [
        (campaign.substrates.iter())
            .map(|known| known.molecule.canonical().to_owned())
            .collect(),
        (campaign.electrophiles.iter())
            .map(|known| known.molecule.canonical().to_owned())
            .collect(),
        (campaign.bases.iter())
            .map(|known| known.record.name.clone())
            .collect(),
        (campaign.solvents.iter())
            .map(|known| known.record.name.clone())
            .collect(),
        additives.collect(),
        numbers(&campaign.temperature_c),
        formation
            .map(|value| value.map_or("that of the reaction".to_owned(), |t| t.to_string()))
            .collect(),
        numbers(&campaign.base_equiv),
        numbers(&campaign.electrophile_equiv),
        numbers(&campaign.concentration_m),
        numbers(&campaign.time_h),
        numbers(&campaign.dosing_min),
        orders.collect(),
    ]
}
