//! Correlation of the standard normals behind correlated inputs, and the Cholesky factor of the matrix.
use super::Marginal;
use crate::outlook::normal;

/// Half width of the grid of the trapezoidal rule, standard deviations: the density there is 5e-15 of its peak.
const GRID_END: f64 = 8.0;
/// Intervals of that grid. For a smooth integrand under a Gaussian weight the rule converges faster than any power of the step.
const GRID: usize = 64;

/// Correlation of the normals that gives the inputs the correlation asked for (eq. (7.2)), by bisection on
///
/// ```text
/// rho_x(rho_z) = E[ (x_a(z_a) - m_a) (x_b(rho_z z_a + sqrt(1 - rho_z^2) w) - m_b) ] / (s_a s_b),   z_a, w independent normals
/// ```
///
/// # Errors
/// `[lowest, highest]`, the correlations within reach, when the asked one is outside (-1, 1) or not within reach.
pub(super) fn normal_correlation(a: &Marginal, b: &Marginal, asked: f64) -> Result<f64, [f64; 2]> {
    let moments = Moments::new(a, b);
    let reach = [moments.correlation(a, b, -1.0), moments.correlation(a, b, 1.0)];
    let inside = -1.0 < asked && asked < 1.0 && reach[0] < asked && asked < reach[1];
    if !inside {
        return Err(reach);
    }
    let (mut low, mut high) = (-1.0_f64, 1.0_f64);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if moments.correlation(a, b, middle) < asked {
            low = middle;
        } else {
            high = middle;
        }
    }
    Ok(0.5 * (low + high))
}

/// Grid, weights and the first two moments of both inputs.
struct Moments {
    z: Vec<f64>,
    weight: Vec<f64>,
    mean: [f64; 2],
    deviation: [f64; 2],
}

impl Moments {
    fn new(a: &Marginal, b: &Marginal) -> Self {
        let step = 2.0 * GRID_END / GRID as f64;
        let z: Vec<f64> = (0..=GRID).map(|i| -GRID_END + step * i as f64).collect();
        let weight: Vec<f64> = z.iter().map(|&z| step * normal::density(z)).collect();
        let moments = |m: &Marginal| {
            let mean: f64 = z.iter().zip(&weight).map(|(&z, w)| w * m.from_standard(z)).sum();
            let variance: f64 = z.iter().zip(&weight).map(|(&z, w)| w * (m.from_standard(z) - mean).powi(2)).sum();
            (mean, variance.sqrt())
        };
        let ((mean_a, deviation_a), (mean_b, deviation_b)) = (moments(a), moments(b));
        Self { z, weight, mean: [mean_a, mean_b], deviation: [deviation_a, deviation_b] }
    }

    fn correlation(&self, a: &Marginal, b: &Marginal, rho: f64) -> f64 {
        let rest = (1.0 - rho * rho).max(0.0).sqrt();
        let mut sum = 0.0;
        for (&z_a, w_a) in self.z.iter().zip(&self.weight) {
            let x_a = a.from_standard(z_a) - self.mean[0];
            let inner: f64 =
                self.z.iter().zip(&self.weight).map(|(&w, w_b)| w_b * (b.from_standard(rho * z_a + rest * w) - self.mean[1])).sum();
            sum += w_a * x_a * inner;
        }
        sum / (self.deviation[0] * self.deviation[1])
    }
}

/// Lower triangle `L` with `L L^T = matrix`.
///
/// # Errors
/// The row at which a pivot is not above 1e-12, that is where the matrix is not positive definite to working accuracy.
pub(super) fn cholesky(matrix: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, usize> {
    let n = matrix.len();
    let mut lower = vec![vec![0.0; n]; n];
    for i in 0..n {
        for j in 0..=i {
            let known: f64 = (0..j).map(|k| lower[i][k] * lower[j][k]).sum();
            let rest = matrix[i][j] - known;
            lower[i][j] = if j < i {
                rest / lower[j][j]
            } else if 1e-12 < rest {
                rest.sqrt()
            } else {
                return Err(i);
            };
        }
    }
    Ok(lower)
}
