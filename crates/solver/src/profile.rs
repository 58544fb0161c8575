//! Rank, independent rows and independent columns, modulo a prime at a point.

use crate::System;
use crate::plan::Plan;
use crate::random::{prime_field, random_element};
use linform_ring::Polynomial;
use linform_scalar::{Control, PrimeField, SplitMix, Stop};

/// What the system looks like at one point modulo one prime.
///
/// The submatrix on `rows` and `columns` is not singular there, hence not singular at all. The rank itself may
/// be larger than at the point, with a probability of about its degree over `2^62`.
pub(crate) struct Profile {
    pub(crate) field: PrimeField,
    /// The elements put in for the symbols that occur.
    pub(crate) point: Vec<(usize, u64)>,
    /// Independent rows, ascending.
    pub(crate) rows: Vec<usize>,
    /// The leftmost independent columns, ascending.
    pub(crate) columns: Vec<usize>,
    /// A row whose right side contradicts these rows at the point, with those of them that take part.
    pub(crate) contradiction: Option<Contradiction>,
}

/// A dependent row with a right side that does not follow from those it depends on.
pub(crate) struct Contradiction {
    pub(crate) row: usize,
    /// The rows that it depends on, ascending.
    pub(crate) support: Vec<usize>,
    /// Columns that make these rows independent, ascending.
    pub(crate) columns: Vec<usize>,
}

/// Takes the profile; each attempt uses another prime and another point.
///
/// Rows with few terms are preferred, so that the square system is small.
///
/// # Complexity
///
/// One reduction modulo the prime of every coefficient, and `rows · rank · columns` products.
pub(crate) fn profile(
    system: &System,
    attempt: usize,
    control: &dyn Control,
) -> Result<Profile, Stop> {
    let field = prime_field(attempt);
    let mut random = SplitMix::new(0x11F0_u64 ^ attempt as u64);
    let columns = system.columns();
    let (point, values) = values_at_random_point(system, &field, &mut random);
    control.proceed()?;

    let mut order: Vec<usize> = (0..system.rows().len()).collect();
    order.sort_by_key(|&row| (system.rows()[row].terms(), row));
    let mut echelon = Echelon::new(columns + 1);
    let mut rows = Vec::new();
    let mut contradicting = Vec::new();
    let mut work = vec![0; columns + 1];
    for row in order {
        values.fill(row, &mut work);
        match echelon.insert(&field, &mut work) {
            Some(lead) if lead == columns => contradicting.push(row),
            Some(_) => rows.push(row),
            None => {}
        }
        control.proceed()?;
    }
    rows.sort_unstable();
    let mut leads: Vec<usize> = echelon.leads().filter(|&lead| lead < columns).collect();
    leads.sort_unstable();
    let contradiction = if contradicting.is_empty() {
        None
    } else {
        Some(smallest_contradiction(
            system,
            &field,
            &values,
            &rows,
            &leads,
            &contradicting,
            control,
        )?)
    };
    Ok(Profile {
        field,
        point,
        rows,
        columns: leads,
        contradiction,
    })
}

/// The matrix at a point: the values of the entries that are not 0 in the system, row by row.
struct Values {
    starts: Vec<usize>,
    entries: Vec<(usize, u64)>,
}

impl Values {
    /// Writes one row, its right side last.
    fn fill(&self, row: usize, work: &mut [u64]) {
        work.fill(0);
        for &(column, value) in &self.entries[self.starts[row]..self.starts[row + 1]] {
            work[column] = value;
        }
    }
}

fn values_at_random_point(
    system: &System,
    field: &PrimeField,
    random: &mut SplitMix,
) -> (Vec<(usize, u64)>, Values) {
    let mut polynomials: Vec<&Polynomial> = Vec::new();
    let mut places = Vec::new();
    let mut starts = vec![0];
    for row in system.rows() {
        for (column, entry) in &row.entries {
            places.push(*column);
            polynomials.push(entry);
        }
        if !row.right.is_zero() {
            places.push(system.columns());
            polynomials.push(&row.right);
        }
        starts.push(places.len());
    }
    let plan = Plan::new(&polynomials);
    let mut images = plan.images(*field);
    let point: Vec<u64> = plan
        .symbols()
        .iter()
        .map(|_| random_element(random, field))
        .collect();
    for (k, &element) in point.iter().enumerate().rev() {
        images.substitute(k, element);
    }
    let entries = places
        .into_iter()
        .zip(images.values().iter().copied())
        .collect();
    let point = plan.symbols().iter().copied().zip(point).collect();
    (point, Values { starts, entries })
}

