//! Meshing of a plane section: tagged lines in, six-node triangles out. Knows geometry and tags, no material and no load.
//!
//! ```text
//! Outline -> validate -> snap, arcs -> node -> pieces by size -> constrained Delaunay -> patches (void dropped)
//!         -> refine (size, smallest angle) -> onto the arcs, smooth -> slits opened -> mid-side nodes -> Mesh + MeshInfo
//! ```
//!
//! SI units, x landward, y up, angles in radians. The method and its sources: docs/theory.md, chapter "Meshing".
mod error;
mod outline;
mod params;
mod size;

mod validate;

mod geometry;
mod snap;

mod curve;
mod node;
mod pieces;

mod patch;
mod triangulation;

mod cavity;
mod criterion;
mod refine;
mod sharp;

mod smooth;

mod quadratic;
mod slit;

mod sanity;

mod pipeline;

pub use error::MeshError;
pub use outline::{Arc, Line, Outline};
pub use params::{MeshInfo, MeshParams, ThinPatch};
pub use pipeline::mesh;
pub use sanity::{MeshDoubt, sanity_check};
pub use size::{SizeField, SizeSource};

#[cfg(test)]
mod tests;
