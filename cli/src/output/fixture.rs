//! Invented results for tests of the outputs: plausible numbers, and small meshes with an analytic stress field.
use checker::outcome::{
    BelowInfo, CheckCriticalDepth, CheckResult, CriticalDepth, CriticalDepths, CutResult, DepthResult, ExtentInfo, FieldSnapshot,
    Governing, HangsOn, ModelInfo, Note, Numerics, Outcome, PersonInfo, PointXz, ProbeResult, Program, ReportInfo, SectionInfo, Status,
    StressKpa, SurveyedState,
};
use fem_core::mesh::Mesh;

mod model;

pub(crate) use model::{MODEL_TEXT, model};

use super::Provenance;

const BROW: PointXz = [0.0, 31.2];
const FLOOR_Z: f64 = 0.9;
const ROOF_Z: f64 = 3.1;
const SURVEYED_M: f64 = 2.3;

pub(crate) fn provenance() -> Provenance {
    Provenance { command: "brinkline assess gannet-ledge.toml".into(), seed: None }
}

/// A complete outcome with eleven depths.
pub(crate) fn outcome() -> Outcome {
    let depths: Vec<DepthResult> = series().into_iter().map(depth_result).collect();
    let surveyed = depth_result(SURVEYED_M);
    Outcome {
        program: Program { name: "brinkline".into(), version: "0.1.0".into() },
        status: Status::Complete,
        headline: "Under its limit by this model today (cliff-top tension at 0.41 of its capacity); it may still fall. Critical undercut \
                   depth 5.10 m with cautious inputs."
            .into(),
        model: ModelInfo {
            title: "Gannet Ledge, section B".into(),
            file: "gannet-ledge.toml".into(),
            sha256: "9f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c15b0f00a08".into(),
            defaults_used: vec!["checks.target_error = 0.02".into(), "checks.averaging_length_m = 1.0 (0.1 x overhang thickness)".into()],
        },
        report: report(),
        section: section(),
        numerics: numerics(),
        surveyed: SurveyedState {
            depth_m: SURVEYED_M,
            governing: Some(Governing { check: "cliff-top tension", situation: "ordinary".into(), utilization: Some(0.41) }),
            checks: surveyed.checks,
            probes: surveyed.probes,
            cuts: surveyed.cuts,
        },
        critical_depth: Some(critical()),
        depths,
        hangs_on: hangs_on(),
        below: BelowInfo { use_of_ground: Some("public beach".into()), keep_out_m: 45.0, basis: "1.5 x cliff height".into() },
        outlook: None,
        warnings: vec![
            Note {
                code: "k0.not-measured".into(),
                message: "k0 of `upper limestone` was not measured: the worse of 0.32 and 1.0 is shown".into(),
            },
            Note { code: "survey.old".into(), message: "the survey is older than 2 years".into() },
        ],
        cautions: vec![
            "Plane strain overstates a short cavern, because its side walls carry part of the load.".into(),
            "Joints that nobody has seen govern more collapses than intact rock does.".into(),
            "Keep people off and from under an overhang that is being assessed.".into(),
        ],
    }
}

/// Fields at a few depths of [`outcome`].
pub(crate) fn fields() -> Vec<FieldSnapshot> {
    series().into_iter().chain([5.1]).map(snapshot).collect()
}

fn series() -> Vec<f64> {
    vec![0.0, 1.0, 2.0, SURVEYED_M, 3.0, 4.0, 5.0, 6.0, 7.0, 8.0, 10.0]
}

fn report() -> ReportInfo {
    ReportInfo {
        project: Some("Coast path review".into()),
        client: Some("Borough of Example".into()),
        section: Some("B".into()),
        revision: Some("A".into()),
        date: Some("2026-05-22".into()),
        prepared_by: Some(PersonInfo { name: "A. Writer".into(), qualification: Some("engineering geologist".into()) }),
        checked_by: None,
        purpose: Some("Decide on the line of the coast path.".into()),
        relied_on: vec!["Laser scan of 14 March 2026".into()],
        not_investigated: vec!["joint persistence behind the face".into()],
        recommendations: Some("Move the path to the landward side of the wall.\n\nResurvey after every winter.".into()),
        valid_until: Some("2027-05-22".into()),
        surveyed_on: Some("2026-03-14".into()),
        survey_method: Some("laser scan".into()),
        survey_accuracy_m: Some(0.05),
    }
}

