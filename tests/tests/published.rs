//! What the literature says, against what the ready specs give. Each table names its source; values marked "derived"
//! were computed independently of this program and stand for a published table that was not at hand.

use linform_engine::record::{Finding, Refutation, ResultRecord, Verdict};
use linform_tests::{claim, form, solve_named, texts};

/// Asserts that a claim holds with exactly these coefficients.
fn assert_form(record: &ResultRecord, name: &str, index: &[i64], expected: &[(&str, &str)]) {
    let expected: Vec<(String, String)> = expected
        .iter()
        .map(|(term, coefficient)| (term.to_string(), coefficient.to_string()))
        .collect();
    assert_eq!(
        texts(form(claim(record, name, index))),
        expected,
        "{name} {index:?}"
    );
}

fn assert_refuted(record: &ResultRecord, name: &str) {
    let claim = claim(record, name, &[]);
    assert_eq!(claim.finding.verdict(), Verdict::Refuted, "{name}");
}

/// One entry: `j`, `k`, and for each order of the derivative its coefficient.
type TraceForm = (i64, i64, &'static [(u32, &'static str)]);

/// Entries of the table of G. Shinault & C. A. Tracy, J. Stat. Phys. 143 (2011) 60–71: `F·u[j,k]` as a form in the
/// derivatives of F. Derived from the rules of Tracy & Widom 1994, and checked to 77 digits against quadrature of the
/// operator at five points.
#[rustfmt::skip]
const TRACES: &[TraceForm] = &[
    (0, 0, &[(1, "1")]),
    (1, 0, &[(2, "1/2")]),
    (2, 0, &[(1, "1/3*t"), (3, "1/6")]),
    (1, 1, &[(1, "-1/3*t"), (3, "1/3")]),
    (3, 0, &[(1, "7/12"), (2, "1/3*t"), (4, "1/24")]),
    (2, 1, &[(1, "-1/4"), (4, "1/8")]),
    (4, 0, &[(1, "1/5*t^2"), (2, "47/60"), (3, "1/6*t"), (5, "1/120")]),
    (3, 1, &[(1, "-1/5*t^2"), (2, "2/15"), (3, "1/6*t"), (5, "1/30")]),
    (2, 2, &[(1, "1/5*t^2"), (2, "-3/10"), (5, "1/20")]),
    (5, 0, &[(1, "101/90*t"), (2, "23/90*t^2"), (3, "59/120"), (4, "1/18*t"), (6, "1/720")]),
    (4, 1, &[(1, "-13/18*t"), (2, "-1/18*t^2"), (3, "11/24"), (4, "1/9*t"), (6, "1/144")]),
    (3, 2, &[(1, "2/9*t"), (2, "1/18*t^2"), (3, "-1/12"), (4, "1/18*t"), (6, "1/72")]),
    (6, 0, &[(1, "1/7*t^3 + 1151/630"), (2, "733/420*t"), (3, "7/45*t^2"), (4, "71/360"), (5, "1/72*t"), (7, "1/5040")]),
    (5, 1, &[(1, "-1/7*t^3 - 74/105"), (2, "-47/420*t"), (3, "1/10*t^2"), (4, "7/20"), (5, "1/24*t"), (7, "1/840")]),
    (4, 2, &[(1, "1/7*t^3 - 11/42"), (2, "-13/84*t"), (4, "1/8"), (5, "1/24*t"), (7, "1/336")]),
    (3, 3, &[(1, "-1/7*t^3 + 34/63"), (2, "17/42*t"), (3, "1/9*t^2"), (4, "-1/18"), (5, "1/36*t"), (7, "1/252")]),
    (7, 0, &[(1, "691/420*t^2"), (2, "22/105*t^3 + 4873/1440"), (3, "394/315*t"), (4, "11/180*t^2"), (5, "83/1440"), (6, "1/360*t"), (8, "1/40320")]),
    (6, 1, &[(1, "-73/60*t^2"), (2, "-1/15*t^3 + 271/1440"), (3, "29/36*t"), (4, "17/180*t^2"), (5, "221/1440"), (6, "1/90*t"), (8, "1/5760")]),
    (5, 2, &[(1, "43/60*t^2"), (2, "1/15*t^3 - 123/160"), (3, "-3/20*t"), (4, "1/30*t^2"), (5, "61/480"), (6, "1/60*t"), (8, "1/1920")]),
    (4, 3, &[(1, "-1/4*t^2"), (2, "127/288"), (3, "5/18*t"), (4, "1/18*t^2"), (5, "5/288"), (6, "1/72*t"), (8, "1/1152")]),
    (8, 0, &[(1, "1/9*t^4 + 19912/2835*t"), (2, "5297/1890*t^2"), (3, "409/2835*t^3 + 28319/10080"), (4, "4273/7560*t"), (5, "19/1080*t^2"), (6, "19/1440"), (7, "1/2160*t"), (9, "1/362880")]),
    (7, 1, &[(1, "-1/9*t^4 - 21167/5670*t"), (2, "-1999/3780*t^2"), (3, "37/567*t^3 + 115/63"), (4, "6107/7560*t"), (5, "47/1080*t^2"), (6, "17/360"), (7, "1/432*t"), (9, "1/45360")]),
    (6, 2, &[(1, "1/9*t^4 + 322/405*t"), (2, "103/540*t^2"), (3, "1/162*t^3 - 35/72"), (4, "113/540*t"), (5, "37/1080*t^2"), (6, "11/180"), (7, "1/216*t"), (9, "1/12960")]),
    (5, 3, &[(1, "-1/9*t^4 + 667/810*t"), (2, "197/540*t^2"), (3, "32/405*t^3 - 4/45"), (4, "119/1080*t"), (5, "29/1080*t^2"), (6, "11/360"), (7, "11/2160*t"), (9, "1/6480")]),
    (4, 4, &[(1, "1/9*t^4 - 118/81*t"), (2, "-17/54*t^2"), (3, "-1/81*t^3 + 119/144"), (4, "31/108*t"), (5, "1/27*t^2"), (6, "1/144"), (7, "1/216*t"), (9, "1/5184")]),
];

