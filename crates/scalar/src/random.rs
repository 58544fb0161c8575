//! A deterministic source of words.

/// The generator SplitMix64 (G. L. Steele, D. Lea & C. H. Flood, OOPSLA 2014): for evaluation points, weights
/// and trial values, which need to be unrelated to the problem but the same in every run.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SplitMix {
    state: u64,
}

impl SplitMix {
    /// The generator with this seed.
    pub fn new(seed: u64) -> SplitMix {
        SplitMix { state: seed }
    }

    /// The next word.
    pub fn next_word(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_are_those_of_the_reference_implementation() {
        // Output of S. Vigna's splitmix64.c for the seed 1234567.
        let mut random = SplitMix::new(1_234_567);
        let words: [u64; 5] = std::array::from_fn(|_| random.next_word());
        assert_eq!(
            words,
            [
                6_457_827_717_110_365_317,
                3_203_168_211_198_807_973,
                9_817_491_932_198_370_423,
                4_593_380_528_125_082_431,
                16_408_922_859_458_223_821,
            ]
        );
    }
}
