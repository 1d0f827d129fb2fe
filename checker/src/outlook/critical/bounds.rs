//! Upper bounds of demands over a box of coefficients.
//!
//! With the box `c_k0 +- r_k` and unit tensors `S_k`, the largest principal stress is subadditive, so that for every sample in it
//!
//! ```text
//! lambda_1(sum c_k S_k) <= lambda_1(sum c_k0 S_k) + sum r_k rho(S_k)      rho = |p_k| + R_k, the spectral radius   (eq. (7.7))
//! R <= R_0 + sum r_k R_k,   p >= p_0 - sum r_k |p_k|                      for shear                                (eq. (7.8))
//! ```
//!
//! and the same with plain numbers for fibres and lines. A place whose bound stays below a sample's capacity cannot be over, and
//! one whose bound stays below the demand of another place of the same limit cannot govern.
use crate::outlook::demand_model::{DemandModel, Law, Places};

/// Guard against the rounding of bounds: a share of the bound's own size, a thousand times the rounding of a sum of 40 terms.
const ROUNDING: f64 = 1e-11;

/// Unit values in the order in which whole sets of places are bounded.
pub(super) struct Tables {
    /// Shape `[n_depths][n_limits]`.
    pub(super) sets: Vec<Vec<Set>>,
    /// Largest spectral radius of each load case over all places.
    pub(super) case_weight: Vec<f64>,
    /// Number of the first place of a set in the list of all places, same shape.
    pub(super) first: Vec<Vec<usize>>,
}

/// One limit at one depth.
pub(super) struct Set {
    n: usize,
    /// Shape `[n_cases][n_components][n_places]`.
    unit: Vec<f64>,
    /// Sizes of the unit values, shape `[n_cases][n_sizes][n_places]`: `|p|` and `R` of tensors, else absolute values.
    size: Vec<f64>,
    n_sizes: usize,
}

impl Tables {
    pub(super) fn new(model: &DemandModel) -> Self {
        let n_cases = model.coefficients.len();
        let set = |limit_places: (&crate::outlook::demand_model::Limit, &Places)| Set::new(&limit_places.0.law, limit_places.1, n_cases);
        let sets: Vec<Vec<Set>> = model.places.iter().map(|row| model.limits.iter().zip(row).map(set).collect()).collect();
        let mut case_weight = vec![0.0_f64; n_cases];
        for set in sets.iter().flatten() {
            for (k, weight) in case_weight.iter_mut().enumerate() {
                let sizes = &set.size[k * set.n_sizes * set.n..(k + 1) * set.n_sizes * set.n];
                *weight = sizes.iter().copied().fold(*weight, f64::max);
            }
        }
        let mut next = 0;
        let first = sets
            .iter()
            .map(|row| {
                row.iter()
                    .map(|set| {
                        next += set.n;
                        next - set.n
                    })
                    .collect()
            })
            .collect();
        Self { sets, case_weight, first }
    }
}

impl Set {
    fn new(law: &Law, places: &Places, n_cases: usize) -> Self {
        let (n, n_components) = (places.at_m.len(), law.n_components());
        let tensor = matches!(law, Law::Tension { .. } | Law::Shear { .. });
        let n_sizes = if tensor { 2 } else { n_components };
        let mut unit = vec![0.0; n_cases * n_components * n];
        let mut size = vec![0.0; n_cases * n_sizes * n];
        for i in 0..n {
            for k in 0..n_cases {
                let value = |c: usize| places.unit[(i * n_components + c) * n_cases + k];
                for c in 0..n_components {
                    unit[(k * n_components + c) * n + i] = value(c);
                }
                let sizes: &[f64] = if tensor {
                    let (center, radius) = crate::outlook::demand_model::circle(value(0), value(1), value(2));
                    &[center.abs(), radius]
                } else {
                    &(0..n_components).map(|c| value(c).abs()).collect::<Vec<_>>()
                };
                for (s, value) in sizes.iter().enumerate() {
                    size[(k * n_sizes + s) * n + i] = *value;
                }
            }
        }
        Self { n, unit, size, n_sizes }
    }

    /// Bounds over the box given by the ends of each coefficient.
    pub(super) fn bound(&self, law: &Law, ends: &[[f64; 2]]) -> Bound {
        let n_components = law.n_components();
        let mut middle = vec![0.0; n_components * self.n];
        let mut reach = vec![0.0; self.n_sizes * self.n];
        for (k, [low, high]) in ends.iter().enumerate() {
            let (center, half) = (0.5 * (low + high), 0.5 * (high - low) + ROUNDING * high.abs().max(low.abs()));
            add(&mut middle, center, &self.unit[k * n_components * self.n..(k + 1) * n_components * self.n]);
            add(&mut reach, half, &self.size[k * self.n_sizes * self.n..(k + 1) * self.n_sizes * self.n]);
        }
        let n = self.n;
        match law {
            Law::Tension { .. } => Bound::largest((0..n).map(|i| {
                let (center, radius) = crate::outlook::demand_model::circle(middle[i], middle[n + i], middle[2 * n + i]);
                center + radius + reach[i] + reach[n + i]
            })),
            Law::Fibre { .. } => Bound::largest((0..n).map(|i| middle[i] + reach[i])),
            Law::Shear { .. } => Bound::circles((0..n).map(|i| {
                let (center, radius) = crate::outlook::demand_model::circle(middle[i], middle[n + i], middle[2 * n + i]);
                [-center - reach[i], radius + reach[n + i]]
            })),
            Law::Sliding { strengths } => Bound::Lines {
                shear: (0..n).map(|i| middle[i].abs() + reach[i]).collect(),
                normal: (0..n)
                    .flat_map(|i| (1..=strengths.len()).map(move |c| (c, i)))
                    .map(|(c, i)| middle[c * n + i] - reach[c * n + i])
                    .collect(),
            },
        }
    }
}

fn add(sum: &mut [f64], factor: f64, terms: &[f64]) {
    for (s, t) in sum.iter_mut().zip(terms) {
        *s += factor * t;
    }
}

/// Bounds of the places of one limit at one depth, valid for every sample of a group.
pub(super) enum Bound {
    /// Upper bounds of a scalar demand, largest first.
    Largest(Vec<(f64, usize)>),
    /// Circles: lower bound of the mean compression, upper bound of the radius, place; largest radius first.
    Circles {
        /// All circles.
        each: Vec<([f64; 2], usize)>,
        /// Smallest compression of all.
        least_compression: f64,
    },
    /// Lines: upper bound of the shear, lower bounds of the normal parts, shape `[n]` and `[n][n_strengths]`.
    Lines {
        /// Shear.
        shear: Vec<f64>,
        /// Normal parts.
        normal: Vec<f64>,
    },
}

impl Bound {
    fn largest(bounds: impl Iterator<Item = f64>) -> Self {
        let mut each: Vec<(f64, usize)> = bounds.enumerate().map(|(i, b)| (b, i)).collect();
        each.sort_unstable_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        Self::Largest(each)
    }

    fn circles(bounds: impl Iterator<Item = [f64; 2]>) -> Self {
        let mut each: Vec<([f64; 2], usize)> = bounds.enumerate().map(|(i, b)| (b, i)).collect();
        each.sort_unstable_by(|a, b| b.0[1].total_cmp(&a.0[1]).then(a.1.cmp(&b.1)));
        let least_compression = each.iter().fold(f64::INFINITY, |least: f64, (b, _)| least.min(b[0]));
        Self::Circles { each, least_compression }
    }
}
