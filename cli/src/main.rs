//! The `brinkline` binary.
fn main() {}
