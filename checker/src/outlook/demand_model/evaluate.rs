//! Margins and utilizations of one sample, exact.
use super::{Coefficient, DemandModel, Law, Places, StrengthInputs};
use crate::strength::hoek_brown::Rating;
use crate::strength::{RockCapacity, StrengthValues};

/// Largest friction angle taken for real, rad (80 degrees).
const STEEPEST_RAD: f64 = 1.3962634015954636;

/// Coefficients and strengths of one sample.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Sample {
    /// Coefficient of each load case.
    pub coefficients: Vec<f64>,
    /// Tensile strength (cut to the apex of the shear law), cohesion, tangent of the friction angle; Pa, Pa, -.
    pub strengths: Vec<[f64; 3]>,
    /// Model factor on capacity over demand.
    pub model_factor: f64,
}

impl Sample {
    /// Fills the sample from inputs `x` in SI units.
    ///
    /// Tensile strength above `c / tan phi` is cut to it: the shear law has no strength beyond its apex.
    pub fn fill(&mut self, model: &DemandModel, x: &[f64]) {
        self.coefficients.clear();
        self.coefficients.extend(model.coefficients.iter().map(|c| match *c {
            Coefficient::One => 1.0,
            Coefficient::Input(i) => x[i],
            Coefficient::Product(i, j) => x[i] * x[j],
        }));
        self.strengths.clear();
        self.strengths.extend(model.strengths.iter().map(|s| strength_at(s, x)));
        self.model_factor = model.model_factor.map_or(1.0, |i| x[i]);
    }

    /// The sample at inputs `x`.
    pub fn new(model: &DemandModel, x: &[f64]) -> Self {
        let mut sample = Self::default();
        sample.fill(model, x);
        sample
    }
}

/// `[tensile strength, cohesion, tan phi]` of one entry at inputs `x`.
///
/// The tails of a normal distribution may draw what cannot exist: strengths below 0 count as 0, angles and indices are held within
/// their range, and a rating whose relations have no solution counts as no strength.
fn strength_at(inputs: &StrengthInputs, x: &[f64]) -> [f64; 3] {
    match *inputs {
        StrengthInputs::Typed { tensile_pa, cohesion_pa, friction_angle_rad } => {
            let cohesion = (cohesion_pa.factor * x[cohesion_pa.input]).max(0.0);
            let tangent = x[friction_angle_rad].clamp(0.0, STEEPEST_RAD).tan();
            let tensile = (tensile_pa.factor * x[tensile_pa.input]).max(0.0);
            let cut = if cohesion < tensile * tangent { cohesion / tangent } else { tensile };
            [cut, cohesion, tangent]
        }
        StrengthInputs::Rating { gsi, mi, uniaxial_strength_pa, disturbance, reductions } => {
            let rating = Rating {
                gsi: x[gsi].clamp(5.0, 100.0),
                mi: x[mi].max(1.0),
                disturbance,
                uniaxial_strength_pa: x[uniaxial_strength_pa].max(1.0),
            };
            match StrengthValues::HoekBrown(rating).capacity(&reductions) {
                Ok(RockCapacity::Resists(s)) => [s.tensile_strength_pa, s.cohesion_pa, s.tan_friction],
                Ok(RockCapacity::NoStrength) | Err(_) => [0.0; 3],
            }
        }
    }
}

/// Smallest margin of a limit at a depth over all its places, Pa, with its place; `None` where the limit has no place.
///
/// The margin is `model factor x capacity - demand`, negative where the limit is passed, continuous in every input:
///
/// ```text
/// tension, fibre   theta s_t - sigma                         sigma: major principal stress or fibre stress
/// shear            c + p t - R sqrt(1 / theta^2 + t^2)       negative exactly when F < 1 / theta; p = -(xx + yy) / 2, R: radius
/// sliding          theta sum(max(0, share c + sigma_n t)) - |tau|
/// ```
///
/// A stress beyond the apex of the shear law has a negative margin here: there the major principal stress is at least
/// `c / tan phi`, to which tensile strength is cut, so the rock is past its tensile strength too.
pub fn margin_of(model: &DemandModel, i_depth: usize, i_limit: usize, sample: &Sample) -> Option<(f64, usize)> {
    let places = &model.places[i_depth][i_limit];
    let law = &model.limits[i_limit].law;
    let margins = (0..places.at_m.len()).map(|i| (place_margin(law, places, i, sample), i));
    margins.min_by(|a, b| a.0.total_cmp(&b.0))
}

/// Margin of one place, Pa.
pub(in crate::outlook) fn place_margin(law: &Law, places: &Places, i_place: usize, sample: &Sample) -> f64 {
    let n_cases = sample.coefficients.len();
    let n_components = law.n_components();
    let of = |component: usize| {
        let from = (i_place * n_components + component) * n_cases;
        dot(&places.unit[from..from + n_cases], &sample.coefficients)
    };
    let theta = sample.model_factor;
    match law {
        Law::Tension { strength } => {
            let (center, radius) = circle(of(0), of(1), of(2));
            theta * sample.strengths[*strength][0] - (center + radius)
        }
        Law::Fibre { strength } => theta * sample.strengths[*strength][0] - of(0),
        Law::Shear { strength } => {
            let [_, c, t] = sample.strengths[*strength];
            let (center, radius) = circle(of(0), of(1), of(2));
            c - center * t - radius * (1.0 / (theta * theta) + t * t).sqrt()
        }
        Law::Sliding { strengths } => {
            let share = &places.share[i_place * strengths.len()..(i_place + 1) * strengths.len()];
            let capacity: f64 = strengths
                .iter()
                .zip(share)
                .enumerate()
                .map(|(r, (&i, share))| (share * sample.strengths[i][1] + of(1 + r) * sample.strengths[i][2]).max(0.0))
                .sum();
            theta * capacity - of(0).abs()
        }
    }
}

/// Centre and radius of the circle of an in-plane tensor.
pub(in crate::outlook) fn circle(xx: f64, yy: f64, xy: f64) -> (f64, f64) {
    let half = 0.5 * (xx - yy);
    (0.5 * (xx + yy), (half * half + xy * xy).sqrt())
}

/// Scalar product in four partial sums of fixed order: fast without letting the compiler reorder.
fn dot(a: &[f64], b: &[f64]) -> f64 {
    let mut sums = [0.0; 4];
    let (a4, b4) = (a.chunks_exact(4), b.chunks_exact(4));
    let rest: f64 = a4.remainder().iter().zip(b4.remainder()).map(|(a, b)| a * b).sum();
    for (a, b) in a4.zip(b4) {
        for k in 0..4 {
            sums[k] += a[k] * b[k];
        }
    }
    (sums[0] + sums[1]) + (sums[2] + sums[3]) + rest
}
