//! Every order is a permutation whatever the mesh, blocks are kept apart by their separators, and the fill is small.
use super::graph::Side;
use super::refine::refine;
use super::separator::separate;
use super::*;
use crate::mesh::structured::{Grid, grid, rectangle};
use crate::supports::Supports;
use faer::perm::PermRef;
use faer::sparse::SymbolicSparseColMatRef;
use faer::sparse::linalg::SupernodalThreshold;
use faer::sparse::linalg::cholesky::{CholeskySymbolicParams, SymmetricOrdering, factorize_symbolic_cholesky};
use proptest::prelude::*;

/// Ring sector graded toward its inner arc, from 0.3 m to 60 m.
pub(super) fn graded(n_u: usize, n_v: usize) -> Mesh {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (0.3 * 200.0_f64.powf(u), 4.7 * v);
        [r * a.cos(), r * a.sin()]
    };
    grid(Grid { n_u, n_v, curved: true }, &polar, &|_, _| true)
}

/// Supports where nodes with both, one or no unknown free occur.
fn mixed_supports(mesh: &Mesh, period: u32) -> Supports {
    let n = mesh.points_m.len();
    let mut supports = Supports::none(n);
    for node in 0..n as u32 {
        match node % period {
            0 => supports.fix(node),
            3 => supports.prescribe(node, 0, 0.0),
            5 => supports.prescribe(node, 1, 0.0),
            _ => {}
        }
    }
    supports
}

/// Duplicates the nodes of the line `y = height_m`, `left_m < x`, for the elements above it.
fn open_slit(mesh: &Mesh, height_m: f64, left_m: f64) -> Mesh {
    let on_line = |node: u32| (mesh.points_m[node as usize][1] - height_m).abs() < 1e-9 && left_m < mesh.points_m[node as usize][0];
    let is_above = |t: &[u32; 6]| t[..3].iter().map(|&node| mesh.points_m[node as usize][1]).sum::<f64>() / 3.0 > height_m;
    let copies: Vec<u32> = (0..mesh.points_m.len() as u32).filter(|&node| on_line(node)).collect();
    let n_corners = mesh.n_corners + copies.iter().filter(|&&node| (node as usize) < mesh.n_corners).count();
    // Old nodes keep their order with the copies of corners between corners and mid-side nodes, those of mid-side nodes at the end.
    let mut points_m: Vec<[f64; 2]> = mesh.points_m[..mesh.n_corners].to_vec();
    let shift = (n_corners - mesh.n_corners) as u32;
    let kept = |node: u32| if (node as usize) < mesh.n_corners { node } else { node + shift };
    let mut copied = std::collections::BTreeMap::new();
    for &node in copies.iter().filter(|&&node| (node as usize) < mesh.n_corners) {
        copied.insert(node, points_m.len() as u32);
        points_m.push(mesh.points_m[node as usize]);
    }
    points_m.extend(&mesh.points_m[mesh.n_corners..]);
    for &node in copies.iter().filter(|&&node| mesh.n_corners <= node as usize) {
        copied.insert(node, points_m.len() as u32);
        points_m.push(mesh.points_m[node as usize]);
    }
    let renumber = |t: &[u32; 6]| t.map(|node| if is_above(t) { copied.get(&node).copied().unwrap_or(kept(node)) } else { kept(node) });
    Mesh { points_m, n_corners, triangles: mesh.triangles.iter().map(renumber).collect(), ..mesh.clone() }
}

#[track_caller]
fn check_permutation(mesh: &Mesh, supports: &Supports) -> Vec<u32> {
    let dofs = supports.dof_map();
    let order = elimination_order(mesh, &dofs);
    let mut sorted = order.clone();
    sorted.sort_unstable();
    assert_eq!(sorted, (0..dofs.n_free as u32).collect::<Vec<_>>(), "not a permutation");
    // Both unknowns of a node stand together.
    let position: std::collections::BTreeMap<u32, usize> = order.iter().enumerate().map(|(k, &free)| (free, k)).collect();
    for pair in dofs.free_of_dof.chunks(2).filter(|pair| pair.iter().all(|&free| free != PRESCRIBED)) {
        assert_eq!(position[&pair[0]] + 1, position[&pair[1]], "unknowns {pair:?} are apart");
    }
    order
}

