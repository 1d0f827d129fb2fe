//! One patch: least-squares fit of a polynomial to samples, as weights.

/// Terms of the complete quadratic `1, x, y, x², xy, y²`.
const N_TERMS: usize = 6;

/// Least share of the largest diagonal that a pivot of the scaled normal matrix may have; below it the points do not carry the polynomial.
const PIVOT_TOLERANCE: f64 = 1e-7;

/// Fit of a patch: coefficients of the polynomial as weights on the samples.
#[derive(Debug, Clone)]
pub(super) struct Fit {
    center_m: [f64; 2],
    radius_m: f64,
    /// Weights of each sample on the coefficients, shape `[n_samples][6]`; zero beyond `n_terms`.
    inverse: Vec<[f64; N_TERMS]>,
}

impl Fit {
    /// Fits `n_terms` (6, 3 or 1) terms to the points; `None` when the points do not determine them.
    pub(super) fn new(center_m: [f64; 2], points_m: &[[f64; 2]], n_terms: usize) -> Option<Self> {
        let distance = |p: &[f64; 2]| (p[0] - center_m[0]).hypot(p[1] - center_m[1]);
        let radius_m = points_m.iter().map(distance).fold(0.0, f64::max);
        if points_m.len() < n_terms {
            return None;
        }
        let rows: Vec<[f64; N_TERMS]> = points_m.iter().map(|&p| terms(center_m, radius_m, p)).collect();
        let mut normal = [[0.0; N_TERMS]; N_TERMS];
        for r in &rows {
            for i in 0..n_terms {
                for j in 0..=i {
                    normal[i][j] += r[i] * r[j];
                }
            }
        }
        let factor = cholesky(normal, n_terms)?;
        let inverse = rows.iter().map(|r| back_substitute(&factor, r, n_terms)).collect();
        Some(Self { center_m, radius_m, inverse })
    }

    /// Weights of the samples on the polynomial's value at a point, times `share`, one after the other.
    pub(super) fn weights_at(&self, point_m: [f64; 2], share: f64) -> impl Iterator<Item = f64> + '_ {
        let t = terms(self.center_m, self.radius_m, point_m).map(|v| share * v);
        self.inverse.iter().map(move |c| t.iter().zip(c).map(|(t, c)| t * c).sum())
    }
}

/// Terms of the polynomial in coordinates scaled by the patch, so that the normal matrix is of order 1.
fn terms(center_m: [f64; 2], radius_m: f64, point_m: [f64; 2]) -> [f64; N_TERMS] {
    let (x, y) = ((point_m[0] - center_m[0]) / radius_m, (point_m[1] - center_m[1]) / radius_m);
    [1.0, x, y, x * x, x * y, y * y]
}

/// Lower Cholesky factor of the leading block of size `n`, or `None` at a pivot below the tolerance.
fn cholesky(mut a: [[f64; N_TERMS]; N_TERMS], n: usize) -> Option<[[f64; N_TERMS]; N_TERMS]> {
    let largest = (0..n).map(|i| a[i][i]).fold(0.0, f64::max);
    for i in 0..n {
        for j in 0..=i {
            let sum = a[i][j] - (0..j).map(|k| a[i][k] * a[j][k]).sum::<f64>();
            if i == j {
                let carries = PIVOT_TOLERANCE * largest < sum;
                if !carries {
                    return None;
                }
                a[i][i] = sum.sqrt();
            } else {
                a[i][j] = sum / a[j][j];
            }
        }
    }
    Some(a)
}

fn back_substitute(l: &[[f64; N_TERMS]; N_TERMS], rhs: &[f64; N_TERMS], n: usize) -> [f64; N_TERMS] {
    let mut x = [0.0; N_TERMS];
    for i in 0..n {
        x[i] = (rhs[i] - (0..i).map(|k| l[i][k] * x[k]).sum::<f64>()) / l[i][i];
    }
    for i in (0..n).rev() {
        x[i] = (x[i] - (i + 1..n).map(|k| l[k][i] * x[k]).sum::<f64>()) / l[i][i];
    }
    x
}
