//! From a factor and right-hand sides to solutions that have been checked against the matrix.
use super::numeric::Factorization;
use super::{SolveError, SolveInfo};
use faer::dyn_stack::{MemBuffer, MemStack};
use faer::sparse::linalg::cholesky::LltRef;
use faer::{Conj, MatMut, Par};

/// Right-hand sides that go through the factor together: enough to reuse each entry of it, few enough for the cache.
const N_TOGETHER: usize = 8;

/// Worst figures over the right-hand sides.
#[derive(Debug, Clone, Copy, Default)]
struct Accuracy {
    relative_residual: f64,
    backward_error: f64,
    n_refined: usize,
}

impl Factorization {
    /// Solves `A x = b` in place for `n_rhs` right-hand sides, one after the other in `rhs`, shape `[n_rhs][n]`.
    ///
    /// The residual of every solution is computed; with a backward error above [`super::SolveParams::refine_above`] one step of iterative refinement follows.
    ///
    /// # Errors
    /// [`SolveError::LoadNotFinite`], [`SolveError::Inaccurate`], [`SolveError::TooLarge`] when the memory cannot be had; `rhs` is then
    /// of no use.
    ///
    /// # Panics
    /// When the length of `rhs` is not `n * n_rhs`.
    pub fn solve(&self, rhs: &mut [f64], n_rhs: usize) -> Result<SolveInfo, SolveError> {
        let n = self.matrix.n;
        assert_eq!(rhs.len(), n * n_rhs, "{} values for {n_rhs} right-hand sides of {n} unknowns", rhs.len());
        let mut worst = Accuracy::default();
        if n > 0 {
            let mut scratch = self.scratch(N_TOGETHER.min(n_rhs))?;
            for (i, block) in rhs.chunks_mut(n * N_TOGETHER).enumerate() {
                self.solve_block(block, i * N_TOGETHER, &mut scratch, &mut worst)?;
            }
        }
        Ok(SolveInfo {
            n_unknowns: n,
            n_factor_entries: self.symbolic.n_factor_entries(),
            flops: self.symbolic.flops(),
            pivot_ratio: self.pivot_ratio,
            relative_residual: worst.relative_residual,
            backward_error: worst.backward_error,
            n_refined: worst.n_refined,
        })
    }

    /// Solves up to [`N_TOGETHER`] right-hand sides, the first of which has the number `first`.
    fn solve_block(&self, block: &mut [f64], first: usize, scratch: &mut MemBuffer, worst: &mut Accuracy) -> Result<(), SolveError> {
        let n = self.matrix.n;
        let loads = block.to_vec();
        if let Some(i) = loads.iter().position(|value| !value.is_finite()) {
            return Err(SolveError::LoadNotFinite { rhs: first + i / n, unknown: i % n });
        }
        self.apply_inverse(block, scratch);
        for (i, (x, b)) in block.chunks_mut(n).zip(loads.chunks(n)).enumerate() {
            let mut residual = self.residual(x, b);
            let mut backward_error = self.backward_error(&residual, x, b);
            if !is_at_most(backward_error, self.params.refine_above) {
                self.apply_inverse(&mut residual, scratch);
                for (x, correction) in x.iter_mut().zip(&residual) {
                    *x += correction;
                }
                residual = self.residual(x, b);
                backward_error = self.backward_error(&residual, x, b);
                worst.n_refined += 1;
            }
            if !is_at_most(backward_error, self.params.refuse_above) {
                return Err(SolveError::Inaccurate { rhs: first + i, backward_error });
            }
            worst.relative_residual = worst.relative_residual.max(ratio(norm(&residual), norm(b)));
            worst.backward_error = worst.backward_error.max(backward_error);
        }
        Ok(())
    }

    fn scratch(&self, n_columns: usize) -> Result<MemBuffer, SolveError> {
        let need = self.symbolic.cholesky.as_ref().map(|c| c.solve_in_place_scratch::<f64>(n_columns, Par::Seq)).unwrap_or_default();
        MemBuffer::try_new(need).map_err(|_| SolveError::TooLarge { n_unknowns: self.matrix.n })
    }

    /// `x = P⁻¹ L⁻ᵀ L⁻¹ P x` for the columns of `block`.
    fn apply_inverse(&self, block: &mut [f64], scratch: &mut MemBuffer) {
        let n = self.matrix.n;
        if let Some(cholesky) = &self.symbolic.cholesky {
            let n_columns = block.len() / n;
            let columns = MatMut::from_column_major_slice_mut(block, n, n_columns);
            let factor = LltRef::<u32, f64>::new(cholesky, &self.buffers.factor);
            factor.solve_in_place_with_conj(Conj::No, columns, Par::Seq, MemStack::new(scratch));
        }
    }

    /// `‖r‖∞ / (‖A‖∞ ‖x‖∞ + ‖b‖∞)`; not a number when a value of `x` is not.
    fn backward_error(&self, residual: &[f64], x: &[f64], b: &[f64]) -> f64 {
        ratio(largest(residual), self.matrix_norm * largest(x) + largest(b))
    }

    fn residual(&self, x: &[f64], b: &[f64]) -> Vec<f64> {
        let mut residual = self.matrix.multiply(x);
        for (r, b) in residual.iter_mut().zip(b) {
            *r = b - *r;
        }
        residual
    }
}

/// Zero for a right-hand side of zeros, whose solution is exact.
fn ratio(numerator: f64, denominator: f64) -> f64 {
    if denominator > 0.0 { numerator / denominator } else { numerator }
}

fn norm(v: &[f64]) -> f64 {
    v.iter().map(|x| x * x).sum::<f64>().sqrt()
}

/// False for a value that is not a number, which must be refined and refused.
fn is_at_most(value: f64, limit: f64) -> bool {
    value <= limit
}

/// Largest magnitude; not a number when a value is not, unlike `f64::max`.
fn largest(v: &[f64]) -> f64 {
    v.iter().fold(0.0, |m: f64, x| if m < x.abs() || x.is_nan() { x.abs() } else { m })
}
