//! Report identity, section, layers, undercut, checks, probes, cuts, extent.
use super::super::tree::{Tab, Val};
use super::Build;
use crate::survey_csv;
use checker::diagnostic::Diagnostic;
use checker::model::{
    Averaging, BackShape, Carries, Checks, ContactLine, Crack, Cut, Extent, Growth, Headline, Layer, PartialFactors, Person, Probe,
    ReportIdentity, Rock, RockStrength, Setting, StartShape, SurfacePoint, SurfaceSection, Survey, Undercut,
};

/// Stiffness below which a layer without tensile strength only loads, Pa. Common practice, no source.
const LOOSE_BELOW_PA: f64 = 100e6;

impl Build<'_> {
    pub(super) fn report(&mut self, table: Option<&Tab>) -> ReportIdentity {
        let Some(table) = table else { return ReportIdentity::default() };
        let recommendations = table.owned_if("recommendations").filter(|name| !name.is_empty());
        ReportIdentity {
            project: table.owned_if("project"),
            client: table.owned_if("client"),
            section: table.owned_if("section"),
            revision: table.owned_if("revision"),
            date: table.date_if("date"),
            prepared_by: table.table("prepared_by").map(person),
            checked_by: table.table("checked_by").map(person),
            purpose: table.owned_if("purpose"),
            relied_on: table.texts("relied_on").to_vec(),
            not_investigated: table.texts("not_investigated").to_vec(),
            recommendations: recommendations.and_then(|name| self.recommendations(&name, &table.at("recommendations"))),
            valid_until: table.date_if("valid_until"),
        }
    }

    fn recommendations(&mut self, name: &str, at: &str) -> Option<String> {
        let text = self.extra_text(name, at)?;
        let lines: Vec<String> = text.lines().map(crate::diagnostics::clean).collect();
        Some(lines.join("\n"))
    }

    pub(super) fn section(&mut self, table: Option<&Tab>) -> SurfaceSection {
        let surface = table.map_or_else(Vec::new, |table| self.surface(table));
        SurfaceSection {
            surface,
            vertical_datum: table.and_then(|table| table.owned_if("vertical_datum")),
            original_surface_m: table.and_then(|table| table.points_if("original_surface")),
            brow_m: table.and_then(|table| table.pair_if("brow")),
            surveyed: table.and_then(|table| table.table("surveyed")).map(|table| Survey {
                date: table.date_if("date"),
                method: table.owned_if("method"),
                accuracy_m: table.number_if("accuracy_m"),
            }),
            round_corners_m: table.and_then(|table| table.number_if("round_corners_m")),
        }
    }

    fn surface(&mut self, table: &Tab) -> Vec<SurfacePoint> {
        if let Some(points) = table.points_if("surface") {
            return points.iter().map(|&[x_m, z_m]| SurfacePoint { x_m, z_m, inferred: false }).collect();
        }
        let Some(name) = table.owned_if("surface_csv").filter(|name| !name.is_empty()) else {
            return Vec::new();
        };
        let at = table.at("surface_csv");
        match self.extra_text(&name, &at) {
            Some(text) => survey_csv::read(&name, &text, &at, self.collector),
            None => Vec::new(),
        }
    }

    pub(super) fn layer(&mut self, table: &Tab, names: &[String], rocks: &[Rock]) -> Layer {
        let rock = self.reference("rock", table.text("rock"), names, table.at("rock"));
        let base = match table.value("base") {
            Some(Val::Number(z_m)) => Some(ContactLine::Level(*z_m)),
            Some(Val::Table(line)) => {
                Some(ContactLine::Dip { x_m: line.number("x_m"), z_m: line.number("z_m"), dip_seaward_rad: line.number("dip_seaward_deg") })
            }
            Some(Val::Points(points)) => Some(ContactLine::Points(points.clone())),
            Some(_) => Some(ContactLine::Level(f64::NAN)),
            None => None,
        };
        let carries = match (table.text_if("carries"), rocks.get(rock)) {
            (Some("load only"), _) => Carries::LoadOnly,
            (None, Some(rock)) if is_loose(rock) => {
                self.default_used(format!("{}.carries = \"load only\"", table.path));
                let message = format!(
                    "the layer of {:?} is taken to load only: its rock is under 100 MPa stiff and has no tensile strength",
                    rock.name
                );
                let hint = "write carries = \"load only\", or carries = \"load and tension\" where it is meant to carry";
                self.collector.add(Diagnostic::warning("layers.load-only", table.at("rock"), message).hint(hint));
                Carries::LoadOnly
            }
            (None, Some(_)) => {
                self.default_used(format!("{}.carries = \"load and tension\"", table.path));
                Carries::LoadAndTension
            }
            _ => Carries::LoadAndTension,
        };
        let rest_slope_rad = table.number_if("rest_slope_deg").or_else(|| self.rest_slope(table, carries, rocks.get(rock)));
        Layer { rock, base, carries, rest_slope_rad }
    }

    fn rest_slope(&mut self, table: &Tab, carries: Carries, rock: Option<&Rock>) -> Option<f64> {
        if carries != Carries::LoadOnly {
            return None;
        }
        if let Some(RockStrength::Typed(strength)) = rock.map(|rock| &rock.strength) {
            let angle_rad = strength.friction_angle_rad.mean();
            self.default_used(format!("{}.rest_slope_deg = {:.1}, the friction angle", table.path, angle_rad.to_degrees()));
            return Some(angle_rad);
        }
        let message = "a layer that only loads needs the slope at which it comes to rest";
        let hint = "add rest_slope_deg, for example from old slips nearby";
        self.collector.add(Diagnostic::error("layers.rest-slope", table.path.clone(), message).hint(hint));
        None
    }

    pub(super) fn undercut(&mut self, table: Option<&Tab>) -> Undercut {
        let word = |key: &str| table.map_or("", |table| table.text(key));
        let start_shape = table.filter(|table| table.has("floor_level_m") && table.has("roof_level_m")).map(|table| StartShape {
            floor_level_m: table.number("floor_level_m"),
            roof_level_m: table.number("roof_level_m"),
            back: match table.text("back") {
                "square" => BackShape::Square,
                "wedge" => BackShape::Wedge,
                _ => BackShape::Round,
            },
        });
        if let (Some(table), Some(_)) = (table, start_shape)
            && !table.has("back")
        {
            self.default_used("undercut.back = \"round\"");
        }
        if let (Some(table), None) = (table, start_shape)
            && table.has("back")
        {
            let message = "back has no effect without floor_level_m and roof_level_m";
            let hint = "add both levels where the survey shows no undercut; otherwise leave back out";
            self.collector.add(Diagnostic::warning("key.no-effect", table.at("back"), message).hint(hint));
        }
        Undercut {
            setting: match word("setting") {
                "cave" => Setting::Cave,
                "headland corner" => Setting::HeadlandCorner,
                "stack" => Setting::Stack,
                "arch" => Setting::Arch,
                _ => Setting::StraightCliff,
            },
            width_along_shore_m: table.and_then(|table| table.number_if("width_along_shore_m")),
            growth: if word("growth") == "stretch" { Growth::Stretch } else { Growth::Advance },
            search_to_depth_m: table.map_or(f64::NAN, |table| table.number("search_to_depth_m")),
            depth_step_m: table.map_or(f64::NAN, |table| table.number("depth_step_m")),
            start_shape,
        }
    }
}

