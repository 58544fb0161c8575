//! Work that is stopped at any moment, and specs with damaged bytes: no wrong verdict, no panic.

use linform_engine::record::{ClaimRecord, Finding, ResultRecord, StopKind};
use linform_engine::{Options, PrepareLimits, Prepared, Silent, prepare_within, verify};
use linform_report::{TextOptions, csv, json, latex, read_json, text};
use linform_scalar::{Control, SplitMix, Stop, Unlimited};
use linform_tests::{prepared, specs};
use std::fs;
use std::sync::atomic::{AtomicU64, Ordering};

/// Stops the work at the call after `left` calls, and at every later one.
struct Counting {
    left: AtomicU64,
    term_limit: usize,
}

impl Counting {
    fn new(calls: u64, term_limit: usize) -> Self {
        Counting {
            left: AtomicU64::new(calls),
            term_limit,
        }
    }

    fn left(&self) -> u64 {
        self.left.load(Ordering::Relaxed)
    }
}

impl Control for Counting {
    fn proceed(&self) -> Result<(), Stop> {
        let step = |left: u64| left.checked_sub(1);
        match self
            .left
            .fetch_update(Ordering::Relaxed, Ordering::Relaxed, step)
        {
            Ok(_) => Ok(()),
            Err(_) => Err(Stop::Interrupted),
        }
    }

    fn term_limit(&self) -> usize {
        self.term_limit
    }
}

/// The environment variable `LINFORM_ROUNDS` multiplies the rounds.
fn rounds(count: u64) -> u64 {
    let factor = std::env::var("LINFORM_ROUNDS").ok();
    count * factor.and_then(|text| text.parse().ok()).unwrap_or(1)
}

fn solve(prepared: &Prepared, control: &dyn Control) -> ResultRecord {
    let wanted = vec![true; prepared.instances.len()];
    linform_engine::solve(prepared, &wanted, Options::default(), control, &Silent)
}

fn is_left_open(claim: &ClaimRecord) -> bool {
    match &claim.finding {
        Finding::Unsettled(unsettled) => unsettled.stop == StopKind::Interrupt,
        _ => false,
    }
}

/// A record of stopped work: every claim is decided as without the stop, or left open.
fn assert_no_wrong_verdict(name: &str, calls: u64, stopped: &ResultRecord, full: &ResultRecord) {
    assert_eq!(
        stopped.claims.len(),
        full.claims.len(),
        "{name}, {calls} calls"
    );
    for (found, expected) in stopped.claims.iter().zip(&full.claims) {
        assert!(
            found == expected || is_left_open(found),
            "{name}, {calls} calls: {}{:?}: {:#?}",
            found.name,
            found.index,
            found.finding
        );
    }
    for primitive in &stopped.primitives {
        assert!(
            full.primitives.contains(primitive),
            "{name}, {calls} calls: {}",
            primitive.element
        );
    }
    assert_eq!(read_json(&json(stopped)).unwrap().record, *stopped);
}

/// Every verdict, a primitive, and a number that makes several specs.
fn small_spec(number: u64) -> String {
    format!(
        r#"
[ring]
variable = "t"
constants = ["c"]
generators = ["q", "q'"]
[ring.derivative]
"q" = "q'"
"q'" = "t*q + 2*q^3"
[law.F]
log_derivative = "q'^2 - t*q^2 - q^4"
[family.a]
rules = ["a[0] = q", "a[1] = q' + q*u[0]", "a[2] = t*a[0] + a[1]*u[0] - a[0]*u[1]"]
[family.u]
rules = ["u[0] = ratio(F,1)", "u[j]' = -a[0]*a[j] for 1 <= j <= 2"]
primitive_terms = "ratio(F,n) for n = 1..j+1"
[[claim]]
name = "holds"
for = "j = 0..2"
target = "u[j]"
terms = "ratio(F,n) for n = 1..j+1"
[[claim]]
name = "refuted"
target = "u[1]*u[1]"
terms = "ratio(F,n) for n = 1..6"
[[claim]]
name = "rational"
target = "q"
terms = ["(t + c + {number})*q", "q'^2"]
[[claim]]
name = "family"
target = "c*q"
terms = ["q", "t*q", "q'"]
[[claim]]
name = "primitive"
derivative = "D(t^2*q + c)"
terms = ["q", "1", "t*q"]
"#
    )
}

#[test]
fn work_stopped_at_any_call_leaves_claims_open_and_no_wrong_verdict() {
    let (name, text) = ("small.toml", small_spec(1));
    let prepared = prepared(name, text);
    let counter = Counting::new(u64::MAX, 20_000_000);
    let full = solve(&prepared, &counter);
    let total = u64::MAX - counter.left();
    assert!(!full.claims.iter().any(is_left_open));
    let stride = (total / rounds(60)).max(1);
    for calls in (0..=total).step_by(stride as usize) {
        let stopped = solve(&prepared, &Counting::new(calls, 20_000_000));
        assert_no_wrong_verdict(name, calls, &stopped, &full);
        assert!(
            verify(&stopped, &Unlimited).unwrap().is_confirmed(),
            "{calls} calls"
        );
    }
}

