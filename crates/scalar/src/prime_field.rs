//! Prime fields of word size.

/// Arithmetic modulo an odd prime `p < 2^62`, with elements in Montgomery form (P. L. Montgomery, Math.
/// Comp. 44 (1985) 519–521).
///
/// Elements are plain words below `p`; [`PrimeField::element`] and [`PrimeField::value`] convert. The field
/// is passed first, elements carry no pointer to it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PrimeField {
    prime: u64,
    /// `−p^{-1} mod 2^64`.
    negative_inverse: u64,
    /// `2^128 mod p`: multiplying by it enters Montgomery form.
    radix_squared: u64,
    /// `2^64 mod p`: the element 1.
    one: u64,
}

impl PrimeField {
    /// The field with `prime` elements, or nothing unless `prime` is an odd prime below `2^62`.
    pub fn new(prime: u64) -> Option<PrimeField> {
        if !(3..1 << 62).contains(&prime) || !is_prime(prime) {
            return None;
        }
        // Newton's iteration doubles the number of correct bits; p·p ≡ 1 (mod 8) starts it with three.
        let mut inverse = prime;
        for _ in 0..5 {
            inverse = inverse.wrapping_mul(2u64.wrapping_sub(prime.wrapping_mul(inverse)));
        }
        let one = ((1u128 << 64) % u128::from(prime)) as u64;
        let radix_squared = ((u128::from(one) * u128::from(one)) % u128::from(prime)) as u64;
        Some(PrimeField {
            prime,
            negative_inverse: inverse.wrapping_neg(),
            radix_squared,
            one,
        })
    }

    /// The number of elements.
    pub fn prime(&self) -> u64 {
        self.prime
    }

    /// The element 1.
    pub fn one(&self) -> u64 {
        self.one
    }

    /// The element of a word.
    pub fn element(&self, value: u64) -> u64 {
        self.mul(value % self.prime, self.radix_squared)
    }

    /// The residue in `0..p` that an element stands for.
    pub fn value(&self, element: u64) -> u64 {
        self.reduce(u128::from(element))
    }

    /// `wide · 2^{-64}` modulo `p`, for `wide < p · 2^64`.
    #[inline(always)]
    fn reduce(&self, wide: u128) -> u64 {
        let factor = (wide as u64).wrapping_mul(self.negative_inverse);
        let sum = ((wide + u128::from(factor) * u128::from(self.prime)) >> 64) as u64;
        // Without a branch: the wrapped difference is large exactly when no correction is due.
        sum.min(sum.wrapping_sub(self.prime))
    }

    /// The sum.
    #[inline(always)]
    pub fn add(&self, a: u64, b: u64) -> u64 {
        let sum = a + b;
        sum.min(sum.wrapping_sub(self.prime))
    }

    /// The difference.
    #[inline(always)]
    pub fn sub(&self, a: u64, b: u64) -> u64 {
        let difference = a.wrapping_sub(b);
        difference.min(difference.wrapping_add(self.prime))
    }

    /// The opposite.
    #[inline(always)]
    pub fn neg(&self, a: u64) -> u64 {
        self.sub(0, a)
    }

    /// The product.
    #[inline(always)]
    pub fn mul(&self, a: u64, b: u64) -> u64 {
        self.reduce(u128::from(a) * u128::from(b))
    }

    /// `a − b·c`.
    #[inline(always)]
    pub fn sub_product(&self, a: u64, b: u64, c: u64) -> u64 {
        self.sub(a, self.mul(b, c))
    }

    /// `a·b − c·d`, with one reduction.
    #[inline(always)]
    pub fn cross(&self, a: u64, b: u64, c: u64, d: u64) -> u64 {
        // Below 2p² < p·2^63, because p < 2^62.
        let wide = u128::from(a) * u128::from(b) + u128::from(c) * u128::from(self.prime - d);
        self.reduce(wide)
    }

    /// The power.
    pub fn pow(&self, mut base: u64, mut exponent: u64) -> u64 {
        let mut result = self.one;
        while exponent > 0 {
            if exponent & 1 == 1 {
                result = self.mul(result, base);
            }
            base = self.mul(base, base);
            exponent >>= 1;
        }
        result
    }

    /// The inverse, or nothing for 0.
    pub fn inverse(&self, a: u64) -> Option<u64> {
        // Fermat: 60 squarings cost about what the extended Euclidean algorithm costs, without its divisions.
        if a == 0 {
            None
        } else {
            Some(self.pow(a, self.prime - 2))
        }
    }