/// Entries of the Cholesky factor, counted by the library's column counts; natural order for `None`.
fn fill(mesh: &Mesh, supports: &Supports, order: Option<&[u32]>) -> usize {
    let matrix = crate::assembly::pattern(mesh, supports).matrix;
    let pattern = SymbolicSparseColMatRef::new_checked(matrix.n, matrix.n, &matrix.column_starts, None, &matrix.rows);
    let mut position = vec![0; matrix.n];
    for (k, &unknown) in order.unwrap_or_default().iter().enumerate() {
        position[unknown as usize] = k as u32;
    }
    let ordering =
        order.map_or(SymmetricOrdering::Amd, |order| SymmetricOrdering::Custom(PermRef::new_checked(order, &position, matrix.n)));
    let params = CholeskySymbolicParams { supernodal_flop_ratio_threshold: SupernodalThreshold::FORCE_SIMPLICIAL, ..Default::default() };
    factorize_symbolic_cholesky(pattern, faer::Side::Lower, ordering, params).unwrap().len_val()
}

#[test]
fn small_and_odd_meshes_give_permutations() {
    let one = grid(Grid { n_u: 1, n_v: 1, curved: false }, &|uv| uv, &|_, _| true);
    let mut single = one.clone();
    single.triangles.truncate(1);
    let used: Vec<u32> = single.triangles[0].to_vec();
    single.points_m = used.iter().map(|&node| one.points_m[node as usize]).collect();
    single.triangles = vec![[0, 1, 2, 3, 4, 5]];
    (single.n_corners, single.regions, single.edges) = (3, vec![0], vec![]);
    for mesh in [single, one] {
        let n = mesh.points_m.len();
        check_permutation(&mesh, &Supports::none(n));
        check_permutation(&mesh, &mixed_supports(&mesh, 7));
        let mut all_fixed = Supports::none(n);
        (0..n as u32).for_each(|node| all_fixed.fix(node));
        assert!(check_permutation(&mesh, &all_fixed).is_empty());
        // Corners held, mid-side nodes free.
        let mut corners = Supports::none(n);
        (0..mesh.n_corners as u32).for_each(|node| corners.fix(node));
        check_permutation(&mesh, &corners);
    }
    assert!(elimination_order(&Mesh::default(), &DofMap::default()).is_empty());
}

#[test]
fn slits_and_loose_components_give_permutations() {
    let sheet = rectangle(Grid { n_u: 24, n_v: 16, curved: false }, [0.0, 0.0], [24.0, 16.0], 0.0);
    let slit = open_slit(&sheet, 8.0, 10.5);
    assert_eq!(slit.points_m.len(), sheet.points_m.len() + 27, "13 corners and 14 mid-side nodes are doubled");
    let through = open_slit(&sheet, 8.0, -1.0);
    let islands = grid(Grid { n_u: 40, n_v: 8, curved: false }, &|[u, v]| [40.0 * u, 8.0 * v], &|i, _| i % 10 < 7);
    for mesh in [slit, through, islands] {
        let free = Supports::none(mesh.points_m.len());
        let order = check_permutation(&mesh, &free);
        check_permutation(&mesh, &mixed_supports(&mesh, 11));
        assert!(fill(&mesh, &free, Some(&order)) < fill(&mesh, &free, None) * 11 / 10);
    }
}

#[test]
fn vertices_in_one_place_are_still_divided() {
    let mut mesh = rectangle(Grid { n_u: 12, n_v: 12, curved: false }, [0.0, 0.0], [1.0, 1.0], 0.0);
    for point in [[1.0, 2.0], [f64::NAN, 0.0]] {
        mesh.points_m.fill(point);
        check_permutation(&mesh, &Supports::none(mesh.points_m.len()));
    }
}

#[test]
fn leaves_touch_only_through_separators() {
    let mesh = graded(20, 30);
    let blocks = dissect(Graph::of_vertices(&mesh));
    let block_of_node = blocks_of_nodes(&mesh, &blocks);
    for triangle in &mesh.triangles {
        let mut leaves: Vec<u32> = triangle.iter().map(|&node| block_of_node[node as usize]).collect();
        leaves.retain(|&block| matches!(blocks[block as usize], Block::Leaf(_)));
        leaves.dedup();
        leaves.sort_unstable();
        leaves.dedup();
        assert!(leaves.len() <= 1, "an element joins the leaves {leaves:?}");
    }
    let n_vertices: usize = blocks.iter().map(|block| block.vertices().len()).sum();
    assert_eq!(n_vertices, mesh.n_corners);
}

