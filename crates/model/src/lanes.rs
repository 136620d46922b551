//! Short arrays of numbers that are computed side by side.

use std::ops::{Add, AddAssign, Mul, Sub, SubAssign};

/// A number in each of `L` lanes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Lanes<const L: usize>(pub(crate) [f64; L]);

impl<const L: usize> Lanes<L> {
    /// The same number in every lane.
    #[inline(always)]
    pub(crate) fn all(x: f64) -> Self {
        Lanes([x; L])
    }

    /// A number for each lane.
    #[inline(always)]
    pub(crate) fn each(f: impl FnMut(usize) -> f64) -> Self {
        Lanes(std::array::from_fn(f))
    }

    /// One over the number in each lane.
    #[inline(always)]
    pub(crate) fn inverse(self) -> Self {
        Lanes(self.0.map(|x| 1.0 / x))
    }

    /// The larger of the number and `least` in each lane.
    #[inline(always)]
    pub(crate) fn max(self, least: f64) -> Self {
        Lanes(self.0.map(|x| if x > least { x } else { least }))
    }

    /// The largest magnitude of all lanes.
    #[inline(always)]
    pub(crate) fn largest(self) -> f64 {
        self.0.iter().fold(0.0, |most, x| x.abs().max(most))
    }
}

macro_rules! lane_wise {
    ($($operation:ident $method:ident $symbol:tt;)*) => {$(
        impl<const L: usize> $operation for Lanes<L> {
            type Output = Self;
            #[inline(always)]
            fn $method(self, other: Self) -> Self {
                Lanes(std::array::from_fn(|l| self.0[l] $symbol other.0[l]))
            }
        }
    )*};
}

lane_wise! {
    Add add +;
    Sub sub -;
    Mul mul *;
}

impl<const L: usize> AddAssign for Lanes<L> {
    #[inline(always)]
    fn add_assign(&mut self, other: Self) {
        *self = *self + other;
    }
}

impl<const L: usize> SubAssign for Lanes<L> {
    #[inline(always)]
    fn sub_assign(&mut self, other: Self) {
        *self = *self - other;
    }
}
