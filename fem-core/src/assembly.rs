//! From mesh, materials and supports to the sparse stiffness matrix of the free unknowns.
//!
//! Unknown (dof) number = 2 · node + direction, direction 0 = x, 1 = y. Prescribed unknowns are left out of the matrix.

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
