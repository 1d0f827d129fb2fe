//! From a problem to displacements: check, assemble, factor once, solve any number of load cases.
use crate::assembly::{self, DofMap, PRESCRIBED};
use crate::elasticity::Elastic;
use crate::floating::{FloatingPart, floating_parts};
use crate::mesh::Mesh;
use crate::ordering::elimination_order;
use crate::solve::{Buffers, Factorization, SolveError, SolveParams, Symbolic};
use crate::supports::Supports;

/// Mesh, material per region number and supports.
#[derive(Debug, Clone, Copy)]
pub struct Problem<'a> {
    /// The mesh.
    pub mesh: &'a Mesh,
    /// Material of each region number.
    pub materials: &'a [Elastic],
    /// Prescribed displacements and springs.
    pub supports: &'a Supports,
}

/// Why a problem has no solution.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum SystemError {
    /// A region has no material.
    #[error("region {region} has no material, {n_materials} given")]
    NoMaterial {
        /// Region number.
        region: u32,
        /// Number of materials given.
        n_materials: usize,
    },
    /// Every displacement is prescribed.
    #[error("every displacement is prescribed, nothing is left to solve")]
    NothingFree,
    /// Parts of the body are free to move.
    #[error("{} part(s) of the body are free to move, the first near ({:.3}, {:.3}) m with {:.4} m2", .0.len(), .0[0].place_m[0], .0[0].place_m[1], .0[0].area_m2)]
    Floating(Vec<FloatingPart>),
    /// The factorization or the solve failed.
    #[error("{cause}{}", place_m.map_or_else(String::new, |[x, y]| format!(", near ({x:.3}, {y:.3}) m")))]
    Solve {
        /// What failed; unknowns are free numbers.
        cause: SolveError,
        /// Node of the unknown, where the failure has one.
        place_m: Option<[f64; 2]>,
    },
    /// A load or a solution is not finite.
    #[error("load case {case} has a value that is not finite")]
    NotFinite {
        /// Load case number.
        case: usize,
    },
}

/// Figures of a factored system for the report.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub struct SystemInfo {
    /// Number of free unknowns.
    pub n_unknowns: usize,
    /// Entries of the lower triangle of the stiffness matrix.
    pub n_entries: usize,
    /// Entries of its factor.
    pub n_factor_entries: usize,
    /// Smallest over largest pivot of the factorization.
    pub pivot_ratio: f64,
}

/// Displacements of one load case.
#[derive(Debug, Clone, PartialEq)]
pub struct Solution {
    /// Displacements in m, shape `[2 * n_nodes]`, prescribed ones included.
    pub displacements_m: Vec<f64>,
    /// Relative backward error `‖f − K u‖∞ / (‖K‖∞ ‖u‖∞ + ‖f‖∞)`, the largest of the cases solved together; dimensionless.
    pub residual: f64,
}

/// A factored system.
#[derive(Debug)]
pub struct System {
    dofs: DofMap,
    factorization: Factorization,
    /// Displacements with the prescribed values and zero elsewhere, m, and the node forces they take, N/m; `None` when all are zero.
    moved: Option<(Vec<f64>, Vec<f64>)>,
    info: SystemInfo,
}

