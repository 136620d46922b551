//! Orders of a ranking and the keys they sort by.

use enolattice_grid::Columns;

/// Order of a ranking: best first; ties by cell, ascending; unknown last.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Order {
    /// Expected yield, descending.
    #[default]
    ExpectedYield,
    /// Probability of a hit, descending.
    PHit,
    /// Selectivity, descending.
    Selectivity,
    /// Feasibility, descending.
    Feasibility,
}

impl Order {
    /// All orders, by number.
    pub const ALL: [Order; 4] = [
        Order::ExpectedYield,
        Order::PHit,
        Order::Selectivity,
        Order::Feasibility,
    ];

    /// Number of the order in page tokens and summaries; never renumber.
    pub(crate) fn number(self) -> usize {
        match self {
            Order::ExpectedYield => 0,
            Order::PHit => 1,
            Order::Selectivity => 2,
            Order::Feasibility => 3,
        }
    }

    /// Sort key of the `i`-th cell: 0 is the best score, the largest is unknown.
    pub(crate) fn key(self, columns: &Columns, i: usize) -> u16 {
        match self {
            Order::ExpectedYield => wide(columns.expected_yield[i]),
            Order::PHit => wide(columns.p_hit[i]),
            Order::Selectivity => narrow(columns.selectivity[i]),
            Order::Feasibility => narrow(columns.feasibility[i]),
        }
    }

    /// Keys of a bucket, as a power of two: 64 buckets cover all keys.
    pub(crate) fn bucket_bits(self) -> u32 {
        match self {
            Order::ExpectedYield | Order::PHit => 10,
            Order::Selectivity | Order::Feasibility => 2,
        }
    }
}

/// Turns 0–65534 round and leaves 65535 (unknown) last.
fn wide(code: u16) -> u16 {
    65534u16.checked_sub(code).unwrap_or(u16::MAX)
}

/// Turns 0–254 round and leaves 255 (unknown) last.
fn narrow(code: u8) -> u16 {
    u16::from(254u8.checked_sub(code).unwrap_or(u8::MAX))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn best_is_first_and_unknown_last() {
        assert_eq!([65534, 1, 0, 65535].map(wide), [0, 65533, 65534, 65535]);
        assert_eq!([254, 1, 0, 255].map(narrow), [0, 253, 254, 255]);
    }

    #[test]
    fn every_key_has_one_of_64_buckets() {
        for order in Order::ALL {
            let unknown = match order {
                Order::ExpectedYield | Order::PHit => wide(u16::MAX),
                Order::Selectivity | Order::Feasibility => narrow(u8::MAX),
            };
            assert_eq!(unknown >> order.bucket_bits(), 63);
        }
    }
}
