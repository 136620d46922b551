//! A network as equations in amounts, and their linear algebra: sparse, and in lanes.
//!
//! Only species that react couple the equations; what can only be formed follows from them. All stand in one vector,
//! those that react first, in an order in which their elimination fills few entries.

use crate::lanes::Lanes;
use crate::network::{Amounts, Network, Reaction, Species};

/// Room for species: a power of two, so that a masked index needs no check.
pub(super) const ROOM: usize = Species::COUNT.next_power_of_two();

/// A number for every species of a system, by its place.
pub(super) type Vector<const L: usize> = [Lanes<L>; ROOM];

/// A reaction in terms of places.
#[derive(Clone, Copy, Debug)]
struct Term<const L: usize> {
    k: Lanes<L>,
    /// Places of the reactants in the rate.
    reactants: [u8; 3],
    order: u8,
    /// End of its entries in [`System::changes`].
    end: u16,
}

/// What a reaction changes.
#[derive(Clone, Copy, Debug)]
struct Change {
    place: u8,
    per_extent: f64,
    /// Entries of the matrix for each reactant.
    entries: [u16; 3],
}

/// The equations `dy/dt = f(y)` of networks that differ in their rate constants alone.
#[derive(Debug)]
pub(super) struct System<const L: usize> {
    /// Species by place.
    species: Vec<Species>,
    /// How many of them react.
    coupled: usize,
    terms: Vec<Term<L>>,
    /// What changes, reaction by reaction.
    changes: Vec<Change>,
    /// Where the entries of the matrix are.
    pattern: Pattern,
    /// `1/(γ·Δt) − ∂f/∂y`; once factored, its factors, the diagonal inverted.
    matrix: Vec<Lanes<L>>,
    /// γ·Δt of the matrix, s.
    step_s: f64,
}

impl<const L: usize> System<L> {
    /// The equations of networks with the same reactions.
    pub(super) fn new(networks: &[Network; L]) -> System<L> {
        let reactions = &networks[0].reactions;
        let mut extents: Vec<Extent> = reactions.iter().map(Extent::of).collect();
        let order = Order::of(&mut extents);
        let pattern = Pattern::new(order.rows, order.coupled, order.species.len());
        let mut terms = Vec::with_capacity(reactions.len());
        let mut changes = Vec::with_capacity(4 * reactions.len());
        for (index, extent) in extents.iter().enumerate() {
            for &(i, per_extent) in extent.changes() {
                let mut entries = [0; 3];
                for (entry, &j) in entries.iter_mut().zip(extent.reactants()) {
                    *entry = pattern.entry_in(
                        order.rows[usize::from(i)],
                        usize::from(i),
                        usize::from(j),
                    );
                }
                changes.push(Change {
                    place: i,
                    per_extent,
                    entries,
                });
            }
            terms.push(Term {
                k: Lanes::each(|l| networks[l].reactions[index].k),
                reactants: extent.reactants,
                order: extent.order,
                end: changes.len() as u16,
            });
        }
        System {
            coupled: order.coupled,
            terms,
            changes,
            matrix: vec![Lanes::all(0.0); pattern.columns.len()],
            pattern,
            step_s: 0.0,
            species: order.species,
        }
    }

    /// Number of species.
    pub(super) fn len(&self) -> usize {
        self.species.len()
    }

    /// Number of species that react; they have the first places.
    pub(super) fn coupled(&self) -> usize {
        self.coupled
    }

    /// The place of a species that takes part.
    pub(super) fn place(&self, species: Species) -> Option<usize> {
        self.species.iter().position(|&other| other == species)
    }

    /// Amounts by place.
    pub(super) fn gather(&self, pots: &[Amounts; L]) -> Vector<L> {
        let mut y = [Lanes::all(0.0); ROOM];
        for (y, &species) in y.iter_mut().zip(&self.species) {
            *y = Lanes::each(|l| pots[l].of(species));
        }
        y
    }

    /// Writes amounts by place back into the pots.
    pub(super) fn scatter(&self, y: &Vector<L>, pots: &mut [Amounts; L]) {
        for (y, &species) in y.iter().zip(&self.species) {
            for (pot, amount) in pots.iter_mut().zip(y.0) {
                pot.0[species.index()] = amount;
            }
        }
    }

