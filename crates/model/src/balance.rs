//! The proton balance: all acids and bases at equilibrium, one monotone unknown.

mod lyonium;
mod pot;

use enolattice_units::math;

pub(crate) use pot::{Reached, whole_pot};

/// An acid with all its forms.
#[derive(Clone, Debug, PartialEq)]
pub struct Acid {
    /// Name, for tables.
    pub name: String,
    /// Charge of its most protonated form.
    pub charge: i8,
    /// pKa of each step in the medium, first proton first.
    pub pkas: Vec<f64>,
    /// Amounts of its forms charged, mol/L, most protonated first: one more than `pkas`.
    pub charged_m: Vec<f64>,
    /// log10 K, L/mol, of the hydrogen-bonded complex of its most protonated form with the anion that this
    /// leaves, AH + A⁻ ⇌ AHA⁻ (homoconjugation); `None` where none is known.
    pub log10_homoconjugation: Option<f64>,
}

/// The forms of an acid at equilibrium.
#[derive(Clone, Debug, PartialEq)]
pub struct Forms {
    /// Amounts of the free forms, mol/L, most protonated first.
    pub free_m: Vec<f64>,
    /// Amount of the complex AHA⁻, mol/L; each holds two of the acid.
    pub complex_m: f64,
}

impl Forms {
    /// Protons missing of the most protonated forms, mol/L: the form after step j lacks j, AHA⁻ lacks one.
    pub fn missing_m(&self) -> f64 {
        missing(&self.free_m) + self.complex_m
    }

    /// All of the acid, mol/L.
    pub fn total_m(&self) -> f64 {
        self.free_m.iter().sum::<f64>() + 2.0 * self.complex_m
    }
}

impl Acid {
    fn total(&self) -> f64 {
        self.charged_m.iter().sum()
    }

    /// Forms at `pH` on the medium's scale.
    ///
    /// With shares w of the free forms, `T = F + 2·K·w₀·w₁·F²` has the free amount
    /// `F = 2T/(1 + √(1 + 8·K·w₀·w₁·T))`.
    fn forms(&self, ph: f64) -> Forms {
        let shares = self.shares(ph);
        let total = self.total();
        let bound = match (self.log10_homoconjugation, shares.as_slice()) {
            (Some(log10_k), [acid, anion, ..]) => math::exp10(log10_k) * acid * anion,
            _ => 0.0,
        };
        let free = 2.0 * total / (1.0 + (1.0 + 8.0 * bound * total).sqrt());
        Forms {
            free_m: shares.iter().map(|share| free * share).collect(),
            complex_m: bound * free * free,
        }
    }

    /// Shares of the free forms; they add up to 1.
    fn shares(&self, ph: f64) -> Vec<f64> {
        let mut logs = vec![0.0];
        for pka in &self.pkas {
            logs.push(logs[logs.len() - 1] + ph - pka);
        }
        let largest = logs.iter().fold(f64::NEG_INFINITY, |a, &b| a.max(b));
        let weights: Vec<f64> = logs.iter().map(|log| math::exp10(log - largest)).collect();
        let sum: f64 = weights.iter().sum();
        weights.iter().map(|weight| weight / sum).collect()
    }
}

/// Missing protons of a set of free forms: the form after step j lacks j.
fn missing(forms: &[f64]) -> f64 {
    forms
        .iter()
        .enumerate()
        .map(|(lost, amount)| lost as f64 * amount)
        .sum()
}

/// Forms of all acids at equilibrium, in the order given.
///
/// Protons move between the acids and none is lost: the pH at which as many protons are missing as
/// were missing at the beginning is unique, for each acid loses protons as the pH rises, with or without
/// homoconjugation. It is found by bisection; the forms at a pH have a closed form.
///
/// | symbol    | meaning                          | unit  |
/// |-----------|----------------------------------|-------|
/// | `pkas`    | pKa of each step in the medium   | 1     |
/// | `charged` | amounts charged                  | mol/L |
///
/// Shape: acids → for each acid its forms.
///
/// ```
/// use enolattice_model::{Acid, proton_balance};
/// // half-neutralised: an acid and its own anion keep their amounts
/// let acid = Acid {
///     name: "acetic acid".into(),
///     charge: 0,
///     pkas: vec![12.3],
///     charged_m: vec![0.1, 0.1],
///     log10_homoconjugation: None,
/// };
/// let forms = proton_balance(&[acid]);
/// assert!((forms[0].free_m[0] - 0.1).abs() < 1e-12);
/// ```
pub fn proton_balance(acids: &[Acid]) -> Vec<Forms> {
    const LOWEST_PH: f64 = -60.0;
    const HIGHEST_PH: f64 = 140.0;
    let wanted: f64 = acids.iter().map(|acid| missing(&acid.charged_m)).sum();
    let (mut low, mut high) = (LOWEST_PH, HIGHEST_PH);
    // 200 units, for pKa grow in the cold: halved until neighbouring numbers remain
    while high - low > 0.0 {
        let ph = 0.5 * (low + high);
        if ph <= low || ph >= high {
            break;
        }
        let found: f64 = acids.iter().map(|acid| acid.forms(ph).missing_m()).sum();
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
            charge: 0,
            pkas: pkas.to_vec(),
            charged_m: charged_m.to_vec(),
            log10_homoconjugation: None,
        }
    }

    #[test]
    fn equal_amounts_share_by_the_root_of_k() {
        // one acid, one base, ΔpKa = 2: x²/(1 − x)² = 100 → x = 10/11
        let forms = proton_balance(&[acid(&[20.0], &[0.1, 0.0]), acid(&[22.0], &[0.0, 0.1])]);
        assert!((forms[0].free_m[1] / 0.1 - 10.0 / 11.0).abs() < 1e-12);
    }

    #[test]
    fn protons_and_mass_are_conserved_with_polybasic_acids_and_complexes() {
        let mut acids = [
            acid(&[6.4, 10.3], &[0.0, 0.0, 0.2]),
            acid(&[13.3], &[0.15, 0.0]),
            acid(&[12.3], &[0.1, 0.05]),
            acid(&[15.7], &[40.0, 0.0]),
        ];
        acids[2].log10_homoconjugation = Some(3.7);
        let forms = proton_balance(&acids);
        let before: f64 = acids.iter().map(|a| missing(&a.charged_m)).sum();
        let after: f64 = forms.iter().map(Forms::missing_m).sum();
        assert!((after - before).abs() < 1e-9);
        for (acid, forms) in acids.iter().zip(&forms) {
            assert!((forms.total_m() - acid.total()).abs() < 1e-9);
        }
    }

    /// Half-neutralised: as much acid as anion is free, and `T/2 = x + c`, `c = K·x²`.
    #[test]
    fn a_half_neutralised_acid_is_mostly_complex_where_k_is_large() {
        let mut acetic = acid(&[23.5], &[0.05, 0.05]);
        acetic.log10_homoconjugation = Some(3.67);
        let forms = &proton_balance(&[acetic])[0];
        let x = forms.free_m[0];
        assert!((forms.free_m[1] - x).abs() < 1e-12);
        assert!((forms.complex_m - 10_f64.powf(3.67) * x * x).abs() < 1e-12);
        assert!((x + forms.complex_m - 0.05).abs() < 1e-12);
        assert!(forms.complex_m > 0.9 * 0.05);
    }
}
