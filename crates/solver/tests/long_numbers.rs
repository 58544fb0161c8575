//! The choice of the method where numbers are long.

mod common;

use common::{apply, check, push, read};
use linform_ring::Polynomial;
use linform_scalar::{Integer, SplitMix, Unlimited};
use linform_solver::{Fraction, Method, Outcome, System, solve};

/// Numbers of these bits without structure.
fn number(random: &mut SplitMix, bits: u32) -> Polynomial {
    let words: Vec<u64> = (0..bits / 64).map(|_| random.next_word()).collect();
    Polynomial::constant(Integer::from_words(random.next_word() & 1 == 1, &words).into())
}

#[test]
fn one_huge_right_side_is_left_to_elimination() {
    let huge = read("9999^9999");
    let mut system = System::new(1);
    push(&mut system, &[read("1")], huge.clone());
    push(&mut system, &[read("2")], huge.scale(&2.into()));
    let solved = solve(&system, &Unlimited).unwrap();
    assert_eq!(solved.method, Method::FractionFree);
    assert_eq!(solved.outcome, Outcome::Unique(vec![huge.into()]));
}

#[test]
fn quotients_of_huge_determinants_are_left_to_elimination() {
    // The right sides are no longer than the entries: only the primes tell how large the solution is.
    let mut random = SplitMix::new(77);
    let mut system = System::new(2);
    for _ in 0..2 {
        let entries = [number(&mut random, 40_000), number(&mut random, 40_000)];
        push(&mut system, &entries, number(&mut random, 64));
    }
    let solved = solve(&system, &Unlimited).unwrap();
    assert_eq!(solved.method, Method::FractionFree);
    assert!(matches!(solved.outcome, Outcome::Unique(_)));
    check(&system, &solved);
}

#[test]
fn huge_entries_with_a_short_solution_are_left_to_primes() {
    let mut random = SplitMix::new(78);
    let solution = [read("3"), read("-5"), read("1/7")];
    let mut system = System::new(3);
    for _ in 0..5 {
        let entries: Vec<Polynomial> = (0..3).map(|_| number(&mut random, 40_000)).collect();
        let right = apply(&entries, &solution);
        push(&mut system, &entries, right);
    }
    let solved = solve(&system, &Unlimited).unwrap();
    assert_eq!(solved.method, Method::Modular);
    assert_eq!(
        solved.outcome,
        Outcome::Unique(solution.map(Fraction::from).to_vec())
    );
}
