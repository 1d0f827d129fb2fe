//! From mesh, materials and supports to the sparse stiffness matrix of the free unknowns, and to load vectors.
//!
//! Unknown (dof) number = 2 · node + direction, direction 0 = x, 1 = y. Prescribed unknowns are left out of the matrix.
//! Materials are given per region number: `materials[mesh.regions[element]]`.
use crate::elasticity::Elastic;
use crate::element::{N_PAIRS, element_points_m, stiffness_blocks};
use crate::mesh::Mesh;
use crate::supports::Supports;

mod forces;
mod loads;
mod split;

pub use forces::{internal_forces, internal_forces_of};
pub use loads::{
    body_force, body_force_of, body_force_split, edge_pressure, edge_traction, initial_stress, initial_stress_of, initial_stress_split,
    pore_pressure,
};
pub(crate) use loads::{pieces as edge_pieces, side_point, side_slope, walk_edge};
pub use split::{KinkLine, KinksOf, SMOOTH};

/// "This unknown is prescribed" in [`DofMap::free_of_dof`].
pub const PRESCRIBED: u32 = u32::MAX;

/// Lower triangle, diagonal included, of a symmetric matrix in compressed columns.
///
/// # Guarantees
/// Rows ascend inside each column, so the diagonal entry comes first; `column_starts` has `n + 1` entries.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct SymmetricCsc {
    /// Number of rows and columns.
    pub n: usize,
    /// Where each column starts in `rows` and `values`, shape `[n + 1]`.
    pub column_starts: Vec<u32>,
    /// Row of each entry, shape `[n_entries]`.
    pub rows: Vec<u32>,
    /// Value of each entry in N/m² (force per displacement and per metre of thickness), shape `[n_entries]`.
    pub values: Vec<f64>,
}

/// Numbers of the free unknowns, ascending with the unknown.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct DofMap {
    /// Free number of each unknown or [`PRESCRIBED`], shape `[2 * n_nodes]`.
    pub free_of_dof: Vec<u32>,
    /// Number of free unknowns.
    pub n_free: usize,
}

impl SymmetricCsc {
    /// `y = A x` with the mirrored upper triangle.
    ///
    /// # Panics
    /// When the length of `x` is not `n`.
    pub fn multiply(&self, x: &[f64]) -> Vec<f64> {
        assert_eq!(x.len(), self.n, "vector of length {} for a matrix of size {}", x.len(), self.n);
        let mut y = vec![0.0; self.n];
        for column in 0..self.n {
            let range = self.column_starts[column] as usize..self.column_starts[column + 1] as usize;
            let x_column = x[column];
            let mut sum = 0.0;
            for (&row, &value) in self.rows[range.clone()].iter().zip(&self.values[range]) {
                let row = row as usize;
                sum += value * x[row];
                if row != column {
                    y[row] += value * x_column;
                }
            }
            y[column] += sum;
        }
        y
    }
}

/// Structure of the stiffness matrix, built once per mesh and supports: where each element entry goes.
#[derive(Debug, Clone, PartialEq)]
pub struct Pattern {
    /// Numbers of the free unknowns.
    pub dofs: DofMap,
    /// Column starts and rows; the values are zero.
    pub matrix: SymmetricCsc,
    /// For each element and node pair `a < b` in the order of [`PAIR_OF_NODES`]: place of the block in its first column.
    offsets: Vec<[u16; N_PAIRS]>,
}

/// Number of the pair of two local nodes in the order (0,0), (0,1) .. (0,5), (1,1) .. (5,5).
const PAIR_OF_NODES: [[usize; 6]; 6] = [
    [0, 1, 2, 3, 4, 5],
    [1, 6, 7, 8, 9, 10],
    [2, 7, 11, 12, 13, 14],
    [3, 8, 12, 15, 16, 17],
    [4, 9, 13, 16, 18, 19],
    [5, 10, 14, 17, 19, 20],
];

