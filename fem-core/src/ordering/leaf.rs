//! From the nodes of a leaf to their order: exact minimum degree, the surroundings (*halo*) counted but not eliminated.
use crate::assembly::{DofMap, PRESCRIBED};
use crate::mesh::Mesh;

/// What a leaf must know of the mesh.
pub(super) struct LeafContext<'a> {
    pub(super) mesh: &'a Mesh,
    pub(super) dofs: &'a DofMap,
    pub(super) block_of_node: &'a [u32],
    pub(super) element_starts: &'a [u32],
    pub(super) elements: &'a [u32],
}

impl LeafContext<'_> {
    /// Nodes that share an element with `node`, itself included, with repetitions; wholly prescribed ones left out.
    fn around(&self, node: u32) -> impl Iterator<Item = u32> {
        let range = self.element_starts[node as usize] as usize..self.element_starts[node as usize + 1] as usize;
        let nodes = self.elements[range].iter().flat_map(|&element| self.mesh.triangles[element as usize]);
        nodes.filter(|&node| self.is_free(node))
    }

    fn is_free(&self, node: u32) -> bool {
        self.dofs.free_of_dof[2 * node as usize] != PRESCRIBED || self.dofs.free_of_dof[2 * node as usize + 1] != PRESCRIBED
    }
}

/// Puts the nodes of a leaf (ascending on entry) into their order of elimination.
///
/// At each step the node with the fewest neighbors in the partly eliminated graph comes next, and with it all nodes that then have the same
/// neighbors. The result is put into postorder of the elimination tree: the fill is the same, and columns of equal structure come together.
pub(super) fn minimum_degree(context: &LeafContext, block: u32, nodes: &mut [u32]) {
    let mut members: Vec<u32> = nodes.iter().copied().filter(|&node| context.is_free(node)).collect();
    let n_free = members.len();
    let mut graph = LeafGraph::new(context, block, &members);
    let eliminated = graph.eliminate();
    let order = graph.postorder(&eliminated);
    let free_first = order.iter().map(|&i| members[i]).collect::<Vec<_>>();
    members.clear();
    members.extend(nodes.iter().copied().filter(|&node| !context.is_free(node)));
    nodes[..n_free].copy_from_slice(&free_first);
    nodes[n_free..].copy_from_slice(&members);
}

/// Closed neighborhoods as rows of bits: bit `j < n` is member `j`, later bits are the halo.
struct LeafGraph {
    n: usize,
    n_words: usize,
    bits: Vec<u64>,
}

impl LeafGraph {
    fn new(context: &LeafContext, block: u32, members: &[u32]) -> Self {
        let is_member = |node: u32| context.block_of_node[node as usize] == block;
        let n = members.len();
        let mut halo: Vec<u32> = members.iter().flat_map(|&node| context.around(node)).filter(|&node| !is_member(node)).collect();
        halo.sort_unstable();
        halo.dedup();
        let n_words = (n + halo.len()).div_ceil(64);
        let mut graph = Self { n, n_words, bits: vec![0; n * n_words] };
        for (i, &node) in members.iter().enumerate() {
            for other in context.around(node) {
                let place = if is_member(other) { members.binary_search(&other) } else { halo.binary_search(&other).map(|k| n + k) };
                graph.insert(i, place.expect("every node around a member is a member or in the halo"));
            }
        }
        graph
    }

    fn row(&self, i: usize) -> &[u64] {
        &self.bits[i * self.n_words..(i + 1) * self.n_words]
    }

    fn row_mut(&mut self, i: usize) -> &mut [u64] {
        &mut self.bits[i * self.n_words..(i + 1) * self.n_words]
    }

    fn insert(&mut self, i: usize, j: usize) {
        self.row_mut(i)[j / 64] |= 1 << (j % 64);
    }

    fn remove(&mut self, i: usize, j: usize) {
        self.row_mut(i)[j / 64] &= !(1 << (j % 64));
    }

    fn degree(&self, i: usize) -> u32 {
        self.row(i).iter().map(|word| word.count_ones()).sum()
    }

    /// Order of elimination; afterwards each row holds the later neighbors of its member, which are the structure of its column.
    fn eliminate(&mut self) -> Vec<usize> {
        let mut degrees: Vec<u32> = (0..self.n).map(|i| self.degree(i)).collect();
        let mut alive: Vec<usize> = (0..self.n).collect();
        let mut order = Vec::with_capacity(self.n);
        while let Some(place) = (0..alive.len()).min_by_key(|&k| (degrees[alive[k]], alive[k])) {
            let pivot = alive.swap_remove(place);
            order.push(pivot);
            self.remove(pivot, pivot);
            let front = self.row(pivot).to_vec();
            let touched: Vec<usize> = alive.iter().copied().filter(|&i| front[i / 64] >> (i % 64) & 1 == 1).collect();
            for &i in &touched {
                for (word, front) in self.row_mut(i).iter_mut().zip(&front) {
                    *word |= front;
                }
                self.remove(i, pivot);
            }
            self.eliminate_equals(&front, &touched, &mut alive, &mut order);
            for &i in &touched {
                degrees[i] = self.degree(i);
            }
        }
        order
    }

    /// Eliminates the touched members whose closed neighborhood is the front itself: they cause no further fill.
    fn eliminate_equals(&mut self, front: &[u64], touched: &[usize], alive: &mut Vec<usize>, order: &mut Vec<usize>) {
        let equals: Vec<usize> = touched.iter().copied().filter(|&i| self.row(i) == front).collect();
        for (k, &i) in equals.iter().enumerate() {
            order.push(i);
            for &j in &equals[..=k] {
                self.remove(i, j);
            }
        }
        if equals.is_empty() {
            return;
        }
        alive.retain(|i| !equals.contains(i));
        for &i in touched.iter().filter(|i| !equals.contains(i)) {
            for &j in &equals {
                self.remove(i, j);
            }
        }
    }

    /// Depth-first order of the elimination tree of the members, children before their parent.
    fn postorder(&self, eliminated: &[usize]) -> Vec<usize> {
        let mut step = vec![0; self.n];
        for (k, &i) in eliminated.iter().enumerate() {
            step[i] = k;
        }
        // The parent of a column is the first later one in its structure; children and roots are listed by step.
        let mut children: Vec<Vec<usize>> = vec![Vec::new(); self.n];
        let mut pending = Vec::new();
        for k in (0..self.n).rev() {
            match self.members_in_row(eliminated[k]).map(|j| step[j]).min() {
                Some(parent) => children[parent].push(k),
                None => pending.push(k),
            }
        }
        // Reversed preorder with children taken in falling order is a postorder.
        let mut order = Vec::with_capacity(self.n);
        pending.reverse();
        while let Some(k) = pending.pop() {
            order.push(eliminated[k]);
            pending.extend(children[k].iter().rev());
        }
        order.reverse();
        order
    }

    fn members_in_row(&self, i: usize) -> impl Iterator<Item = usize> {
        let row = self.row(i);
        (0..self.n).filter(move |&j| row[j / 64] >> (j % 64) & 1 == 1)
    }
}

#[cfg(test)]
mod tests;
