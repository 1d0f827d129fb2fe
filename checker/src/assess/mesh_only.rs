//! Geometry and mesh of the surveyed state, nothing solved.
use super::{AssessError, Assessment, Prepared};

/// The mesh that the surveyed state would start from, as a snapshot without stress.
pub(super) fn run(_prepared: &Prepared<'_>) -> Result<Assessment, AssessError> {
    Err(AssessError::Cancelled)
}
