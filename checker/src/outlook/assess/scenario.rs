//! Samples with their evidence and the way their brows move.
use super::{AssessInput, EvidenceInput};
use crate::model::EvidenceKind;
use crate::outcome::Refusal;
use crate::outlook::critical::{SampledDepths, SearchParams, critical_depths};
use crate::outlook::cycle::BrowCycle;
use crate::outlook::demand_model::Sample;
use crate::outlook::evidence::{
    LEAST_EFFECTIVE_SIZE, Reweighted, SampleStrength, before_and_after, closed_form_likelihood, likelihood_of, reweight,
};
use crate::outlook::sampling::Draws;
use crate::outlook::variables::Marginal;
use crate::outlook::years::Cliff;

/// Samples of one way of drawing.
pub(super) struct Scenario {
    pub(super) depths: SampledDepths,
    pub(super) evidence: Option<Reweighted>,
    /// Mean mobilised tensile strength before and after evidence, Pa.
    pub(super) mobilised_pa: Option<[f64; 2]>,
    pub(super) cycles: Vec<BrowCycle>,
}

impl Scenario {
    pub(super) fn new(input: &AssessInput, draws: &Draws, n_samples: u64, depth_indices: &[usize]) -> Result<Self, Refusal> {
        let depths = critical_depths(input.demand, input.variables, draws, &SearchParams { n_samples, depth_indices });
        let cycles = (0..depths.depth_m.len())
            .map(|i| {
                let critical_m = depths.depth_m[i];
                let lost_m = depths.governor[i].map_or(0.0, |g| input.ground_lost.at_m(g.limit as usize, critical_m));
                BrowCycle { today_m: input.today_m(), critical_m, lost_m, lay_back_m: input.lay_back_m }
            })
            .collect();
        let mut scenario = Self { depths, evidence: None, mobilised_pa: None, cycles };
        if !input.evidence.is_empty() {
            scenario.weigh(input, draws, n_samples)?;
        }
        Ok(scenario)
    }

    pub(super) fn cliff(&self, input: &AssessInput) -> Cliff<'_> {
        Cliff { depths: &self.depths, likelihood: self.evidence.as_ref().map(|e| e.likelihood.as_slice()), today_m: input.today_m() }
    }

    /// Runs the evidence on the same samples.
    fn weigh(&mut self, input: &AssessInput, draws: &Draws, n_samples: u64) -> Result<(), Refusal> {
        let refuse = |reason: String| Refusal { code: "outlook.evidence", reason };
        let strengths: Vec<Vec<SampleStrength>> = input.evidence.iter().map(|e| sample_strengths(input, e, draws, n_samples)).collect();
        let mut agreements = Vec::new();
        for (evidence, strengths) in input.evidence.iter().zip(&strengths) {
            agreements.push(agreement(input, evidence, strengths, draws).map_err(refuse)?);
        }
        let weighed = reweight(&agreements, &self.depths.weight).map_err(|size| {
            refuse(format!(
                "the evidence leaves {size:.0} samples' worth of information, fewer than {LEAST_EFFECTIVE_SIZE:.0}: it contradicts the inputs, or more samples are needed"
            ))
        })?;
        let first: Vec<f64> = strengths[0].iter().map(|s| s.tensile_strength_pa).collect();
        self.mobilised_pa = Some(before_and_after(&first, &self.depths.weight, &weighed.likelihood));
        self.evidence = Some(weighed);
        Ok(())
    }
}

/// Strength and weight of every sample for one piece of evidence: the samples are drawn again from their own streams.
fn sample_strengths(input: &AssessInput, evidence: &EvidenceInput, draws: &Draws, n_samples: u64) -> Vec<SampleStrength> {
    use rayon::prelude::*;
    (0..n_samples)
        .into_par_iter()
        .map(|i| {
            let (mut u, mut x) = (vec![0.0; input.variables.n_random()], vec![0.0; input.variables.n_inputs()]);
            draws.draw(i, &mut u);
            input.variables.from_standard(&u, &mut x);
            let sample = Sample::new(input.demand, &x);
            SampleStrength {
                tensile_strength_pa: sample.model_factor * sample.strengths[evidence.strength][0],
                unit_weight_n_per_m3: x[evidence.unit_weight],
            }
        })
        .collect()
}

fn agreement(input: &AssessInput, evidence: &EvidenceInput, strengths: &[SampleStrength], draws: &Draws) -> Result<Vec<f64>, String> {
    let Some(section) = evidence.section else {
        return closed_form_likelihood(evidence.evidence, strengths).map_err(|e| e.to_string());
    };
    let depth_m = Marginal::new("undercut_depth_m", &evidence.evidence.undercut_depth_m).map_err(|e| e.to_string())?;
    let depth_indices: Vec<usize> = (0..section.depths_m.len()).collect();
    let params = SearchParams { n_samples: strengths.len() as u64, depth_indices: &depth_indices };
    let found = critical_depths(section, input.variables, draws, &params);
    let what: EvidenceKind = evidence.evidence.what;
    Ok(likelihood_of(what, &depth_m, &found.depth_m))
}
