//! What the methods cost for a square system, estimated in nanoseconds.

use crate::square::Square;

/// The sizes that the estimates depend on.
pub(crate) struct Cost {
    size: u64,
    rights: u64,
    /// Entries that are not 0, right sides included.
    entries: u64,
    /// Words of all coefficients together.
    words: u64,
    /// Bits of the longest coefficient of the matrix.
    bits: u64,
    /// Bits of the longest right side.
    right_bits: u64,
    /// Bits that numbers of the solution have at least, within a few.
    least_solution_bits: u64,
    /// Coefficients of an unknown and of the determinant, if all occur.
    terms: (u64, u64),
}

impl Cost {
    /// Reads the sizes off the system; given are the coefficients that an unknown and the determinant have if all
    /// of them occur.
    pub(crate) fn new(square: &Square<'_>, terms: (u64, u64)) -> Cost {
        let mut words = 0u64;
        // For every row the bits of its part of the matrix and of its right sides, and its number of terms.
        let mut rows = vec![(0, 0, 1u64); square.size];
        for &(i, j, entry) in &square.entries {
            let own = entry.bits();
            words = words.saturating_add((own / 64 + 1).saturating_mul(entry.len() as u64));
            let (left, right, terms) = &mut rows[i];
            if j < square.size {
                *left = own.max(*left);
                *terms += entry.len() as u64;
            } else {
                *right = own.max(*right);
            }
        }
        // A right side is a sum of products of entries and unknowns.
        let least = |&(left, right, terms): &(u64, u64, u64)| {
            right.saturating_sub(left + u64::from(terms.ilog2()) + 1)
        };
        Cost {
            size: square.size as u64,
            rights: square.rights as u64,
            entries: square.entries.len() as u64,
            words,
            bits: rows.iter().map(|row| row.0).max().unwrap_or(0),
            right_bits: rows.iter().map(|row| row.1).max().unwrap_or(0),
            least_solution_bits: rows.iter().map(least).max().unwrap_or(0),
            terms,
        }
    }

    /// About as many primes as the modular method needs at least.
    pub(crate) fn least_primes(&self) -> u64 {
        self.least_solution_bits / 62
    }

    /// The images, Chinese remainders and reconstructions of the modular method with so many primes.
    pub(crate) fn modular(&self, primes: u64) -> u64 {
        let elimination = self.elimination().saturating_add(self.entries * 10);
        let image =
            (self.terms.0.saturating_mul(elimination)).saturating_add(self.words.saturating_mul(3));
        // A reconstruction for every prime: Euclid's algorithm, some 36 divisions for each word.
        let lifting = primes
            .saturating_mul(EUCLID)
            .saturating_add(2000)
            .saturating_add(self.terms.0.saturating_mul(self.size * self.rights));
        let square = primes.saturating_mul(primes);
        square
            .saturating_mul(lifting)
            .saturating_add(primes.saturating_mul(image))
    }

    /// The most primes with which the modular method stays within this cost.
    pub(crate) fn primes_within(&self, nanoseconds: u64) -> u64 {
        let (mut low, mut high) = (0u64, 1u64 << 20);
        while low < high {
            let middle = (low + high).div_ceil(2);
            if self.modular(middle) <= nanoseconds {
                low = middle;
            } else {
                high = middle - 1;
            }
        }
        low
    }

    /// Fraction-free elimination, where a minor of half the size is typical and the products are dense.
    pub(crate) fn fraction_free(&self) -> u64 {
        let bits = (self.size / 2 + 1).saturating_mul(self.bits);
        let words = |bits: u64| (bits / 64 + 1).saturating_mul(self.terms.1 / 2 + 1);
        let (left, right) = (words(bits), words(bits.saturating_add(self.right_bits)));
        let product = |words: u64| {
            words
                .saturating_mul((4 * words.isqrt()).clamp(8, 450))
                .saturating_add(300)
        };
        // Two products and a division.
        let updates =
            |count: u64, words: u64| count.saturating_mul(3 * product(words).min(u64::MAX / 4));
        let matrix = updates(self.size.pow(3) / 3, left);
        matrix.saturating_add(updates(self.size.pow(2) * self.rights, right))
    }

    fn elimination(&self) -> u64 {
        self.size
            .saturating_pow(2)
            .saturating_mul(self.size + 3 * self.rights)
    }
}

/// Nanoseconds, fitted to measurements: all reconstructions up to the `k`-th prime take about `EUCLID·k³`, for the
/// steps of Euclid's algorithm and the work in each are both proportional to `k`.
const EUCLID: u64 = 16;
