//! Bounds for the degrees of a gcd, from one point modulo a prime.

use super::univariate::{self, Univariate};
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, PrimeField, SplitMix, Stop};

/// A monomial that every monomial of the gcd divides.
///
/// For each symbol, the others are replaced by random residues. The image of the gcd divides the gcd of the
/// images, and as long as the leading coefficient of `a` or `b` with respect to the symbol does not vanish, it keeps
/// its degree. So a degree 0 here proves that the gcd is free of the symbol.
pub(super) fn degree_bounds(
    a: &Polynomial,
    b: &Polynomial,
    control: &dyn Control,
) -> Result<Monomial, Stop> {
    let smaller = a.degrees().gcd(&b.degrees());
    let width = a.degrees().width().max(b.degrees().width());
    // A bound from any prime is a bound.
    let Some(field) = super::modular::fields().next() else {
        return Ok(smaller);
    };
    let mut random = SplitMix::new(2);
    let point: Vec<u64> = (0..width)
        .map(|_| field.element(random.next_word()))
        .collect();
    let values: [Vec<u64>; 2] = [a, b].map(|p| values_of_terms(&field, p, &point));
    let mut bounds = vec![0u16; width];
    for (symbol, bound) in bounds.iter_mut().enumerate() {
        *bound = smaller.exponent(symbol);
        if *bound == 0 {
            continue;
        }
        control.proceed()?;
        let Some(inverse) = field.inverse(point[symbol]) else {
            continue;
        };
        let images = [(a, &values[0]), (b, &values[1])]
            .map(|(p, values)| image(&field, p, values, symbol, inverse));
        let [Some(x), Some(y)] = images else {
            continue;
        };
        let common = univariate::gcd(&field, x, y);
        *bound = (*bound).min(common.len().saturating_sub(1) as u16);
    }
    Ok(Monomial::from_exponents(&bounds).unwrap_or(smaller))
}

fn values_of_terms(field: &PrimeField, p: &Polynomial, point: &[u64]) -> Vec<u64> {
    p.iter()
        .map(|(monomial, c)| {
            let start = field.element_of(c);
            (0..monomial.width()).fold(start, |value, symbol| match monomial.exponent(symbol) {
                0 => value,
                1 => field.mul(value, point[symbol]),
                e => field.mul(value, field.pow(point[symbol], u64::from(e))),
            })
        })
        .collect()
}

/// The polynomial in one symbol that is left when the others take their values; nothing if its degree drops.
fn image(
    field: &PrimeField,
    p: &Polynomial,
    values: &[u64],
    symbol: usize,
    inverse: u64,
) -> Option<Univariate> {
    let degree = usize::from(p.degree_in(symbol)?);
    let mut image = vec![0; degree + 1];
    for ((monomial, _), &value) in p.iter().zip(values) {
        let exponent = usize::from(monomial.exponent(symbol));
        image[exponent] = field.add(image[exponent], value);
    }
    // The values hold the powers of this symbol's residue: divide them out.
    let mut scale = field.one();
    for entry in &mut image {
        *entry = field.mul(*entry, scale);
        scale = field.mul(scale, inverse);
    }
    (image[degree] != 0).then_some(image)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Symbols;
    use linform_scalar::Unlimited;

    #[test]
    fn bounds_are_the_degrees_of_the_gcd_at_a_general_point() {
        let names = |list: &[&str]| list.iter().map(|s| s.to_string()).collect::<Vec<_>>();
        let symbols = Symbols::new(names(&["x", "y", "z"]), None, vec![]);
        for (a, b, bounds) in [
            ("(x^2 + y)*(x + z)", "(x^2 + y)*(y*x + 1)", [2, 1, 0]),
            ("x*y + 1", "x*y + 2", [0, 0, 0]),
            (
                "(x + y + z)^3*(x - y)",
                "(x + y + z)^2*(x + 2*y)^4",
                [2, 2, 2],
            ),
            ("x + 1", "y + 1", [0, 0, 0]),
        ] {
            let [a, b] = [a, b].map(|text| symbols.parse(text).unwrap());
            let found = degree_bounds(&a, &b, &Unlimited).unwrap();
            assert_eq!(found.exponents(3), bounds);
        }
    }
}
