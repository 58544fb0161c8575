//! Sums of products that should be 0.

use linform_ring::{Monomial, Polynomial};
use linform_scalar::{Control, Integer, Stop};

/// `Σ a·b`, multiplied out exactly.
pub(crate) fn sum_of_products(
    products: &[(&Polynomial, &Polynomial)],
    control: &dyn Control,
) -> Result<Polynomial, Stop> {
    let mut sum = Polynomial::zero();
    for (a, b) in products {
        control.proceed()?;
        if !a.is_zero() && !b.is_zero() {
            sum = &sum + &a.mul(b, control)?;
        }
    }
    Ok(sum)
}

/// The largest box of exponents that is kept; a few megabytes.
const MOST_CELLS: usize = 1 << 17;

/// A vector of polynomials that is multiplied by many sparse rows of polynomials.
///
/// The products are multiplied out term by term and collected in an array with a cell for every monomial
/// inside a box; a box too large for that is left to the arithmetic of polynomials.
pub(crate) struct Vector<'a> {
    polynomials: &'a [Polynomial],
    cells: Option<Cells<'a>>,
}

struct Cells<'a> {
    /// Every symbol of the box with the distance of the cells of its powers.
    strides: Vec<(usize, usize)>,
    /// The place of every term of every polynomial.
    terms: Vec<Vec<(usize, &'a Integer)>>,
    sums: Vec<Sum>,
    /// The cells that are not 0, and some that are.
    touched: Vec<usize>,
}

/// The sum of both parts. Most products fit two words, and these are added without allocation.
#[derive(Clone, Default)]
struct Sum {
    short: i128,
    long: Integer,
}

impl Sum {
    fn add_product(&mut self, a: &Integer, b: &Integer) {
        let (Some(x), Some(y)) = (a.to_i64(), b.to_i64()) else {
            self.long.add_product(a, b);
            return;
        };
        let product = i128::from(x) * i128::from(y);
        match self.short.checked_add(product) {
            Some(sum) => self.short = sum,
            None => {
                self.long += Integer::from(self.short);
                self.short = product;
            }
        }
    }

    fn is_zero(&self) -> bool {
        if self.long.is_zero() {
            self.short == 0
        } else {
            (&self.long + &Integer::from(self.short)).is_zero()
        }
    }
}

