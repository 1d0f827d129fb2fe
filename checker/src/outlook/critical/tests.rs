use super::{SearchParams, critical_depths, one_critical_depth};
use crate::model::Uncertain;
use crate::outlook::demand_model::Sample;
use crate::outlook::demand_model::tests::{demo, fibre};
use crate::outlook::sampling::Draws;

/// The fast search against a look at every place, bit for bit, on 1,000 samples of a model with all laws.
#[test]
fn bounds_drop_only_what_cannot_matter() {
    let (model, variables) = demo(8, 20);
    let depth_indices: Vec<usize> = (0..8).collect();
    let draws = Draws::plain(3);
    let found = critical_depths(&model, &variables, &draws, &SearchParams { n_samples: 1000, depth_indices: &depth_indices });
    let (mut u, mut x) = (vec![0.0; variables.n_random()], vec![0.0; variables.n_inputs()]);
    let mut checks = std::collections::BTreeSet::new();
    for i in 0..1000 {
        draws.draw(i, &mut u);
        variables.from_standard(&u, &mut x);
        let slow = one_critical_depth(&model, &Sample::new(&model, &x), &depth_indices);
        let i = i as usize;
        assert_eq!(
            (slow[0].to_bits(), slow[1].to_bits()),
            (found.depth_m[i].to_bits(), found.by_chance_m[0][i].to_bits()),
            "sample {i}: {slow:?} against {} and {}",
            found.depth_m[i],
            found.by_chance_m[0][i]
        );
        assert!(slow[1] <= slow[0]);
        checks.extend(found.governor[i].map(|g| model.limits[g.limit as usize].check));
    }
    assert!(3 <= checks.len(), "a test that lets several laws govern, got {checks:?}");
    assert!(found.n_reached < found.n_places, "{} of {}", found.n_reached, found.n_places);
}

#[test]
fn the_number_of_threads_changes_no_bit() {
    let (model, variables) = demo(5, 4);
    let depth_indices = [0, 1, 2, 3, 4];
    let run = |threads| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        let params = SearchParams { n_samples: 20_000, depth_indices: &depth_indices };
        pool.install(|| critical_depths(&model, &variables, &Draws::plain(11), &params))
    };
    let (one, two) = (run(1), run(2));
    assert_eq!(one, two);
    // A longer run begins with the shorter one.
    let longer = critical_depths(&model, &variables, &Draws::plain(11), &SearchParams { n_samples: 30_000, depth_indices: &depth_indices });
    assert_eq!(longer.depth_m[..20_000], one.depth_m[..]);
}

/// Demand 100 d kPa at unit weight 1, strength 450 kPa: exactly 4.5 m, linear between depths.
#[test]
fn the_crossing_is_where_demand_meets_capacity() {
    let (model, variables) = fibre(Uncertain::Exact(450e3), Uncertain::Exact(1.0), &[2.0, 4.0, 6.0, 8.0], |d| 100e3 * d);
    let at = |indices: &[usize]| {
        critical_depths(&model, &variables, &Draws::plain(1), &SearchParams { n_samples: 2, depth_indices: indices }).depth_m[0]
    };
    assert!((at(&[0, 1, 2, 3]) - 4.5).abs() < 1e-12);
    assert!((at(&[0, 3]) - 4.5).abs() < 1e-12, "every other depth left out");
    assert!(at(&[0, 1]).is_infinite(), "not reached, nothing is known beyond");
    assert!((at(&[2, 3]) - 6.0).abs() < 1e-12, "over at the first depth: already there");
}
