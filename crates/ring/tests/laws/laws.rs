//! The laws.

use linform_ring::{Polynomial, ProductMethod, Ring};
use linform_scalar::{PrimeField, Rational, SplitMix, Unlimited};

/// A law of three elements of a ring.
pub(crate) type Law = fn(&Ring, &[Polynomial; 3]) -> bool;

pub(crate) const LAWS: &[(&str, Law)] = &[
    ("results are canonical", canonical),
    ("addition is an abelian group", addition),
    (
        "multiplication is commutative, associative and has a one",
        multiplication,
    ),
    ("multiplication distributes over addition", distributivity),
    ("scaling is multiplication by a constant", scaling),
    ("powers are repeated products", powers),
    ("the derivation is additive", derivation_additive),
    ("the derivation obeys Leibniz' rule", derivation_leibniz),
    (
        "constants have derivative 0, the variable 1, generators their own",
        derivation_symbols,
    ),
    (
        "values modulo a prime commute with sum, product and derivation",
        homomorphism,
    ),
    ("dividing a product by a factor gives the other", division),
    ("the gcd divides, and scales with its arguments", gcd),
    ("the parts by leading symbols add up", splitting),
    ("reading inverts writing", text),
    (
        "homogeneous parts stay homogeneous under product and derivation",
        gradings,
    ),
];

fn mul(a: &Polynomial, b: &Polynomial) -> Polynomial {
    a.mul(b, &Unlimited).unwrap()
}

fn canonical(ring: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    let derivative = ring.derive(a, &Unlimited).unwrap();
    let results = [
        a + b,
        a - b,
        -a,
        mul(a, b),
        derivative,
        a.numerator(),
        a.primitive_part(),
    ];
    results.iter().all(Polynomial::is_canonical)
}

fn addition(_: &Ring, [a, b, c]: &[Polynomial; 3]) -> bool {
    &(a + b) + c == a + &(b + c)
        && a + b == b + a
        && a + &Polynomial::zero() == *a
        && (a + &-a).is_zero()
        && a - b == a + &-b
}

fn multiplication(_: &Ring, [a, b, c]: &[Polynomial; 3]) -> bool {
    let methods = [
        ProductMethod::Heap,
        ProductMethod::Dense,
        ProductMethod::Kronecker,
    ];
    let product = mul(a, b);
    mul(&product, c) == mul(a, &mul(b, c))
        && product == mul(b, a)
        && mul(a, &Polynomial::one()) == *a
        && mul(a, &Polynomial::zero()).is_zero()
        && methods
            .iter()
            .all(|&method| a.mul_with(method, b, &Unlimited).unwrap() == product)
}

fn distributivity(_: &Ring, [a, b, c]: &[Polynomial; 3]) -> bool {
    mul(a, &(b + c)) == &mul(a, b) + &mul(a, c)
}

fn scaling(_: &Ring, [a, ..]: &[Polynomial; 3]) -> bool {
    [(0, 1), (1, 1), (-6, 1), (10, 21), (-1, 60)]
        .iter()
        .all(|&(n, d)| {
            let factor = Rational::new(n, d).unwrap();
            let scaled = a.scale(&factor);
            scaled.is_canonical() && scaled == mul(a, &Polynomial::constant(factor))
        })
}

fn powers(_: &Ring, [a, ..]: &[Polynomial; 3]) -> bool {
    let mut product = Polynomial::one();
    (0..4).all(|exponent| {
        let holds = a.pow(exponent, &Unlimited).unwrap() == product;
        product = mul(&product, a);
        holds
    })
}

fn derivation_additive(ring: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    let d = |p: &Polynomial| ring.derive(p, &Unlimited).unwrap();
    d(&(a + b)) == &d(a) + &d(b)
}

fn derivation_leibniz(ring: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    let d = |p: &Polynomial| ring.derive(p, &Unlimited).unwrap();
    d(&mul(a, b)) == &mul(&d(a), b) + &mul(a, &d(b))
}

fn derivation_symbols(ring: &Ring, _: &[Polynomial; 3]) -> bool {
    let symbols = ring.symbols();
    (0..symbols.len()).all(|index| {
        let derivative = ring
            .derive(&Polynomial::symbol(symbols, index), &Unlimited)
            .unwrap();
        if index < symbols.generators() {
            derivative == *ring.derivative_of(index)
        } else if symbols.variable() == Some(index) {
            derivative.is_one()
        } else {
            symbols.constants().contains(&index) && derivative.is_zero()
        }
    })
}

