use super::*;
use crate::geometry::orient;
use proptest::prelude::*;

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, ..ProptestConfig::default() })]

    /// Exact arithmetic: 33 + 20 bits fit a double.
    #[test]
    fn lattice_points_are_exactly_collinear(
        a in prop::array::uniform2(-300.0..400.0_f64),
        b in prop::array::uniform2(-300.0..400.0_f64),
        j in 1..STEPS,
        i in 1..STEPS,
    ) {
        let grid = Grid::over([a, b, [-300.0, -300.0], [400.0, 400.0]].into_iter());
        let (a, b) = (grid.round(grid.local(a)), grid.round(grid.local(b)));
        prop_assume!(1e-3 < (a[0] - b[0]).hypot(a[1] - b[1]));
        let (p, q) = (lattice(a, b, i), lattice(a, b, j));
        prop_assert!(orient(a, b, p).abs() <= 0.0);
        prop_assert!(orient(p, b, q).abs() <= 0.0);
    }

    #[test]
    fn snapping_moves_at_most_half_a_grid_diagonal(x in -1e4..1e4_f64, y in -1e4..1e4_f64, w in 1.0..1e4_f64) {
        let grid = Grid::over([[x, y], [x + w, y + 0.3 * w]].into_iter());
        let back = grid.global(grid.round(grid.local([x, y])));
        let moved = (back[0] - x).hypot(back[1] - y);
        // 0.71 units plus the rounding of coordinates of up to 2e4 m in a double
        prop_assert!(moved <= 0.71 * grid.unit_m() + 8.0 * 2e4 * f64::EPSILON, "{moved} against a unit of {}", grid.unit_m());
    }
}

#[test]
fn whole_and_half_meters_are_kept() {
    let grid = Grid::over([[-120.0, -60.0], [131.5, 44.5]].into_iter());
    for p in [[131.5, 44.5], [-120.0, -60.0]] {
        let back = grid.global(grid.round(grid.local(p)));
        assert_eq!(back.map(f64::to_bits), p.map(f64::to_bits));
    }
}
