//! Family elements that claims define by the coefficients they find.

use super::build::{Builder, Built, ElementState, Reported};
use super::element::element_text;
use crate::program::{Operation, YieldedElement};
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
