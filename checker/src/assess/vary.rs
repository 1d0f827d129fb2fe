//! The list of what the answer hangs on, from the solved series and a few solutions more.
use rayon::prelude::*;

use super::{AssessError, Prepared, Run, Solved, prepare};
use crate::critical::{Point, excess, first_crossing};
use crate::demand::{Found, InputCase};
use crate::depth::{evaluate_record, record_on};
use crate::outcome::HangsOn;
use crate::sensitivity::{Variation, variations};

/// Depths at which the stress is solved again for a changed model, in steps from the critical depth; the surveyed depth comes to them.
const DEPTHS_AGAIN: [f64; 4] = [-3.0, -1.0, 1.0, 3.0];

impl Run<'_> {
    /// Low and high end of every input, one at a time, with mean inputs otherwise; strongest first.
    pub(super) fn hangs_on(&self, solved: &[Solved], critical_m: Option<f64>) -> Result<Vec<HangsOn>, AssessError> {
        let site = &self.prepared.site;
        let all = variations(&self.prepared.model, site.cliff_height_m(), site.mouth_m()[1], self.prepared.averaging_length_m);
        let again = self.depths_again(solved, critical_m);
        self.progress.begin("what the answer hangs on", all.len());
        let rows: Vec<Result<Option<HangsOn>, AssessError>> = all
            .par_iter()
            .map(|variation| {
                if self.progress.cancelled() {
                    return Err(AssessError::Cancelled);
                }
                let row = self.row(variation, solved, &again);
                self.progress.step();
                Ok(row)
            })
            .collect();
        let mut rows = rows.into_iter().filter_map(Result::transpose).collect::<Result<Vec<_>, _>>()?;
        rows.retain(|row| 1e-4 < effect(row));
        rows.sort_by(|a, b| effect(b).total_cmp(&effect(a)));
        Ok(rows)
    }

    /// Indices of the surveyed depth and of the depths around the critical one.
    fn depths_again(&self, solved: &[Solved], critical_m: Option<f64>) -> Vec<usize> {
        let params = self.deepen_params();
        let last = solved.len() - 1;
        let center = critical_m.map_or(last, |c| solved.iter().position(|s| c <= s.record.section.depth_m()).unwrap_or(last));
        let step = params.step_m;
        let depth = |i: usize| solved[i].record.section.depth_m();
        let surveyed = solved.iter().position(|s| s.record.section.depth_m().total_cmp(&params.surveyed_m).is_eq()).unwrap_or(0);
        let nearest = |d: f64| (0..=last).min_by(|&a, &b| (depth(a) - d).abs().total_cmp(&(depth(b) - d).abs())).unwrap_or(last);
        let mut chosen: Vec<usize> = DEPTHS_AGAIN.iter().map(|k| nearest(depth(center) + k * step)).collect();
        chosen.push(surveyed);
        chosen.retain(|&i| surveyed <= i);
        chosen.sort_unstable();
        chosen.dedup();
        chosen
    }

    fn row(&self, variation: &Variation, solved: &[Solved], again: &[usize]) -> Option<HangsOn> {
        let mut utilization = [None; 2];
        let mut critical_depth_m = [None; 2];
        for (i, model) in variation.models.iter().enumerate() {
            let mut prepared = prepare(model).ok()?;
            if !matches!(variation.what.as_str(), "averaging length") {
                prepared = prepared.with_averaging_length(self.prepared.averaging_length_m);
            }
            if variation.k0_held {
                prepared = prepared.with_k0_of(self.prepared);
            }
            if !variation.solve_again {
                prepared = prepared.with_cases_of(self.prepared);
            }
            let series = if variation.solve_again { solved_again(&prepared, solved, again)? } else { evaluated_again(&prepared, solved) };
            (utilization[i], critical_depth_m[i]) = self.answer(&series);
        }
        let [low, high] = variation.ends;
        Some(HangsOn { what: variation.what.clone(), low, high, unit: variation.unit, utilization, critical_depth_m })
    }

    /// Governing utilization at the surveyed depth and the critical depth of a series of checks.
    fn answer(&self, series: &[(f64, Vec<Found>)]) -> (Option<f64>, Option<f64>) {
        let params = self.deepen_params();
        let worst = |found: &[Found]| found.iter().filter_map(|f| f.result.utilization).reduce(f64::max);
        let today = series.iter().find(|(d, _)| d.total_cmp(&params.surveyed_m).is_eq()).and_then(|(_, f)| worst(f));
        let point = |(depth_m, found): &(f64, Vec<Found>)| {
            let greatest = found.iter().map(|f| excess(&f.result, params.required_reserve)).fold(f64::NEG_INFINITY, f64::max);
            Point { depth_m: *depth_m, excess: greatest, error: 0.0 }
        };
        let points: Vec<Point> = series.iter().map(point).collect();
        let over_today = points.iter().any(|p| p.depth_m.total_cmp(&params.surveyed_m).is_eq() && 0.0 < p.excess);
        let critical = if over_today { Some(params.surveyed_m) } else { first_crossing(&points, params.surveyed_m).map(|c| c.depth_m) };
        (today, critical)
    }
}

/// The checks with other strengths, weights or in-situ stress on the solved stresses.
fn evaluated_again(prepared: &Prepared<'_>, solved: &[Solved]) -> Vec<(f64, Vec<Found>)> {
    let ctx = prepared.context();
    solved.iter().map(|s| (s.record.section.depth_m(), evaluate_record(&ctx, &s.record, &[InputCase::BestEstimate]))).collect()
}

/// The checks with another stiffness, averaging length or model depth, on the final meshes where the body is the same.
fn solved_again(prepared: &Prepared<'_>, solved: &[Solved], again: &[usize]) -> Option<Vec<(f64, Vec<Found>)>> {
    let ctx = prepared.context();
    let one = |&i: &usize| {
        let depth_m = solved[i].record.section.depth_m();
        record_on(&ctx, depth_m, &solved[i].record).ok().map(|record| (depth_m, record.found))
    };
    again.iter().map(one).collect()
}

/// How far an input moves the answer: critical depth where both are known, else utilization.
fn effect(row: &HangsOn) -> f64 {
    let span = |pair: [Option<f64>; 2]| pair[0].zip(pair[1]).map_or(0.0, |(a, b)| (a - b).abs());
    let reached = |pair: [Option<f64>; 2]| f64::from(u8::from(pair[0].is_some() != pair[1].is_some()));
    span(row.critical_depth_m) + reached(row.critical_depth_m) * 100.0 + 0.01 * span(row.utilization)
}