    /// Adds `f(y)` to `f`; a negative amount reacts no more.
    #[inline(always)]
    pub(super) fn rates(&self, y: &Vector<L>, f: &mut Vector<L>) {
        let mut start = 0;
        let amount = |of: u8| y[usize::from(of) % ROOM].max(0.0);
        for term in &self.terms {
            let [a, b, c] = term.reactants;
            let mut rate = term.k * amount(a);
            if term.order > 1 {
                rate = rate * amount(b);
                if term.order > 2 {
                    rate = rate * amount(c);
                }
            }
            let end = usize::from(term.end);
            for change in &self.changes[start..end] {
                f[usize::from(change.place) % ROOM] += rate * Lanes::all(change.per_extent);
            }
            start = end;
        }
    }

    /// Linearises at `y` for `γ·Δt` and eliminates; adds `f(y)` to `f`.
    ///
    /// What a species loses stands on its diagonal, so the elimination needs no pivoting.
    #[inline(always)]
    pub(super) fn factor(&mut self, y: &Vector<L>, step_s: f64, f: &mut Vector<L>) {
        self.linearise(y, step_s, f);
        let mut updates = self.pattern.updates.iter();
        let mut pivots = self.pattern.pivots.iter();
        for c in 0..self.coupled {
            let diagonal = usize::from(self.pattern.diagonal[c]);
            let inverse = self.matrix[diagonal].inverse();
            self.matrix[diagonal] = inverse;
            let right = diagonal + 1..usize::from(self.pattern.row_ends[c]);
            for _ in 0..self.pattern.below[c] {
                let at = usize::from(*pivots.next().expect("one for each row below"));
                let factor = self.matrix[at] * inverse;
                self.matrix[at] = factor;
                for j in right.clone() {
                    let to = usize::from(*updates.next().expect("one for each product"));
                    let product = factor * self.matrix[j];
                    self.matrix[to] -= product;
                }
            }
        }
    }

    #[inline(always)]
    fn linearise(&mut self, y: &Vector<L>, step_s: f64, f: &mut Vector<L>) {
        self.step_s = step_s;
        self.matrix.fill(Lanes::all(0.0));
        let inverse_step = Lanes::all(1.0 / step_s);
        for &at in &self.pattern.diagonal[..self.coupled] {
            self.matrix[usize::from(at)] = inverse_step;
        }
        let mut start = 0;
        let amount = |of: u8| y[usize::from(of) % ROOM].max(0.0);
        for term in &self.terms {
            let [a, b, c] = term.reactants;
            let (a, k) = (amount(a), term.k);
            let end = usize::from(term.end);
            let changes = &self.changes[start..end];
            start = end;
            if term.order == 1 {
                for change in changes {
                    let slope = Lanes::all(change.per_extent) * k;
                    f[usize::from(change.place) % ROOM] += slope * a;
                    self.matrix[usize::from(change.entries[0])] -= slope;
                }
                continue;
            }
            let b = amount(b);
            if term.order == 2 {
                let slopes = [k * b, k * a];
                let rate = slopes[0] * a;
                for change in changes {
                    let per_extent = Lanes::all(change.per_extent);
                    f[usize::from(change.place) % ROOM] += per_extent * rate;
                    self.matrix[usize::from(change.entries[0])] -= per_extent * slopes[0];
                    self.matrix[usize::from(change.entries[1])] -= per_extent * slopes[1];
                }
                continue;
            }
            let c = amount(c);
            let slopes = [k * b * c, k * a * c, k * a * b];
            let rate = slopes[0] * a;
            for change in changes {
                let per_extent = Lanes::all(change.per_extent);
                f[usize::from(change.place) % ROOM] += per_extent * rate;
                for (at, slope) in change.entries.into_iter().zip(slopes) {
                    self.matrix[usize::from(at)] -= per_extent * slope;
                }
            }
        }
    }

