//! JSON as a tree: what is written, what is read, and what the digest is taken of.

use serde::de::{DeserializeSeed, Deserializer, Error, MapAccess, SeqAccess, Visitor};
use std::cell::Cell;
use std::collections::HashSet;
use std::fmt;

/// A JSON value. Objects keep the order of their fields and have no field twice.
#[derive(Clone, Debug, PartialEq)]
pub(crate) enum Node {
    Null,
    Bool(bool),
    Signed(i64),
    Unsigned(u64),
    /// Any other number: none is written here, but a file of a later version may hold some.
    Real(f64),
    Text(String),
    List(Vec<Node>),
    Object(Vec<(String, Node)>),
}

impl Node {
    pub(crate) fn text(text: impl Into<String>) -> Node {
        Node::Text(text.into())
    }

    pub(crate) fn texts(texts: &[String]) -> Node {
        Node::List(texts.iter().cloned().map(Node::Text).collect())
    }

    pub(crate) fn count(count: usize) -> Node {
        Node::Unsigned(count as u64)
    }

    /// Integers that are not negative are unsigned, as they are when read.
    pub(crate) fn integer(value: i64) -> Node {
        u64::try_from(value).map_or(Node::Signed(value), Node::Unsigned)
    }

    pub(crate) fn list<T>(items: &[T], mut node: impl FnMut(&T) -> Node) -> Node {
        Node::List(items.iter().map(&mut node).collect())
    }

    pub(crate) fn object<const N: usize>(fields: [(&str, Node); N]) -> Node {
        Node::Object(
            fields
                .into_iter()
                .map(|(name, node)| (name.to_owned(), node))
                .collect(),
        )
    }

    /// What this is, for messages.
    pub(crate) fn kind(&self) -> &'static str {
        match self {
            Node::Null => "null",
            Node::Bool(_) => "a truth value",
            Node::Signed(_) | Node::Unsigned(_) | Node::Real(_) => "a number",
            Node::Text(_) => "a string",
            Node::List(_) => "a list",
            Node::Object(_) => "an object",
        }
    }
}

/// Most values that one file may hold; together with the limit on its length this bounds the memory of a tree.
const MOST_NODES: usize = 8_000_000;
/// Most fields of one object: more than any ring has symbols.
const MOST_FIELDS: usize = 10_000;

/// Reads a text; nesting is bounded by the JSON library.
pub(crate) fn parse(text: &str) -> Result<Node, serde_json::Error> {
    let nodes = Cell::new(0);
    let mut input = serde_json::Deserializer::from_str(text);
    let node = Reader { nodes: &nodes }.deserialize(&mut input)?;
    input.end()?;
    Ok(node)
}

#[derive(Clone, Copy)]
struct Reader<'a> {
    nodes: &'a Cell<usize>,
}

impl<'de> DeserializeSeed<'de> for Reader<'_> {
    type Value = Node;

    fn deserialize<D: Deserializer<'de>>(self, input: D) -> Result<Node, D::Error> {
        self.nodes.set(self.nodes.get() + 1);
        if self.nodes.get() > MOST_NODES {
            return Err(D::Error::custom(format!("more than {MOST_NODES} values")));
        }
        input.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for Reader<'_> {
    type Value = Node;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a JSON value")
    }

    fn visit_unit<E: Error>(self) -> Result<Node, E> {
        Ok(Node::Null)
    }

    fn visit_bool<E: Error>(self, value: bool) -> Result<Node, E> {
        Ok(Node::Bool(value))
    }

    fn visit_i64<E: Error>(self, value: i64) -> Result<Node, E> {
        Ok(match u64::try_from(value) {
            Ok(value) => Node::Unsigned(value),
            Err(_) => Node::Signed(value),
        })
    }

    fn visit_u64<E: Error>(self, value: u64) -> Result<Node, E> {
        Ok(Node::Unsigned(value))
    }

    fn visit_f64<E: Error>(self, value: f64) -> Result<Node, E> {
        Ok(Node::Real(value))
    }

    fn visit_str<E: Error>(self, value: &str) -> Result<Node, E> {
        Ok(Node::Text(value.to_owned()))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Node, A::Error> {
        let mut list = Vec::new();
        while let Some(item) = items.next_element_seed(self)? {
            list.push(item);
        }
        Ok(Node::List(list))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Node, A::Error> {
        let mut fields: Vec<(String, Node)> = Vec::new();
        let mut seen: HashSet<String> = HashSet::new();
        while let Some(name) = entries.next_key::<String>()? {
            if !seen.insert(name.clone()) {
                return Err(A::Error::custom(format!("the field {name:?} stands twice")));
            }
            if seen.len() > MOST_FIELDS {
                return Err(A::Error::custom(format!(
                    "an object with more than {MOST_FIELDS} fields"
                )));
            }
            fields.push((name, entries.next_value_seed(self)?));
        }
        Ok(Node::Object(fields))
    }
}
