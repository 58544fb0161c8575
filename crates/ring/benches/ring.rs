//! Products, quotients, gcds and derivations of real elements, each with its result asserted.

use divan::Bencher;
use linform_ring::{Monomial, Polynomial, PowerMethod, ProductMethod, Ring, Symbols};
use linform_scalar::{Integer, PrimeField, Rational, SplitMix, Unlimited};

fn main() {
    divan::main();
}

/// The ring of the Tracy–Widom laws (Tracy & Widom 1994): `q″ = t q + 2 q³`.
fn tracy_widom() -> Ring {
    let generators = vec!["q".to_string(), "q'".to_string()];
    let symbols = Symbols::new(generators, Some("t".into()), Vec::new());
    let rules = ["q'", "t*q + 2*q^3"].map(|rule| symbols.parse(rule).unwrap());
    Ring::new(symbols, rules.to_vec()).unwrap()
}

/// `V_n = F^(n)/F`, by `V_{n+1} = V_n′ + V_1 V_n`.
fn ratio(ring: &Ring, n: usize) -> Polynomial {
    let first = ring.symbols().parse("q'^2 - t*q^2 - q^4").unwrap();
    (1..n).fold(first.clone(), |v, _| {
        let derivative = ring.derive(&v, &Unlimited).unwrap();
        &derivative + &first.mul(&v, &Unlimited).unwrap()
    })
}

/// A dense polynomial in the variable alone.
fn univariate(symbol: usize, degree: u16, bits: u32, seed: u64) -> Polynomial {
    let mut random = SplitMix::new(seed);
    Polynomial::from_terms((0..=degree).map(|e| {
        let words = (0..bits / 64)
            .map(|_| random.next_word())
            .collect::<Vec<_>>();
        let coefficient = Integer::from_words(random.next_word() & 1 == 1, &words);
        (
            Monomial::power(symbol, e).unwrap(),
            Rational::from(coefficient),
        )
    }))
}

/// The value modulo a prime at a fixed point: a checksum that respects products.
fn checksum(p: &Polynomial) -> u64 {
    let field = PrimeField::new((1 << 61) - 1).unwrap();
    let point: Vec<u64> = (5..9).map(|x| field.element(x)).collect();
    p.evaluate_mod(&field, &point).unwrap()
}

fn assert_product(a: &Polynomial, b: &Polynomial, product: &Polynomial) {
    let field = PrimeField::new((1 << 61) - 1).unwrap();
    assert_eq!(checksum(product), field.mul(checksum(a), checksum(b)));
}

fn bench_product(bencher: Bencher<'_, '_>, a: &Polynomial, b: &Polynomial) {
    assert_product(a, b, &a.mul(b, &Unlimited).unwrap());
    bencher.bench_local(|| a.mul(b, &Unlimited).unwrap());
}

#[divan::bench(args = [4, 8, 12, 20])]
fn square_of_v(bencher: Bencher<'_, '_>, n: usize) {
    let v = ratio(&tracy_widom(), n);
    bench_product(bencher, &v, &v);
}

#[divan::bench(args = [ProductMethod::Heap, ProductMethod::Dense, ProductMethod::Kronecker])]
fn square_of_v_8_by(bencher: Bencher<'_, '_>, method: &ProductMethod) {
    let v = ratio(&tracy_widom(), 8);
    assert_product(&v, &v, &v.mul_with(*method, &v, &Unlimited).unwrap());
    bencher.bench_local(|| v.mul_with(*method, &v, &Unlimited).unwrap());
}

#[divan::bench(args = [ProductMethod::Heap, ProductMethod::Dense, ProductMethod::Kronecker])]
fn v_20_times_v_12_by(bencher: Bencher<'_, '_>, method: &ProductMethod) {
    let (v, w) = (ratio(&tracy_widom(), 20), ratio(&tracy_widom(), 12));
    assert_product(&v, &w, &v.mul_with(*method, &w, &Unlimited).unwrap());
    bencher.bench_local(|| v.mul_with(*method, &w, &Unlimited).unwrap());
}

