//! Reading laboratory files of both formats, the traps in them, and what is printed.
use super::*;
use checker::model::{TestedState, Uncertain};

mod abuse;
mod ags_files;
mod csv_files;
mod documented;
mod in_a_model;
mod outputs;

/// The whole list of findings, one line each, for messages and comparisons.
fn lines(findings: &[Diagnostic]) -> Vec<String> {
    findings.iter().map(|f| format!("{}: {}", f.at, f.message)).collect()
}

#[track_caller]
fn faults(bytes: &[u8]) -> Vec<String> {
    match read(bytes) {
        Err(faults) => lines(&faults),
        Ok(file) => panic!("no fault, warnings {:?}", lines(&file.warnings)),
    }
}

#[track_caller]
fn good(bytes: &[u8]) -> Checked<LabFile> {
    match read(bytes) {
        Ok(file) => file,
        Err(faults) => panic!("{:?}", lines(&faults)),
    }
}

#[track_caller]
fn near(got: f64, expected: f64) {
    // A unit factor and a decimal string: a few roundings.
    assert!((got - expected).abs() <= 1e-12 * expected.abs(), "got {got}, expected {expected}");
}
