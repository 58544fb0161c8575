//! Arithmetic of the coefficients.

use linform_ring::{Polynomial, Ring};
use linform_scalar::{Control, Stop};
use linform_solver::Fraction;

/// A quotient whose denominator is known not to be 0.
pub(super) fn quotient(
    numerator: Polynomial,
    denominator: Polynomial,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    Fraction::new(numerator, denominator, control)?.ok_or(Stop::SizeLimit)
}

/// `(N/D)′ = (N′D − ND′)/D²`.
pub(super) fn derive_fraction(
    ring: &Ring,
    value: &Fraction,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    let (n, d) = (value.numerator(), value.denominator());
    let (n1, d1) = (ring.derive(n, control)?, ring.derive(d, control)?);
    let numerator = &n1.mul(d, control)? - &n.mul(&d1, control)?;
    quotient(numerator, d.mul(d, control)?, control)
}

/// `a/b` for `b ≠ 0`.
pub(super) fn divided(a: &Fraction, b: &Fraction, control: &dyn Control) -> Result<Fraction, Stop> {
    let numerator = a.numerator().mul(b.denominator(), control)?;
    quotient(
        numerator,
        a.denominator().mul(b.numerator(), control)?,
        control,
    )
}

/// `a − b`.
pub(super) fn difference(
    a: &Fraction,
    b: &Fraction,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    let left = a.numerator().mul(b.denominator(), control)?;
    let right = b.numerator().mul(a.denominator(), control)?;
    quotient(
        &left - &right,
        a.denominator().mul(b.denominator(), control)?,
        control,
    )
}

/// `Σ cᵢ tⁱ` with coefficients free of `t`.
pub(super) fn collect_powers(
    part: &[Fraction],
    symbol: &Polynomial,
    control: &dyn Control,
) -> Result<Fraction, Stop> {
    let mut denominator = Polynomial::one();
    for value in part {
        denominator = denominator.mul(value.denominator(), control)?;
    }
    let mut numerator = Polynomial::zero();
    let mut power = Polynomial::one();
    for value in part {
        let cofactor = denominator
            .div_exact(value.denominator(), control)?
            .unwrap_or_default();
        numerator = &numerator
            + &value
                .numerator()
                .mul(&cofactor, control)?
                .mul(&power, control)?;
        power = power.mul(symbol, control)?;
    }
    quotient(numerator, denominator, control)
}