impl Problem<'_> {
    /// Checks materials and supports, assembles and factors.
    ///
    /// # Errors
    /// [`SystemError`]: a region without material, floating parts, a failed factorization.
    pub fn factor(self) -> Result<System, SystemError> {
        self.factor_in(Buffers::default())
    }

    /// Like [`Problem::factor`], in the memory of an earlier system of a series, see [`System::into_buffers`].
    ///
    /// # Errors
    /// As [`Problem::factor`].
    pub fn factor_in(self, buffers: Buffers) -> Result<System, SystemError> {
        let n_materials = self.materials.len();
        if let Some(&region) = self.mesh.regions.iter().find(|&&r| n_materials <= r as usize) {
            return Err(SystemError::NoMaterial { region, n_materials });
        }
        let floating = floating_parts(self.mesh, self.supports);
        if !floating.is_empty() {
            return Err(SystemError::Floating(floating));
        }
        let pattern = assembly::pattern(self.mesh, self.supports);
        if pattern.dofs.n_free == 0 {
            return Err(SystemError::NothingFree);
        }
        let matrix = assembly::stiffness(self.mesh, self.materials, self.supports, &pattern);
        let dofs = pattern.dofs;
        let (n_unknowns, n_entries) = (matrix.n, matrix.rows.len());
        let factorization = Symbolic::new(&matrix, &elimination_order(self.mesh, &dofs))
            .and_then(|symbolic| Factorization::new(matrix, symbolic.into(), &SolveParams::default(), buffers))
            .map_err(|cause| SystemError::Solve { cause, place_m: cause.unknown().and_then(|unknown| self.place_m(&dofs, unknown)) })?;
        let (n_factor_entries, pivot_ratio) = (factorization.symbolic().n_factor_entries(), factorization.pivot_ratio());
        let info = SystemInfo { n_unknowns, n_entries, n_factor_entries, pivot_ratio };
        let moved = self.supports.moves().then(|| {
            let u: Vec<f64> = self.supports.prescribed_m().iter().map(|p| p.unwrap_or(0.0)).collect();
            let forces = self.forces_n_per_m(&u);
            (u, forces)
        });
        Ok(System { dofs, factorization, moved, info })
    }

    /// Node of a free unknown.
    fn place_m(&self, dofs: &DofMap, unknown: usize) -> Option<[f64; 2]> {
        let dof = dofs.free_of_dof.iter().position(|&free| free as usize == unknown)?;
        Some(self.mesh.points_m[dof / 2])
    }

    /// Forces in N/m that hold the nodes at the displacements, springs included, shape `[2 * n_nodes]`.
    pub fn forces_n_per_m(&self, displacements_m: &[f64]) -> Vec<f64> {
        let mut forces = assembly::internal_forces(self.mesh, self.materials, displacements_m);
        self.supports.add_spring_forces(displacements_m, &mut forces);
        forces
    }

    /// Reactions in N/m: forces that the supports give to the body, shape `[2 * n_nodes]`, zero at free unknowns. Springs are not in them: their
    /// force is `−k n (n·u)`, see [`Supports::add_spring_forces`].
    pub fn reactions_n_per_m(&self, displacements_m: &[f64], loads_n_per_m: &[f64]) -> Vec<f64> {
        let forces = self.forces_n_per_m(displacements_m);
        let prescribed = self.supports.prescribed_m();
        (0..forces.len()).map(|dof| if prescribed[dof].is_some() { forces[dof] - loads_n_per_m[dof] } else { 0.0 }).collect()
    }
}

impl System {
    /// Figures for the report.
    pub fn info(&self) -> &SystemInfo {
        &self.info
    }

    /// Gives the memory of the factor back for the next system of a series.
    pub fn into_buffers(self) -> Buffers {
        self.factorization.into_buffers()
    }

    /// Solves `K u = f` for load vectors in N/m of length `2 * n_nodes`, all at once; each case gets the same prescribed displacements.
    ///
    /// # Errors
    /// [`SystemError::NotFinite`] when a load is not finite, [`SystemError::Solve`] when a solution does not satisfy the equations.
    ///
    /// # Panics
    /// When a load vector has another length.
    pub fn solve<F: AsRef<[f64]>>(&self, loads_n_per_m: &[F]) -> Result<Vec<Solution>, SystemError> {
        let n = self.factorization.matrix().n;
        let mut right = vec![0.0; n * loads_n_per_m.len()];
        for (case, loads) in loads_n_per_m.iter().enumerate() {
            let loads = loads.as_ref();
            assert_eq!(loads.len(), self.dofs.free_of_dof.len(), "load vector {case} of {} unknowns", loads.len());
            if !loads.iter().all(|f| f.is_finite()) {
                return Err(SystemError::NotFinite { case });
            }
            for (dof, &free) in self.dofs.free_of_dof.iter().enumerate().filter(|(_, f)| **f != PRESCRIBED) {
                right[case * n + free as usize] = loads[dof] - self.moved.as_ref().map_or(0.0, |(_, forces)| forces[dof]);
            }
        }
        let solved =
            self.factorization.solve(&mut right, loads_n_per_m.len()).map_err(|cause| SystemError::Solve { cause, place_m: None })?;
        right.chunks_exact(n).enumerate().map(|(case, x)| self.solution(case, x, solved.backward_error)).collect()
    }

    fn solution(&self, case: usize, x: &[f64], residual: f64) -> Result<Solution, SystemError> {
        if !x.iter().all(|u| u.is_finite()) {
            return Err(SystemError::NotFinite { case });
        }
        let mut displacements_m = self.moved.as_ref().map_or_else(|| vec![0.0; self.dofs.free_of_dof.len()], |(u, _)| u.clone());
        for (dof, &free) in self.dofs.free_of_dof.iter().enumerate().filter(|(_, f)| **f != PRESCRIBED) {
            displacements_m[dof] = x[free as usize];
        }
        Ok(Solution { displacements_m, residual })
    }
}

#[cfg(test)]
mod tests;
