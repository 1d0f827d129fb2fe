//! The one place where the boundary reads a model.
use std::path::Path;

use checker::model::Model;

use crate::args::DiagnosticsForm;
use crate::exit::Exit;

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
pub(crate) fn load(path: &Path, _form: DiagnosticsForm) -> Result<Loaded, Exit> {
    crate::progress::say(&format!("error: cannot read `{}`: reading models is not available yet", path.display()));
    Err(Exit::File)
}
