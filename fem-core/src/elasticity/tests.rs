//! Hand values and refusals.
use super::*;

#[test]
fn refuses_what_is_not_elastic() {
    let message = |e, nu| Elastic::new(e, nu).unwrap_err().to_string();
    assert_eq!(message(0.0, 0.2), "Young's modulus must be positive and finite, got 0 Pa");
    assert_eq!(message(f64::NAN, 0.2), "Young's modulus must be positive and finite, got NaN Pa");
    assert_eq!(message(f64::INFINITY, 0.2), "Young's modulus must be positive and finite, got inf Pa");
    assert_eq!(message(1.0, 0.5), "Poisson's ratio must be inside (-1, 0.5), got 0.5");
    assert_eq!(message(1.0, f64::NAN), "Poisson's ratio must be inside (-1, 0.5), got NaN");
}

#[test]
fn matrix_at_a_quarter() {
    // ν = 0.25: E/((1+ν)(1−2ν)) = 1.6 E, so D = E [1.2, 0.4; 0.4, 1.2; 0.4]. Closed form.
    let d = Elastic::new(1e6, 0.25).unwrap().plane_strain_matrix_pa();
    for (got, want) in d.iter().flatten().zip([1.2e6, 0.4e6, 0.0, 0.4e6, 1.2e6, 0.0, 0.0, 0.0, 0.4e6]) {
        assert!((got - want).abs() < 1e-9, "{d:?}");
    }
}

#[test]
fn strain_inverts_stress_and_energy_is_half_the_product() {
    let rock = Elastic::new(3.7e9, 0.31).unwrap();
    let strain = [1e-4, -3e-4, 2e-4];
    let stress = rock.stress_pa(strain);
    let back = rock.strain(stress);
    for i in 0..3 {
        assert!((back[i] - strain[i]).abs() < 1e-18, "round-off of a 2x2 inverse");
    }
    let energy = 0.5 * (stress[0] * strain[0] + stress[1] * strain[1] + stress[2] * strain[2]);
    assert!((rock.energy_density_j_per_m3(stress) / energy - 1.0).abs() < 1e-13);
    assert!((rock.plate_modulus_pa() / (3.7e9 / (1.0 - 0.31 * 0.31)) - 1.0).abs() < 1e-15);
    assert!((rock.out_of_plane_stress_pa([2.0, 3.0, 9.0]) - 1.55).abs() < 1e-15);
}