fn section() -> SectionInfo {
    SectionInfo {
        cliff_height_m: 30.3,
        overhang_thickness_m: 28.1,
        surveyed_depth_m: SURVEYED_M,
        brow: BROW,
        lip: Some([0.0, ROOF_Z]),
        back: Some([SURVEYED_M, 2.0]),
        mouth: Some([0.0, FLOOR_Z]),
        surface: surface(SURVEYED_M),
        contacts: vec![vec![[0.0, 27.4], [120.0, 27.4]], vec![[0.0, 18.8], [40.0, 19.4], [120.0, 20.6]]],
        layer_rocks: vec!["clay cap".into(), "upper limestone".into(), "sandstone".into()],
        other_hollows: vec![],
    }
}

/// Sea to land with a slot of the given depth.
fn surface(depth_m: f64) -> Vec<PointXz> {
    let mut points = vec![[-120.0, FLOOR_Z], [0.0, FLOOR_Z]];
    if 0.0 < depth_m {
        points.extend([[depth_m, FLOOR_Z], [depth_m, ROOF_Z], [0.0, ROOF_Z]]);
    }
    points.extend([BROW, [120.0, BROW[1]]]);
    points
}

fn numerics() -> Numerics {
    Numerics {
        unknowns: 41234,
        elements: 10210,
        smallest_angle_deg: 28.6,
        extent: ExtentInfo { seaward_x_m: -120.0, landward_x_m: 120.0, base_z_m: -90.0 },
        equilibrium_residual: 1e-12,
        weight_kn_per_m: 512345.0,
        reaction_kn_per_m: 512345.0,
        smallest_pivot_ratio: 1e-7,
        target_error: 0.02,
        reached_error: 0.011,
        realized_k0: Some(0.35),
        asked_k0: Some(0.33),
        statics_nodal_difference: 3e-12,
        statics_stress_difference: 0.004,
    }
}

fn depth_result(depth_m: f64) -> DepthResult {
    let mut checks = Vec::new();
    for situation in ["ordinary", "wet winter, lowest tide"] {
        for inputs in ["cautious", "best estimate"] {
            let wet = if situation == "ordinary" { 1.0 } else { 1.06 };
            let care = if inputs == "cautious" { 1.0 } else { 0.62 };
            checks.extend(checks_of(depth_m, situation, inputs, wet * care));
        }
    }
    let stress_kpa = Some(StressKpa { xx: 40.0 + depth_m, zz: -12.0, xz: 3.0, yy: 5.0, major: 40.2 + depth_m, minor: -12.2 });
    let probe = ProbeResult {
        name: "under the hut".into(),
        situation: "ordinary".into(),
        at: [8.0, 30.0],
        displacement_mm: Some([-0.1 * depth_m, -0.3 * depth_m]),
        stress_kpa,
        mean_of_major: None,
    };
    let cut = CutResult {
        name: "vertical at the back".into(),
        situation: "ordinary".into(),
        axial_kn_per_m: 0.0,
        shear_kn_per_m: 640.0 * depth_m,
        moment_knm_per_m: 320.0 * depth_m * depth_m,
        fibre_from_kpa: -2.4 * depth_m * depth_m,
        fibre_to_kpa: 2.4 * depth_m * depth_m,
    };
    DepthResult { depth_m, checks, probes: vec![probe], cuts: vec![cut] }
}

fn checks_of(depth_m: f64, situation: &str, inputs: &'static str, factor: f64) -> Vec<CheckResult> {
    let closed_form = 3.0 * 24.0 * depth_m * depth_m / 28.1;
    let rows = [
        ("cliff-top tension", 48.0 + 30.9 * (depth_m - 0.2).max(0.0), 210.0, [15.0 + depth_m, 31.2], "upper limestone"),
        ("roof tension", 18.0 * depth_m - 12.0, 210.0, [0.4 * depth_m, ROOF_Z], "sandstone"),
        ("local shear", 90.0 + 12.0 * depth_m, 640.0, [depth_m, 2.0], "sandstone"),
        ("section bending", closed_form, 210.0, [depth_m, 27.4], "upper limestone"),
        ("section shear", 24.0 * depth_m, 380.0, [depth_m, ROOF_Z], "sandstone"),
    ];
    rows.into_iter()
        .map(|(check, demand_kpa, capacity_kpa, at, rock)| {
            let demand_kpa = demand_kpa * factor;
            let utilization = (demand_kpa / capacity_kpa).max(0.0);
            CheckResult {
                check,
                situation: situation.into(),
                inputs,
                demand_kpa,
                capacity_kpa,
                utilization: Some(utilization),
                error: 0.004 + 0.006 * utilization,
                background_kpa: check.contains("tension").then_some(48.0 * factor),
                averaging_length_m: check.contains("tension").then_some(1.0),
                over: 1.0 < utilization,
                at,
                rock: rock.into(),
                closed_form_demand_kpa: (check != "local shear" && check != "roof tension").then_some(closed_form),
                k0_case: check.contains("tension").then(|| "k0 = 1.0 (not measured)".into()),
                demand_kn_per_m: (check == "section shear").then_some(demand_kpa * 28.1),
                capacity_kn_per_m: (check == "section shear").then_some(capacity_kpa * 28.1),
                beyond_apex: false,
                short_segment: false,
                zone_m2: None,
                line: check.starts_with("section").then_some([[depth_m, ROOF_Z], [depth_m + 3.0, 31.2]]),
            }
        })
        .collect()
}

