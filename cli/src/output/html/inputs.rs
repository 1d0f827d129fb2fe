//! Tables of inputs: as given in the file's unit, as used inside, and what happens in between.
use checker::model::{
    AboveTable, Averaging, Carries, ContactLine, Groundwater, Growth, Headline, Model, Rock, RockStrength, SeaLevel, Situation,
    StrengthBasis, Uncertain,
};

use super::table::{Cell, Table};
use crate::output::words::{fixed, plain};

/// An uncertain number in the file's unit; `scale` turns SI into it.
fn given(value: &Uncertain, scale: f64, unit: &str) -> String {
    let show = |value: f64| plain(value * scale);
    let text = match *value {
        Uncertain::Exact(value) => show(value),
        Uncertain::Lognormal { mean, cov } => format!("mean {}, cov {} (lognormal)", show(mean), plain(cov)),
        Uncertain::Normal { mean, standard_deviation } => {
            format!("mean {}, standard deviation {} (normal)", show(mean), show(standard_deviation))
        }
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            format!(
                "mean {}, standard deviation {} within {} to {} (truncated normal)",
                show(mean),
                show(standard_deviation),
                show(min),
                show(max)
            )
        }
        Uncertain::Uniform { min, max } => format!("{} to {} (equally likely)", show(min), show(max)),
    };
    if unit.is_empty() { text } else { format!("{text} {unit}") }
}

/// SI value in short.
fn si(value: f64, unit: &str) -> Cell {
    let text = if value.abs() < 1e4 { plain(value) } else { format!("{value:.3e}") };
    Cell::number(value, format!("{text} {unit}").trim_end().to_owned())
}

/// Rocks, one row a quantity.
pub fn rocks(model: &Model) -> Table {
    let mut table =
        Table::new("rocks", "Rocks: as given and as used (mean values, SI units)", &["rock", "quantity", "as given", "as used", "remarks"]);
    for rock in &model.rocks {
        rock_rows(&mut table, rock);
    }
    table
}

fn rock_rows(table: &mut Table, rock: &Rock) {
    let mut row = |quantity: &str, given: String, used: Cell, remarks: &str| {
        table.row(vec![Cell::text(&rock.name), Cell::text(quantity), Cell::text(given), used, Cell::text(remarks)]);
    };
    let weight = &rock.unit_weight_n_per_m3;
    row("unit weight", given(weight, 1e-3, "kN/m³"), si(weight.mean(), "N/m³"), "moist, above water");
    let saturated = &rock.saturated_unit_weight_n_per_m3;
    row("saturated unit weight", given(saturated, 1e-3, "kN/m³"), si(saturated.mean(), "N/m³"), "below water");
    row("Young's modulus", format!("{} MPa", plain(rock.youngs_modulus_pa * 1e-6)), si(rock.youngs_modulus_pa, "Pa"), "of the rock mass");
    row("Poisson's ratio", plain(rock.poissons_ratio), si(rock.poissons_ratio, ""), "");
    match &rock.k0 {
        Some(k0) => row("k0", given(k0, 1.0, ""), si(k0.mean(), ""), "horizontal / vertical effective stress in the ground"),
        None => row("k0", "not measured".into(), Cell::text("ν/(1−ν) and 1.0"), "both are computed; the worse is shown"),
    }
    let basis = basis(rock.strength_basis);
    match &rock.strength {
        RockStrength::Typed(strength) => {
            let factor = rock.mass_factor;
            let wet = rock.wet_factor;
            let tension = format!("{basis}; mass factor {}, wet factor {}", plain(factor.tension), plain(wet));
            let cohesion = format!("{basis}; mass factor {}, wet factor {}", plain(factor.cohesion), plain(wet));
            let (st, c, phi) = (&strength.tensile_strength_pa, &strength.cohesion_pa, &strength.friction_angle_rad);
            row("tensile strength", given(st, 1e-3, "kPa"), si(st.mean() * factor.tension * wet, "Pa"), &tension);
            row("cohesion", given(c, 1e-3, "kPa"), si(c.mean() * factor.cohesion * wet, "Pa"), &cohesion);
            row("friction angle", given(phi, 1.0_f64.to_degrees(), "°"), si(phi.mean(), "rad"), basis);
        }
        RockStrength::Lab(file) => row("strength", format!("laboratory file {file}"), Cell::text("fitted"), basis),
        RockStrength::HoekBrown(rating) => {
            let text = format!(
                "GSI {}, mi {}, D {}, uniaxial strength {}",
                given(&rating.gsi, 1.0, ""),
                given(&rating.mi, 1.0, ""),
                plain(rating.disturbance),
                given(&rating.uniaxial_strength_pa, 1e-6, "MPa")
            );
            row("strength", text, Cell::text("Hoek–Brown relations of 2002"), basis);
        }
        RockStrength::None => row("strength", "none".into(), Cell::text("0"), "only loads, holds no tension"),
    }
    if let Some(tests) = rock.tests {
        row("number of tests", tests.to_string(), Cell::text(tests.to_string()), "sets the cautious value");
    }
}

