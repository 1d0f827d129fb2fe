//! Random inputs: their distributions, the correlations between them, and the way to and from independent standard normals.
//!
//! Correlated inputs are joined by a Gaussian copula (Nataf 1962; Der Kiureghian & Liu 1986): each input `x_i` is tied to a
//! standard normal `z_i = Phi^-1(F_i(x_i))`, the `z` have the correlation that gives the `x` theirs, and `z = L u` with the
//! Cholesky factor `L` and independent `u`. Theory: eq. (7.1).
mod correlation;
mod marginal;

pub use marginal::{LARGEST_COV, Marginal};

use crate::model::Uncertain;
use correlation::{cholesky, normal_correlation};

/// Why a set of random inputs is refused.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum VariableError {
    /// A number that is not finite.
    #[error("`{name}`: {what} must be a finite number, got {value}")]
    NotFinite {
        /// Input.
        name: String,
        /// Parameter.
        what: &'static str,
        /// Value.
        value: f64,
    },
    /// A lognormal quantity cannot be zero or negative.
    #[error("`{name}`: a lognormal needs a positive mean, got {mean}")]
    LognormalMean {
        /// Input.
        name: String,
        /// Value.
        mean: f64,
    },
    /// A scatter that no measured quantity of this kind has.
    #[error("`{name}`: coefficient of variation {cov} is outside 0 to {LARGEST_COV} (0 excluded)")]
    Cov {
        /// Input.
        name: String,
        /// Value.
        cov: f64,
    },
    /// A standard deviation of zero or less.
    #[error("`{name}`: standard deviation must be positive, got {value}")]
    StandardDeviation {
        /// Input.
        name: String,
        /// Value.
        value: f64,
    },
    /// Ends in the wrong order, or a cut that leaves nothing.
    #[error("`{name}`: the range {min} to {max} is empty or holds no probability")]
    Range {
        /// Input.
        name: String,
        /// Lower end.
        min: f64,
        /// Upper end.
        max: f64,
    },
    /// A correlation outside (-1, 1) or out of reach of the two distributions.
    #[error(
        "correlation {value} between `{a}` and `{b}` must be inside (-1, 1) and within reach of their distributions ({lowest:.3} to {highest:.3})"
    )]
    Correlation {
        /// First input.
        a: String,
        /// Second input.
        b: String,
        /// Value.
        value: f64,
        /// Lowest correlation these two distributions can have.
        lowest: f64,
        /// Highest.
        highest: f64,
    },
    /// Correlations that contradict each other.
    #[error("the correlation matrix is not positive definite (it fails at `{name}`)")]
    NotPositiveDefinite {
        /// Input at which the factorization stops.
        name: String,
    },
}

/// A correlation between two inputs, as measured on the quantities themselves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Correlation {
    /// Index of the first input.
    pub a: usize,
    /// Index of the second input.
    pub b: usize,
    /// Pearson's coefficient, inside (-1, 1).
    pub coefficient: f64,
}

/// Random and known inputs with names; what exists is valid.
#[derive(Debug, Clone, PartialEq)]
pub struct Variables {
    names: Vec<String>,
    marginals: Vec<Marginal>,
    /// Indices of the inputs that are random, one for each standard normal.
    random: Vec<usize>,
    /// Rows of the Cholesky factor, without the zeros left of the first entry: `(first column, entries)`.
    factor: Vec<(usize, Vec<f64>)>,
}

impl Variables {
    /// Checks all inputs and their correlations.
    ///
    /// # Errors
    /// Every fault found: parameters out of range, correlations out of reach, or a matrix that is not positive definite.
    pub fn new(inputs: &[(String, Uncertain)], correlations: &[Correlation]) -> Result<Self, Vec<VariableError>> {
        let mut errors = Vec::new();
        let mut marginals = Vec::with_capacity(inputs.len());
        for (name, uncertain) in inputs {
            match Marginal::new(name, uncertain) {
                Ok(marginal) => marginals.push(marginal),
                Err(error) => {
                    errors.push(error);
                    marginals.push(Marginal::Exact(f64::NAN));
                }
            }
        }
        if !errors.is_empty() {
            return Err(errors);
        }
        let names: Vec<String> = inputs.iter().map(|(name, _)| name.clone()).collect();
        let random: Vec<usize> = (0..marginals.len()).filter(|&i| marginals[i].is_random()).collect();
        let factor = factor_of(&names, &marginals, &random, correlations)?;
        Ok(Self { names, marginals, random, factor })
    }

    /// Number of inputs, known ones included.
    pub fn n_inputs(&self) -> usize {
        self.marginals.len()
    }

    /// Number of random inputs, that is of standard normals.
    pub fn n_random(&self) -> usize {
        self.random.len()
    }

    /// Name of an input.
    pub fn name(&self, i_input: usize) -> &str {
        &self.names[i_input]
    }

