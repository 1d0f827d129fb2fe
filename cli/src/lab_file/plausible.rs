//! Values whose size suggests another unit.
use checker::diagnostic::Diagnostic;
use checker::lab::{LabResults, Origin};

/// One kind of value with the range in which a unit is not doubted: widest published ranges of rock with a margin of ten, common practice.
struct Kind {
    what: &'static str,
    low_pa: f64,
    high_pa: f64,
}

const TENSILE: Kind = Kind { what: "tensile strength", low_pa: 2e3, high_pa: 60e6 };
const UNIAXIAL: Kind = Kind { what: "uniaxial strength", low_pa: 20e3, high_pa: 600e6 };
const POINT_LOAD: Kind = Kind { what: "point load index", low_pa: 1e3, high_pa: 40e6 };
const SHEAR: Kind = Kind { what: "stress of a shear stage", low_pa: 0.5e3, high_pa: 60e6 };
const MODULUS: Kind = Kind { what: "Young's modulus", low_pa: 5e6, high_pa: 250e9 };
/// Densities of rock, kg/m3, with a margin.
const DENSITY: (f64, f64) = (600.0, 4500.0);

/// Warns once a kind, at its first doubtful value.
pub(super) fn check(results: &LabResults, warnings: &mut Vec<Diagnostic>) {
    let strengths = |tests: &[checker::lab::StrengthTest]| tests.iter().map(|t| (t.origin.clone(), t.value_pa)).collect::<Vec<_>>();
    let stages = results.shear.iter().flat_map(|s| {
        let stresses = [Some(s.normal_at_peak_pa), s.peak_pa, Some(s.normal_at_residual_pa), s.residual_pa];
        stresses.into_iter().flatten().map(|value| (s.origin.clone(), value))
    });
    let moduli = results.modulus.iter().map(|m| (m.origin.clone(), m.youngs_modulus_pa));
    for (kind, values) in [
        (TENSILE, strengths(&results.tensile)),
        (UNIAXIAL, strengths(&results.uniaxial)),
        (POINT_LOAD, strengths(&results.point_load)),
        (SHEAR, stages.collect()),
        (MODULUS, moduli.collect()),
    ] {
        // A stage at zero normal stress is a test, not a wrong unit.
        if let Some((origin, value)) = values.iter().find(|(_, v)| 0.0 < *v && !(kind.low_pa <= *v && *v <= kind.high_pa)) {
            let (shown, times) = if kind.high_pa < *value {
                (format!("{:.0} MPa", value / 1e6), "1000 times smaller")
            } else {
                (format!("{:.4} kPa", value / 1e3), "1000 times larger")
            };
            warn(origin, &format!("{} of {shown}", kind.what), times, warnings);
        }
    }
    let densities = results.density.iter().flat_map(|d| [d.bulk_kg_per_m3, d.dry_kg_per_m3].into_iter().flatten().map(|v| (&d.origin, v)));
    if let Some((origin, value)) = densities.into_iter().find(|(_, v)| !(DENSITY.0 <= *v && *v <= DENSITY.1)) {
        let times = if DENSITY.1 < value { "1000 times smaller" } else { "1000 times larger" };
        warn(origin, &format!("density of {value} kg/m3"), times, warnings);
    }
}

fn warn(origin: &Origin, what: &str, times: &str, warnings: &mut Vec<Diagnostic>) {
    let message = format!("specimen {}: {what} is outside what rock shows; the meant unit may be {times}", origin.specimen);
    let hint = "check the unit of the column or heading: kPa or MPa, kg/m3 or Mg/m3";
    warnings.push(Diagnostic::warning("lab.unit-doubt", format!("line {}", origin.line), message).hint(hint));
}
