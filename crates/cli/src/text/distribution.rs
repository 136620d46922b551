//! Histograms in characters, 80 columns wide.

use enolattice_engine::{Distribution, Histogram};

use super::numbers::count;

/// Longest bar.
const BAR: usize = 18;

/// Expected yields and p_hit side by side, best first.
pub(crate) fn distribution_page(known: &Distribution) -> String {
    let heading = format!("{:>9}  {:<33}  {}", "", "expected yield", "p_hit");
    let lines = (0..known.expected_yield.bins.len()).rev().map(|bin| {
        let range = format!("{}–{} %", 5 * bin, 5 * (bin + 1));
        line(&range, known, |histogram| histogram.bins[bin])
    });
    let unknown = line("unknown", known, |histogram| histogram.unknown);
    let all: Vec<String> = [heading]
        .into_iter()
        .chain(lines)
        .chain([unknown])
        .collect();
    all.join("\n")
}

fn line(name: &str, known: &Distribution, cells: impl Fn(&Histogram) -> u64) -> String {
    let [yields, p_hits] = [&known.expected_yield, &known.p_hit].map(|histogram| {
        let most = histogram.bins.iter().chain([&histogram.unknown]).max();
        let cells = cells(histogram);
        format!(
            "{:<33}",
            format!("{} {}", bar(cells, *most.unwrap_or(&0)), number(cells))
        )
    });
    format!("{name:>9}  {yields}  {}", p_hits.trim_end())
        .trim_end()
        .to_owned()
}

/// A bar as long as its share of the greatest; any cell at all shows.
fn bar(cells: u64, most: u64) -> String {
    let length = (BAR as f64 * cells as f64 / most.max(1) as f64).round() as usize;
    "▇".repeat(length.max(usize::from(cells > 0)))
}

fn number(cells: u64) -> String {
    if cells == 0 {
        return String::new();
    }
    count(cells)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bars_are_in_proportion_and_fit_80_columns() {
        let mut bins = vec![0; 20];
        (bins[0], bins[19]) = (999_999_999, 333_333_333);
        let histogram = |unknown| Histogram {
            bins: bins.clone(),
            unknown,
        };
        let page = distribution_page(&Distribution {
            expected_yield: histogram(1),
            p_hit: histogram(0),
            total: 0,
            cells_done: 0,
        });
        let lines: Vec<&str> = page.lines().collect();
        assert!(
            lines.iter().all(|line| line.chars().count() <= 80),
            "{page}"
        );
        let bars = |line: &str| line.matches('▇').count();
        assert_eq!(lines.len(), 22);
        // a third of 18 in both histograms, then all of it; the one unknown cell still shows
        assert_eq!(
            [1, 20, 21, 2].map(|i| bars(lines[i])),
            [12, 36, 1, 0],
            "{page}"
        );
        assert!(
            lines[1].starts_with(" 95–100 %  ▇▇▇▇▇▇ 333,333,333"),
            "{page}"
        );
    }
}
