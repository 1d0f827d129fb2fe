use super::{RateError, SunamuraSite, fit_surveys, rate_from_edge, years_between};
use crate::model::{Date, DatedDepth};

#[track_caller]
fn close(value: f64, expected: f64, tolerance: f64) {
    assert!((value - expected).abs() <= tolerance, "{value} against {expected}");
}

fn day(year: i32, month: u8, day: u8) -> Date {
    Date { year, month, day }
}

/// E01 (form published by Sunamura 1977, 1992; the constants are a calibration, values recomputed with g = 9.81).
#[test]
fn e01_waves_against_rock() {
    let site = SunamuraSite { rate_constant_m_per_yr: 0.05, constant: 5.5, uniaxial_strength_pa: 5e6, water_density_kg_per_m3: 1025.0 };
    for (height, expected) in [(2.0, 0.0), (3.0, 0.01947569917097578), (5.0, 0.04501698035927531)] {
        close(site.rate_m_per_yr(height), expected, 1e-12);
    }
    close(site.threshold_height_m(), 2.0321580460277304, 1e-12);
}

/// By hand: 1 January 2000 to 1 January 2400 is one whole cycle of the calendar, 146,097 days; a leap year's February has 29 days.
#[test]
fn days_are_counted_by_the_calendar() {
    close(years_between(day(2000, 1, 1), day(2400, 1, 1)), 400.0, 1e-12);
    close(years_between(day(2024, 2, 28), day(2024, 3, 1)) * 365.2425, 2.0, 1e-9);
    close(years_between(day(2026, 3, 14), day(2025, 3, 14)) * 365.2425, -365.0, 1e-9);
}

/// By hand: three depths on a line of 0.05 m/yr at 0, 4 and 8 years, accuracy 0.02 m: S_tt = 32 / 0.0004, se = 0.02 / sqrt 32.
#[test]
fn surveys_give_rate_and_error() {
    let at = |year, depth_m| DatedDepth { date: day(year, 3, 1), depth_m, accuracy_m: 0.02 };
    let fit = fit_surveys(&[at(2016, 2.0), at(2020, 2.2), at(2024, 2.4)]).unwrap();
    // Calendar years differ from 4.0000 mean years by up to half a day: 4e-4.
    close(fit.rate.mean_m_per_yr, 0.05, 2e-5);
    close(fit.error_m_per_yr, 0.02 / 32.0_f64.sqrt(), 2e-6);
    close(fit.record_yr, 8.0, 2e-3);
    // One depth 0.12 m off the line: chi^2 = (2 x 0.04^2 + 0.08^2) / 0.0004 = 24 on one degree of freedom.
    let wide = fit_surveys(&[at(2016, 2.0), at(2020, 2.32), at(2024, 2.4)]).unwrap();
    close(wide.scatter_ratio, 24.0_f64.sqrt(), 2e-3);
    close(wide.error_m_per_yr / fit.error_m_per_yr, 24.0_f64.sqrt(), 2e-3);
}

#[test]
fn what_gives_no_rate_is_refused() {
    let at = |year, depth_m, accuracy_m| DatedDepth { date: day(year, 3, 1), depth_m, accuracy_m };
    assert_eq!(fit_surveys(&[at(2020, 2.0, 0.1), at(2020, 2.2, 0.1)]), Err(RateError::TooFewDays { days: 1 }));
    assert_eq!(fit_surveys(&[]), Err(RateError::TooFewDays { days: 0 }));
    assert!(matches!(fit_surveys(&[at(2020, 2.0, 0.0), at(2021, 2.2, 0.1)]), Err(RateError::Accuracy { .. })));
    assert!(matches!(fit_surveys(&[at(2020, 2.5, 0.1), at(2024, 2.2, 0.1)]), Err(RateError::NoDeepening { .. })));
    assert!(matches!(rate_from_edge(0.0, 70.0, 5.0), Err(RateError::Edge { .. })));
}

/// By hand: 0.1 m/yr over 72 years is 7.2 m; blocks of 8 m leave +-4 m, cov 0.556; blocks of 2 m the least of 0.3.
#[test]
fn the_edge_moves_in_blocks() {
    close(rate_from_edge(0.1, 72.0, 8.0).unwrap().uncertainty_cov, 8.0 / 14.4, 1e-12);
    close(rate_from_edge(0.1, 72.0, 2.0).unwrap().uncertainty_cov, 0.3, 1e-12);
}