fn basis(basis: StrengthBasis) -> &'static str {
    match basis {
        StrengthBasis::Intact => "from intact specimens",
        StrengthBasis::RockMass => "of the rock mass",
        StrengthBasis::BackAnalysed => "back-analysed",
    }
}

/// Layers from the top down.
pub fn layers(model: &Model) -> Table {
    let mut table = Table::new("layers", "Layers from the top down", &["layer", "rock", "base", "carries"]);
    for (i, layer) in model.layers.iter().enumerate() {
        let base = match &layer.base {
            None => "to the base of the model".to_owned(),
            Some(ContactLine::Level(level_m)) => format!("level at z = {} m", fixed(*level_m, 2)),
            Some(ContactLine::Dip { x_m, z_m, dip_seaward_rad }) => {
                let dip = dip_seaward_rad.to_degrees();
                let side = if dip < 0.0 { "landward" } else { "seaward" };
                format!("through {}, {} m, dips {}° {side}", fixed(*x_m, 2), fixed(*z_m, 2), fixed(dip.abs(), 1))
            }
            Some(ContactLine::Points(points)) => {
                points.iter().map(|p| format!("({}, {})", fixed(p[0], 2), fixed(p[1], 2))).collect::<Vec<_>>().join(" ") + " m"
            }
        };
        let carries = match layer.carries {
            Carries::LoadAndTension => "load and tension".to_owned(),
            Carries::LoadOnly => {
                let slope = layer.rest_slope_rad.map_or_else(String::new, |slope| format!(", rests at {}°", fixed(slope.to_degrees(), 0)));
                format!("load only{slope}")
            }
        };
        let rock = model.rocks.get(layer.rock).map_or("", |rock| &rock.name);
        table.row(vec![Cell::text((i + 1).to_string()), Cell::text(rock), Cell::text(base), Cell::text(carries)]);
    }
    table
}

/// Situations with water, loads and ground motion.
pub fn situations(model: &Model) -> Table {
    let head = ["situation", "groundwater", "sea on the face", "above the table", "surcharges", "ground motion"];
    let mut table = Table::new("situations", "Situations: what may act together; the worst one governs", &head);
    for situation in &model.situations {
        table.row(vec![
            Cell::text(&situation.name),
            Cell::text(groundwater(situation)),
            Cell::text(match situation.sea_level {
                SeaLevel::OffTheFace => "off the face".to_owned(),
                SeaLevel::Level(level_m) => format!("at z = {} m", fixed(level_m, 2)),
            }),
            Cell::text(match &situation.above_table {
                AboveTable::Dry => "dry".to_owned(),
                AboveTable::Suction { saturation, suction_limit_pa, basis } => {
                    format!("saturation {}, suction up to {} kPa ({basis})", plain(*saturation), plain(suction_limit_pa * 1e-3))
                }
            }),
            Cell::text(loads(model, situation)),
            Cell::text(motion(situation)),
        ]);
    }
    table
}

