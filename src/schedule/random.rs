//! A small reproducible source of random numbers for the search.

/// SplitMix64: G. L. Steele, D. Lea, C. H. Flood, "Fast splittable pseudorandom number generators", OOPSLA 2014; its
/// constants from memory, checked against the published first output for seed 0.
pub(crate) struct Random {
    state: u64,
}

impl Random {
    /// The source that a seed begins.
    pub fn new(seed: u64) -> Random {
        Random { state: seed }
    }

    fn next(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut mixed = self.state;
        mixed = (mixed ^ (mixed >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        mixed = (mixed ^ (mixed >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        mixed ^ (mixed >> 31)
    }

    /// A whole number from 0 up to, but not with, `count`; 0 if `count` is 0.
    pub fn below(&mut self, count: usize) -> usize {
        // The high half of a product: even to within count / 2^64.
        let product = u128::from(self.next()) * (count as u128);
        (product >> 64) as usize
    }

    /// One of the things, if there are any.
    pub fn one_of<'a, T>(&mut self, things: &'a [T]) -> Option<&'a T> {
        things.get(self.below(things.len()))
    }

    /// True `chances` times in `out_of`.
    pub fn is_so(&mut self, chances: usize, out_of: usize) -> bool {
        self.below(out_of) < chances
    }
}

#[cfg(test)]
mod tests {
    use super::Random;

    #[test]
    fn the_first_number_of_seed_0_is_the_published_one() {
        assert_eq!(Random::new(0).next(), 0xE220_A839_7B1D_CDAF);
    }
}
