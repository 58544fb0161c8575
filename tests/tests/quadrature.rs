//! Traces of the Airy kernel by quadrature of the operator, against the forms found by algebra.
//!
//! The decimals were computed apart from this program by Gauss–Legendre quadrature of the Fredholm determinant and of the
//! resolvent (Nyström’s method), with 110 and 140 nodes agreeing to 48 digits. The forms are
//! evaluated in exact arithmetic on those decimals, so only their rounding separates the two sides.

use linform_engine::published::Coefficient;
use linform_scalar::published::{BigInt, BigRational, Signed, Zero, publish_rational};
use linform_scalar::rational_of_decimal;
use linform_tests::{claim, form, solve_named};

/// F^(k)(t) for k = 0, 1, …, 7 at t = −2 and t = 0.
const DERIVATIVES: [[&str; 8]; 2] = [
    [
        "0.4132241425051225546880807613717181961900",
        "0.4413818018617784019278943743248877347458",
        "0.07184622399412021945239488138412119369214",
        "-0.5631074129074991132422326371371011270150",
        "-0.1292565460217045033448121555432806960256",
        "2.215357464775522415606827665031332543004",
        "-0.1436005604831287383746923653961056943969",
        "-14.41670237123726818518248427945729561199",
    ],
    [
        "0.9693728283552626683498782494508137827306",
        "0.06697530713277931168006697499081782218645",
        "-0.1259802392440090415694427351620574971999",
        "0.1834464312465776526669230906504065738159",
        "-0.1323697341172320475070769839818755153598",
        "-0.2594801969894119364256878938614549593812",
        "1.134452141667086522027938659176807042707",
        "-1.465100873788118683436187666546647594844",
    ],
];

/// `j`, `k`, and `u[j,k]` at t = −2 and t = 0.
#[rustfmt::skip]
const TRACES: [(i64, i64, [&str; 2]); 10] = [
    (0, 0, ["1.06814137040966039234595146976274461906351", "0.0690913807089234023892379458317163906196"]),
    (1, 0, ["0.0869337202305762834030879520164485665800", "-0.0649802818683086219722870493156079607784"]),
    (1, 1, ["0.257855368661165980422525744223799666007971", "0.0630807968068150059876468071509949111143"]),
    (2, 0, ["-0.939213686079077402134688597650844786059520", "0.0315403984034075029938234035754974555571"]),
    (2, 1, ["-0.306135352961835883808684295403685397293413", "-0.0343418368805861156778453502466710999139"]),
    (2, 2, ["1.07041046742441855349451839913180344062477", "0.0256042476101216675762708804702073444715"]),
    (3, 0, ["0.494137502311726589090288945352003191504528", "0.0346136415124202297002101804722538937751"]),
    (3, 1, ["-0.198386823830943017388089156633461407247126", "-0.0262506895054579695973441125636004108712"]),
    (3, 2, ["-0.292603567325166234380676471618886458032690", "0.000483897554969242342605875305769905596917"]),
    (3, 3, ["0.631878798466156898536712588645027335857086", "0.0388760490374991090407284591419894082123"]),
];

fn decimal(text: &str) -> BigRational {
    publish_rational(&rational_of_decimal(text).unwrap())
}

/// The value of a polynomial coefficient at an integer point.
fn value(coefficient: &Coefficient, t: i64) -> BigRational {
    assert!(coefficient.is_polynomial());
    let t = BigRational::from_integer(BigInt::from(t));
    let mut sum = BigRational::zero();
    for (exponents, factor) in coefficient.numerator.terms() {
        let power = (0..exponents[0]).fold(factor.clone(), |product, _| product * &t);
        sum += power;
    }
    sum
}

#[test]
fn forms_of_traces_agree_with_quadrature() {
    let record = solve_named("airy-traces");
    let tolerance = decimal("1e-38");
    for (place, t) in [-2, 0].into_iter().enumerate() {
        for (j, k, traces) in TRACES {
            let mut sum = BigRational::zero();
            for term in form(claim(&record, "trace", &[j, k])) {
                let order: usize = term
                    .term
                    .strip_prefix("ratio(F,")
                    .and_then(|rest| rest.strip_suffix(')'))
                    .unwrap()
                    .parse()
                    .unwrap();
                sum += value(&term.coefficient, t) * decimal(DERIVATIVES[place][order]);
            }
            let found = sum / decimal(DERIVATIVES[place][0]);
            let error = (found - decimal(traces[place])).abs();
            assert!(error < tolerance, "u[{j},{k}] at t = {t}: {error}");
        }
    }
}
