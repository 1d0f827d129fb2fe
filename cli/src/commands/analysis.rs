//! The one place where the boundary calls the analysis.
use std::sync::{Mutex, PoisonError};

use checker::assess::{self, Progress};
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

/// Runs the analysis on a pool of its own; the error is a sentence for people (exit code 5).
pub(crate) fn run(model: &Model, scope: Scope, threads: Option<u16>, reporter: &Reporter) -> Result<Results, String> {
    let scope = match scope {
        Scope::Assess => assess::Scope::Assess,
        Scope::Check => assess::Scope::Check,
        Scope::Deepen => assess::Scope::Deepen,
        Scope::Mesh => assess::Scope::Mesh,
    };
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads.map_or(0, usize::from)).build().map_err(|e| e.to_string())?;
    let shown = Shown { reporter, stage: Mutex::default() };
    let assessment = pool.install(|| assess::run(model, scope, &shown)).map_err(|e| e.to_string())?;
    Ok(Results { outcome: assessment.outcome, fields: assessment.fields })
}

/// Hands the analysis' progress to the reporter.
struct Shown<'a> {
    reporter: &'a Reporter,
    stage: Mutex<(String, usize, usize)>,
}

impl Progress for Shown<'_> {
    fn begin(&self, stage: &str, total: usize) {
        let mut now = self.stage.lock().unwrap_or_else(PoisonError::into_inner);
        let done = if now.0 == stage { now.1 } else { 0 };
        *now = (stage.to_owned(), done, total);
        self.reporter.step(stage, done, total);
    }

    fn step(&self) {
        let mut now = self.stage.lock().unwrap_or_else(PoisonError::into_inner);
        now.1 += 1;
        self.reporter.step(&now.0, now.1, now.2.max(now.1));
    }

    fn cancelled(&self) -> bool {
        // an interruption ends the process at once and takes the half-written folder with it
        false
    }
}
