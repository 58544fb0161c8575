//! Random specs: a tape of bytes decides every choice, so that a shorter or smaller tape is a simpler spec.

use crate::modular::{self, Poly};

/// Choices read from bytes; past the end every choice is the first.
pub(crate) struct Tape<'a> {
    bytes: &'a [u8],
}

impl<'a> Tape<'a> {
    pub(crate) fn new(bytes: &'a [u8]) -> Self {
        Tape { bytes }
    }

    pub(crate) fn below(&mut self, bound: usize) -> usize {
        let Some((first, rest)) = self.bytes.split_first() else {
            return 0;
        };
        self.bytes = rest;
        usize::from(*first) % bound
    }

    /// 1, −1, 2, … or a larger number.
    fn number(&mut self) -> i64 {
        const NUMBERS: [i64; 8] = [1, -1, 2, 3, -2, 5, -12, 1_000_003];
        NUMBERS[self.below(NUMBERS.len())]
    }
}

/// A ring element as text and as a polynomial modulo the prime.
#[derive(Clone, Debug)]
pub(crate) struct Element {
    pub(crate) text: String,
    pub(crate) value: Poly,
}

impl Element {
    pub(crate) fn plus(&self, other: &Element) -> Element {
        Element {
            text: format!("{} + {}", self.text, other.text),
            value: self.value.plus(&other.value),
        }
    }

    pub(crate) fn times(&self, other: &Element) -> Element {
        Element {
            text: format!("({})*({})", self.text, other.text),
            value: self.value.times(&other.value),
        }
    }
}

/// A random ring with a law `F` and a family `f`.
#[derive(Clone, Debug)]
pub(crate) struct RandomRing {
    pub(crate) text: String,
    /// Generators, variable, constants.
    pub(crate) names: Vec<String>,
    pub(crate) generators: usize,
    pub(crate) variable: Option<usize>,
    /// The derivatives of all symbols.
    pub(crate) derivatives: Vec<Poly>,
    law: Poly,
    family: Vec<Element>,
}

impl RandomRing {
    pub(crate) fn new(tape: &mut Tape) -> RandomRing {
        let generators = 1 + tape.below(4);
        let variable = (tape.below(4) != 3).then_some(generators);
        let constants = [0, 0, 1, 2][tape.below(4)];
        let mut names: Vec<String> = ["x", "x'", "y", "z_1"][..generators]
            .iter()
            .map(ToString::to_string)
            .collect();
        names.extend(variable.map(|_| "t".to_owned()));
        names.extend(["a", "b"][..constants].iter().map(ToString::to_string));
        let symbols = names.len();
        let mut ring = RandomRing {
            text: String::new(),
            names,
            generators,
            variable,
            derivatives: vec![Poly::default(); symbols],
            law: Poly::default(),
            family: Vec::new(),
        };
        let mut text = String::from("[ring]\n");
        if let Some(variable) = variable {
            ring.derivatives[variable] = Poly::constant(symbols, 1);
            text += "variable = \"t\"\n";
        }
        let quoted = |names: &[String]| format!("{names:?}");
        let constant_names = &ring.names[symbols - constants..];
        text += &format!("constants = {}\n", quoted(constant_names));
        text += &format!(
            "generators = {}\n[ring.derivative]\n",
            quoted(&ring.names[..generators])
        );
        for generator in 0..generators {
            let derivative = match tape.below(5) {
                0 => ring.polynomial(tape, 0, symbols, 2),
                1 if generator + 1 < generators => ring.symbol(generator + 1),
                2 => ring.number(0),
                3 => ring.number(1),
                _ => ring.polynomial(tape, 0, symbols, 1),
            };
            text += &format!("\"{}\" = \"{}\"\n", ring.names[generator], derivative.text);
            ring.derivatives[generator] = derivative.value;
        }
        let law = ring.polynomial(tape, 0, symbols, 2);
        text += &format!("[law.F]\nlog_derivative = \"{}\"\n", law.text);
        ring.law = law.value;
        let first = ring.polynomial(tape, 0, symbols, 2);
        let factor = ring.symbol(tape.below(symbols));
        text += &format!(
            "[family.f]\nrules = [\"f[0] = {}\", \"f[n] = D(f[n-1]) - ({})*f[n-1] for n >= 1\"]\n",
            first.text, factor.text
        );
        let mut value = first.value;
        for index in 0..3 {
            let text = format!("f[{index}]");
            let next = value
                .derived(&ring.derivatives)
                .plus(&value.times(&factor.value).scaled(modular::integer(-1)));
            ring.family.push(Element { text, value });
            value = next;
        }
        ring.text = text;
        ring
    }

