//! The time course of a cell.

use enolattice_model::{CoursePoint, Explanation};
use maud::{Markup, html};

use super::at;
use crate::numbers::time;

const WIDTH: f64 = 470.0;
const HEIGHT: f64 = 236.0;
/// The plot within the picture.
const LEFT: f64 = 44.0;
const RIGHT: f64 = 320.0;
const TOP: f64 = 12.0;
const BOTTOM: f64 = 198.0;
/// Least distance of two labels.
const APART: f64 = 15.0;
/// A curve that moves by less than this until its end has ended.
const STILL: f64 = 0.01;

struct Curve {
    name: String,
    class: &'static str,
    points: Vec<(f64, f64)>,
}

/// The curves of a course, each with its own stroke and its name at its end; nothing where there is no course.
pub(crate) fn course(explanation: &Explanation) -> Markup {
    let points = &explanation.course;
    let (Some(first), Some(last)) = (points.first(), points.last()) else {
        return html! {};
    };
    let curves = curves(explanation);
    let begin_s = first.time_s.min(0.0);
    let end_s = settled(&curves).max(begin_s + 1.0);
    let most = curves
        .iter()
        .flat_map(|curve| curve.points.iter().map(|(_, share)| *share))
        .fold(1.0, f64::max);
    let x = |time_s: f64| LEFT + (RIGHT - LEFT) * (time_s - begin_s) / (end_s - begin_s);
    let y = |share: f64| BOTTOM - (BOTTOM - TOP) * share.clamp(0.0, most) / most;
    let labels = labels(&curves, end_s, y);
    let stays = end_s < 0.98 * last.time_s;
    html! {
        svg.chart viewBox={ "0 0 " (WIDTH) " " (HEIGHT) } role="img"
            aria-label="Time course: share of the substrate charged over time" {
            @for share in [0.0, 0.25, 0.5, 0.75, 1.0] {
                line.grid x1=(LEFT) x2=(RIGHT) y1=(at(y(share))) y2=(at(y(share))) {}
                text x=(LEFT - 6.0) y=(at(y(share) + 4.0)) text-anchor="end" { (format!("{:.0} %", 100.0 * share)) }
            }
            @if begin_s < 0.0 {
                line.zero x1=(at(x(0.0))) x2=(at(x(0.0))) y1=(TOP) y2=(BOTTOM) {}
            }
            @for curve in &curves {
                path.curve.(curve.class) d=(path(&curve.points, end_s, &x, &y)) {}
            }
            @for (curve, place) in curves.iter().zip(&labels) {
                path.curve.(curve.class) d={ "M" (RIGHT + 6.0) " " (at(*place)) "h18" } {}
                text x=(RIGHT + 29.0) y=(at(*place + 4.0)) { (curve.name) }
            }
            @for time_s in ticks(begin_s, end_s) {
                line.tick x1=(at(x(time_s))) x2=(at(x(time_s))) y1=(BOTTOM) y2=(BOTTOM + 4.0) {}
                text x=(at(x(time_s))) y=(BOTTOM + 17.0) text-anchor="middle" { (time(time_s)) }
            }
            text.small x=(LEFT) y=(HEIGHT - 3.0) {
                @if begin_s < 0.0 { "0 s: the electrophile comes" }
                @if begin_s < 0.0 && stays { "; " }
                @if stays { "the product stays as it is until " (time(last.time_s)) }
            }
        }
    }
}

fn curves(explanation: &Explanation) -> Vec<Curve> {
    let of = |read: &dyn Fn(&CoursePoint) -> f64| {
        let points = explanation.course.iter();
        points.map(|point| (point.time_s, read(point))).collect()
    };
    let mut curves = vec![
        Curve {
            name: "wanted product".to_owned(),
            class: "c1",
            points: of(&|point| point.product),
        },
        Curve {
            name: "substrate, neutral".to_owned(),
            class: "c2",
            points: of(&|point| point.substrate),
        },
        Curve {
            name: "its anions".to_owned(),
            class: "c3",
            points: of(&|point| point.anions),
        },
        Curve {
            name: "electrophile".to_owned(),
            class: "c4",
            points: of(&|point| point.electrophile),
        },
    ];
    let lost = |point: &CoursePoint| point.losses.iter().map(|(_, share)| share).sum();
    if explanation.course.iter().any(|point| lost(point) >= STILL) {
        curves.push(Curve {
            name: "all losses".to_owned(),
            class: "c5",
            points: of(&lost),
        });
    }
    curves
}

