//! Topology of opened slits: what a sheet becomes when it is cut, by hand.
use std::collections::BTreeSet;

use crate::{Line, MeshParams, Outline, SizeField, mesh, sanity_check};
use fem_core::mesh::{Mesh, NO_ELEMENT};

const SLIT: u32 = 50;

fn opened(lines: Vec<Line>) -> (Mesh, usize) {
    let sheet = Line::ring(vec![[0.0, 0.0], [10.0, 0.0], [10.0, 6.0], [0.0, 6.0]], 1);
    let outline = Outline { lines: [vec![sheet], lines].concat() };
    let (mesh, info) = mesh(&outline, &|_| Some(0), &SizeField::uniform(0.7), &MeshParams::default()).unwrap();
    sanity_check(&mesh, &[SLIT]).unwrap();
    (mesh, info.n_slit_nodes)
}

fn find(root: &[u32], mut i: u32) -> u32 {
    while root[i as usize] != i {
        i = root[i as usize];
    }
    i
}

/// Parts that hang together by nodes, and vertices - sides + triangles.
fn topology(mesh: &Mesh) -> (usize, i64) {
    let mut root: Vec<u32> = (0..mesh.n_corners as u32).collect();
    let mut sides = BTreeSet::new();
    for t in &mesh.triangles {
        for k in 0..3 {
            let (a, b) = (t[k], t[(k + 1) % 3]);
            sides.insert([a.min(b), a.max(b)]);
            let (x, y) = (find(&root, a), find(&root, b));
            root[x.max(y) as usize] = x.min(y);
        }
    }
    let parts = (0..mesh.n_corners).filter(|&i| root[i] as usize == i).count();
    let count = |n: usize| i64::try_from(n).unwrap();
    (parts, count(mesh.n_corners) - count(sides.len()) + count(mesh.triangles.len()))
}

#[track_caller]
fn check(lines: Vec<Line>, parts: usize, euler: i64) -> (Mesh, usize) {
    let (mesh, n_nodes) = opened(lines);
    assert_eq!(topology(&mesh), (parts, euler));
    for edge in mesh.edges.iter().filter(|e| e.tag == SLIT) {
        assert!((edge.left == NO_ELEMENT) != (edge.right == NO_ELEMENT), "each face of a slit has the body on one side");
    }
    let area: f64 = mesh.region_areas_m2().iter().sum();
    assert!((area - 60.0).abs() < 1e-9);
    (mesh, n_nodes)
}

fn slit(points_m: &[[f64; 2]]) -> Line {
    Line::slit(points_m.to_vec(), SLIT)
}

/// A cut inside a sheet makes a hole: Euler number 1 - 1 = 0. Nodes inside the cut are doubled, its tips are not.
#[test]
fn interior_slit_is_a_hole() {
    let (mesh, n_nodes) = check(vec![slit(&[[3.0, 3.0], [6.0, 4.0]])], 1, 0);
    let faces = mesh.edges.iter().filter(|e| e.tag == SLIT).count();
    assert_eq!(n_nodes, faces / 2 - 1);
}

#[test]
fn short_slit_still_opens() {
    let (_, n_nodes) = check(vec![slit(&[[3.0, 3.0], [3.1, 3.05]])], 1, 0);
    assert!(0 < n_nodes);
}

/// A notch changes nothing but the length of the boundary; its mouth is doubled, its tip is not.
#[test]
fn slit_from_the_boundary_is_a_notch() {
    let (mesh, n_nodes) = check(vec![slit(&[[4.0, 0.0], [5.0, 3.0]])], 1, 1);
    assert_eq!(n_nodes, mesh.edges.iter().filter(|e| e.tag == SLIT).count() / 2);
}

#[test]
fn crossing_slits_meet_in_four_nodes() {
    let (mesh, _) = check(vec![slit(&[[3.0, 2.0], [7.0, 4.0]]), slit(&[[3.0, 4.0], [7.0, 2.0]])], 1, 0);
    let at_crossing = mesh.points_m[..mesh.n_corners].iter().filter(|p| (p[0] - 5.0).hypot(p[1] - 3.0) < 1e-6).count();
    assert_eq!(at_crossing, 4);
}

#[test]
fn slit_on_slit_meets_in_three_nodes() {
    let (mesh, _) = check(vec![slit(&[[3.0, 3.0], [7.0, 3.0]]), slit(&[[5.0, 3.0], [5.0, 5.0]])], 1, 0);
    let at_joint = mesh.points_m[..mesh.n_corners].iter().filter(|p| (p[0] - 5.0).hypot(p[1] - 3.0) < 1e-6).count();
    assert_eq!(at_joint, 3);
}

#[test]
fn kinked_slit_is_one_hole() {
    check(vec![slit(&[[2.0, 2.0], [4.0, 4.0], [6.0, 3.0]])], 1, 0);
}

#[test]
fn slit_on_and_across_a_contact() {
    let contact = Line::chain(vec![[0.0, 3.0], [10.0, 3.0]], 10);
    check(vec![contact.clone(), slit(&[[5.0, 2.0], [5.5, 5.0]])], 1, 0);
    check(vec![contact.clone(), slit(&[[5.0, 3.0], [5.0, 5.0]])], 1, 0);
    let (mesh, _) = check(vec![contact, slit(&[[4.0, 3.0], [6.0, 3.0]])], 1, 0);
    // both faces of the slit carry the contact's tag as well
    let of_tag = |tag| mesh.edges.iter().filter(|e| e.tag == tag).map(|e| e.nodes[2]).collect::<BTreeSet<u32>>();
    assert!(of_tag(SLIT).is_subset(&of_tag(10)));
}

#[test]
fn slit_through_the_body_parts_it() {
    check(vec![slit(&[[0.0, 3.0], [10.0, 3.5]])], 2, 2);
    check(vec![slit(&[[4.0, -1.0], [4.0, 7.0]])], 2, 2);
}

/// A block cut out all around: a sheet with a hole (0) and the block (1).
#[test]
fn closed_slit_frees_a_block() {
    let ring = Line { closed: true, ..slit(&[[4.0, 2.0], [6.0, 2.0], [5.0, 4.0]]) };
    check(vec![ring], 2, 1);
}
