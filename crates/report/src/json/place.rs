//! A value of a JSON tree together with its path, so that every complaint says where.

use super::error::ReadError;
use super::node::Node;
use crate::sanitise::excerpt;

const SHAPE_HELP: &str =
    "write the file again with `linform solve --format json`, or correct this field";

/// A value and the way to it.
#[derive(Clone, Copy)]
pub(crate) struct Place<'n, 'p> {
    pub(crate) node: &'n Node,
    step: Step<'n, 'p>,
}

#[derive(Clone, Copy)]
enum Step<'n, 'p> {
    Root,
    Field(&'p Place<'n, 'p>, &'p str),
    Item(&'p Place<'n, 'p>, usize),
}

impl<'n> Place<'n, '_> {
    pub(crate) fn root(node: &'n Node) -> Place<'n, 'n> {
        Place {
            node,
            step: Step::Root,
        }
    }

    /// The path, such as `claims[3].form[0]`.
    pub(crate) fn path(&self) -> String {
        match self.step {
            Step::Root => String::new(),
            Step::Item(parent, position) => format!("{}[{position}]", parent.path()),
            Step::Field(parent, name) => parent.path_of(name),
        }
    }

    /// The path of a field, also of one that is missing; a name that is not plain is quoted.
    pub(crate) fn path_of(&self, field: &str) -> String {
        let plain = field.len() < 40 && field.chars().all(|c| c.is_alphanumeric() || c == '_');
        match (self.path(), plain) {
            (path, true) if path.is_empty() => field.to_owned(),
            (path, true) => format!("{path}.{field}"),
            (path, false) => format!("{path}[{}]", excerpt(field)),
        }
    }

    pub(crate) fn error(&self, what: impl Into<String>) -> ReadError {
        let place = match self.path() {
            path if path.is_empty() => "the document".to_owned(),
            path => path,
        };
        ReadError::new(what, place, SHAPE_HELP)
    }

    fn unexpected(&self, wanted: &str) -> ReadError {
        self.error(format!("expected {wanted}, found {}", self.node.kind()))
    }

    /// The fields of an object, in the order of the file.
    pub(crate) fn fields(&self) -> Result<&'n [(String, Node)], ReadError> {
        match self.node {
            Node::Object(fields) => Ok(fields),
            _ => Err(self.unexpected("an object")),
        }
    }

    /// A field of an object, if it is there and not null.
    pub(crate) fn optional<'q>(
        &'q self,
        name: &'q str,
    ) -> Result<Option<Place<'n, 'q>>, ReadError> {
        let field = self.fields()?.iter().find(|(field, _)| field == name);
        Ok(field
            .filter(|(_, node)| *node != Node::Null)
            .map(|(_, node)| Place {
                node,
                step: Step::Field(self, name),
            }))
    }

    /// A field that has to be there.
    pub(crate) fn required<'q>(&'q self, name: &'q str) -> Result<Place<'n, 'q>, ReadError> {
        self.optional(name)?
            .ok_or_else(|| self.error(format!("the field {name:?} is missing")))
    }

    /// What `read` makes of the items of a list.
    pub(crate) fn list<T>(
        &self,
        mut read: impl FnMut(Place<'n, '_>) -> Result<T, ReadError>,
    ) -> Result<Vec<T>, ReadError> {
        let Node::List(items) = self.node else {
            return Err(self.unexpected("a list"));
        };
        items
            .iter()
            .enumerate()
            .map(|(position, node)| {
                read(Place {
                    node,
                    step: Step::Item(self, position),
                })
            })
            .collect()
    }

    /// What `read` makes of the fields of an object whose names are free.
    pub(crate) fn map<T, M: FromIterator<(String, T)>>(
        &self,
        mut read: impl FnMut(Place<'n, '_>) -> Result<T, ReadError>,
    ) -> Result<M, ReadError> {
        self.fields()?
            .iter()
            .map(|(name, node)| {
                let step = Step::Field(self, name);
                Ok((name.clone(), read(Place { node, step })?))
            })
            .collect()
    }

    pub(crate) fn text(&self) -> Result<&'n str, ReadError> {
        match self.node {
            Node::Text(text) => Ok(text),
            _ => Err(self.unexpected("a string")),
        }
    }

    pub(crate) fn string(&self) -> Result<String, ReadError> {
        self.text().map(str::to_owned)
    }

    pub(crate) fn integer(&self) -> Result<i64, ReadError> {
        match self.node {
            Node::Signed(value) => Ok(*value),
            Node::Unsigned(value) => {
                i64::try_from(*value).map_err(|_| self.error("the number is too large"))
            }
            _ => Err(self.unexpected("an integer")),
        }
    }

    pub(crate) fn count(&self) -> Result<usize, ReadError> {
        match self.node {
            Node::Unsigned(value) => {
                usize::try_from(*value).map_err(|_| self.error("the number is too large"))
            }
            _ => Err(self.unexpected("an integer that is not negative")),
        }
    }

    /// A word written as a string of decimal digits, or as a number.
    pub(crate) fn word(&self) -> Result<u64, ReadError> {
        match self.node {
            Node::Unsigned(value) => Ok(*value),
            Node::Text(text) if !text.starts_with('+') => text
                .parse()
                .map_err(|_| self.error("expected an integer below 2^64 in decimal digits")),
            _ => Err(self.unexpected("an integer")),
        }
    }

    /// One of several words.
    pub(crate) fn choice<T: Copy>(&self, choices: &[(&str, T)]) -> Result<T, ReadError> {
        let text = self.text()?;
        let found = choices.iter().find(|(word, _)| *word == text);
        found.map(|(_, value)| *value).ok_or_else(|| {
            let words: Vec<String> = choices
                .iter()
                .map(|(word, _)| format!("{word:?}"))
                .collect();
            self.error(format!("{} is none of {}", excerpt(text), words.join(", ")))
        })
    }
}
