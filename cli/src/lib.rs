//! The boundary: command line, files, formats. The only crate with I/O.
//!
//! command line ([`args`]) -> model file -> `checker` -> [`output`]: tables, `summary.json`, pictures, fields, report.
//! `main.rs` only calls [`commands::run`]; other front ends may call the parts.
pub mod args;
pub mod commands;
pub mod diagnostics;
pub mod exit;
pub mod interrupt;
pub mod lab_file;
pub mod model_file;
pub mod output;
pub mod progress;
pub mod survey_csv;
