//! Outlook, assets, evidence, use below, remedies, place on the map.
use super::super::tree::Tab;
use super::Build;
use checker::diagnostic::{Diagnostic, nth};
use checker::model::{
    AcceptedChance, Asset, Below, CrsLocation, DatedDepth, DeepeningRate, EdgeRetreat, Evidence, EvidenceKind, Outlook, Remedy, RemedyKind,
    SeaLevelRise, StartsCarrying, Storms, Uncertain,
};

/// Default factor on capacity over demand: judgement, printed so wherever it is used.
const MODEL_FACTOR: Uncertain = Uncertain::Lognormal { mean: 1.0, cov: 0.3 };

impl Build<'_> {
    pub(super) fn outlook(&mut self, file: &Tab) -> Option<Outlook> {
        let assets: Vec<Asset> = file.tables("assets").iter().map(asset).collect();
        let Some(table) = file.table("outlook") else {
            if file.has("assets") && !file.has("outlook") {
                let message = "assets are judged in the outlook, but there is no [outlook]";
                self.collector
                    .add(Diagnostic::error("key.missing", nth("assets", 0), message).hint("add [outlook], or leave [[assets]] out"));
            }
            return None;
        };
        Some(Outlook {
            horizon_yr: table.number("horizon_years"),
            rate: rate(table),
            storms: table.table("storms").map(|table| Storms { per_yr: table.number("per_year"), jump_m: table.uncertain("jump_m") }),
            basis: table.text("basis").to_owned(),
            record_yr: table.number_if("record_years"),
            extrapolated: table.flag("extrapolated"),
            sea_level_rise: table.table("sea_level_rise_m_per_year").map(|table| SeaLevelRise {
                now_m_per_yr: table.number("now"),
                horizon_m_per_yr: table.number("horizon"),
                exponent: table.number("exponent"),
            }),
            model_factor: table.uncertain_if("model_factor").unwrap_or(MODEL_FACTOR),
            allowance_m: table.number("allowance_m"),
            allowance_for: table.owned_if("allowance_for"),
            samples: table.integer("samples") as u64,
            seed: table.integer("seed") as u64,
            assets,
        })
    }

    pub(super) fn evidence(&mut self, table: &Tab, rocks: &[String]) -> Evidence {
        Evidence {
            what: if table.text("what") == "fell" { EvidenceKind::Fell } else { EvidenceKind::Stood },
            date: table.date_if("date"),
            undercut_depth_m: table.uncertain("undercut_depth_m"),
            overhang_thickness_m: table.uncertain("overhang_thickness_m"),
            rock: self.reference("rock", table.text("same_rock_as"), rocks, table.at("same_rock_as")),
        }
    }

    pub(super) fn remedies(&mut self, file: &Tab, rocks: &[String]) -> Vec<Remedy> {
        let names: Vec<String> = file.tables("remedies").iter().map(|table| table.text("name").to_owned()).collect();
        let surcharges: Vec<String> = file.tables("surcharges").iter().map(|table| table.text("name").to_owned()).collect();
        let mut remedies = Vec::new();
        for (i_remedy, table) in file.tables("remedies").iter().enumerate() {
            let kind = match table.table("fill") {
                Some(fill) => Some(RemedyKind::Fill {
                    rock: self.reference("rock", fill.text("rock"), rocks, fill.at("rock")),
                    remaining_depth_m: fill.number("remaining_depth_m"),
                    starts_carrying: if fill.text("starts_carrying") == "at once" {
                        StartsCarrying::AtOnce
                    } else {
                        StartsCarrying::LaterChanges
                    },
                }),
                None => support(table).or_else(|| self.piles(table, &surcharges)).or_else(|| self.combination(table, &names, i_remedy)),
            };
            if let Some(kind) = kind {
                remedies.push(Remedy { name: table.text("name").to_owned(), kind });
            }
        }
        remedies
    }

    fn piles(&mut self, table: &Tab, surcharges: &[String]) -> Option<RemedyKind> {
        table.table("piles").map(|piles| RemedyKind::Piles {
            surcharge: self.reference("surcharge", piles.text("surcharge"), surcharges, piles.at("surcharge")),
            founded_z_m: piles.number("founded_z_m"),
            capacity_n: piles.number("capacity_kn"),
            spacing_along_cliff_m: piles.number("spacing_along_cliff_m"),
        })
    }

    fn combination(&mut self, table: &Tab, names: &[String], i_remedy: usize) -> Option<RemedyKind> {
        let used = table.texts_if("uses")?.to_vec();
        let indices: Vec<usize> = used.iter().map(|name| self.reference("measure", name, names, table.at("uses"))).collect();
        if indices.contains(&i_remedy) {
            let diagnostic = Diagnostic::error("remedies.uses", table.at("uses"), "a combination cannot use itself");
            self.collector.add(diagnostic.hint("name the single measures that act together"));
        }
        Some(RemedyKind::Combination(indices))
    }
}