    /// Input behind each standard normal.
    pub fn random(&self) -> &[usize] {
        &self.random
    }

    /// Distribution of an input.
    pub fn marginal(&self, i_input: usize) -> &Marginal {
        &self.marginals[i_input]
    }

    /// Inputs `x` of independent standard normals `u`: `z = L u`, `x_i = F_i^-1(Phi(z_i))`.
    ///
    /// | name | shape        | unit | meaning                           |
    /// |------|--------------|------|-----------------------------------|
    /// | u    | `[n_random]` | -    | independent standard normals      |
    /// | x    | `[n_inputs]` | SI   | filled with the inputs            |
    ///
    /// # Panics
    /// If a slice has the wrong length.
    pub fn from_standard(&self, u: &[f64], x: &mut [f64]) {
        assert_eq!(u.len(), self.random.len(), "standard normals");
        assert_eq!(x.len(), self.marginals.len(), "inputs");
        for (value, marginal) in x.iter_mut().zip(&self.marginals) {
            if let Marginal::Exact(known) = marginal {
                *value = *known;
            }
        }
        for ((first, row), &i_input) in self.factor.iter().zip(&self.random) {
            let z: f64 = row.iter().zip(&u[*first..]).map(|(l, u)| l * u).sum();
            x[i_input] = self.marginals[i_input].from_standard(z);
        }
    }

    /// Independent standard normals of inputs: the inverse of [`Self::from_standard`].
    ///
    /// # Panics
    /// If `x` has the wrong length.
    pub fn to_standard(&self, x: &[f64]) -> Vec<f64> {
        assert_eq!(x.len(), self.marginals.len(), "inputs");
        let mut u: Vec<f64> = Vec::with_capacity(self.random.len());
        for (i, (first, row)) in self.factor.iter().enumerate() {
            let i_input = self.random[i];
            let z = self.marginals[i_input].to_standard(x[i_input]);
            let known: f64 = row[..row.len() - 1].iter().zip(&u[*first..]).map(|(l, u)| l * u).sum();
            u.push((z - known) / row[row.len() - 1]);
        }
        u
    }

    /// Names of the random inputs with `alpha L^-1`: a direction of the independent normals turned into one of the inputs' own.
    ///
    /// # Panics
    /// If `alpha` has the wrong length.
    pub fn undo_correlation(&self, alpha: &[f64]) -> Vec<(String, f64)> {
        assert_eq!(alpha.len(), self.random.len(), "direction");
        let mut rest = alpha.to_vec();
        // Back substitution from the last row: gamma L = alpha.
        for (i, (first, row)) in self.factor.iter().enumerate().rev() {
            let own = rest[i] / row[row.len() - 1];
            rest[i] = own;
            for (entry, below) in row[..row.len() - 1].iter().zip(&mut rest[*first..i]) {
                *below -= entry * own;
            }
        }
        self.random.iter().zip(rest).map(|(&i, share)| (self.names[i].clone(), share)).collect()
    }

    /// The inputs at their medians.
    pub fn medians(&self) -> Vec<f64> {
        let mut x = vec![0.0; self.n_inputs()];
        self.from_standard(&vec![0.0; self.n_random()], &mut x);
        x
    }
}

/// Cholesky rows of the correlation of the standard normals.
fn factor_of(
    names: &[String],
    marginals: &[Marginal],
    random: &[usize],
    correlations: &[Correlation],
) -> Result<Vec<(usize, Vec<f64>)>, Vec<VariableError>> {
    let n = random.len();
    let mut matrix = vec![vec![0.0; n]; n];
    for (i, row) in matrix.iter_mut().enumerate() {
        row[i] = 1.0;
    }
    let mut errors = Vec::new();
    let place = |i_input: usize| random.iter().position(|&r| r == i_input);
    for pair in correlations {
        // A known input has no scatter to correlate.
        let (Some(a), Some(b)) = (place(pair.a), place(pair.b)) else { continue };
        match normal_correlation(&marginals[pair.a], &marginals[pair.b], pair.coefficient) {
            Ok(rho) => {
                matrix[a][b] = rho;
                matrix[b][a] = rho;
            }
            Err([lowest, highest]) => errors.push(VariableError::Correlation {
                a: names[pair.a].clone(),
                b: names[pair.b].clone(),
                value: pair.coefficient,
                lowest,
                highest,
            }),
        }
    }
    if !errors.is_empty() {
        return Err(errors);
    }
    let lower = cholesky(&matrix).map_err(|row| vec![VariableError::NotPositiveDefinite { name: names[random[row]].clone() }])?;
    let first_entry = |row: &[f64]| row.iter().position(|&l| l.abs() > 0.0).unwrap_or(0);
    Ok(lower.iter().enumerate().map(|(i, row)| (first_entry(&row[..=i]), row[first_entry(&row[..=i])..=i].to_vec())).collect())
}

#[cfg(test)]
mod tests;
