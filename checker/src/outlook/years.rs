//! From critical depths and growth to the chance of collapse by year.
//!
//! For a sample with critical depth `D` the chance to be reached by time `t` is the growth's own law `G_t(D - D_today)`: it is
//! summed, not drawn, so that even rare growth leaves no sampling error of its own. Theory: eq. (7.19) to (7.21).
use rayon::prelude::*;

use super::critical::SampledDepths;
use super::growth::{Growth, GrowthBy, GrowthError};
use super::sampling::{Estimate, Tally};

/// Samples summed by one thread at a time; fixed, so that sums do not depend on threads.
const CHUNK: usize = 4096;

/// Growth at every time of interest.
#[derive(Debug, Clone, PartialEq)]
pub struct Timeline {
    /// Times from today, growing, the first one 0, yr.
    pub times_yr: Vec<f64>,
    /// Law of growth by each of them.
    pub growth: Vec<GrowthBy>,
}

impl Timeline {
    /// Every year to the horizon, the horizon itself, and from there steps of 10 % to twenty horizons, or as far as storms can be summed.
    ///
    /// # Errors
    /// That of [`Growth::by`] within the horizon.
    pub fn new(growth: &Growth, horizon_yr: f64) -> Result<Self, GrowthError> {
        let mut times_yr: Vec<f64> = (0..horizon_yr.ceil() as u32).map(f64::from).collect();
        times_yr.push(horizon_yr);
        let mut timeline = Self::at(growth, &times_yr)?;
        let beyond: Vec<f64> = (1..32).map(|i| horizon_yr * 1.1_f64.powi(i)).collect();
        let laws: Vec<_> = beyond.par_iter().map(|t| growth.by(*t).ok()).collect();
        for (time, law) in beyond.into_iter().zip(laws).map_while(|(time, law)| Some((time, law?))) {
            timeline.times_yr.push(time);
            timeline.growth.push(law);
        }
        Ok(timeline)
    }

    /// At given times.
    ///
    /// # Errors
    /// That of [`Growth::by`].
    ///
    /// # Panics
    /// If the times do not grow from 0.
    pub fn at(growth: &Growth, times_yr: &[f64]) -> Result<Self, GrowthError> {
        assert!(times_yr.first().is_some_and(|t| t.abs() <= 0.0), "times must begin with today");
        assert!(times_yr.windows(2).all(|t| t[0] < t[1]), "times must grow");
        let growth = times_yr.par_iter().map(|t| growth.by(*t)).collect::<Result<Vec<_>, _>>()?;
        Ok(Self { times_yr: times_yr.to_vec(), growth })
    }

    /// Index of the last time not after `time_yr`.
    pub fn index_at(&self, time_yr: f64) -> usize {
        self.times_yr.partition_point(|t| *t <= time_yr * (1.0 + 1e-12)).saturating_sub(1)
    }
}

/// Samples as they stand after evidence.
#[derive(Debug, Clone, Copy)]
pub struct Cliff<'a> {
    /// Critical depths.
    pub depths: &'a SampledDepths,
    /// How well each sample agrees with the evidence, 0 to 1; `None` = no evidence.
    pub likelihood: Option<&'a [f64]>,
    /// Depth today, m.
    pub today_m: f64,
}

/// Chance of collapse by one time.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ChanceBy {
    /// Years from today.
    pub time_yr: f64,
    /// As the model has it.
    pub unconditioned: Estimate,
    /// Given that the cliff stands today; `None` when no sample stands.
    pub standing: Option<Estimate>,
}

