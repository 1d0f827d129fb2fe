//! Plane symmetric tensors `[xx, yy, xy]`: principal values, Mohr circle, tractions, rotation.

/// Principal values of a plane tensor.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Principal {
    /// Larger value, in the unit of the tensor.
    pub major: f64,
    /// Smaller value, in the unit of the tensor.
    pub minor: f64,
    /// Angle in rad from x, counterclockwise, of the direction on which the major value acts; in (−π/2, π/2].
    pub direction_rad: f64,
}

/// Center and radius of the Mohr circle: `p = (xx + yy)/2`, `R = sqrt(((xx − yy)/2)² + xy²)`, unit of the tensor.
///
/// Source: docs/theory.md eq. (1.5).
pub fn mohr_circle(tensor: [f64; 3]) -> (f64, f64) {
    let [xx, yy, xy] = tensor;
    (0.5 * (xx + yy), (0.5 * (xx - yy)).hypot(xy))
}

/// Principal values `p ± R` and the direction of the major one, `θ = ½ atan2(2 xy, xx − yy)`.
///
/// Source: docs/theory.md eq. (1.5).
pub fn principal(tensor: [f64; 3]) -> Principal {
    let [xx, yy, xy] = tensor;
    let (center, radius) = mohr_circle(tensor);
    Principal { major: center + radius, minor: center - radius, direction_rad: 0.5 * (2.0 * xy).atan2(xx - yy) }
}

/// Larger principal value, in the unit of the tensor.
pub fn major(tensor: [f64; 3]) -> f64 {
    let (center, radius) = mohr_circle(tensor);
    center + radius
}

/// Smaller principal value, in the unit of the tensor.
pub fn minor(tensor: [f64; 3]) -> f64 {
    let (center, radius) = mohr_circle(tensor);
    center - radius
}

/// Traction vector `t = σ n` on a plane with unit normal `n`.
pub fn traction(tensor: [f64; 3], normal: [f64; 2]) -> [f64; 2] {
    let [xx, yy, xy] = tensor;
    [xx * normal[0] + xy * normal[1], xy * normal[0] + yy * normal[1]]
}

/// Normal stress `n·σn` and shear stress `t·σn` on a plane with unit normal `n`, `t` = `n` turned by +90 degrees.
pub fn normal_and_shear(tensor: [f64; 3], normal: [f64; 2]) -> (f64, f64) {
    let [tx, ty] = traction(tensor, normal);
    (tx * normal[0] + ty * normal[1], -tx * normal[1] + ty * normal[0])
}

/// Components of the same tensor in axes turned counterclockwise by `angle_rad`: `σ' = R σ Rᵀ`, `R = [c s; −s c]`.
pub fn in_turned_axes(tensor: [f64; 3], angle_rad: f64) -> [f64; 3] {
    let [xx, yy, xy] = tensor;
    let (s, c) = angle_rad.sin_cos();
    [c * c * xx + s * s * yy + 2.0 * c * s * xy, s * s * xx + c * c * yy - 2.0 * c * s * xy, (yy - xx) * c * s + xy * (c * c - s * s)]
}

/// `a : b = a_xx b_xx + a_yy b_yy + 2 a_xy b_xy` for two tensors with tensor shear components.
pub fn double_dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + 2.0 * a[2] * b[2]
}

#[cfg(test)]
mod tests;
