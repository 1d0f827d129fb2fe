//! Reading a model for a command: findings are said at once, in the asked form.
use std::path::Path;

use crate::args::DiagnosticsForm;
use crate::diagnostics::show;
use crate::exit::Exit;
use crate::model_file::{self, LoadedModel};

/// Reads and checks a model file; findings go to standard error.
///
/// # Errors
/// [`Exit::File`] or [`Exit::ModelWrong`], after everything was said.
pub(crate) fn load(path: &Path, form: DiagnosticsForm) -> Result<LoadedModel, Exit> {
    match model_file::read(path) {
        Ok(loaded) => {
            show(&loaded.warnings, form);
            // Step 2: what only the section and the strengths show.
            match checker::assess::prepare(&loaded.model) {
                Ok(prepared) => show(&loaded.locate(&prepared.warnings), form),
                Err(faults) => {
                    show(&loaded.locate(&faults), form);
                    return Err(Exit::ModelWrong);
                }
            }
            Ok(loaded)
        }
        Err(failure) => {
            show(&failure.findings, form);
            Err(if failure.unreadable { Exit::File } else { Exit::ModelWrong })
        }
    }
}
