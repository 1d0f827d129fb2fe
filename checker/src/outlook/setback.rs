//! How far back: the distance from today's brow that collapse and lay-back pass with an accepted chance, and what stands there.
use super::cycle::BrowCycle;
use super::sampling::Estimate;
use super::years::{Cliff, Timeline};

/// Distances are found to this, m: far below any survey.
const RESOLUTION_M: f64 = 0.01;

/// The cliff with the way each sample's brow moves.
#[derive(Debug, Clone, Copy)]
pub struct Brow<'a> {
    /// Samples.
    pub cliff: Cliff<'a>,
    /// Movement of each sample's brow.
    pub cycles: &'a [BrowCycle],
}

/// Chances by one time.
#[derive(Debug, Clone)]
pub struct BrowBy<'a> {
    brow: Brow<'a>,
    timeline: &'a Timeline,
    i_time: usize,
    /// Chance of the first collapse of each sample.
    first: Vec<f64>,
}

/// The less favourable of a chance over all samples and of the one given that the cliff stands.
pub fn less_favourable(estimates: (Estimate, Option<Estimate>)) -> Estimate {
    match estimates {
        (all, Some(standing)) if all.probability < standing.probability => standing,
        (all, _) => all,
    }
}

impl<'a> Brow<'a> {
    /// Prepares the chances by a time of the timeline.
    pub fn by(&self, timeline: &'a Timeline, i_time: usize) -> BrowBy<'a> {
        BrowBy { brow: *self, timeline, i_time, first: self.cliff.collapse_chance_by(timeline, i_time) }
    }
}

impl BrowBy<'_> {
    /// Chance that the edge has reached `distance_m` behind today's brow: the less favourable of the two.
    pub fn chance_beyond(&self, distance_m: f64) -> Estimate {
        less_favourable(self.brow.cliff.estimates(1, |i, out| out[0] = self.sample_chance(i, distance_m))[0])
    }

    fn sample_chance(&self, i: usize, distance_m: f64) -> f64 {
        let cycle = &self.brow.cycles[i];
        if cycle.first_reaches(distance_m) {
            self.first[i]
        } else {
            self.timeline.growth[self.i_time].exceedance(cycle.gain_to_reach_m(distance_m))
        }
    }

    /// Smallest distance behind today's brow that the edge passes with at most the chance `accepted`, m (rounded up to a
    /// centimetre); 0 where even the brow itself is passed less often.
    pub fn setback_m(&self, accepted: f64) -> f64 {
        let within = |distance: f64| self.chance_beyond(distance).probability <= accepted;
        if within(RESOLUTION_M) {
            return 0.0;
        }
        let (mut low, mut high) = (0.0, 1.0);
        // A chance that never falls to the accepted one would mean growth without end; a kilometre is past any cliff.
        while !within(high) && high < 1000.0 {
            low = high;
            high *= 2.0;
        }
        while RESOLUTION_M < high - low {
            let middle = 0.5 * (low + high);
            if within(middle) {
                high = middle;
            } else {
                low = middle;
            }
        }
        (high / RESOLUTION_M).ceil() * RESOLUTION_M
    }
}

/// First time of the timeline by which the edge has passed `distance_m` with more than the chance `accepted`, yr, on straight lines
/// between the times; `None` = not within the timeline.
pub fn year_passed(brow: &Brow, timeline: &Timeline, distance_m: f64, accepted: f64) -> Option<f64> {
    let chance = |i_time: usize| brow.by(timeline, i_time).chance_beyond(distance_m).probability;
    let last = timeline.times_yr.len() - 1;
    if chance(last) <= accepted {
        return None;
    }
    if accepted < chance(0) {
        return Some(0.0);
    }
    let (mut low, mut high) = (0, last);
    while 1 < high - low {
        let middle = usize::midpoint(low, high);
        if accepted < chance(middle) {
            high = middle;
        } else {
            low = middle;
        }
    }
    let (c0, c1) = (chance(low), chance(high));
    let share = if c0 < c1 { (accepted - c0) / (c1 - c0) } else { 0.0 };
    Some(timeline.times_yr[low] + share * (timeline.times_yr[high] - timeline.times_yr[low]))
}

/// Edge of the ground by one time at several chances: distance behind today's brow that is not passed with the given probabilities,
/// from the growth drawn for each sample; the fan of a figure, not the setback.
///
/// `draws[i]` is the sample's own uniform number, used for every year, so that an edge never moves back.
pub fn edge_quantiles(brow: &Brow, timeline: &Timeline, i_time: usize, draws: &[f64], levels: &[f64]) -> Vec<f64> {
    let law = &timeline.growth[i_time];
    let n = draws.len().min(brow.cycles.len());
    let mut edges: Vec<(f64, f64)> = (0..n)
        .filter(|&i| brow.cliff.stands(i))
        .map(|i| (brow.cycles[i].edge_m(law.exceeded_with(draws[i])), brow.cliff.depths.weight[i] * brow.cliff.likelihood(i)))
        .collect();
    edges.sort_by(|a, b| a.0.total_cmp(&b.0));
    let total: f64 = edges.iter().map(|e| e.1).sum();
    levels
        .iter()
        .map(|level| {
            let mut below = 0.0;
            let at = edges.iter().find(|(_, weight)| {
                below += weight;
                level * total <= below
            });
            at.map_or(0.0, |(edge, _)| *edge)
        })
        .collect()
}

#[cfg(test)]
mod tests;
