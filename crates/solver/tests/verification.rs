//! What verification and witnesses reject.

mod common;

use common::{decide_by_all, read, system};
use linform_ring::Polynomial;
use linform_scalar::{Control, Stop, Unlimited};
use linform_solver::{
    Fraction, Independence, Mismatch, Outcome, System, check_independence, solve,
    solve_fraction_free, solve_modular, verify,
};
use std::sync::atomic::{AtomicU32, Ordering};

fn mismatch(system: &System, outcome: &Outcome) -> Option<Mismatch> {
    verify(system, outcome, &Unlimited).unwrap().err()
}

fn unique_system() -> System {
    system(
        2,
        &[
            &["t", "a", "t^2 + a*b"],
            &["b", "t", "b*t + b*t"],
            &["1", "0", "t"],
        ],
    )
}

#[test]
fn a_solution_changed_in_one_coefficient_is_rejected() {
    let system = unique_system();
    let Outcome::Unique(solution) = decide_by_all(&system) else {
        panic!("the columns are independent");
    };
    assert_eq!(solution, [Fraction::from(read("t")), read("b").into()]);
    for (texts, row) in [
        (["t + 1/1000000007", "b"], 0),
        (["t", "b + t^9"], 0),
        (["t", "0"], 0),
    ] {
        let changed = texts.map(|text| Fraction::from(read(text))).to_vec();
        let found = mismatch(&system, &Outcome::Unique(changed));
        assert_eq!(found, Some(Mismatch::Row(row)));
    }
    let half = Fraction::new(read("t^2 + t"), read("t + 1 + a"), &Unlimited)
        .unwrap()
        .unwrap();
    let changed = vec![half, read("b").into()];
    assert_eq!(
        mismatch(&system, &Outcome::Unique(changed)),
        Some(Mismatch::Row(0))
    );
    let short = Outcome::Unique(solution[..1].to_vec());
    assert_eq!(mismatch(&system, &short), Some(Mismatch::Shape));
}

#[test]
fn a_solution_is_checked_in_rows_that_did_not_lead_to_it() {
    // The last row alone contradicts.
    let system = system(
        1,
        &[&["t", "t^2"], &["a", "a*t"], &["t + a + b", "t^2 + a*t"]],
    );
    let claimed = Outcome::Unique(vec![read("t").into()]);
    assert_eq!(mismatch(&system, &claimed), Some(Mismatch::Row(2)));
    assert!(matches!(decide_by_all(&system), Outcome::Inconsistent(_)));
}

#[test]
fn a_changed_kernel_vector_is_rejected() {
    let system = system(3, &[&["t", "t*a", "1", "t"], &["0", "0", "b", "0"]]);
    let Outcome::Family { particular, kernel } = decide_by_all(&system) else {
        panic!("column 1 is a multiple of column 0");
    };
    let mut changed = kernel.clone();
    changed[0][2] = Fraction::one();
    let outcome = Outcome::Family {
        particular: particular.clone(),
        kernel: changed,
    };
    let expected = Mismatch::Kernel { vector: 0, row: 0 };
    assert_eq!(mismatch(&system, &outcome), Some(expected));
    let mut changed = particular;
    changed[2] = Fraction::one();
    let outcome = Outcome::Family {
        particular: changed,
        kernel,
    };
    assert_eq!(mismatch(&system, &outcome), Some(Mismatch::Row(0)));
}

