//! The frame of a page: head, contents, sections, foot.

use enolattice_plate::PRECEDENCE;
use maud::{DOCTYPE, Markup, PreEscaped, html};

use crate::palette;

const STYLE: &str = include_str!("page/style.css");
const SCRIPT: &str = include_str!("page/script.js");

/// A page.
pub(crate) struct Page {
    /// What kind of report it is, in a few words.
    pub(crate) kind: &'static str,
    /// Title.
    pub(crate) title: String,
    /// Below the title.
    pub(crate) lead: Markup,
    /// Above everything else: what must not be overlooked.
    pub(crate) notices: Vec<Markup>,
    /// Sections in their order.
    pub(crate) sections: Vec<Section>,
    /// Structures that the sections refer to.
    pub(crate) structures: Markup,
}

/// A section of a page.
pub(crate) struct Section {
    /// Name in links.
    pub(crate) id: &'static str,
    /// Heading.
    pub(crate) heading: String,
    /// What stands below the heading.
    pub(crate) body: Markup,
    /// Whether it is left out on paper.
    pub(crate) is_screen_only: bool,
}

impl Section {
    pub(crate) fn new(id: &'static str, heading: impl Into<String>, body: Markup) -> Section {
        Section {
            id,
            heading: heading.into(),
            body,
            is_screen_only: false,
        }
    }

    /// The section, left out on paper; the page says so there.
    pub(crate) fn on_screen_only(mut self) -> Section {
        self.is_screen_only = true;
        self
    }
}

impl Page {
    /// The page as one text of HTML.
    pub(crate) fn render(self) -> String {
        let markup = html! {
            (DOCTYPE)
            html lang="en" {
                head {
                    meta charset="utf-8";
                    meta name="viewport" content="width=device-width, initial-scale=1";
                    meta name="referrer" content="no-referrer";
                    meta http-equiv="Content-Security-Policy"
                        content="default-src 'none'; style-src 'unsafe-inline'; script-src 'unsafe-inline'; img-src data:";
                    link rel="icon" href="data:,";
                    title { (self.title) " · enolattice" }
                    style { (PreEscaped(STYLE)) (PreEscaped(palette::rules())) }
                }
                body {
                    (self.structures)
                    a.skip href="#answer" { "To the answer" }
                    header.masthead #top {
                        p.kind { span.mark aria-hidden="true" {} "enolattice · " (self.kind) }
                        h1 dir="auto" { (self.title) }
                        div.lead { (self.lead) }
                    }
                    main {
                        p.precedence { strong { "Before anything is run. " } (PRECEDENCE) }
                        @for notice in &self.notices { (notice) }
                        nav.contents aria-label="Contents" {
                            @for section in &self.sections {
                                a href={ "#" (section.id) } { (section.heading) }
                            }
                        }
                        @for section in &self.sections {
                            section.screen-only[section.is_screen_only] id=(section.id) {
                                h2 { (section.heading) }
                                (section.body)
                            }
                        }
                    }
                    footer {
                        @let unprinted: Vec<&str> = self.sections.iter().filter(|section| section.is_screen_only).map(|section| section.heading.as_str()).collect();
                        @if !unprinted.is_empty() {
                            p.print-only { "Not printed, but on the page: " (unprinted.join(", ")) "." }
                        }
                        p { (PRECEDENCE) " No caution does not mean no hazard." }
                        p { "This page holds all that it shows: it needs no network and no script. " a href="#top" { "Back to the top" } }
                    }
                    script { (PreEscaped(SCRIPT)) }
                }
            }
        };
        markup.into_string()
    }
}

/// A table that scrolls in a box of its own where the page is too narrow or the table too long.
pub(crate) fn boxed(label: &str, table: Markup) -> Markup {
    html! {
        div.box role="region" tabindex="0" aria-label=(label) { (table) }
    }
}

/// A notice above all sections.
pub(crate) fn notice(kind: &str, text: Markup) -> Markup {
    html! {
        div.notice.(kind) { (text) }
    }
}

/// Longest word that a column of a table makes room for, letters.
const LONG_WORD: usize = 22;

/// A name that the user gave, in its own direction of writing. One with a word that no column has room for, such as a
/// SMILES, may be broken anywhere.
pub(crate) fn name(text: &str) -> Markup {
    let breaks = |c: char| c.is_whitespace() || c == '-';
    let is_long = text
        .split(breaks)
        .any(|word| word.chars().count() > LONG_WORD);
    html! { bdi.long[is_long] { (text) } }
}
