//! Undercut sea cliffs: from a checked model to demands, critical undercut depth and outlook.
//!
//! ```text
//! Model -> section (geometry at a depth) -> analysis (mesh, stress by unit load cases) -> demand against strength
//!       -> deepen (depth series) -> critical (critical depth) -> rupture, sensitivity -> outcome
//! ```
//!
//! A pure function of its input: no file, clock, environment or printing. SI units, tension positive, x landward, y up.
pub mod diagnostic;
pub mod lab;
pub mod model;
pub mod outcome;
pub mod outlook;
pub mod strength;

pub mod analysis;
pub mod assess;
pub mod critical;
pub mod deepen;
pub mod demand;
pub mod depth;
pub mod rupture;
pub mod section;
pub mod sensitivity;
pub mod words;

#[cfg(test)]
mod testing;
