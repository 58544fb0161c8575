//! Family elements that claims define by the coefficients they find.

use super::build::{Builder, Built, ElementState, Reported};
use super::element::element_text;
use crate::program::{NodeId, Operation, YieldedElement};
use linform_spec::{Claim, Environment, Pattern, Span};

impl Builder<'_> {
    /// Enters the elements that an instance of a claim yields, so that later claims find them.
    pub(super) fn define_yields(
        &mut self,
        claim: &Claim,
        instance: usize,
        index: &Environment,
    ) -> Built<()> {
        for item in &claim.yields {
            let indices: Option<Vec<i64>> = item
                .pattern
                .iter()
                .map(|pattern| match pattern {
                    Pattern::Fixed(value) => Some(*value),
                    Pattern::Variable(name) => index.get(name).copied(),
                })
                .collect();
            let Some(indices) = indices else {
                let help = "use the variables of the claim's `for`".to_owned();
                return Err(self.report(
                    "this index is no sweep variable of the claim",
                    item.span,
                    "here",
                    Some(help),
                ));
            };
            if self.is_defined(&item.family, &indices) {
                let name = element_text(&item.family, &indices);
                let help = "give the new element another index or another family".to_owned();
                let message = format!("`{name}` is defined already");
                return Err(self.report(message, item.span, "defined again here", Some(help)));
            }
            let terms = self.term_list(&item.terms, index, None)?;
            let found = match self.instances[instance].alternatives.as_slice() {
                [list] => list.nodes.len(),
                _ => return Err(self.open_yield(&item.span)),
            };
            if terms.nodes.len() != found {
                let message = format!(
                    "`{}` is given {} terms for the {found} coefficients of claim `{}`",
                    element_text(&item.family, &indices),
                    terms.nodes.len(),
                    claim.name
                );
                let help =
                    "the k-th term receives the coefficient of the claim's k-th term".to_owned();
                return Err(self.report(message, item.span, "here", Some(help)));
            }
            let name = element_text(&item.family, &indices);
            let yielded = self.program.add_yielded(YieldedElement {
                name,
                claim: instance,
            });
            let node = self.program.node(Operation::Yielded {
                yielded,
                terms: terms.nodes,
            });
            self.elements
                .insert((item.family.clone(), indices), ElementState::Done(node));
        }
        Ok(())
    }

    /// Has the element a definition, by a rule or by an earlier claim?
    fn is_defined(&self, family: &str, indices: &[i64]) -> bool {
        let by_rule = self.model.families.get(family);
        by_rule.is_some_and(|definition| definition.resolve(indices).is_some())
            || self.yielded(family, indices).is_some()
    }

    /// The node of an element that a claim defined; those of a symmetric family under any order of the indices.
    pub(super) fn yielded(&self, family: &str, indices: &[i64]) -> Option<NodeId> {
        let find = |indices: &[i64]| match self.elements.get(&(family.to_owned(), indices.to_vec()))
        {
            Some(ElementState::Done(node)) => Some(*node),
            _ => None,
        };
        if !self
            .model
            .families
            .get(family)
            .is_some_and(|definition| definition.symmetric)
        {
            return find(indices);
        }
        let mut sorted = indices.to_vec();
        sorted.sort_unstable();
        let rising = find(&sorted);
        sorted.reverse();
        find(indices).or(rising).or_else(|| find(&sorted))
    }

    fn open_yield(&mut self, span: &Span) -> Reported {
        let help = "give the claim's terms a fixed range".to_owned();
        let message =
            "a claim with an open range of terms cannot define elements by its coefficients";
        self.report(message, *span, "here", Some(help))
    }

    /// An element of a family that only claims define was asked for before a claim defined it.
    pub(super) fn not_yielded(&mut self, family: &str, indices: &[i64], place: &Span) -> Reported {
        let name = element_text(family, indices);
        let help = format!(
            "let a claim that stands earlier define it by `yields = {{ \"{family}[…]\" = … }}`, or declare [family.{family}]"
        );
        self.report(
            format!("`{name}` is not defined by any claim before this place"),
            *place,
            "needed here",
            Some(help),
        )
    }
}
