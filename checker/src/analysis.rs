//! Stress of one section by unit load cases: `Section` + mesh -> tensors at places and lines.
pub mod columns;
pub mod in_situ;
pub mod load_cases;
pub mod loads;
pub mod samples;
pub mod stress;
pub mod water;

pub use stress::Stress;

use crate::section::SectionError;

/// Why a depth could not be analyzed.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum AnalysisError {
    /// The section does not exist at that depth.
    #[error(transparent)]
    Section(#[from] SectionError),
    /// The mesher gave up.
    #[error("no mesh at an undercut depth of {depth_m:.2} m: {reason}")]
    Mesh {
        /// Depth, m.
        depth_m: f64,
        /// The mesher's reason.
        reason: String,
    },
    /// Impossible elastic constants.
    #[error(transparent)]
    Elastic(#[from] fem_core::elasticity::ElasticError),
    /// The system could not be solved.
    #[error(transparent)]
    System(#[from] fem_core::system::SystemError),
}
