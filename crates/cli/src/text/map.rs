//! A map of cells over two axes in characters: a shade and a number for each field.
//!
//! It reads without colour and fits 80 columns: names of columns that are wider than a field stand above it in steps; where
//! there are more columns than fit, fields lose their numbers, and then the best columns are shown.

use std::cmp::Reverse;
use std::fmt::Write as _;

use enolattice_engine::{CellMap, MapAxis, MapField};

use super::numbers::{count, percent};
use super::shade::{Shade, painted};

/// Widest name of a row; longer ones are cut.
const NAME: usize = 26;
/// A field with its number: a shade, three digits, a space.
const WITH_NUMBER: usize = 5;
/// A field without: two shades, a space.
const SHADE_ALONE: usize = 3;
/// Widest field, where the names of the columns stand above it.
const WIDEST: usize = 12;

/// What a map shows of each field.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum MapOf {
    /// Greatest expected yield.
    BestYield,
    /// Mean expected yield.
    MeanYield,
    /// Greatest probability of a hit.
    BestPHit,
    /// Mean probability of a hit.
    MeanPHit,
}

/// How a map is drawn.
#[derive(Clone, Copy, Debug)]
pub(crate) struct MapStyle {
    pub(crate) of: MapOf,
    /// Rows at most; `None`: all.
    pub(crate) most_rows: Option<usize>,
    /// Columns of the terminal.
    pub(crate) width: usize,
    pub(crate) colour: bool,
}

/// The map, and below it what the shades mean and which field is the best.
pub(crate) fn map_page(map: &CellMap, style: MapStyle) -> String {
    let labels: Vec<String> = map.columns.values.iter().map(|v| cut(v, NAME)).collect();
    let (names, field) = widths(map, &labels, style.width);
    let fit = ((style.width.saturating_sub(names + 1)) / field).max(1);
    let columns = best_of(map.columns.values.len(), fit, |column| {
        let fields = (0..map.rows.values.len()).map(|row| (row, column));
        best_value(map, style.of, fields)
    });
    let most_rows = style.most_rows.unwrap_or(map.rows.values.len());
    let rows = best_of(map.rows.values.len(), most_rows, |row| {
        best_value(map, style.of, columns.iter().map(|column| (row, *column)))
    });
    let mut page = headings(map.rows.axis.name(), names, field, &columns, &labels);
    for row in &rows {
        let name = cut(&map.rows.values[*row], NAME);
        let _ = write!(page, "\n{name:names$} ");
        for column in &columns {
            let known = map.field(*row, *column).copied().unwrap_or_default();
            page.push_str(&drawn(&known, field, style));
        }
        page.truncate(page.trim_end_matches(' ').len());
    }
    let shown = [
        (&map.rows, "rows", rows.len()),
        (&map.columns, "columns", columns.len()),
    ];
    format!("{page}\n\n{}", below(map, style, shown))
}

/// Width of the names of the rows, and of a field: so that the names of the columns stand above it, else with its number,
/// else a shade alone.
fn widths(map: &CellMap, labels: &[String], width: usize) -> (usize, usize) {
    let length = |name: &String| name.chars().count();
    let rows = map.rows.values.iter().map(|name| length(name).min(NAME));
    let names = rows.chain([map.rows.axis.name().len()]).max();
    let names = names.unwrap_or_default();
    let longest = labels.iter().map(length).max().unwrap_or_default();
    let above = (longest + 1).max(WITH_NUMBER);
    let fits = |names: usize, field: usize| names + 1 + field * labels.len() <= width;
    // a name in a step stands to the left of its column: the first has the room of the names of the rows
    let stepped = names.max(longest).max(1);
    match () {
        () if above <= WIDEST && fits(names, above) => (names, above),
        () if fits(stepped, WITH_NUMBER) => (stepped, WITH_NUMBER),
        () => (stepped, SHADE_ALONE),
    }
}

/// The best of a number of values, in their own order.
fn best_of(values: usize, most: usize, score: impl Fn(usize) -> Option<f64>) -> Vec<usize> {
    let mut all: Vec<usize> = (0..values).collect();
    if most < values {
        let key = |value: &usize| Reverse(score(*value).map_or(-1, |s| (1e6 * s) as i64));
        all.sort_by_cached_key(key);
        all.truncate(most);
        all.sort_unstable();
    }
    all
}