    /// Solves `(1/(γ·Δt) − ∂f/∂y)·x = right` with the factors, in place.
    #[inline(always)]
    pub(super) fn solve(&self, x: &mut Vector<L>) {
        let (matrix, pattern) = (&self.matrix[..], &self.pattern);
        let mut start = 0;
        for i in 0..self.coupled {
            let diagonal = usize::from(pattern.diagonal[i]);
            let mut sum = x[i % ROOM];
            for (&j, &factor) in pattern.columns[start..diagonal]
                .iter()
                .zip(&matrix[start..diagonal])
            {
                sum -= factor * x[usize::from(j) % ROOM];
            }
            x[i % ROOM] = sum;
            start = usize::from(pattern.row_ends[i]);
        }
        for i in (0..self.coupled).rev() {
            let diagonal = usize::from(pattern.diagonal[i]);
            let right = diagonal + 1..usize::from(pattern.row_ends[i]);
            let mut sum = x[i % ROOM];
            for (&j, &factor) in pattern.columns[right.clone()].iter().zip(&matrix[right]) {
                sum -= factor * x[usize::from(j) % ROOM];
            }
            x[i % ROOM] = sum * matrix[diagonal];
        }
        let step = Lanes::all(self.step_s);
        for i in self.coupled..self.species.len() {
            let end = usize::from(pattern.row_ends[i]);
            let mut sum = x[i % ROOM];
            for (&j, &slope) in pattern.columns[start..end].iter().zip(&matrix[start..end]) {
                sum -= slope * x[usize::from(j) % ROOM];
            }
            x[i % ROOM] = sum * step;
            start = end;
        }
    }

    /// Largest rate that the linearisation leaves out for a step `x` from `y`: `k·δa·δb`, and of three reactants each
    /// two with the amount of the third.
    #[inline(always)]
    pub(super) fn left_out(&self, y: &Vector<L>, x: &Vector<L>) -> f64 {
        let mut most = 0.0_f64;
        for term in self.terms.iter().filter(|term| term.order > 1) {
            let [a, b, c] = term.reactants.map(usize::from);
            let pair = term.k * x[a % ROOM] * x[b % ROOM];
            if term.order == 2 {
                most = most.max(pair.largest());
                continue;
            }
            let others = [
                pair * y[c % ROOM],
                term.k * x[a % ROOM] * x[c % ROOM] * y[b % ROOM],
                term.k * x[b % ROOM] * x[c % ROOM] * y[a % ROOM],
            ];
            most = others
                .iter()
                .fold(most, |most, pair| most.max(pair.largest()));
        }
        most
    }
}

/// Where the entries of a matrix are: row by row, and in each row by column.
///
/// Rows of species that are only formed come last and have no diagonal.
#[derive(Debug)]
struct Pattern {
    columns: Vec<u8>,
    row_ends: Vec<u16>,
    diagonal: Vec<u16>,
    /// For each column the number of rows below the diagonal that have an entry in it.
    below: Vec<u8>,
    /// Those entries, column by column.
    pivots: Vec<u16>,
    /// For each of those entries those of its row that the elimination changes.
    updates: Vec<u16>,
}

impl Pattern {
    /// The pattern of rows that hold what an elimination in order fills.
    fn new(rows: [u64; ROOM], coupled: usize, all: usize) -> Pattern {
        let mut pattern = Pattern {
            columns: Vec::with_capacity(256),
            row_ends: Vec::with_capacity(all),
            diagonal: Vec::with_capacity(coupled),
            below: Vec::with_capacity(coupled),
            pivots: Vec::with_capacity(128),
            updates: Vec::with_capacity(512),
        };
        for (i, &row) in rows.iter().enumerate().take(all) {
            for j in bits(row) {
                if i == j {
                    pattern.diagonal.push(pattern.columns.len() as u16);
                }
                pattern.columns.push(j as u8);
            }
            pattern.row_ends.push(pattern.columns.len() as u16);
        }
        for c in 0..coupled {
            let mut below = 0;
            for (i, &row) in rows.iter().enumerate().take(coupled).skip(c + 1) {
                if row >> c & 1 == 0 {
                    continue;
                }
                below += 1;
                pattern.pivots.push(pattern.entry_in(row, i, c));
                for j in bits(rows[c] & !((2_u64 << c) - 1)) {
                    pattern.updates.push(pattern.entry_in(row, i, j));
                }
            }
            pattern.below.push(below);
        }
        pattern
    }

    /// The entry of a row with these columns.
    fn entry_in(&self, row: u64, i: usize, j: usize) -> u16 {
        let start = if i == 0 { 0 } else { self.row_ends[i - 1] };
        start + (row & ((1_u64 << j) - 1)).count_ones() as u16
    }
}