impl Cliff<'_> {
    /// Number of samples.
    pub fn n(&self) -> usize {
        self.depths.depth_m.len()
    }

    /// How well a sample agrees with the evidence.
    pub fn likelihood(&self, i: usize) -> f64 {
        self.likelihood.map_or(1.0, |l| l[i])
    }

    /// Whether a sample stands today: its critical depth lies beyond today's depth.
    pub fn stands(&self, i: usize) -> bool {
        self.today_m < self.depths.depth_m[i]
    }

    /// Chance that the model says the cliff has already fallen.
    pub fn already_fallen(&self) -> Estimate {
        self.estimates(1, |i, out| out[0] = f64::from(u8::from(!self.stands(i))))[0].0
    }

    /// Chance of collapse by every time of the timeline.
    pub fn chances(&self, timeline: &Timeline) -> Vec<ChanceBy> {
        let n_times = timeline.times_yr.len();
        let estimates = self.estimates(n_times, |i, out| self.collapse_chances(i, timeline, out));
        let rows = timeline.times_yr.iter().zip(estimates);
        rows.map(|(&time_yr, (unconditioned, standing))| ChanceBy { time_yr, unconditioned, standing }).collect()
    }

    /// Chance of collapse of every sample by one time of the timeline.
    pub fn collapse_chance_by(&self, timeline: &Timeline, i_time: usize) -> Vec<f64> {
        if self.depths.annual_chances.is_empty() {
            return self.depths.depth_m.par_iter().map(|d| timeline.growth[i_time].exceedance(d - self.today_m)).collect();
        }
        let of = |i: usize| {
            let mut out = vec![0.0; i_time + 1];
            self.collapse_chances(i, timeline, &mut out);
            out[i_time]
        };
        (0..self.n()).into_par_iter().map(of).collect()
    }

    /// Estimates of several chances of every sample at once: over all samples, and over those that stand today.
    ///
    /// `values(i, out)` fills the chances of sample `i`.
    pub fn estimates(&self, n_values: usize, values: impl Fn(usize, &mut [f64]) + Sync) -> Vec<(Estimate, Option<Estimate>)> {
        let n = self.n();
        let chunks: Vec<Vec<(Tally, Tally)>> = (0..n.div_ceil(CHUNK))
            .into_par_iter()
            .map(|c| {
                let mut tallies = vec![(Tally::default(), Tally::default()); n_values];
                let mut out = vec![0.0; n_values];
                for i in c * CHUNK..((c + 1) * CHUNK).min(n) {
                    values(i, &mut out);
                    let (weight, likelihood) = (self.depths.weight[i], self.likelihood(i));
                    let stands = if self.stands(i) { likelihood } else { 0.0 };
                    for ((all, standing), value) in tallies.iter_mut().zip(&out) {
                        all.add(*value, likelihood, weight);
                        standing.add(*value, stands, weight);
                    }
                }
                tallies
            })
            .collect();
        let mut sums = vec![(Tally::default(), Tally::default()); n_values];
        for chunk in &chunks {
            for (sum, part) in sums.iter_mut().zip(chunk) {
                sum.0.merge(&part.0);
                sum.1.merge(&part.1);
            }
        }
        let whole = |tally: &Tally| if self.likelihood.is_some() { tally.ratio().unwrap_or_else(|| tally.mean()) } else { tally.mean() };
        sums.iter().map(|(all, standing)| (whole(all), standing.ratio())).collect()
    }

    /// Chance of collapse of one sample by every time: what acts all the time, and situations that come by chance.
    ///
    /// A situation with the chance `p` a year brings the cliff down in the first year it comes after the undercut has reached the
    /// smaller critical depth `D_s`. With `q = 1 - p`, `H_t = G_t(a_s) - sum_j dG_j q^(t - t_j + 1)` (eq. (7.20)), and the parts are
    /// joined as `1 - (1 - G)(1 - H)`: both grow with the same growth, so this is never less than their union (eq. (7.21)).
    fn collapse_chances(&self, i: usize, timeline: &Timeline, out: &mut [f64]) {
        let gained_m = self.depths.depth_m[i] - self.today_m;
        for (value, growth) in out.iter_mut().zip(&timeline.growth) {
            *value = growth.exceedance(gained_m);
        }
        for (depths, chance) in self.depths.by_chance_m.iter().zip(&self.depths.annual_chances) {
            // Where the rare situation asks for no less depth, it adds nothing.
            if self.depths.depth_m[i] <= depths[i] {
                continue;
            }
            let gained_m = depths[i] - self.today_m;
            let quiet = (1.0 - chance).max(0.0);
            let (mut spared, mut before, mut time) = (0.0, 0.0, 0.0);
            for (j, value) in out.iter_mut().enumerate() {
                let reached = timeline.growth[j].exceedance(gained_m);
                let step = timeline.times_yr[j] - time;
                // Whoever arrives within a step is exposed for all of it; whoever is there today, from today on.
                spared = if j == 0 { reached } else { (spared + (reached - before).max(0.0)) * quiet.powf(step) };
                let hit = (reached - spared).max(0.0);
                *value = 1.0 - (1.0 - *value) * (1.0 - hit);
                (before, time) = (reached, timeline.times_yr[j]);
            }
        }
    }
}

/// Time by which the chance has reached `p`, on straight lines between the times; `None` beyond the last of them.
pub fn time_at_chance(chances: &[(f64, f64)], p: f64) -> Option<f64> {
    let after = chances.iter().position(|(_, chance)| p <= *chance)?;
    let Some(before) = after.checked_sub(1) else { return Some(chances[0].0) };
    let ((t0, c0), (t1, c1)) = (chances[before], chances[after]);
    Some(t0 + (t1 - t0) * (p - c0) / (c1 - c0))
}

#[cfg(test)]
mod tests;
