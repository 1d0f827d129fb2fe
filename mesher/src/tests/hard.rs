//! Input that breaks meshers: nearly touching and nearly tangent lines, slivers, far-away coordinates, impossible sizes.
use crate::{Arc, Line, MeshError, MeshInfo, MeshParams, Outline, SizeField, SizeSource, mesh, sanity_check};
use fem_core::mesh::Mesh;

fn run(lines: Vec<Line>, size_m: f64) -> (Mesh, MeshInfo) {
    let inside = |p: [f64; 2]| (0.0 < p[0] && p[0] < 20.0 && 0.0 < p[1] && p[1] < 10.0).then_some(0);
    let (mesh, info) = mesh(&Outline { lines }, &inside, &SizeField::uniform(size_m), &MeshParams::default()).unwrap();
    sanity_check(&mesh, &[]).unwrap();
    (mesh, info)
}

fn body() -> Line {
    Line::ring(vec![[0.0, 0.0], [20.0, 0.0], [20.0, 10.0], [0.0, 10.0]], 1)
}

/// A contact that runs out on the ground under a small angle: triangles in the wedge are thin, but they are few and the rest is good.
#[test]
fn nearly_tangent_contact_costs_few_triangles() {
    let plain = run(vec![body()], 0.5).0.triangles.len();
    for degrees in [10.0_f64, 3.0, 1.0, 0.3] {
        let rise = 20.0 * degrees.to_radians().tan();
        let (mesh, info) = run(vec![body(), Line::chain(vec![[0.0, 10.0], [20.0, 10.0 - rise]], 2)], 0.5);
        let away = info.smallest_angle_away_rad.to_degrees();
        assert!(27.9 < away, "{degrees} degrees: {away} away from the corner");
        assert!(mesh.triangles.len() < 3 * plain / 2, "{degrees} degrees: {} triangles against {plain}", mesh.triangles.len());
    }
}

/// A line within the tolerance of the outline becomes part of it.
#[test]
fn line_along_the_boundary_leaves_no_sliver() {
    let (mesh, info) = run(vec![body(), Line::chain(vec![[-1.0, 9.99997], [7.0, 10.00004], [21.0, 9.99996]], 2)], 0.5);
    assert!(28.0 - 0.1 < info.smallest_angle_rad.to_degrees(), "{}", info.smallest_angle_rad.to_degrees());
    let length: f64 = mesh
        .edges
        .iter()
        .filter(|e| e.tag == 2)
        .map(|e| mesh.points_m[e.nodes[1] as usize][0] - mesh.points_m[e.nodes[0] as usize][0])
        .sum();
    assert!((length - 20.0).abs() < 1e-3, "{length} m of 20");
    assert!(info.snapped_m < 2.0 * info.tolerance_m);
}

#[test]
fn thin_patch_is_reported() {
    let thin = Line::chain(vec![[2.0, 5.0], [10.0, 5.00013], [18.0, 5.0]], 3);
    let params = MeshParams { tolerance_m: Some(1e-4), ..MeshParams::default() };
    let outline = Outline { lines: vec![body(), Line::chain(vec![[2.0, 5.0], [18.0, 5.0]], 2), thin] };
    let (_, info) = mesh(&outline, &|_| Some(0), &SizeField::uniform(2.0), &params).unwrap();
    assert_eq!(info.thin_patches.len(), 1);
    assert!((info.thin_patches[0].at_m[1] - 5.0).abs() < 2e-4);
}

/// A contact that meets a rounded back in the middle of an arc shares a node of the circle with it.
#[test]
fn contact_ends_on_the_arc_it_meets() {
    let (center_m, radius_m) = ([4.0, 5.0], 1.0);
    let arc = Some(Arc { center_m, radius_m });
    let mut ring = body();
    ring.points_m.extend([[0.0, 6.0], [4.0, 6.0], [5.0, 5.0], [4.0, 4.0], [0.0, 4.0]]);
    ring.arcs = vec![None, None, None, None, None, arc, arc, None, None];
    let start = [center_m[0] + 0.3_f64.cos(), center_m[1] + 0.3_f64.sin()];
    let through = [[1.0, 5.2], [15.0, 4.2]];
    let (mesh, info) = run_notch(vec![ring, Line::chain(vec![start, [20.0, 7.0]], 2), Line::chain(through.to_vec(), 3)]);
    assert_eq!(info.n_straightened, 0);
    for tag in [2, 3] {
        let on_circle = |v: u32| ((mesh.points_m[v as usize][0] - 4.0).hypot(mesh.points_m[v as usize][1] - 5.0) - 1.0).abs() < 1e-8;
        let ends = mesh.edges.iter().filter(|e| e.tag == tag).filter(|e| on_circle(e.nodes[0])).count();
        assert_eq!(ends, 1, "line {tag}");
    }
    assert!(28.0 - 1e-9 < info.smallest_angle_away_rad.to_degrees());
}

fn run_notch(lines: Vec<Line>) -> (Mesh, MeshInfo) {
    let region = |p: [f64; 2]| {
        let notch = 4.0 < p[1] && p[1] < 6.0 && (p[0] < 4.0 || (p[0] - 4.0).hypot(p[1] - 5.0) < 1.0);
        (!notch && 0.0 < p[0] && p[0] < 20.0 && 0.0 < p[1] && p[1] < 10.0).then_some(0)
    };
    let (mesh, info) = mesh(&Outline { lines }, &region, &SizeField::uniform(0.4), &MeshParams::default()).unwrap();
    sanity_check(&mesh, &[]).unwrap();
    (mesh, info)
}

#[test]
fn far_away_coordinates_give_the_same_mesh() {
    let moved = |by: [f64; 2]| {
        let mut ring = body();
        ring.points_m.iter_mut().for_each(|p| *p = [p[0] + by[0], p[1] + by[1]]);
        mesh(&Outline { lines: vec![ring] }, &|_| Some(0), &SizeField::uniform(0.5), &MeshParams::default()).unwrap().0
    };
    assert_eq!(moved([0.0, 0.0]).triangles, moved([524288.0, 262144.0]).triangles);
}

#[test]
fn cap_on_vertices_names_the_place() {
    let size = SizeField { sources: vec![SizeSource::point([5.0, 5.0], 1e-5)], gradation: 0.001, ..SizeField::uniform(1.0) };
    let params = MeshParams { n_vertices_max: 2000, ..MeshParams::default() };
    let error = mesh(&Outline { lines: vec![body()] }, &|_| Some(0), &size, &params).unwrap_err();
    assert!(matches!(error, MeshError::TooManyVertices { limit: 2000, .. }), "{error}");
    assert!(error.to_string().starts_with("the mesh needs more than 2000 corner nodes, the last ones near ("), "{error}");
}

#[test]
fn open_outline_and_void_everywhere_have_no_body() {
    let open = Line { closed: false, ..body() };
    let size = SizeField::uniform(1.0);
    let none = mesh(&Outline { lines: vec![open] }, &|_| Some(0), &size, &MeshParams::default()).unwrap_err();
    assert_eq!(none, MeshError::NoBody);
    let void = mesh(&Outline { lines: vec![body()] }, &|_| None, &size, &MeshParams::default()).unwrap_err();
    assert_eq!(void, MeshError::NoBody);
}
