//! Sparse Cholesky factorization by the library, with its own ordering.
use crate::assembly::SymmetricCsc;
use faer::dyn_stack::{MemBuffer, MemStack};
use faer::linalg::cholesky::llt::factor::LltRegularization;
use faer::sparse::linalg::cholesky::{CholeskySymbolicParams, LltRef, SymbolicCholesky, SymmetricOrdering, factorize_symbolic_cholesky};
use faer::sparse::{SparseColMatRef, SymbolicSparseColMatRef};
use faer::{Conj, MatMut, Par, Side, Spec};

/// The matrix is not positive definite.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[error("the stiffness matrix could not be factored: {reason}")]
pub struct DirectError {
    /// What the library said.
    pub reason: String,
}

/// A Cholesky factor.
#[derive(Debug)]
pub(crate) struct Factor {
    symbolic: SymbolicCholesky<u32>,
    values: Vec<f64>,
}

impl Factor {
    pub(crate) fn new(matrix: &SymmetricCsc) -> Result<Self, DirectError> {
        let n = matrix.n;
        let pattern = SymbolicSparseColMatRef::<u32>::new_checked(n, n, &matrix.column_starts, None, &matrix.rows);
        let failed = |reason: &dyn std::fmt::Debug| DirectError { reason: format!("{reason:?}") };
        let symbolic = factorize_symbolic_cholesky(pattern, Side::Lower, SymmetricOrdering::Amd, CholeskySymbolicParams::default())
            .map_err(|e| failed(&e))?;
        let mut values = vec![0.0; symbolic.len_val()];
        let mut memory = MemBuffer::new(symbolic.factorize_numeric_llt_scratch::<f64>(Par::Seq, Spec::default()));
        let matrix = SparseColMatRef::new(pattern, &matrix.values[..]);
        symbolic
            .factorize_numeric_llt::<f64>(
                &mut values,
                matrix,
                Side::Lower,
                LltRegularization::default(),
                Par::Seq,
                MemStack::new(&mut memory),
                Spec::default(),
            )
            .map_err(|e| failed(&e))?;
        Ok(Self { symbolic, values })
    }

    /// Replaces right-hand sides, one after the other, by their solutions.
    pub(crate) fn solve_in_place(&self, right: &mut [f64]) {
        let n = self.symbolic.nrows();
        let k = right.len() / n;
        let mut memory = MemBuffer::new(self.symbolic.solve_in_place_scratch::<f64>(k, Par::Seq));
        let right = MatMut::from_column_major_slice_mut(right, n, k);
        LltRef::<u32, f64>::new(&self.symbolic, &self.values).solve_in_place_with_conj(
            Conj::No,
            right,
            Par::Seq,
            MemStack::new(&mut memory),
        );
    }
}
