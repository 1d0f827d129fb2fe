//! Supports: prescribed displacements and springs at nodes.
use crate::assembly::{DofMap, PRESCRIBED};

/// A spring between a node and the ground that acts along one direction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Spring {
    /// Node number.
    pub node: u32,
    /// Unit vector along which the spring acts.
    pub direction: [f64; 2],
    /// Force per displacement and per metre of thickness, N/m².
    pub stiffness_n_per_m2: f64,
}

/// Prescribed displacements per node and direction, and springs.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Supports {
    prescribed_m: Vec<Option<f64>>,
    springs: Vec<Spring>,
}

impl Supports {
    /// Supports of a mesh with `n_nodes` nodes, none yet.
    pub fn none(n_nodes: usize) -> Self {
        Self { prescribed_m: vec![None; 2 * n_nodes], springs: Vec::new() }
    }

    /// Prescribes the displacement of a node in direction 0 = x or 1 = y; a later value replaces an earlier one.
    ///
    /// # Panics
    /// When the node or direction does not exist or the value is not finite.
    pub fn prescribe(&mut self, node: u32, direction: usize, displacement_m: f64) {
        assert!(direction < 2, "direction is 0 or 1, got {direction}");
        assert!(displacement_m.is_finite(), "prescribed displacement of node {node} is {displacement_m}");
        let dof = 2 * node as usize + direction;
        assert!(dof < self.prescribed_m.len(), "node {node} of {}", self.prescribed_m.len() / 2);
        self.prescribed_m[dof] = Some(displacement_m);
    }

    /// Prescribes zero in both directions.
    pub fn fix(&mut self, node: u32) {
        self.prescribe(node, 0, 0.0);
        self.prescribe(node, 1, 0.0);
    }

    /// Adds a spring; springs at the same node add up.
    ///
    /// # Panics
    /// When the node does not exist, the direction is not a unit vector or the stiffness is not positive and finite.
    pub fn add_spring(&mut self, spring: Spring) {
        assert!((spring.node as usize) < self.prescribed_m.len() / 2, "spring at node {} of {}", spring.node, self.prescribed_m.len() / 2);
        let length = spring.direction[0].hypot(spring.direction[1]);
        assert!((length - 1.0).abs() < 1e-9, "spring direction of length {length}");
        let k = spring.stiffness_n_per_m2;
        assert!(0.0 < k && k < f64::INFINITY, "spring stiffness {k} N/m2");
        self.springs.push(spring);
    }

    /// Prescribed displacement in m of each unknown, shape `[2 * n_nodes]`.
    pub fn prescribed_m(&self) -> &[Option<f64>] {
        &self.prescribed_m
    }

    /// The springs, in the order added.
    pub fn springs(&self) -> &[Spring] {
        &self.springs
    }

    /// Whether any prescribed displacement differs from zero.
    pub fn moves(&self) -> bool {
        self.prescribed_m.iter().flatten().any(|u| u.abs() > 0.0)
    }

    /// Numbers the free unknowns in ascending order.
    pub fn dof_map(&self) -> DofMap {
        let mut n_free = 0;
        let free_of_dof = self
            .prescribed_m
            .iter()
            .map(|p| {
                if p.is_some() {
                    return PRESCRIBED;
                }
                n_free += 1;
                n_free - 1
            })
            .collect();
        DofMap { free_of_dof, n_free: n_free as usize }
    }

    /// Adds the forces in N/m that the displacements need to stretch the springs, `k n (n·u)`, to a vector of length `2 * n_nodes`.
    pub fn add_spring_forces(&self, displacements_m: &[f64], forces_n_per_m: &mut [f64]) {
        for s in &self.springs {
            let i = 2 * s.node as usize;
            let stretch = s.direction[0] * displacements_m[i] + s.direction[1] * displacements_m[i + 1];
            forces_n_per_m[i] += s.stiffness_n_per_m2 * stretch * s.direction[0];
            forces_n_per_m[i + 1] += s.stiffness_n_per_m2 * stretch * s.direction[1];
        }
    }
}