impl<'a> Vector<'a> {
    /// The vector, for rows whose entries have at most these degrees. Its polynomials must be integral.
    pub(crate) fn new(polynomials: &'a [Polynomial], row_degrees: &Monomial) -> Vector<'a> {
        debug_assert!(polynomials.iter().all(|p| p.denominator().is_one()));
        Vector {
            polynomials,
            cells: Cells::new(polynomials, row_degrees),
        }
    }

    /// Is `Σ entry·polynomial = 0` over the entries of a row, given with the indices of their polynomials?
    pub(crate) fn is_orthogonal_to<'r>(
        &mut self,
        row: impl Iterator<Item = (usize, &'r Polynomial)>,
        control: &dyn Control,
    ) -> Result<bool, Stop> {
        control.proceed()?;
        match &mut self.cells {
            Some(cells) => cells.row_vanishes(row, control),
            None => {
                let products: Vec<(&Polynomial, &Polynomial)> = row
                    .map(|(index, entry)| (entry, &self.polynomials[index]))
                    .collect();
                Ok(sum_of_products(&products, control)?.is_zero())
            }
        }
    }
}

impl<'a> Cells<'a> {
    fn new(polynomials: &'a [Polynomial], row_degrees: &Monomial) -> Option<Cells<'a>> {
        let own = polynomials
            .iter()
            .fold(Monomial::one(), |all, p| all.lcm(&p.degrees()));
        let mut strides = Vec::new();
        let mut size = 1usize;
        for symbol in 0..own.width().max(row_degrees.width()) {
            let degree =
                usize::from(own.exponent(symbol)) + usize::from(row_degrees.exponent(symbol));
            if degree > 0 {
                strides.push((symbol, size));
                size = size.checked_mul(degree + 1)?;
                if size > MOST_CELLS {
                    return None;
                }
            }
        }
        let terms = polynomials
            .iter()
            .map(|p| p.iter().map(|(m, c)| (place(&strides, m), c)).collect())
            .collect();
        Some(Cells {
            strides,
            terms,
            sums: vec![Sum::default(); size],
            touched: Vec::new(),
        })
    }

    fn row_vanishes<'r>(
        &mut self,
        row: impl Iterator<Item = (usize, &'r Polynomial)>,
        control: &dyn Control,
    ) -> Result<bool, Stop> {
        for (index, entry) in row {
            for (monomial, factor) in entry.iter() {
                let start = place(&self.strides, monomial);
                for &(offset, coefficient) in &self.terms[index] {
                    let sum = &mut self.sums[start + offset];
                    if sum.is_zero() {
                        self.touched.push(start + offset);
                    }
                    sum.add_product(factor, coefficient);
                }
                if self.terms[index].len() > 1000 {
                    control.proceed()?;
                }
            }
        }
        let vanishes = self.touched.iter().all(|&cell| self.sums[cell].is_zero());
        for cell in self.touched.drain(..) {
            self.sums[cell] = Sum::default();
        }
        Ok(vanishes)
    }
}

fn place(strides: &[(usize, usize)], monomial: &Monomial) -> usize {
    strides
        .iter()
        .map(|&(symbol, stride)| usize::from(monomial.exponent(symbol)) * stride)
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;
    use linform_ring::Symbols;
    use linform_scalar::Unlimited;

    fn read(texts: &[&str]) -> Vec<Polynomial> {
        let symbols = Symbols::new(vec![], Some("t".into()), vec!["a".into()]);
        texts.iter().map(|s| symbols.parse(s).unwrap()).collect()
    }

    fn orthogonal(vector: &[Polynomial], row: &[Polynomial]) -> (bool, bool) {
        let degrees = row
            .iter()
            .fold(Monomial::one(), |all, p| all.lcm(&p.degrees()));
        let mut boxed = Vector::new(vector, &degrees);
        let mut loose = Vector {
            polynomials: vector,
            cells: None,
        };
        let entries = || row.iter().enumerate();
        let first = boxed.is_orthogonal_to(entries(), &Unlimited).unwrap();
        // The array is clean again for the next row.
        assert_eq!(boxed.is_orthogonal_to(entries(), &Unlimited), Ok(first));
        (
            first,
            loose.is_orthogonal_to(entries(), &Unlimited).unwrap(),
        )
    }

    #[test]
    fn the_array_and_the_polynomials_agree() {
        let vector = read(&["t + a", "t^2*a - 7", "0"]);
        let row = read(&["7 - t^2*a", "t + a", "5*t"]);
        assert_eq!(orthogonal(&vector, &row), (true, true));
        let row = read(&["7 - t^2*a", "t + a + 1", "5*t"]);
        assert_eq!(orthogonal(&vector, &row), (false, false));
        assert_eq!(orthogonal(&[], &[]), (true, true));
    }

    #[test]
    fn sums_beyond_two_words_are_exact() {
        let extreme = [i64::MIN, i64::MAX, i64::MIN + 1].map(Integer::from);
        let huge = Integer::from(3).pow(100);
        let mut sum = Sum::default();
        let mut expected = Integer::ZERO;
        let mut factors: Vec<(&Integer, &Integer)> = Vec::new();
        for a in &extreme {
            factors.extend(extreme.iter().chain([&huge]).map(|b| (a, b)));
        }
        for (a, b) in factors.repeat(4) {
            sum.add_product(a, b);
            expected.add_product(a, b);
            assert_eq!(&sum.long + &Integer::from(sum.short), expected);
            assert_eq!(sum.is_zero(), expected.is_zero());
        }
        sum.add_product(&Integer::from(-1), &expected);
        assert!(sum.is_zero() && !sum.long.is_zero());
    }

    #[test]
    fn boxes_of_any_size_are_decided() {
        let vector = read(&["t^9000", "t^9000*a^9000"]);
        let row = read(&["t*a^9000", "-t"]);
        let degrees = Monomial::from_exponents(&[1, 9000]).unwrap();
        assert!(Cells::new(&vector, &degrees).is_none());
        assert_eq!(orthogonal(&vector, &row), (true, true));
    }
}
