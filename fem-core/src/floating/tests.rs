//! Bodies that float, hinge or stand.
use super::*;
use crate::mesh::structured::{BOTTOM, Grid, grid, rectangle};
use crate::supports::Spring;

fn fix_bottom(mesh: &Mesh) -> Supports {
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in mesh.edges.iter().filter(|e| e.tag == BOTTOM) {
        edge.nodes.into_iter().for_each(|n| supports.fix(n));
    }
    supports
}

#[test]
fn a_fixed_base_holds_and_a_single_roller_does_not() {
    let mesh = rectangle(Grid { n_u: 3, n_v: 3, curved: false }, [100.0, 50.0], [3.0, 3.0], 0.1);
    assert!(floating_parts(&mesh, &fix_bottom(&mesh)).is_empty());
    let mut rollers = Supports::none(mesh.points_m.len());
    for edge in mesh.edges.iter().filter(|e| e.tag == BOTTOM) {
        edge.nodes.into_iter().for_each(|n| rollers.prescribe(n, 1, 0.0));
    }
    assert_eq!(floating_parts(&mesh, &rollers).len(), 1, "free to slide along x");
    rollers.add_spring(Spring { node: 0, direction: [0.8, 0.6], stiffness_n_per_m2: 1.0 });
    assert!(floating_parts(&mesh, &rollers).is_empty());
    assert_eq!(floating_parts(&mesh, &Supports::none(mesh.points_m.len()))[0].elements.len(), 18);
}

#[test]
fn a_block_cut_free_and_a_block_on_a_corner_float() {
    // Middle row of cells left out: the top row has nothing below it.
    let cells = Grid { n_u: 3, n_v: 3, curved: false };
    let mesh = grid(cells, &|uv| uv, &|_, j| j != 1);
    let parts = floating_parts(&mesh, &fix_bottom(&mesh));
    assert_eq!(parts.len(), 1);
    assert!(parts[0].place_m[1] > 0.66 && (parts[0].area_m2 - 1.0 / 3.0).abs() < 1e-14);
    // Two cells that touch at a corner only: the upper one turns about it.
    let mesh = grid(Grid { n_u: 2, n_v: 2, curved: false }, &|uv| uv, &|i, j| i == j);
    assert_eq!(bodies(&mesh), [0, 0, 1, 1]);
    let parts = floating_parts(&mesh, &fix_bottom(&mesh));
    assert_eq!(parts.len(), 1);
    assert_eq!(parts[0].elements, [2, 3]);
    // An arch of three corner contacts carries: cells (0,0), (1,1), (2,0) with both feet fixed.
    let mesh = grid(Grid { n_u: 3, n_v: 2, curved: false }, &|uv| uv, &|i, j| (i + j) % 2 == 0);
    assert!(floating_parts(&mesh, &fix_bottom(&mesh)).is_empty());
}
