//! The elements against closed forms and published values (no mesher, no rock): one module per group of checks.
#![expect(clippy::unwrap_used, reason = "a test that cannot be set up has failed")]

mod bending;
mod columns;
mod holes;
mod orders;
mod patch;
mod setup;
