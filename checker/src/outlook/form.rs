//! Design points: the likeliest way to reach a limit, by the first-order reliability method.
//!
//! Hasofer & Lind 1974; Rackwitz & Fiessler 1978; the merit function and its line search by Zhang & Der Kiureghian 1995, without
//! which the iteration may swing between two points for ever. Theory: eq. (7.3) to (7.5).
use super::normal;

/// When to stop.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FormParams {
    /// Largest number of steps from one start.
    pub max_steps: usize,
    /// Tolerance of the limit function, as a share of its size at the medians, and of the design point's direction.
    pub tolerance: f64,
    /// Farthest distance from the medians that is searched, standard deviations.
    pub farthest: f64,
}

/// Settings for limit functions of demands and capacities.
///
/// 1e-9 leaves ten times the error of a central difference; a reliability index of 10 is a probability of 8e-24.
pub const FORM_PARAMS: FormParams = FormParams { max_steps: 200, tolerance: 1e-9, farthest: 10.0 };

/// The likeliest point on a limit and the probability beyond it to first order.
#[derive(Debug, Clone, PartialEq)]
pub struct DesignPoint {
    /// Independent standard normals at the point; `u = -beta alpha`.
    pub u: Vec<f64>,
    /// Reliability index: distance from the medians, negative when the medians lie beyond the limit.
    pub beta: f64,
    /// Unit gradient of the limit function there: positive where more of the input helps.
    pub alpha: Vec<f64>,
    /// Steps taken.
    pub steps: usize,
}

impl DesignPoint {
    /// Probability to first order, `Phi(-beta)`.
    pub fn probability(&self) -> f64 {
        normal::cdf(-self.beta)
    }
}

/// Why no design point was found.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum FormError {
    /// The limit function gave a value that is not finite.
    #[error("the limit function is not finite {distance:.2} standard deviations from the medians")]
    NotFinite {
        /// Distance from the medians.
        distance: f64,
    },
    /// The limit function does not change with any input.
    #[error("no input moves the limit function {distance:.2} standard deviations from the medians")]
    Flat {
        /// Distance from the medians.
        distance: f64,
    },
    /// The limit is not reached within the distance searched.
    #[error("the limit is not reached within {farthest:.1} standard deviations")]
    OutOfReach {
        /// Distance searched.
        farthest: f64,
    },
    /// The steps did not settle.
    #[error("no convergence after {steps} steps, limit function at {residual:e} of its first value")]
    NoConvergence {
        /// Steps.
        steps: usize,
        /// Limit function over its value at the medians.
        residual: f64,
    },
}

/// Finds the point of `g(u) = 0` nearest to the origin of the independent standard normals.
///
/// ```text
/// d = ((grad g . u - g) / |grad g|^2) grad g - u          (eq. (7.4))
/// m(u) = |u|^2 / 2 + c |g(u)|,  c > |u| / |grad g|        a step along d is halved until m falls
/// ```
///
/// | name     | shape | unit | meaning                                                    |
/// |----------|-------|------|------------------------------------------------------------|
/// | g        | -     | any  | limit function, negative where the limit is passed         |
/// | start    | `[n]` | -    | first point; zeros are the medians                         |
///
/// # Errors
/// [`FormError`], when the function is not finite, does not move, is out of reach or the steps do not settle.
pub fn design_point(g: &dyn Fn(&[f64]) -> f64, start: &[f64], params: &FormParams) -> Result<DesignPoint, FormError> {
    let at_medians = finite(g(&vec![0.0; start.len()]), 0.0)?;
    let scale = if at_medians.abs() > 0.0 { at_medians.abs() } else { 1.0 };
    let mut u = start.to_vec();
    let mut value = finite(g(&u), norm(&u))? / scale;
    let mut penalty = 0.0_f64;
    for steps in 1..=params.max_steps {
        let gradient = gradient(g, &u, scale)?;
        let slope = norm(&gradient);
        // A norm is never negative; NaN was refused with the gradient.
        if slope <= 0.0 {
            return Err(FormError::Flat { distance: norm(&u) });
        }
        let onto = (dot(&gradient, &u) - value) / (slope * slope);
        let target: Vec<f64> = gradient.iter().map(|gi| onto * gi).collect();
        let away: Vec<f64> = target.iter().zip(&u).map(|(t, u)| t - u).collect();
        if value.abs() <= params.tolerance && norm(&away) <= params.tolerance.sqrt() * 1e-2 * (1.0 + norm(&u)) {
            return Ok(point(u, at_medians, &gradient, steps));
        }
        // A penalty that only grows keeps the merit function one and the same function over the last steps.
        penalty = penalty.max(2.0 * norm(&u) / slope).max(2.0 * norm(&target) / slope).max(1e-3);
        let longest = (0.5 * params.farthest / norm(&away)).min(1.0);
        match line_search(&Merit { g, scale, penalty }, &u, &away, longest) {
            Some((next, next_value)) => (u, value) = (next, next_value),
            // No step lowers the merit: rounding or a kink of the limit function; the point stands if it lies on the limit.
            None if value.abs() <= params.tolerance.sqrt() => return Ok(point(u, at_medians, &gradient, steps)),
            None => return Err(FormError::NoConvergence { steps, residual: value.abs() }),
        }
        if params.farthest < norm(&u) {
            return Err(FormError::OutOfReach { farthest: params.farthest });
        }
    }
    Err(FormError::NoConvergence { steps: params.max_steps, residual: value.abs() })
}

