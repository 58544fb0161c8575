//! The operators of [`Integer`], for every mixture of values and references.

use crate::integer::{Integer, Repr};
use std::iter::{Product, Sum};
use std::ops::{Add, AddAssign, Mul, MulAssign, Neg, Sub, SubAssign};

impl Neg for &Integer {
    type Output = Integer;
    fn neg(self) -> Integer {
        match &self.0 {
            Repr::Small(v) => Integer::from(-i128::from(*v)),
            Repr::Large(v) => Integer::from_big(rug::Integer::from(-v)),
        }
    }
}

impl Neg for Integer {
    type Output = Integer;
    fn neg(self) -> Integer {
        match self.0 {
            Repr::Small(v) => Integer::from(-i128::from(v)),
            Repr::Large(v) => Integer::from_big(-v),
        }
    }
}

macro_rules! operator {
    ($Op:ident $op:ident $OpAssign:ident $op_assign:ident $symbol:tt $assign:tt $checked:ident) => {
        impl $Op<&Integer> for &Integer {
            type Output = Integer;
            fn $op(self, other: &Integer) -> Integer {
                match (&self.0, &other.0) {
                    (Repr::Small(a), Repr::Small(b)) => match a.$checked(*b) {
                        Some(value) => Integer(Repr::Small(value)),
                        None => Integer::from(i128::from(*a) $symbol i128::from(*b)),
                    },
                    (Repr::Small(a), Repr::Large(b)) => Integer::from_big(rug::Integer::from(*a $symbol b)),
                    (Repr::Large(a), Repr::Small(b)) => Integer::from_big(rug::Integer::from(a $symbol *b)),
                    (Repr::Large(a), Repr::Large(b)) => Integer::from_big(rug::Integer::from(a $symbol b)),
                }
            }
        }
        impl $OpAssign<&Integer> for Integer {
            fn $op_assign(&mut self, other: &Integer) {
                if let Repr::Large(a) = &mut self.0 {
                    match &other.0 {
                        Repr::Small(b) => *a $assign *b,
                        Repr::Large(b) => *a $assign b,
                    }
                    self.normalise();
                } else {
                    *self = &*self $symbol other;
                }
            }
        }
        impl $Op<Integer> for Integer {
            type Output = Integer;
            fn $op(mut self, other: Integer) -> Integer {
                self $assign &other;
                self
            }
        }
        impl $Op<&Integer> for Integer {
            type Output = Integer;
            fn $op(mut self, other: &Integer) -> Integer {
                self $assign other;
                self
            }
        }
        impl $Op<Integer> for &Integer {
            type Output = Integer;
            fn $op(self, other: Integer) -> Integer {
                self $symbol &other
            }
        }
        impl $OpAssign<Integer> for Integer {
            fn $op_assign(&mut self, other: Integer) {
                *self $assign &other;
            }
        }
    };
}
operator!(Add add AddAssign add_assign + += checked_add);
operator!(Sub sub SubAssign sub_assign - -= checked_sub);
operator!(Mul mul MulAssign mul_assign * *= checked_mul);

impl Sum for Integer {
    fn sum<I: Iterator<Item = Integer>>(items: I) -> Integer {
        items.fold(Integer::ZERO, |sum, item| sum + item)
    }
}

impl Product for Integer {
    fn product<I: Iterator<Item = Integer>>(items: I) -> Integer {
        items.fold(Integer::ONE, |product, item| product * item)
    }
}
