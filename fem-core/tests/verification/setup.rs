//! Common steps: supports by tag, solve, stress at a place.
use fem_core::elasticity::Elastic;
use fem_core::locate::Locator;
use fem_core::mesh::{Mesh, TaggedEdge};
use fem_core::recovery::{Recovery, RecoveryParams, SINGULAR_ANGLE_RAD, singular_nodes};
use fem_core::supports::Supports;
use fem_core::system::Problem;

pub(crate) fn edges(mesh: &Mesh, tag: u32) -> Vec<TaggedEdge> {
    mesh.edges.iter().copied().filter(|e| e.tag == tag).collect()
}

/// Prescribes the field on all nodes of the tagged sides.
pub(crate) fn prescribe(supports: &mut Supports, mesh: &Mesh, tags: &[u32], field_m: &dyn Fn([f64; 2]) -> [Option<f64>; 2]) {
    for edge in mesh.edges.iter().filter(|e| tags.contains(&e.tag)) {
        for node in edge.nodes {
            for (d, u) in field_m(mesh.points_m[node as usize]).into_iter().enumerate() {
                if let Some(u) = u {
                    supports.prescribe(node, d, u);
                }
            }
        }
    }
}

pub(crate) struct Solved {
    pub(crate) mesh: Mesh,
    pub(crate) rock: Vec<Elastic>,
    pub(crate) u: Vec<f64>,
    pub(crate) recovery: Recovery,
    pub(crate) values: Vec<[f64; 3]>,
    locator: Locator,
}

impl Solved {
    pub(crate) fn new(mesh: Mesh, rock: Vec<Elastic>, supports: &Supports, load: &[f64]) -> Self {
        mesh.check().unwrap();
        let problem = Problem { mesh: &mesh, materials: &rock, supports };
        let u = problem.factor().unwrap().solve(&[load]).unwrap().remove(0).displacements_m;
        let singular = singular_nodes(&mesh, SINGULAR_ANGLE_RAD);
        let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &mesh.regions, singular_nodes: &singular });
        let values = recovery.recover(&mesh, &rock, &[&u]).remove(0);
        let locator = Locator::new(&mesh);
        Self { mesh, rock, u, recovery, values, locator }
    }

    pub(crate) fn stress_at(&self, point_m: [f64; 2]) -> [f64; 3] {
        let at = self.locator.locate(&self.mesh, point_m, 1e-6).unwrap();
        self.recovery.layout().evaluate(&self.values, at.element as usize, at.xi)
    }

    pub(crate) fn displacement_at(&self, point_m: [f64; 2]) -> [f64; 2] {
        let distance = |n: &usize| (self.mesh.points_m[*n][0] - point_m[0]).hypot(self.mesh.points_m[*n][1] - point_m[1]);
        let node = (0..self.mesh.points_m.len()).min_by(|a, b| distance(a).total_cmp(&distance(b))).unwrap();
        assert!(distance(&node) < 1e-9, "no node at {point_m:?}");
        [self.u[2 * node], self.u[2 * node + 1]]
    }

    pub(crate) fn raw(&self, element: usize, xi: [f64; 2]) -> [f64; 3] {
        fem_core::stress::raw_stress_pa(&self.mesh, &self.rock, &self.u, (element, xi))
    }
}

#[track_caller]
pub(crate) fn relative(got: f64, want: f64, tolerance: f64, what: &str) {
    assert!((got / want - 1.0).abs() <= tolerance, "{what}: {got:.8e} for {want:.8e}, relative {:.2e}", got / want - 1.0);
}

#[track_caller]
pub(crate) fn absolute(got: f64, want: f64, tolerance: f64, what: &str) {
    assert!((got - want).abs() <= tolerance, "{what}: {got} for {want}");
}