fn critical() -> CriticalDepths {
    let found = |depth_m: f64, lost_m: f64| CriticalDepth {
        found: true,
        depth_m: Some(depth_m),
        error_m: Some(0.05),
        check: Some("cliff-top tension"),
        situation: Some("wet winter, lowest tide".into()),
        rupture_line: Some([[depth_m, ROOF_Z], [lost_m, BROW[1]]]),
        ground_lost_m: Some(lost_m),
        ground_lost_range_m: Some([lost_m - 1.2, lost_m + 2.4]),
        block_m3_per_m: Some(210.0),
        searched_to_m: 10.0,
        note: None,
    };
    let best_estimate = CriticalDepth {
        found: false,
        depth_m: None,
        error_m: None,
        check: None,
        situation: None,
        rupture_line: None,
        ground_lost_m: None,
        ground_lost_range_m: None,
        block_m3_per_m: None,
        searched_to_m: 10.0,
        note: Some("not reached down to 10.0 m; nothing is known beyond".into()),
    };
    let each = |check, depth_m: Option<f64>| CheckCriticalDepth {
        check,
        situation: "wet winter, lowest tide".into(),
        inputs: "cautious",
        depth_m,
        error_m: depth_m.map(|_| 0.05),
        already_over: false,
        over_without_undercut: false,
        earlier_over: vec![],
    };
    CriticalDepths {
        cautious: found(5.1, 8.1),
        best_estimate,
        each_check: vec![each("cliff-top tension", Some(5.1)), each("section bending", Some(8.6)), each("roof tension", None)],
    }
}

fn hangs_on() -> Vec<HangsOn> {
    let row = |what: &str, low, high, unit, utilization: [f64; 2], depth: [Option<f64>; 2]| HangsOn {
        what: what.into(),
        low,
        high,
        unit,
        utilization: utilization.map(Some),
        critical_depth_m: depth,
    };
    vec![
        row("tensile strength of upper limestone", 147.0, 273.0, "kPa", [0.59, 0.32], [Some(3.4), Some(6.9)]),
        row("k0 of upper limestone", 0.25, 0.6, "", [0.38, 0.52], [Some(6.9), Some(4.2)]),
        row("averaging length", 0.5, 2.0, "m", [0.44, 0.37], [Some(4.8), Some(5.6)]),
        row("model depth", 2.0, 6.0, "x cliff height", [0.41, 0.42], [Some(5.1), Some(5.05)]),
        row("stiffness of sandstone", 0.5, 2.0, "x", [0.40, 0.43], [Some(5.3), None]),
    ]
}

