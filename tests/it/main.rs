//! One test binary for the workspace: verification, golden results, diagnostics, tidy rules and end-to-end runs.
mod diagnostics;
