//! Sorts samples into groups of like coefficients, so that bounds over a group are tight.

/// Largest group: small enough for tight bounds, large enough that bounding every place costs less than judging the samples.
const LARGEST_GROUP: usize = 512;

/// What is done with a group: its samples and the ends of each coefficient among them.
pub(super) type Visit<'a> = dyn FnMut(&[usize], &[[f64; 2]]) + 'a;

/// Splits `order` (indices of samples) in halves until every group holds at most 256, each time across the load case whose
/// spread moves stresses most; calls `visit` with each group. The order of groups depends on the samples only.
///
/// | name         | shape                  | meaning                                           |
/// |--------------|------------------------|---------------------------------------------------|
/// | coefficients | `[n_samples][n_cases]` | coefficients of the samples                       |
/// | weight       | `[n_cases]`            | largest unit stress of each load case at any place |
pub(super) fn for_each_group(order: &mut [usize], coefficients: &[f64], weight: &[f64], visit: &mut Visit) {
    let n_cases = weight.len();
    let ends: Vec<[f64; 2]> = (0..n_cases)
        .map(|k| {
            order.iter().fold([f64::INFINITY, f64::NEG_INFINITY], |[low, high], &i| {
                let value = coefficients[i * n_cases + k];
                [low.min(value), high.max(value)]
            })
        })
        .collect();
    let widest = (0..n_cases).max_by(|&a, &b| (weight[a] * (ends[a][1] - ends[a][0])).total_cmp(&(weight[b] * (ends[b][1] - ends[b][0]))));
    match widest {
        Some(k) if LARGEST_GROUP < order.len() => {
            let middle = order.len() / 2;
            // The index breaks ties, so that equal values cannot be split by chance.
            order.select_nth_unstable_by(middle, |&a, &b| {
                coefficients[a * n_cases + k].total_cmp(&coefficients[b * n_cases + k]).then(a.cmp(&b))
            });
            let (low, high) = order.split_at_mut(middle);
            for_each_group(low, coefficients, weight, visit);
            for_each_group(high, coefficients, weight, visit);
        }
        _ => visit(order, &ends),
    }
}
