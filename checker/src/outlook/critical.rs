//! Critical depths of samples: the first depth at which any check passes its limit, for thousands of samples at once.
//!
//! Nothing is approximated. Samples are sorted into small groups of like coefficients; for such a group an upper bound of each
//! place's demand is known ([`bounds`]), and a place is evaluated for a sample only if its bound does not prove that it cannot
//! matter. Theory: eq. (7.7), (7.8).
mod bounds;
mod search;
mod sort;

use rayon::prelude::*;

use super::demand_model::{DemandModel, Sample};
use super::sampling::Draws;
use super::variables::Variables;
use bounds::Tables;

/// Samples handled together by one thread; part of the result's definition only through [`SampledDepths::n_reached`].
const CHUNK: u64 = 8192;

/// Which samples and depths.
#[derive(Debug, Clone, Copy)]
pub struct SearchParams<'a> {
    /// Number of samples.
    pub n_samples: u64,
    /// Depths of the series that are used, growing indices; the first one is where the cliff stands today.
    pub depth_indices: &'a [usize],
}

/// What passed its limit first.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Governor {
    /// Index of the limit.
    pub limit: u32,
    /// Index of the depth at which it was found over.
    pub depth: u32,
    /// Index of its place there.
    pub place: u32,
}

/// Critical depths of all samples.
#[derive(Debug, Clone, PartialEq)]
pub struct SampledDepths {
    /// Critical depth of each sample for what acts all the time, m; the first depth itself where it is over there, infinite
    /// where nothing passes its limit down to the last depth.
    pub depth_m: Vec<f64>,
    /// The same for each situation with a yearly chance, never deeper than `depth_m`; shape `[n_chance_situations][n_samples]`.
    pub by_chance_m: Vec<Vec<f64>>,
    /// Chance a year of each of those situations.
    pub annual_chances: Vec<f64>,
    /// What governs each sample.
    pub governor: Vec<Option<Governor>>,
    /// Weight of each sample (1 for plain sampling).
    pub weight: Vec<f64>,
    /// Places (over all depths and limits) that no bound ever dropped.
    pub n_reached: usize,
    /// Places of the model.
    pub n_places: usize,
}

/// Critical depths of samples drawn by `draws`; equal, bit for bit, to [`one_critical_depth`] of each sample.
///
/// # Panics
/// If the model's pieces do not fit together, or no depth is given.
pub fn critical_depths(model: &DemandModel, variables: &Variables, draws: &Draws, params: &SearchParams) -> SampledDepths {
    model.sanity_check();
    assert!(!params.depth_indices.is_empty(), "no depths to search");
    let classes = Classes::new(model);
    let tables = Tables::new(model);
    let n_chunks = params.n_samples.div_ceil(CHUNK);
    let chunks: Vec<search::Chunk> = (0..n_chunks)
        .into_par_iter()
        .map(|i_chunk| {
            let range = i_chunk * CHUNK..((i_chunk + 1) * CHUNK).min(params.n_samples);
            search::chunk(&search::Job { model, variables, draws, classes: &classes, tables: &tables, depths: params.depth_indices }, range)
        })
        .collect();
    gather(model, &classes, chunks)
}

/// Critical depth of one sample by looking at every place: the slow way, by which the fast one is checked.
///
/// Returns the depth for what acts all the time, then for each situation with a yearly chance.
pub fn one_critical_depth(model: &DemandModel, sample: &Sample, depth_indices: &[usize]) -> Vec<f64> {
    search::by_every_place(model, &Classes::new(model), sample, depth_indices)
}

/// Limits by when they act: class 0 all the time, one class more for each situation with a yearly chance.
struct Classes {
    of_limit: Vec<usize>,
    annual_chances: Vec<f64>,
}

impl Classes {
    fn new(model: &DemandModel) -> Self {
        let mut annual_chances = Vec::new();
        let of_situation: Vec<usize> = model
            .situations
            .iter()
            .map(|s| {
                s.annual_chance.map_or(0, |chance| {
                    annual_chances.push(chance);
                    annual_chances.len()
                })
            })
            .collect();
        Self { of_limit: model.limits.iter().map(|l| of_situation[l.situation]).collect(), annual_chances }
    }

    fn n(&self) -> usize {
        1 + self.annual_chances.len()
    }
}

fn gather(model: &DemandModel, classes: &Classes, chunks: Vec<search::Chunk>) -> SampledDepths {
    let mut all = SampledDepths {
        depth_m: Vec::new(),
        by_chance_m: vec![Vec::new(); classes.n() - 1],
        annual_chances: classes.annual_chances.clone(),
        governor: Vec::new(),
        weight: Vec::new(),
        n_reached: 0,
        n_places: model.n_places(),
    };
    let mut reached: Vec<bool> = Vec::new();
    for chunk in chunks {
        for depths in chunk.depth_m.chunks_exact(classes.n()) {
            all.depth_m.push(depths[0]);
            for (column, depth) in all.by_chance_m.iter_mut().zip(&depths[1..]) {
                column.push(*depth);
            }
        }
        all.governor.extend(chunk.governor);
        all.weight.extend(chunk.weight);
        reached.resize(chunk.reached.len(), false);
        for (seen, new) in reached.iter_mut().zip(&chunk.reached) {
            *seen |= new;
        }
    }
    all.n_reached = reached.iter().filter(|seen| **seen).count();
    all
}

#[cfg(test)]
mod tests;
