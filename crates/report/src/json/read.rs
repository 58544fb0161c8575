//! A record from JSON.

use super::digest::{self, digest};
use super::error::ReadError;
use super::names::{Names, base_names};
use super::node::{self, Node};
use super::place::Place;
use super::write::FORMAT;
use crate::sanitise::excerpt;
use indexmap::IndexMap;
use linform_engine::published::Coefficient;
use linform_engine::record::{
    CertificateRow, ClaimRecord, CoefficientKind, Finding, FormTerm, GradingRecord,
    IndependenceRecord, KnownBy, PrimitiveRecord, Refutation, ResultRecord, SourceRecord,
    SpecRecord, StopKind, SystemRecord, Unsettled, Verdict,
};

/// A result file that was read.
#[derive(Clone, Debug, PartialEq)]
pub struct Read {
    /// The record.
    pub record: ResultRecord,
    /// Whether the file is as it was written.
    pub digest: Digest,
    /// The paths of the fields that the file lacks and that a check needs, such as `spec.sources`. In the record, texts
    /// among them are empty, lists have no entries, and words have the value that a spec without them means. At most 1000
    /// paths are listed.
    pub missing: Vec<String>,
    /// What was read otherwise than it stands: unknown fields, kinds of evidence that this version does not check.
    pub notes: Vec<String>,
}

/// Whether a file is as it was written.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Digest {
    /// The digest agrees with the rest.
    Agrees,
    /// The file has none: it was written by hand, or by another program.
    Absent,
    /// Something was changed after the file was written.
    Differs {
        /// The digest in the file.
        stated: String,
        /// The digest of the rest of the file.
        computed: String,
    },
}

/// The longest file that is read, in bytes.
pub const LARGEST_FILE: usize = 256 << 20;

/// Reads the JSON of a result.
///
/// A file with nothing but the fields of the published contract is read too; what it lacks is listed. A file whose digest
/// does not agree with its contents is read and the disagreement reported, so that a check can name the claim that
/// was changed.
///
/// # Errors
///
/// The text is longer than [`LARGEST_FILE`], not JSON, nested too deeply, of another version of the format, or a field
/// has a value that it cannot have.
pub fn read_json(text: &str) -> Result<Read, ReadError> {
    if text.len() > LARGEST_FILE {
        return Err(ReadError::new(
            format!(
                "the file has {} bytes, more than {LARGEST_FILE}",
                text.len()
            ),
            "the document",
            "split the spec into several files",
        ));
    }
    let document = node::parse(text.trim_start_matches('\u{feff}')).map_err(not_json)?;
    let root = Place::root(&document);
    let mut reader = Reader::default();
    let record = reader.document(root)?;
    let digest = match root.optional(digest::FIELD)? {
        None => Digest::Absent,
        Some(stated) => {
            let (stated, computed) = (stated.string()?, digest(&document));
            if stated == computed {
                Digest::Agrees
            } else {
                Digest::Differs { stated, computed }
            }
        }
    };
    Ok(Read {
        record,
        digest,
        missing: reader.missing,
        notes: reader.notes,
    })
}

fn not_json(error: serde_json::Error) -> ReadError {
    let (line, column) = (error.line(), error.column());
    let what = error.to_string();
    // The library appends the place to its message; here the place is a part of its own.
    let what = what
        .split(" at line ")
        .next()
        .unwrap_or_default()
        .to_owned();
    ReadError::new(
        what,
        format!("line {line}, column {column}"),
        "the file has to be JSON as `linform solve --format json` writes it",
    )
}

/// Most entries of each list of remarks: a file that lacks something everywhere says so often enough.
const MOST_REMARKS: usize = 1000;

fn remark(list: &mut Vec<String>, text: impl FnOnce() -> String) {
    if list.len() < MOST_REMARKS {
        list.push(text());
    }
}

#[derive(Default)]
struct Reader {
    names: Names,
    missing: Vec<String>,
    notes: Vec<String>,
}