#[test]
fn a_changed_certificate_is_rejected() {
    let system = system(
        2,
        &[
            &["t", "1", "1"],
            &["t^2", "t", "a"],
            &["1", "0", "b"],
            &["t + 1", "1", "2"],
        ],
    );
    let Outcome::Inconsistent(certificate) = decide_by_all(&system) else {
        panic!("t times row 0 contradicts row 1");
    };
    let rejected = |change: &dyn Fn(&mut linform_solver::Certificate)| {
        let mut changed = certificate.clone();
        change(&mut changed);
        mismatch(&system, &Outcome::Inconsistent(changed))
    };
    assert_eq!(rejected(&|_| {}), None);
    let (row, _) = certificate.multipliers[0];
    assert_eq!(row, 0);
    assert_eq!(
        rejected(&|c| c.multipliers[0].1 = read("t + 1/3")),
        Some(Mismatch::Column(0))
    );
    assert_eq!(rejected(&|c| c.value = read("7")), Some(Mismatch::Value));
    assert_eq!(rejected(&|c| c.multipliers.clear()), Some(Mismatch::Value));
    assert_eq!(rejected(&|c| c.multipliers[1].0 = 4), Some(Mismatch::Shape));
    assert_eq!(rejected(&|c| c.multipliers[1].0 = 0), Some(Mismatch::Shape));
}

#[test]
fn a_combination_that_says_zero_equals_zero_is_no_certificate() {
    let system = system(1, &[&["t", "t"], &["a*t", "a*t"]]);
    let outcome = Outcome::Inconsistent(linform_solver::Certificate {
        multipliers: vec![(0, read("a")), (1, read("-1"))],
        value: Polynomial::zero(),
    });
    assert_eq!(mismatch(&system, &outcome), Some(Mismatch::Value));
}

#[test]
fn a_witness_of_rank_is_recomputed() {
    let system = unique_system();
    let solved = solve(&system, &Unlimited).unwrap();
    let witness = solved.independence.unwrap();
    assert!(check_independence(&system, &witness));
    let rejected = |change: &dyn Fn(&mut Independence)| {
        let mut changed = witness.clone();
        change(&mut changed);
        !check_independence(&system, &changed)
    };
    assert!(rejected(&|w| w.prime = 91));
    assert!(rejected(&|w| w.prime = 2));
    assert!(rejected(&|w| w.rows[1] = 7));
    assert!(rejected(&|w| w.rows = vec![1, 1]));
    assert!(rejected(&|w| w.columns = vec![0, 2]));
    assert!(rejected(&|w| w.columns = vec![0]));
    // Rows 0 and 1 have the determinant t² − ab, which vanishes at t = a = b = 1.
    let dependent = |w: &mut Independence| {
        w.rows = vec![0, 1];
        w.point = vec![(0, 1), (1, 1), (2, 1)];
    };
    assert!(rejected(&dependent));
    assert!(rejected(&|w| {
        w.rows = vec![0, 1];
        w.point.pop();
    }));
}

/// Stops at the call of this number.
struct StopAt(AtomicU32);

impl Control for StopAt {
    fn proceed(&self) -> Result<(), Stop> {
        match self.0.fetch_sub(1, Ordering::Relaxed) {
            0 | 1 => Err(Stop::Interrupted),
            _ => Ok(()),
        }
    }
}

#[test]
fn work_stops_when_the_control_says_so() {
    let system = unique_system();
    for method in [solve, solve_fraction_free, solve_modular] {
        let stopped = (1..20)
            .map(|calls| method(&system, &StopAt(AtomicU32::new(calls))))
            .take_while(|result| *result == Err(Stop::Interrupted))
            .count();
        assert!(stopped >= 5, "the control was asked {stopped} times");
    }
}

/// A control that allows few terms.
struct FewTerms;

impl Control for FewTerms {
    fn proceed(&self) -> Result<(), Stop> {
        Ok(())
    }
    fn term_limit(&self) -> usize {
        20
    }
}

#[test]
fn solutions_beyond_the_term_limit_end_in_a_size_limit() {
    // x = t^30 / (1 + t^30) has 31 coefficients in the dense image.
    let large = system(1, &[&["1 + t^30", "t^30"]]);
    assert_eq!(solve_modular(&large, &FewTerms), Err(Stop::SizeLimit));
    let small = system(1, &[&["1 + t^3", "t^3"]]);
    assert!(solve_modular(&small, &FewTerms).is_ok());
}