/// The time from which no curve moves any more; a fifth of it is shown beyond.
fn settled(curves: &[Curve]) -> f64 {
    let of_curve = |curve: &Curve| {
        let last = curve.points.last().copied().unwrap_or_default();
        let moving = curve
            .points
            .iter()
            .rposition(|(_, share)| (share - last.1).abs() > STILL);
        let settled = moving.and_then(|at| curve.points.get(at + 1));
        (settled.map_or(0.0, |(time_s, _)| *time_s), last.0)
    };
    // what is left of the electrophile may decay for hours; nobody waits for that
    let of_substrate = curves.iter().filter(|curve| curve.class != "c4");
    let (settled, last) = of_substrate
        .map(of_curve)
        .fold((0.0_f64, 0.0_f64), |a, b| (a.0.max(b.0), a.1.max(b.1)));
    (1.2 * settled).clamp(60.0_f64.min(last), last)
}

fn path(
    points: &[(f64, f64)],
    end_s: f64,
    x: &dyn Fn(f64) -> f64,
    y: &dyn Fn(f64) -> f64,
) -> String {
    let mut path = String::new();
    let until = points.iter().take_while(|(time_s, _)| *time_s <= end_s);
    let end = (end_s, share_at(points, end_s));
    for (time_s, share) in until.copied().chain([end]) {
        let letter = if path.is_empty() { 'M' } else { 'L' };
        path.push_str(&format!("{letter}{} {}", at(x(time_s)), at(y(share))));
    }
    path
}

/// Share at a time, linear between the points.
fn share_at(points: &[(f64, f64)], time_s: f64) -> f64 {
    let after = points.iter().position(|point| point.0 >= time_s);
    match after {
        None => points.last().map_or(0.0, |point| point.1),
        Some(0) => points[0].1,
        Some(after) => {
            let ((t0, s0), (t1, s1)) = (points[after - 1], points[after]);
            s0 + (s1 - s0) * (time_s - t0) / (t1 - t0).max(1e-9)
        }
    }
}

/// Heights of the names, as near to the ends of their curves as they can be without touching.
fn labels(curves: &[Curve], end_s: f64, y: impl Fn(f64) -> f64) -> Vec<f64> {
    let mut order: Vec<(usize, f64)> = curves
        .iter()
        .map(|curve| y(share_at(&curve.points, end_s)))
        .enumerate()
        .collect();
    order.sort_by(|a, b| a.1.total_cmp(&b.1));
    let mut lowest = TOP - APART;
    for place in &mut order {
        place.1 = place.1.max(lowest + APART);
        lowest = place.1;
    }
    // pushed below the plot, they go up again
    let mut highest = BOTTOM + APART;
    for place in order.iter_mut().rev() {
        place.1 = place.1.min(highest - APART);
        highest = place.1;
    }
    order.sort_by_key(|(curve, _)| *curve);
    order.into_iter().map(|(_, place)| place).collect()
}

/// Three to six round times.
fn ticks(begin_s: f64, end_s: f64) -> Vec<f64> {
    const ROUND_S: [f64; 17] = [
        5.0, 10.0, 20.0, 30.0, 60.0, 120.0, 300.0, 600.0, 1_200.0, 1_800.0, 3_600.0, 7_200.0,
        14_400.0, 21_600.0, 43_200.0, 86_400.0, 172_800.0,
    ];
    let span = end_s - begin_s;
    let step = ROUND_S.into_iter().find(|step| span / step <= 4.5);
    let step = step.unwrap_or(span / 4.0);
    let first = (begin_s / step).ceil() as i64;
    let last = (end_s / step).floor() as i64;
    (first..=last).map(|i| i as f64 * step).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_do_not_touch() {
        let flat = |share: f64| Curve {
            name: String::new(),
            class: "c1",
            points: vec![(0.0, share), (10.0, share)],
        };
        let curves = [flat(0.0), flat(0.01), flat(1.0), flat(0.99), flat(0.0)];
        let mut places = labels(&curves, 10.0, |share| BOTTOM - (BOTTOM - TOP) * share);
        places.sort_by(f64::total_cmp);
        assert!(
            places
                .windows(2)
                .all(|pair| pair[1] - pair[0] >= APART - 1e-9)
        );
        assert!(places.iter().all(|place| (TOP..=BOTTOM).contains(place)));
    }

    #[test]
    fn an_axis_of_time_has_round_ticks() {
        assert_eq!(
            ticks(-1_800.0, 6_000.0),
            [-1_800.0, 0.0, 1_800.0, 3_600.0, 5_400.0]
        );
        for end_s in [3.0, 40.0, 1_000.0, 57_600.0, 1e7] {
            let ticks = ticks(0.0, end_s);
            assert!((1..=7).contains(&ticks.len()), "{end_s}: {ticks:?}");
        }
    }
}