fn bits(mut of: u64) -> impl Iterator<Item = usize> {
    std::iter::from_fn(move || {
        let next = (of != 0).then(|| of.trailing_zeros() as usize)?;
        of &= of - 1;
        Some(next)
    })
}

/// A reaction by the indices of its species, then by their places.
#[derive(Clone, Copy, Debug)]
struct Extent {
    reactants: [u8; 3],
    order: u8,
    changes: [(u8, f64); MOST_CHANGES],
    changed: u8,
}

/// Species that a reaction changes at most: three reactants, a source of protons, three products.
const MOST_CHANGES: usize = 7;

impl Extent {
    fn of(reaction: &Reaction) -> Extent {
        let mut extent = Extent {
            reactants: [0; 3],
            order: 0,
            changes: [(0, 0.0); MOST_CHANGES],
            changed: 0,
        };
        for species in reaction.reactants() {
            extent.reactants[usize::from(extent.order)] = species.index() as u8;
            extent.order += 1;
        }
        let used = reaction.used().map(|s| (s, -1.0));
        let formed = reaction.formed().map(|s| (s, 1.0));
        for (species, change) in used.chain(formed) {
            let (index, n) = (species.index() as u8, usize::from(extent.changed));
            match extent.changes[..n]
                .iter_mut()
                .find(|entry| entry.0 == index)
            {
                Some(entry) => entry.1 += change,
                None => {
                    extent.changes[n] = (index, change);
                    extent.changed += 1;
                }
            }
        }
        extent
    }

    fn reactants(&self) -> &[u8] {
        &self.reactants[..usize::from(self.order)]
    }

    fn changes(&self) -> &[(u8, f64)] {
        &self.changes[..usize::from(self.changed)]
    }

    fn rename(&mut self, place: &[u8; Species::COUNT]) {
        for reactant in &mut self.reactants[..usize::from(self.order)] {
            *reactant = place[usize::from(*reactant)];
        }
        for (index, _) in &mut self.changes[..usize::from(self.changed)] {
            *index = place[usize::from(*index)];
        }
    }
}

/// The order in which species stand.
struct Order {
    species: Vec<Species>,
    /// How many react; they come first.
    coupled: usize,
    /// Columns of each row, with what their elimination in order fills.
    rows: [u64; ROOM],
}

impl Order {
    /// Orders species so that each couples few others when it is eliminated, and gives the extents their places.
    fn of(extents: &mut [Extent]) -> Order {
        let mut rows = [0_u64; ROOM];
        let (mut used, mut changed) = (0_u64, 0_u64);
        for extent in extents.iter() {
            let columns = extent.reactants().iter().fold(0, |all, j| all | 1_u64 << j);
            used |= columns;
            for &(i, change) in extent.changes() {
                rows[usize::from(i)] |= columns | 1 << i;
                changed |= 1 << i;
                // what is used up beside the rate is no sink either
                if change < 0.0 {
                    used |= 1 << i;
                }
            }
        }
        let mut columns = [0_u64; ROOM];
        for i in bits(used) {
            rows[i] |= 1 << i;
            bits(rows[i]).for_each(|j| columns[j] |= 1 << i);
        }
        let mut order = Order {
            species: Vec::with_capacity(ROOM),
            coupled: used.count_ones() as usize,
            rows: [0; ROOM],
        };
        let mut place = [0; Species::COUNT];
        let mut left = used;
        while left != 0 {
            let count = |of: u64| (of & left).count_ones();
            let fills = |i: &usize| (count(rows[*i]) - 1) * (count(columns[*i]) - 1);
            let next = bits(left).min_by_key(fills).expect("one is left");
            let (row, column) = (rows[next] & left, columns[next] & left);
            bits(column).for_each(|i| rows[i] |= row);
            bits(row).for_each(|j| columns[j] |= column);
            left &= !(1 << next);
            place[next] = order.species.len() as u8;
            order.species.push(Species::at(next));
        }
        for i in bits(changed & !used) {
            place[i] = order.species.len() as u8;
            order.species.push(Species::at(i));
        }
        for i in bits(used | changed) {
            let columns = bits(rows[i] & used).map(|j| place[j]);
            order.rows[usize::from(place[i])] = columns.fold(0, |row, j| row | 1 << j);
        }
        extents.iter_mut().for_each(|extent| extent.rename(&place));
        order
    }
}