    /// Replaces all elements by their inverses; nothing changes and the answer is `false` if one of them is 0.
    ///
    /// # Complexity
    ///
    /// One inversion and three products for each element (P. L. Montgomery, Math. Comp. 48 (1987) 243–264).
    pub fn invert_all(&self, elements: &mut [u64]) -> bool {
        let mut product = self.one;
        let before: Vec<u64> = elements
            .iter()
            .map(|&element| {
                let before = product;
                product = self.mul(product, element);
                before
            })
            .collect();
        let Some(mut inverse) = self.inverse(product) else {
            return false;
        };
        for (element, before) in elements.iter_mut().zip(before).rev() {
            let own = self.mul(inverse, before);
            inverse = self.mul(inverse, *element);
            *element = own;
        }
        true
    }

    /// The element of an integer.
    pub fn element_of(&self, value: &crate::Integer) -> u64 {
        self.element(value.residue(self.prime))
    }
}

/// The primes below `bound` in falling order, each of them usable for a [`PrimeField`].
pub fn primes_below(bound: u64) -> impl Iterator<Item = u64> {
    (3..bound.min(1 << 62))
        .rev()
        .filter(|candidate| candidate & 1 == 1 && is_prime(*candidate))
}

/// Deterministic for all words: the first twelve primes as bases suffice below 3.3·10^24 (J. Sorenson &
/// J. Webster, Math. Comp. 86 (2017) 985–1003).
fn is_prime(n: u64) -> bool {
    const BASES: [u64; 12] = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37];
    if n < 2 {
        return false;
    }
    for base in BASES {
        if n.is_multiple_of(base) {
            return n == base;
        }
    }
    let mul = |a: u64, b: u64| (u128::from(a) * u128::from(b) % u128::from(n)) as u64;
    let power = |mut base: u64, mut exponent: u64| {
        let mut result = 1;
        while exponent > 0 {
            if exponent & 1 == 1 {
                result = mul(result, base);
            }
            base = mul(base, base);
            exponent >>= 1;
        }
        result
    };
    let twos = (n - 1).trailing_zeros();
    BASES.iter().all(|&base| {
        let mut x = power(base, (n - 1) >> twos);
        if x == 1 || x == n - 1 {
            return true;
        }
        (1..twos).any(|_| {
            x = mul(x, x);
            x == n - 1
        })
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn primes_agree_with_a_sieve() {
        let bound = 5000usize;
        let mut composite = vec![false; bound];
        for i in 2..bound {
            if !composite[i] {
                (2 * i..bound).step_by(i).for_each(|j| composite[j] = true);
            }
        }
        let sieve: Vec<u64> = (3..bound as u64)
            .rev()
            .filter(|&i| !composite[i as usize])
            .collect();
        assert_eq!(primes_below(bound as u64).collect::<Vec<_>>(), sieve);
    }

    #[test]
    fn a_composite_number_or_a_long_prime_makes_no_field() {
        assert_eq!(PrimeField::new(561), None);
        assert_eq!(PrimeField::new(2), None);
        // 2^62 + 135 is prime and too long; 2^61 − 1 is the Mersenne prime.
        assert_eq!(PrimeField::new((1 << 62) + 135), None);
        assert!(PrimeField::new((1 << 61) - 1).is_some());
    }

    proptest! {
        #[test]
        fn arithmetic_agrees_with_long_division(index in 0usize..40, a: u64, b: u64, c: u64, exponent in 0u64..50) {
            let primes = [3, 5, 7, 101, (1 << 31) - 1, (1 << 61) - 1];
            let p = primes.get(index).copied().unwrap_or_else(|| primes_below(1 << 62).nth(index).unwrap());
            let field = PrimeField::new(p).unwrap();
            let (x, y, z) = (field.element(a), field.element(b), field.element(c));
            let wide = u128::from(p);
            let (a, b, c) = (u128::from(a) % wide, u128::from(b) % wide, u128::from(c) % wide);
            prop_assert_eq!(u128::from(field.value(field.add(x, y))), (a + b) % wide);
            prop_assert_eq!(u128::from(field.value(field.sub(x, y))), (a + wide - b) % wide);
            prop_assert_eq!(u128::from(field.value(field.mul(x, y))), a * b % wide);
            prop_assert_eq!(u128::from(field.value(field.sub_product(x, y, z))), (a + wide - b * c % wide) % wide);
            let crossed = (a * b + (wide - c) * (b + 1)) % wide;
            prop_assert_eq!(u128::from(field.value(field.cross(x, y, z, field.add(y, field.one())))), crossed);
            let mut inverses = [x, y, z];
            if field.invert_all(&mut inverses) {
                prop_assert_eq!(Some(inverses), [x, y, z].map(|e| field.inverse(e).unwrap()).into());
            } else {
                prop_assert!(a * b * c == 0 && inverses == [x, y, z]);
            }
            let power = (0..exponent).fold(1 % wide, |power, _| power * a % wide);
            prop_assert_eq!(u128::from(field.value(field.pow(x, exponent))), power);
            match field.inverse(x) {
                None => prop_assert_eq!(a, 0),
                Some(inverse) => prop_assert_eq!(field.mul(inverse, x), field.one()),
            }
        }
    }
}
