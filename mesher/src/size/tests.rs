use super::*;
use crate::snap::Grid;
use approx::assert_relative_eq;
use proptest::prelude::*;

#[test]
fn size_grows_by_the_gradation_from_the_reach_of_a_source() {
    let source = SizeSource::segment([0.0, 0.0], [10.0, 0.0], 0.5).within(1.0);
    let field = SizeField { largest_m: 4.0, gradation: 0.25, sources: vec![source], background: vec![([50.0, 0.0], 1.0)] };
    for (p, expected) in [
        ([5.0, 0.5], 0.5),
        ([5.0, 5.0], 0.5 + 0.25 * 4.0),
        ([13.0, 4.0], 0.5 + 0.25 * 4.0), // 5 m off the end
        ([-200.0, 0.0], 4.0),
        ([50.0, 0.5], 1.0),
        ([52.0, 0.0], 1.0 + 0.25 * (2.0 - BACKGROUND_REACH)),
    ] {
        assert_relative_eq!(field.evaluate_m(p), expected, max_relative = 1e-14);
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 64, failure_persistence: None, ..ProptestConfig::default() })]
    #[test]
    fn index_agrees_with_trying_every_source(
        sources in prop::collection::vec((prop::array::uniform4(-100.0..100.0_f64), 0.01..5.0_f64, 0.0..4.0_f64), 1..60),
        background in prop::collection::vec((prop::array::uniform2(-100.0..100.0_f64), 0.05..8.0_f64), 0..200),
        points in prop::collection::vec(prop::array::uniform2(-100.0..100.0_f64), 100),
        gradation in 0.05..0.6_f64,
    ) {
        let sources = sources.into_iter().map(|(e, size, r)| SizeSource::segment([e[0], e[1]], [e[2], e[3]], size).within(r)).collect();
        let field = SizeField { largest_m: 6.0, gradation, sources, background };
        let grid = Grid::over([[-100.0, -100.0], [100.0, 100.0]].into_iter());
        let index = SizeIndex::new(&field, &grid);
        for p in points {
            let (indexed, plain) = (index.size(grid.local(p)), field.evaluate_m(p));
            // rounding of distances of up to 300 m
            prop_assert!((indexed - plain).abs() <= 1e-12, "{indexed} against {plain} at {p:?}");
        }
    }
}
