//! Cell numbers: identities over random lattices, grown or not.

use std::collections::HashSet;

use enolattice_grid::{AXES, CELLS_PER_BLOCK, CellDigits, CellId, GridError, Lattice, MAX_CELLS};
use proptest::prelude::*;

/// Sizes of axes, most of them 1 as in real campaigns; at most some 10^5 cells.
fn sizes() -> impl Strategy<Value = [u32; 13]> {
    proptest::collection::vec((0usize..13, 1u32..=9), 0..5).prop_map(|axes| {
        let mut sizes = [1; 13];
        for (axis, size) in axes {
            sizes[axis] = size;
        }
        sizes
    })
}

/// Values appended to axes: some axes grow by a few.
fn growth() -> impl Strategy<Value = [u32; 13]> {
    proptest::collection::vec((0usize..13, 0u32..=2), 0..3).prop_map(|axes| {
        let mut growth = [0; 13];
        for (axis, by) in axes {
            growth[axis] = by;
        }
        growth
    })
}

fn grown(lattice: &Lattice, by: &[u32; 13]) -> Lattice {
    let sizes = std::array::from_fn(|axis| lattice.sizes()[axis] + by[axis]);
    lattice.grown(sizes).expect("a small lattice grows")
}

proptest! {
    #[test]
    fn digits_and_numbers_are_one_to_one(sizes in sizes(), by in growth()) {
        let lattice = grown(&Lattice::new(sizes).expect("small"), &by);
        let product: u64 = lattice.sizes().iter().map(|size| u64::from(*size)).product();
        prop_assert_eq!(lattice.cells(), product);
        let mut seen = HashSet::new();
        for number in 0..lattice.cells() {
            let digits = lattice.digits(CellId(number)).expect("a cell below the end");
            prop_assert!(digits.to_array().iter().zip(lattice.sizes()).all(|(d, n)| d < n));
            prop_assert_eq!(lattice.cell_of(digits), Some(CellId(number)));
            prop_assert!(seen.insert(digits));
        }
        prop_assert_eq!(lattice.digits(CellId(lattice.cells())), None);
    }

    #[test]
    fn each_cell_is_in_exactly_one_block(sizes in sizes(), by in growth()) {
        let lattice = grown(&Lattice::new(sizes).expect("small"), &by);
        let mut next = 0;
        for block in lattice.blocks() {
            let cells = lattice.block_cells(block);
            prop_assert_eq!(cells.start, next);
            prop_assert!(cells.end > cells.start && cells.end - cells.start <= CELLS_PER_BLOCK);
            for cell in [cells.start, cells.end - 1] {
                prop_assert_eq!(lattice.block_of(CellId(cell)), Some(block));
            }
            next = cells.end;
        }
        prop_assert_eq!(next, lattice.cells());
        prop_assert_eq!(lattice.block_of(CellId(next)), None);
    }

    #[test]
    fn growing_never_moves_a_number(sizes in sizes(), first in growth(), second in growth()) {
        let young = Lattice::new(sizes).expect("small");
        let older = grown(&young, &first);
        let old = grown(&older, &second);
        for number in 0..older.cells() {
            prop_assert_eq!(older.digits(CellId(number)), old.digits(CellId(number)));
            prop_assert_eq!(older.block_of(CellId(number)), old.block_of(CellId(number)));
        }
        let product: u64 = old.sizes().iter().map(|size| u64::from(*size)).product();
        let united: u64 = old.segments().iter().map(|segment| segment.cells()).sum();
        prop_assert_eq!(united, product);
        for digits in combinations(old.sizes()) {
            let holding = old.segments().iter().filter(|segment| {
                segment.ranges.iter().zip(digits).all(|(range, digit)| range.contains(&digit))
            });
            prop_assert_eq!(holding.count(), 1);
        }
    }
}

fn combinations(sizes: &[u32; 13]) -> Vec<[u32; 13]> {
    let mut all = vec![[0; 13]];
    for (axis, size) in sizes.iter().enumerate() {
        all = all
            .into_iter()
            .flat_map(|digits| {
                (0..*size).map(move |digit| {
                    let mut digits = digits;
                    digits[axis] = digit;
                    digits
                })
            })
            .collect();
    }
    all
}

#[test]
fn the_substrate_is_the_slowest_digit_and_the_order_of_addition_the_fastest() {
    let lattice = Lattice::new([2; 13]).expect("8192 cells");
    assert_eq!(lattice.cells(), 8192);
    for (axis, name) in AXES.iter().enumerate() {
        let mut digits = [0; 13];
        digits[axis] = 1;
        let cell = lattice.cell_of(CellDigits::from_array(digits));
        assert_eq!(cell, Some(CellId(1 << (12 - axis))), "{name}");
    }
    assert_eq!(lattice.blocks().count(), 2);
    assert_eq!(
        lattice.digits(CellId(4096)).map(|digits| digits.substrate),
        Some(1)
    );
}

#[test]
fn an_appended_base_makes_one_segment_after_the_first() {
    let mut sizes = [1; 13];
    (sizes[0], sizes[2]) = (3, 2);
    let young = Lattice::new(sizes).expect("six cells");
    sizes[2] = 3;
    let old = young.grown(sizes).expect("nine cells");
    assert_eq!(old.segments().len(), 2);
    assert_eq!(old.segments()[1].first_cell, 6);
    let appended: Vec<_> = (6..9)
        .map(|cell| {
            old.digits(CellId(cell))
                .map(|digits| (digits.substrate, digits.base))
        })
        .collect();
    assert_eq!(appended, [Some((0, 2)), Some((1, 2)), Some((2, 2))]);
}

#[test]
fn lattices_beyond_the_numbers_are_refused() {
    let mut sizes = [1; 13];
    (sizes[0], sizes[1]) = (1 << 22, 1 << 22);
    assert_eq!(Lattice::new(sizes), Err(GridError::TooLarge));
    assert_eq!(Lattice::new([u32::MAX; 13]), Err(GridError::TooLarge));
    sizes[1] -= 1;
    let largest = Lattice::new(sizes).expect("just below 2^44");
    assert!(largest.cells() < MAX_CELLS);
    let last = largest
        .block_of(CellId(largest.cells() - 1))
        .expect("the last cell has a block");
    assert_eq!(largest.block_cells(last).end, largest.cells());
    sizes[1] += 1;
    assert_eq!(largest.grown(sizes), Err(GridError::TooLarge));
    sizes[0] = 1;
    assert_eq!(
        largest.grown(sizes),
        Err(GridError::ShrunkAxis { axis: "substrates" })
    );
    assert_eq!(
        Lattice::new([0; 13]),
        Err(GridError::EmptyAxis { axis: "substrates" })
    );
}
