//! The one place where the boundary reads a model.
use std::path::Path;

use checker::model::Model;

use crate::args::DiagnosticsForm;
use crate::diagnostics;
use crate::exit::Exit;
use crate::model_file::{self, LoadedModel};

/// A model as read.
#[derive(Debug, Clone)]
pub(crate) struct Loaded {
    /// The checked model.
    pub model: Model,
    /// The files as read, the model file first: name without folder, bytes. They are copied beside the results.
    pub files: Vec<(String, Vec<u8>)>,
}

/// Reads and checks a model file; findings are printed in the asked form.
///
/// # Errors
/// [`Exit::File`] or [`Exit::ModelWrong`], after everything was said.
pub(crate) fn load(path: &Path, form: DiagnosticsForm) -> Result<Loaded, Exit> {
    match model_file::read(path) {
        Ok(LoadedModel { model, warnings, text, file_name, extra_files, .. }) => {
            diagnostics::show(&warnings, form);
            let extra = extra_files.into_iter().map(|file| (file.file_name(), file.bytes));
            Ok(Loaded { model, files: std::iter::once((file_name, text.into_bytes())).chain(extra).collect() })
        }
        Err(failure) => {
            diagnostics::show(&failure.findings, form);
            Err(if failure.unreadable { Exit::File } else { Exit::ModelWrong })
        }
    }
}
