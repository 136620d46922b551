//! Plates in characters: a letter for what is in each well, at most 80 columns wide.
//!
//! 24 and 96 wells have a letter and the p_hit, 384 a letter and its tenths, 1536 a letter alone.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use clap::ValueEnum;
use enolattice_plate::{Content, Plan, PlannedWell, Plate, Well};

use super::numbers::short;
use super::table::wrapped;

/// What the letters of a plate stand for.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub(crate) enum LetteredAxis {
    #[default]
    Substrate,
    Base,
    Electrophile,
    Solvent,
}

/// The letters, those of the commonest values first; more values share the last.
const LETTERS: &str = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";
/// What values without a letter of their own share.
const OTHERS: char = '&';
/// An empty well.
const EMPTY: char = '·';

/// The plates of a plan, each with the program of its temperatures, and a key.
pub(crate) fn plates_page(plan: &Plan, axis: LetteredAxis, width: usize) -> String {
    let letters = letters(plan, axis);
    let mut parts: Vec<String> = plan
        .plates
        .iter()
        .map(|plate| format!("{}\n{}", heading(plate), drawn(plate, plan, axis, &letters)))
        .collect();
    parts.push(key(plan, axis, &letters, width.min(80)));
    parts.push(wrapped("", &plan.precedence));
    parts.join("\n\n")
}

/// A letter for each value.
fn letters(plan: &Plan, axis: LetteredAxis) -> BTreeMap<String, char> {
    let mut counts: BTreeMap<&str, usize> = BTreeMap::new();
    for (_, well) in plan.wells() {
        if let Some(value) = axis.of(well) {
            *counts.entry(value).or_default() += 1;
        }
    }
    let mut values: Vec<(&str, usize)> = counts.into_iter().collect();
    values.sort_by_key(|(value, count)| (std::cmp::Reverse(*count), *value));
    let letters = LETTERS.chars().chain(std::iter::repeat(OTHERS));
    values
        .into_iter()
        .zip(letters)
        .map(|((value, _), letter)| (value.to_owned(), letter))
        .collect()
}

fn heading(plate: &Plate) -> String {
    let forming = match plate.formation_temperature_c == plate.temperature_c {
        true => String::new(),
        false => format!(
            "formed at {} °C, then ",
            short(plate.formation_temperature_c)
        ),
    };
    format!(
        "{}: {forming}{} °C for {} h, {} wells filled",
        plate.name,
        short(plate.temperature_c),
        short(plate.time_h),
        plate.wells.len()
    )
}

fn drawn(
    plate: &Plate,
    plan: &Plan,
    axis: LetteredAxis,
    letters: &BTreeMap<String, char>,
) -> String {
    let format = plan.request.plates.wells;
    let wide = match format.columns() {
        0..=12 => 6,
        13..=24 => 3,
        _ => 1,
    };
    let at: BTreeMap<Well, &PlannedWell> = plate.wells.iter().map(|w| (w.well, w)).collect();
    let columns = (1..=format.columns()).map(|column| match wide {
        // tens would not fit a column of one character
        1 if column % 10 == 0 => ((b'0' + column / 10) as char).to_string(),
        1 => EMPTY.to_string(),
        _ => format!("{column:<wide$}"),
    });
    let mut lines = vec![format!("    {}", columns.collect::<String>().trim_end())];
    for row in 0..format.rows() {
        let mut line = String::new();
        for column in 0..format.columns() {
            let text = match at.get(&Well::new(row, column)) {
                Some(well) => text(well, axis, letters, wide),
                None => EMPTY.to_string(),
            };
            let _ = write!(line, "{text:<wide$}");
        }
        let name = Well::new(row, 0).to_string();
        let name = name.trim_end_matches(|c: char| c.is_ascii_digit());
        lines.push(format!("{name:>2}  {}", line.trim_end()));
    }
    lines.join("\n")
}

