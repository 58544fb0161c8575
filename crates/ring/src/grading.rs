//! Gradings of a differential ring.

use crate::lattice::{Lattice, kernel};
use crate::{Monomial, Polynomial, Ring};
use linform_scalar::Integer;

/// Weights of the symbols for which the derivation is homogeneous.
///
/// *Invariant*: one weight for each symbol of the ring; with a positive modulus all weights lie in
/// `0..modulus`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Grading {
    /// The modulus in which weights are counted; 0 for weights in ℤ.
    pub modulus: Integer,
    /// The weight of every symbol.
    pub weights: Vec<Integer>,
    /// What the derivation adds to the weight.
    pub derivation: Integer,
}

impl Grading {
    fn reduced(&self, weight: Integer) -> Integer {
        if self.modulus.is_zero() {
            weight
        } else {
            weight.div_rem_euclid(&self.modulus).1
        }
    }

    /// The weight of a monomial.
    pub fn weight_of_monomial(&self, monomial: &Monomial) -> Integer {
        let mut sum = Integer::ZERO;
        for (index, weight) in self.weights.iter().enumerate() {
            let exponent = monomial.exponent(index);
            if exponent > 0 {
                sum.add_product(weight, &Integer::from(u32::from(exponent)));
            }
        }
        self.reduced(sum)
    }

    /// The weight of a homogeneous polynomial; nothing if two terms differ in weight. 0 counts as homogeneous
    /// of weight 0.
    pub fn weight_of(&self, p: &Polynomial) -> Option<Integer> {
        let mut terms = p.iter();
        let Some((first, _)) = terms.next() else {
            return Some(Integer::ZERO);
        };
        let weight = self.weight_of_monomial(first);
        terms
            .all(|(monomial, _)| self.weight_of_monomial(monomial) == weight)
            .then_some(weight)
    }
}

impl Ring {
    /// Independent gradings that together generate all for which the derivation and the given elements are
    /// homogeneous: first those over ℤ, then those modulo prime powers.
    ///
    /// Each condition is linear in the weights `w` of the symbols and `d` of the derivation: monomials of one
    /// element have equal weight, and those of `g′` have weight `w_g + d`. Their integer kernel gives the
    /// gradings over ℤ, the torsion of the quotient by their lattice those modulo a number. The basis over ℤ is in Hermite
    /// form, derivation first; modulo a prime power one weight that is a unit is scaled to 1, the
    /// derivation's if possible.
    ///
    /// # Examples
    ///
    /// ```
    /// use linform_ring::{Ring, Symbols};
    ///
    /// let symbols = Symbols::new(vec!["P".into(), "P'".into()], None, vec!["g2".into(), "g3".into()]);
    /// let rules = vec![symbols.parse("P'")?, symbols.parse("6*P^2 - g2/2")?];
    /// let ring = Ring::new(symbols, rules)?;
    /// let relation = ring.symbols().parse("P'^2 - 4*P^3 + g2*P + g3")?;
    /// let gradings = ring.gradings(&[relation]);
    /// assert_eq!(gradings.len(), 1);
    /// assert_eq!(gradings[0].weights, [2, 3, 4, 6].map(|w: i64| w.into()));
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn gradings(&self, homogeneous: &[Polynomial]) -> Vec<Grading> {
        let symbols = self.symbols().len();
        let mut conditions = Lattice::new();
        for element in homogeneous {
            self.add_conditions(&mut conditions, element, None);
        }
        for generator in 0..self.symbols().generators() {
            let target = Monomial::power(generator, 1);
            self.add_conditions(&mut conditions, self.derivative_of(generator), target);
        }
        if let Some(variable) = self.symbols().variable() {
            let target = Monomial::power(variable, 1);
            self.add_conditions(&mut conditions, &Polynomial::one(), target);
        }
        let kernel = kernel(conditions.basis(), symbols + 1);
        let mut free = Lattice::new();
        kernel
            .free
            .into_iter()
            .for_each(|vector| free.insert(vector));
        let mut gradings: Vec<Grading> = free
            .basis()
            .iter()
            .map(|vector| grading(Integer::ZERO, vector))
            .collect();
        for (modulus, vector) in kernel.torsion {
            for part in prime_powers(modulus) {
                gradings.push(normalised(part, &vector));
            }
        }
        gradings
    }

    /// The conditions that all monomials of an element have one weight, which is the derivation's plus that of
    /// `target` if this is given. Entry 0 belongs to the derivation, so that it leads the Hermite form.
    fn add_conditions(
        &self,
        conditions: &mut Lattice,
        element: &Polynomial,
        target: Option<Monomial>,
    ) {
        let symbols = self.symbols().len();
        let mut monomials = element.iter().map(|(monomial, _)| monomial);
        let Some(first) = monomials.next() else {
            return;
        };
        let row = |a: &Monomial, b: &Monomial, derivation: i32| {
            let difference = |i| Integer::from(i32::from(a.exponent(i)) - i32::from(b.exponent(i)));
            std::iter::once(Integer::from(derivation))
                .chain((0..symbols).map(difference))
                .collect::<Vec<_>>()
        };
        if let Some(target) = &target {
            conditions.insert(row(first, target, -1));
        }
        for monomial in monomials {
            conditions.insert(row(monomial, first, 0));
        }
    }
}

fn grading(modulus: Integer, vector: &[Integer]) -> Grading {
    Grading {
        modulus,
        derivation: vector[0].clone(),
        weights: vector[1..].to_vec(),
    }
}

