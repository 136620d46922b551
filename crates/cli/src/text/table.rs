//! Tables that fit the terminal.

use std::io::IsTerminal;

use comfy_table::{CellAlignment, ContentArrangement, Table, presets};

/// Width where stdout is no terminal.
const PLAIN_WIDTH: u16 = 160;

/// Where the text of a column stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Side {
    Left,
    Right,
}

/// A table without frames; numbers to the right.
pub(super) fn table(
    columns: &[(&str, Side)],
    rows: impl IntoIterator<Item = Vec<String>>,
) -> String {
    let mut table = Table::new();
    table
        .load_preset(presets::NOTHING)
        .set_content_arrangement(ContentArrangement::Dynamic);
    if !std::io::stdout().is_terminal() {
        table.set_width(PLAIN_WIDTH);
    }
    table.set_header(columns.iter().map(|(heading, _)| *heading));
    table.add_rows(rows);
    for (column, (_, side)) in table.column_iter_mut().zip(columns) {
        if *side == Side::Right {
            column.set_cell_alignment(CellAlignment::Right);
        }
        column.set_padding((0, 2));
    }
    let lines: Vec<String> = table
        .lines()
        .map(|line| line.trim_end().to_owned())
        .collect();
    lines.join("\n")
}

/// The width that there is, columns.
pub(crate) fn width() -> usize {
    let wide = if std::io::stdout().is_terminal() {
        Table::new().width()
    } else {
        None
    };
    usize::from(wide.unwrap_or(PLAIN_WIDTH))
}

/// Breaks a sentence into lines that fit, the later ones indented as `first` is wide.
pub(super) fn wrapped(first: &str, sentence: &str) -> String {
    let indent = first.chars().count();
    let room = width().saturating_sub(indent).clamp(20, 110);
    let (mut lines, mut line) = (Vec::new(), String::new());
    for word in sentence.split_whitespace() {
        if !line.is_empty() && line.chars().count() + 1 + word.chars().count() > room {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(word);
    }
    lines.push(line);
    format!(
        "{first}{}",
        lines.join(&format!("\n{}", " ".repeat(indent)))
    )
}