#[test]
fn traces_are_those_of_shinault_and_tracy() {
    let record = solve_named("airy-traces");
    for (j, k, expected) in TRACES {
        let expected: Vec<(String, String)> = expected
            .iter()
            .map(|(n, coefficient)| (format!("ratio(F,{n})"), coefficient.to_string()))
            .collect();
        assert_eq!(
            texts(form(claim(&record, "trace", &[*j, *k]))),
            expected,
            "u[{j},{k}]"
        );
    }
    let traces = record.claims.iter().filter(|claim| claim.name == "trace");
    assert_eq!(traces.count(), TRACES.len());
}

/// Minors of the same traces, derived as the table above; the corrections of Choup 2006 and of Baik & Jenkins 2013.
#[test]
fn minors_of_traces_are_linear_forms_and_products_are_not() {
    let record = solve_named("airy-traces");
    for (name, expected) in [
        ("minor 01|01", &[(1, "1/6"), (2, "-1/3*t"), (4, "1/12")][..]),
        ("minor 01|02", &[(2, "-1/12"), (3, "-1/6*t"), (5, "1/24")]),
        (
            "minor 01|12",
            &[
                (1, "-1/18*t"),
                (2, "1/9*t^2"),
                (3, "-1/24"),
                (4, "-1/18*t"),
                (6, "1/144"),
            ],
        ),
        // L. N. Choup, Int. Math. Res. Not. (2006) 61049.
        (
            "first correction of the Gaussian unitary ensemble",
            &[(1, "1/20*t^2"), (2, "-3/40")],
        ),
        // In another scaling, J. Baik & R. Jenkins, Ann. Probab. 41 (2013) 4359–4406.
        (
            "first correction of the hard-to-soft transition",
            &[(1, "3/10*t^2"), (2, "-1/5")],
        ),
    ] {
        let expected: Vec<(String, &str)> = expected
            .iter()
            .map(|(n, coefficient)| (format!("ratio(F,{n})"), *coefficient))
            .collect();
        let expected: Vec<(&str, &str)> = expected
            .iter()
            .map(|(term, coefficient)| (term.as_str(), *coefficient))
            .collect();
        assert_form(&record, name, &[], &expected);
    }
    for name in [
        "single product",
        "square of the first trace",
        "product of neighbours",
    ] {
        assert_refuted(&record, name);
    }
}

#[test]
fn systems_have_the_expected_shapes() {
    let record = solve_named("airy-traces");
    // With n = 1..N, N terms: 28 × 4 for the minor by matching, 2N² + 1 by 2N for a derivative.
    let minor = claim(&record, "minor 01|01", &[]).system.as_ref().unwrap();
    assert_eq!((minor.rows, minor.columns), (28, 4));
    let primitive = record
        .primitives
        .iter()
        .find(|primitive| primitive.element == "u[3,0]")
        .unwrap();
    assert_eq!((primitive.system.rows, primitive.system.columns), (33, 8));
}