/// The grading modulo a prime power, scaled by a unit.
fn normalised(modulus: Integer, vector: &[Integer]) -> Grading {
    let reduce = |value: &Integer| value.div_rem_euclid(&modulus).1;
    let vector: Vec<Integer> = vector.iter().map(reduce).collect();
    let inverse = vector.iter().find_map(|entry| inverse(entry, &modulus));
    let scaled: Vec<Integer> = match inverse {
        Some(unit) => vector
            .iter()
            .map(|entry| reduce(&(entry * &unit)))
            .collect(),
        None => vector,
    };
    grading(modulus, &scaled)
}

/// The inverse modulo a number, by the extended Euclidean algorithm.
fn inverse(value: &Integer, modulus: &Integer) -> Option<Integer> {
    let (mut a, mut b) = (modulus.clone(), value.clone());
    // Each of a, b is congruent to its cofactor times the value.
    let (mut x, mut y) = (Integer::ZERO, Integer::ONE);
    while !b.is_zero() {
        let (quotient, remainder) = a.div_rem_euclid(&b);
        a = std::mem::replace(&mut b, remainder);
        let next = &x - &(&quotient * &y);
        x = std::mem::replace(&mut y, next);
    }
    a.is_one().then(|| x.div_rem_euclid(modulus).1)
}

/// The factors of the Chinese remainder theorem: prime powers, and a part without prime factors below 2^16
/// left whole.
fn prime_powers(mut modulus: Integer) -> Vec<Integer> {
    let mut parts = Vec::new();
    for candidate in 2u32..1 << 16 {
        if modulus.is_one() {
            break;
        }
        let prime = Integer::from(candidate);
        let mut power = Integer::ONE;
        loop {
            let (quotient, remainder) = modulus.div_rem_euclid(&prime);
            if !remainder.is_zero() {
                break;
            }
            power *= &prime;
            modulus = quotient;
        }
        if !power.is_one() {
            parts.push(power);
        }
    }
    if !modulus.is_one() {
        parts.push(modulus);
    }
    parts
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::Symbols;

    fn ring(
        generators: &[&str],
        variable: Option<&str>,
        constants: &[&str],
        rules: &[&str],
    ) -> Ring {
        let names = |list: &[&str]| list.iter().map(|s| s.to_string()).collect::<Vec<_>>();
        let symbols = Symbols::new(
            names(generators),
            variable.map(str::to_string),
            names(constants),
        );
        let rules = rules
            .iter()
            .map(|rule| symbols.parse(rule).unwrap())
            .collect();
        Ring::new(symbols, rules).unwrap()
    }

    fn integers(values: &[i32]) -> Vec<Integer> {
        values.iter().map(|&value| Integer::from(value)).collect()
    }

    #[test]
    fn painleve_two_with_its_law_is_graded_modulo_three_and_by_parity() {
        let ring = ring(&["q", "q'"], Some("t"), &[], &["q'", "t*q + 2*q^3"]);
        let law = ring.symbols().parse("q'^2 - t*q^2 - q^4").unwrap();
        let gradings = ring.gradings(std::slice::from_ref(&law));
        let expected = |modulus: i32, weights: &[i32], derivation: i32| Grading {
            modulus: modulus.into(),
            weights: integers(weights),
            derivation: derivation.into(),
        };
        assert_eq!(
            gradings,
            [expected(2, &[1, 1, 0], 0), expected(3, &[1, 2, 2], 1)]
        );
        assert_eq!(gradings[1].weight_of(&law), Some(Integer::ONE));
        let mixed = ring.symbols().parse("q + t").unwrap();
        assert_eq!(gradings[1].weight_of(&mixed), None);
    }

    #[test]
    fn weierstrass_functions_are_graded_over_the_integers() {
        let ring = ring(&["P", "P'"], None, &["g2", "g3"], &["P'", "6*P^2 - 1/2*g2"]);
        let relation = ring.symbols().parse("P'^2 - 4*P^3 + g2*P + g3").unwrap();
        let gradings = ring.gradings(&[relation]);
        assert_eq!(gradings.len(), 1);
        assert!(gradings[0].modulus.is_zero() && gradings[0].derivation.is_one());
        assert_eq!(gradings[0].weights, integers(&[2, 3, 4, 6]));
        // Without the relation nothing ties the weight of g3.
        let free = ring.gradings(&[]);
        assert_eq!(free.len(), 2);
        assert_eq!(free[0].weights, integers(&[2, 3, 4, 0]));
        assert_eq!(free[1].weights, integers(&[0, 0, 0, 1]));
    }

    #[test]
    fn eisenstein_series_have_their_weights() {
        let ring = ring(
            &["E2", "E4", "E6"],
            None,
            &[],
            &["1/12*(E2^2 - E4)", "1/3*(E2*E4 - E6)", "1/2*(E2*E6 - E4^2)"],
        );
        let gradings = ring.gradings(&[]);
        assert_eq!(gradings.len(), 1);
        // Ramanujan's derivation raises the weight by 2; the primitive vector is half of the usual weights.
        assert_eq!(gradings[0].weights, integers(&[1, 2, 3]));
        assert!(gradings[0].derivation.is_one());
    }

    #[test]
    fn moduli_split_into_prime_powers() {
        let parts = |n: i64| prime_powers(n.into());
        assert_eq!(parts(360), integers(&[8, 9, 5]));
        assert_eq!(parts(1), []);
        assert_eq!(parts(65537 * 2), integers(&[2, 65537]));
    }

    #[test]
    fn inverses_exist_for_units_alone() {
        for modulus in 2..20i32 {
            for value in 0..modulus {
                let found = inverse(&value.into(), &modulus.into());
                let expected = (0..modulus).find(|x| x * value % modulus == 1);
                assert_eq!(found, expected.map(Integer::from), "{value} mod {modulus}");
            }
        }
    }
}