fn best_value(
    map: &CellMap,
    of: MapOf,
    fields: impl Iterator<Item = (usize, usize)>,
) -> Option<f64> {
    let known = fields.filter_map(|(row, column)| of.value(map.field(row, column)?));
    known.reduce(f64::max)
}

/// The names of the columns: above the fields where they fit, else in steps, each with a line down to its column.
fn headings(
    rows: &str,
    names: usize,
    field: usize,
    columns: &[usize],
    labels: &[String],
) -> String {
    let label = |column: &usize| labels[*column].as_str();
    if columns
        .iter()
        .all(|column| label(column).chars().count() < field)
    {
        let above: String = columns
            .iter()
            .map(|column| format!("{:<field$}", label(column)))
            .collect();
        return format!("{rows:names$} {above}").trim_end().to_owned();
    }
    // the mark of a column stands above the middle of its shades
    let place = |i: usize| names + 1 + i * field;
    let mut lines = Vec::new();
    for (i, column) in columns.iter().enumerate().rev() {
        let (name, before) = (label(column), place(i));
        let mut line = format!("{name:>w$} ┐", w = before - 1);
        for later in i + 1..columns.len() {
            let gap = place(later) - line.chars().count();
            let _ = write!(line, "{:gap$}│", "");
        }
        lines.push(line);
    }
    let marks: String = columns.iter().map(|_| format!("{:<field$}", '│')).collect();
    lines.push(format!("{rows:names$} {marks}").trim_end().to_owned());
    lines.join("\n")
}

/// A field as it is drawn, of a fixed width.
fn drawn(known: &MapField, width: usize, style: MapStyle) -> String {
    let (shade, number) = match (style.of.value(known), known.cells) {
        (Some(value), _) => (Some(Shade::of(value)), format!("{:>3}", whole(value))),
        (None, 0) => (None, "  -".to_owned()),
        (None, _) => (None, "  ?".to_owned()),
    };
    let character = shade.map_or(' ', Shade::character);
    let text = match width {
        SHADE_ALONE => match shade {
            Some(_) => format!("{character}{character}"),
            None => format!(" {}", number.trim_start()),
        },
        _ => format!("{character}{number}"),
    };
    let padding = width.saturating_sub(text.chars().count());
    let text = match shade {
        Some(shade) if style.colour => painted(&text, shade),
        _ => text,
    };
    format!("{text}{:padding$}", "")
}

/// Per cent, rounded.
fn whole(value: f64) -> u32 {
    (100.0 * value).round() as u32
}

fn below(map: &CellMap, style: MapStyle, shown: [(&MapAxis, &str, usize); 2]) -> String {
    let mut lines = vec![
        format!("{} of each field, %", style.of.title()),
        Shade::legend(),
        "? unknown: the model covers none of its cells   - no cell passes the filter".to_owned(),
    ];
    for (axis, what, number) in shown {
        if number < axis.values.len() {
            let (all, name) = (count(axis.values.len() as u64), axis.axis.name());
            lines.push(format!(
                "the {number} best of {all} {what} ({name}) are shown"
            ));
        }
    }
    lines.push(format!(
        "{} cells in this map, {} screened",
        count(map.total),
        count(map.cells_done)
    ));
    lines.extend(best_field(map, style.of));
    lines.join("\n")
}

/// The best field of the whole map in words; of equals the first.
fn best_field(map: &CellMap, of: MapOf) -> Option<String> {
    let columns = map.columns.values.len();
    let values = map.fields.iter().enumerate();
    let known = values.filter_map(|(i, field)| Some((i, of.value(field)?)));
    let (i, value) = known.reduce(|best, next| if next.1 > best.1 { next } else { best })?;
    let cell = match map.fields[i].best_cell {
        Some(cell) if of == MapOf::BestYield => format!(", cell {cell}"),
        _ => String::new(),
    };
    let names = [
        &map.rows.values[i / columns],
        &map.columns.values[i % columns],
    ];
    let [row, column] = names.map(|name| cut(name, NAME));
    Some(format!(
        "greatest: {}{cell}\n          {row} with {column}",
        percent(Some(value))
    ))
}