#[divan::bench(args = [ProductMethod::Heap, ProductMethod::Dense, ProductMethod::Kronecker])]
fn short_univariate_product_by(bencher: Bencher<'_, '_>, method: &ProductMethod) {
    let (a, b) = (univariate(0, 8, 64, 1), univariate(0, 8, 64, 2));
    assert_product(&a, &b, &a.mul_with(*method, &b, &Unlimited).unwrap());
    bencher.bench_local(|| a.mul_with(*method, &b, &Unlimited).unwrap());
}

/// What there is to do besides the arithmetic.
#[divan::bench(args = [1, 3])]
fn tiny_univariate_product(bencher: Bencher<'_, '_>, degree: u16) {
    let p = |start: i64| {
        Polynomial::from_terms((0..=degree).map(|e| {
            (
                Monomial::power(0, e).unwrap(),
                Rational::from(start + i64::from(e)),
            )
        }))
    };
    bench_product(bencher, &p(3), &p(-9));
}

/// Degree and bits of the coefficients.
#[divan::bench(args = [(8, 64), (20, 128), (50, 320), (100, 640), (1000, 640)])]
fn univariate_product(bencher: Bencher<'_, '_>, (degree, bits): (u16, u32)) {
    bench_product(
        bencher,
        &univariate(0, degree, bits, 1),
        &univariate(0, degree, bits, 2),
    );
}

#[divan::bench(args = [(8, 64), (20, 128), (50, 320), (100, 640)])]
fn univariate_quotient(bencher: Bencher<'_, '_>, (degree, bits): (u16, u32)) {
    let (a, b) = (
        univariate(0, degree, bits, 1),
        univariate(0, degree, bits, 2),
    );
    let product = a.mul(&b, &Unlimited).unwrap();
    assert_eq!(
        product.div_exact(&b, &Unlimited).unwrap().as_ref(),
        Some(&a)
    );
    bencher.bench_local(|| product.div_exact(&b, &Unlimited).unwrap());
}

#[divan::bench(args = [(8, 64), (20, 128), (50, 320), (100, 640)])]
fn univariate_gcd(bencher: Bencher<'_, '_>, (degree, bits): (u16, u32)) {
    let [a, b, c] = [1, 2, 3].map(|seed| univariate(0, degree, bits, seed));
    let (x, y) = (
        a.mul(&c, &Unlimited).unwrap(),
        b.mul(&c, &Unlimited).unwrap(),
    );
    assert_eq!(x.gcd(&y, &Unlimited).unwrap(), c.primitive_part());
    bencher.bench_local(|| x.gcd(&y, &Unlimited).unwrap());
}

#[divan::bench]
fn quotient_of_v_20_v_12(bencher: Bencher<'_, '_>) {
    let (v, w) = (ratio(&tracy_widom(), 20), ratio(&tracy_widom(), 12));
    let product = v.mul(&w, &Unlimited).unwrap();
    assert_eq!(
        product.div_exact(&w, &Unlimited).unwrap().as_ref(),
        Some(&v)
    );
    bencher.bench_local(|| product.div_exact(&w, &Unlimited).unwrap());
}

#[divan::bench]
fn gcd_of_multiples_of_v_8(bencher: Bencher<'_, '_>) {
    let ring = tracy_widom();
    let v = ratio(&ring, 8);
    let [x, y] = [5, 6].map(|n| ratio(&ring, n).mul(&v, &Unlimited).unwrap());
    assert_eq!(x.gcd(&y, &Unlimited).unwrap(), v.primitive_part());
    bencher.bench_local(|| x.gcd(&y, &Unlimited).unwrap());
}

