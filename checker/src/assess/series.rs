//! The depth series on real sections.
use std::cell::RefCell;
use std::collections::BTreeMap;

use super::{AssessError, Run, Solved, Zero};
use crate::deepen::{DeepenParams, DepthPoint, first_depths, series};

impl Run<'_> {
    /// What the series is made for.
    pub(crate) fn deepen_params(&self) -> DeepenParams {
        let model = &self.prepared.model;
        DeepenParams {
            surveyed_m: self.prepared.site.surveyed_depth_m(),
            search_to_m: model.undercut.search_to_depth_m,
            step_m: model.undercut.depth_step_m,
            required_reserve: model.checks.required_reserve,
            averaging_length_m: self.prepared.averaging_length_m,
        }
    }

    /// Solves the depth series; all solved depths in growing order.
    pub(crate) fn series(&self, zero: &Zero) -> Result<Vec<Solved>, AssessError> {
        let params = self.deepen_params();
        let solved: RefCell<BTreeMap<u64, Solved>> = RefCell::new(BTreeMap::new());
        let total = first_depths(&params).len();
        self.progress.begin("depths", total);
        let asked = RefCell::new(0);
        let solve = |depths: &[f64]| -> Result<Vec<DepthPoint>, AssessError> {
            *asked.borrow_mut() += depths.len();
            self.progress.begin("depths", (*asked.borrow()).max(total));
            let batch = self.solve(zero, depths)?;
            let points = batch.iter().map(Solved::point).collect();
            // depths are not negative, so their bits order as they do
            solved.borrow_mut().extend(batch.into_iter().map(|s| (s.record.section.depth_m().to_bits(), s)));
            Ok(points)
        };
        series(&params, &solve)?;
        Ok(solved.into_inner().into_values().collect())
    }
}
