//! `schema`: the JSON Schema of the model file on standard output.
use crate::exit::Exit;
use crate::model_file::json_schema;

/// Prints the schema.
pub(crate) fn run() -> Exit {
    super::print(&format!("{:#}\n", json_schema()))
}
