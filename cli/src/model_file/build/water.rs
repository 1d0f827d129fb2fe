//! Situations and surcharges.
use super::super::tree::{Tab, Val};
use super::Build;
use checker::model::{AboveTable, Groundwater, SeaLevel, Situation, Surcharge};

/// Unit weight of fresh water, N/m3 (1000 kg/m3 times 9.81 m/s2).
const WATER_UNIT_WEIGHT_N_PER_M3: f64 = 9810.0;

/// Unit weight of sea water, N/m3 (about 1025 kg/m3 times 9.81 m/s2).
const SEA_UNIT_WEIGHT_N_PER_M3: f64 = 10_050.0;

impl Build<'_> {
    /// The situations of the file; a dry one named "ordinary" where it has none.
    pub(super) fn situations(&mut self, file: &Tab) -> Vec<Situation> {
        let names: Vec<String> = file.tables("surcharges").iter().map(|table| table.text("name").to_owned()).collect();
        if !file.has("situations") {
            self.default_used("situations = one, \"ordinary\": no groundwater, all surcharges, no ground motion");
            return vec![ordinary(names.len())];
        }
        file.tables("situations").iter().map(|table| self.situation(table, &names)).collect()
    }

    fn situation(&mut self, table: &Tab, names: &[String]) -> Situation {
        let surcharges = match table.texts_if("surcharges") {
            Some(acting) => acting.to_vec().iter().map(|name| self.reference("surcharge", name, names, table.at("surcharges"))).collect(),
            None => (0..names.len()).collect(),
        };
        Situation {
            name: table.text("name").to_owned(),
            groundwater: match table.value("groundwater") {
                Some(Val::Points(points)) => Some(Groundwater::Table(points.clone())),
                Some(Val::Text(_)) => Some(Groundwater::DryObserved),
                _ => None,
            },
            sea_level: match table.value("sea_level_m") {
                Some(Val::Number(z_m)) => SeaLevel::Level(*z_m),
                _ => SeaLevel::OffTheFace,
            },
            water_unit_weight_n_per_m3: table.number("water_unit_weight_kn_m3"),
            sea_unit_weight_n_per_m3: table.number("sea_unit_weight_kn_m3"),
            above_table: match table.value("above_table") {
                Some(Val::Table(moist)) => AboveTable::Suction {
                    saturation: moist.number("saturation"),
                    suction_limit_pa: moist.number("suction_limit_kpa"),
                    basis: moist.text("basis").to_owned(),
                },
                _ => AboveTable::Dry,
            },
            crack_water_above_tip_m: table.number_if("crack_water_above_tip_m"),
            surcharges,
            inertia_seaward: table.number("inertia_seaward"),
            inertia_up: table.number("inertia_up"),
            annual_chance: table.number_if("annual_chance"),
        }
    }
}

fn ordinary(n_surcharges: usize) -> Situation {
    Situation {
        name: "ordinary".into(),
        groundwater: None,
        sea_level: SeaLevel::OffTheFace,
        water_unit_weight_n_per_m3: WATER_UNIT_WEIGHT_N_PER_M3,
        sea_unit_weight_n_per_m3: SEA_UNIT_WEIGHT_N_PER_M3,
        above_table: AboveTable::Dry,
        crack_water_above_tip_m: None,
        surcharges: (0..n_surcharges).collect(),
        inertia_seaward: 0.0,
        inertia_up: 0.0,
        annual_chance: None,
    }
}

pub(super) fn surcharge(table: &Tab) -> Surcharge {
    Surcharge {
        name: table.text("name").to_owned(),
        x_m: table.pair("x_m"),
        pressure_pa: table.number("pressure_kpa"),
        inertia: table.flag("inertia"),
    }
}
