//! What follows from the stresses of a [`FieldSnapshot`] without further input: principal values and total stress.
use super::FieldSnapshot;

/// In-plane principal stresses at a point.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Principal {
    /// Major (most tensile), Pa.
    pub major_pa: f64,
    /// Minor (most compressive), Pa.
    pub minor_pa: f64,
    /// Direction of the major one, from x toward z, rad, in (-pi/2, pi/2].
    pub direction_rad: f64,
}

/// Principal values of `[xx, zz, xz, yy]` in the plane of the section.
///
/// ```text
/// s1, s3 = (xx + zz)/2 ± R,   R = sqrt(((xx - zz)/2)^2 + xz^2),   tan 2a = 2 xz / (xx - zz)
/// ```
///
/// | name        | shape | unit | meaning                              |
/// |-------------|-------|------|--------------------------------------|
/// | `stress_pa` | `[4]` | Pa   | `[xx, zz, xz, yy]`, tension positive |
///
/// `yy` plays no part. Where all directions are alike (R = 0) the direction is 0. Source: Mohr's circle, any text on strength of materials.
pub fn principal(stress_pa: [f64; 4]) -> Principal {
    let [xx, zz, xz, _] = stress_pa;
    let mean = 0.5 * (xx + zz);
    let half_difference = 0.5 * (xx - zz);
    let radius = half_difference.hypot(xz);
    Principal { major_pa: mean + radius, minor_pa: mean - radius, direction_rad: 0.5 * xz.atan2(half_difference) }
}

impl FieldSnapshot {
    /// Principal effective stresses at an element's node.
    ///
    /// # Panics
    /// If `i_elem` or `i_local` lies outside the arrays.
    pub fn principal_effective(&self, i_elem: usize, i_local: usize) -> Principal {
        principal(self.effective_stress_pa[i_elem][i_local])
    }

    /// Total stress `[xx, zz, xz, yy]` at an element's node, Pa: `total = effective - alpha u_w` on the normal components
    /// (tension positive, water pressure positive in compression).
    ///
    /// # Panics
    /// If `i_elem` or `i_local` lies outside the arrays.
    pub fn total_stress_pa(&self, i_elem: usize, i_local: usize) -> [f64; 4] {
        let [xx, zz, xz, yy] = self.effective_stress_pa[i_elem][i_local];
        let water_pa = self.water_pressure_pa[i_elem][i_local];
        [xx - water_pa, zz - water_pa, xz, yy - water_pa]
    }
}

#[cfg(test)]
mod tests {
    use super::principal;
    use approx::assert_relative_eq;

    /// Mohr's circle by hand: a 3-4-5 triangle.
    #[test]
    fn principal_values_of_a_345_circle() {
        let p = principal([10.0, 4.0, 4.0, 0.0]);
        assert_relative_eq!(p.major_pa, 12.0, max_relative = 1e-15);
        assert_relative_eq!(p.minor_pa, 2.0, max_relative = 1e-15);
        assert_relative_eq!((2.0 * p.direction_rad).tan(), 4.0 / 3.0, max_relative = 1e-12);
    }

    /// Turning the axes by an angle turns the direction by it and leaves the values alone.
    #[test]
    fn direction_points_along_the_major_stress() {
        for degrees in [-80.0_f64, -45.0, -10.0, 0.0, 30.0, 89.0] {
            let (s, c) = degrees.to_radians().sin_cos();
            let p = principal([100.0 * c * c - 50.0 * s * s, 100.0 * s * s - 50.0 * c * c, 150.0 * s * c, 0.0]);
            assert_relative_eq!(p.major_pa, 100.0, max_relative = 1e-12);
            assert_relative_eq!(p.minor_pa, -50.0, max_relative = 1e-12);
            assert_relative_eq!(p.direction_rad.to_degrees(), degrees, epsilon = 1e-9);
        }
    }
}