/// The value of an element at `point + ε·direction` in `F_p[ε]/ε²`: independent of the library's derivation.
fn dual(
    field: &PrimeField,
    p: &Polynomial,
    point: &[u64],
    direction: &[u64],
) -> Option<(u64, u64)> {
    let inverse = field.inverse(field.element_of(p.denominator()))?;
    let mut sum = (0, 0);
    for (monomial, coefficient) in p.iter() {
        let mut value = (field.mul(field.element_of(coefficient), inverse), 0);
        for index in 0..monomial.width() {
            for _ in 0..monomial.exponent(index) {
                let slope = field.add(
                    field.mul(value.1, point[index]),
                    field.mul(value.0, direction[index]),
                );
                value = (field.mul(value.0, point[index]), slope);
            }
        }
        sum = (field.add(sum.0, value.0), field.add(sum.1, value.1));
    }
    Some(sum)
}

fn homomorphism(ring: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    [101, (1 << 31) - 1, (1 << 61) - 1]
        .into_iter()
        .all(|prime| {
            let field = PrimeField::new(prime).unwrap();
            let mut source = SplitMix::new(prime);
            let symbols = ring.symbols();
            let point: Vec<u64> = (0..symbols.len())
                .map(|_| field.element(source.next_word()))
                .collect();
            let at = |p: &Polynomial| p.evaluate_mod(&field, &point).unwrap();
            let direction: Vec<u64> = (0..symbols.len())
                .map(|index| match index {
                    generator if generator < symbols.generators() => {
                        at(ring.derivative_of(generator))
                    }
                    variable if symbols.variable() == Some(variable) => field.one(),
                    _ => 0,
                })
                .collect();
            let derivative = ring.derive(a, &Unlimited).unwrap();
            at(&(a + b)) == field.add(at(a), at(b))
                && at(&mul(a, b)) == field.mul(at(a), at(b))
                && dual(&field, a, &point, &direction) == Some((at(a), at(&derivative)))
        })
}

fn division(_: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    let quotient = mul(a, b).div_exact(b, &Unlimited).unwrap();
    quotient == if b.is_zero() { None } else { Some(a.clone()) }
}

fn gcd(_: &Ring, [a, b, c]: &[Polynomial; 3]) -> bool {
    let gcd = |x: &Polynomial, y: &Polynomial| x.gcd(y, &Unlimited).unwrap();
    let common = gcd(a, b);
    let divides =
        |p: &Polynomial| p.is_zero() || p.div_exact(&common, &Unlimited).unwrap().is_some();
    let scaled = gcd(&mul(a, c), &mul(b, c));
    divides(a)
        && divides(b)
        && common == gcd(b, a)
        && scaled == mul(&common, c).primitive_part()
        && gcd(a, a) == a.primitive_part()
}

fn splitting(ring: &Ring, [a, ..]: &[Polynomial; 3]) -> bool {
    (0..=ring.symbols().len()).all(|count| {
        let parts = a.split(count);
        let sum = parts
            .iter()
            .fold(Polynomial::zero(), |sum, (head, cofactor)| {
                &sum + &mul(&Polynomial::monomial(head.clone(), 1.into()), cofactor)
            });
        sum == *a
            && parts.windows(2).all(|pair| pair[0].0 > pair[1].0)
            && parts.iter().all(|(head, cofactor)| {
                head.width() <= count
                    && cofactor.is_canonical()
                    && (0..count).all(|i| !cofactor.involves(i))
            })
    })
}

fn text(ring: &Ring, [a, ..]: &[Polynomial; 3]) -> bool {
    let symbols = ring.symbols();
    let text = symbols.format(a);
    symbols.parse(&text).as_ref() == Ok(a)
}

fn gradings(ring: &Ring, [a, b, _]: &[Polynomial; 3]) -> bool {
    ring.gradings(&[]).iter().all(|grading| {
        // The part of an element whose terms share the weight of its first term.
        let part = |p: &Polynomial| {
            let weight = p.leading().map(|(m, _)| grading.weight_of_monomial(m));
            let chosen = p
                .iter()
                .filter(|(m, _)| weight == Some(grading.weight_of_monomial(m)));
            Polynomial::from_terms(chosen.map(|(m, c)| (m.clone(), c.clone().into())))
        };
        let (x, y) = (part(a), part(b));
        let derivative = ring.derive(&x, &Unlimited).unwrap();
        let reduced = |weight: linform_scalar::Integer| {
            if grading.modulus.is_zero() {
                weight
            } else {
                weight.div_rem_euclid(&grading.modulus).1
            }
        };
        let (Some(wx), Some(wy)) = (grading.weight_of(&x), grading.weight_of(&y)) else {
            return false;
        };
        let product = mul(&x, &y);
        (product.is_zero() || grading.weight_of(&product) == Some(reduced(&wx + &wy)))
            && (derivative.is_zero()
                || grading.weight_of(&derivative) == Some(reduced(&wx + &grading.derivation)))
    })
}
