//! From a rock as the model states it to the design values of one kind of inputs, saying what was done.
use super::{
    End, Reductions, RockCapacity, StrengthError, StrengthFactors, StrengthValues, characteristic, hoek_brown, mean, strength_factors,
};
use crate::diagnostic::{Checked, Diagnostic, child};
use crate::model::{Cohesive, HoekBrown, PartialFactors, Rock, RockStrength, StrengthBasis, Uncertain};

/// Which end of the stated numbers is used.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Inputs {
    /// Means.
    BestEstimate,
    /// 5 % fractiles of the strengths.
    Cautious,
}

/// Capacity of one rock and how it came about.
#[derive(Debug, Clone, PartialEq)]
pub struct Resolved {
    /// Design values.
    pub capacity: RockCapacity,
    /// What was done, one sentence each, for the report.
    pub notes: Vec<String>,
}

/// Share of intact tensile strength above which a mass factor is beyond what collapses have shown.
/// Overhangs that fell on reef limestone and weak sandstone mobilized 4-28 % of the intact strength (beam formula, compiled field cases).
const LARGEST_OBSERVED_MASS_FACTOR: f64 = 0.3;

/// Design values of a rock.
///
/// Cautious: the 5 % fractile by number of tests where `tests` is stated (EN 1990 Annex D), else of the stated distribution. A rating is
/// evaluated at both ends of each of its numbers; the lowest tensile strength and the (c', phi') pair with the lowest shear strength at half
/// its stress range are taken. `cliff_height_m` sets that range.
///
/// # Errors
/// One [`Diagnostic`] for everything that keeps the rock from having a strength, at `rocks.<name>` (see [`child`]).
pub fn design(rock: &Rock, inputs: Inputs, stated: &PartialFactors, cliff_height_m: f64) -> Result<Checked<Resolved>, Vec<Diagnostic>> {
    let at = child("rocks", &rock.name);
    let fault = |error: StrengthError| vec![as_diagnostic(error, &at)];
    let cautious = inputs == Inputs::Cautious;
    let factors = strength_factors(stated, cautious);
    let reductions = reductions(rock, factors, cliff_height_m).map_err(fault)?;
    let take = if cautious { Take::Low(rock.tests) } else { Take::Mean };
    let mut notes = Notes { rock, at: at.clone(), lines: Vec::new(), warnings: Vec::new() };
    let capacity = match &rock.strength {
        RockStrength::Lab(_) => return Err(fault(StrengthError::LabNotRead)),
        RockStrength::None => StrengthValues::NoStrength.capacity(&reductions),
        RockStrength::Typed(typed) => {
            let values = typed_values(typed, take, &mut notes).map_err(fault)?;
            values.capacity(&reductions)
        }
        RockStrength::HoekBrown(rating) => rating_capacity(rating, take, &reductions),
    }
    .map_err(fault)?;
    notes.say(&capacity, stated, inputs);
    Ok(Checked { value: Resolved { capacity, notes: notes.lines }, warnings: notes.warnings })
}

/// What stands between the rock's stated strengths and its capacity.
///
/// # Errors
/// [`StrengthError`] where a factor is not a finite number above 0 or the unit weight's distribution cannot exist.
pub fn reductions(rock: &Rock, factors: StrengthFactors, cliff_height_m: f64) -> Result<Reductions, StrengthError> {
    let (mass_tension, mass_cohesion) = match rock.strength_basis {
        StrengthBasis::Intact => (rock.mass_factor.tension, rock.mass_factor.cohesion),
        StrengthBasis::RockMass | StrengthBasis::BackAnalysed => (1.0, 1.0),
    };
    let all = [
        ("the mass factor of tension", mass_tension),
        ("the mass factor of cohesion", mass_cohesion),
        ("the wet factor", rock.wet_factor),
        ("the partial factor of tension", factors.tension),
        ("the partial factor of cohesion", factors.cohesion),
        ("the partial factor of friction", factors.friction),
    ];
    for (what, value) in all {
        if !(0.0 < value && value.is_finite()) {
            return Err(StrengthError::Distribution { what, limit: "a finite number above 0", value });
        }
    }
    let overburden_pa = mean(rock.unit_weight_n_per_m3)? * cliff_height_m;
    Ok(Reductions { mass_tension, mass_cohesion, wet: rock.wet_factor, factors, overburden_pa })
}

