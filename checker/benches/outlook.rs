//! Times the sampler on an invented four-layer cliff of 20 depths: 100,000 and 1,000,000 samples.
#![expect(clippy::unwrap_used, clippy::print_stdout, clippy::disallowed_methods, reason = "a bench prints times")]
use std::time::Instant;

use checker::model::Uncertain;
use checker::outlook::critical::{SearchParams, critical_depths};
use checker::outlook::demand_model::{Coefficient, DemandModel, Factored, Law, Limit, Places, SituationChance, StrengthInputs};
use checker::outlook::sampling::Draws;
use checker::outlook::variables::{Correlation, Variables};

include!("shared/outlook_model.rs");

fn main() {
    let (model, variables) = four_layers(20, 20);
    let depth_indices: Vec<usize> = (0..20).collect();
    // `cargo test --benches` runs it once, small.
    let sizes: &[u64] = if std::env::args().any(|a| a == "--bench") { &[100_000, 1_000_000] } else { &[2_000] };
    for &n_samples in sizes {
        let start = Instant::now();
        let found = critical_depths(&model, &variables, &Draws::plain(7), &SearchParams { n_samples, depth_indices: &depth_indices });
        let over = found.depth_m.iter().filter(|d| d.is_finite()).count();
        println!(
            "{n_samples} samples, {} places, {} ever evaluated, {over} over: {:.2} s",
            found.n_places,
            found.n_reached,
            start.elapsed().as_secs_f64()
        );
    }
}
