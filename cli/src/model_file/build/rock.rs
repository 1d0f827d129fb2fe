//! Rocks, their strengths, and planes of weakness.
use super::super::tree::Tab;
use super::{Build, apparent_dip};
use checker::diagnostic::Diagnostic;
use checker::lab::LabRock;
use checker::model::{
    Cohesive, CrsLocation, DiscontinuitySurvey, HoekBrown, JointKind, JointSet, MassFactor, Rock, RockStrength, StrengthBasis, TestedState,
};

const TYPED: [&str; 3] = ["tensile_strength_kpa", "cohesion_kpa", "friction_angle_deg"];

impl Build<'_> {
    pub(super) fn rock(&mut self, name: &str, table: &Tab) -> Rock {
        let (strength, lab) = self.strength(name, table);
        let strength_basis = self.strength_basis(table);
        let unit_weight_n_per_m3 = table.uncertain("unit_weight_kn_m3");
        Rock {
            name: name.to_owned(),
            unit_weight_n_per_m3,
            saturated_unit_weight_n_per_m3: table.uncertain_if("saturated_unit_weight_kn_m3").unwrap_or(unit_weight_n_per_m3),
            youngs_modulus_pa: table.number("youngs_modulus_mpa"),
            poissons_ratio: table.number("poissons_ratio"),
            k0: table.uncertain_if("k0"),
            strength_basis,
            mass_factor: self.mass_factor(table, strength_basis),
            tests: table.integer_if("tests").map(|tests| tests as u32).or(lab.as_ref().map(|lab| lab.tests)),
            strength,
            tested: table.text_if("tested").map_or(lab.as_ref().and_then(|lab| lab.tested), tested_state),
            wet_factor: table.number("wet_factor"),
            uniaxial_strength_pa: table.uncertain_if("uniaxial_strength_mpa").or(lab.and_then(|lab| lab.uniaxial_strength_pa)),
            fracture_toughness_pa_sqrt_m: table.uncertain_if("fracture_toughness_mpa_sqrt_m"),
        }
    }

    /// One source of strength, with what a laboratory file gives beside it; two are an error that names both lines.
    fn strength(&mut self, name: &str, table: &Tab) -> (RockStrength, Option<LabRock>) {
        let sources: Vec<&str> = TYPED.into_iter().chain(["lab", "hoek_brown"]).filter(|key| table.has(key)).collect();
        let is_typed = |key: &str| TYPED.contains(&key);
        if let Some(first) = sources.first() {
            for second in sources[1..].iter().filter(|second| !is_typed(second)) {
                let message = format!("the strength is given twice, by {first} and by {second}");
                let diagnostic = Diagnostic::error("key.two-sources", table.at(second), message).hint("keep one source of strength");
                self.collector.add(diagnostic.also(table.at(first)));
            }
        }
        if let Some(rating) = table.table("hoek_brown") {
            let rating = RockStrength::HoekBrown(HoekBrown {
                gsi: rating.uncertain("gsi"),
                mi: rating.uncertain("mi"),
                disturbance: rating.number("disturbance"),
                uniaxial_strength_pa: rating.uncertain("uniaxial_strength_mpa"),
            });
            return (rating, None);
        }
        if let Some(file) = table.text_if("lab") {
            // Beside another source the file would only add findings about strengths that are not used.
            let lab = if sources.len() == 1 { self.lab(name, table) } else { None };
            return (lab.as_ref().map_or_else(|| RockStrength::Lab(file.to_owned()), |lab| lab.strength.clone()), lab);
        }
        if !TYPED.iter().all(|key| table.has(key)) {
            return (RockStrength::None, None);
        }
        let typed = RockStrength::Typed(Cohesive {
            tensile_strength_pa: table.uncertain(TYPED[0]),
            cohesion_pa: table.uncertain(TYPED[1]),
            friction_angle_rad: table.uncertain(TYPED[2]),
            cohesion_friction_correlation: table.table("correlation").map_or(0.0, |table| table.number("cohesion_friction")),
        });
        (typed, None)
    }

    fn strength_basis(&mut self, table: &Tab) -> StrengthBasis {
        let some_typed = TYPED.iter().any(|key| table.has(key));
        let needed = some_typed || table.has("lab");
        match table.text_if("strength_basis") {
            Some("intact") => StrengthBasis::Intact,
            Some("back-analysed") => StrengthBasis::BackAnalysed,
            None if needed => {
                let message = "the strengths are given without strength_basis";
                let hint = "add strength_basis = \"intact\" (with mass_factor), \"rock mass\" or \"back-analysed\"";
                let place = TYPED.iter().chain(&["lab"]).find(|key| table.has(key)).map_or_else(|| table.path.clone(), |key| table.at(key));
                self.collector.add(Diagnostic::error("rock.strength-basis", place, message).hint(hint));
                StrengthBasis::RockMass
            }
            _ => StrengthBasis::RockMass,
        }
    }

    fn mass_factor(&mut self, table: &Tab, basis: StrengthBasis) -> MassFactor {
        let is_intact = basis == StrengthBasis::Intact;
        if is_intact && !table.has("mass_factor") {
            let hint = "add mass_factor = { tension = …, cohesion = … }; observed collapses of limestone overhangs mobilized some 0.05 to 0.3 of \
                        the intact tensile strength";
            let message = "strength_basis is \"intact\" but there is no mass_factor, and it has no default";
            self.collector.add(Diagnostic::error("rock.mass-factor", table.at("strength_basis"), message).hint(hint));
        }
        if !is_intact && table.has("mass_factor") && table.has("strength_basis") {
            let message = "mass_factor belongs to strength_basis = \"intact\"; these strengths already describe the rock mass";
            let diagnostic =
                Diagnostic::error("rock.mass-factor", table.at("mass_factor"), message).hint("leave mass_factor out, or correct the basis");
            self.collector.add(diagnostic.also(table.at("strength_basis")));
        }
        match table.table("mass_factor") {
            Some(factor) if is_intact => MassFactor { tension: factor.number("tension"), cohesion: factor.number("cohesion") },
            _ => MassFactor { tension: 1.0, cohesion: 1.0 },
        }
    }

    pub(super) fn joint_set(&mut self, table: &Tab, rocks: &[String], location: Option<&CrsLocation>) -> JointSet {
        let names: Vec<String> = table.texts("rocks").to_vec();
        let rocks = names.iter().map(|name| self.reference("rock", name, rocks, table.at("rocks"))).collect();
        let (dip_seaward_rad, strike_off_cliff_rad) = self.dip(table, location);
        JointSet {
            name: table.text("name").to_owned(),
            kind: match table.text("kind") {
                "bedding" => JointKind::Bedding,
                "fault" => JointKind::Fault,
                _ => JointKind::Joint,
            },
            rocks,
            dip_seaward_rad,
            strike_off_cliff_rad,
            persistence: table.number("persistence"),
            spacing_m: table.number_if("spacing_m"),
            cohesion_pa: table.uncertain("cohesion_kpa"),
            friction_angle_rad: table.uncertain("friction_angle_deg"),
            tensile_strength_pa: table.uncertain("tensile_strength_kpa"),
        }
    }

    fn dip(&mut self, table: &Tab, location: Option<&CrsLocation>) -> (f64, Option<f64>) {
        let (Some(dip_rad), Some(direction_rad)) = (table.number_if("dip_deg"), table.number_if("dip_direction_deg")) else {
            return (table.number("dip_seaward_deg"), None);
        };
        let Some(location) = location else {
            let message = "a true dip direction needs the direction of the section";
            let hint = "add [location] with landward_grid_bearing_deg, or write the dip in the section as dip_seaward_deg";
            self.collector.add(Diagnostic::error("joints.direction", table.at("dip_direction_deg"), message).hint(hint));
            return (f64::NAN, None);
        };
        let (apparent_rad, strike_off_rad) = apparent_dip(dip_rad, direction_rad, location);
        (apparent_rad, Some(strike_off_rad))
    }
}

pub(super) fn discontinuity_survey(table: &Tab) -> DiscontinuitySurvey {
    DiscontinuitySurvey { none_seen_by: table.text("none_seen_by").to_owned(), date: table.date("date"), reach_m: table.number("reach_m") }
}

fn tested_state(word: &str) -> Option<TestedState> {
    match word {
        "dry" => Some(TestedState::Dry),
        "natural" => Some(TestedState::Natural),
        "saturated" => Some(TestedState::Saturated),
        _ => None,
    }
}
