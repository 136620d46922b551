//! Random numbers that are the same on every machine.

/// Step of the generator's state.
const STEP: u64 = 0x9e37_79b9_7f4a_7c15;

/// splitmix64 (Steele, Lea, Flood 2014, doi:10.1145/2660193.2660195).
#[derive(Clone, Debug)]
pub(crate) struct Random {
    state: u64,
}

impl Random {
    pub(crate) fn new(seed: u64) -> Random {
        Random { state: seed }
    }

    /// An independent sequence of its own for each number.
    pub(crate) fn stream(seed: u64, number: u64) -> Random {
        let mut first = Random::new(seed);
        Random::new(first.next() ^ Random::new(number).next())
    }

    pub(crate) fn next(&mut self) -> u64 {
        self.state = self.state.wrapping_add(STEP);
        finalised(self.state)
    }

    /// A number below `bound`, which is at least 1; by the upper half of a product, whose bias is
    /// below 2⁻³² for the short lists of a plate.
    pub(crate) fn below(&mut self, bound: usize) -> usize {
        ((u128::from(self.next()) * bound as u128) >> 64) as usize
    }

    /// Fisher–Yates.
    pub(crate) fn shuffle<T>(&mut self, list: &mut [T]) {
        for last in (1..list.len()).rev() {
            list.swap(last, self.below(last + 1));
        }
    }
}

/// Scatters numbers: a hash of a number for each seed.
pub fn scattered(seed: u64, number: u64) -> u64 {
    finalised(number.wrapping_add(1).wrapping_mul(STEP) ^ seed)
}

/// The generator's finaliser.
fn finalised(mut z: u64) -> u64 {
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    z ^ (z >> 31)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn first_numbers_are_those_of_the_published_generator() {
        // the sequence of seed 1234567 that implementations of splitmix64 are checked with (from memory)
        let mut random = Random::new(1_234_567);
        let first = [0; 5].map(|_: u64| random.next());
        let published = [
            6_457_827_717_110_365_317,
            3_203_168_211_198_807_973,
            9_817_491_932_198_370_423,
            4_593_380_528_125_082_431,
            16_408_922_859_458_223_821,
        ];
        assert_eq!(first, published);
    }

    #[test]
    fn a_shuffle_is_a_permutation_and_every_place_is_reached() {
        let mut random = Random::new(3);
        let mut seen = [[0u32; 5]; 5];
        for _ in 0..5_000 {
            let mut list = [0, 1, 2, 3, 4];
            random.shuffle(&mut list);
            for (place, value) in list.into_iter().enumerate() {
                seen[value][place] += 1;
            }
        }
        // binomial with n = 5000 and p = 1/5: mean 1000, σ 28
        assert!(seen.iter().flatten().all(|n| n.abs_diff(1_000) < 5 * 28));
    }
}
