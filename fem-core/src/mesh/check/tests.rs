//! Each guarantee broken once.
use super::*;
use crate::mesh::structured::{Grid, grid, rectangle};

fn square() -> Mesh {
    rectangle(Grid { n_u: 3, n_v: 2, curved: false }, [1.0, -2.0], [3.0, 2.0], 0.2)
}

#[test]
fn structured_meshes_are_sound() {
    let mesh = square();
    assert_eq!(mesh.check(), Ok(()));
    assert!((mesh.region_areas_m2()[0] - 6.0).abs() < 1e-13);
    assert_eq!(mesh.boundary_sides().len(), 10);
    // Quarter of a ring, radii 1 and 2: area 3π/4; curved sides are parabolas, so the area errs with h⁴.
    let ring = |n: usize| {
        let polar = |[u, v]: [f64; 2]| {
            let (r, a) = (1.0 + u, std::f64::consts::FRAC_PI_2 * v);
            [r * a.cos(), r * a.sin()]
        };
        let mesh = grid(Grid { n_u: n, n_v: 2 * n, curved: true }, &polar, &|_, _| true);
        assert_eq!(mesh.check(), Ok(()));
        (mesh.region_areas_m2()[0] - 0.75 * std::f64::consts::PI).abs()
    };
    let order = (ring(4) / ring(8)).log2();
    assert!((order - 4.0).abs() < 0.1, "order {order}");
}

#[test]
fn each_fault_is_found() {
    let fault = |change: &dyn Fn(&mut Mesh)| {
        let mut mesh = square();
        change(&mut mesh);
        mesh.check().unwrap_err()
    };
    assert_eq!(Mesh::default().check(), Err(MeshFault::Empty));
    assert_eq!(fault(&|m| m.regions.truncate(2)), MeshFault::Lengths { elements: 12, regions: 2 });
    assert!(matches!(fault(&|m| m.points_m[4][1] = f64::NAN), MeshFault::NotFinite { node: 4, .. }));
    assert!(matches!(fault(&|m| m.triangles[3][2] = 99), MeshFault::Node { element: 3, node: 99 }));
    assert!(matches!(fault(&|m| m.triangles[3].swap(2, 4)), MeshFault::Node { element: 3, .. }));
    assert_eq!(fault(&|m| m.points_m.push([0.0, 0.0])), MeshFault::Orphan { node: 35 });
    assert!(matches!(fault(&|m| m.triangles[5] = [0, 2, 1, 5, 4, 3].map(|k| m.triangles[5][k])), MeshFault::Folded { element: 5, .. }));
    assert!(matches!(fault(&|m| m.triangles[1] = m.triangles[0]), MeshFault::Orphan { .. } | MeshFault::Side { .. }));
    assert!(matches!(fault(&|m| m.edges.truncate(9)), MeshFault::Untagged { .. }));
    assert!(matches!(fault(&|m| m.edges[4].nodes.swap(0, 1)), MeshFault::Edge { edge: 4 }));
}
