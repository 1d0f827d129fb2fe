//! Small outlines whose areas, lengths and counts are known by hand.
use std::f64::consts::PI;

use crate::{Arc, Line, MeshInfo, MeshParams, Outline, SizeField, SizeSource, mesh, sanity_check};
use fem_core::mesh::{Mesh, NO_ELEMENT};

fn run(lines: Vec<Line>, region: impl Fn([f64; 2]) -> Option<u32>, size: &SizeField) -> (Mesh, MeshInfo) {
    let slits: Vec<u32> = lines.iter().filter(|l| l.open).map(|l| l.tag).collect();
    let (mesh, info) = mesh(&Outline { lines }, &region, size, &MeshParams::default()).unwrap();
    sanity_check(&mesh, &slits).unwrap();
    (mesh, info)
}

fn rectangle(width_m: f64, height_m: f64, tag: u32) -> Line {
    Line::ring(vec![[0.0, 0.0], [width_m, 0.0], [width_m, height_m], [0.0, height_m]], tag)
}

/// Length of all edges with a tag, m, on straight lines.
fn length_m(mesh: &Mesh, tag: u32) -> f64 {
    let edges = mesh.edges.iter().filter(|e| e.tag == tag);
    edges.map(|e| distance(mesh.points_m[e.nodes[0] as usize], mesh.points_m[e.nodes[1] as usize])).sum()
}

fn distance(a: [f64; 2], b: [f64; 2]) -> f64 {
    (a[0] - b[0]).hypot(a[1] - b[1])
}

#[test]
fn square_has_its_area_and_edges_with_the_body_on_the_left() {
    let (mesh, info) = run(vec![rectangle(2.0, 1.0, 5)], |_| Some(0), &SizeField::uniform(0.2));
    assert!((mesh.region_areas_m2()[0] - 2.0).abs() < 1e-12);
    assert!((length_m(&mesh, 5) - 6.0).abs() < 1e-12);
    assert!(mesh.edges.iter().all(|e| e.left != NO_ELEMENT && e.right == NO_ELEMENT));
    assert!(28.0 < info.smallest_angle_rad.to_degrees(), "{}", info.smallest_angle_rad.to_degrees());
    assert_eq!((info.n_patches, info.n_unimproved, info.n_straightened), (1, 0, 0));
}

#[test]
fn clockwise_ring_has_the_body_on_the_right() {
    let mut ring = rectangle(2.0, 1.0, 5);
    ring.points_m.reverse();
    let (mesh, _) = run(vec![ring], |_| Some(0), &SizeField::uniform(0.5));
    assert!(mesh.edges.iter().all(|e| e.right != NO_ELEMENT && e.left == NO_ELEMENT));
}

#[test]
fn contact_parts_two_regions_and_is_cut_off_outside() {
    let contact = Line::chain(vec![[-3.0, 0.3], [5.0, 0.7]], 9);
    let region = |p: [f64; 2]| (0.0 < p[1] && p[1] < 1.0 && 0.0 < p[0] && p[0] < 2.0).then(|| u32::from(p[1] > 0.45 + 0.05 * p[0]));
    let (mesh, _) = run(vec![rectangle(2.0, 1.0, 5), contact], region, &SizeField::uniform(0.2));
    // y = 0.45 and 0.55 at the sides
    let areas = mesh.region_areas_m2();
    assert!((areas[0] - 1.0).abs() < 1e-8 && (areas[1] - 1.0).abs() < 1e-8, "{areas:?}");
    assert!((length_m(&mesh, 9) - 2.0_f64.hypot(0.1)).abs() < 1e-8);
    for edge in mesh.edges.iter().filter(|e| e.tag == 9) {
        assert_eq!((mesh.regions[edge.left as usize], mesh.regions[edge.right as usize]), (1, 0), "left of a landward line is above");
    }
}

#[test]
fn overlapping_lines_give_edges_for_both_tags() {
    let bed = Line::chain(vec![[0.0, 0.5], [2.0, 0.5]], 7);
    let crack = Line::chain(vec![[1.5, 0.5], [0.5, 0.5]], 8);
    let (mesh, _) = run(vec![rectangle(2.0, 1.0, 5), bed, crack], |_| Some(0), &SizeField::uniform(0.2));
    assert!((length_m(&mesh, 7) - 2.0).abs() < 1e-9);
    assert!((length_m(&mesh, 8) - 1.0).abs() < 1e-9);
    for edge in mesh.edges.iter().filter(|e| e.tag == 8) {
        let back = mesh.edges.iter().find(|e| e.tag == 7 && e.nodes[2] == edge.nodes[2]).unwrap();
        assert_eq!([back.nodes[0], back.nodes[1]], [edge.nodes[1], edge.nodes[0]]);
        assert_eq!([back.left, back.right], [edge.right, edge.left]);
    }
}

#[test]
fn quarter_circle_has_all_nodes_on_the_circle_and_nearly_its_area() {
    let arc = Some(Arc { center_m: [0.0, 0.0], radius_m: 2.0 });
    let line = Line { arcs: vec![None, arc, None], ..Line::ring(vec![[0.0, 0.0], [2.0, 0.0], [0.0, 2.0]], 3) };
    for size_m in [0.5, 0.25] {
        let (mesh, info) = run(vec![line.clone()], |_| Some(0), &SizeField::uniform(size_m));
        let on_axes = |p: [f64; 2]| p[0].abs() < 1e-9 || p[1].abs() < 1e-9;
        for edge in mesh.edges.iter().filter(|e| !on_axes(mesh.points_m[e.nodes[2] as usize])) {
            for node in edge.nodes {
                let radius = distance(mesh.points_m[node as usize], [0.0, 0.0]);
                // ends of chords are rounded to the grid of 2^-31 m
                assert!((radius - 2.0).abs() < 1e-9, "node at radius {radius}");
            }
        }
        // A parabola through three points of an arc of half angle w misses its segment by about 2 w^5 r^2 / 45 (series of w - sin w cos w).
        let (n, half) = ((PI * 1.0 / size_m).round().max(6.0), 0.5 * PI / 2.0);
        let bound = n * 0.1 * 4.0 * (half / n).powi(5);
        let off = (mesh.region_areas_m2()[0] - PI).abs();
        assert!(off < bound, "area off by {off:e}, bound {bound:e}");
        assert_eq!(info.n_straightened, 0);
    }
}

#[test]
fn sizes_are_met_near_a_source() {
    let size = SizeField { sources: vec![SizeSource::point([1.0, 0.5], 0.02)], ..SizeField::uniform(0.4) };
    let (mesh, _) = run(vec![rectangle(2.0, 1.0, 5)], |_| Some(0), &size);
    let mut worst: f64 = 0.0;
    for t in &mesh.triangles {
        for (a, b) in [(0, 1), (1, 2), (2, 0)] {
            let (p, q) = (mesh.points_m[t[a] as usize], mesh.points_m[t[b] as usize]);
            worst = worst.max(distance(p, q) / size.evaluate_m([0.5 * (p[0] + q[0]), 0.5 * (p[1] + q[1])]));
        }
    }
    // a side is at most a diameter: 2 * 1.2 / sqrt(3) = 1.39 of the mean size of the corners, which differs from that in its middle
    assert!(worst < 1.8, "longest side {worst} of the wanted size");
    assert!(300 < mesh.triangles.len() && mesh.triangles.len() < 2000, "{}", mesh.triangles.len());
}
