//! Rational numbers in lowest terms.

use crate::integer::{Integer, ParseNumberError};
use std::cmp::Ordering;
use std::fmt;
use std::ops::{Add, AddAssign, Mul, MulAssign, Neg, Sub, SubAssign};
use std::str::FromStr;

/// A rational number.
///
/// *Invariant*: numerator and denominator are coprime and the denominator is positive, so equality is
/// structural. Hot loops use integers over a common denominator instead: the gcd of every operation here
/// costs more than the operation.
#[derive(Clone, PartialEq, Eq, Hash)]
pub struct Rational {
    numerator: Integer,
    denominator: Integer,
}

impl Rational {
    /// The rational 0.
    pub const ZERO: Rational = Rational {
        numerator: Integer::ZERO,
        denominator: Integer::ONE,
    };
    /// The rational 1.
    pub const ONE: Rational = Rational {
        numerator: Integer::ONE,
        denominator: Integer::ONE,
    };

    /// `numerator / denominator` in lowest terms, or nothing if the denominator is 0.
    pub fn new(numerator: impl Into<Integer>, denominator: impl Into<Integer>) -> Option<Rational> {
        let (numerator, denominator) = (numerator.into(), denominator.into());
        if denominator.is_zero() {
            return None;
        }
        let mut common = numerator.gcd(&denominator);
        if denominator.is_negative() {
            common = -common;
        }
        Some(Rational {
            numerator: numerator.div_exact(&common),
            denominator: denominator.div_exact(&common),
        })
    }

    /// The numerator, coprime to the denominator.
    pub fn numerator(&self) -> &Integer {
        &self.numerator
    }

    /// The denominator, positive.
    pub fn denominator(&self) -> &Integer {
        &self.denominator
    }

    /// Numerator and denominator.
    pub fn into_parts(self) -> (Integer, Integer) {
        (self.numerator, self.denominator)
    }

    /// Is this 0?
    pub fn is_zero(&self) -> bool {
        self.numerator.is_zero()
    }

    /// Is this 1?
    pub fn is_one(&self) -> bool {
        self.numerator.is_one() && self.denominator.is_one()
    }

    /// Is the denominator 1?
    pub fn is_integer(&self) -> bool {
        self.denominator.is_one()
    }

    /// Is this below 0?
    pub fn is_negative(&self) -> bool {
        self.numerator.is_negative()
    }

    /// The absolute value.
    pub fn abs(&self) -> Rational {
        Rational {
            numerator: self.numerator.abs(),
            denominator: self.denominator.clone(),
        }
    }

    /// The reciprocal, or nothing for 0.
    pub fn recip(&self) -> Option<Rational> {
        Rational::new(self.denominator.clone(), self.numerator.clone())
    }

    /// The quotient, or nothing if `divisor` is 0.
    pub fn checked_div(&self, divisor: &Rational) -> Option<Rational> {
        Rational::new(
            &self.numerator * &divisor.denominator,
            &self.denominator * &divisor.numerator,
        )
    }

    /// The power with an exponent that is not negative.
    pub fn pow(&self, exponent: u32) -> Rational {
        Rational {
            numerator: self.numerator.pow(exponent),
            denominator: self.denominator.pow(exponent),
        }
    }

    /// The largest integer not above this number.
    pub fn floor(&self) -> Integer {
        self.numerator.div_rem_euclid(&self.denominator).0
    }

    /// The residue modulo a prime, or nothing if the prime divides the denominator.
    pub fn residue(&self, field: &crate::PrimeField) -> Option<u64> {
        let denominator = self.denominator.residue(field.prime());
        if denominator == 0 {
            return None;
        }
        let (n, d) = (
            field.element(self.numerator.residue(field.prime())),
            field.element(denominator),
        );
        Some(field.value(field.mul(n, field.inverse(d)?)))
    }
}

impl Default for Rational {
    fn default() -> Self {
        Rational::ZERO
    }
}

impl<T: Into<Integer>> From<T> for Rational {
    fn from(value: T) -> Self {
        Rational {
            numerator: value.into(),
            denominator: Integer::ONE,
        }
    }
}

