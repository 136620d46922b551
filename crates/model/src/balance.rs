//! The proton balance: all X–H acids at equilibrium, one monotone unknown.

use crate::network::FAST;

/// Smallest and largest proton activity considered, on the scale of 10^−pKa.
pub(crate) const LEAST_ACTIVITY: f64 = 1e-60;
/// Largest proton activity.
pub(crate) const LARGEST_ACTIVITY: f64 = 1e10;

/// Solves `Σ Tₖ·Kₖ/(Kₖ + h) = charge` for the proton activity `h`.
///
/// | symbol   | meaning                                  | unit  |
/// |----------|------------------------------------------|-------|
/// | Tₖ       | total concentration of acid k            | mol/L |
/// | Kₖ       | its acidity constant 10^−pKa; 0: absent  | mol/L |
/// | `charge` | negative charge on all the acids' anions | mol/L |
///
/// The left side falls with h, so the root is unique; Newton's steps in ln h are kept in a
/// bracket. A charge of none gives the largest activity, one of more than ΣTₖ the least.
/// The result is exact to a relative 1e-13.
pub(crate) fn proton_activity(totals: &[f64; FAST], k: &[f64; FAST], charge: f64, guess: f64) -> f64 {
    let present: f64 = totals.iter().zip(k).filter(|&(_, &k)| k > 0.0).map(|(t, _)| t).sum();
    if charge <= 0.0 {
        return LARGEST_ACTIVITY;
    }
    if charge >= present {
        return LEAST_ACTIVITY;
    }
    let (mut low, mut high) = (LEAST_ACTIVITY, LARGEST_ACTIVITY);
    let mut h = guess.clamp(low, high);
    for _ in 0..200 {
        let (mut f, mut slope) = (-charge, 0.0);
        for (&t, &k) in totals.iter().zip(k) {
            let ionised = k / (k + h);
            f += t * ionised;
            slope += t * ionised * (1.0 - ionised);
        }
        if f > 0.0 { low = h } else { high = h }
        let step = if slope > 0.0 { f / slope } else { f64::INFINITY };
        let next = if step.abs() < 1.0 {
            // e^step by its Padé approximant: exact enough for Newton, no exponential needed
            h * (2.0 + step) / (2.0 - step)
        } else {
            (low * high).sqrt()
        };
        let next = if next > low && next < high { next } else { (low * high).sqrt() };
        if (next / h - 1.0).abs() < 1e-13 {
            return next;
        }
        h = next;
    }
    h
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn half_neutralised_acid_has_the_activity_of_its_constant() {
        let totals = [0.2, 0.0, 0.0, 0.0, 0.0, 0.0];
        let k = [1e-20, 0.0, 0.0, 0.0, 0.0, 0.0];
        let h = proton_activity(&totals, &k, 0.1, 1.0);
        assert!((h / 1e-20 - 1.0).abs() < 1e-12);
    }

    #[test]
    fn charge_is_conserved_over_fifty_units_of_pka() {
        let totals = [0.22, 17.1, 0.003, 0.2, 0.05, 0.01];
        let k = [1e-36, 1e-29, 1e-31, 1e-12, 1e-25, 1e-3];
        for charge in [1e-9, 0.01, 0.21, 0.3, 5.0, 17.0] {
            let h = proton_activity(&totals, &k, charge, 1e-15);
            let sum: f64 = totals.iter().zip(&k).map(|(t, k)| t * k / (k + h)).sum();
            assert!((sum / charge - 1.0).abs() < 1e-10, "{charge}: {sum}");
        }
    }
}
