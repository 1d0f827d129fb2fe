//! Pictures: the section to scale, filled contours, the mesh, charts. Layout and colors are this program's own.
//!
//! Every picture is a [`Picture`]: drawn once, written as a file of its own or set into the report.
pub mod chart;
pub mod color;
pub mod contour;
pub mod draw;
pub mod field;
pub mod frame;
pub mod grid;
pub mod mesh;
pub mod outline;
pub mod section;

pub use draw::Picture;
