//! How the expected yields of all cells are distributed.

use maud::{Markup, html};

use crate::numbers::{count, percent};

/// How many cells have which expected yield.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Histogram {
    /// Cells in steps of equal width from 0 to 1, lowest yield first.
    pub cells: Vec<u64>,
    /// Cells of which no yield is known.
    pub unknown: u64,
}

const WIDTH: f64 = 860.0;
const HEIGHT: f64 = 250.0;
const LEFT: f64 = 8.0;
/// Where the steps end and, beyond a gap, the unknown begins.
const RIGHT: f64 = 770.0;
const TOP: f64 = 26.0;
const BOTTOM: f64 = 206.0;

impl Histogram {
    /// The picture: a bar with its count for each step, the unknown hatched and apart, a line at the target.
    pub(crate) fn picture(&self, target: f64) -> Markup {
        let most = self.cells.iter().copied().chain([self.unknown]).max();
        let most = most.unwrap_or(0).max(1) as f64;
        let each = (RIGHT - LEFT) / self.cells.len().max(1) as f64;
        let height = |cells: u64| (BOTTOM - TOP) * cells as f64 / most;
        let width = 1.0 / self.cells.len().max(1) as f64;
        let goal = LEFT + (RIGHT - LEFT) * target;
        html! {
            svg.chart.wide viewBox={ "0 0 " (WIDTH) " " (HEIGHT) } role="img"
                aria-label="Histogram of the expected yields of all cells" {
                @for (i, cells) in self.cells.iter().enumerate() {
                    @let x = LEFT + each * i as f64;
                    rect.(crate::palette::class(Some((i as f64 + 0.5) * width))).edge
                        x=(format!("{:.1}", x + 1.5)) y=(format!("{:.1}", BOTTOM - height(*cells)))
                        width=(format!("{:.1}", each - 3.0)) height=(format!("{:.1}", height(*cells))) {}
                    text.tally x=(format!("{:.1}", x + each / 2.0)) y=(format!("{:.1}", BOTTOM - height(*cells) - 5.0))
                        text-anchor="middle" { (brief(*cells)) }
                }
                rect.unknown.edge x=(RIGHT + 24.0) y=(format!("{:.1}", BOTTOM - height(self.unknown)))
                    width="56" height=(format!("{:.1}", height(self.unknown))) {}
                text.tally x=(RIGHT + 52.0) y=(format!("{:.1}", BOTTOM - height(self.unknown) - 5.0)) text-anchor="middle" {
                    (brief(self.unknown))
                }
                line.axis x1=(LEFT) x2=(RIGHT) y1=(BOTTOM) y2=(BOTTOM) {}
                line.axis x1=(RIGHT + 20.0) x2=(RIGHT + 84.0) y1=(BOTTOM) y2=(BOTTOM) {}
                @for quarter in 0..=4 {
                    @let share = f64::from(quarter) / 4.0;
                    @let x = LEFT + (RIGHT - LEFT) * share;
                    line.tick x1=(x) x2=(x) y1=(BOTTOM) y2=(BOTTOM + 5.0) {}
                    text x=(x) y=(BOTTOM + 19.0)
                        text-anchor=(match quarter { 0 => "start", _ => "middle" }) { (percent(Some(share))) }
                }
                text x=(RIGHT + 52.0) y=(BOTTOM + 19.0) text-anchor="middle" { "unknown" }
                line.goal x1=(format!("{goal:.1}")) x2=(format!("{goal:.1}")) y1=(TOP - 14.0) y2=(BOTTOM) {}
                text.small x=(format!("{:.1}", goal + 5.0)) y=(TOP - 6.0) { "target " (percent(Some(target))) }
                text.small x=(LEFT) y=(HEIGHT - 3.0) { "expected yield" }
            }
        }
    }

    /// All cells.
    pub(crate) fn total(&self) -> u64 {
        self.cells.iter().sum::<u64>() + self.unknown
    }
}

/// A count in at most five characters; whole numbers above it stand in the text.
fn brief(number: u64) -> String {
    match number {
        0..10_000 => count(number),
        10_000..1_000_000 => format!("{} k", number / 1_000),
        _ => format!("{:.1} M", number as f64 / 1e6),
    }
}
