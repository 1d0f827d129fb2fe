//! Which values of weights and in-situ stress a check is evaluated at.
use crate::model::Model;

/// Which end of the inputs is used.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum InputCase {
    /// For each input the end that raises the check's utilization.
    Cautious,
    /// Mean values.
    BestEstimate,
}

impl InputCase {
    /// Both, in the order of the results.
    pub const ALL: [Self; 2] = [Self::Cautious, Self::BestEstimate];

    /// Published word.
    pub fn id(self) -> &'static str {
        match self {
            Self::Cautious => "cautious",
            Self::BestEstimate => "best estimate",
        }
    }
}

/// One choice of the in-situ stress ratio for the rocks in which it was not measured.
#[derive(Debug, Clone, PartialEq)]
pub struct K0Case {
    /// Words for the results; `None` where every rock's value is given.
    pub label: Option<&'static str>,
    /// Mean value of each rock.
    pub k0: Vec<f64>,
}

/// The choices of in-situ stress ratio: one where all rocks of the section have a value, else the two whose worse counts.
///
/// ```text
/// nu / (1 - nu)   (ground that settled without spreading)      and      1.0
/// ```
pub fn k0_cases(model: &Model) -> Vec<K0Case> {
    let measured = |r: usize| model.rocks[r].k0.map(|k| k.mean());
    let choose = |unmeasured: &dyn Fn(usize) -> f64| (0..model.rocks.len()).map(|r| measured(r).unwrap_or_else(|| unmeasured(r))).collect();
    let elastic = |r: usize| {
        let nu = model.rocks[r].poissons_ratio;
        nu / (1.0 - nu)
    };
    if model.layers.iter().all(|l| measured(l.rock).is_some()) {
        return vec![K0Case { label: None, k0: choose(&elastic) }];
    }
    vec![
        K0Case { label: Some("k0 = nu/(1-nu), not measured"), k0: choose(&elastic) },
        K0Case { label: Some("k0 = 1.0, not measured"), k0: choose(&|_| 1.0) },
    ]
}
