//! Sums of products that should be 0.

use linform_ring::Polynomial;
use linform_scalar::{Control, Stop};

/// Is `Σ a·b = 0`? Multiplied out exactly.
pub(crate) fn vanishes(
    products: &[(&Polynomial, &Polynomial)],
    control: &dyn Control,
) -> Result<bool, Stop> {
    Ok(sum_of_products(products, control)?.is_zero())
}

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