#[test]
fn order_does_not_depend_on_the_threads() {
    let mesh = graded(60, 80);
    let dofs = Supports::none(mesh.points_m.len()).dof_map();
    let with = |n: usize| rayon::ThreadPoolBuilder::new().num_threads(n).build().unwrap().install(|| elimination_order(&mesh, &dofs));
    assert_eq!(with(1), with(3));
}

#[test]
fn fill_is_below_that_of_minimum_degree() {
    let mesh = graded(44, 60);
    let supports = mixed_supports(&mesh, 1000);
    let order = check_permutation(&mesh, &supports);
    let (ours, amd) = (fill(&mesh, &supports, Some(&order)), fill(&mesh, &supports, None));
    // Margin: 2 %; on meshes of 100,000 unknowns and more nested dissection has 10 to 20 % less than minimum degree.
    assert!(ours * 100 < amd * 102, "{ours} entries, {amd} by approximate minimum degree");
}

#[test]
fn fill_is_far_below_that_of_the_natural_order() {
    let mesh = graded(12, 16);
    let supports = mixed_supports(&mesh, 1000);
    let order = check_permutation(&mesh, &supports);
    let identity: Vec<u32> = (0..supports.dof_map().n_free as u32).collect();
    let (ours, natural) = (fill(&mesh, &supports, Some(&order)), fill(&mesh, &supports, Some(&identity)));
    assert!(ours * 2 < natural, "{ours} entries, {natural} in natural order");
}

/// A square of `m × m` vertices cannot be divided at this balance by fewer than about `m` vertices along a line; diagonals allow no fewer.
#[test]
fn separator_of_a_square_is_one_line_long() {
    let mesh = rectangle(Grid { n_u: 30, n_v: 30, curved: false }, [0.0, 0.0], [1.0, 1.0], 0.0);
    let graph = Graph::of_vertices(&mesh);
    let mut sides = separate(&graph);
    refine(&graph, &mut sides);
    assert!(graph.nodes_on(&sides, Side::Separator).len() <= 31);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]
    #[test]
    fn refinement_keeps_a_separator_and_does_not_enlarge_it(n_u in 3usize..14, n_v in 3usize..14, seed in any::<u64>()) {
        let mesh = rectangle(Grid { n_u, n_v, curved: false }, [0.0, 0.0], [3.0, 2.0], 0.2);
        let graph = Graph::of_vertices(&mesh);
        // A ragged start: pseudo-random parts, every vertex of the first that touches the second in the separator.
        let first: Vec<bool> = (0..graph.len() as u64).map(|v| (v * 7 + (seed >> (v % 60)) % 13) % 20 < 9).collect();
        let mut sides: Vec<Side> = first.iter().map(|&f| if f { Side::First } else { Side::Second }).collect();
        for v in 0..graph.len() {
            if first[v] && graph.neighbors(v).iter().any(|&w| !first[w as usize]) {
                sides[v] = Side::Separator;
            }
        }
        let score = |sides: &[Side]| {
            let [a, b, s] = [Side::First, Side::Second, Side::Separator].map(|side| graph.nodes_on(sides, side).len() as f64);
            s * (1.0 + 2.0 * ((a - b) / (2.0 * graph.len() as f64)).powi(2))
        };
        let before = score(&sides);
        refine(&graph, &mut sides);
        prop_assert!(score(&sides) <= before);
        for v in 0..graph.len() {
            for &w in graph.neighbors(v) {
                prop_assert!(sides[v] == Side::Separator || sides[w as usize] != sides[v].opposite(), "edge {v} {w} joins the parts");
            }
        }
    }

    #[test]
    fn random_bodies_give_permutations(n_u in 1usize..16, n_v in 1usize..16, holes in 2usize..9, period in 6u32..20) {
        let keep = |i: usize, j: usize| (3 * i + 5 * j) % holes != 1;
        let mesh = grid(Grid { n_u, n_v, curved: false }, &|[u, v]| [u * u, v], &keep);
        check_permutation(&mesh, &mixed_supports(&mesh, period));
    }
}
