//! The search of one chunk of samples, and the slow search by every place.
use std::ops::Range;

use super::bounds::{Bound, Tables};
use super::{Classes, Governor, sort};
use crate::outlook::demand_model::{DemandModel, Law, Sample, margin_of, place_margin};
use crate::outlook::sampling::Draws;
use crate::outlook::variables::Variables;

/// What a chunk needs to know.
pub(super) struct Job<'a> {
    pub(super) model: &'a DemandModel,
    pub(super) variables: &'a Variables,
    pub(super) draws: &'a Draws,
    pub(super) classes: &'a Classes,
    pub(super) tables: &'a Tables,
    pub(super) depths: &'a [usize],
}

/// Results of a chunk, samples in index order.
pub(super) struct Chunk {
    /// Shape `[n_samples][n_classes]`.
    pub(super) depth_m: Vec<f64>,
    pub(super) governor: Vec<Option<Governor>>,
    pub(super) weight: Vec<f64>,
    /// Places that were evaluated for some sample.
    pub(super) reached: Vec<bool>,
}

pub(super) fn chunk(job: &Job, range: Range<u64>) -> Chunk {
    let n = (range.end - range.start) as usize;
    let n_cases = job.model.coefficients.len();
    let mut samples = Vec::with_capacity(n);
    let mut coefficients = Vec::with_capacity(n * n_cases);
    let mut weight = Vec::with_capacity(n);
    let (mut u, mut x) = (vec![0.0; job.variables.n_random()], vec![0.0; job.variables.n_inputs()]);
    for i_sample in range {
        weight.push(job.draws.draw(i_sample, &mut u));
        job.variables.from_standard(&u, &mut x);
        let sample = Sample::new(job.model, &x);
        coefficients.extend_from_slice(&sample.coefficients);
        samples.push(sample);
    }
    let n_classes = job.classes.n();
    let mut chunk =
        Chunk { depth_m: vec![f64::INFINITY; n * n_classes], governor: vec![None; n], weight, reached: vec![false; job.model.n_places()] };
    let mut order: Vec<usize> = (0..n).collect();
    sort::for_each_group(&mut order, &coefficients, &job.tables.case_weight, &mut |group, ends| {
        search_group(job, &samples, group, ends, &mut chunk);
    });
    chunk
}

/// Walks down the depths; samples leave as soon as what acts all the time has passed its limit.
fn search_group(job: &Job, samples: &[Sample], group: &[usize], ends: &[[f64; 2]], chunk: &mut Chunk) {
    let n_classes = job.classes.n();
    let mut open: Vec<usize> = group.to_vec();
    let mut found = vec![(f64::INFINITY, None); n_classes];
    let mut above: Option<(usize, Vec<Bound>)> = None;
    for &i_depth in job.depths {
        let bounds: Vec<Bound> =
            job.model.limits.iter().zip(&job.tables.sets[i_depth]).map(|(limit, set)| set.bound(&limit.law, ends)).collect();
        open.retain(|&i| {
            found.fill((f64::INFINITY, None));
            for (i_limit, bound) in bounds.iter().enumerate() {
                let class = job.classes.of_limit[i_limit];
                if chunk.depth_m[i * n_classes + class].is_finite() {
                    continue;
                }
                let mut look = |i_depth: usize, bound: &Bound, ceiling: f64| {
                    let first = job.tables.first[i_depth][i_limit];
                    let mut reached = |place: usize| chunk.reached[first + place] = true;
                    least_margin(&Asked { model: job.model, i_depth, i_limit, sample: &samples[i], ceiling }, bound, &mut reached)
                };
                let Some((margin, place)) = look(i_depth, bound, 0.0) else { continue };
                let before = above.as_ref().map(|(i_above, bounds)| (*i_above, look(*i_above, &bounds[i_limit], f64::INFINITY)));
                let depth = crossing(&job.model.depths_m, i_depth, margin, before);
                if depth < found[class].0 {
                    let governor = Governor { limit: i_limit as u32, depth: i_depth as u32, place: place as u32 };
                    found[class] = (depth, Some(governor));
                }
            }
            record(&found, &mut chunk.depth_m[i * n_classes..(i + 1) * n_classes], &mut chunk.governor[i])
        });
        if open.is_empty() {
            return;
        }
        above = Some((i_depth, bounds));
    }
}

/// Notes what was found; whether the sample still has to be followed to greater depths.
fn record(found: &[(f64, Option<Governor>)], depth_m: &mut [f64], governor: &mut Option<Governor>) -> bool {
    for (depth, (new, _)) in depth_m.iter_mut().zip(found) {
        *depth = depth.min(*new);
    }
    if let Some(first) = found[0].1 {
        *governor = Some(first);
        let always = depth_m[0];
        for depth in &mut depth_m[1..] {
            *depth = depth.min(always);
        }
    }
    depth_m[0].is_infinite()
}

