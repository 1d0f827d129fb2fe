//! Reading a model for a command: findings are said at once, in the asked form.
use std::path::Path;

use checker::diagnostic::Diagnostic;
use checker::model::Model;

use crate::args::DiagnosticsForm;
use crate::diagnostics::show;
use crate::exit::Exit;
use crate::model_file::{self, LoadedModel};
use crate::output::map::crs::{Grid, GridError};

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
            if let Err(fault) = map_grid(&loaded.model) {
                show(&loaded.locate(&[fault]), form);
                return Err(Exit::ModelWrong);
            }
            Ok(loaded)
        }
        Err(failure) => {
            show(&failure.findings, form);
            Err(if failure.unreadable { Exit::File } else { Exit::ModelWrong })
        }
    }
}

/// Whether the grid of `[location]` is known and the mark lies in it: said before any work.
fn map_grid(model: &Model) -> Result<(), Diagnostic> {
    let Some(location) = &model.location else { return Ok(()) };
    let fault = |error: GridError| Diagnostic::error("location.crs", "location.crs", error.to_string());
    let mark = [location.origin_easting_m, location.origin_northing_m];
    Grid::new(&location.crs).and_then(|grid| grid.longitude_latitude_deg(mark)).map(|_| ()).map_err(fault)
}