#[test]
fn a_check_stopped_at_any_call_rejects_nothing() {
    let (name, text) = ("small.toml", small_spec(2));
    let record = solve(&prepared(name, text), &Unlimited);
    let counter = Counting::new(u64::MAX, 20_000_000);
    assert!(verify(&record, &counter).unwrap().is_confirmed());
    let total = u64::MAX - counter.left();
    let stride = (total / rounds(60)).max(1);
    for calls in (0..total).step_by(stride as usize) {
        let verification = verify(&record, &Counting::new(calls, 20_000_000)).unwrap();
        assert_eq!(
            verification.stopped,
            Some(Stop::Interrupted),
            "{calls} calls"
        );
        assert!(
            verification.problems.is_empty(),
            "{calls} calls: {:?}",
            verification.problems
        );
        let rejected = |outcome: &linform_engine::CheckOutcome| {
            matches!(outcome, linform_engine::CheckOutcome::Rejected(_))
        };
        assert!(
            !verification
                .claims
                .iter()
                .any(|check| rejected(&check.outcome)),
            "{calls} calls"
        );
    }
}

#[test]
fn ready_specs_stopped_at_random_calls_have_no_wrong_verdict() {
    let mut random = SplitMix::new(0x53_544F_5050_4544);
    for path in specs() {
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        let prepared = prepared(&name, fs::read_to_string(&path).unwrap());
        let counter = Counting::new(u64::MAX, 20_000_000);
        let full = solve(&prepared, &counter);
        let total = u64::MAX - counter.left();
        for _ in 0..rounds(1) {
            // Few calls and many alike.
            let calls = random.next_word() % (total >> (random.next_word() % 10)).max(1);
            let stopped = solve(&prepared, &Counting::new(calls, 20_000_000));
            assert_no_wrong_verdict(&name, calls, &stopped, &full);
        }
    }
}

/// Pieces that mean something in a spec.
const PIECES: [&str; 36] = [
    "0",
    "1",
    "9",
    "-",
    "+",
    "*",
    "/",
    "^",
    "(",
    ")",
    "[",
    "]",
    "\"",
    "'",
    ",",
    "=",
    "..",
    ">=",
    "\n",
    " for ",
    "n",
    "j",
    "t",
    "q",
    "D(",
    "ratio(",
    "sum(",
    "minor(",
    "expect = \"refuted\"\n",
    "[[claim]]\n",
    "derivative",
    "target",
    "coefficients = \"rational\"\n",
    "é",
    "\u{0}",
    "constants",
];

fn damaged(text: &str, random: &mut SplitMix) -> String {
    let mut bytes = text.as_bytes().to_vec();
    for _ in 0..1 + random.next_word() % 4 {
        let mut below = |bound: usize| (random.next_word() % bound.max(1) as u64) as usize;
        let place = below(bytes.len());
        let length = below(12).min(bytes.len() - place);
        match below(6) {
            0 if !bytes.is_empty() => bytes[place] = below(256) as u8,
            1 => drop(bytes.drain(place..place + length)),
            2 => {
                let piece = PIECES[below(PIECES.len())].bytes();
                drop(bytes.splice(place..place, piece));
            }
            3 => {
                let piece = PIECES[below(PIECES.len())].bytes();
                drop(bytes.splice(place..place + length.min(2), piece));
            }
            4 => {
                let copy = bytes[place..place + length].to_vec();
                let target = below(bytes.len());
                drop(bytes.splice(target..target, copy));
            }
            _ => {
                // One digit or operator in place of another.
                let kinds: [&[u8]; 2] = [b"0123456789", b"+-*/^"];
                let kind = kinds[below(2)];
                let found = (place..bytes.len()).find(|&at| kind.contains(&bytes[at]));
                if let Some(at) = found {
                    bytes[at] = kind[below(kind.len())];
                }
            }
        }
    }
    String::from_utf8_lossy(&bytes).into_owned()
}

/// Reads, unfolds, decides under limits, and writes; whether it got as far as a record.
fn run_within_limits(text: String) -> bool {
    let mut load = |_: &str| Err("there are no other files".to_owned());
    let Ok(model) = linform_spec::parse("damaged.toml", text, &mut load) else {
        return false;
    };
    let limits = PrepareLimits {
        instances: 100,
        nodes: 20_000,
        depth: 1000,
        steps: 100_000,
    };
    let control = Counting::new(20_000, 5_000);
    let Ok(prepared) = prepare_within(model, Some(3), limits, &control) else {
        return false;
    };
    let record = solve(&prepared, &control);
    let settled = control.left() > 0;
    assert_eq!(read_json(&json(&record)).unwrap().record, record);
    let options = TextOptions {
        colour: true,
        unicode: true,
        width: 60,
    };
    for rendered in [self::text(&record, &options), latex(&record), csv(&record)] {
        assert!(!rendered.is_empty());
    }
    if settled {
        let check = Counting::new(200_000, 50_000);
        let verification = verify(&record, &check).unwrap();
        assert!(
            verification.stopped.is_some() || verification.is_confirmed(),
            "{:#?}",
            verification
        );
    }
    true
}

#[test]
fn specs_with_damaged_bytes_end_in_a_message_or_a_confirmed_record() {
    let texts: Vec<String> = specs()
        .iter()
        .map(|path| fs::read_to_string(path).unwrap())
        .collect();
    let mut records = 0;
    let factor = rounds(1);
    for round in 0..rounds(40) {
        let mut random = SplitMix::new(round ^ factor << 32);
        let word = random.next_word();
        let text = if word.is_multiple_of(2) {
            small_spec(word % 5)
        } else {
            texts[(word / 2 % texts.len() as u64) as usize].clone()
        };
        let text = damaged(&text, &mut random);
        let result = std::panic::catch_unwind(|| run_within_limits(text.clone()));
        match result {
            Ok(solved) => records += u64::from(solved),
            Err(_) => panic!("round {round} of factor {factor} fails for\n{text}"),
        }
    }
    // Damage that nothing survives would test the reader alone.
    assert!(records > 0);
}
