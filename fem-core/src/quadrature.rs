//! Integration rules on the reference triangle and on the unit interval.
//!
//! Which rule where, and why (docs/theory.md section 1.4):
//!
//! | integral | straight sides | curved sides |
//! |---|---|---|
//! | stiffness `BᵀDB` | degree 2: exact, gradients are linear | degree 4: rational integrand, keeps order and rank |
//! | `∫ Nᵀ b` | degree 4: exact for `b` up to degree 2 | degree 4: exact for constant `b` |
//! | `∫ Bᵀ σ0`, `∫ Bᵀ m p` | degree 4: exact for `σ0` up to degree 3 | degree 4: exact for linear `σ0` |
//! | errors, norms | degree 6 | degree 6 |
//! | sides | Gauss, 4 points: degree 7 | the same |

/// One point of a triangle rule: reference coordinates and weight; the weights of a rule add up to the area 1/2.
pub type TrianglePoint = ([f64; 2], f64);

/// Degree 2, three points inside. Source: Hammer & Stroud 1956 (from memory); checked against monomials.
pub const TRIANGLE_DEGREE_2: [TrianglePoint; 3] =
    [([1.0 / 6.0, 1.0 / 6.0], 1.0 / 6.0), ([2.0 / 3.0, 1.0 / 6.0], 1.0 / 6.0), ([1.0 / 6.0, 2.0 / 3.0], 1.0 / 6.0)];

const D4A: f64 = 0.445_948_490_915_964_9;
const D4B: f64 = 0.091_576_213_509_770_74;
const D4WA: f64 = 0.5 * 0.223_381_589_678_011_47;
const D4WB: f64 = 0.5 * 0.109_951_743_655_321_87;

/// Degree 4, six points. Source: Cowper 1973, Dunavant 1985 (from memory); checked against monomials.
pub const TRIANGLE_DEGREE_4: [TrianglePoint; 6] = [
    ([D4A, D4A], D4WA),
    ([1.0 - 2.0 * D4A, D4A], D4WA),
    ([D4A, 1.0 - 2.0 * D4A], D4WA),
    ([D4B, D4B], D4WB),
    ([1.0 - 2.0 * D4B, D4B], D4WB),
    ([D4B, 1.0 - 2.0 * D4B], D4WB),
];

const D6A: f64 = 0.249_286_745_170_910_4;
const D6B: f64 = 0.063_089_014_491_502_23;
const D6C: [f64; 3] = [0.053_145_049_844_816_95, 0.310_352_451_033_784_4, 0.636_502_499_121_398_7];
const D6WA: f64 = 0.5 * 0.116_786_275_726_379_37;
const D6WB: f64 = 0.5 * 0.050_844_906_370_206_82;
const D6WC: f64 = 0.5 * 0.082_851_075_618_373_58;

/// Degree 6, twelve points. Source: Dunavant 1985 (from memory); checked against monomials.
pub const TRIANGLE_DEGREE_6: [TrianglePoint; 12] = [
    ([D6A, D6A], D6WA),
    ([1.0 - 2.0 * D6A, D6A], D6WA),
    ([D6A, 1.0 - 2.0 * D6A], D6WA),
    ([D6B, D6B], D6WB),
    ([1.0 - 2.0 * D6B, D6B], D6WB),
    ([D6B, 1.0 - 2.0 * D6B], D6WB),
    ([D6C[0], D6C[1]], D6WC),
    ([D6C[1], D6C[0]], D6WC),
    ([D6C[0], D6C[2]], D6WC),
    ([D6C[2], D6C[0]], D6WC),
    ([D6C[1], D6C[2]], D6WC),
    ([D6C[2], D6C[1]], D6WC),
];

/// Gauss–Legendre rule with `n` points on `[0, 1]`: abscissas and weights that add up to 1, exact to degree `2n − 1`.
///
/// Roots of the Legendre polynomial `P_n` by Newton's method from `cos(π (i + 3/4)/(n + 1/2))`.
///
/// # Panics
/// When `n` is 0.
pub fn gauss_unit(n: usize) -> Vec<(f64, f64)> {
    assert!(0 < n, "a rule needs at least one point");
    let mut points = vec![(0.0, 0.0); n];
    for i in 0..n {
        let mut x = (std::f64::consts::PI * (i as f64 + 0.75) / (n as f64 + 0.5)).cos();
        let mut slope = 1.0;
        for _ in 0..100 {
            let (value, derivative) = legendre(n, x);
            slope = derivative;
            let step = value / derivative;
            x -= step;
            if step.abs() < 1e-16 {
                break;
            }
        }
        points[n - 1 - i] = (0.5 * (1.0 + x), 1.0 / ((1.0 - x * x) * slope * slope));
    }
    points
}

/// Value and derivative of the Legendre polynomial `P_n` at `x` inside (−1, 1), by the three-term recurrence.
fn legendre(n: usize, x: f64) -> (f64, f64) {
    let (mut before, mut value) = (1.0, x);
    for k in 2..=n {
        let k = k as f64;
        (before, value) = (value, ((2.0 * k - 1.0) * x * value - (k - 1.0) * before) / k);
    }
    (value, n as f64 * (before - x * value) / (1.0 - x * x))
}

#[cfg(test)]
mod tests;