/// A graded triangle mesh of the cliff with a slot of that depth and a made-up field: weight, and tension where overhangs have it.
pub(crate) fn snapshot(depth_m: f64) -> FieldSnapshot {
    let (mesh, layers) = cliff_mesh(depth_m);
    let corner = |i: u32| mesh.points_m[i as usize];
    let stress = |p: PointXz| {
        let cover = (BROW[1] - p[1]).max(0.0) * 24_000.0;
        let bulb = |at: PointXz, size: f64| (-((p[0] - at[0]).powi(2) + (p[1] - at[1]).powi(2)) / size.powi(2)).exp();
        let top = bulb([13.0 + depth_m, BROW[1]], 9.0) * 33_000.0 * depth_m;
        let roof = bulb([0.4 * depth_m, ROOF_Z], 2.0) * 60_000.0 * depth_m;
        let back = bulb([depth_m, 2.0], 2.5) * -90_000.0 * depth_m;
        [-0.33 * cover * 0.3 + top + roof + back, -cover * 0.9 + 1.6 * back, 0.2 * back + 0.1 * top, -0.25 * cover]
    };
    let effective_stress_pa: Vec<[[f64; 4]; 6]> = mesh.triangles.iter().map(|t| t.map(|i| stress(corner(i)))).collect();
    let strength = |region: u32| if region == 0 { 40_000.0 } else { 210_000.0 };
    let ratio = |i: usize, values: &[[f64; 4]; 6]| values.map(|s| (s[0].max(0.0)) / strength(mesh.regions[i]));
    let tension_utilization = effective_stress_pa.iter().enumerate().map(|(i, values)| ratio(i, values)).collect();
    let shear_utilization = effective_stress_pa.iter().map(|values| values.map(|s| (s[0] - s[1]).abs() / 2e6)).collect();
    FieldSnapshot {
        depth_m,
        situation: "ordinary".into(),
        displacement_m: mesh.points_m.iter().map(|p| [-1e-4 * depth_m, -2e-5 * depth_m * (p[1] / 30.0)]).collect(),
        water_pressure_pa: vec![[0.0; 6]; mesh.triangles.len()],
        rock_names: layers,
        effective_stress_pa,
        tension_utilization,
        shear_utilization,
        places: vec![("cliff-top tension", [15.0 + depth_m, 31.2]), ("roof tension", [0.4 * depth_m, ROOF_Z])],
        mesh,
    }
}

/// Grid lines with refinement, cells in the void left out, two triangles a cell, mid-side nodes added.
fn cliff_mesh(depth_m: f64) -> (Mesh, Vec<String>) {
    let mut xs: Vec<f64> = (0..=24).map(|i| f64::from(i) * 5.0).chain((1..60).map(|i| f64::from(i) * 0.6)).collect();
    xs.extend([-120.0, -80.0, -50.0, -30.0, -20.0, -12.0, -7.0, -4.0, -2.0, -1.0, depth_m]);
    let mut zs: Vec<f64> = (0..=9).map(|i| f64::from(i) * -10.0).chain((0..32).map(f64::from)).collect();
    zs.extend([-5.0, -2.0, FLOOR_Z, 1.5, 2.5, ROOF_Z, 3.6, 18.8, 27.4, BROW[1]]);
    for line in [&mut xs, &mut zs] {
        line.sort_by(f64::total_cmp);
        line.dedup_by(|a, b| (*a - *b).abs() < 0.08);
    }
    let mut builder = Builder::default();
    for z in zs.windows(2) {
        for x in xs.windows(2) {
            let center = [0.5 * (x[0] + x[1]), 0.5 * (z[0] + z[1])];
            let in_sea = center[0] < 0.0 && FLOOR_Z < center[1];
            let in_slot = 0.0 < center[0] && center[0] < depth_m && FLOOR_Z < center[1] && center[1] < ROOF_Z;
            if !in_sea && !in_slot {
                let region = u32::from(center[1] < 27.4) + u32::from(center[1] < 18.8);
                builder.cell([[x[0], z[0]], [x[1], z[0]], [x[1], z[1]], [x[0], z[1]]], region);
            }
        }
    }
    (builder.finish(), vec!["clay cap".into(), "upper limestone".into(), "sandstone".into()])
}

#[derive(Default)]
struct Builder {
    points: Vec<PointXz>,
    index: std::collections::BTreeMap<[u64; 2], u32>,
    corners: Vec<[u32; 3]>,
    regions: Vec<u32>,
}

impl Builder {
    fn node(&mut self, p: PointXz) -> u32 {
        let next = self.points.len() as u32;
        let key = p.map(|v| (v + 0.0).to_bits());
        *self.index.entry(key).or_insert_with(|| {
            self.points.push(p);
            next
        })
    }

    fn cell(&mut self, p: [PointXz; 4], region: u32) {
        let n = p.map(|p| self.node(p));
        self.corners.extend([[n[0], n[1], n[2]], [n[0], n[2], n[3]]]);
        self.regions.extend([region; 2]);
    }

    fn finish(mut self) -> Mesh {
        let n_corners = self.points.len();
        let corners = std::mem::take(&mut self.corners);
        let triangles = corners
            .iter()
            .map(|t| {
                let mid = [[t[0], t[1]], [t[1], t[2]], [t[2], t[0]]].map(|[a, b]| {
                    let (a, b) = (self.points[a as usize], self.points[b as usize]);
                    self.node([0.5 * (a[0] + b[0]), 0.5 * (a[1] + b[1])])
                });
                [t[0], t[1], t[2], mid[0], mid[1], mid[2]]
            })
            .collect();
        Mesh { points_m: self.points, n_corners, triangles, regions: self.regions, edges: Vec::new() }
    }
}
