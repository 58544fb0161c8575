//! The gcd by images modulo primes.

mod brown;

use crate::layout::Layout;
use crate::polynomial::{Term, collect_terms};
use crate::{Monomial, Polynomial};
use brown::Image;
use linform_scalar::{
    ChineseRemainder, Control, Integer, PrimeField, SplitMix, Stop, primes_below,
};
use std::sync::OnceLock;

/// The fields of the largest primes; the first of them are found once for all, for finding one takes as long as a
/// small gcd.
pub(super) fn fields() -> impl Iterator<Item = PrimeField> {
    static FIRST: OnceLock<Vec<PrimeField>> = OnceLock::new();
    let found = || {
        primes_below(1 << 62)
            .filter_map(PrimeField::new)
            .take(24)
            .collect()
    };
    let first: &[PrimeField] = FIRST.get_or_init(found);
    let bound = first.last().map_or(1 << 62, PrimeField::prime);
    let others = primes_below(bound).filter_map(PrimeField::new);
    first.iter().copied().chain(others)
}

/// Primes whose images may be useless before the attempt is given up.
const PATIENCE: usize = 8;

/// The gcd of two primitive polynomials, or nothing if their box has no numbering.
///
/// The images of the gcd modulo primes are put together by Chinese remaindering until they stand still; then the
/// candidate is divided into both. A common divisor whose leading monomial is that of an image is the gcd: the
/// image's leading monomial is never lower than the gcd's, as long as the prime divides no leading coefficient.
/// "Leading" refers to the order of the layout.
pub(super) fn gcd(
    a: &Polynomial,
    b: &Polynomial,
    control: &dyn Control,
) -> Result<Option<Polynomial>, Stop> {
    let top = a.degrees().lcm(&b.degrees());
    // The first symbol is the only one without points: let it be one of high degree.
    let first = (0..top.width())
        .max_by_key(|&s| top.exponent(s))
        .unwrap_or(0);
    let Some(layout) = Layout::led_by(first, &top) else {
        return Ok(None);
    };
    let leading = |p: &Polynomial| {
        p.terms()
            .iter()
            .max_by_key(|(m, _)| layout.number(m))
            .map(|(_, c)| c.clone())
    };
    let (Some(lead_a), Some(lead_b)) = (leading(a), leading(b)) else {
        return Ok(None);
    };
    let lead = lead_a.gcd(&lead_b);
    let radices = layout.radices();
    let mut random = SplitMix::new(1);
    let mut found = Images::default();
    let (mut previous, mut useless) = (None, 0);
    for field in fields() {
        control.proceed()?;
        if useless > PATIENCE {
            break;
        }
        let prime = field.prime();
        useless += 1;
        if lead_a.residue(prime) == 0 || lead_b.residue(prime) == 0 {
            continue;
        }
        let image_of = |p: &Polynomial| image(&field, &layout, p);
        let (x, y) = (image_of(a), image_of(b));
        let Some(mut image) = brown::gcd(&field, &radices, &x, &y, &mut random, control)? else {
            continue;
        };
        let scale = field.element_of(&lead);
        for (_, c) in &mut image {
            *c = field.value(field.mul(*c, scale));
        }
        if !found.add(field, image) {
            continue;
        }
        useless = 0;
        let candidate = found.candidate(&layout);
        if previous.as_ref() == Some(&candidate) {
            let divides = |p: &Polynomial| p.div_exact(&candidate, control);
            if divides(a)?.is_some() && divides(b)?.is_some() {
                return Ok(Some(candidate));
            }
            useless += 1;
        }
        previous = Some(candidate);
    }
    Ok(None)
}

fn image(field: &PrimeField, layout: &Layout, p: &Polynomial) -> Image {
    let residue = |(m, c): &Term| (layout.number(m), field.element_of(c));
    let terms = p.terms().iter().map(residue);
    let mut image: Image = terms.filter(|&(_, c)| c != 0).collect();
    image.sort_unstable();
    image
}

/// Images with one leading monomial, put together.
#[derive(Default)]
struct Images {
    /// What was put together, to begin again when a monomial first appears.
    images: Vec<(PrimeField, Image)>,
    support: Vec<u64>,
    lifted: Option<ChineseRemainder>,
}

impl Images {
    /// Takes in one more image; not if it is known to be of a multiple of the gcd.
    fn add(&mut self, field: PrimeField, image: Image) -> bool {
        let top = |image: &Image| image.last().map(|&(number, _)| number);
        if let Some((_, first)) = self.images.first() {
            if top(&image) > top(first) {
                return false;
            }
            if top(&image) < top(first) {
                *self = Images::default();
            }
        }
        let before = self.support.len();
        self.support.extend(image.iter().map(|&(number, _)| number));
        self.support.sort_unstable();
        self.support.dedup();
        self.images.push((field, image));
        let count = self.images.len();
        let (mut lifted, start) = match self.lifted.take() {
            Some(lifted) if before == self.support.len() => (lifted, count - 1),
            _ => (ChineseRemainder::new(self.support.len()), 0),
        };
        for (field, image) in &self.images[start..] {
            let mut terms = image.iter().peekable();
            let residues: Vec<u64> = self
                .support
                .iter()
                .map(|number| {
                    terms
                        .next_if(|term| term.0 == *number)
                        .map_or(0, |term| term.1)
                })
                .collect();
            lifted.add(field, &residues);
        }
        self.lifted = Some(lifted);
        true
    }

    fn candidate(&self, layout: &Layout) -> Polynomial {
        let values = self.lifted.as_ref().map(ChineseRemainder::balanced);
        let named =
            |(&number, c): (&u64, Integer)| -> (Monomial, Integer) { (layout.monomial(number), c) };
        let terms = self
            .support
            .iter()
            .zip(values.unwrap_or_default())
            .map(named);
        let terms = terms.filter(|(_, c)| !c.is_zero()).collect();
        Polynomial::integral(collect_terms(terms)).primitive_part()
    }
}