/// Elements around each node: `(starts, elements)` in compressed rows, elements ascending.
pub(crate) fn elements_of_nodes(mesh: &Mesh) -> (Vec<u32>, Vec<u32>) {
    let mut starts = vec![0u32; mesh.points_m.len() + 1];
    for triangle in &mesh.triangles {
        for &node in triangle {
            starts[node as usize + 1] += 1;
        }
    }
    for i in 1..starts.len() {
        starts[i] += starts[i - 1];
    }
    let mut next = starts.clone();
    let mut elements = vec![0u32; 6 * mesh.triangles.len()];
    for (element, triangle) in mesh.triangles.iter().enumerate() {
        for &node in triangle {
            let place = &mut next[node as usize];
            elements[*place as usize] = element as u32;
            *place += 1;
        }
    }
    (starts, elements)
}

/// Pattern of the stiffness matrix over the free unknowns and the place of every element entry in it.
///
/// Cost: linear in the number of elements; columns are gathered node by node with a marker, so nothing is sorted but the dozen neighbors.
///
/// # Panics
/// When the supports are for another number of nodes, or the matrix has 2³² entries or more.
pub fn pattern(mesh: &Mesh, supports: &Supports) -> Pattern {
    let n_nodes = mesh.points_m.len();
    assert_eq!(
        supports.prescribed_m().len(),
        2 * n_nodes,
        "supports for {} unknowns, mesh has {}",
        supports.prescribed_m().len(),
        2 * n_nodes
    );
    let dofs = supports.dof_map();
    let n_free_at = |node: usize| -> u16 { (0..2).map(|d| u16::from(dofs.free_of_dof[2 * node + d] != PRESCRIBED)).sum() };
    let (starts, around) = elements_of_nodes(mesh);
    let mut offsets = vec![[0u16; N_PAIRS]; mesh.triangles.len()];
    let mut column_starts = Vec::with_capacity(dofs.n_free + 1);
    let mut rows: Vec<u32> = Vec::with_capacity(12 * dofs.n_free);
    let (mut neighbors, mut place_of, mut seen_by) = (Vec::with_capacity(64), vec![0u16; n_nodes], vec![u32::MAX; n_nodes]);
    for a in 0..n_nodes {
        let elements = &around[starts[a] as usize..starts[a + 1] as usize];
        neighbors.clear();
        for &b in elements.iter().flat_map(|&e| &mesh.triangles[e as usize]) {
            if a < b as usize && seen_by[b as usize] != a as u32 {
                seen_by[b as usize] = a as u32;
                neighbors.push(b);
            }
        }
        neighbors.sort_unstable();
        let mut place = n_free_at(a);
        for &b in &neighbors {
            place_of[b as usize] = place;
            place += n_free_at(b as usize);
        }
        push_columns(&dofs, a, &neighbors, (&mut column_starts, &mut rows));
        for &e in elements {
            let triangle = &mesh.triangles[e as usize];
            let i = triangle.iter().position(|&node| node as usize == a).expect("the element is around this node");
            for j in (0..6).filter(|&j| a < triangle[j] as usize) {
                offsets[e as usize][PAIR_OF_NODES[i][j]] = place_of[triangle[j] as usize];
            }
        }
    }
    assert!(u32::try_from(rows.len()).is_ok(), "{} entries do not fit 32-bit places", rows.len());
    column_starts.push(rows.len() as u32);
    let values = vec![0.0; rows.len()];
    let n = dofs.n_free;
    Pattern { dofs, matrix: SymmetricCsc { n, column_starts, rows, values }, offsets }
}

/// Appends the columns of the free unknowns of node `a`: its own rows, then those of its higher neighbors.
fn push_columns(dofs: &DofMap, a: usize, neighbors: &[u32], (column_starts, rows): (&mut Vec<u32>, &mut Vec<u32>)) {
    for first in (2 * a..2 * a + 2).filter(|&dof| dofs.free_of_dof[dof] != PRESCRIBED) {
        column_starts.push(rows.len() as u32);
        rows.extend(dofs.free_of_dof[first..2 * a + 2].iter().filter(|&&row| row != PRESCRIBED));
        for &b in neighbors {
            let b = 2 * b as usize;
            rows.extend(dofs.free_of_dof[b..b + 2].iter().filter(|&&row| row != PRESCRIBED));
        }
    }
}

