//! Stress on one mesh: solve the unit load cases, recover, and give mean tensors at samples.
use std::sync::Arc;

use fem_core::elasticity::Elastic;
use fem_core::element::{add_stress_divergence, element_points_m, mapped, shape};
use fem_core::locate::Locator;
use fem_core::mesh::Mesh;
use fem_core::recovery::{RecoveredLayout, Recovery, RecoveryParams, singular_nodes};
use fem_core::stress::raw_stress_pa;
use fem_core::system::{Problem, System};

use super::AnalysisError;
use super::columns::Columns;
use super::load_cases::CaseSet;
use super::loads::{supports, unit_loads};
use super::samples::Weighted;
use crate::model::Model;
use crate::section::Section;

/// Quality of one solution.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SolveQuality {
    /// Unknowns.
    pub unknowns: usize,
    /// Triangles.
    pub elements: usize,
    /// Largest relative residual over the load cases.
    pub residual: f64,
    /// Smallest over largest pivot.
    pub pivot_ratio: f64,
    /// Smallest angle away from sharp input corners, rad.
    pub smallest_angle_rad: f64,
}

/// The solved unit load cases on one mesh.
#[derive(Debug)]
pub struct Stress {
    /// Mesh; regions are layers.
    pub mesh: Arc<Mesh>,
    /// Elasticity of each layer.
    pub materials: Vec<Elastic>,
    /// Unit load cases.
    pub cases: CaseSet,
    /// Node displacements of each load case, m, shape `[n_cases][2 * n_nodes]`.
    pub displacements_m: Vec<Vec<f64>>,
    /// Node loads of each load case, N/m, shape `[n_cases][2 * n_nodes]`.
    pub loads_n_per_m: Vec<Vec<f64>>,
    /// Waters of the section.
    pub columns: Columns,
    /// Quality.
    pub quality: SolveQuality,
    /// Recovered `D eps(u)` in Pa, node by node, three components a load case: `[node][case][3]`.
    recovered_pa: Vec<f64>,
    recovery: Recovery,
    /// Point location.
    pub locator: Locator,
    system: System,
    height_m: f64,
}

/// Where a sample point lies in the mesh.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Located {
    /// Element.
    pub element: u32,
    /// Local coordinates.
    pub xi: [f64; 2],
    /// Weight.
    pub weight: f64,
}