fn groundwater(situation: &Situation) -> String {
    match &situation.groundwater {
        None => "nothing stated: computed dry".to_owned(),
        Some(Groundwater::DryObserved) => "observed to be dry".to_owned(),
        Some(Groundwater::Table(points)) => {
            let points: Vec<String> = points.iter().map(|p| format!("({}, {})", fixed(p[0], 1), fixed(p[1], 1))).collect();
            format!("table through {} m", points.join(" "))
        }
    }
}

fn loads(model: &Model, situation: &Situation) -> String {
    let names: Vec<String> = situation
        .surcharges
        .iter()
        .filter_map(|i| model.surcharges.get(*i))
        .map(|load| {
            format!("{}, {} kPa on x = {} to {} m", load.name, plain(load.pressure_pa * 1e-3), fixed(load.x_m[0], 1), fixed(load.x_m[1], 1))
        })
        .collect();
    if names.is_empty() { "none".to_owned() } else { names.join("; ") }
}

fn motion(situation: &Situation) -> String {
    if situation.inertia_seaward.abs() + situation.inertia_up.abs() < 1e-12 {
        return "none".to_owned();
    }
    let chance = situation.annual_chance.map_or_else(String::new, |chance| format!(", chance {chance} a year"));
    format!("{} toward the sea, {} upward{chance}", plain(situation.inertia_seaward), plain(situation.inertia_up))
}

/// Growth of the undercut and how demands are taken.
pub fn settings(model: &Model) -> Table {
    let mut table = Table::new("settings", "Undercut and checks", &["quantity", "value"]);
    let mut row = |name: &str, value: String| table.row(vec![Cell::text(name), Cell::text(value)]);
    let undercut = &model.undercut;
    let growth = match undercut.growth {
        Growth::Advance => "advance: the back moves landward, roof and floor lengthen",
        Growth::Stretch => "stretch: the hollow is scaled",
    };
    row("growth of the undercut", growth.to_owned());
    row("searched down to", format!("{} m, in steps of {} m", plain(undercut.search_to_depth_m), plain(undercut.depth_step_m)));
    if let Some(width_m) = undercut.width_along_shore_m {
        row("width along the shore", format!("{} m", plain(width_m)));
    }
    let checks = &model.checks;
    let headline = match checks.headline {
        Headline::Cautious => "cautious: of each input the end that raises utilization",
        Headline::BestEstimate => "best estimate: mean values",
    };
    row("headline inputs", headline.to_owned());
    let averaging = match checks.averaging {
        Averaging::Given(length_m) => format!("{} m, given", plain(length_m)),
        Averaging::FromThickness => "0.1 × overhang thickness, at most 1.0 m".to_owned(),
    };
    row("averaging length", averaging);
    let f = &checks.partial_factors;
    let set =
        if f.en_1997_m2 { " (EN 1997-1 set M2; for rock tension no code gives a factor: it is this program's own choice)" } else { "" };
    row(
        "partial factors",
        format!(
            "tension {}, cohesion {}, friction {}, unit weight {}{set}",
            plain(f.tension),
            plain(f.cohesion),
            plain(f.friction),
            plain(f.unit_weight)
        ),
    );
    row("limit of utilization", format!("1 / {} (required reserve)", plain(checks.required_reserve)));
    row("target of the numerical error", fixed(checks.target_error, 3));
    table
}

/// Planes of weakness.
pub fn joints(model: &Model) -> Table {
    let head = ["set", "dip toward the sea", "share that is open", "cohesion", "friction angle", "tensile strength"];
    let mut table = Table::new("joints", "Planes of weakness", &head);
    for set in &model.joint_sets {
        table.row(vec![
            Cell::text(&set.name),
            Cell::text(format!("{}°", fixed(set.dip_seaward_rad.to_degrees(), 1))),
            Cell::text(plain(set.persistence)),
            Cell::text(given(&set.cohesion_pa, 1e-3, "kPa")),
            Cell::text(given(&set.friction_angle_rad, 1.0_f64.to_degrees(), "°")),
            Cell::text(given(&set.tensile_strength_pa, 1e-3, "kPa")),
        ]);
    }
    table
}
