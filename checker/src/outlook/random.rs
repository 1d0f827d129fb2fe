//! Random numbers: one stream a sample, so that neither threads nor the number of samples change a sample.
use rand::{Rng, SeedableRng};
use rand_chacha::ChaCha8Rng;

use super::normal;

/// Source of the streams of one run.
#[derive(Debug, Clone)]
pub struct Streams {
    base: ChaCha8Rng,
}

impl Streams {
    /// Streams of a seed.
    pub fn new(seed: u64) -> Self {
        Self { base: ChaCha8Rng::seed_from_u64(seed) }
    }

    /// The stream of one sample.
    pub fn stream(&self, i_sample: u64) -> Stream {
        let mut rng = self.base.clone();
        rng.set_stream(i_sample);
        Stream { rng }
    }
}

/// The random numbers of one sample.
#[derive(Debug, Clone)]
pub struct Stream {
    rng: ChaCha8Rng,
}

impl Stream {
    /// Uniform in the open interval (0, 1): the middle of one of 2^53 equal steps, so that no quantile is infinite.
    pub fn uniform(&mut self) -> f64 {
        const STEP: f64 = 1.0 / (1_u64 << 53) as f64;
        ((self.rng.next_u64() >> 11) as f64 + 0.5) * STEP
    }

    /// Standard normal by the quantile of a uniform number.
    pub fn normal(&mut self) -> f64 {
        normal::quantile(self.uniform())
    }
}