/// Tries the medians and then points along both ends of every input; the nearest design point wins.
///
/// # Errors
/// That of the start at the medians when no start succeeds.
pub fn nearest_design_point(g: &dyn Fn(&[f64]) -> f64, n: usize, params: &FormParams) -> Result<DesignPoint, FormError> {
    let first = design_point(g, &vec![0.0; n], params);
    if first.is_ok() {
        return first;
    }
    let starts = (0..n).flat_map(|i| [-2.0, 2.0].map(|end| (i, end)));
    let found = starts.filter_map(|(i, end)| {
        let mut start = vec![0.0; n];
        start[i] = end;
        design_point(g, &start, params).ok()
    });
    found.min_by(|a, b| a.beta.abs().total_cmp(&b.beta.abs())).map_or(first, Ok)
}

fn point(u: Vec<f64>, at_medians: f64, gradient: &[f64], steps: usize) -> DesignPoint {
    let slope = norm(gradient);
    let beta = if at_medians < 0.0 { -norm(&u) } else { norm(&u) };
    DesignPoint { beta, alpha: gradient.iter().map(|gi| gi / slope).collect(), u, steps }
}

struct Merit<'a> {
    g: &'a dyn Fn(&[f64]) -> f64,
    scale: f64,
    penalty: f64,
}

/// First of the steps 1, 1/2, 1/4, … of `longest` that lowers the merit; `None` when none down to 1e-9 does.
fn line_search(merit: &Merit, u: &[f64], away: &[f64], longest: f64) -> Option<(Vec<f64>, f64)> {
    let m = |u: &[f64], value: f64| 0.5 * dot(u, u) + merit.penalty * value.abs();
    let before = m(u, (merit.g)(u) / merit.scale);
    let mut step = longest;
    while 1e-9 < step {
        let next: Vec<f64> = u.iter().zip(away).map(|(u, d)| u + step * d).collect();
        let value = (merit.g)(&next) / merit.scale;
        if value.is_finite() && m(&next, value) < before {
            return Some((next, value));
        }
        step *= 0.5;
    }
    None
}

/// Central differences; a step of 1e-5 standard deviations balances truncation (1e-10) and rounding (1e-11).
fn gradient(g: &dyn Fn(&[f64]) -> f64, u: &[f64], scale: f64) -> Result<Vec<f64>, FormError> {
    let step = 1e-5;
    let mut moved = u.to_vec();
    let mut gradient = Vec::with_capacity(u.len());
    for i in 0..u.len() {
        moved[i] = u[i] + step;
        let above = g(&moved);
        moved[i] = u[i] - step;
        let below = g(&moved);
        moved[i] = u[i];
        gradient.push(finite((above - below) / (2.0 * step * scale), norm(u))?);
    }
    Ok(gradient)
}

fn finite(value: f64, distance: f64) -> Result<f64, FormError> {
    if value.is_finite() { Ok(value) } else { Err(FormError::NotFinite { distance }) }
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

fn norm(a: &[f64]) -> f64 {
    dot(a, a).sqrt()
}

#[cfg(test)]
mod tests;
