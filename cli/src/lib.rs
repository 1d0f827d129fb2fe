//! The boundary: command line, files, formats. The only crate with I/O.
//!
//! command line ([`args`]) -> model file -> `checker` -> [`output`]: tables, `summary.json`, pictures, fields, report.
//! `main.rs` only calls [`commands::run`]; other front ends may call the parts.
pub mod args;
pub mod commands;
pub mod exit;
pub mod interrupt;
pub mod output;
pub mod progress;