/// M. Abramowitz & I. A. Stegun, Handbook (1964), chapter 18; DLMF 23.3.10–13; G. H. Halphen 1886.
#[test]
fn powers_of_the_weierstrass_function_are_those_of_the_handbook() {
    let record = solve_named("weierstrass");
    for (name, expected) in [
        ("third derivative", &[("P*P'", "12")][..]),
        (
            "fourth derivative",
            &[("P^3", "120"), ("P", "-18*g2"), ("g[3]", "-12")],
        ),
        ("fifth derivative", &[("P^2*P'", "360"), ("P'", "-18*g2")]),
        (
            "sixth derivative",
            &[
                ("P^4", "5040"),
                ("P^2", "-1008*g2"),
                ("g[3]*P", "-720"),
                ("1", "9*g2^2"),
            ],
        ),
        ("square", &[("p[2]", "1/6"), ("1", "1/12*g2")]),
        (
            "cube",
            &[("p[4]", "1/120"), ("p[0]", "3/20*g2"), ("g[3]", "1/10")],
        ),
        (
            "fourth power",
            &[
                ("p[6]", "1/5040"),
                ("p[2]", "1/30*g2"),
                ("g[3]*p[0]", "1/7"),
                ("1", "5/336*g2^2"),
            ],
        ),
        (
            "fifth power",
            &[
                ("p[8]", "1/362880"),
                ("p[4]", "1/480*g2"),
                ("g[3]*p[2]", "5/168"),
                ("p[0]", "7/240*g2^2"),
                ("g[3]", "1/30*g2"),
            ],
        ),
        (
            "sixth power",
            &[
                ("p[10]", "1/39916800"),
                ("p[6]", "1/16800*g2"),
                ("g[3]*p[4]", "1/560"),
                ("p[2]", "17/2400*g2^2"),
                ("g[3]*p[0]", "87/1540*g2"),
                ("1", "15/4928*g2^3"),
                ("g[3]^2", "1/55"),
            ],
        ),
        (
            "square of the derivative",
            &[("p[4]", "1/30"), ("p[0]", "-2/5*g2"), ("g[3]", "-3/5")],
        ),
        (
            "integral of the cube",
            &[("p[3]", "1/120"), ("zeta", "-3/20*g2")],
        ),
    ] {
        assert_form(&record, name, &[], expected);
    }
    assert_form(&record, "invariant", &[], &[]);
    assert_refuted(&record, "square without the constant");
}

/// S. Ramanujan, Trans. Camb. Phil. Soc. 22 (1916) 159–184; M. Kaneko & D. Zagier 1995; J. Chazy 1911.
#[test]
fn quasimodular_forms_are_those_of_ramanujan_and_of_kaneko_and_zagier() {
    let record = solve_named("eisenstein");
    for (name, expected) in [
        (
            "derivative of the discriminant",
            &[("E2*delta[0]", "1")][..],
        ),
        ("cube of E4", &[("E[12]", "1"), ("delta[0]", "432000/691")]),
        (
            "square of E6",
            &[("E[12]", "1"), ("delta[0]", "-762048/691")],
        ),
        (
            "Chazy's equation",
            &[("E2*d[2,2]", "1"), ("d[2,1]^2", "-3/2")],
        ),
        ("square of E2", &[("E[4]", "1"), ("d[2,1]", "12")]),
        ("E2 E4", &[("E[6]", "1"), ("d[4,1]", "3")]),
        ("E2 E6", &[("E[8]", "1"), ("d[6,1]", "2")]),
        (
            "cube of E2",
            &[("E[6]", "1"), ("d[4,1]", "9"), ("d[2,2]", "72")],
        ),
        (
            "E2^2 E4",
            &[("E[8]", "1"), ("d[6,1]", "4"), ("d[4,2]", "36/5")],
        ),
        (
            "sixth power of E2",
            &[
                ("E[12]", "1"),
                ("delta[0]", "-4608/24185"),
                ("d[10,1]", "36/5"),
                ("d[8,2]", "30"),
                ("d[6,3]", "720/7"),
                ("d[4,4]", "2592/7"),
                ("d[2,5]", "10368/5"),
            ],
        ),
    ] {
        assert_form(&record, name, &[], expected);
    }
    assert_refuted(&record, "sixth power of E2 without the discriminant");
}

