//! Family elements, unfolded by their rules.

use super::build::{Builder, Built, ElementState, Reported};
use crate::program::{Operation, PrimitiveElement};
use linform_spec::{Family, Known, Label, Resolved, Span, substitute};

/// The text of an element: `u[3,0]`.
pub(super) fn element_text(family: &str, indices: &[i64]) -> String {
    let indices: Vec<String> = indices.iter().map(i64::to_string).collect();
    format!("{family}[{}]", indices.join(","))
}

impl Builder<'_> {
    /// The node of a family element; `place` asked for it.
    pub(super) fn element(&mut self, family: &str, indices: &[i64], place: &Span) -> Built {
        if let Some(node) = self.yielded(family, indices) {
            return Ok(node);
        }
        let model = self.model;
        let Some(definition) = model.families.get(family) else {
            return Err(self.not_yielded(family, indices, place));
        };
        let Some(resolved) = definition.resolve(indices) else {
            return Err(self.uncovered(definition, indices, place));
        };
        let key = (family.to_owned(), resolved.indices.clone());
        match self.elements.get(&key) {
            Some(ElementState::Done(node)) => return Ok(*node),
            Some(ElementState::Wrong) => return Err(Reported),
            Some(ElementState::Open) => return Err(self.circle(&key, place)),
            None => {}
        }
        if self.stack.len() >= self.limits.depth || self.program.len() > self.limits.nodes {
            return Err(self.too_deep(&key.0, &key.1, place));
        }
        self.elements.insert(key.clone(), ElementState::Open);
        self.stack.push((key.clone(), *place));
        let node = self.define(definition, &resolved);
        self.stack.pop();
        self.elements
            .insert(key, node.map_or(ElementState::Wrong, ElementState::Done));
        node
    }

    fn define(&mut self, family: &Family, resolved: &Resolved<'_>) -> Built {
        let rule = resolved.rule;
        let substituted = substitute(&rule.body, &resolved.environment);
        let body = self.pass(substituted)?;
        let node = self.node_of(&body)?;
        if rule.known == Known::Value {
            return Ok(node);
        }
        let Some(terms) = &family.primitive_terms else {
            let help = "add `primitive_terms = \"…\"` to the family".to_owned();
            let message = format!(
                "only the derivative of `{}` is known, and no terms for its primitive",
                family.name
            );
            return Err(self.report(message, rule.span, "this rule", Some(help)));
        };
        let terms = self.term_list(terms, &resolved.environment, None)?;
        let name = element_text(&family.name, &resolved.indices);
        let primitive = self.program.add_primitive(PrimitiveElement {
            name,
            terms: terms.texts,
        });
        Ok(self.program.node(Operation::Primitive {
            primitive,
            derivative: node,
            terms: terms.nodes,
        }))
    }

    fn uncovered(&mut self, family: &Family, indices: &[i64], place: &Span) -> Reported {
        let name = element_text(&family.name, indices);
        let key = (family.name.clone(), indices.to_vec());
        if self.elements.insert(key, ElementState::Wrong).is_some() {
            return Reported;
        }
        let chain = self.chain_text();
        let help = format!("add a rule such as \"{name} = …\", or widen the condition of a rule");
        let needed = if chain.is_empty() {
            "needed here".to_owned()
        } else {
            format!("needed here, by {chain}")
        };
        let reported = self.report(
            format!("no rule covers `{name}`"),
            *place,
            &needed,
            Some(help),
        );
        self.label_last(&family.span, "the rules of the family");
        reported
    }

    /// The elements being defined, the last first: `a[5], which needs …`.
    fn chain_text(&self) -> String {
        const SHOWN: usize = 4;
        let names: Vec<String> = self
            .stack
            .iter()
            .rev()
            .take(SHOWN)
            .map(|((family, indices), _)| element_text(family, indices))
            .collect();
        let more = if self.stack.len() > SHOWN {
            ", …"
        } else {
            ""
        };
        if names.is_empty() {
            String::new()
        } else {
            format!("{}{more}", names.join(", which is needed by "))
        }
    }

    fn circle(&mut self, key: &(String, Vec<i64>), place: &Span) -> Reported {
        const SHOWN: usize = 12;
        let start = self
            .stack
            .iter()
            .position(|(open, _)| open == key)
            .unwrap_or(0);
        let mut names: Vec<String> = self.stack[start..]
            .iter()
            .map(|((family, indices), _)| element_text(family, indices))
            .collect();
        if names.len() > SHOWN {
            let skipped = names.len() - SHOWN;
            names.splice(
                SHOWN / 2..SHOWN / 2 + skipped,
                [format!("… ({skipped} more) …")],
            );
        }
        names.push(element_text(&key.0, &key.1));
        let message = format!("the rules run in a circle: {}", names.join(" → "));
        let help = "every element must rest on elements that are defined without it".to_owned();
        let reported = self.report(message, *place, "this closes the circle", Some(help));
        let steps: Vec<Span> = self.stack[start..]
            .iter()
            .skip(1)
            .take(SHOWN)
            .map(|(_, span)| *span)
            .collect();
        for span in steps {
            self.label_last(&span, "by way of this");
        }
        reported
    }

    fn too_deep(&mut self, family: &str, indices: &[i64], place: &Span) -> Reported {
        let (depth, nodes) = (self.stack.len(), self.program.len());
        let key = (family.to_owned(), indices.to_vec());
        self.elements.insert(key, ElementState::Wrong);
        self.report(
            format!(
                "`{}` rests on a chain of {depth} elements and {nodes} definitions, more than the program takes",
                element_text(family, indices)
            ),
            *place,
            "needed here",
            Some("ask for smaller indices, or see whether the rules come to an end".to_owned()),
        )
    }

    /// Adds a label to the newest diagnostic, unless one stands there already.
    fn label_last(&mut self, span: &Span, text: &str) {
        if let Some(diagnostic) = self.diagnostics.last_mut()
            && diagnostic.labels.iter().all(|label| label.span != *span)
        {
            diagnostic.labels.push(Label {
                span: *span,
                text: text.to_owned(),
            });
        }
    }
}
