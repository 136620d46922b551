//! The page of rules is in step with the rules.

use std::fmt::Write;

use super::super::rule::{Rule, Seat};
use super::super::rules::{ANY, DESTROYED, MILD, STRONG};
use super::super::statements::STATEMENTS;
use super::super::traits::Trait;
use super::every_rule;

const PAGE: &str = include_str!("../../../docs/cautions.md");
const BEGIN: &str = "<!-- tables: begin -->\n";
const END: &str = "<!-- tables: end -->\n";

/// The tables of the page, from the rules.
fn tables() -> String {
    let mut text = String::from("\n## Rules\n\n");
    for (list, name) in LISTS {
        writeln!(text, "- {name}: {}", in_words(list)).unwrap();
    }
    text.push('\n');
    text.push_str("| rule | category | severity | when | reason | source |\n");
    text.push_str("| --- | --- | --- | --- | --- | --- |\n");
    for rule in every_rule() {
        let cells = [
            rule.id,
            rule.category.name(),
            rule.severity.name(),
            &when(rule),
            &reason(rule),
            rule.source,
        ];
        writeln!(text, "| {} |", cells.join(" | ")).unwrap();
    }
    text.push_str("\n## Hazard statements\n\n");
    text.push_str("| statement | category | severity |\n| --- | --- | --- |\n");
    for (code, category, severity) in STATEMENTS {
        writeln!(
            text,
            "| {code} | {} | {} |",
            category.name(),
            severity.name()
        )
        .unwrap();
    }
    text.push('\n');
    text
}

fn when(rule: &Rule) -> String {
    let mut parts = Vec::new();
    if !rule.anyone.is_empty() {
        parts.push(format!("any reagent: {}", any_of(rule.anyone)));
    }
    let names = ["base", "solvent", "electrophile", "substrate", "additive"];
    for (seat, name) in Seat::ALL.into_iter().zip(names) {
        let condition = rule.seats[seat as usize];
        if !condition.is_empty() {
            parts.push(format!("{name}: {}", any_of(condition)));
        }
    }
    parts.extend(rule.above_c.map(|above| format!("above {above} °C")));
    parts.join("; ")
}

/// Lists that many rules share; the page says what is in them.
const LISTS: [(&[Trait], &str); 4] = [
    (STRONG, "any strong base"),
    (DESTROYED, "any base that water destroys"),
    (MILD, "any mild base"),
    (ANY, "any"),
];

fn any_of(traits: &[Trait]) -> String {
    if let Some((_, name)) = LISTS.iter().find(|(list, _)| *list == traits) {
        return (*name).to_owned();
    }
    in_words(traits)
}

fn in_words(traits: &[Trait]) -> String {
    let words: Vec<&str> = traits.iter().map(|one| one.words()).collect();
    match words.split_last() {
        Some((last, [])) => (*last).to_owned(),
        Some((last, others)) => format!("{} or {last}", others.join(", ")),
        None => String::new(),
    }
}

/// The reason with its placeholders in italics.
fn reason(rule: &Rule) -> String {
    let volume = format!("{:.0}", super::contents::gas_ml_per_mmol());
    let text = rule.reason.replace("{gas_ml}", &volume);
    text.replace(['{', '}'], "*")
}

/// `ENOLATTICE_RENEW_CAUTIONS=1` writes the tables anew.
#[test]
fn the_page_lists_every_rule_and_statement() {
    let (head, rest) = PAGE.split_once(BEGIN).expect("the page has tables");
    let (listed, tail) = rest.split_once(END).expect("the tables end");
    let expected = tables();
    if std::env::var_os("ENOLATTICE_RENEW_CAUTIONS").is_some() {
        let path = concat!(env!("CARGO_MANIFEST_DIR"), "/docs/cautions.md");
        std::fs::write(path, format!("{head}{BEGIN}{expected}{END}{tail}")).unwrap();
        return;
    }
    let mut lines = listed.lines().zip(expected.lines());
    let differs = lines.find(|(listed, expected)| listed != expected);
    let is_same = listed == expected;
    assert!(
        is_same,
        "run the test with ENOLATTICE_RENEW_CAUTIONS=1 to write the tables anew; first: {differs:?}"
    );
}
