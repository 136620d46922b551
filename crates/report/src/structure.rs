//! Structures, each drawn once and referred to wherever it is shown.

mod drawing;
mod layout;

use std::collections::BTreeMap;

use enolattice_molecule::Molecule;
use maud::{Markup, html};

use drawing::Drawing;

/// Structures of a page, drawn when first asked for.
#[derive(Debug, Default)]
pub(crate) struct Structures {
    known: BTreeMap<String, Known>,
}

#[derive(Debug)]
struct Known {
    number: usize,
    drawing: Option<Drawing>,
    /// Formula; none of text that is no molecule.
    formula: Option<String>,
}

/// Pixels of a unit of the layout, whose bonds are 40 long.
const SCALE: f64 = 0.62;

impl Structures {
    /// The structure of a SMILES: its drawing; its formula where it cannot be drawn, the text where it is no molecule.
    pub(crate) fn show(&mut self, smiles: &str, name: &str) -> Markup {
        if smiles.is_empty() {
            return html! {};
        }
        let next = self.known.len() + 1;
        let known = self
            .known
            .entry(smiles.to_owned())
            .or_insert_with(|| Known::of(smiles, next));
        match (&known.drawing, &known.formula) {
            (Some(drawing), formula) => {
                let (width, height) = (drawing.width * SCALE, drawing.height * SCALE);
                let told = formula.as_deref().unwrap_or_default();
                let picture = html! {
                    svg.structure width={ (whole(width)) } height={ (whole(height)) }
                        viewBox={ "0 0 " (whole(drawing.width)) " " (whole(drawing.height)) }
                        role="img" aria-label={ (name) ", " (told) } {
                        use href={ "#m" (known.number) } {}
                    }
                };
                match drawing.is_whole {
                    true => picture,
                    false => {
                        html! { div { (picture) span.words { "configuration not drawn: " (smiles) } } }
                    }
                }
            }
            (None, Some(formula)) => html! { span.formula title=(smiles) { (formula) } },
            (None, None) => html! { span.formula { (smiles) } },
        }
    }

    /// All that have been shown, for the head of the page.
    pub(crate) fn symbols(&self) -> Markup {
        html! {
            svg.symbols width="0" height="0" aria-hidden="true" focusable="false" {
                defs {
                    @for known in self.known.values() {
                        @if let Some(drawing) = &known.drawing {
                            g id={ "m" (known.number) } { (drawing.markup()) }
                        }
                    }
                }
            }
        }
    }
}

impl Known {
    fn of(smiles: &str, number: usize) -> Known {
        let molecule = Molecule::parse_salt(smiles).map(|salt| salt.molecule);
        Known {
            number,
            drawing: molecule.as_ref().ok().and_then(Drawing::of),
            formula: molecule.ok().map(|molecule| molecule.formula().to_owned()),
        }
    }
}

fn whole(number: f64) -> String {
    format!("{number:.0}")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn shown(smiles: &str) -> String {
        Structures::default().show(smiles, "it").into_string()
    }

    #[test]
    fn a_structure_is_drawn_once() {
        let mut structures = Structures::default();
        for _ in 0..3 {
            let shown = structures.show("CC(=O)c1ccccc1", "acetophenone");
            assert!(shown.into_string().contains("href=\"#m1\""));
        }
        let symbols = structures.symbols().into_string();
        assert_eq!(symbols.matches("<g id=").count(), 1);
    }

    #[test]
    fn what_cannot_be_drawn_has_its_formula_or_its_text() {
        let chain = "C".repeat(150);
        assert!(shown(&chain).contains("C150H302"));
        assert!(shown("<b>no molecule").contains("&lt;b&gt;no molecule"));
        assert_eq!(shown(""), "");
    }
}