/// Which margin is asked for.
struct Asked<'a> {
    model: &'a DemandModel,
    i_depth: usize,
    i_limit: usize,
    sample: &'a Sample,
    /// Margins from here on are of no interest.
    ceiling: f64,
}

/// Smallest margin of a limit, if it is below the ceiling, with its place; places that the bounds exclude are not looked at.
fn least_margin(asked: &Asked, bound: &Bound, reached: &mut dyn FnMut(usize)) -> Option<(f64, usize)> {
    let sample = asked.sample;
    let (law, places) = (&asked.model.limits[asked.i_limit].law, &asked.model.places[asked.i_depth][asked.i_limit]);
    let mut worst: Option<(f64, usize)> = None;
    let mut look = |i_place: usize| {
        reached(i_place);
        let margin = place_margin(law, places, i_place, sample);
        // Of equal margins the first place counts, as in the search by every place.
        if margin < asked.ceiling && worst.is_none_or(|(w, i)| margin < w || (margin <= w && i_place < i)) {
            worst = Some((margin, i_place));
        }
        worst.map_or(asked.ceiling, |(w, _)| w)
    };
    let theta = sample.model_factor;
    let mut least = asked.ceiling;
    match (law, bound) {
        (Law::Tension { strength } | Law::Fibre { strength }, Bound::Largest(each)) => {
            let capacity = theta * sample.strengths[*strength][0];
            for &(demand, i_place) in each {
                if least < capacity - demand {
                    break;
                }
                least = look(i_place);
            }
        }
        (Law::Shear { strength }, Bound::Circles { each, least_compression }) => {
            let [_, c, t] = sample.strengths[*strength];
            let slant = (1.0 / (theta * theta) + t * t).sqrt();
            let margin = |[p, r]: [f64; 2]| c + p * t - r * slant;
            for &(circle, i_place) in each {
                // Later circles are smaller; t >= 0 for every checked friction angle.
                if least < margin([*least_compression, circle[1]]) {
                    break;
                }
                if margin(circle) <= least {
                    least = look(i_place);
                }
            }
        }
        (Law::Sliding { strengths }, Bound::Lines { shear, normal }) => {
            for (i_place, (shear, normal)) in shear.iter().zip(normal.chunks_exact(strengths.len().max(1))).enumerate() {
                let share = &places.share[i_place * strengths.len()..(i_place + 1) * strengths.len()];
                let parts = strengths.iter().zip(share).zip(normal);
                let capacity: f64 =
                    parts.map(|((&i, share), n)| (share * sample.strengths[i][1] + n * sample.strengths[i][2]).max(0.0)).sum();
                if theta * capacity - shear <= least {
                    least = look(i_place);
                }
            }
        }
        _ => unreachable!("a bound is made by its own law"),
    }
    worst
}

/// Depth at which the margin of a limit vanishes, linear between the depth above and the one at which it is negative, m.
///
/// `before` is the index of the depth above and the margin there, or `None` at the first depth.
fn crossing(depths_m: &[f64], i_depth: usize, margin: f64, before: Option<(usize, Option<(f64, usize)>)>) -> f64 {
    match before {
        None => depths_m[i_depth],
        Some((i_above, Some((start, _)))) if 0.0 <= start => {
            let above = depths_m[i_above];
            above + (depths_m[i_depth] - above) * start / (start - margin)
        }
        // No place of this limit at the smaller depth: it came into being between the two.
        Some((i_above, _)) => depths_m[i_above],
    }
}

pub(super) fn by_every_place(model: &DemandModel, classes: &Classes, sample: &Sample, depths: &[usize]) -> Vec<f64> {
    let mut found = vec![f64::INFINITY; classes.n()];
    let mut above: Option<usize> = None;
    for &i_depth in depths {
        let mut here = vec![f64::INFINITY; classes.n()];
        for (i_limit, &class) in classes.of_limit.iter().enumerate() {
            match margin_of(model, i_depth, i_limit, sample) {
                Some((margin, _)) if margin < 0.0 && found[class].is_infinite() => {
                    let before = above.map(|i_above| (i_above, margin_of(model, i_above, i_limit, sample)));
                    here[class] = here[class].min(crossing(&model.depths_m, i_depth, margin, before));
                }
                _ => {}
            }
        }
        for (depth, new) in found.iter_mut().zip(&here) {
            *depth = depth.min(*new);
        }
        if found[0].is_finite() {
            let always = found[0];
            return found.iter().map(|d| d.min(always)).collect();
        }
        above = Some(i_depth);
    }
    found
}
