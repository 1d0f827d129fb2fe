//! Undercut sea cliffs: from a checked model to demands, critical undercut depth and outlook.
//!
//! A pure function of its input: no file, clock, environment or printing. SI units, tension positive, x landward, y up.
pub mod diagnostic;
pub mod lab;
pub mod model;
pub mod outcome;
pub mod outlook;
pub mod section;
pub mod strength;