    pub(crate) fn symbols(&self) -> usize {
        self.names.len()
    }

    /// Has the base a symbol?
    pub(crate) fn has_base(&self) -> bool {
        self.symbols() > self.generators
    }

    pub(crate) fn number(&self, value: i64) -> Element {
        Element {
            text: value.to_string(),
            value: Poly::constant(self.symbols(), modular::integer(value)),
        }
    }

    pub(crate) fn symbol(&self, index: usize) -> Element {
        Element {
            text: self.names[index].clone(),
            value: Poly::symbol(self.symbols(), index),
        }
    }

    /// A monomial with a coefficient.
    fn product(&self, tape: &mut Tape, from: usize, to: usize, degree: usize) -> Element {
        let mut result = self.number(tape.number());
        if tape.below(5) == 4 {
            let denominator = 2 + tape.below(6) as i64;
            result.text = format!("{}/{denominator}", result.text);
            let inverse = modular::inverse(modular::integer(denominator));
            result.value = result.value.scaled(inverse);
        }
        if from < to {
            for _ in 0..tape.below(degree + 1) {
                result = result.times(&self.symbol(from + tape.below(to - from)));
            }
        }
        result
    }

    /// A sum of at most three monomials in the symbols `from..to`.
    pub(crate) fn polynomial(
        &self,
        tape: &mut Tape,
        from: usize,
        to: usize,
        degree: usize,
    ) -> Element {
        let mut result = self.product(tape, from, to, degree);
        for _ in 0..tape.below(3) {
            result = result.plus(&self.product(tape, from, to, degree));
        }
        result
    }

    /// A coefficient: a polynomial in the base, or in the constants.
    pub(crate) fn coefficient(&self, tape: &mut Tape, constant: bool) -> Element {
        let skipped = usize::from(constant && self.variable.is_some());
        match tape.below(6) {
            5 => self.number(0),
            _ => self.polynomial(tape, self.generators + skipped, self.symbols(), 2),
        }
    }

    pub(crate) fn derived(&self, element: &Element) -> Element {
        Element {
            text: format!("D({})", element.text),
            value: element.value.derived(&self.derivatives),
        }
    }

    fn ratio(&self, order: usize) -> Element {
        let mut value = Poly::constant(self.symbols(), 1);
        for _ in 0..order {
            value = value
                .derived(&self.derivatives)
                .plus(&value.times(&self.law));
        }
        Element {
            text: format!("ratio(F,{order})"),
            value,
        }
    }

    pub(crate) fn term(&self, tape: &mut Tape) -> Element {
        match tape.below(8) {
            0 => self.symbol(tape.below(self.symbols())),
            1 => self.ratio(tape.below(4)),
            2 => self.family[tape.below(self.family.len())].clone(),
            3 => {
                let base = self.symbol(tape.below(self.generators));
                Element {
                    text: format!("{}^2", base.text),
                    value: base.value.times(&base.value),
                }
            }
            4 => {
                let base = self.symbol(tape.below(self.generators));
                base.times(&self.symbol(tape.below(self.symbols())))
            }
            5 => self.derived(&self.polynomial(tape, 0, self.symbols(), 2)),
            6 => self.number(1),
            _ => self.polynomial(tape, 0, self.symbols(), 2),
        }
    }
}
