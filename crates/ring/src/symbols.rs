//! The names of the symbols of a ring.

use std::ops::Range;

/// The symbols of a ring: generators, then the variable (if any), then the constants.
///
/// The position in this order is the index of a symbol in a [`Monomial`](crate::Monomial).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Symbols {
    names: Vec<String>,
    generators: usize,
    has_variable: bool,
}

impl Symbols {
    /// The symbols with the given names.
    pub fn new(
        generators: Vec<String>,
        variable: Option<String>,
        constants: Vec<String>,
    ) -> Symbols {
        let (count, has_variable) = (generators.len(), variable.is_some());
        let mut names = generators;
        names.extend(variable);
        names.extend(constants);
        Symbols {
            names,
            generators: count,
            has_variable,
        }
    }

    /// The number of symbols.
    pub fn len(&self) -> usize {
        self.names.len()
    }

    /// Are there no symbols, so that the polynomials are the rational numbers?
    pub fn is_empty(&self) -> bool {
        self.names.is_empty()
    }

    /// The number of generators; their indices are `0..generators()`.
    pub fn generators(&self) -> usize {
        self.generators
    }

    /// The index of the variable, if there is one.
    pub fn variable(&self) -> Option<usize> {
        self.has_variable.then_some(self.generators)
    }

    /// The indices of the constants.
    pub fn constants(&self) -> Range<usize> {
        self.generators + usize::from(self.has_variable)..self.names.len()
    }

    /// The name of a symbol.
    ///
    /// # Panics
    ///
    /// If there is no symbol with this index.
    pub fn name(&self, index: usize) -> &str {
        &self.names[index]
    }

    /// The index of the symbol with the given name.
    pub fn index_of(&self, name: &str) -> Option<usize> {
        self.names.iter().position(|candidate| candidate == name)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn symbols_are_numbered_generators_variable_constants() {
        let names = |list: &[&str]| list.iter().map(|s| s.to_string()).collect::<Vec<_>>();
        let symbols = Symbols::new(
            names(&["q", "q'"]),
            Some("t".into()),
            names(&["alpha", "b"]),
        );
        assert_eq!(
            (symbols.len(), symbols.generators(), symbols.variable()),
            (5, 2, Some(2))
        );
        assert_eq!(symbols.constants(), 3..5);
        assert_eq!(symbols.index_of("b"), Some(4));
        assert_eq!(symbols.index_of("c"), None);
        let autonomous = Symbols::new(names(&["P"]), None, names(&["g2"]));
        assert_eq!(autonomous.variable(), None);
        assert_eq!(autonomous.constants(), 1..2);
    }
}