/// Which value of an uncertain strength is taken.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Take {
    Mean,
    /// 5 % fractile, by number of tests where that is stated.
    Low(Option<u32>),
}

fn typed_values(typed: &Cohesive, take: Take, notes: &mut Notes<'_>) -> Result<StrengthValues, StrengthError> {
    let numbers =
        [("tensile strength", typed.tensile_strength_pa), ("cohesion", typed.cohesion_pa), ("friction angle", typed.friction_angle_rad)];
    let mut values = [0.0; 3];
    for ((what, number), value) in numbers.into_iter().zip(&mut values) {
        *value = match take {
            Take::Mean => mean(number)?,
            Take::Low(tests) => notes.lifted_low_end(what, number, tests)?,
        };
    }
    let [tensile_strength_pa, cohesion_pa, friction_angle_rad] = values;
    Ok(StrengthValues::MohrCoulomb { tensile_strength_pa, cohesion_pa, friction_angle_rad })
}

fn rating_capacity(rating: &HoekBrown, take: Take, reductions: &Reductions) -> Result<RockCapacity, StrengthError> {
    // A low index and a low uniaxial strength lower every strength. Of mi both ends count: one lowers tension, the other friction.
    // The number of tests is that of the uniaxial strength; index and mi are judged, not sampled.
    let (gsi, uniaxial_strength_pa, mi_ends) = match take {
        Take::Mean => (mean(rating.gsi)?, mean(rating.uniaxial_strength_pa)?, [mean(rating.mi)?; 2]),
        Take::Low(tests) => (
            characteristic(rating.gsi, None, End::Low)?,
            characteristic(rating.uniaxial_strength_pa, tests, End::Low)?,
            [characteristic(rating.mi, None, End::Low)?, characteristic(rating.mi, None, End::High)?],
        ),
    };
    let [low, high] = mi_ends.map(|mi| {
        let values = hoek_brown::Rating { gsi, mi, disturbance: rating.disturbance, uniaxial_strength_pa };
        StrengthValues::HoekBrown(values).capacity(reductions)
    });
    let (RockCapacity::Resists(low), RockCapacity::Resists(high)) = (low?, high?) else {
        return Ok(RockCapacity::NoStrength);
    };
    let middle_pa = 0.5 * reductions.overburden_pa;
    let shear = if low.shear_strength_pa(middle_pa) <= high.shear_strength_pa(middle_pa) { low } else { high };
    let tension = if low.tensile_strength_pa <= high.tensile_strength_pa { low } else { high };
    Ok(RockCapacity::Resists(super::Strength {
        tensile_strength_pa: tension.tensile_strength_pa,
        cut_from_pa: tension.cut_from_pa,
        ..shear
    }))
}

fn as_diagnostic(error: StrengthError, at: &str) -> Diagnostic {
    match error {
        StrengthError::TooFewTests { .. } => Diagnostic::error("rock.tests", format!("{at}.tests"), error.to_string())
            .hint("leave `tests` out to use the fractile of the stated distribution, or test more specimens"),
        StrengthError::LabNotRead => Diagnostic::error("rock.lab", format!("{at}.lab"), error.to_string()),
        _ => Diagnostic::error("rock.strength", at, error.to_string()),
    }
}

/// Collects what the report must say about one rock.
struct Notes<'a> {
    rock: &'a Rock,
    at: String,
    lines: Vec<String>,
    warnings: Vec<Diagnostic>,
}

