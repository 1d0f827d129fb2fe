//! Plane-strain finite elements. SI units, tension positive, x landward, y up, angles in radians.
//!
//! Knows no rock, cliff, layer, file, clock or unit but SI.
pub mod assembly;
pub mod mesh;
