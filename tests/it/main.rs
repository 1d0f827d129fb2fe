//! One test binary for the workspace: verification, golden results, diagnostics, tidy rules and end-to-end runs.
#![expect(clippy::unwrap_used, clippy::disallowed_methods, reason = "tests read files and the clock, and fail by panicking")]
mod diagnostics;
mod main_job;
mod reference_cases;
mod reference_water;
mod tidy;
