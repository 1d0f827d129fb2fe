//! Plane-strain finite elements. SI units, tension positive, x landward, y up, angles in radians.
//!
//! Knows no rock, cliff, layer, file, clock or unit but SI.
//!
//! ```text
//! Mesh + Elastic per region + Supports -> Problem -> System (factored) -> Displacements per load case
//! Displacements -> raw stress -> Recovery -> recovered stress -> means, errors, resultants
//! ```
pub mod mesh;

pub mod elasticity;
pub mod element;
pub mod quadrature;
pub mod tensor;

pub mod assembly;
pub mod floating;
pub mod ordering;
pub mod solve;
pub mod supports;
pub mod system;

pub mod error;
pub mod norms;
pub mod recovery;
pub mod stress;

pub mod crossing;
pub mod locate;
pub mod sample;
pub mod section;
