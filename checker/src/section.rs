//! The section of a cliff at any undercut depth: `Model` -> [`Site`] -> [`Section`] -> `mesher::Outline`.
//!
//! [`Site::new`] reads the surveyed surface once: undercut, brow, cliff height, extents, layers, un-eroded surface.
//! [`Site::at_depth`] gives the [`Section`] at a depth: its surface with named parts, the body's outline for the mesher, the
//! layers at a point, the overburden of a point, the body that a rupture line cuts off, the places at which demands are taken.
mod arc;
mod body;
mod contact_places;
mod crossing;
mod envelope;
mod extent;
mod fairing;
mod features;
mod free_body;
mod growth;
mod outline;
mod path;
mod places;
mod prepare;
mod site;
mod start;
mod strata;
mod undercut;
mod uneroded;
mod walk;

pub use arc::CircleArc;
pub use body::{ContactPiece, Section};
pub use crossing::SectionError;
pub use extent::Extents;
pub use fairing::Fairing;
pub use features::{Feature, Features};
pub use free_body::FreeBody;
pub use outline::tags;
pub use path::{OnPath, Path, Segment};
pub use places::{Place, PlaceChain, PlaceKind};
pub use site::{Site, SurveyedUndercut};

#[cfg(test)]
mod tests;
