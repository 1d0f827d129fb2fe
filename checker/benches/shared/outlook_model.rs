// An invented four-layer cliff as unit values: smooth stresses that grow with depth, of the size a 30 m cliff has. Included by
// the benches and by the tests of the sampler; the including module imports the types.

/// `n_depths` depths from 2 m, about `25 x density` places a depth, 21 load cases, 21 random inputs.
fn four_layers(n_depths: usize, density: usize) -> (DemandModel, Variables) {
    let n_layers = 4;
    let mut inputs: Vec<(String, Uncertain)> = Vec::new();
    for j in 0..n_layers {
        let mean = [19.0e3, 24.0e3, 22.0e3, 25.0e3][j];
        inputs.push((format!("unit weight {j}"), Uncertain::Lognormal { mean, cov: 0.03 }));
    }
    inputs.extend((0..n_layers).map(|j| (format!("k0 {j}"), Uncertain::Uniform { min: 0.3, max: 0.8 })));
    for j in 0..n_layers {
        inputs.push((format!("tensile strength {j}"), Uncertain::Lognormal { mean: [1520.0e3, 1700.0e3, 1450.0e3, 1900.0e3][j], cov: 0.35 }));
        inputs.push((format!("cohesion {j}"), Uncertain::Lognormal { mean: [1000.0e3, 1200.0e3, 900.0e3, 1500.0e3][j], cov: 0.3 }));
        let friction = Uncertain::TruncatedNormal { mean: 0.62, standard_deviation: 0.06, min: 0.3, max: 0.9 };
        inputs.push((format!("friction angle {j}"), friction));
    }
    inputs.push(("model factor".into(), Uncertain::Lognormal { mean: 1.0, cov: 0.3 }));
    let correlations: Vec<Correlation> = (0..n_layers).map(|j| Correlation { a: 9 + 3 * j, b: 10 + 3 * j, coefficient: -0.4 }).collect();
    let variables = Variables::new(&inputs, &correlations).unwrap();

    let mut coefficients: Vec<Coefficient> = (0..n_layers).map(Coefficient::Input).collect();
    coefficients.extend((0..n_layers).flat_map(|i| (0..=i).map(move |j| Coefficient::Product(4 + i, j))));
    coefficients.extend((0..n_layers).map(|i| Coefficient::Input(4 + i)));
    coefficients.extend([Coefficient::One; 3]);
    let strengths = (0..n_layers)
        .map(|j| StrengthInputs::Typed {
            tensile_pa: Factored { input: 8 + 3 * j, factor: 1.0 },
            cohesion_pa: Factored { input: 9 + 3 * j, factor: 1.0 },
            friction_angle_rad: 10 + 3 * j,
        })
        .collect();
    let mut limits = Vec::new();
    let mut limit = |check, situation, law| limits.push(Limit { check, situation, law });
    (0..2).for_each(|strength| limit("cliff-top tension", 0, Law::Tension { strength }));
    (1..4).for_each(|strength| limit("roof tension", 0, Law::Tension { strength }));
    (0..4).for_each(|strength| limit("local shear", 0, Law::Shear { strength }));
    (0..4).for_each(|strength| limit("section bending", 0, Law::Fibre { strength }));
    limit("section shear", 0, Law::Sliding { strengths: vec![0, 1, 2] });
    limit("roof tension", 1, Law::Tension { strength: 2 });
    let situations = vec![
        SituationChance { name: "ordinary".into(), annual_chance: None },
        SituationChance { name: "ground motion".into(), annual_chance: Some(0.002) },
    ];
    let depths_m: Vec<f64> = (0..n_depths).map(|d| 2.0 + 10.0 * d as f64 / n_depths as f64).collect();
    let places = depths_m.iter().map(|d| limits.iter().enumerate().map(|(i, l)| places_of(l, i, *d, density)).collect()).collect();
    let model = DemandModel { depths_m, coefficients, strengths, situations, limits, places, model_factor: Some(20) };
    (model, variables)
}

/// Places of one limit at one depth.
fn places_of(limit: &Limit, i_limit: usize, depth_m: f64, density: usize) -> Places {
    let (n, n_cases) = (density * if matches!(limit.law, Law::Tension { .. } | Law::Shear { .. }) { 2 } else { 1 }, 21_usize);
    let mut places = Places::default();
    for i in 0..n {
        let s = (i as f64 + 0.5) / n as f64;
        places.at_m.push([10.0 * s, 30.0]);
        let bell = (-4.0 * (s - 0.4 - 0.02 * i_limit as f64).powi(2)).exp();
        for component in 0..limit.law.n_components() {
            for k in 0..n_cases {
                let wave = (1.7 * k as f64 + 2.3 * component as f64 + 3.0 * s + i_limit as f64).sin();
                let size = match (&limit.law, component, k) {
                    (Law::Tension { .. }, 0, 0..4) => 0.11 * depth_m * depth_m * bell,
                    (Law::Tension { .. }, 0, 4..14) => 0.8 * bell,
                    (Law::Tension { .. }, _, _) => 0.1,
                    (Law::Shear { .. }, 1, 0..4) => -6.0 - 1.5 * depth_m * bell,
                    (Law::Shear { .. }, 0, 4..14) => -2.0 * bell,
                    (Law::Shear { .. }, _, _) => 0.2,
                    (Law::Fibre { .. }, _, 0..4) => 0.09 * depth_m * depth_m * (0.5 + 0.5 * s),
                    (Law::Fibre { .. }, _, _) => 0.02,
                    (Law::Sliding { .. }, 0, 0..4) => 0.9 * depth_m * (0.8 + 0.2 * s),
                    (Law::Sliding { .. }, _, _) => 0.3,
                };
                // Constant loads come with their own size, here tens of kPa.
                places.unit.push(if k < 18 { size * (1.0 + 0.3 * wave) } else { 2.0e3 * wave });
            }
        }
        if let Law::Sliding { strengths } = &limit.law {
            places.share.extend(strengths.iter().map(|_| 1.0 / strengths.len() as f64));
        }
    }
    places
}
