//! The gcd over a prime field, by evaluation and interpolation.

use crate::gcd::univariate::{self, Univariate};
use linform_scalar::{Control, PrimeField, SplitMix, Stop};

/// A polynomial over a prime field: numbers of monomials in a mixed radix, rising, with coefficients other
/// than 0.
pub(super) type Image = Vec<(u64, u64)>;

/// Images that must confirm an interpolated gcd before it is returned. A wrong one is found out by the exact
/// division over ℤ; this only makes that rare.
const CONFIRMATIONS: usize = 2;
/// Points in a row that may be useless before the prime is given up.
const PATIENCE: usize = 20;

/// The monic gcd of two polynomials other than 0 in symbols with the given radices, the last one least
/// significant; nothing if the field has too few good points (W. S. Brown, J. ACM 18 (1971) 478–504).
pub(super) fn gcd(
    field: &PrimeField,
    radices: &[u64],
    a: &Image,
    b: &Image,
    random: &mut SplitMix,
    control: &dyn Control,
) -> Result<Option<Image>, Stop> {
    let Some((&radix, outer)) = radices.split_last() else {
        return Ok(Some(vec![(0, field.one())]));
    };
    control.proceed()?;
    let (a, b) = (columns(a, radix), columns(b, radix));
    let (content_a, content_b) = (content(field, &a), content(field, &b));
    let common = univariate::gcd(field, content_a.clone(), content_b.clone());
    if outer.is_empty() {
        return Ok(Some(joined(&[(0, common)], radix)));
    }
    let (a, b) = (without(field, a, &content_a), without(field, b, &content_b));
    // Every image is scaled to this leading coefficient, a multiple of the true one.
    let lead = |p: &Columns| p.last().map(|(_, c)| c.clone()).unwrap_or_default();
    let lead = univariate::gcd(field, lead(&a), lead(&b));
    let mut found = Interpolant::new();
    let (mut confirmed, mut useless) = (0, 0);
    while confirmed < CONFIRMATIONS {
        control.proceed()?;
        let point = field.element(random.next_word());
        let scale = univariate::value(field, &lead, point);
        let (x, y) = (at(field, &a, point), at(field, &b, point));
        if scale == 0 || found.points.contains(&point) {
            useless += 1;
        } else {
            let Some(mut image) = gcd(field, outer, &x, &y, random, control)? else {
                return Ok(None);
            };
            image
                .iter_mut()
                .for_each(|(_, c)| *c = field.mul(*c, scale));
            let top = |image: &Image| image.last().map(|&(number, _)| number);
            if found.top.is_some() && top(&image) > found.top {
                useless += 1;
            } else {
                if top(&image) != found.top {
                    found = Interpolant::new();
                    found.top = top(&image);
                }
                confirmed = if found.add(field, point, &image) {
                    0
                } else {
                    confirmed + 1
                };
                useless = 0;
            }
        }
        // The scaled gcd has at most the degree of the operands and of the scale together.
        if useless > PATIENCE || found.points.len() > radix as usize + lead.len() + CONFIRMATIONS {
            return Ok(None);
        }
    }
    let result = found.columns(field);
    let extra = content(field, &result);
    let mut result = without(field, result, &extra);
    for (_, column) in &mut result {
        *column = univariate::product(field, column, &common);
    }
    let mut image = joined(&result, radix);
    if let Some(inverse) = image.last().and_then(|&(_, lead)| field.inverse(lead)) {
        image
            .iter_mut()
            .for_each(|(_, c)| *c = field.mul(*c, inverse));
    }
    Ok(Some(image))
}

/// A polynomial in the outer symbols with coefficients in the last one; numbers rise, no coefficient is 0.
type Columns = Vec<(u64, Univariate)>;

fn columns(p: &Image, radix: u64) -> Columns {
    p.chunk_by(|x, y| x.0 / radix == y.0 / radix)
        .map(|part| {
            let mut column = Vec::new();
            for &(number, c) in part {
                column.resize((number % radix) as usize, 0);
                column.push(c);
            }
            (part[0].0 / radix, column)
        })
        .collect()
}

fn joined(columns: &[(u64, Univariate)], radix: u64) -> Image {
    let places = columns.iter().flat_map(|(number, column)| {
        let numbers = number * radix..;
        numbers.zip(column.iter().copied())
    });
    places.filter(|&(_, c)| c != 0).collect()
}

fn content(field: &PrimeField, p: &Columns) -> Univariate {
    let mut common = Vec::new();
    for (_, column) in p {
        common = univariate::gcd(field, column.clone(), common);
        if common.len() == 1 {
            break;
        }
    }
    common
}

fn without(field: &PrimeField, p: Columns, divisor: &[u64]) -> Columns {
    if divisor.len() <= 1 {
        return p;
    }
    let divided = |(number, column)| (number, univariate::quotient(field, column, divisor));
    p.into_iter().map(divided).collect()
}

/// The value at a point of the last symbol.
fn at(field: &PrimeField, p: &Columns, point: u64) -> Image {
    p.iter()
        .map(|(number, column)| (*number, univariate::value(field, column, point)))
        .filter(|&(_, c)| c != 0)
        .collect()
}

/// Newton's interpolation of all coefficients at once, point by point.
struct Interpolant {
    /// The number of the leading monomial of all images.
    top: Option<u64>,
    points: Vec<u64>,
    /// The Newton coefficients for each number, which rise; one for each point.
    rows: Vec<(u64, Vec<u64>)>,
}

impl Interpolant {
    fn new() -> Interpolant {
        Interpolant {
            top: None,
            points: Vec::new(),
            rows: Vec::new(),
        }
    }

    /// Takes in the image at one more point; whether it was not what the others predict.
    fn add(&mut self, field: &PrimeField, point: u64, image: &Image) -> bool {
        for &(number, _) in image {
            if let Err(place) = self.rows.binary_search_by_key(&number, |row| row.0) {
                self.rows
                    .insert(place, (number, vec![0; self.points.len()]));
            }
        }
        // ∏ (point − earlier points), by which the new coefficient is divided.
        let product = self.points.iter().fold(field.one(), |product, &earlier| {
            field.mul(product, field.sub(point, earlier))
        });
        let inverse = field.inverse(product).expect("the points differ");
        let mut changed = false;
        let mut values = image.iter().peekable();
        for (number, row) in &mut self.rows {
            let value = values
                .next_if(|value| value.0 == *number)
                .map_or(0, |v| v.1);
            let known = row
                .iter()
                .zip(&self.points)
                .rev()
                .fold(0, |sum, (&c, &earlier)| {
                    field.add(field.mul(sum, field.sub(point, earlier)), c)
                });
            let coefficient = field.mul(field.sub(value, known), inverse);
            changed |= coefficient != 0;
            row.push(coefficient);
        }
        self.points.push(point);
        changed
    }

    /// The interpolating polynomials, by powers of the symbol.
    fn columns(self, field: &PrimeField) -> Columns {
        let mut result = Vec::with_capacity(self.rows.len());
        for (number, row) in self.rows {
            let mut column: Univariate = Vec::new();
            for (&c, &point) in row.iter().zip(&self.points).rev() {
                // column ← column·(x − point) + c
                column.push(0);
                for i in (0..column.len()).rev() {
                    let lower = if i > 0 { column[i - 1] } else { c };
                    column[i] = field.sub_product(lower, column[i], point);
                }
                while column.last() == Some(&0) {
                    column.pop();
                }
            }
            if !column.is_empty() {
                result.push((number, column));
            }
        }
        result
    }
}
