//! Geometry and mesh of the surveyed state, nothing solved.
use super::{AssessError, Assessment, Run};
use crate::depth::first_mesh;
use crate::outcome::FieldSnapshot;

impl Run<'_> {
    /// The mesh that the surveyed state starts from, as a snapshot without stress.
    pub(super) fn mesh_only(&self) -> Result<Assessment, AssessError> {
        let depth_m = self.prepared.site.surveyed_depth_m();
        let (section, mesh, smallest_angle_rad) =
            first_mesh(&self.prepared.context(), depth_m).map_err(|source| AssessError::Depth { depth_m, source })?;
        let mut assessment = self.describe(Vec::new())?;
        let n = mesh.triangles.len();
        let numerics = &mut assessment.outcome.numerics;
        numerics.unknowns = 2 * mesh.points_m.len();
        numerics.elements = n;
        numerics.smallest_angle_deg = smallest_angle_rad.to_degrees();
        numerics.smallest_pivot_ratio = 0.0;
        "geometry and mesh only; nothing was solved and no check was made".clone_into(&mut assessment.outcome.headline);
        assessment.fields = vec![FieldSnapshot {
            depth_m,
            situation: "none: nothing was solved".into(),
            rock_names: (0..section.n_layers()).map(|j| self.prepared.model.rocks[section.rock_of_layer(j)].name.clone()).collect(),
            displacement_m: vec![[0.0; 2]; mesh.points_m.len()],
            effective_stress_pa: vec![[[0.0; 4]; 6]; n],
            water_pressure_pa: vec![[0.0; 6]; n],
            tension_utilization: vec![[0.0; 6]; n],
            shear_utilization: vec![[0.0; 6]; n],
            places: Vec::new(),
            mesh: (*mesh).clone(),
        }];
        Ok(assessment)
    }
}
