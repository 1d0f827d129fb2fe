//! Design points of the collapse by a time: one limit function for each check, with the growth of the undercut as one more input.
use super::demand_model::{DemandModel, Sample, margin_of};
use super::form::{DesignPoint, FormParams, nearest_design_point};
use super::growth::GrowthBy;
use super::normal;
use super::variables::Variables;

/// What a limit function of collapse needs.
#[derive(Debug, Clone, Copy)]
pub struct CollapseLimits<'a> {
    /// Demands and strengths.
    pub model: &'a DemandModel,
    /// Inputs.
    pub variables: &'a Variables,
    /// Depths of the series that are used, growing; the first one is today's.
    pub depth_indices: &'a [usize],
    /// Growth by the time asked for.
    pub growth: &'a GrowthBy,
}

/// A limit with its design point.
#[derive(Debug, Clone, PartialEq)]
pub struct Mode {
    /// Index of the limit.
    pub limit: usize,
    /// Its design point; the last number belongs to the growth of the undercut.
    pub point: DesignPoint,
}

impl CollapseLimits<'_> {
    /// Limit function of one limit, Pa: the smallest margin on the way from today's depth to the depth reached.
    ///
    /// The last standard normal stands for the growth: the depth gained is exceeded with the chance `Phi(-u)`. Beyond the last
    /// depth of the series the last margin is held: nothing is known there.
    pub fn margin(&self, i_limit: usize, u: &[f64]) -> f64 {
        let (own, growth) = u.split_at(self.variables.n_random());
        let mut x = vec![0.0; self.variables.n_inputs()];
        self.variables.from_standard(own, &mut x);
        let sample = Sample::new(self.model, &x);
        let depths = &self.model.depths_m;
        let reached_m = depths[self.depth_indices[0]] + self.growth.exceeded_with(normal::cdf(-growth[0]));
        let margin_at = |i: usize| margin_of(self.model, self.depth_indices[i], i_limit, &sample).map(|(m, _)| m);
        let mut least = f64::INFINITY;
        let mut above: Option<f64> = None;
        for i in 0..self.depth_indices.len() {
            let here_m = depths[self.depth_indices[i]];
            let Some(here) = margin_at(i) else { continue };
            if here_m <= reached_m {
                least = least.min(here);
                above = Some(here);
                continue;
            }
            if let (Some(start), Some(before)) = (above, i.checked_sub(1)) {
                let from_m = depths[self.depth_indices[before]];
                least = least.min(start + (here - start) * (reached_m - from_m) / (here_m - from_m));
            }
            break;
        }
        least
    }

    /// Design points of all limits that act all the time; limits without places or out of reach are left out.
    pub fn modes(&self, params: &FormParams) -> Vec<Mode> {
        use rayon::prelude::*;
        let always = |i: &usize| self.model.situations[self.model.limits[*i].situation].annual_chance.is_none();
        let limits: Vec<usize> = (0..self.model.limits.len()).filter(always).collect();
        let n = self.variables.n_random() + 1;
        let found: Vec<Option<Mode>> = limits
            .par_iter()
            .map(|&limit| {
                let g = |u: &[f64]| self.margin(limit, u);
                nearest_design_point(&g, n, params).ok().map(|point| Mode { limit, point })
            })
            .collect();
        found.into_iter().flatten().collect()
    }

    /// Share of each input in what makes the collapse likely or not, `gamma_i^2` (eq. (7.5)), largest first; the growth of the
    /// undercut under the given name. Correlated inputs share by the unit vector `gamma = alpha L^-1`.
    pub fn importance(&self, mode: &Mode, growth_name: &str) -> Vec<(String, f64)> {
        let (own, growth) = mode.point.alpha.split_at(self.variables.n_random());
        let mut parts: Vec<(String, f64)> = self.variables.undo_correlation(own);
        parts.push((growth_name.to_owned(), growth[0]));
        let total: f64 = parts.iter().map(|p| p.1 * p.1).sum();
        for part in &mut parts {
            part.1 = part.1 * part.1 / total;
        }
        parts.sort_by(|a, b| b.1.total_cmp(&a.1).then_with(|| a.0.cmp(&b.0)));
        parts
    }
}

#[cfg(test)]
mod tests;
