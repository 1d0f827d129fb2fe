//! The one place where the boundary calls the analysis.
use checker::model::Model;
use checker::outcome::{FieldSnapshot, Outcome};

use crate::progress::Reporter;

/// How much of the job is done.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Scope {
    /// Everything.
    Assess,
    /// The surveyed state.
    Check,
    /// The depth series and the critical depth.
    Deepen,
    /// Geometry and mesh, nothing solved.
    Mesh,
}

/// What the analysis gives to the outputs.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Results {
    /// Published results.
    pub outcome: Outcome,
    /// Fields for pictures and viewers, by depth.
    pub fields: Vec<FieldSnapshot>,
}

/// Runs the analysis; the error is a sentence for people (exit code 5).
pub(crate) fn run(_model: &Model, _scope: Scope, _threads: Option<u16>, _reporter: &Reporter) -> Result<Results, String> {
    Err("the analysis is not available yet".to_owned())
}
