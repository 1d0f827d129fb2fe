//! One undercut depth: geometry, adapted mesh, stress, checks. `Site` + depth -> [`Record`].
mod adapt;
mod fields;
mod geometry;
mod joints;
mod line_water;
mod record;

pub use adapt::Budget;
pub use fields::{mean_state, snapshot};
pub use geometry::{Geometry, Target, TargetLine, clip_to_body, line_between, roof_point, rupture_line};
pub use joints::lean_rad as joint_lean_rad;
pub use record::{Context, Record, evaluate_record, first_mesh, line_value, record, record_on, rupture_value};
