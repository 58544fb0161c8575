//! Differential rings.

use crate::{Polynomial, Symbols};
use std::fmt;

/// A polynomial ring with a derivation.
///
/// *Invariant*: one derivative for each generator, in the symbols of the ring. The variable has derivative 1
/// and the constants have derivative 0.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Ring {
    symbols: Symbols,
    derivatives: Vec<Polynomial>,
}

/// Symbols and derivatives do not make a ring.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct RingError(RingErrorKind);

#[derive(Clone, Debug, PartialEq, Eq)]
enum RingErrorKind {
    Count {
        generators: usize,
        derivatives: usize,
    },
    Unknown {
        generator: String,
        symbol: usize,
    },
    Twice {
        name: String,
    },
}

impl fmt::Display for RingError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match &self.0 {
            RingErrorKind::Count {
                generators,
                derivatives,
            } => write!(f, "{derivatives} derivatives for {generators} generators"),
            RingErrorKind::Unknown { generator, symbol } => write!(
                f,
                "the derivative of `{generator}` holds symbol number {symbol}, which the ring does not have"
            ),
            RingErrorKind::Twice { name } => write!(f, "two symbols are named `{name}`"),
        }
    }
}

impl std::error::Error for RingError {}

impl Ring {
    /// The ring in which the generators have the given derivatives.
    ///
    /// # Errors
    ///
    /// If the numbers of generators and derivatives differ, a derivative holds a symbol beyond the last, or two
    /// symbols share a name.
    ///
    /// # Examples
    ///
    /// ```
    /// use linform_ring::{Ring, Symbols};
    /// use linform_scalar::Unlimited;
    ///
    /// // Painlevé II and the logarithmic derivative of the Tracy–Widom law.
    /// let symbols = Symbols::new(vec!["q".into(), "q'".into()], Some("t".into()), vec![]);
    /// let rules = vec![symbols.parse("q'")?, symbols.parse("t*q + 2*q^3")?];
    /// let ring = Ring::new(symbols, rules)?;
    /// let law = ring.symbols().parse("q'^2 - t*q^2 - q^4")?;
    /// let derivative = ring.derive(&law, &Unlimited)?;
    /// assert_eq!(ring.symbols().format(&derivative), "-q^2");
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn new(symbols: Symbols, derivatives: Vec<Polynomial>) -> Result<Ring, RingError> {
        if derivatives.len() != symbols.generators() {
            return Err(RingError(RingErrorKind::Count {
                generators: symbols.generators(),
                derivatives: derivatives.len(),
            }));
        }
        for index in 0..symbols.len() {
            if symbols.index_of(symbols.name(index)) != Some(index) {
                return Err(RingError(RingErrorKind::Twice {
                    name: symbols.name(index).to_string(),
                }));
            }
        }
        for (generator, derivative) in derivatives.iter().enumerate() {
            let width = derivative.degrees().width();
            if width > symbols.len() {
                return Err(RingError(RingErrorKind::Unknown {
                    generator: symbols.name(generator).to_string(),
                    symbol: width - 1,
                }));
            }
        }
        Ok(Ring {
            symbols,
            derivatives,
        })
    }

    /// The symbols.
    pub fn symbols(&self) -> &Symbols {
        &self.symbols
    }

    /// The derivative of a generator.
    ///
    /// # Panics
    ///
    /// If there is no generator with this index.
    pub fn derivative_of(&self, generator: usize) -> &Polynomial {
        &self.derivatives[generator]
    }
}
