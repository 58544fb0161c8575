//! The gcd by pseudo-division: slow, but it always ends.

use crate::polynomial::Term;
use crate::{Monomial, Polynomial};
use linform_scalar::{Control, Stop};

/// The subresultant remainder sequence in one symbol, its contents by recursion in the others (W. S. Brown &
/// J. F. Traub, J. ACM 18 (1971) 505–514).
pub(super) fn gcd(
    a: &Polynomial,
    b: &Polynomial,
    control: &dyn Control,
) -> Result<Polynomial, Stop> {
    let (da, db) = (a.degrees(), b.degrees());
    let symbol = (0..da.width().max(db.width()))
        .filter(|&s| da.exponent(s) > 0 || db.exponent(s) > 0)
        .min_by_key(|&s| da.exponent(s).min(db.exponent(s)))
        .unwrap_or(0);
    let (content_a, content_b) = (
        content_in(a, symbol, control)?,
        content_in(b, symbol, control)?,
    );
    let common = content_a.gcd(&content_b, control)?;
    if da.exponent(symbol) == 0 || db.exponent(symbol) == 0 {
        return Ok(common);
    }
    let mut f = exact(a, &content_a, control)?;
    let mut g = exact(b, &content_b, control)?;
    if f.degree_in(symbol) < g.degree_in(symbol) {
        std::mem::swap(&mut f, &mut g);
    }
    let degree = |p: &Polynomial| p.degree_in(symbol).unwrap_or(0);
    let (mut lead, mut height) = (Polynomial::one(), Polynomial::one());
    loop {
        control.proceed()?;
        let delta = u32::from(degree(&f) - degree(&g));
        let remainder = pseudo_remainder(&f, &g, symbol, control)?;
        if remainder.is_zero() {
            break;
        }
        if degree(&remainder) == 0 {
            return Ok(common);
        }
        let divisor = lead.mul(&height.pow(delta, control)?, control)?;
        f = std::mem::replace(&mut g, exact(&remainder, &divisor, control)?);
        lead = coefficient_in(&f, symbol, degree(&f));
        if delta > 0 {
            let power = lead.pow(delta, control)?;
            height = exact(&power, &height.pow(delta - 1, control)?, control)?;
        }
    }
    let content = content_in(&g, symbol, control)?;
    let primitive = exact(&g, &content, control)?.primitive_part();
    Ok(primitive.mul(&common, control)?.primitive_part())
}

/// A quotient that the theory says is exact.
fn exact(a: &Polynomial, b: &Polynomial, control: &dyn Control) -> Result<Polynomial, Stop> {
    Ok(a.div_exact(b, control)?
        .expect("a subresultant or content divides exactly"))
}

/// The coefficient of a power of one symbol.
fn coefficient_in(p: &Polynomial, symbol: usize, exponent: u16) -> Polynomial {
    let power = Monomial::power(symbol, exponent).unwrap_or_default();
    let terms: Vec<Term> = p
        .terms()
        .iter()
        .filter(|(m, _)| m.exponent(symbol) == exponent)
        .filter_map(|(m, c)| Some((m.div(&power)?, c.clone())))
        .collect();
    Polynomial::integral(terms)
}

/// The gcd of the coefficients with respect to one symbol, the numbers included.
fn content_in(p: &Polynomial, symbol: usize, control: &dyn Control) -> Result<Polynomial, Stop> {
    let mut coefficients: Vec<Polynomial> = (0..=p.degree_in(symbol).unwrap_or(0))
        .map(|exponent| coefficient_in(p, symbol, exponent))
        .filter(|c| !c.is_zero())
        .collect();
    coefficients.sort_by_key(Polynomial::len);
    let mut common = Polynomial::zero();
    for coefficient in &coefficients {
        common = common.gcd(coefficient, control)?;
        if common.is_one() {
            break;
        }
    }
    Ok(common.scale(&p.content().into()))
}

/// The remainder of `lc(g)^(deg f − deg g + 1)·f` by `g`, as polynomials in one symbol.
fn pseudo_remainder(
    f: &Polynomial,
    g: &Polynomial,
    symbol: usize,
    control: &dyn Control,
) -> Result<Polynomial, Stop> {
    let degree_g = g.degree_in(symbol).unwrap_or(0);
    let lead = coefficient_in(g, symbol, degree_g);
    let mut remainder = f.clone();
    let mut missing = u32::from(f.degree_in(symbol).unwrap_or(0) - degree_g) + 1;
    while let Some(degree) = remainder.degree_in(symbol)
        && degree >= degree_g
    {
        control.proceed()?;
        let shift = Monomial::power(symbol, degree - degree_g).unwrap_or_default();
        let top = coefficient_in(&remainder, symbol, degree)
            .mul(&Polynomial::monomial(shift, 1.into()), control)?;
        remainder = &remainder.mul(&lead, control)? - &top.mul(g, control)?;
        missing -= 1;
    }
    remainder.mul(&lead.pow(missing, control)?, control)
}
