//! The little linear algebra that designs need: symmetric matrices by rows.

use enolattice_units::math;

/// A square symmetric matrix.
#[derive(Clone, Debug)]
pub(super) struct Symmetric {
    pub(super) size: usize,
    values: Vec<f64>,
}

impl Symmetric {
    /// `diagonal · I`.
    pub(super) fn scaled_identity(size: usize, diagonal: f64) -> Symmetric {
        let mut values = vec![0.0; size * size];
        for index in 0..size {
            values[index * size + index] = diagonal;
        }
        Symmetric { size, values }
    }

    /// Σ x xᵀ over the rows.
    pub(super) fn information<'a>(size: usize, rows: impl Iterator<Item = &'a [f64]>) -> Symmetric {
        let mut sum = Symmetric::scaled_identity(size, 0.0);
        for row in rows {
            sum.add_square(row, 1.0);
        }
        sum
    }

    /// Adds `factor · x xᵀ`.
    pub(super) fn add_square(&mut self, x: &[f64], factor: f64) {
        for (row, a) in self.values.chunks_exact_mut(self.size).zip(x) {
            if *a != 0.0 {
                let by = factor * a;
                for (value, b) in row.iter_mut().zip(x) {
                    *value += by * b;
                }
            }
        }
    }

    /// M x.
    pub(super) fn times(&self, x: &[f64]) -> Vec<f64> {
        let rows = self.values.chunks_exact(self.size);
        rows.map(|row| dot(row, x)).collect()
    }

    /// The inverse of M + factor · x xᵀ from the inverse M⁻¹ that this is; returns the factor by which
    /// the determinant changes (Sherman & Morrison 1950, doi:10.1214/aoms/1177729893).
    pub(super) fn update_inverse(&mut self, x: &[f64], factor: f64) -> f64 {
        let along = self.times(x);
        let ratio = 1.0 + factor * dot(&along, x);
        self.add_square(&along, -factor / ratio);
        ratio
    }

    /// ln det by Cholesky's factors; none where the matrix is not positive definite within rounding.
    pub(super) fn ln_det(&self) -> Option<f64> {
        let factor = self.cholesky()?;
        let diagonal = (0..self.size).map(|index| factor[index * self.size + index]);
        Some(diagonal.map(|value| 2.0 * math::ln(value)).sum())
    }

    fn cholesky(&self) -> Option<Vec<f64>> {
        let size = self.size;
        let mut lower = vec![0.0; size * size];
        for row in 0..size {
            for column in 0..=row {
                let (a, b) = (row * size, column * size);
                let known = dot(&lower[a..a + column], &lower[b..b + column]);
                let rest = self.values[a + column] - known;
                if row == column {
                    if rest <= 1e-9 * self.values[a + column].max(f64::MIN_POSITIVE) {
                        return None;
                    }
                    lower[a + column] = rest.sqrt();
                } else {
                    lower[a + column] = rest / lower[b + column];
                }
            }
        }
        Some(lower)
    }

    /// The inverse; none where the matrix is not positive definite within rounding.
    pub(super) fn inverse(&self) -> Option<Symmetric> {
        let size = self.size;
        let lower = self.cholesky()?;
        // L⁻¹ by columns, then M⁻¹ = L⁻ᵀ L⁻¹ as a sum over its rows
        let mut inverse = vec![0.0; size * size];
        for column in 0..size {
            for row in column..size {
                let unit = if row == column { 1.0 } else { 0.0 };
                let known: f64 = (column..row)
                    .map(|k| lower[row * size + k] * inverse[k * size + column])
                    .sum();
                inverse[row * size + column] = (unit - known) / lower[row * size + row];
            }
        }
        Some(Symmetric::information(size, inverse.chunks_exact(size)))
    }
}

pub(super) fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_hilbert_matrix_has_its_known_determinant_and_inverse() {
        // H₃ = 1/(i + j − 1): det 1/2160, inverse with first row 9, −36, 30
        let mut matrix = Symmetric::scaled_identity(3, 0.0);
        for row in 0..3 {
            for column in 0..3 {
                matrix.values[row * 3 + column] = 1.0 / (row + column + 1) as f64;
            }
        }
        assert!((matrix.ln_det().unwrap() + 2160f64.ln()).abs() < 1e-9);
        let first = matrix.inverse().unwrap().times(&[1.0, 0.0, 0.0]);
        for (found, known) in first.iter().zip([9.0, -36.0, 30.0]) {
            assert!((found - known).abs() < 1e-8, "{first:?}");
        }
    }

    #[test]
    fn updates_agree_with_the_inverse_of_the_sum() {
        let rows = [[2.0, 1.0], [0.5, -1.0], [1.0, 3.0]];
        let mut matrix = Symmetric::information(2, rows.iter().map(<[f64; 2]>::as_slice));
        let (mut inverse, before) = (matrix.inverse().unwrap(), matrix.ln_det().unwrap());
        let ratio = inverse.update_inverse(&[0.3, -0.7], 1.0);
        matrix.add_square(&[0.3, -0.7], 1.0);
        assert!((matrix.ln_det().unwrap() - before - ratio.ln()).abs() < 1e-12);
        let product = matrix.times(&inverse.times(&[1.0, -2.0]));
        assert!((product[0] - 1.0).abs() < 1e-12 && (product[1] + 2.0).abs() < 1e-12);
    }

    #[test]
    fn a_singular_matrix_has_no_determinant() {
        let matrix =
            Symmetric::information(2, [[1.0, 2.0], [2.0, 4.0]].iter().map(<[f64; 2]>::as_slice));
        assert!(matrix.ln_det().is_none() && matrix.inverse().is_none());
    }
}