fn support(table: &Tab) -> Option<RemedyKind> {
    let bars = table.table("bars").map(|bars| RemedyKind::Bars {
        from_m: bars.pair("from"),
        to_m: bars.pair("to"),
        force_n: bars.number("force_kn"),
        basis: bars.text("basis").to_owned(),
        spacing_along_cliff_m: bars.number("spacing_along_cliff_m"),
    });
    bars.or_else(|| {
        table.table("props").map(|props| RemedyKind::Props {
            behind_lip_m: props.number("behind_lip_m"),
            stiffness_n_per_m: props.number("stiffness_kn_per_mm"),
            capacity_n: props.number("capacity_kn"),
            spacing_along_cliff_m: props.number("spacing_along_cliff_m"),
        })
    })
}

fn rate(table: &Tab) -> DeepeningRate {
    if let Some(rate) = table.table("deepening_m_per_year") {
        return DeepeningRate::Given {
            mean_m_per_yr: rate.number("mean"),
            uncertainty_cov: rate.number("uncertainty_cov"),
            year_to_year_cov: rate.number("year_to_year_cov"),
        };
    }
    if let Some(edge) = table.table("edge_retreat") {
        return DeepeningRate::EdgeRetreat(EdgeRetreat {
            m_per_yr: edge.number("m_per_year"),
            from: edge.integer("from") as i32,
            to: edge.integer("to") as i32,
            basis: edge.text("basis").to_owned(),
        });
    }
    let dated =
        |table: &Tab| DatedDepth { date: table.date("date"), depth_m: table.number("depth_m"), accuracy_m: table.number("accuracy_m") };
    DeepeningRate::Surveys(table.tables("surveys").iter().map(dated).collect())
}

fn asset(table: &Tab) -> Asset {
    let (x_m, from_brow) = match table.number_if("back_from_brow_m") {
        Some(back_m) => ([back_m, back_m], true),
        None => (table.pair("x_m"), false),
    };
    Asset {
        name: table.text("name").to_owned(),
        x_m,
        from_brow,
        accepted: table.table("accepted").map(|accepted| AcceptedChance {
            probability: accepted.number("probability"),
            over_yr: accepted.number("over_years"),
            set_by: accepted.text("set_by").to_owned(),
        }),
        lead_time_yr: table.number("lead_time_years"),
    }
}

pub(super) fn location(table: &Tab) -> CrsLocation {
    CrsLocation {
        crs: table.text("crs").to_owned(),
        origin_easting_m: table.number("origin_easting_m"),
        origin_northing_m: table.number("origin_northing_m"),
        landward_grid_bearing_rad: table.number("landward_grid_bearing_deg"),
        represents_m: table.pair_if("represents_m"),
    }
}

pub(super) fn below(table: Option<&Tab>) -> Below {
    Below {
        use_of_ground: table.and_then(|table| table.owned_if("use")),
        keep_out_m: table.and_then(|table| table.number_if("keep_out_m")),
        basis: table.and_then(|table| table.owned_if("basis")),
    }
}