const DOCUMENT: &[&str] = &[
    "format",
    "program",
    "spec",
    "claims",
    "gradings",
    "primitives",
    digest::FIELD,
];
const CLAIM: &[&str] = &[
    "name",
    "index",
    "verdict",
    "system",
    "form",
    "evidence",
    "target",
    "known_by",
    "terms",
    "coefficients",
    "expected",
    "certificate",
    "particular",
    "kernel",
    "shift",
    "limit",
];

impl Reader {
    /// Notes every field that is not in the list.
    fn known(&mut self, place: &Place<'_, '_>, known: &[&str]) -> Result<(), ReadError> {
        for (name, _) in place.fields()? {
            if !known.contains(&name.as_str()) {
                remark(&mut self.notes, || {
                    format!(
                        "the field {} is unknown and was not read",
                        place.path_of(name)
                    )
                });
            }
        }
        Ok(())
    }

    /// What `read` makes of a field, or the default, with a remark, if it is missing.
    fn or_default<'n, T: Default>(
        &mut self,
        place: &Place<'n, '_>,
        field: &str,
        read: impl FnOnce(&mut Self, Place<'n, '_>) -> Result<T, ReadError>,
    ) -> Result<T, ReadError> {
        self.or(place, field, T::default(), read)
    }

    fn or<'n, T>(
        &mut self,
        place: &Place<'n, '_>,
        field: &str,
        otherwise: T,
        read: impl FnOnce(&mut Self, Place<'n, '_>) -> Result<T, ReadError>,
    ) -> Result<T, ReadError> {
        match place.optional(field)? {
            Some(place) => read(self, place),
            None => {
                remark(&mut self.missing, || place.path_of(field));
                Ok(otherwise)
            }
        }
    }

    fn document(&mut self, root: Place<'_, '_>) -> Result<ResultRecord, ReadError> {
        let format = root.required("format")?;
        if format.text()? != FORMAT {
            return Err(ReadError::new(
                format!(
                    "the format is {}, this program reads {FORMAT:?}",
                    excerpt(format.text()?)
                ),
                "format",
                "read it with the version of the program that wrote it, or solve the spec again",
            ));
        }
        self.known(&root, DOCUMENT)?;
        let empty = SpecRecord {
            title: None,
            through: None,
            blake3: String::new(),
            sources: Vec::new(),
        };
        let spec = self.or(&root, "spec", empty, Self::spec)?;
        self.names = match base_names(&spec, root.node) {
            Ok(names) => names,
            Err(reason) => {
                self.notes.push(reason);
                Names::scan(root.node)
            }
        };
        Ok(ResultRecord {
            program: self.or_default(&root, "program", |_, place| place.string())?,
            spec,
            gradings: self.or_default(&root, "gradings", |reader, place| {
                place.list(|item| reader.grading(item))
            })?,
            primitives: self.or_default(&root, "primitives", |reader, place| {
                place.list(|item| reader.primitive(item))
            })?,
            claims: root.required("claims")?.list(|item| self.claim(item))?,
        })
    }

    fn spec(&mut self, place: Place<'_, '_>) -> Result<SpecRecord, ReadError> {
        self.known(&place, &["title", "blake3", "through", "sources"])?;
        Ok(SpecRecord {
            title: place
                .optional("title")?
                .map(|title| title.string())
                .transpose()?,
            through: place
                .optional("through")?
                .map(|through| through.integer())
                .transpose()?,
            blake3: self.or_default(&place, "blake3", |_, place| place.string())?,
            sources: self.or_default(&place, "sources", |reader, place| {
                place.list(|item| {
                    reader.known(&item, &["path", "text"])?;
                    Ok(SourceRecord {
                        path: item.required("path")?.string()?,
                        text: item.required("text")?.string()?,
                    })
                })
            })?,
        })
    }

    fn grading(&mut self, place: Place<'_, '_>) -> Result<GradingRecord, ReadError> {
        self.known(&place, &["modulus", "derivation", "weights"])?;
        Ok(GradingRecord {
            modulus: place.required("modulus")?.string()?,
            derivation: place.required("derivation")?.string()?,
            weights: place.required("weights")?.map(|weight| weight.string())?,
        })
    }

    fn primitive(&mut self, place: Place<'_, '_>) -> Result<PrimitiveRecord, ReadError> {
        self.known(&place, &["element", "system", "form"])?;
        Ok(PrimitiveRecord {
            element: place.required("element")?.string()?,
            system: self.system(place.required("system")?)?,
            form: self.form(place.required("form")?)?,
        })
    }

    fn system(&mut self, place: Place<'_, '_>) -> Result<SystemRecord, ReadError> {
        self.known(&place, &["method", "rows", "columns", "solver"])?;
        Ok(SystemRecord {
            method: self.or_default(&place, "method", |_, place| place.string())?,
            solver: self.or_default(&place, "solver", |_, place| place.string())?,
            rows: self.or_default(&place, "rows", |_, place| place.count())?,
            columns: self.or_default(&place, "columns", |_, place| place.count())?,
        })
    }

    fn form(&mut self, place: Place<'_, '_>) -> Result<Vec<FormTerm>, ReadError> {
        place.list(|item| {
            self.known(&item, &["term", "coefficient"])?;
            Ok(FormTerm {
                term: item.required("term")?.string()?,
                coefficient: self.coefficient(item.required("coefficient")?)?,
            })
        })
    }

    fn coefficient(&self, place: Place<'_, '_>) -> Result<Coefficient, ReadError> {
        self.names
            .coefficient(place.text()?)
            .map_err(|reason| place.error(reason))
    }

    fn claim(&mut self, place: Place<'_, '_>) -> Result<ClaimRecord, ReadError> {
        self.known(&place, CLAIM)?;
        let verdicts = [
            Verdict::Holds,
            Verdict::Refuted,
            Verdict::Undetermined,
            Verdict::Unsettled,
        ]
        .map(|verdict| (verdict.word(), verdict));
        let verdict = place.required("verdict")?.choice(&verdicts)?;
        let known_by = [
            ("value", KnownBy::Value),
            ("derivative", KnownBy::Derivative),
        ];
        let coefficients = [
            ("polynomial", CoefficientKind::Polynomial),
            ("rational", CoefficientKind::Rational),
            ("constant", CoefficientKind::Constant),
        ];
        self.evidence(&place, verdict)?;
        let system = match place.optional("system")? {
            Some(system) => Some(self.system(system)?),
            None => {
                if verdict != Verdict::Unsettled {
                    remark(&mut self.missing, || place.path_of("system"));
                }
                None
            }
        };
        Ok(ClaimRecord {
            name: place.required("name")?.string()?,
            index: self.or_default(&place, "index", |_, place| {
                place.map(|value| value.integer())
            })?,
            target: self.or_default(&place, "target", |_, place| place.string())?,
            known_by: self.or(&place, "known_by", KnownBy::Value, |_, place| {
                place.choice(&known_by)
            })?,
            terms: self.or_default(&place, "terms", |_, place| place.list(|term| term.string()))?,
            coefficients: self.or(
                &place,
                "coefficients",
                CoefficientKind::Polynomial,
                |_, place| place.choice(&coefficients),
            )?,
            expected: self.or(&place, "expected", Verdict::Holds, |_, place| {
                place.choice(&verdicts)
            })?,
            system,
            finding: self.finding(&place, verdict)?,
        })
    }

    fn evidence(&mut self, place: &Place<'_, '_>, verdict: Verdict) -> Result<(), ReadError> {
        let Some(evidence) = place.optional("evidence")? else {
            remark(&mut self.missing, || place.path_of("evidence"));
            return Ok(());
        };
        let kind = evidence.required("kind")?;
        let word = kind.text()?;
        if word != "proved" && verdict != Verdict::Unsettled {
            remark(&mut self.notes, || {
                format!(
                    "{} is {}; this version knows proofs only and takes the claim as one to prove",
                    kind.path(),
                    excerpt(word)
                )
            });
        }
        Ok(())
    }

    fn finding(&mut self, place: &Place<'_, '_>, verdict: Verdict) -> Result<Finding, ReadError> {
        if verdict != Verdict::Holds
            && let Some(form) = place.optional("form")?
            && *form.node != Node::List(Vec::new())
        {
            remark(&mut self.notes, || {
                format!(
                    "{} was not read: a claim that is {} has no form",
                    form.path(),
                    verdict.word()
                )
            });
        }
        match verdict {
            Verdict::Holds => Ok(Finding::Holds {
                form: self.form(place.required("form")?)?,
            }),
            Verdict::Refuted => match place.optional("certificate")? {
                Some(certificate) => Ok(Finding::Refuted(self.certificate(certificate)?)),
                None => {
                    remark(&mut self.missing, || place.path_of("certificate"));
                    Ok(Finding::Refuted(Refutation::Contradiction {
                        rows: Vec::new(),
                        value: self.names.zero(),
                    }))
                }
            },
            Verdict::Undetermined => Ok(Finding::Undetermined {
                particular: self.or_default(place, "particular", Self::form)?,
                kernel: self.or_default(place, "kernel", |reader, place| {
                    place.list(|vector| reader.form(vector))
                })?,
                shift: match place.optional("shift")? {
                    Some(shift) => Some(self.form(shift)?),
                    None => None,
                },
            }),
            Verdict::Unsettled => self
                .or(place, "limit", unknown_limit(), Self::limit)
                .map(Finding::Unsettled),
        }
    }

    fn limit(&mut self, place: Place<'_, '_>) -> Result<Unsettled, ReadError> {
        self.known(&place, &["kind", "reason"])?;
        let kinds = [
            StopKind::Time,
            StopKind::Memory,
            StopKind::Interrupt,
            StopKind::Size,
            StopKind::Degree,
            StopKind::Prerequisite,
        ]
        .map(|kind| (kind.word(), kind));
        Ok(Unsettled {
            stop: place.required("kind")?.choice(&kinds)?,
            reason: self.or_default(&place, "reason", |_, place| place.string())?,
        })
    }

    fn certificate(&mut self, place: Place<'_, '_>) -> Result<Refutation, ReadError> {
        #[derive(Clone, Copy)]
        enum Kind {
            LeftKernel,
            Unique,
            NoPrimitive,
        }
        let kinds = [
            ("left kernel", Kind::LeftKernel),
            ("unique solution", Kind::Unique),
            ("no primitive", Kind::NoPrimitive),
        ];
        match place.required("kind")?.choice(&kinds)? {
            Kind::LeftKernel => {
                self.known(&place, &["kind", "rows", "value"])?;
                Ok(Refutation::Contradiction {
                    rows: place.required("rows")?.list(|row| {
                        self.known(&row, &["monomial", "multiplier"])?;
                        Ok(CertificateRow {
                            monomial: row.required("monomial")?.string()?,
                            multiplier: self.coefficient(row.required("multiplier")?)?,
                        })
                    })?,
                    value: self.coefficient(place.required("value")?)?,
                })
            }
            Kind::Unique => {
                self.known(&place, &["kind", "form", "rational_form", "independence"])?;
                let form = match place.optional("rational_form")? {
                    Some(form) => self.form(form)?,
                    None => self.form(place.required("form")?)?,
                };
                Ok(Refutation::OtherCoefficients {
                    form,
                    independence: self.independence(place.required("independence")?)?,
                })
            }
            Kind::NoPrimitive => {
                self.known(
                    &place,
                    &["kind", "coefficients", "derivatives", "independence"],
                )?;
                Ok(Refutation::NotAPrimitive {
                    coefficients: self.form(place.required("coefficients")?)?,
                    derivatives: self.form(place.required("derivatives")?)?,
                    independence: self.independence(place.required("independence")?)?,
                })
            }
        }
    }

    fn independence(&mut self, place: Place<'_, '_>) -> Result<IndependenceRecord, ReadError> {
        self.known(&place, &["rows", "prime", "point"])?;
        Ok(IndependenceRecord {
            rows: place.required("rows")?.list(|row| row.string())?,
            prime: place.required("prime")?.word()?,
            point: place
                .required("point")?
                .map::<u64, IndexMap<String, u64>>(|value| value.word())?,
        })
    }
}

fn unknown_limit() -> Unsettled {
    Unsettled {
        stop: StopKind::Size,
        reason: String::new(),
    }
}
