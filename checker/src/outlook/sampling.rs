//! Probabilities from samples, with their sampling error.
//!
//! Plain sampling draws the inputs as they are; importance sampling draws around the design points of every limit and weighs each
//! sample by how likely it was. Both must agree. Theory: eq. (7.9) to (7.12).
mod estimate;
mod mixture;

pub use estimate::{Estimate, Tally, agreement, effective_sample_size, weighted_estimate, wilson_interval};
pub use mixture::{LimitFunction, Mixture, modes_of};

use super::random::Streams;

/// How samples are drawn.
#[derive(Debug, Clone)]
pub enum Draws {
    /// As the inputs are distributed.
    Plain(Streams),
    /// Around design points, with weights.
    Mixture(Streams, Mixture),
}

impl Draws {
    /// Plain sampling of a seed.
    pub fn plain(seed: u64) -> Self {
        Self::Plain(Streams::new(seed))
    }

    /// Importance sampling of a seed.
    pub fn mixture(seed: u64, mixture: Mixture) -> Self {
        Self::Mixture(Streams::new(seed), mixture)
    }

    /// Fills `u` with the independent standard normals of one sample and returns its weight.
    pub fn draw(&self, i_sample: u64, u: &mut [f64]) -> f64 {
        match self {
            Self::Plain(streams) => {
                let mut stream = streams.stream(i_sample);
                for value in u {
                    *value = stream.normal();
                }
                1.0
            }
            Self::Mixture(streams, mixture) => {
                let mut stream = streams.stream(i_sample);
                mixture.draw(&mut stream, u)
            }
        }
    }
}

#[cfg(test)]
mod tests;