impl Notes<'_> {
    fn warn(&mut self, code: &'static str, message: String, hint: &str) {
        self.warnings.push(Diagnostic::warning(code, self.at.clone(), message).hint(hint));
    }

    /// Low end of a strength, lifted to 0 with a warning where only the fractile is negative. A negative mean is left to be refused.
    fn lifted_low_end(&mut self, what: &str, number: Uncertain, tests: Option<u32>) -> Result<f64, StrengthError> {
        let low = characteristic(number, tests, End::Low)?;
        if matches!(number, Uncertain::Exact(value) if 0.0 < value) {
            self.lines.push(format!("{what}: no scatter stated, the cautious value equals the best estimate"));
        }
        if low < 0.0 && 0.0 <= mean(number)? {
            self.warn(
                "rock.fractile-below-zero",
                format!("the cautious {what} falls below 0; 0 is used"),
                "state a lognormal distribution",
            );
            return Ok(0.0);
        }
        Ok(low)
    }

    fn say(&mut self, capacity: &RockCapacity, stated: &PartialFactors, inputs: Inputs) {
        let RockCapacity::Resists(strength) = capacity else {
            self.lines.push("no strength stated: the rock only loads".to_owned());
            return;
        };
        self.say_basis();
        match (inputs, self.rock.tests) {
            (Inputs::BestEstimate, _) => self.lines.push("means of the stated numbers".to_owned()),
            (Inputs::Cautious, Some(n)) => {
                self.lines.push(format!("5 % fractiles from {n} tests, deviation unknown (EN 1990 Annex D)"));
            }
            (Inputs::Cautious, None) => {
                self.lines.push("5 % fractiles of the stated distributions; number of tests not stated".to_owned());
            }
        }
        self.say_factors(stated, inputs);
        if let Some(from_pa) = strength.cut_from_pa {
            let (from, to) = (from_pa / 1e3, strength.tensile_strength_pa / 1e3);
            self.warn(
                "rock.tension-cut",
                format!("tensile strength {from:.1} kPa lies beyond the apex c'/tan phi' of the shear strength and is cut to {to:.1} kPa"),
                "check cohesion and friction angle against the tensile strength",
            );
        }
    }

    fn say_basis(&mut self) {
        let rock = self.rock;
        if rock.strength_basis == StrengthBasis::Intact {
            let (tension, cohesion) = (rock.mass_factor.tension, rock.mass_factor.cohesion);
            self.lines.push(format!("from intact specimen to rock mass: tensile strength x {tension}, cohesion x {cohesion}"));
            if LARGEST_OBSERVED_MASS_FACTOR < tension {
                self.warn(
                    "rock.mass-factor",
                    format!("{:.0} % of the intact tensile strength is used; documented collapses mobilized 5-30 % of it", 100.0 * tension),
                    "use a lower `mass_factor.tension`, or back-analysed or block-scale strengths",
                );
            }
        }
        if (rock.wet_factor - 1.0).abs() > f64::EPSILON {
            let on =
                if matches!(rock.strength, RockStrength::HoekBrown(_)) { "uniaxial strength" } else { "tensile strength and cohesion" };
            self.lines.push(format!("for wetting: {on} x {}", rock.wet_factor));
        }
    }

    fn say_factors(&mut self, stated: &PartialFactors, inputs: Inputs) {
        let used = strength_factors(stated, inputs == Inputs::Cautious);
        if stated.en_1997_m2 && inputs == Inputs::Cautious {
            self.lines.push(format!(
                "divided by EN 1997-1 set M2: c' by {}, tan phi' by {}; no code set exists for rock in tension, the divisor {} of tensile \
                 strength is this program's own choice",
                used.cohesion, used.friction, used.tension
            ));
        } else if stated.en_1997_m2 {
            self.lines.push("EN 1997-1 set M2 not applied: it acts on cautious values only".to_owned());
        } else if used != StrengthFactors::NONE {
            self.lines.push(format!(
                "divided by the model's own factors: tensile strength by {}, c' by {}, tan phi' by {}; no code set exists for rock in tension",
                used.tension, used.cohesion, used.friction
            ));
        }
    }
}
