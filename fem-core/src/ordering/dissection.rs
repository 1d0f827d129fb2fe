//! From a vertex graph to the list of blocks, by recursive bisection.
use super::graph::{Graph, Side};
use super::refine::refine;
use super::separator::separate;

/// Parts of at most this many vertices are left undivided. With minimum degree inside, smaller leaves gain nothing and larger ones cost time.
const LARGEST_LEAF: usize = 24;

/// Parts of more vertices than this are dissected in parallel.
const SMALLEST_PARALLEL: usize = 4000;

/// Vertices that are eliminated together, as corner node numbers.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Block {
    /// Undivided part.
    Leaf(Vec<u32>),
    /// Vertices between two parts that come earlier in the list.
    Separator(Vec<u32>),
}

impl Block {
    pub(super) fn vertices(&self) -> &[u32] {
        match self {
            Self::Leaf(vertices) | Self::Separator(vertices) => vertices,
        }
    }
}

/// Divides until every part is a leaf.
///
/// # Guarantees
/// - every vertex is in exactly one block, and no block is empty;
/// - two leaves have no edge between them; a separator stands after everything that it separates.
pub(super) fn dissect(graph: Graph) -> Vec<Block> {
    if graph.len() <= LARGEST_LEAF {
        return if graph.len() == 0 { Vec::new() } else { vec![Block::Leaf(graph.nodes)] };
    }
    let mut sides = separate(&graph);
    refine(&graph, &mut sides);
    let parts = [Side::First, Side::Second].map(|side| graph.part(&sides, side));
    let separator = graph.nodes_on(&sides, Side::Separator);
    let parallel = SMALLEST_PARALLEL < graph.len();
    drop((graph, sides));
    let [first, second] = parts;
    let (mut blocks, after) = if parallel { rayon::join(|| dissect(first), || dissect(second)) } else { (dissect(first), dissect(second)) };
    blocks.extend(after);
    if !separator.is_empty() {
        blocks.push(Block::Separator(separator));
    }
    blocks
}
