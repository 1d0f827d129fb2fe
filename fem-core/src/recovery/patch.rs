//! One patch: least-squares fit of a polynomial to samples, as weights.

/// Terms of the complete quadratic `1, x, y, x², xy, y²`.
const N_TERMS: usize = 6;

/// Least share of the largest diagonal that a pivot of the scaled normal matrix may have; below it the points do not carry the polynomial.
const PIVOT_TOLERANCE: f64 = 1e-7;

/// Fit of a patch: coefficients of the polynomial as weights on the samples.
#[derive(Debug, Clone)]
pub(super) struct Fit {
    frame: Frame,
    /// Weights of each sample on the coefficients, shape `[n_samples][6]`; zero beyond `n_terms`.
    inverse: Vec<[f64; N_TERMS]>,
}

impl Fit {
    /// Fits `n_terms` (6, 3 or 1) terms to the points; `None` when the points do not determine them.
    pub(super) fn new(center_m: [f64; 2], points_m: &[[f64; 2]], n_terms: usize) -> Option<Self> {
        if points_m.len() < n_terms {
            return None;
        }
        let frame = Frame::new(center_m, points_m);
        let rows: Vec<[f64; N_TERMS]> = points_m.iter().map(|&p| frame.terms(p)).collect();
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
        Some(Self { frame, inverse })
    }

    /// Weights of the samples on the polynomial's value at a point, times `share`, three for each element.
    pub(super) fn weights_at(&self, point_m: [f64; 2], share: f64) -> impl Iterator<Item = [f64; 3]> + '_ {
        let t = self.frame.terms(point_m).map(|v| share * v);
        let weight = move |c: &[f64; N_TERMS]| t.iter().zip(c).map(|(t, c)| t * c).sum::<f64>();
        self.inverse.chunks_exact(3).map(move |c| [weight(&c[0]), weight(&c[1]), weight(&c[2])])
    }
}

/// Coordinates in which the samples scatter by 1 in every direction, so that slender elements fit as well as stout ones.
#[derive(Debug, Clone, Copy)]
struct Frame {
    center_m: [f64; 2],
    /// Lower Cholesky factor of the mean square `[xx, xy, yy]` of the samples about the center, m.
    scale_m: [f64; 3],
}

impl Frame {
    fn new(center_m: [f64; 2], points_m: &[[f64; 2]]) -> Self {
        let n = points_m.len() as f64;
        let (mut xx, mut xy, mut yy) = (0.0, 0.0, 0.0);
        for p in points_m {
            let (x, y) = (p[0] - center_m[0], p[1] - center_m[1]);
            (xx, xy, yy) = (xx + x * x / n, xy + x * y / n, yy + y * y / n);
        }
        // Points on a line through the center leave one direction without scale; a tiny one keeps the fit finite and its pivot zero.
        let floor = 1e-12 * (xx + yy).max(f64::MIN_POSITIVE);
        let a = xx.max(floor).sqrt();
        let b = xy / a;
        Self { center_m, scale_m: [a, b, (yy - b * b).max(floor).sqrt()] }
    }

    /// Terms of the polynomial.
    fn terms(&self, point_m: [f64; 2]) -> [f64; N_TERMS] {
        let [a, b, c] = self.scale_m;
        let x = (point_m[0] - self.center_m[0]) / a;
        let y = (point_m[1] - self.center_m[1] - b * x) / c;
        [1.0, x, y, x * x, x * y, y * y]
    }
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