/// What is in a well: the letter of its value, or the mark of a control, and how likely it hits where there is room.
fn text(
    well: &PlannedWell,
    axis: LetteredAxis,
    letters: &BTreeMap<String, char>,
    wide: usize,
) -> String {
    let letter = axis.of(well).and_then(|value| letters.get(value));
    let letter = letter.copied().unwrap_or(EMPTY);
    let mark = mark(well.content);
    let p_hit = well.p_hit.filter(|_| well.content == Content::Cell);
    match (mark, wide) {
        (Some(mark), 1) => mark.to_string(),
        (None, 1) => letter.to_string(),
        (Some(mark), _) => format!("{letter}{mark}"),
        (None, 3) => format!("{letter}{}", p_hit.map_or("?".to_owned(), tenths)),
        (None, _) => match p_hit {
            Some(p_hit) => format!("{letter} {}", (100.0 * p_hit).round()),
            None => format!("{letter} ?"),
        },
    }
}

/// Tenths of a probability, rounded down: 9 from 0.9 on.
fn tenths(p_hit: f64) -> String {
    ((10.0 * p_hit) as u32).min(9).to_string()
}

fn mark(content: Content) -> Option<char> {
    match content {
        Content::Cell => None,
        Content::Positive => Some('+'),
        Content::NoBase => Some('-'),
        Content::NoElectrophile => Some('/'),
        Content::Deuterium => Some('*'),
        Content::SolventOnly => Some('o'),
    }
}

fn key(plan: &Plan, axis: LetteredAxis, letters: &BTreeMap<String, char>, width: usize) -> String {
    let mut by_letter: Vec<(char, &str)> = letters.iter().map(|(v, l)| (*l, v.as_str())).collect();
    by_letter.sort_by_key(|(letter, _)| LETTERS.find(*letter).unwrap_or(LETTERS.len()));
    let others = by_letter.iter().filter(|(letter, _)| *letter == OTHERS);
    let others = others.count();
    let mut words: Vec<String> = by_letter
        .iter()
        .filter(|(letter, _)| *letter != OTHERS)
        .map(|(letter, value)| format!("{letter} {value}"))
        .collect();
    if others > 0 {
        words.push(format!("{OTHERS} {others} others"));
    }
    let numbers = match plan.request.plates.wells.columns() {
        0..=12 => "the number is p_hit in per cent; ",
        13..=24 => "the digit is p_hit in tenths; ",
        _ => "",
    };
    let contents = [
        Content::Positive,
        Content::NoBase,
        Content::NoElectrophile,
        Content::Deuterium,
        Content::SolventOnly,
    ];
    let used = |content: &Content| plan.wells().any(|(_, well)| well.content == *content);
    let controls = contents.into_iter().filter(used);
    let controls = controls.filter_map(|c| Some(format!("{} {}", mark(c)?, c.name())));
    let mut signs: Vec<String> = controls.collect();
    signs.push(format!("{EMPTY} empty"));
    format!(
        "Letters: {}\n{}\n{numbers}{}",
        axis.name(),
        columns(&words, width),
        signs.join(", ")
    )
}

/// Words side by side in columns as wide as the longest, read downwards.
fn columns(words: &[String], width: usize) -> String {
    let longest = words.iter().map(|word| word.chars().count()).max();
    let wide = (longest.unwrap_or_default() + 2).min(width);
    let beside = (width / wide.max(1)).max(1);
    let down = words.len().div_ceil(beside).max(1);
    let lines = (0..down).map(|line| {
        let of_line = words.iter().skip(line).step_by(down);
        let text: String = of_line.map(|word| format!("{word:<wide$}")).collect();
        text.trim_end().to_owned()
    });
    lines.collect::<Vec<_>>().join("\n")
}

impl LetteredAxis {
    fn of(self, well: &PlannedWell) -> Option<&str> {
        let reagent = match self {
            LetteredAxis::Substrate => &well.substrate,
            LetteredAxis::Base => &well.base,
            LetteredAxis::Electrophile => &well.electrophile,
            LetteredAxis::Solvent => return Some(&well.solvent),
        };
        reagent.as_ref().map(|reagent| reagent.name.as_str())
    }

    fn name(self) -> &'static str {
        match self {
            LetteredAxis::Substrate => "substrates",
            LetteredAxis::Base => "bases",
            LetteredAxis::Electrophile => "electrophiles",
            LetteredAxis::Solvent => "solvents",
        }
    }
}
