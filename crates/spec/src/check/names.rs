//! The declared names, for look-up.

use crate::collect::Collector;
use crate::model::split_primes;
use crate::read::{Declared, Draft, Lost, count_indices, shorten};
use crate::source::{Diagnostic, Span};
use crate::suggest::did_you_mean;
use indexmap::IndexMap;
use std::collections::HashMap;

/// Every declared name.
#[derive(Debug, Default)]
pub(crate) struct Names {
    /// For each base, the number of primes of the symbols with it, and the place of the first.
    symbols: HashMap<String, (Vec<u32>, Span)>,
    /// The symbols as they are declared, for suggestions.
    symbol_list: Vec<String>,
    laws: IndexMap<String, Span>,
    /// With the number of indices, where it is known.
    families: IndexMap<String, (Option<usize>, Span)>,
    models: IndexMap<String, Span>,
    variable: Option<String>,
    constants: Vec<String>,
    /// Whether an unknown name may be known after all, its declaration being lost.
    pub(crate) lost: Lost,
}

impl Names {
    /// Collects the names, noting those that clash.
    pub(crate) fn new(draft: &Draft, errors: &mut Collector) -> Names {
        let mut names = Names {
            lost: draft.lost.clone(),
            variable: draft.variable.as_ref().map(|v| v.name.clone()),
            constants: draft.constants.iter().map(|c| c.name.clone()).collect(),
            ..Names::default()
        };
        for generator in &draft.generators {
            names.add_symbol(generator, true, errors);
        }
        for other in draft.variable.iter().chain(&draft.constants) {
            names.add_symbol(other, false, errors);
        }
        for (name, law) in &draft.laws {
            if let Some((_, symbol)) = names.symbols.get(name) {
                errors.push(
                    Diagnostic::new(format!("`{name}` is both a symbol and a law"), law.span)
                        .also(*symbol, "the symbol")
                        .help("rename one of them"),
                );
            }
            names.laws.insert(name.clone(), law.span);
        }
        for (name, family) in &draft.families {
            names.add_family(name, family.arity, family.family.span, errors);
        }
        for claim in &draft.claims {
            for yielded in &claim.yields {
                let arity = Some(yielded.pattern.len());
                names.add_family(&yielded.family, arity, yielded.span, errors);
            }
        }
        for (name, model) in &draft.models {
            names.models.insert(name.clone(), model.model.span);
        }
        names
    }

    fn add_symbol(&mut self, symbol: &Declared, generator: bool, errors: &mut Collector) {
        let (base, primes) = split_primes(&symbol.name);
        match self.symbols.get_mut(base) {
            None => {
                self.symbols
                    .insert(base.to_owned(), (vec![primes], symbol.span));
            }
            // `q` and `q'` are two generators, but a variable or constant has its name to itself.
            Some((known, _)) if generator && !known.contains(&primes) => known.push(primes),
            Some((_, first)) => {
                errors.push(
                    Diagnostic::new(format!("`{}` is declared twice", symbol.name), symbol.span)
                        .also(*first, "first here")
                        .help("generators, the variable and the constants have different names"),
                );
                return;
            }
        }
        self.symbol_list.push(symbol.name.clone());
    }

    fn add_family(&mut self, name: &str, arity: Option<usize>, span: Span, errors: &mut Collector) {
        if let Some((_, symbol)) = self.symbols.get(name) {
            errors.push(
                Diagnostic::new(format!("`{name}` is both a symbol and a family"), span)
                    .also(*symbol, "the symbol")
                    .help("rename one of them"),
            );
        }
        match self.families.get(name) {
            None => {
                self.families.insert(name.to_owned(), (arity, span));
            }
            Some((Some(known), first)) if arity.is_some_and(|arity| arity != *known) => {
                errors.push(
                    Diagnostic::new(
                        format!("`{name}` has {} here", count_indices(arity.unwrap_or(0))),
                        span,
                    )
                    .also(*first, format!("and {known} here"))
                    .help("a family has the same number of indices everywhere"),
                );
            }
            Some(_) => {}
        }
    }

    /// Is this a symbol, or a derivative of one?
    pub(crate) fn is_element(&self, base: &str, primes: u32) -> bool {
        self.symbols
            .get(base)
            .is_some_and(|(known, _)| known.iter().any(|k| *k <= primes))
    }

    /// Is this a declared symbol itself?
    pub(crate) fn is_symbol(&self, base: &str, primes: u32) -> bool {
        self.symbols
            .get(base)
            .is_some_and(|(known, _)| known.contains(&primes))
    }

    /// Is this the variable or a constant?
    pub(crate) fn is_base(&self, base: &str, primes: u32) -> bool {
        primes == 0
            && (self.variable.as_deref() == Some(base) || self.constants.iter().any(|c| c == base))
    }

    pub(crate) fn symbol_span(&self, base: &str) -> Option<Span> {
        self.symbols.get(base).map(|(_, span)| *span)
    }

    pub(crate) fn constants(&self) -> &[String] {
        &self.constants
    }

    pub(crate) fn symbols(&self) -> impl Iterator<Item = &str> {
        self.symbol_list.iter().map(String::as_str)
    }

    pub(crate) fn is_law(&self, name: &str) -> bool {
        self.laws.contains_key(name)
    }

    pub(crate) fn is_model(&self, name: &str) -> bool {
        self.models.contains_key(name)
    }

    /// The number of indices of a family; the inner option is empty where it is not known.
    pub(crate) fn family(&self, name: &str) -> Option<Option<usize>> {
        self.families.get(name).map(|(arity, _)| *arity)
    }

    /// Notes that a law, family or model is not known.
    pub(crate) fn unknown(&self, kind: Kind, name: &str, span: Span, errors: &mut Collector) {
        if self.lost.hides(name) || errors.is_full() {
            errors.withhold();
            return;
        }
        let known: Vec<&str> = match kind {
            Kind::Law => self.laws.keys().map(String::as_str).collect(),
            Kind::Family => self.families.keys().map(String::as_str).collect(),
            Kind::Model => self.models.keys().map(String::as_str).collect(),
        };
        self.note_unknown(
            kind.word(),
            name,
            span,
            known,
            &kind.declaration(name),
            errors,
        );
    }

    /// Notes that a name is not known, with the nearest of the candidates or else the given help.
    pub(crate) fn note_unknown(
        &self,
        word: &str,
        name: &str,
        span: Span,
        candidates: Vec<&str>,
        help: &str,
        errors: &mut Collector,
    ) {
        if self.lost.hides(name) || errors.is_full() {
            errors.withhold();
            return;
        }
        let help = match did_you_mean(name, candidates) {
            Some(near) => format!("did you mean `{near}`?"),
            None => help.to_owned(),
        };
        errors.push_absence(
            Diagnostic::new(format!("unknown {word} `{}`", shorten(name)), span).help(help),
        );
    }
}

/// What a name in a call or before a bracket stands for.
#[derive(Clone, Copy, Debug)]
pub(crate) enum Kind {
    Law,
    Family,
    Model,
}

impl Kind {
    fn word(self) -> &'static str {
        match self {
            Kind::Law => "law",
            Kind::Family => "family",
            Kind::Model => "model",
        }
    }

    fn declaration(self, name: &str) -> String {
        format!("declare it: `[{}.{}]`", self.word(), shorten(name))
    }
}