/// Stiffness matrix `K = Σ ∫ BᵀDB` of the free unknowns, springs included.
///
/// | name | shape | unit | meaning |
/// |---|---|---|---|
/// | `materials` | `[n_regions]` | | by region number |
/// | returned values | `[n_entries]` | N/m² | force per displacement and metre of thickness |
///
/// Serial scatter into precomputed places: on this mesh size memory traffic rules and colouring only adds to it. Source: docs/theory.md eq. (1.9).
///
/// # Panics
/// When a region has no material or the pattern belongs to another mesh.
pub fn stiffness(mesh: &Mesh, materials: &[Elastic], supports: &Supports, pattern: &Pattern) -> SymmetricCsc {
    assert_eq!(
        pattern.offsets.len(),
        mesh.triangles.len(),
        "pattern of {} elements, mesh has {}",
        pattern.offsets.len(),
        mesh.triangles.len()
    );
    let moduli: Vec<_> = materials.iter().map(Elastic::moduli).collect();
    let mut matrix = pattern.matrix.clone();
    let free = &pattern.dofs.free_of_dof;
    for (element, triangle) in mesh.triangles.iter().enumerate() {
        let blocks = stiffness_blocks(&element_points_m(mesh, element), &moduli[mesh.regions[element] as usize]);
        let offsets = &pattern.offsets[element];
        // Step 1: the two columns of each node, `None` where prescribed.
        let columns = triangle.map(|node| {
            let node = 2 * node as usize;
            [free[node], free[node + 1]].map(|f| (f != PRESCRIBED).then(|| matrix.column_starts[f as usize] as usize))
        });
        // Step 2: each block to its place, transposed where the second node is the lower one.
        let mut pair = 0;
        for i in 0..6 {
            scatter_diagonal(&mut matrix.values, columns[i], &blocks[pair]);
            pair += 1;
            for j in i + 1..6 {
                let [xx, xy, yx, yy] = blocks[pair];
                let place = offsets[pair] as usize;
                let (low, high, block) = if triangle[i] < triangle[j] { (i, j, [xx, xy, yx, yy]) } else { (j, i, [xx, yx, xy, yy]) };
                scatter_block(&mut matrix.values, columns[low], columns[high].map(|c| c.is_some()), (place, &block));
                pair += 1;
            }
        }
    }
    add_springs(&mut matrix.values, supports, pattern);
    matrix
}

/// Adds a diagonal block: rows x, y of column x, row y of column y.
fn scatter_diagonal(values: &mut [f64], columns: [Option<usize>; 2], &[xx, xy, _, yy]: &[f64; 4]) {
    if let Some(x) = columns[0] {
        values[x] += xx;
        if columns[1].is_some() {
            values[x + 1] += xy;
        }
    }
    if let Some(y) = columns[1] {
        values[y] += yy;
    }
}

/// Adds a block of two different nodes; `place` counts from the start of the first free column of the lower node.
fn scatter_block(values: &mut [f64], columns: [Option<usize>; 2], high_free: [bool; 2], (place, block): (usize, &[f64; 4])) {
    // The second column lacks the row of the first one.
    let starts = [columns[0].map(|c| c + place), columns[1].map(|c| c + place - usize::from(columns[0].is_some()))];
    for (column, start) in starts.into_iter().enumerate() {
        let Some(start) = start else { continue };
        match high_free {
            [true, true] => {
                values[start] += block[2 * column];
                values[start + 1] += block[2 * column + 1];
            }
            [true, false] => values[start] += block[2 * column],
            [false, true] => values[start] += block[2 * column + 1],
            [false, false] => {}
        }
    }
}

fn add_springs(values: &mut [f64], supports: &Supports, pattern: &Pattern) {
    for spring in supports.springs() {
        let [x, y] = spring.direction;
        let k = spring.stiffness_n_per_m2;
        let columns = [0, 1].map(|d| {
            let free = pattern.dofs.free_of_dof[2 * spring.node as usize + d];
            (free != PRESCRIBED).then(|| pattern.matrix.column_starts[free as usize] as usize)
        });
        scatter_diagonal(values, columns, &[k * x * x, k * x * y, k * x * y, k * y * y]);
    }
}

#[cfg(test)]
mod tests;
