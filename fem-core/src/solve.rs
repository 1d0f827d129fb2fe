//! From the stiffness matrix and an elimination order to displacements: sparse Cholesky factorization `P A Pᵀ = L Lᵀ` and its solves.
//!
//! ```text
//! SymmetricCsc + order -> Symbolic (structure of L) -> Factorization (values of L) -> solutions in place, SolveInfo
//! ```
//! The numeric work is faer's supernodal factorization on one thread: at these sizes a second thread inside one factorization costs more
//! than it gives, and the depths of a series fill the cores better.
use crate::assembly::SymmetricCsc;

mod numeric;
mod solution;
mod symbolic;

pub use numeric::{Buffers, Factorization};
pub use symbolic::Symbolic;

/// What a factorization and its solves must hold.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SolveParams {
    /// A pivot below this share of its diagonal entry means a body that can move freely, within rounding.
    pub smallest_pivot_share: f64,
    /// Backward error above which one step of iterative refinement is made.
    pub refine_above: f64,
    /// Backward error above which, after refinement, the solution is refused.
    pub refuse_above: f64,
}

impl Default for SolveParams {
    /// The pivot of an unknown is the stiffness against a force there while all unknowns eliminated later are held or, for the last ones,
    /// the body's own; in a supported plane body it is a share of the diagonal entry that falls only with the logarithm of the mesh size, or
    /// with the third power of an overhang's slenderness. Rounding leaves shares near 1e-15 where the true pivot is zero.
    ///
    /// The backward error of a sound solve is a few rounding units whatever the condition of the matrix; the relative residual is not, so
    /// it is told but not judged.
    fn default() -> Self {
        Self { smallest_pivot_share: 1e-13, refine_above: 1e-14, refuse_above: 1e-10 }
    }
}

/// What a factorization and a solve tell about themselves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SolveInfo {
    /// Number of unknowns.
    pub n_unknowns: usize,
    /// Entries of `L`, diagonal included; with the zeros that merged blocks of columns hold.
    pub n_factor_entries: usize,
    /// Multiplications and additions of the factorization, `Σ c²` over the entries `c` of each column of `L`.
    pub flops: f64,
    /// Smallest over largest squared diagonal entry of `L`.
    pub pivot_ratio: f64,
    /// Largest `‖b − A x‖₂ / ‖b‖₂` over the right-hand sides, after refinement.
    pub relative_residual: f64,
    /// Largest `‖b − A x‖∞ / (‖A‖∞ ‖x‖∞ + ‖b‖∞)`: relative change of the data that explains the residual.
    pub backward_error: f64,
    /// Right-hand sides that took a step of refinement.
    pub n_refined: usize,
}

/// Why there is no solution. Unknowns are numbered as in the matrix.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum SolveError {
    /// The matrix has no Cholesky factor: a negative or vanishing pivot.
    #[error(
        "the stiffness matrix is not positive definite at free unknown {unknown}: a part of the body is not held, or an element is turned over"
    )]
    NotPositiveDefinite {
        /// Free unknown whose pivot is not positive.
        unknown: usize,
    },
    /// The pivot is positive by rounding only.
    #[error("free unknown {unknown} keeps {pivot_share:e} of its stiffness in the factorization: a part of the body is not held")]
    NotHeld {
        /// Free unknown with the smallest share.
        unknown: usize,
        /// Pivot over diagonal entry.
        pivot_share: f64,
    },
    /// An entry of the matrix is infinite or not a number.
    #[error("the stiffness matrix has a value that is not finite in the column of free unknown {unknown}")]
    MatrixNotFinite {
        /// Column.
        unknown: usize,
    },
    /// An entry of a right-hand side is infinite or not a number.
    #[error("right-hand side {rhs} has a value that is not finite at free unknown {unknown}")]
    LoadNotFinite {
        /// Number of the right-hand side.
        rhs: usize,
        /// Row.
        unknown: usize,
    },
    /// The solution does not satisfy the equations.
    #[error("right-hand side {rhs} is solved with a backward error of {backward_error:e} only, after refinement")]
    Inaccurate {
        /// Number of the right-hand side.
        rhs: usize,
        /// `‖b − A x‖∞ / (‖A‖∞ ‖x‖∞ + ‖b‖∞)`.
        backward_error: f64,
    },
    /// The factor does not fit 32-bit places or the memory.
    #[error("the factor of {n_unknowns} unknowns is too large for the solver")]
    TooLarge {
        /// Number of unknowns.
        n_unknowns: usize,
    },
}

impl SolveError {
    /// The free unknown that the error is about, if it is about one.
    pub fn unknown(&self) -> Option<usize> {
        match *self {
            Self::NotPositiveDefinite { unknown }
            | Self::NotHeld { unknown, .. }
            | Self::MatrixNotFinite { unknown }
            | Self::LoadNotFinite { unknown, .. } => Some(unknown),
            Self::Inaccurate { .. } | Self::TooLarge { .. } => None,
        }
    }
}

/// Structure and values of the factor in one go; see [`Symbolic::new`] and [`Factorization::new`] for reuse.
///
/// | name | shape | meaning |
/// |---|---|---|
/// | `matrix` | | lower triangle, positive definite |
/// | `order` | `[n]` | unknown eliminated as the `k`-th, a permutation, e.g. from [`crate::ordering::elimination_order`] |
///
/// # Errors
/// [`SolveError::NotPositiveDefinite`], [`SolveError::NotHeld`], [`SolveError::MatrixNotFinite`], [`SolveError::TooLarge`].
///
/// # Panics
/// When `order` is not a permutation of `0 .. n` or the matrix breaks the guarantees of its type.
pub fn factor(matrix: SymmetricCsc, order: &[u32], params: &SolveParams) -> Result<Factorization, SolveError> {
    let symbolic = Symbolic::new(&matrix, order)?;
    Factorization::new(matrix, symbolic.into(), params, Buffers::default())
}

#[cfg(test)]
mod tests;
