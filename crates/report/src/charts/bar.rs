//! Where the substrate of a cell ends, as a bar of a whole.

use maud::{Markup, html};

use super::at;
use crate::cell::{End, Share};
use crate::numbers::percent;

/// Shares below this are not drawn: less than half a line of the bar.
const DRAWN: f64 = 0.004;

/// The bar. Wanted product is solid, what is left is empty, losses are hatched one way and the other in turn; what nothing
/// is said of is dotted.
pub(crate) fn bar(shares: &[Share]) -> Markup {
    if shares.is_empty() {
        return html! { span.none { "unknown" } };
    }
    let total: f64 = shares.iter().map(|share| share.share).sum();
    let scale = 100.0 / total.max(1.0);
    let mut from = 0.0;
    let mut losses = 0;
    let mut pieces: Vec<(f64, f64, &str)> = Vec::new();
    for share in shares.iter().filter(|share| share.share >= DRAWN) {
        let class = match share.end {
            End::Wanted => "w",
            End::Left(_) => "l",
            End::Lost(_) => {
                losses += 1;
                if losses % 2 == 1 { "x" } else { "y" }
            }
        };
        pieces.push((from, scale * share.share, class));
        from += scale * share.share;
    }
    if from < 99.0 {
        pieces.push((from, 100.0 - from, "q"));
    }
    html! {
        svg.bar viewBox="0 0 100 10" preserveAspectRatio="none" role="img" aria-label=(bar_words(shares, 4)) {
            @for (x, width, class) in &pieces {
                rect.(class) x=(at(*x)) y="0" width=(at(*width)) height="10" {}
            }
        }
    }
}

/// The same in words: the wanted product, then the largest losses with their names.
pub(crate) fn bar_words(shares: &[Share], most: usize) -> String {
    let mut told: Vec<&Share> = shares.iter().filter(|share| share.share >= DRAWN).collect();
    told.sort_by(|a, b| {
        let is_loss = |share: &Share| share.end != End::Wanted;
        let larger_first = b.share.total_cmp(&a.share);
        is_loss(a).cmp(&is_loss(b)).then(larger_first)
    });
    let written = |share: &&Share| format!("{} {}", percent(Some(share.share)), share.name());
    let mut words: Vec<String> = told.iter().take(most).map(written).collect();
    let further: f64 = told.iter().skip(most).map(|share| share.share).sum();
    if further >= DRAWN {
        words.push(format!("{} other", percent(Some(further))));
    }
    words.join(", ")
}

/// The patterns of the bars, once a page.
pub(crate) fn bar_patterns() -> Markup {
    html! {
        pattern id="hx" width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)" {
            rect.xa width="4" height="4" {}
            rect.xb width="1.6" height="4" {}
        }
        pattern id="hy" width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(-45)" {
            rect.ya width="4" height="4" {}
            rect.yb width="1.2" height="4" {}
        }
        pattern id="hq" width="4" height="4" patternUnits="userSpaceOnUse" {
            circle.qb cx="2" cy="2" r="0.7" {}
        }
        pattern id="hu" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)" {
            rect.ua width="6" height="6" {}
            rect.ub width="1" height="6" {}
        }
    }
}

#[cfg(test)]
mod tests {
    use enolattice_model::Channel;

    use super::*;

    #[test]
    fn a_bar_fills_its_length() {
        for shares in [
            Share::of(0.5, &[(Channel::OAttack, 0.2)]),
            Share::of(0.9, &[(Channel::SlowAttack, 0.4)]),
        ] {
            let bar = bar(&shares).into_string();
            let widths = bar.split("width=\"").skip(1);
            let total: f64 = widths
                .map(|rest| rest.split('"').next().unwrap_or_default())
                .map(|width| width.parse::<f64>().expect("a number"))
                .sum();
            assert!((total - 100.0).abs() < 0.5, "{bar}");
        }
    }

    #[test]
    fn what_is_left_is_not_what_is_lost() {
        let losses = [(Channel::SlowAttack, 0.3), (Channel::OAttack, 0.1)];
        let shares = Share::of(0.6, &losses);
        let classes = bar(&shares).into_string();
        assert!(classes.find("class=\"x\"") < classes.find("class=\"l\""));
        let words = bar_words(&shares, 9);
        assert!(
            words.ends_with("30\u{202f}% left (slow attack), 10\u{202f}% O-attack"),
            "{words}"
        );
    }

    #[test]
    fn no_share_is_unknown_and_not_empty() {
        assert!(bar(&[]).into_string().contains("unknown"));
    }
}
