//! The one place where the boundary calls the analysis.
use checker::assess::{self, AssessError, Assessment};

use crate::args::DiagnosticsForm;
use crate::diagnostics::show;
use crate::exit::Exit;
use crate::model_file::LoadedModel;
use crate::progress::{Reporter, say};

pub use checker::assess::Scope;

/// Runs the analysis on `threads` threads; findings and faults are said at once.
///
/// # Errors
/// [`Exit::ModelWrong`], [`Exit::Analysis`] or [`Exit::Interrupted`], after everything was said.
pub(crate) fn run(
    loaded: &LoadedModel,
    scope: Scope,
    threads: usize,
    form: DiagnosticsForm,
    reporter: &Reporter,
) -> Result<Assessment, Exit> {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().map_err(|error| {
        say(&format!("error: {threads} threads cannot be started: {error}"));
        Exit::Analysis
    })?;
    let result = pool.install(|| assess::run(&loaded.model, scope, reporter));
    reporter.finish();
    match result {
        Ok(assessment) => Ok(assessment),
        Err(AssessError::Model(findings)) => {
            show(&loaded.locate(&findings), form);
            Err(Exit::ModelWrong)
        }
        Err(AssessError::Cancelled) => Err(Exit::Interrupted),
        Err(error) => {
            say(&format!("error: {error}"));
            Err(Exit::Analysis)
        }
    }
}