impl MapOf {
    fn value(self, field: &MapField) -> Option<f64> {
        match self {
            MapOf::BestYield => field.best_expected_yield,
            MapOf::MeanYield => field.mean_expected_yield,
            MapOf::BestPHit => field.best_p_hit,
            MapOf::MeanPHit => field.mean_p_hit,
        }
    }

    fn title(self) -> &'static str {
        match self {
            MapOf::BestYield => "greatest expected yield",
            MapOf::MeanYield => "mean expected yield",
            MapOf::BestPHit => "greatest p_hit",
            MapOf::MeanPHit => "mean p_hit",
        }
    }
}

fn cut(text: &str, most: usize) -> String {
    if text.chars().count() <= most {
        return text.to_owned();
    }
    let kept: String = text.chars().take(most - 1).collect();
    format!("{}…", kept.trim_end())
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_engine::Axis;

    /// A map whose fields go from 0 % at the first to 100 % at the last.
    fn map(rows: usize, columns: usize, name: &str) -> CellMap {
        let last = (rows * columns - 1).max(1) as f64;
        let field = |i: usize| MapField {
            cells: 2,
            best_expected_yield: Some(i as f64 / last),
            best_cell: Some(2 * i as u64),
            ..MapField::default()
        };
        let values = |count: usize, name: &str| (0..count).map(|i| format!("{name} {i}")).collect();
        CellMap {
            rows: MapAxis {
                axis: Axis::Substrate,
                values: values(rows, "diethyl allylmalonate of the shelf"),
            },
            columns: MapAxis {
                axis: Axis::Base,
                values: values(columns, name),
            },
            fields: (0..rows * columns).map(field).collect(),
            total: 2 * (rows * columns) as u64,
            cells_done: 2 * (rows * columns) as u64,
        }
    }

    fn style() -> MapStyle {
        MapStyle {
            of: MapOf::BestYield,
            most_rows: Some(20),
            width: 80,
            colour: false,
        }
    }

    #[test]
    fn nothing_is_wider_than_the_terminal() {
        for columns in [1, 2, 5, 10, 17, 40, 300] {
            for name in ["T", "lithium bis(trimethylsilyl)amide in THF"] {
                let page = map_page(&map(30, columns, name), style());
                let widest = page.lines().map(|line| line.chars().count()).max();
                assert!(widest.is_some_and(|widest| widest <= 80), "{page}");
            }
        }
    }

    #[test]
    fn what_is_left_out_is_said_and_the_best_are_kept() {
        let page = map_page(&map(30, 300, "base"), style());
        assert!(
            page.contains("the 20 best of 30 rows (substrate)"),
            "{page}"
        );
        assert!(page.contains("best of 300 columns (base)"), "{page}");
        assert!(page.contains("base 299 ┐"), "{page}");
        // the last field: row 29 of 30, column 299 of 300, two cells each
        assert!(page.contains("greatest: 100.0 %, cell 17998\n"), "{page}");
        assert!(
            page.contains("with base 299\n") || page.ends_with("with base 299"),
            "{page}"
        );
        let page = map_page(&map(3, 3, "base"), style());
        assert!(!page.contains("are shown"), "{page}");
    }

    #[test]
    fn names_lead_down_to_their_columns() {
        let page = map_page(&map(2, 7, "potassium tert-butoxide"), style());
        let lines: Vec<Vec<char>> = page.lines().map(|line| line.chars().collect()).collect();
        // every mark has a line below it down to the shades, which begin in its column
        for (i, line) in lines.iter().take(7).enumerate() {
            let mark = line.iter().position(|c| *c == '┐').expect("a mark");
            assert!(
                lines[i + 1..8].iter().all(|line| line[mark] == '│'),
                "{page}"
            );
        }
        let numbers: String = lines[9].iter().skip(27).collect();
        assert_eq!(numbers, "▒ 54 ▓ 62 ▓ 69 ▓ 77 █ 85 █ 92 █100", "{page}");
    }

    #[test]
    fn unknown_is_not_zero_and_no_cell_is_neither() {
        let mut map = map(1, 3, "T");
        map.fields[0] = MapField::default();
        map.fields[1] = MapField {
            cells: 3,
            unknown: 3,
            ..MapField::default()
        };
        map.fields[2].best_expected_yield = Some(0.0);
        let page = map_page(&map, style());
        let line = page.lines().nth(1).expect("a row");
        assert!(line.ends_with("   -    ?    0"), "{page}");
    }
}
