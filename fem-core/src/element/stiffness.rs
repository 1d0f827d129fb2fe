//! Element stiffness as 2×2 blocks of node pairs, the form that the scatter wants.
use super::{TRIANGLE_DEGREE_4, is_straight, mapped};
use crate::elasticity::Moduli;

/// Number of node pairs `a ≤ b` of an element.
pub(crate) const N_PAIRS: usize = 21;

/// `∫ ∂N_a/∂x_i ∂N_b/∂x_j` in the order xx, xy, yx, yy, for each pair; dimensionless.
type Products = [[f64; 4]; N_PAIRS];

/// Stiffness blocks `K_ab = ∫ B_aᵀ D B_b` in Pa for the pairs `a ≤ b`, row by row: (0,0), (0,1) .. (0,5), (1,1) .. (5,5).
///
/// ```text
/// K_ab = | a S_xx + g S_yy   b S_xy + g S_yx |      S_ij = ∫ ∂N_a/∂x_i ∂N_b/∂x_j
///        | b S_yx + g S_xy   a S_yy + g S_xx |
/// ```
///
/// `a`, `b`, `g` as in [`Moduli`]; each block is xx, xy, yx, yy. Source: docs/theory.md eq. (1.9).
pub(crate) fn stiffness_blocks(points_m: &[[f64; 2]; 6], moduli: &Moduli) -> [[f64; 4]; N_PAIRS] {
    let s = if is_straight(points_m) { straight_products(points_m) } else { curved_products(points_m) };
    let Moduli { a_pa: a, b_pa: b, g_pa: g } = *moduli;
    s.map(|[xx, xy, yx, yy]| [a * xx + g * yy, b * xy + g * yx, b * yx + g * xy, a * yy + g * xx])
}

fn curved_products(points_m: &[[f64; 2]; 6]) -> Products {
    let mut s = [[0.0; 4]; N_PAIRS];
    for (xi, weight) in TRIANGLE_DEGREE_4 {
        let at = mapped(points_m, xi);
        let w = weight * at.det_m2;
        let mut pair = 0;
        for i in 0..6 {
            let [x, y] = [w * at.gradients_per_m[i][0], w * at.gradients_per_m[i][1]];
            for [u, v] in &at.gradients_per_m[i..] {
                let t = &mut s[pair];
                *t = [t[0] + x * u, t[1] + x * v, t[2] + y * u, t[3] + y * v];
                pair += 1;
            }
        }
    }
    s
}

/// With straight sides everything follows from the constant gradients `c_a` of the area coordinates and the area `A`:
/// with `q_ab = A c_a ⊗ c_b`, corners give `q_aa` and `−q_ab/3`; a corner and a middle of its side `ab` give `4/3 q_ab`, of the opposite side 0;
/// a middle gives `8/3 (q_aa + q_bb) + 4/3 (q_ab + q_ba)`, two middles `ab`, `ac` give `4/3 (q_aa + q_ac + q_ba + 2 q_bc)`.
fn straight_products(points_m: &[[f64; 2]; 6]) -> Products {
    let [p0, p1, p2] = [points_m[0], points_m[1], points_m[2]];
    let twice = (p1[0] - p0[0]) * (p2[1] - p0[1]) - (p2[0] - p0[0]) * (p1[1] - p0[1]);
    let r = 1.0 / twice;
    let c = [
        [(p1[1] - p2[1]) * r, (p2[0] - p1[0]) * r],
        [(p2[1] - p0[1]) * r, (p0[0] - p2[0]) * r],
        [(p0[1] - p1[1]) * r, (p1[0] - p0[0]) * r],
    ];
    let half = 0.5 * twice;
    let q = c.map(|[x, y]| c.map(|[u, v]| [half * x * u, half * x * v, half * y * u, half * y * v]));
    let scaled = |f: f64, t: [f64; 4]| t.map(|v| f * v);
    let corner = |a: usize, b: usize| scaled(-1.0 / 3.0, q[a][b]);
    let beside = |a: usize, b: usize| scaled(4.0 / 3.0, q[a][b]);
    let middle = |a: usize, b: usize| std::array::from_fn(|k| 4.0 / 3.0 * (2.0 * (q[a][a][k] + q[b][b][k]) + q[a][b][k] + q[b][a][k]));
    let middles = |a: usize, b: usize, c: usize| {
        // Middle of side (a, b) with middle of side (a, c): ∫ (L_b c_a + L_a c_b) ⊗ (L_c c_a + L_a c_c).
        std::array::from_fn(|k| 4.0 / 3.0 * (q[a][a][k] + q[a][c][k] + q[b][a][k] + 2.0 * q[b][c][k]))
    };
    let zero = [0.0; 4];
    #[rustfmt::skip]
    let blocks = [
        q[0][0], corner(0, 1), corner(0, 2), beside(0, 1), zero, beside(0, 2),
        q[1][1], corner(1, 2), beside(1, 0), beside(1, 2), zero,
        q[2][2], zero, beside(2, 1), beside(2, 0),
        middle(0, 1), middles(1, 0, 2), middles(0, 1, 2),
        middle(1, 2), middles(2, 1, 0),
        middle(2, 0),
    ];
    blocks
}