/// Row vectors in echelon form, each with leading entry 1.
struct Echelon {
    width: usize,
    /// For every column the row that leads there, as an index into `rows` in units of `width`.
    by_lead: Vec<Option<usize>>,
    rows: Vec<u64>,
}

impl Echelon {
    fn new(width: usize) -> Echelon {
        Echelon {
            width,
            by_lead: vec![None; width],
            rows: Vec::new(),
        }
    }

    fn leads(&self) -> impl Iterator<Item = usize> {
        (0..self.width).filter(|&column| self.by_lead[column].is_some())
    }

    /// Reduces a vector and adds it if something is left. The column where it leads then; nothing if it
    /// depends on those before. A vector that leads in the last column is not added, so that all of them
    /// show.
    fn insert(&mut self, field: &PrimeField, work: &mut [u64]) -> Option<usize> {
        for column in 0..self.width {
            let head = work[column];
            if head == 0 {
                continue;
            }
            let Some(row) = self.by_lead[column] else {
                if column + 1 < self.width {
                    let inverse = field.inverse(head)?;
                    self.by_lead[column] = Some(self.rows.len() / self.width);
                    self.rows
                        .extend(work.iter().map(|&value| field.mul(value, inverse)));
                }
                return Some(column);
            };
            let row = &self.rows[row * self.width..][..self.width];
            for (value, &other) in work[column..].iter_mut().zip(&row[column..]) {
                *value = field.sub_product(*value, head, other);
            }
        }
        None
    }
}

/// Among the contradicting rows the one that depends on the fewest others.
fn smallest_contradiction(
    system: &System,
    field: &PrimeField,
    values: &Values,
    rows: &[usize],
    columns: &[usize],
    contradicting: &[usize],
    control: &dyn Control,
) -> Result<Contradiction, Stop> {
    let rank = rows.len();
    let mut work = vec![0; system.columns() + 1];
    // Row j of the transposed square matrix holds column j; solving it for a dependent row gives its weights.
    let width = 2 * rank;
    let mut matrix = vec![0; rank * width];
    for (i, &row) in rows.iter().enumerate() {
        values.fill(row, &mut work);
        for (j, &column) in columns.iter().enumerate() {
            matrix[j * width + i] = work[column];
        }
    }
    for i in 0..rank {
        matrix[i * width + rank + i] = field.one();
    }
    let regular = crate::modular::eliminate(field, &mut matrix, rank, rank);
    debug_assert!(
        regular.is_some(),
        "the rows and columns were found independent"
    );
    let mut best: Option<((usize, usize), usize, Vec<usize>)> = None;
    for &row in contradicting {
        values.fill(row, &mut work);
        let mut support = Vec::new();
        let mut terms = system.rows()[row].terms();
        for (i, &other) in rows.iter().enumerate() {
            let inverse = &matrix[i * width + rank..][..rank];
            let weight = inverse
                .iter()
                .zip(columns)
                .fold(0, |sum, (&inverse, &column)| {
                    field.add(sum, field.mul(inverse, work[column]))
                });
            if weight != 0 {
                support.push(other);
                terms += system.rows()[other].terms();
            }
        }
        let cost = (support.len(), terms);
        if best.as_ref().is_none_or(|(least, _, _)| cost < *least) {
            best = Some((cost, row, support));
        }
        control.proceed()?;
    }
    let (_, row, support) = best.expect("there is a contradicting row");
    let mut echelon = Echelon::new(system.columns() + 1);
    for &other in &support {
        values.fill(other, &mut work);
        work[system.columns()] = 0;
        echelon.insert(field, &mut work);
    }
    let columns = echelon.leads().collect();
    Ok(Contradiction {
        row,
        support,
        columns,
    })
}