impl PartialOrd for Rational {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Rational {
    fn cmp(&self, other: &Self) -> Ordering {
        (&self.numerator * &other.denominator).cmp(&(&other.numerator * &self.denominator))
    }
}

/// The sum or difference, reduced by the gcd of the denominators first (D. E. Knuth, *The Art of Computer
/// Programming* 2, section 4.5.1).
fn combine(a: &Rational, b: &Rational, subtract: bool) -> Rational {
    let common = a.denominator.gcd(&b.denominator);
    let (da, db) = (
        a.denominator.div_exact(&common),
        b.denominator.div_exact(&common),
    );
    let (left, right) = (&a.numerator * &db, &b.numerator * &da);
    let numerator = if subtract { left - right } else { left + right };
    let rest = numerator.gcd(&common);
    Rational {
        numerator: numerator.div_exact(&rest),
        denominator: da * b.denominator.div_exact(&rest),
    }
}

impl Neg for &Rational {
    type Output = Rational;
    fn neg(self) -> Rational {
        Rational {
            numerator: -&self.numerator,
            denominator: self.denominator.clone(),
        }
    }
}

impl Neg for Rational {
    type Output = Rational;
    fn neg(self) -> Rational {
        Rational {
            numerator: -self.numerator,
            denominator: self.denominator,
        }
    }
}

impl Add<&Rational> for &Rational {
    type Output = Rational;
    fn add(self, other: &Rational) -> Rational {
        combine(self, other, false)
    }
}

impl Sub<&Rational> for &Rational {
    type Output = Rational;
    fn sub(self, other: &Rational) -> Rational {
        combine(self, other, true)
    }
}

impl Mul<&Rational> for &Rational {
    type Output = Rational;
    fn mul(self, other: &Rational) -> Rational {
        let (g, h) = (
            self.numerator.gcd(&other.denominator),
            other.numerator.gcd(&self.denominator),
        );
        if g.is_zero() || h.is_zero() {
            return Rational::ZERO;
        }
        Rational {
            numerator: self.numerator.div_exact(&g) * other.numerator.div_exact(&h),
            denominator: self.denominator.div_exact(&h) * other.denominator.div_exact(&g),
        }
    }
}

macro_rules! by_value {
    ($Op:ident $op:ident $OpAssign:ident $op_assign:ident $symbol:tt) => {
        impl $Op<Rational> for Rational {
            type Output = Rational;
            fn $op(self, other: Rational) -> Rational {
                &self $symbol &other
            }
        }
        impl $Op<&Rational> for Rational {
            type Output = Rational;
            fn $op(self, other: &Rational) -> Rational {
                &self $symbol other
            }
        }
        impl $OpAssign<&Rational> for Rational {
            fn $op_assign(&mut self, other: &Rational) {
                *self = &*self $symbol other;
            }
        }
    };
}
by_value!(Add add AddAssign add_assign +);
by_value!(Sub sub SubAssign sub_assign -);
by_value!(Mul mul MulAssign mul_assign *);

impl fmt::Display for Rational {
    /// Writes `a/b`, or `a` for an integer.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_integer() {
            write!(f, "{}", self.numerator)
        } else {
            write!(f, "{}/{}", self.numerator, self.denominator)
        }
    }
}

impl fmt::Debug for Rational {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(self, f)
    }
}

impl FromStr for Rational {
    type Err = ParseNumberError;

    /// Reads `a` or `a/b` with decimal integers.
    fn from_str(text: &str) -> Result<Self, ParseNumberError> {
        match text.split_once('/') {
            None => Ok(text.parse::<Integer>()?.into()),
            Some((n, d)) => {
                Rational::new(n.parse::<Integer>()?, d.parse::<Integer>()?).ok_or(ParseNumberError)
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn rationals() -> impl Strategy<Value = Rational> {
        let word = prop_oneof![
            (-6i128..6),
            any::<i64>().prop_map(i128::from),
            any::<i128>()
        ];
        (word.clone(), word).prop_filter_map("zero denominator", |(n, d)| Rational::new(n, d))
    }

    fn reference(a: &Rational) -> rug::Rational {
        rug::Rational::from((a.numerator.to_big(), a.denominator.to_big()))
    }

    proptest! {
        #[test]
        fn operations_agree_with_the_backend(a in rationals(), b in rationals()) {
            let (x, y) = (reference(&a), reference(&b));
            prop_assert_eq!(reference(&(&a + &b)), rug::Rational::from(&x + &y));
            prop_assert_eq!(reference(&(&a - &b)), rug::Rational::from(&x - &y));
            prop_assert_eq!(reference(&(&a * &b)), rug::Rational::from(&x * &y));
            prop_assert_eq!(a.cmp(&b), x.cmp(&y));
            let sum = &a + &b;
            prop_assert!(sum.numerator.gcd(&sum.denominator).is_one() && !sum.denominator.is_negative());
            prop_assert_eq!(a.to_string().parse::<Rational>().unwrap(), a);
        }
    }

    #[test]
    fn a_zero_denominator_is_no_number() {
        assert_eq!(Rational::new(1, 0), None);
        assert!("1/0".parse::<Rational>().is_err());
    }
}