/// `V_n` has 511 terms for n = 12, 7621 for n = 30 and 60 390 for n = 60.
#[divan::bench(args = [12, 30, 60])]
fn derivation_of_v(bencher: Bencher<'_, '_>, n: usize) {
    let ring = tracy_widom();
    let v = ratio(&ring, n);
    let first = ratio(&ring, 1);
    let derivative = ring.derive(&v, &Unlimited).unwrap();
    assert_eq!(
        &derivative + &first.mul(&v, &Unlimited).unwrap(),
        ratio(&ring, n + 1)
    );
    bencher.bench_local(|| ring.derive(&v, &Unlimited).unwrap());
}

/// The symbols of forty-symbol rings do not fit into one word of a numbering.
#[divan::bench]
fn product_in_forty_symbols(bencher: Bencher<'_, '_>) {
    let p = |offset: u16| {
        Polynomial::from_terms((0..60u16).map(|i| {
            let exponents: Vec<u16> = (0..40).map(|j| (i * (j + offset) + j) % 61 % 4).collect();
            (
                Monomial::from_exponents(&exponents).unwrap(),
                Rational::from(i64::from(i) - 30),
            )
        }))
    };
    let (a, b) = (p(1), p(5));
    let product = a.mul(&b, &Unlimited).unwrap();
    assert_eq!(
        product.div_exact(&a, &Unlimited).unwrap().as_ref(),
        Some(&b)
    );
    bencher.bench_local(|| a.mul(&b, &Unlimited).unwrap());
}

/// One power by one method.
fn bench_power(bencher: Bencher<'_, '_>, method: PowerMethod, base: &Polynomial, exponent: u32) {
    let field = PrimeField::new((1 << 61) - 1).unwrap();
    let power = base.pow_with(method, exponent, &Unlimited).unwrap();
    assert_eq!(checksum(&power), field.pow(checksum(base), exponent.into()));
    bencher.bench_local(|| base.pow_with(method, exponent, &Unlimited).unwrap());
}

const METHODS: [PowerMethod; 2] = [PowerMethod::Recurrence, PowerMethod::Squaring];

#[divan::bench(args = METHODS, consts = [2, 5, 12, 30, 100], sample_count = 3)]
fn power_of_a_dense_base<const TERMS: usize>(bencher: Bencher<'_, '_>, method: &PowerMethod) {
    bench_power(
        bencher,
        *method,
        &univariate(0, TERMS as u16 - 1, 64, 7),
        100,
    );
}

#[divan::bench(args = METHODS, consts = [3, 4, 10, 100, 1000], sample_count = 3)]
fn power_of_a_trinomial<const EXPONENT: u32>(bencher: Bencher<'_, '_>, method: &PowerMethod) {
    bench_power(bencher, *method, &univariate(0, 2, 64, 7), EXPONENT);
}

#[divan::bench(args = METHODS, consts = [5, 20, 80, 300], sample_count = 3)]
fn power_of_a_geometric_sum<const TERMS: u16>(bencher: Bencher<'_, '_>, method: &PowerMethod) {
    let base =
        Polynomial::from_terms((0..TERMS).map(|e| (Monomial::power(0, e).unwrap(), Rational::ONE)));
    bench_power(bencher, *method, &base, 100);
}

#[divan::bench(args = METHODS, consts = [10, 20, 40], sample_count = 3)]
fn power_of_a_sparse_base<const EXPONENT: u32>(bencher: Bencher<'_, '_>, method: &PowerMethod) {
    let symbols = Symbols::new(vec!["q".into()], Some("t".into()), vec![]);
    let base = symbols.parse("q^70 + q^3*t^50 - t^77").unwrap();
    bench_power(bencher, *method, &base, EXPONENT);
}

#[divan::bench(args = METHODS, consts = [3, 8, 30], sample_count = 3)]
fn power_in_three_symbols<const EXPONENT: u32>(bencher: Bencher<'_, '_>, method: &PowerMethod) {
    let symbols = Symbols::new(vec!["q".into(), "r".into()], Some("t".into()), vec![]);
    let base = symbols.parse("1 + 3*q + 5*r - 7*t").unwrap();
    bench_power(bencher, *method, &base, EXPONENT);
}
