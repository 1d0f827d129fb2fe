//! The whole job: `Model` -> depth series -> critical depth -> [`Assessment`].
mod context;
mod critical_depths;
mod describe;
mod mesh_only;
mod outlook;
mod series;
mod vary;

use rayon::prelude::*;

use crate::analysis::{AnalysisError, Stress};
use crate::deepen::DepthPoint;
use crate::depth::{Record, record, snapshot};
use crate::diagnostic::Diagnostic;
use crate::model::Model;
use crate::outcome::{FieldSnapshot, Outcome};
use crate::section::{Section, Site};

pub use context::{Prepared, prepare};

/// How much of the job is done.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Scope {
    /// Geometry and mesh of the surveyed state, nothing solved.
    Mesh,
    /// The surveyed state only.
    Check,
    /// The depth series and the critical depth.
    Deepen,
    /// Everything, with fields and the list of what the answer hangs on.
    Assess,
}

/// What a run reports while it works, and how it is stopped.
pub trait Progress: Sync {
    /// A stage of `total` steps begins; steps may be added to a stage by beginning it again with a larger total.
    fn begin(&self, stage: &str, total: usize);
    /// One step is done.
    fn step(&self);
    /// Whether the run should stop.
    fn cancelled(&self) -> bool;
}

/// Progress that nobody watches.
#[derive(Debug, Clone, Copy, Default)]
pub struct Unwatched;

impl Progress for Unwatched {
    fn begin(&self, _: &str, _: usize) {}
    fn step(&self) {}
    fn cancelled(&self) -> bool {
        false
    }
}

/// Why no assessment could be made.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum AssessError {
    /// The model is wrong in ways that only the section or the strengths show.
    #[error("the model is wrong in {} places", .0.len())]
    Model(Vec<Diagnostic>),
    /// A depth could not be analyzed.
    #[error("at an undercut depth of {depth_m:.2} m: {source}")]
    Depth {
        /// Depth, m.
        depth_m: f64,
        /// Reason.
        source: AnalysisError,
    },
    /// Stopped from outside.
    #[error("interrupted")]
    Cancelled,
}

/// Results of a run.
#[derive(Debug, Clone, PartialEq)]
pub struct Assessment {
    /// Published results; program, file name and hash are left to the boundary.
    pub outcome: Outcome,
    /// Fields of each depth in growing order (governing situation, mean inputs).
    pub fields: Vec<FieldSnapshot>,
    /// Warnings about the model found on the way, for the boundary to show with their places.
    pub warnings: Vec<Diagnostic>,
}

/// One evaluated depth with what later steps need of it.
#[derive(Debug)]
pub(crate) struct Solved {
    pub(crate) record: Record,
    pub(crate) extras: describe::Extras,
    pub(crate) field: Option<FieldSnapshot>,
}

impl Solved {
    fn point(&self) -> DepthPoint {
        DepthPoint {
            depth_m: self.record.section.depth_m(),
            checks: self.record.found.iter().map(|f| f.result.clone()).collect(),
            probes: self.extras.probes.clone(),
            cuts: self.extras.cuts.clone(),
        }
    }
}

/// The solution at depth 0, to which backgrounds and displacements refer.
pub(crate) struct Zero {
    pub(crate) record: Record,
    pub(crate) stress: Stress,
}

impl Zero {
    pub(crate) fn section(&self) -> &Section {
        &self.record.section
    }
}

/// Runs the job on a checked model.
///
/// The results are the same bytes for any number of threads of the current rayon pool: depths are independent and collected
/// in order.
///
/// # Errors
/// [`AssessError`].
pub fn run(model: &Model, scope: Scope, progress: &dyn Progress) -> Result<Assessment, AssessError> {
    let prepared = prepare(model).map_err(AssessError::Model)?;
    let run = Run { prepared: &prepared, scope, progress };
    if scope == Scope::Mesh {
        return run.mesh_only();
    }
    let zero = run.zero()?;
    let solved = match scope {
        Scope::Mesh | Scope::Check => run.solve(&zero, &[0.0, prepared.site.surveyed_depth_m()])?,
        Scope::Deepen | Scope::Assess => run.series(&zero)?,
    };
    run.describe(solved)
}

/// A run: what it works on and how it reports.
pub(crate) struct Run<'a> {
    pub(crate) prepared: &'a Prepared<'a>,
    pub(crate) scope: Scope,
    pub(crate) progress: &'a dyn Progress,
}

impl Run<'_> {
    fn zero(&self) -> Result<Zero, AssessError> {
        let at_zero = |source| AssessError::Depth { depth_m: 0.0, source };
        let (record, stress) = record(&self.prepared.context(), 0.0, None).map_err(at_zero)?;
        Ok(Zero { record, stress })
    }

    /// Solves a batch of depths in parallel; results in the order asked for, equal depths solved once.
    pub(crate) fn solve(&self, zero: &Zero, depths: &[f64]) -> Result<Vec<Solved>, AssessError> {
        let mut wanted = depths.to_vec();
        wanted.dedup_by(|a, b| a.total_cmp(b).is_eq());
        let results: Vec<Result<Solved, AssessError>> = wanted.par_iter().map(|&d| self.solve_one(zero, d)).collect();
        results.into_iter().collect()
    }

    fn solve_one(&self, zero: &Zero, depth_m: f64) -> Result<Solved, AssessError> {
        if self.progress.cancelled() {
            return Err(AssessError::Cancelled);
        }
        let at_depth = |source| AssessError::Depth { depth_m, source };
        let ctx = self.prepared.context();
        let reference = (zero.section(), &zero.stress);
        let solved = |record: Record, stress: &Stress| {
            let extras = describe::extras(&ctx, &record, stress, zero);
            let field = (self.scope == Scope::Assess).then(|| snapshot(&ctx, &record, stress, reference));
            Solved { record, extras, field }
        };
        let solved = if depth_m.total_cmp(&0.0).is_eq() {
            solved(zero.record.clone(), &zero.stress)
        } else {
            let (record, stress) = record(&ctx, depth_m, Some(reference)).map_err(at_depth)?;
            solved(record, &stress)
        };
        self.progress.step();
        Ok(solved)
    }
}

/// Site of a model, for callers that only draw.
///
/// # Errors
/// Everything that keeps the section from being made.
pub fn site(model: &Model) -> Result<Site, Vec<Diagnostic>> {
    Site::new(model).map(|checked| checked.value)
}
