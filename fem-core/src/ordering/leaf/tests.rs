//! The order of a leaf against an elimination by sets.
use super::super::tests::graded;
use super::*;
use crate::assembly::elements_of_nodes;
use crate::supports::Supports;
use std::collections::BTreeSet;

/// Columns of the factor, by eliminating `order` in a graph given as closed neighborhoods.
fn n_entries_by_sets(mut closed: Vec<BTreeSet<usize>>, order: &[usize]) -> usize {
    let mut n_entries = 0;
    for &pivot in order {
        let front = closed[pivot].clone();
        n_entries += front.len();
        for &i in front.iter().filter(|&&i| i != pivot && i < order.len()) {
            closed[i].extend(&front);
            closed[i].remove(&pivot);
        }
    }
    n_entries
}

#[test]
fn postorder_keeps_the_fill_of_the_elimination() {
    let mesh = graded(5, 8);
    let n = mesh.points_m.len();
    let dofs = Supports::none(n).dof_map();
    let (element_starts, elements) = elements_of_nodes(&mesh);
    // A strip of the mesh as the leaf, the rest as halo.
    let block_of_node: Vec<u32> = mesh.points_m.iter().map(|p| u32::from(p[1] < 0.0)).collect();
    let members: Vec<u32> = (0..n as u32).filter(|&node| block_of_node[node as usize] == 0).collect();
    let context =
        LeafContext { mesh: &mesh, dofs: &dofs, block_of_node: &block_of_node, element_starts: &element_starts, elements: &elements };
    let start = LeafGraph::new(&context, 0, &members);
    let closed: Vec<BTreeSet<usize>> =
        (0..start.n).map(|i| (0..64 * start.n_words).filter(|&j| start.row(i)[j / 64] >> (j % 64) & 1 == 1).collect()).collect();

    let mut graph = start;
    let eliminated = graph.eliminate();
    let by_bits: usize = (0..graph.n).map(|i| graph.degree(i) as usize + 1).sum();
    assert_eq!(n_entries_by_sets(closed.clone(), &eliminated), by_bits);

    let order = graph.postorder(&eliminated);
    assert_eq!(n_entries_by_sets(closed.clone(), &order), by_bits);
    assert_ne!(order, eliminated, "the case does not exercise the postorder");
    let natural: Vec<usize> = (0..graph.n).collect();
    assert!(by_bits < n_entries_by_sets(closed, &natural), "no better than the natural order");
}

#[test]
fn wholly_prescribed_nodes_come_last_and_cost_nothing() {
    let mesh = graded(2, 2);
    let n = mesh.points_m.len();
    let mut supports = Supports::none(n);
    supports.fix(4);
    supports.prescribe(5, 0, 0.0);
    let dofs = supports.dof_map();
    let (element_starts, elements) = elements_of_nodes(&mesh);
    let block_of_node = vec![0; n];
    let context =
        LeafContext { mesh: &mesh, dofs: &dofs, block_of_node: &block_of_node, element_starts: &element_starts, elements: &elements };
    let mut nodes: Vec<u32> = (0..n as u32).collect();
    minimum_degree(&context, 0, &mut nodes);
    assert_eq!(nodes.last(), Some(&4));
    nodes.sort_unstable();
    assert_eq!(nodes, (0..n as u32).collect::<Vec<_>>());
}
