//! Reproduction of quadratics, groups, singular corners.
use super::*;
use crate::mesh::structured::{Grid, grid, rectangle};

fn quadratic([x, y]: [f64; 2]) -> [f64; 3] {
    [1.0 + 2.0 * x - y + 0.5 * x * x - x * y, y * y - 3.0 * x * y, 2.0 - x * x + 0.25 * y * y]
}

fn check_reproduced(mesh: &Mesh, params: &RecoveryParams) {
    let recovery = Recovery::new(mesh, params);
    let values = recovery.apply(&sample_places_m(mesh).iter().map(|&p| quadratic(p)).collect::<Vec<_>>());
    assert_eq!(values.len(), recovery.layout().n);
    for (triangle, ids) in mesh.triangles.iter().zip(&recovery.layout().element_nodes) {
        for (&node, &id) in triangle.iter().zip(ids) {
            let want = quadratic(mesh.points_m[node as usize]);
            for k in 0..3 {
                let got = values[id as usize][k];
                // A singular corner with no patch beside it falls back to the element's own plane; none here.
                assert!((got - want[k]).abs() < 1e-9, "{got} for {} at {:?}", want[k], mesh.points_m[node as usize]);
            }
        }
    }
}

#[test]
fn a_quadratic_stress_is_reproduced_at_every_node() {
    let mesh = rectangle(Grid { n_u: 5, n_v: 4, curved: false }, [3.0, -1.0], [2.0, 1.5], 0.25);
    check_reproduced(&mesh, &RecoveryParams { groups: &[0; 40], singular_nodes: &[] });
    // Two groups, and a square hole with re-entrant corners.
    let mesh = grid(Grid { n_u: 9, n_v: 9, curved: false }, &|uv| uv, &|i, j| !(3..6).contains(&i) || !(3..6).contains(&j));
    let groups: Vec<u32> = (0..mesh.triangles.len()).map(|e| u32::from(mesh.corner_mean_m(e)[1] > 4.0 / 9.0)).collect();
    let singular = singular_nodes(&mesh, SINGULAR_ANGLE_RAD);
    assert_eq!(singular.len(), 4, "the corners of the hole");
    check_reproduced(&mesh, &RecoveryParams { groups: &groups, singular_nodes: &singular });
}

#[test]
fn groups_keep_their_own_value_at_a_contact() {
    let mesh = rectangle(Grid { n_u: 4, n_v: 4, curved: false }, [0.0, 0.0], [1.0, 1.0], 0.0);
    let groups: Vec<u32> = (0..mesh.triangles.len()).map(|e| u32::from(mesh.corner_mean_m(e)[1] > 0.5)).collect();
    let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &groups, singular_nodes: &[] });
    assert_eq!(recovery.layout().n, mesh.points_m.len() + 9, "nine nodes on the contact count twice");
    let samples: Vec<[f64; 3]> = sample_places_m(&mesh).iter().map(|p| if p[1] > 0.5 { [7.0; 3] } else { [2.0; 3] }).collect();
    let values = recovery.apply(&samples);
    for (element, &group) in groups.iter().enumerate() {
        let got = recovery.layout().evaluate(&values, element, [0.3, 0.3]);
        assert!((got[0] - if group == 1 { 7.0 } else { 2.0 }).abs() < 1e-12);
    }
}

#[test]
fn thin_groups_fall_back_to_fewer_terms() {
    // A layer of two elements has six samples, too few or too flat for a quadratic: linear fields must still come out.
    let mesh = rectangle(Grid { n_u: 3, n_v: 1, curved: false }, [0.0, 0.0], [3.0, 1.0], 0.0);
    let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &[0, 0, 1, 1, 2, 3], singular_nodes: &[] });
    let linear = |p: &[f64; 2]| [1.0 + p[0], 2.0 - p[1], 3.0 * p[0] - p[1]];
    let values = recovery.apply(&sample_places_m(&mesh).iter().map(linear).collect::<Vec<_>>());
    for element in 0..6 {
        let want = linear(&mesh.corner_mean_m(element));
        let got = recovery.layout().evaluate(&values, element, [1.0 / 3.0, 1.0 / 3.0]);
        assert!((0..3).all(|k| (got[k] - want[k]).abs() < 1e-9), "element {element}: {got:?} for {want:?}");
    }
}

#[test]
fn patches_are_not_widened_past_a_re_entrant_corner() {
    // Stress only in the elements that touch the corner of an L: nodes outside these elements must not see it.
    let mesh = grid(Grid { n_u: 8, n_v: 8, curved: false }, &|uv| uv, &|i, j| i < 4 || 4 <= j);
    let singular = singular_nodes(&mesh, SINGULAR_ANGLE_RAD);
    assert_eq!(singular.len(), 1);
    let touches: Vec<bool> = mesh.triangles.iter().map(|t| t[..3].contains(&singular[0])).collect();
    let samples: Vec<[f64; 3]> = touches.iter().flat_map(|&t| [[if t { 1.0 } else { 0.0 }; 3]; 3]).collect();
    let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &mesh.regions, singular_nodes: &singular });
    let values = recovery.apply(&samples);
    let beside: Vec<u32> = (0..touches.len()).filter(|&e| touches[e]).flat_map(|e| recovery.layout().element_nodes[e]).collect();
    for ids in &recovery.layout().element_nodes {
        for id in ids[..3].iter().filter(|id| !beside.contains(id)) {
            assert!(values[*id as usize][0].abs() < 1e-12, "recovered node {id}");
        }
    }
}

#[test]
fn a_constant_difference_has_the_error_of_its_energy() {
    // η² = area · s : D⁻¹ s by hand, when recovered and raw stress differ by the constant s and u = 0.
    let mesh = rectangle(Grid { n_u: 3, n_v: 2, curved: false }, [0.0, 0.0], [3.0, 2.0], 0.2);
    let rock = [Elastic::new(2e9, 0.3).unwrap()];
    let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &mesh.regions, singular_nodes: &[] });
    let s = [1e3, -2e3, 3e3];
    let (u, recovered) = (vec![0.0; 2 * mesh.points_m.len()], vec![s; recovery.layout().n]);
    let field = crate::error::Field { displacements_m: &u, recovered_pa: &recovered };
    let errors = crate::error::energy_errors(&mesh, &rock, recovery.layout(), field);
    // (1+ν)/E [(1−ν)(xx² + yy²) − 2ν xx yy + 2 xy²]
    let density = 1.3 / 2e9 * (0.7 * 5e6 + 0.6 * 2e6 + 18e6);
    for (element, eta) in errors.iter().enumerate() {
        assert!((eta * eta / (mesh.area_m2(element) * density) - 1.0).abs() < 1e-12);
    }
    let relative = crate::error::relative_energy_error(&errors, 0.0);
    assert!((relative - 1.0).abs() < 1e-12, "nothing but error");
    let products = crate::error::dual_weighted(&errors, &errors);
    assert!((products.iter().sum::<f64>() / (6.0 * density) - 1.0).abs() < 1e-12);
}