impl Stress {
    /// Assembles, factors once, solves all unit load cases and recovers their stress.
    ///
    /// # Errors
    /// [`AnalysisError`] if a material is impossible, a part of the body floats or the factorization fails.
    pub fn solve(
        model: &Model,
        section: &Section,
        mesh: Arc<Mesh>,
        smallest_angle_rad: f64,
        cases: &CaseSet,
    ) -> Result<Self, AnalysisError> {
        let elastic = |layer: usize| {
            let rock = &model.rocks[section.rock_of_layer(layer)];
            Elastic::new(rock.youngs_modulus_pa, rock.poissons_ratio)
        };
        let materials = (0..section.n_layers()).map(elastic).collect::<Result<Vec<_>, _>>()?;
        let columns = Columns::new(model, section, cases);
        let loads = unit_loads(model, section, &mesh, cases, &columns);
        let supports = supports(&mesh);
        let system = Problem { mesh: &mesh, materials: &materials, supports: &supports }.factor()?;
        let solutions = system.solve(&loads)?;
        let residual = solutions.iter().map(|s| s.residual).fold(0.0, f64::max);
        let displacements_m: Vec<Vec<f64>> = solutions.into_iter().map(|s| s.displacements_m).collect();
        let singular = singular_nodes(&mesh, fem_core::recovery::SINGULAR_ANGLE_RAD);
        let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &mesh.regions, singular_nodes: &singular });
        let n = cases.cases.len();
        let mut recovered_pa = vec![0.0; 3 * n * recovery.layout().n];
        for (c, field) in recovery.recover(&mesh, &materials, &displacements_m).iter().enumerate() {
            for (node, stress) in field.iter().enumerate() {
                recovered_pa[3 * (node * n + c)..][..3].copy_from_slice(stress);
            }
        }
        let quality = SolveQuality {
            unknowns: system.info().n_unknowns,
            elements: mesh.triangles.len(),
            residual,
            pivot_ratio: system.info().pivot_ratio,
            smallest_angle_rad,
        };
        let locator = Locator::new(&mesh);
        Ok(Self {
            mesh,
            materials,
            cases: cases.clone(),
            displacements_m,
            loads_n_per_m: loads,
            columns,
            quality,
            recovered_pa,
            recovery,
            locator,
            system,
            height_m: section.cliff_height_m(),
        })
    }

    /// Where recovered values live.
    pub fn layout(&self) -> &RecoveredLayout {
        self.recovery.layout()
    }

    /// Recovered stress of one field of displacements, for example of a state or of a dual problem.
    pub fn recover(&self, displacements_m: &[f64]) -> Vec<[f64; 3]> {
        self.recovery.recover(&self.mesh, &self.materials, &[displacements_m]).swap_remove(0)
    }

    /// Element and local coordinates of a point in a layer; the nearest element of that layer if it lies a little outside.
    pub fn locate(&self, point_m: [f64; 2], layer: usize) -> Option<(u32, [f64; 2])> {
        let reach_m = 0.01 * self.height_m;
        let found = self.locator.locate_in_regions(&self.mesh, point_m, reach_m, &[layer as u32])?;
        Some((found.element, found.xi))
    }

    /// Places sample points of a layer in the mesh.
    pub fn place(&self, samples: &[Weighted], layer: usize) -> Vec<Located> {
        let located = samples.iter().filter_map(|&(p, weight)| self.locate(p, layer).map(|(element, xi)| Located { element, xi, weight }));
        located.collect()
    }

    /// Mean effective stress of every unit load case over samples of one layer, `[xx, zz, xz]` in Pa.
    pub fn mean_pa(&self, section: &Section, samples: &[Weighted], layer: usize) -> Vec<[f64; 3]> {
        let n = self.cases.cases.len();
        let mut sum = vec![0.0; 3 * n];
        let mut weight = 0.0;
        for at in self.place(samples, layer) {
            let nodes = self.layout().element_nodes[at.element as usize];
            for (node, value) in nodes.into_iter().zip(shape(at.xi)) {
                let row = &self.recovered_pa[3 * n * node as usize..][..3 * n];
                let factor = at.weight * value;
                for (s, r) in sum.iter_mut().zip(row) {
                    *s += factor * r;
                }
            }
            weight += at.weight;
        }
        let column = self.columns.mean(section, samples);
        let tensor = |(c, &case): (usize, &_)| {
            let initial = column.in_situ_pa(case, layer);
            [0, 1, 2].map(|k| sum[3 * c + k] / weight + initial[k])
        };
        self.cases.cases.iter().enumerate().map(tensor).collect()
    }

    /// The same from the unrecovered stress, for the error estimate on the segment itself.
    pub fn raw_mean_pa(&self, section: &Section, samples: &[Weighted], layer: usize) -> Vec<[f64; 3]> {
        let located = self.place(samples, layer);
        let weight: f64 = located.iter().map(|at| at.weight).sum();
        let column = self.columns.mean(section, samples);
        let tensor = |(c, &case): (usize, &_)| {
            let mut sum = column.in_situ_pa(case, layer);
            for at in &located {
                let stress = raw_stress_pa(&self.mesh, &self.materials, &self.displacements_m[c], (at.element as usize, at.xi));
                for k in 0..3 {
                    sum[k] += at.weight / weight * stress[k];
                }
            }
            sum
        };
        self.cases.cases.iter().enumerate().map(tensor).collect()
    }

    /// Displacements of a superposition, shape `[2 * n_nodes]`, m.
    pub fn displacements_of(&self, coefficients: &[f64]) -> Vec<f64> {
        let mut sum = vec![0.0; 2 * self.mesh.points_m.len()];
        for (c, u) in coefficients.iter().zip(&self.displacements_m) {
            for (s, u) in sum.iter_mut().zip(u) {
                *s += c * u;
            }
        }
        sum
    }

    /// Recovered `D eps(u)` of a superposition at the nodes of [`Self::layout`], Pa.
    pub fn recovered_of(&self, coefficients: &[f64]) -> Vec<[f64; 3]> {
        let n = self.cases.cases.len();
        let node = |row: &[f64]| {
            let mut sum = [0.0; 3];
            for (c, tensor) in coefficients.iter().zip(row.chunks_exact(3)) {
                for k in 0..3 {
                    sum[k] += c * tensor[k];
                }
            }
            sum
        };
        self.recovered_pa.chunks_exact(3 * n).map(node).collect()
    }

    /// Displacement of a field at a point of a layer, m.
    pub fn displacement_at(&self, displacements_m: &[f64], point_m: [f64; 2], layer: usize) -> Option<[f64; 2]> {
        let (element, xi) = self.locate(point_m, layer)?;
        let mut sum = [0.0; 2];
        for (node, value) in self.mesh.triangles[element as usize].into_iter().zip(shape(xi)) {
            sum[0] += value * displacements_m[2 * node as usize];
            sum[1] += value * displacements_m[2 * node as usize + 1];
        }
        Some(sum)
    }

    /// Solves further load vectors on the same factor, for example of dual problems.
    ///
    /// # Errors
    /// [`AnalysisError`] of the solution.
    pub fn solve_loads(&self, loads: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, AnalysisError> {
        Ok(self.system.solve(loads)?.into_iter().map(|s| s.displacements_m).collect())
    }

    /// Adds the loads of the functional `weight * gradient : D eps(u)` at a sample point.
    pub fn add_stress_functional(&self, at: Located, gradient: [f64; 3], load: &mut [f64]) {
        let element = at.element as usize;
        let points = element_points_m(&self.mesh, element);
        // D is symmetric: gradient : D eps = eps : D gradient
        let stress = self.materials[self.mesh.regions[element] as usize].stress_pa(gradient);
        let mut forces = [[0.0; 2]; 6];
        add_stress_divergence(&mut forces, &mapped(&points, at.xi), stress, at.weight);
        for (node, force) in self.mesh.triangles[element].into_iter().zip(forces) {
            load[2 * node as usize] += force[0];
            load[2 * node as usize + 1] += force[1];
        }
    }

    /// Effective in-plane stress of a superposition at a point of a layer, Pa.
    pub fn at_pa(&self, section: &Section, coefficients: &[f64], point_m: [f64; 2], layer: usize) -> [f64; 3] {
        super::load_cases::superpose(coefficients, &self.mean_pa(section, &[(point_m, 1.0)], layer))
    }
}
