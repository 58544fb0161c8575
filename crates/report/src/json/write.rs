//! A record as JSON.

use super::digest::{self, digest};
use super::layout::pretty;
use super::node::Node;
use linform_engine::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, FormTerm, GradingRecord,
    IndependenceRecord, KnownBy, PrimitiveRecord, Refutation, ResultRecord, SpecRecord,
    SystemRecord,
};

/// The version of the format; readers refuse any other.
pub(crate) const FORMAT: &str = "linform-result/1";

/// The record as a JSON document, the same bytes for the same record.
///
/// The last field, `digest`, is the BLAKE3 hash of the canonical text of all others: sorted fields, no spaces, as
/// Python's `json.dumps(value, sort_keys=True, separators=(",", ":"), ensure_ascii=False)` gives it.
pub fn json(record: &ResultRecord) -> String {
    let mut node = document(record);
    let hash = digest(&node);
    if let Node::Object(fields) = &mut node {
        fields.push((digest::FIELD.to_owned(), Node::Text(hash)));
    }
    pretty(&node)
}

fn document(record: &ResultRecord) -> Node {
    Node::object([
        ("format", Node::text(FORMAT)),
        ("program", Node::text(&record.program)),
        ("spec", spec(&record.spec)),
        ("claims", Node::list(&record.claims, claim)),
        ("gradings", Node::list(&record.gradings, grading)),
        ("primitives", Node::list(&record.primitives, primitive)),
    ])
}

fn spec(spec: &SpecRecord) -> Node {
    let sources = Node::list(&spec.sources, |source| {
        Node::object([
            ("path", Node::text(&source.path)),
            ("text", Node::text(&source.text)),
        ])
    });
    let mut fields = vec![
        ("title", spec.title.as_ref().map_or(Node::Null, Node::text)),
        ("blake3", Node::text(&spec.blake3)),
    ];
    if let Some(through) = spec.through {
        fields.push(("through", Node::integer(through)));
    }
    fields.push(("sources", sources));
    Node::Object(
        fields
            .into_iter()
            .map(|(name, node)| (name.to_owned(), node))
            .collect(),
    )
}

fn grading(grading: &GradingRecord) -> Node {
    let weights = grading.weights.iter();
    Node::object([
        ("modulus", Node::text(&grading.modulus)),
        ("derivation", Node::text(&grading.derivation)),
        (
            "weights",
            Node::Object(
                weights
                    .map(|(name, weight)| (name.clone(), Node::text(weight)))
                    .collect(),
            ),
        ),
    ])
}

fn primitive(primitive: &PrimitiveRecord) -> Node {
    Node::object([
        ("element", Node::text(&primitive.element)),
        ("system", system(&primitive.system)),
        ("form", form(&primitive.form)),
    ])
}

fn system(system: &SystemRecord) -> Node {
    Node::object([
        ("method", Node::text(&system.method)),
        ("rows", Node::count(system.rows)),
        ("columns", Node::count(system.columns)),
        ("solver", Node::text(&system.solver)),
    ])
}

fn form(form: &[FormTerm]) -> Node {
    Node::list(form, |part| {
        Node::object([
            ("term", Node::text(&part.term)),
            ("coefficient", Node::text(part.coefficient.to_string())),
        ])
    })
}

fn claim(claim: &ClaimRecord) -> Node {
    let index = claim.index.iter();
    let index = index.map(|(name, value)| (name.clone(), Node::integer(*value)));
    let found: &[FormTerm] = match &claim.finding {
        Finding::Holds { form } => form,
        _ => &[],
    };
    let evidence = match &claim.finding {
        Finding::Unsettled(_) => "none",
        _ => "proved",
    };
    let mut node = Node::object([
        ("name", Node::text(&claim.name)),
        ("index", Node::Object(index.collect())),
        ("verdict", Node::text(claim.finding.verdict().word())),
        ("system", claim.system.as_ref().map_or(Node::Null, system)),
        ("form", form(found)),
        ("evidence", Node::object([("kind", Node::text(evidence))])),
        ("target", Node::text(&claim.target)),
        ("known_by", Node::text(known_by_word(claim.known_by))),
        ("terms", Node::texts(&claim.terms)),
        (
            "coefficients",
            Node::text(coefficients_word(claim.coefficients)),
        ),
        ("expected", Node::text(claim.expected.word())),
    ]);
    if let Node::Object(fields) = &mut node {
        let mut more = |name: &str, node: Node| fields.push((name.to_owned(), node));
        match &claim.finding {
            Finding::Holds { .. } => {}
            Finding::Refuted(refutation) => more("certificate", certificate(refutation)),
            Finding::Undetermined {
                particular,
                kernel,
                shift,
            } => {
                more("particular", form(particular));
                more("kernel", Node::list(kernel, |vector| form(vector)));
                if let Some(shift) = shift {
                    more("shift", form(shift));
                }
            }
            Finding::Unsettled(unsettled) => more(
                "limit",
                Node::object([
                    ("kind", Node::text(unsettled.stop.word())),
                    ("reason", Node::text(&unsettled.reason)),
                ]),
            ),
        }
    }
    node
}

/// The name of a known-by in files.
pub(crate) fn known_by_word(known_by: KnownBy) -> &'static str {
    match known_by {
        KnownBy::Value => "value",
        KnownBy::Derivative => "derivative",
    }
}

/// The name of a kind of coefficients in files: the word of the spec.
pub(crate) fn coefficients_word(kind: CoefficientKind) -> &'static str {
    match kind {
        CoefficientKind::Polynomial => "polynomial",
        CoefficientKind::Rational => "rational",
        CoefficientKind::Constant => "constant",
    }
}

fn certificate(refutation: &Refutation) -> Node {
    match refutation {
        Refutation::Contradiction { rows, value } => Node::object([
            ("kind", Node::text("left kernel")),
            ("rows", Node::list(rows, certificate_row)),
            ("value", Node::text(value.to_string())),
        ]),
        Refutation::OtherCoefficients {
            form: only,
            independence: witness,
        } => {
            let rational = only.iter().any(|part| !part.coefficient.is_polynomial());
            Node::object([
                ("kind", Node::text("unique solution")),
                (if rational { "rational_form" } else { "form" }, form(only)),
                ("independence", independence(witness)),
            ])
        }
        Refutation::NotAPrimitive {
            coefficients,
            derivatives,
            independence: witness,
        } => Node::object([
            ("kind", Node::text("no primitive")),
            ("coefficients", form(coefficients)),
            ("derivatives", form(derivatives)),
            ("independence", independence(witness)),
        ]),
    }
}

fn certificate_row(row: &CertificateRow) -> Node {
    Node::object([
        ("monomial", Node::text(&row.monomial)),
        ("multiplier", Node::text(row.multiplier.to_string())),
    ])
}

/// Primes and residues exceed 53 bits, which many JSON readers round: they are strings.
fn independence(witness: &IndependenceRecord) -> Node {
    let point = witness.point.iter();
    Node::object([
        ("rows", Node::texts(&witness.rows)),
        ("prime", Node::text(witness.prime.to_string())),
        (
            "point",
            Node::Object(
                point
                    .map(|(name, value)| (name.clone(), Node::text(value.to_string())))
                    .collect(),
            ),
        ),
    ])
}
