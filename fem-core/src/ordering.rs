//! From a mesh and its free unknowns to the order in which the solver eliminates them: nested dissection on the vertices of the mesh.
//!
//! Terms. The *vertex graph* has the corner nodes as vertices and the sides of the triangles as edges. A *separator* is a set of vertices
//! whose removal leaves two parts without an edge between them; eliminating it after both parts keeps their fill apart. A *block* is a
//! separator or an undivided part (*leaf*); blocks are eliminated in the order of their list.
use crate::assembly::{DofMap, PRESCRIBED, elements_of_nodes};
use crate::mesh::Mesh;
use rayon::prelude::*;

mod dissection;
mod graph;
mod leaf;
mod refine;
mod separator;

use dissection::{Block, dissect};
use graph::Graph;
use leaf::{LeafContext, minimum_degree};

/// Order of elimination of the free unknowns: entry `k` is the number of the unknown that is eliminated as the `k`-th.
///
/// Step 1: dissect the vertex graph into blocks. Step 2: a mid-side node joins the block of its earlier end, which makes each block of
/// vertices a separator of all nodes too, because two nodes share an element only if ends of theirs are neighbors. Step 3: order leaves by
/// minimum degree and separators along their longer extent. Step 4: write out both unknowns of each node together.
///
/// # Guarantees
/// - a permutation of `0 .. dofs.n_free`, whatever the coordinates: slits, loose components, single elements, partly prescribed nodes;
/// - the same for the same input, whatever the number of threads.
///
/// Source: George (1973), "Nested dissection of a regular finite element mesh"; the choice of lines and circles is our own.
///
/// # Panics
/// When `dofs` is for another number of nodes.
pub fn elimination_order(mesh: &Mesh, dofs: &DofMap) -> Vec<u32> {
    let n_nodes = mesh.points_m.len();
    assert_eq!(dofs.free_of_dof.len(), 2 * n_nodes, "unknowns of {} nodes, mesh has {n_nodes}", dofs.free_of_dof.len() / 2);
    let blocks = dissect(Graph::of_vertices(mesh));
    let block_of_node = blocks_of_nodes(mesh, &blocks);
    let (block_starts, mut nodes) = nodes_of_blocks(&block_of_node, blocks.len());
    let (element_starts, elements) = elements_of_nodes(mesh);
    let context = LeafContext { mesh, dofs, block_of_node: &block_of_node, element_starts: &element_starts, elements: &elements };
    split_by_block(&mut nodes, &block_starts).into_par_iter().with_min_len(32).for_each(|(i_block, nodes)| match blocks[i_block] {
        Block::Leaf(_) => minimum_degree(&context, i_block as u32, nodes),
        Block::Separator(_) => sort_along_longer_extent(&mesh.points_m, nodes),
    });
    let unknowns = nodes.iter().flat_map(|&node| [2 * node as usize, 2 * node as usize + 1]);
    unknowns.map(|dof| dofs.free_of_dof[dof]).filter(|&free| free != PRESCRIBED).collect()
}

/// Block number of every node.
fn blocks_of_nodes(mesh: &Mesh, blocks: &[Block]) -> Vec<u32> {
    let mut block_of_node = vec![u32::MAX; mesh.points_m.len()];
    for (i_block, block) in blocks.iter().enumerate() {
        for &vertex in block.vertices() {
            block_of_node[vertex as usize] = i_block as u32;
        }
    }
    for triangle in &mesh.triangles {
        for (end, middle, other) in [(0, 3, 1), (1, 4, 2), (2, 5, 0)] {
            let [a, b] = [end, other].map(|i| block_of_node[triangle[i] as usize]);
            block_of_node[triangle[middle] as usize] = a.min(b);
        }
    }
    block_of_node
}

/// Nodes grouped by block, ascending inside each: `(starts, nodes)`.
fn nodes_of_blocks(block_of_node: &[u32], n_blocks: usize) -> (Vec<u32>, Vec<u32>) {
    let mut starts = vec![0u32; n_blocks + 1];
    for &block in block_of_node {
        starts[block as usize + 1] += 1;
    }
    for i in 0..n_blocks {
        starts[i + 1] += starts[i];
    }
    let mut next = starts.clone();
    let mut nodes = vec![0u32; block_of_node.len()];
    for (node, &block) in block_of_node.iter().enumerate() {
        nodes[next[block as usize] as usize] = node as u32;
        next[block as usize] += 1;
    }
    (starts, nodes)
}

/// The part of `nodes` that belongs to each block, with the block's number.
fn split_by_block<'a>(nodes: &'a mut [u32], starts: &[u32]) -> Vec<(usize, &'a mut [u32])> {
    let mut rest = nodes;
    let mut parts = Vec::with_capacity(starts.len());
    for (i_block, ends) in starts.windows(2).enumerate() {
        let (part, after) = rest.split_at_mut((ends[1] - ends[0]) as usize);
        parts.push((i_block, part));
        rest = after;
    }
    parts
}

/// Neighbors in a separator come close in the order, so that its rows couple over short stretches.
fn sort_along_longer_extent(points_m: &[[f64; 2]], nodes: &mut [u32]) {
    let extent = |axis: usize| {
        let values = nodes.iter().map(|&node| points_m[node as usize][axis]);
        values.clone().fold(f64::NEG_INFINITY, f64::max) - values.fold(f64::INFINITY, f64::min)
    };
    let axis = usize::from(extent(0) < extent(1));
    nodes.sort_unstable_by(|&a, &b| points_m[a as usize][axis].total_cmp(&points_m[b as usize][axis]).then(a.cmp(&b)));
}

#[cfg(test)]
mod tests;
