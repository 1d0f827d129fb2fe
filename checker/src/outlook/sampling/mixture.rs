//! Importance sampling by a mixture of normals about the design points of all limits.
use crate::outlook::form::{DesignPoint, FormParams, nearest_design_point};
use crate::outlook::normal;
use crate::outlook::random::Stream;

/// Share of samples drawn as the inputs are distributed: no weight can then exceed 1 / this, whatever limit was overlooked.
const PLAIN_SHARE: f64 = 0.2;

/// A mixture of unit normals in the space of independent standard normals.
///
/// ```text
/// q(u) = sum q_k phi(u - mu_k),   w(u) = phi(u) / q(u) = 1 / sum q_k exp(mu_k . u - |mu_k|^2 / 2)      (eq. (7.11))
/// ```
#[derive(Debug, Clone, PartialEq)]
pub struct Mixture {
    /// Centres with their shares; the first is the origin.
    parts: Vec<(f64, Vec<f64>)>,
}

impl Mixture {
    /// A mixture about design points, each with a share that falls with its distance.
    ///
    /// Shares follow `Phi(-|beta|)^(1/4)`: the nearest limit gets most, and the farther ones enough to be seen. Points whose
    /// first-order probability is under 1e-6 of the largest are left to the plain share.
    pub fn about(points: &[DesignPoint], n_random: usize) -> Self {
        let likely = |p: &DesignPoint| normal::cdf(-p.beta.abs());
        let largest = points.iter().map(likely).fold(0.0, f64::max);
        let mut kept: Vec<&DesignPoint> = Vec::new();
        for point in points.iter().filter(|p| 1e-6 * largest < likely(p)) {
            let near = |k: &&DesignPoint| k.u.iter().zip(&point.u).map(|(a, b)| (a - b).powi(2)).sum::<f64>() < 0.01;
            if !kept.iter().any(near) {
                kept.push(point);
            }
        }
        let share = |p: &DesignPoint| likely(p).powf(0.25);
        let total: f64 = kept.iter().map(|p| share(p)).sum();
        let plain = if kept.is_empty() { 1.0 } else { PLAIN_SHARE };
        let mut parts = vec![(plain, vec![0.0; n_random])];
        parts.extend(kept.iter().map(|p| ((1.0 - plain) * share(p) / total, p.u[..n_random].to_vec())));
        Self { parts }
    }

    /// Number of centres, the origin included.
    pub fn n_parts(&self) -> usize {
        self.parts.len()
    }

    /// Fills `u` and returns the weight.
    pub(super) fn draw(&self, stream: &mut Stream, u: &mut [f64]) -> f64 {
        let mut pick = stream.uniform();
        let mut chosen = &self.parts[0].1;
        for (share, center) in &self.parts {
            chosen = center;
            pick -= share;
            if pick < 0.0 {
                break;
            }
        }
        for (value, center) in u.iter_mut().zip(chosen) {
            *value = center + stream.normal();
        }
        let density: f64 = self
            .parts
            .iter()
            .map(|(share, center)| {
                let exponent: f64 = center.iter().zip(u.iter()).map(|(m, u)| m * u - 0.5 * m * m).sum();
                share * exponent.exp()
            })
            .sum();
        1.0 / density
    }
}

/// A limit function of independent standard normals, negative where the limit is passed.
pub type LimitFunction<'a> = &'a (dyn Fn(&[f64]) -> f64 + Sync);

/// Design points of several limit functions of `n` standard normals; limits that cannot be reached are left out.
pub fn modes_of(limits: &[LimitFunction], n: usize, params: &FormParams) -> Vec<Option<DesignPoint>> {
    use rayon::prelude::*;
    limits.par_iter().map(|g| nearest_design_point(&|u: &[f64]| g(u), n, params).ok()).collect()
}