/// Whether a rock is so soft and weak that its layer only loads.
fn is_loose(rock: &Rock) -> bool {
    let has_tension = match &rock.strength {
        RockStrength::Typed(strength) => strength.tensile_strength_pa.mean() > 0.0,
        RockStrength::None => false,
        RockStrength::Lab(_) | RockStrength::HoekBrown(_) => true,
    };
    rock.youngs_modulus_pa < LOOSE_BELOW_PA && !has_tension
}

fn person(table: &Tab) -> Person {
    Person { name: table.text("name").to_owned(), qualification: table.owned_if("qualification") }
}

pub(super) fn crack(table: &Tab) -> Crack {
    Crack { path_m: table.points("path") }
}

pub(super) fn probe(table: &Tab) -> Probe {
    let toward = table.pair_if("toward").map(|[x, z]| {
        let length = x.hypot(z);
        [x / length, z / length]
    });
    Probe { name: table.text("name").to_owned(), at_m: table.pair("at"), toward, over_m: table.number_if("over_m") }
}

pub(super) fn cut(table: &Tab) -> Cut {
    Cut { name: table.text("name").to_owned(), from_m: table.pair("from"), to_m: table.pair("to") }
}

pub(super) fn checks(table: Option<&Tab>) -> Checks {
    let none = PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false };
    let number = |key: &str| table.map_or(f64::NAN, |table| table.number(key));
    let partial_factors = match table.and_then(|table| table.value("partial_factors")) {
        Some(Val::Table(own)) => PartialFactors {
            tension: own.number("tension"),
            cohesion: own.number("cohesion"),
            friction: own.number("friction"),
            unit_weight: own.number("unit_weight"),
            en_1997_m2: false,
        },
        // EN 1997-1:2004 annex A, set M2: 1.25 on c' and tan phi', 1.0 on weight. There is no set for rock tension; 1.25 there is this program's choice.
        Some(Val::Text(word)) if word == "EN 1997-1 M2" => {
            PartialFactors { tension: 1.25, cohesion: 1.25, friction: 1.25, unit_weight: 1.0, en_1997_m2: true }
        }
        _ => none,
    };
    Checks {
        headline: if table.is_some_and(|table| table.text("headline") == "best estimate") {
            Headline::BestEstimate
        } else {
            Headline::Cautious
        },
        averaging: table.and_then(|table| table.number_if("averaging_length_m")).map_or(Averaging::FromThickness, Averaging::Given),
        partial_factors,
        required_reserve: number("required_reserve"),
        target_error: number("target_error"),
    }
}

pub(super) fn extent(table: Option<&Tab>) -> Extent {
    let number = |key: &str| table.and_then(|table| table.number_if(key));
    Extent { seaward_x_m: number("seaward_x_m"), landward_x_m: number("landward_x_m"), base_z_m: number("base_z_m") }
}
