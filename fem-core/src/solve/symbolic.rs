//! From the structure of a matrix and an elimination order to the structure of its factor.
use super::SolveError;
use crate::assembly::SymmetricCsc;
use faer::Side;
use faer::perm::PermRef;
use faer::sparse::SymbolicSparseColMatRef;
use faer::sparse::linalg::SupernodalThreshold;
use faer::sparse::linalg::cholesky::{
    CholeskySymbolicParams, SymbolicCholesky, SymbolicCholeskyRaw, SymmetricOrdering, factorize_symbolic_cholesky,
    supernodal::SymbolicSupernodalCholesky,
};

/// Structure of the factor `L`; serves every matrix with the same column starts and rows.
#[derive(Debug)]
pub struct Symbolic {
    pub(super) n: usize,
    pub(super) n_matrix_entries: usize,
    /// Unknown eliminated as the `k`-th.
    pub(super) order: Vec<u32>,
    /// `None` for a matrix without unknowns.
    pub(super) cholesky: Option<SymbolicCholesky<u32>>,
    n_factor_entries: usize,
    flops: f64,
}

impl Symbolic {
    /// Structure of the factor of `matrix` when `order[k]` is eliminated as the `k`-th; values are not looked at.
    ///
    /// # Errors
    /// [`SolveError::TooLarge`] when the factor has 2³¹ entries or more.
    ///
    /// # Panics
    /// When `order` is not a permutation of `0 .. n` or the matrix breaks the guarantees of its type.
    pub fn new(matrix: &SymmetricCsc, order: &[u32]) -> Result<Self, SolveError> {
        let position = inverse(order, matrix.n);
        let mut symbolic = Self {
            n: matrix.n,
            n_matrix_entries: matrix.rows.len(),
            order: order.to_vec(),
            cholesky: None,
            n_factor_entries: 0,
            flops: 0.0,
        };
        if matrix.n == 0 {
            return Ok(symbolic);
        }
        let ordering = SymmetricOrdering::Custom(PermRef::new_checked(order, &position, matrix.n));
        let params =
            CholeskySymbolicParams { supernodal_flop_ratio_threshold: SupernodalThreshold::FORCE_SUPERNODAL, ..Default::default() };
        let cholesky = factorize_symbolic_cholesky(pattern_of(matrix), Side::Lower, ordering, params)
            .map_err(|_| SolveError::TooLarge { n_unknowns: matrix.n })?;
        symbolic.cholesky = Some(cholesky);
        (symbolic.n_factor_entries, symbolic.flops) = symbolic.cost();
        Ok(symbolic)
    }

    /// Number of unknowns.
    pub fn n(&self) -> usize {
        self.n
    }

    /// Entries of `L`, diagonal included; with the zeros that merged blocks of columns hold.
    pub fn n_factor_entries(&self) -> usize {
        self.n_factor_entries
    }

    /// Multiplications and additions of the factorization, `Σ c²` over the entries `c` of each column of `L`.
    pub fn flops(&self) -> f64 {
        self.flops
    }

    /// Blocks of columns with a common structure.
    pub(super) fn supernodes(&self) -> Option<&SymbolicSupernodalCholesky<u32>> {
        match self.cholesky.as_ref()?.raw() {
            SymbolicCholeskyRaw::Supernodal(supernodes) => Some(supernodes),
            SymbolicCholeskyRaw::Simplicial(_) => None,
        }
    }

    fn cost(&self) -> (usize, f64) {
        let (mut n_entries, mut flops) = (0, 0.0);
        if let Some(supernodes) = self.supernodes() {
            for s in 0..supernodes.n_supernodes() {
                let n_columns = (supernodes.supernode_end()[s] - supernodes.supernode_begin()[s]) as usize;
                let n_below = supernodes.supernode(s).pattern().len();
                for n_column in (1..=n_columns).map(|left| left + n_below) {
                    n_entries += n_column;
                    flops += (n_column as f64).powi(2);
                }
            }
        }
        (n_entries, flops)
    }
}

/// The matrix's structure as faer takes it.
pub(super) fn pattern_of(matrix: &SymmetricCsc) -> SymbolicSparseColMatRef<'_, u32> {
    SymbolicSparseColMatRef::new_checked(matrix.n, matrix.n, &matrix.column_starts, None, &matrix.rows)
}

/// Position of each unknown in the order.
fn inverse(order: &[u32], n: usize) -> Vec<u32> {
    assert_eq!(order.len(), n, "order of {} unknowns for a matrix of size {n}", order.len());
    let mut position = vec![u32::MAX; n];
    for (k, &unknown) in order.iter().enumerate() {
        assert!((unknown as usize) < n, "the order names unknown {unknown} of {n}");
        let previous = std::mem::replace(&mut position[unknown as usize], k as u32);
        assert_eq!(previous, u32::MAX, "the order names unknown {unknown} twice");
    }
    position
}