/// DLMF 9.11.1 for the square, W. H. Reid, ZAMP 48 (1997) for the cube; higher powers derived by elimination.
#[test]
fn powers_of_airy_functions_satisfy_the_known_equations() {
    let record = solve_named("airy-products");
    for (power, expected) in [
        (1, &[(0, "x")][..]),
        (2, &[(0, "2"), (1, "4*x")]),
        (3, &[(0, "-9*x^2"), (1, "10"), (2, "10*x")]),
        (4, &[(0, "-64*x"), (1, "-64*x^2"), (2, "30"), (3, "20*x")]),
        (
            5,
            &[
                (0, "225*x^3 - 130"),
                (1, "-518*x"),
                (2, "-259*x^2"),
                (3, "70"),
                (4, "35*x"),
            ],
        ),
        (
            6,
            &[
                (0, "3456*x^2"),
                (1, "2304*x^3 - 1180"),
                (2, "-2352*x"),
                (3, "-784*x^2"),
                (4, "140"),
                (5, "56*x"),
            ],
        ),
    ] {
        let expected: Vec<(String, String)> = expected
            .iter()
            .map(|(n, coefficient)| (format!("y[{power},{n}]"), coefficient.to_string()))
            .collect();
        let found = texts(form(claim(&record, "equation of a power", &[power])));
        assert_eq!(found, expected, "power {power}");
    }
    // J. R. Albright, J. Phys. A 10 (1977) 485–490; DLMF 9.11(iv).
    assert_form(
        &record,
        "integral of a square",
        &[],
        &[("A^2", "x"), ("A'^2", "-1")],
    );
    assert_form(
        &record,
        "integral of x times a square",
        &[],
        &[("A^2", "1/3*x^2"), ("A*A'", "1/3"), ("A'^2", "-1/3*x")],
    );
}

/// P. Appell, C. R. Acad. Sci. Paris 91 (1880) 211–214; the cube derived by elimination.
#[test]
fn powers_of_bessel_functions_satisfy_the_known_equations() {
    let record = solve_named("bessel-products");
    assert_form(
        &record,
        "equation of the square",
        &[],
        &[
            ("r*y[2,2]", "-3"),
            ("r^2*y[2,1]", "4*nu^2 - 1"),
            ("y[2,1]", "-4"),
            ("r*y[2,0]", "-4"),
        ],
    );
    assert_form(
        &record,
        "equation of the cube",
        &[],
        &[
            ("r*y[3,3]", "-6"),
            ("r^2*y[3,2]", "10*nu^2 - 7"),
            ("y[3,2]", "-10"),
            ("r^3*y[3,1]", "10*nu^2 - 1"),
            ("r*y[3,1]", "-30"),
            ("r^4*y[3,0]", "-9*nu^4"),
            ("r^2*y[3,0]", "18*nu^2 - 12"),
            ("y[3,0]", "-9"),
        ],
    );
}

/// DLMF 32.6(ii).
#[test]
fn the_hamiltonian_of_painleve_two_satisfies_its_sigma_form() {
    let record = solve_named("painleve-two");
    assert_form(
        &record,
        "sigma form",
        &[],
        &[
            ("D(ratio(tau,1))^3", "-4"),
            ("D(ratio(tau,1))^2", "-2*z"),
            ("ratio(tau,1)*D(ratio(tau,1))", "2"),
            ("1", "1/4*alpha^2 + 1/4*alpha + 1/16"),
        ],
    );
    assert_form(
        &record,
        "integral of a square",
        &[],
        &[("w'^2", "-1"), ("w^4", "1"), ("w^2", "z"), ("w", "2*alpha")],
    );
}

/// DLMF 22.13.13: sn³ = (sn″ + (1 + k²) sn)/(2k²), no form with polynomial coefficients.
#[test]
fn the_cube_of_sn_needs_a_denominator() {
    let record = solve_named("jacobi");
    let rational = form(claim(&record, "cube", &[]));
    let polynomial = match &claim(&record, "cube with polynomial coefficients", &[]).finding {
        Finding::Refuted(Refutation::OtherCoefficients { form, .. }) => form,
        other => panic!("{}", other.verdict().word()),
    };
    assert_eq!(texts(rational), texts(polynomial));
    let terms: Vec<&str> = rational.iter().map(|term| term.term.as_str()).collect();
    assert_eq!(terms, ["s[2]", "s[0]"]);
    // 1/(2k²) and (1 + k²)/(2k²).
    let coefficients: Vec<String> = rational
        .iter()
        .map(|term| term.coefficient.to_string())
        .collect();
    assert_eq!(coefficients, ["1/(2*k2)", "(k2 + 1)/(2*k2)"]);
}
