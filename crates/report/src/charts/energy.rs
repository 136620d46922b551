//! Free energies along a cell's main way: deprotonation, attack, product.

use enolattice_model::{ExplainedRate, Explanation};
use enolattice_units::{C_STANDARD, H, K_B, LN_10, R_KJ, kelvin, math};
use maud::{Markup, html};

use super::at;
use crate::numbers::fixed;
use crate::page::name;

const WIDTH: f64 = 470.0;
const HEIGHT: f64 = 236.0;
const TOP: f64 = 40.0;
const BOTTOM: f64 = 176.0;
/// Length of a level.
const LEVEL: f64 = 80.0;

struct Level {
    name: &'static str,
    kj_mol: f64,
    class: &'static str,
}

/// The levels with their values: substrate and base; carbanion and spent base; the barrier of the attack; and the product
/// where the model knows the step back. Nothing where the free energy of the deprotonation is unknown.
pub(crate) fn energy(explanation: &Explanation, temperature_c: f64) -> Markup {
    let Some(carbanion) = explanation.delta_g_deprotonation_kj_mol else {
        return html! {};
    };
    let mut levels = vec![
        Level {
            name: "substrate + base",
            kj_mol: 0.0,
            class: "ground",
        },
        Level {
            name: "carbanion",
            kj_mol: carbanion,
            class: "ground",
        },
    ];
    let attack = attack(explanation);
    let mut back = None;
    if let Some(attack) = attack {
        let top = carbanion + barrier_kj_mol(attack.log10_k, temperature_c);
        levels.push(Level {
            name: "attack",
            kj_mol: top,
            class: "barrier",
        });
        back = reverse(explanation, attack);
        if let Some(back) = back {
            levels.push(Level {
                name: "its product",
                kj_mol: top - barrier_kj_mol(back.log10_k, temperature_c),
                class: "ground",
            });
        }
    }
    let downhill = attack.is_some() && back.is_none();
    html! {
        (picture(&levels, downhill))
        @if let Some(attack) = attack {
            p.aside {
                "The attack is " (name(&attack.step)) ", log10 k = " (fixed(attack.log10_k, 1)) " ± "
                (fixed(attack.sigma, 1)) "; ΔG‡ = RT ln(k" sub { "B" } "T c° / h k), c° = 1 mol/L."
                @if downhill { " The model has no way back from its product, whose level is not computed." }
            }
        }
    }
}

/// The step that makes the bond: of those of the carbanion the one through which most goes.
fn attack(explanation: &Explanation) -> Option<&ExplainedRate> {
    explanation.rates.iter().find(|rate| {
        let (from, to) = rate.step.split_once(" → ").unwrap_or_default();
        let of_substrate = from.starts_with("carbanion +") || from.starts_with("carbanion at ");
        of_substrate && to.contains("product")
    })
}

/// The step that undoes another.
fn reverse<'a>(explanation: &'a Explanation, step: &ExplainedRate) -> Option<&'a ExplainedRate> {
    let (from, to) = step.step.split_once(" → ")?;
    let mirrored = format!("{to} → {from}");
    explanation.rates.iter().find(|rate| rate.step == mirrored)
}

/// Barrier of a rate constant in kJ/mol, `ΔG‡ = RT ln(k_B T c° / (h k))` (Eyring 1935, doi:10.1063/1.1749604); of a step of
/// second order for c° = 1 mol/L.
fn barrier_kj_mol(log10_k: f64, temperature_c: f64) -> f64 {
    let kelvin = kelvin(temperature_c);
    R_KJ * kelvin * (math::ln(K_B * kelvin * C_STANDARD / H) - LN_10 * log10_k)
}

fn picture(levels: &[Level], downhill: bool) -> Markup {
    let energies = levels.iter().map(|level| level.kj_mol);
    let most = energies.clone().fold(10.0, f64::max);
    let least = energies.fold(-10.0, f64::min);
    let y = |kj_mol: f64| BOTTOM - (BOTTOM - TOP) * (kj_mol - least) / (most - least);
    let apart = (WIDTH - 30.0 - LEVEL) / 3.0;
    let x = |i: usize| 15.0 + apart * i as f64;
    let ends: Vec<(f64, f64)> = levels
        .iter()
        .enumerate()
        .map(|(i, level)| (x(i), y(level.kj_mol)))
        .collect();
    let last = ends.last().copied().unwrap_or_default();
    // words stand where no line runs: above a height, below a depth
    let is_height = |i: usize| {
        let lower = |other: Option<&(f64, f64)>| other.is_none_or(|other| other.1 >= ends[i].1);
        lower(i.checked_sub(1).and_then(|before| ends.get(before))) && lower(ends.get(i + 1))
    };
    html! {
        svg.chart viewBox={ "0 0 " (WIDTH) " " (HEIGHT) } role="img"
            aria-label="Standard free energies along the main way, kJ/mol" {
            @for pair in ends.windows(2) {
                line.link x1=(at(pair[0].0 + LEVEL)) y1=(at(pair[0].1)) x2=(at(pair[1].0)) y2=(at(pair[1].1)) {}
            }
            @for (i, (level, (x, y))) in levels.iter().zip(&ends).enumerate() {
                @let [value, name] = if is_height(i) { [y - 21.0, y - 8.0] } else { [y + 30.0, y + 17.0] };
                line.level.(level.class) x1=(at(*x)) x2=(at(x + LEVEL)) y1=(at(*y)) y2=(at(*y)) {}
                text.value x=(at(x + LEVEL / 2.0)) y=(at(value)) text-anchor="middle" { (fixed(level.kj_mol, 0)) }
                text x=(at(x + LEVEL / 2.0)) y=(at(name)) text-anchor="middle" { (level.name) }
            }
            @if downhill {
                path.link d={ "M" (at(last.0 + LEVEL)) " " (at(last.1)) "L" (at(x(3) + LEVEL / 2.0)) " " (BOTTOM) } {}
                text x=(at(x(3) + LEVEL / 2.0)) y=(BOTTOM + 17.0) text-anchor="middle" { "product" }
            }
            text.small x="15" y=(HEIGHT - 3.0) { "ΔG in kJ/mol at the temperature of the reaction" }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_units::eyring_rate;

    /// The barrier is that from which `units` makes the same rate constant.
    #[test]
    fn a_barrier_gives_its_rate_constant_back() {
        for (log10_k, temperature_c) in [(0.13, 60.0), (-4.0, -78.0), (9.0, 25.0)] {
            let barrier = barrier_kj_mol(log10_k, temperature_c);
            let k = eyring_rate(barrier, temperature_c);
            assert!((math::log10(k) - log10_k).abs() < 1e-9);
        }
    }
}
