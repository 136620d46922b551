//! A time course as a chart of characters, 80 columns wide, that reads without colour.

use super::numbers::short;

/// Columns of the plot itself; with the labels to its left 80.
const COLUMNS: usize = 70;
/// Lines of the plot; a quarter is three of them.
const LINES: usize = 13;
/// A curve that moves by less than this until its end has ended.
const STILL: f64 = 0.01;

/// One curve: shares from 0 to 1 over time.
pub(super) struct Curve {
    /// The character that it is drawn with.
    pub(super) symbol: char,
    /// What it is.
    pub(super) name: String,
    /// Time in s and share, in the order of time.
    pub(super) points: Vec<(f64, f64)>,
}

/// The curves over a linear axis of time from 0 to where nothing changes any more. Where two meet, the first is seen.
pub(super) fn chart(curves: &[Curve]) -> String {
    let end_s = end(curves);
    let last_s = curves.iter().filter_map(last).fold(0.0, f64::max);
    let mut plot = vec![vec![' '; COLUMNS]; LINES];
    for curve in curves.iter().rev() {
        let line_of = |column: usize| {
            let time_s = end_s * column as f64 / (COLUMNS - 1) as f64;
            let share = at(&curve.points, time_s).clamp(0.0, 1.0);
            ((1.0 - share) * (LINES - 1) as f64).round() as usize
        };
        let lines = (0..COLUMNS).map(line_of);
        lines
            .enumerate()
            .for_each(|(column, line)| plot[line][column] = curve.symbol);
    }
    let mut lines: Vec<String> = plot
        .iter()
        .enumerate()
        .map(|(i, row)| format!("{} |{}", label(i), row.iter().collect::<String>()))
        .map(|line| line.trim_end().to_owned())
        .collect();
    lines.push(format!("      +{}", "-".repeat(COLUMNS)));
    lines.push(time_axis(end_s));
    let legend: Vec<String> = curves
        .iter()
        .map(|curve| format!("{} {}", curve.symbol, curve.name))
        .collect();
    lines.push(format!("      {}", legend.join("   ")));
    if end_s < 0.99 * last_s {
        lines.push(format!(
            "      as it is then it stays until {}",
            time(last_s)
        ));
    }
    lines.join("\n")
}

/// Per cent at the left of each quarter.
fn label(line: usize) -> String {
    let quarter = (LINES - 1) / 4;
    if line.is_multiple_of(quarter) {
        format!("{:>3} %", 100 - 25 * (line / quarter))
    } else {
        " ".repeat(5)
    }
}

fn time_axis(end_s: f64) -> String {
    let (middle, end) = (time(end_s / 2.0), time(end_s));
    let half = COLUMNS / 2;
    let right = COLUMNS - half - end.chars().count();
    format!("       0{middle:>half$}{:right$}{end}", "")
}

/// Time of the last point.
fn last(curve: &Curve) -> Option<f64> {
    curve.points.last().map(|(time_s, _)| *time_s)
}

/// When the last curve comes to rest, and a little more.
fn end(curves: &[Curve]) -> f64 {
    const MORE: f64 = 1.2;
    let all = curves.iter().filter_map(last).fold(0.0, f64::max);
    let rests = |curve: &Curve| {
        let (_, final_share) = curve.points.last()?;
        let moving = |(_, share): &&(f64, f64)| (share - final_share).abs() > STILL;
        let moved = curve.points.iter().rposition(|point| moving(&point))?;
        curve.points.get(moved + 1).map(|(time_s, _)| *time_s)
    };
    let rest = curves.iter().filter_map(rests).fold(0.0, f64::max);
    if rest > 0.0 {
        (MORE * rest).min(all)
    } else {
        all
    }
}

/// Share at a time, on the straight line between two points.
fn at(points: &[(f64, f64)], time_s: f64) -> f64 {
    let after = points.partition_point(|(t, _)| *t < time_s);
    match (after.checked_sub(1).map(|i| points[i]), points.get(after)) {
        (Some((t0, y0)), Some(&(t1, y1))) if t1 > t0 => y0 + (y1 - y0) * (time_s - t0) / (t1 - t0),
        (_, Some(&(_, y))) | (Some((_, y)), None) => y,
        (None, None) => 0.0,
    }
}

/// A time after the electrophile begins to be added; before it is negative.
pub(super) fn time(seconds: f64) -> String {
    match seconds.abs() {
        _ if seconds < 0.0 => format!("−{}", time(-seconds)),
        s if s < 60.0 => format!("{} s", short((s * 10.0).round() / 10.0)),
        s if s < 3600.0 => format!("{} min", short((s / 6.0).round() / 10.0)),
        s => format!("{} h", short((s / 360.0).round() / 10.0)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn curve(symbol: char, points: &[(f64, f64)]) -> Curve {
        Curve {
            symbol,
            name: symbol.to_string(),
            points: points.to_vec(),
        }
    }

    #[test]
    fn a_line_rises_from_corner_to_corner_within_80_columns() {
        let drawn = chart(&[curve('P', &[(0.0, 0.0), (3600.0, 1.0)])]);
        let lines: Vec<&str> = drawn.lines().collect();
        assert!(
            lines.iter().all(|line| line.chars().count() <= 80),
            "{drawn}"
        );
        assert!(
            lines[0].starts_with("100 % |") && lines[0].ends_with('P'),
            "{drawn}"
        );
        assert!(lines[12].starts_with("  0 % |P"), "{drawn}");
        // halfway up in the middle
        assert_eq!(
            lines[6].find('P').map(|at| at.abs_diff(7 + 35) <= 3),
            Some(true),
            "{drawn}"
        );
        assert!(
            lines[14].contains("30 min") && lines[14].ends_with("1 h"),
            "{drawn}"
        );
    }

    #[test]
    fn the_axis_ends_where_nothing_changes_any_more() {
        let points = [(0.0, 0.0), (600.0, 0.9), (57_600.0, 0.905)];
        let drawn = chart(&[
            curve('P', &points),
            curve('S', &[(0.0, 1.0), (600.0, 0.0), (57_600.0, 0.0)]),
        ]);
        assert!(drawn.contains("12 min"), "{drawn}");
        assert!(drawn.contains("stays until 16 h"), "{drawn}");
    }
}
