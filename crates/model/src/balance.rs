//! The proton balance: all acids and bases at equilibrium, one monotone unknown.

use enolattice_units::math;

/// An acid with all its forms.
#[derive(Clone, Debug, PartialEq)]
pub struct Acid {
    /// Name, for tables.
    pub name: String,
    /// pKa of each step in the medium, first proton first.
    pub pkas: Vec<f64>,
    /// Amounts of its forms charged, mol/L, most protonated first: one more than `pkas`.
    pub charged_m: Vec<f64>,
}

impl Acid {
    fn total(&self) -> f64 {
        self.charged_m.iter().sum()
    }

    /// Amounts of the forms at `pH` on the medium's scale.
    fn forms(&self, ph: f64) -> Vec<f64> {
        let mut logs = vec![0.0];
        for pka in &self.pkas {
            logs.push(logs[logs.len() - 1] + ph - pka);
        }
        let largest = logs.iter().fold(f64::NEG_INFINITY, |a, &b| a.max(b));
        let weights: Vec<f64> = logs.iter().map(|log| math::exp10(log - largest)).collect();
        let sum: f64 = weights.iter().sum();
        weights
            .iter()
            .map(|weight| self.total() * weight / sum)
            .collect()
    }
}

/// Missing protons of a set of forms: the form after step j lacks j.
fn missing(forms: &[f64]) -> f64 {
    forms
        .iter()
        .enumerate()
        .map(|(lost, amount)| lost as f64 * amount)
        .sum()
}

/// Forms of all acids at equilibrium, mol/L, in the order given.
///
/// Protons move between the acids and none is lost: the pH at which as many protons are missing as
/// were missing at the beginning is unique, for each acid loses protons as the pH rises. It is found
/// by bisection; steps of polybasic acids are independent of each other.
///
/// | symbol    | meaning                          | unit  |
/// |-----------|----------------------------------|-------|
/// | `pkas`    | pKa of each step in the medium   | 1     |
/// | `charged` | amounts charged                  | mol/L |
///
/// Shape: acids → for each acid its forms, most protonated first, mol/L.
///
/// ```
/// use enolattice_model::{Acid, proton_balance};
/// // half-neutralised: an acid and its own anion keep their amounts
/// let acid = Acid { name: "acetic acid".into(), pkas: vec![12.3], charged_m: vec![0.1, 0.1] };
/// let forms = proton_balance(&[acid]);
/// assert!((forms[0][0] - 0.1).abs() < 1e-12);
/// ```
pub fn proton_balance(acids: &[Acid]) -> Vec<Vec<f64>> {
    const LOWEST_PH: f64 = -30.0;
    const HIGHEST_PH: f64 = 80.0;
    let wanted: f64 = acids.iter().map(|acid| missing(&acid.charged_m)).sum();
    let (mut low, mut high) = (LOWEST_PH, HIGHEST_PH);
    // 110 units halved until neighbouring numbers remain
    while high - low > 0.0 {
        let ph = 0.5 * (low + high);
        if ph <= low || ph >= high {
            break;
        }
        let found: f64 = acids.iter().map(|acid| missing(&acid.forms(ph))).sum();
        if found < wanted { low = ph } else { high = ph }
    }
    acids
        .iter()
        .map(|acid| acid.forms(0.5 * (low + high)))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn acid(pkas: &[f64], charged_m: &[f64]) -> Acid {
        Acid {
            name: String::new(),
            pkas: pkas.to_vec(),
            charged_m: charged_m.to_vec(),
        }
    }

    #[test]
    fn equal_amounts_share_by_the_root_of_k() {
        // one acid, one base, ΔpKa = 2: x²/(1 − x)² = 100 → x = 10/11
        let forms = proton_balance(&[acid(&[20.0], &[0.1, 0.0]), acid(&[22.0], &[0.0, 0.1])]);
        assert!((forms[0][1] / 0.1 - 10.0 / 11.0).abs() < 1e-12);
    }

    #[test]
    fn protons_are_conserved_with_a_polybasic_acid() {
        let acids = [
            acid(&[6.4, 10.3], &[0.0, 0.0, 0.2]),
            acid(&[13.3], &[0.15, 0.0]),
            acid(&[15.7], &[40.0, 0.0]),
        ];
        let forms = proton_balance(&acids);
        let before: f64 = acids.iter().map(|a| missing(&a.charged_m)).sum();
        let after: f64 = forms.iter().map(|f| missing(f)).sum();
        assert!((after - before).abs() < 1e-9);
    }
}
