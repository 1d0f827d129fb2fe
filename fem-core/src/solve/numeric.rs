//! From the structure of the factor and the values of a matrix to the values of the factor.
use super::symbolic::{Symbolic, pattern_of};
use super::{SolveError, SolveParams};
use crate::assembly::SymmetricCsc;
use faer::dyn_stack::{MemBuffer, MemStack};
use faer::linalg::cholesky::llt::factor::{LltError, LltRegularization};
use faer::sparse::SparseColMatRef;
use faer::{Par, Side};
use std::sync::Arc;

/// Memory of an earlier factorization, handed on so that a series pays for its pages once.
#[derive(Default)]
pub struct Buffers {
    pub(super) factor: Vec<f64>,
    pub(super) scratch: Option<MemBuffer>,
}

impl std::fmt::Debug for Buffers {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.debug_struct("Buffers").field("n_factor_values", &self.factor.len()).finish_non_exhaustive()
    }
}

/// A matrix and its factor, ready to solve. It keeps the matrix to check every solution against it.
#[derive(Debug)]
pub struct Factorization {
    pub(super) matrix: SymmetricCsc,
    pub(super) symbolic: Arc<Symbolic>,
    pub(super) params: SolveParams,
    pub(super) buffers: Buffers,
    pub(super) pivot_ratio: f64,
    /// `‖A‖∞`, largest sum of magnitudes in a row.
    pub(super) matrix_norm: f64,
}

impl Factorization {
    /// Values of the factor, in memory taken from `buffers`.
    ///
    /// # Errors
    /// [`SolveError::NotPositiveDefinite`], [`SolveError::NotHeld`], [`SolveError::MatrixNotFinite`]; [`SolveError::TooLarge`] when the
    /// memory cannot be had.
    ///
    /// # Panics
    /// When `symbolic` belongs to a matrix of another size.
    pub fn new(matrix: SymmetricCsc, symbolic: Arc<Symbolic>, params: &SolveParams, mut buffers: Buffers) -> Result<Self, SolveError> {
        assert_eq!(symbolic.n, matrix.n, "structure of {} unknowns, matrix of {}", symbolic.n, matrix.n);
        let (n_expected, n_entries) = (symbolic.n_matrix_entries, matrix.values.len());
        assert_eq!(n_expected, n_entries, "structure of {n_expected} matrix entries, matrix of {n_entries}");
        let matrix_norm = finite_norm(&matrix)?;
        compute(&matrix, &symbolic, &mut buffers)?;
        let pivot_ratio = check_pivots(&matrix, &symbolic, &buffers.factor, params.smallest_pivot_share)?;
        Ok(Self { matrix, symbolic, params: *params, buffers, pivot_ratio, matrix_norm })
    }

    /// Gives the memory back for the next factorization.
    pub fn into_buffers(self) -> Buffers {
        self.buffers
    }

    /// The matrix that was factored.
    pub fn matrix(&self) -> &SymmetricCsc {
        &self.matrix
    }

    /// Smallest over largest squared diagonal entry of `L`.
    pub fn pivot_ratio(&self) -> f64 {
        self.pivot_ratio
    }

    /// Structure of the factor.
    pub fn symbolic(&self) -> &Arc<Symbolic> {
        &self.symbolic
    }
}

/// Largest sum of magnitudes in a row; an error when an entry is not finite.
fn finite_norm(matrix: &SymmetricCsc) -> Result<f64, SolveError> {
    let mut row_sums = vec![0.0; matrix.n];
    for column in 0..matrix.n {
        let range = matrix.column_starts[column] as usize..matrix.column_starts[column + 1] as usize;
        let mut sum = 0.0;
        for (&row, value) in matrix.rows[range.clone()].iter().zip(&matrix.values[range]) {
            sum += value.abs();
            if row as usize != column {
                row_sums[row as usize] += value.abs();
            }
        }
        if !sum.is_finite() {
            return Err(SolveError::MatrixNotFinite { unknown: column });
        }
        row_sums[column] += sum;
    }
    Ok(row_sums.into_iter().fold(0.0, f64::max))
}

fn compute(matrix: &SymmetricCsc, symbolic: &Symbolic, buffers: &mut Buffers) -> Result<(), SolveError> {
    let Some(cholesky) = &symbolic.cholesky else { return Ok(()) };
    let too_large = SolveError::TooLarge { n_unknowns: matrix.n };
    let n_values = cholesky.len_val();
    let missing = n_values.saturating_sub(buffers.factor.len());
    buffers.factor.try_reserve_exact(missing).map_err(|_| too_large)?;
    buffers.factor.resize(n_values, 0.0);
    let need = cholesky.factorize_numeric_llt_scratch::<f64>(Par::Seq, faer::Spec::default());
    if buffers.scratch.as_ref().is_none_or(|scratch| scratch.len() < need.unaligned_bytes_required()) {
        buffers.scratch = Some(MemBuffer::try_new(need).map_err(|_| too_large)?);
    }
    let Some(scratch) = &mut buffers.scratch else { return Err(too_large) };
    let values = SparseColMatRef::new(pattern_of(matrix), &matrix.values);
    cholesky
        .factorize_numeric_llt::<f64>(
            &mut buffers.factor,
            values,
            Side::Lower,
            LltRegularization::default(),
            Par::Seq,
            MemStack::new(scratch),
            faer::Spec::default(),
        )
        .map(|_| ())
        .map_err(|LltError::NonPositivePivot { index }| SolveError::NotPositiveDefinite { unknown: symbolic.order[index] as usize })
}

/// Smallest over largest pivot `L_kk²`; an error when one has lost all but rounding of its diagonal entry.
fn check_pivots(matrix: &SymmetricCsc, symbolic: &Symbolic, factor: &[f64], smallest_share: f64) -> Result<f64, SolveError> {
    let Some(supernodes) = symbolic.supernodes() else { return Ok(1.0) };
    let (mut smallest, mut largest, mut weakest) = (f64::INFINITY, 0.0f64, (f64::INFINITY, 0));
    for s in 0..supernodes.n_supernodes() {
        let columns = supernodes.supernode_begin()[s] as usize..supernodes.supernode_end()[s] as usize;
        let n_rows = columns.len() + supernodes.supernode(s).pattern().len();
        let values = &factor[supernodes.col_ptr_for_val()[s] as usize..];
        for (j, k) in columns.enumerate() {
            let unknown = symbolic.order[k] as usize;
            let pivot = values[j * n_rows + j].powi(2);
            let diagonal = matrix.values[matrix.column_starts[unknown] as usize];
            if !(0.0 < pivot && pivot < f64::INFINITY) {
                return Err(SolveError::NotPositiveDefinite { unknown });
            }
            (smallest, largest) = (smallest.min(pivot), largest.max(pivot));
            if pivot / diagonal < weakest.0 {
                weakest = (pivot / diagonal, unknown);
            }
        }
    }
    let (pivot_share, unknown) = weakest;
    if pivot_share < smallest_share {
        return Err(SolveError::NotHeld { unknown, pivot_share });
    }
    Ok(smallest / largest)
}
