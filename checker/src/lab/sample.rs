//! Mean, scatter and fractile of results of one kind.
use super::grubbs;
use crate::model::Uncertain;
use crate::strength::{End, characteristic};

/// Statistics of one kind of result.
#[derive(Debug, Clone, PartialEq)]
pub struct Sample {
    /// Results in the order of the file, SI.
    pub values: Vec<f64>,
    /// Mean.
    pub mean: f64,
    /// Standard deviation with `n - 1`; `None` of a single result.
    pub standard_deviation: Option<f64>,
    /// 5 % fractile of a lognormal number by number of tests; `None` under three tests.
    pub characteristic: Option<f64>,
    /// Index of the result that Grubbs' test names.
    pub outlier: Option<usize>,
}

impl Sample {
    /// Statistics of finite results above 0; `None` where there is none or one of them is not.
    pub fn new(values: Vec<f64>) -> Option<Self> {
        if values.is_empty() || !values.iter().all(|x| 0.0 < *x && x.is_finite()) {
            return None;
        }
        let n = values.len() as f64;
        let mean = values.iter().sum::<f64>() / n;
        let squares = values.iter().map(|x| (x - mean).powi(2)).sum::<f64>();
        let standard_deviation = (1 < values.len()).then(|| (squares / (n - 1.0)).sqrt());
        let outlier = grubbs::outlier(&values);
        let mut sample = Self { values, mean, standard_deviation, characteristic: None, outlier };
        sample.characteristic = characteristic(sample.uncertain(), Some(sample.tests()), End::Low).ok();
        Some(sample)
    }

    /// Number of tests.
    pub fn tests(&self) -> u32 {
        u32::try_from(self.values.len()).unwrap_or(u32::MAX)
    }

    /// Coefficient of variation; `None` of a single result.
    pub fn cov(&self) -> Option<f64> {
        self.standard_deviation.map(|s| s / self.mean)
    }

    /// The number as a model states it: lognormal with this mean and scatter, or known where there is no scatter.
    pub fn uncertain(&self) -> Uncertain {
        match self.cov() {
            Some(cov) if 0.0 < cov => Uncertain::Lognormal { mean: self.mean, cov },
            _ => Uncertain::Exact(self.mean),
        }
    }
}
