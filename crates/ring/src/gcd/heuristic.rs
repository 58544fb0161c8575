//! The gcd by way of one gcd of integers.

use crate::layout::Layout;
use crate::meter::Meter;
use crate::product::kronecker::{pack, unpack};
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Stop};

/// The longest integers whose gcd is taken, in words; beyond, images modulo primes were measured to be faster.
const MOST_WORDS: u64 = 1 << 9;
const ATTEMPTS: u64 = 6;

/// The gcd of two primitive polynomials, or nothing if no attempt succeeded (B. W. Char, K. O. Geddes & G. H.
/// Gonnet, J. Symbolic Comput. 7 (1989) 31–48); every monomial of the gcd divides `bounds`.
///
/// Both are evaluated at `x_n = ξ_n, …, x_1 = ξ_1` with powers of 2 so far apart that the values hold all
/// coefficients as digits; the gcd of the values is read as a polynomial `c·G` with `G` primitive. If `G` divides
/// both, it is the gcd: otherwise the gcd is `G·h` with `h` of positive degree, and `h(ξ)` divides
/// `c < ξ_n/2`. But a zero of a divisor of `a` is bounded by `1 + |a|`, with `|a|` the largest coefficient, so
/// `|h(ξ)| > ξ/2` as soon as `ξ_n > 2|a| + 2`, `ξ_{n−1} > 2|a(ξ_n)| + 2`, and so on. Slots three bits longer than
/// the coefficients see to that.
pub(super) fn gcd(
    a: &Polynomial,
    b: &Polynomial,
    bounds: &Monomial,
    control: &dyn Control,
) -> Result<Option<Polynomial>, Stop> {
    let top = a.degrees().lcm(&b.degrees());
    let Some(layout) = Layout::new(&top) else {
        return Ok(None);
    };
    let mut bits = a.bits().max(b.bits()) + 8;
    for attempt in 1..=ATTEMPTS {
        if layout.size().saturating_mul(bits) / 64 > MOST_WORDS {
            return Ok(None);
        }
        control.proceed()?;
        let x = pack(&layout, bits, a.terms());
        let y = pack(&layout, bits, b.terms());
        let value = x.gcd(&y);
        let terms = unpack(&layout, bits, &value, &mut Meter::new(control))?;
        let candidate = Polynomial::integral(terms).primitive_part();
        // A wrong candidate mostly betrays itself by its degrees.
        if candidate.degrees().divides(bounds)
            && divides(&candidate, a, control)?
            && divides(&candidate, b, control)?
        {
            return Ok(Some(candidate));
        }
        bits += bits / 3 + 7 * attempt;
    }
    Ok(None)
}

fn divides(divisor: &Polynomial, p: &Polynomial, control: &dyn Control) -> Result<bool, Stop> {
    Ok(divisor.is_one() || p.div_exact(divisor, control)?.is_some())
}
