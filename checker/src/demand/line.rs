//! Section forces on a straight rupture line, and what they ask of the rock on it.
use super::place::Pair;
use crate::analysis::load_cases::{State, saturated_surplus};
use crate::model::{Carries, Model};
use crate::strength::Strength;

/// A straight line from the hollow to the ground with the body that it cuts off.
#[derive(Debug, Clone, PartialEq)]
pub struct LineValue {
    /// End at the hollow, m.
    pub from_m: [f64; 2],
    /// End at the ground, m.
    pub to_m: [f64; 2],
    /// Area of each layer in the cut-off body, m2.
    pub areas_m2: Vec<f64>,
    /// Centroid of each layer in it, m (anything where the area is 0).
    pub centroids_m: Vec<[f64; 2]>,
    /// Strip of each surcharge on it: loaded width in m and middle in m; width 0 where it carries none.
    pub surcharges: Vec<(f64, [f64; 2])>,
    /// Pieces of the line, from the hollow up, one a layer crossed.
    pub pieces: Vec<Piece>,
    /// Layers that only load above the upper end, with their thickness there, m: they break off upright and lie back.
    pub loose_m: Vec<(usize, f64)>,
    /// Joint set whose path it is; `None` = a rupture line.
    pub set: Option<usize>,
    /// What each different water does.
    pub waters: Vec<LineWater>,
    /// Water of each situation; a missing entry is dry.
    pub water_of_situation: Vec<Option<usize>>,
}

/// One water on a rupture line.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct LineWater {
    /// Forces of the sea on the cut-off body, N/m, and where they act, m.
    pub sea: Vec<([f64; 2], [f64; 2])>,
    /// Resultant of `alpha u_w` along the line, N/m, and its moment about the middle with arms up the line, N.
    pub thrust: [f64; 2],
    /// Area of each layer below the table in the body, m2; empty where no saturated rock weighs more.
    pub submerged_m2: Vec<f64>,
    /// Centroid of each of them, m.
    pub submerged_centroids_m: Vec<[f64; 2]>,
}

/// The part of a rupture line in one layer.
#[derive(Debug, Clone, PartialEq)]
pub struct Piece {
    /// Layer.
    pub layer: usize,
    /// Ends along the line from its lower end, m.
    pub along_m: [f64; 2],
    /// Mean effective normal stress on the piece for every unit load case, Pa, tension positive.
    pub normal_pa: Vec<f64>,
    /// The same on the last mesh but one.
    pub normal_coarse_pa: Vec<f64>,
}

/// Resultants on a line per meter of cliff.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SectionForces {
    /// Axial force, N/m, positive in tension.
    pub axial_n_per_m: f64,
    /// Shear force, N/m, positive when it carries the seaward side's weight.
    pub shear_n_per_m: f64,
    /// Moment about the middle of the line, N, positive when it opens the upper end.
    pub moment_n: f64,
}

impl LineValue {
    /// Length, m.
    pub fn length_m(&self) -> f64 {
        (self.to_m[0] - self.from_m[0]).hypot(self.to_m[1] - self.from_m[1])
    }

    /// The same line with the stress of the last mesh but one.
    #[must_use]
    pub fn on_coarse_mesh(&self) -> Self {
        let mut copy = self.clone();
        for piece in &mut copy.pieces {
            piece.normal_pa.clone_from(&piece.normal_coarse_pa);
        }
        copy
    }

    /// Water on the line in a situation.
    fn water(&self, situation: usize) -> Option<&LineWater> {
        self.water_of_situation.get(situation).copied().flatten().and_then(|w| self.waters.get(w))
    }

    /// Section forces of the effective stress: those of the total stress with the pore thrust added,
    /// `N' = N + int alpha u_w ds`, `M' = M + int alpha u_w y ds`.
    pub fn effective_forces(&self, model: &Model, state: &State) -> SectionForces {
        let total = self.forces(model, state);
        let [thrust, moment] = self.water(state.situation).map_or([0.0; 2], |w| w.thrust);
        SectionForces { axial_n_per_m: total.axial_n_per_m + thrust, moment_n: total.moment_n + moment, ..total }
    }

    /// Section forces of the total stress by equilibrium of the cut-off body under its weight, ground motion, surcharges and sea.
    ///
    /// With `e` the unit vector up the line, `n` the normal that points out of the body (landward), `F_k` the loads and `r_k`
    /// their arms from the middle of the line:
    ///
    /// ```text
    /// N = - sum F_k . n        V = - sum F_k . e        M = sum (r_x F_z - r_z F_x)
    /// ```
    pub fn forces(&self, model: &Model, state: &State) -> SectionForces {
        let situation = &model.situations[state.situation];
        let (kh, kv) = (situation.inertia_seaward, situation.inertia_up);
        let weight = |j: usize| state.unit_weight_n_per_m3[model.layers[j].rock] * self.areas_m2[j];
        let layers = (0..self.areas_m2.len()).filter(|&j| 0.0 < self.areas_m2[j]);
        let bodies = layers.map(|j| ([-kh * weight(j), -(1.0 - kv) * weight(j)], self.centroids_m[j]));
        let acting = self.surcharges.iter().enumerate().filter(|(q, s)| 0.0 < s.0 && situation.surcharges.contains(q));
        let strips = acting.map(|(q, s)| {
            let load = model.surcharges[q].pressure_pa * s.0;
            let drag = if model.surcharges[q].inertia { kh } else { 0.0 };
            ([-drag * load, -(1.0 - kv) * load], s.1)
        });
        let water = self.water(state.situation);
        let below = water.iter().flat_map(|w| w.submerged_m2.iter().zip(&w.submerged_centroids_m).enumerate());
        let wet = below.filter(|(_, (area, _))| 0.0 < **area).map(|(j, (area, at))| {
            let more = state.unit_weight_n_per_m3[model.layers[j].rock] * saturated_surplus(model, j) * area;
            ([-kh * more, -(1.0 - kv) * more], *at)
        });
        let sea = water.iter().flat_map(|w| w.sea.iter().copied());
        self.resultants(bodies.chain(strips).chain(wet).chain(sea))
    }

    /// Resultants of given loads `(force, point)`.
    fn resultants(&self, loads: impl Iterator<Item = ([f64; 2], [f64; 2])>) -> SectionForces {
        let length = self.length_m();
        let e = [(self.to_m[0] - self.from_m[0]) / length, (self.to_m[1] - self.from_m[1]) / length];
        let n = [e[1], -e[0]];
        let middle = [0.5 * (self.from_m[0] + self.to_m[0]), 0.5 * (self.from_m[1] + self.to_m[1])];
        let mut sum = SectionForces { axial_n_per_m: 0.0, shear_n_per_m: 0.0, moment_n: 0.0 };
        for (f, at) in loads {
            let r = [at[0] - middle[0], at[1] - middle[1]];
            sum.axial_n_per_m -= f[0] * n[0] + f[1] * n[1];
            sum.shear_n_per_m -= f[0] * e[0] + f[1] * e[1];
            sum.moment_n += r[0] * f[1] - r[1] * f[0];
        }
        sum
    }

    /// Largest ratio of fibre tension to tensile strength over both ends of every layer on the line, as place along the line,
    /// layer and pair. `None` where no layer on the line carries tension.
    ///
    /// With `E' = E / (1 - nu^2)`, 0 for a layer that only loads, and `y` from the middle of the line:
    ///
    /// ```text
    /// | int E'    int E' y   | |e0   |   |N|
    /// | int E' y  int E' y^2 | |kappa| = |M|        sigma(y) = E' (e0 + kappa y)
    /// ```
    pub fn bending(&self, model: &Model, forces: &SectionForces, limits: &[Option<Strength>]) -> Option<(f64, usize, Pair)> {
        let half = 0.5 * self.length_m();
        let stiffness = |layer: usize| {
            let rock = &model.rocks[model.layers[layer].rock];
            match model.layers[layer].carries {
                Carries::LoadAndTension => rock.youngs_modulus_pa / (1.0 - rock.poissons_ratio.powi(2)),
                Carries::LoadOnly => 0.0,
            }
        };
        let mut k = [0.0; 3];
        for piece in &self.pieces {
            let (a, b) = (piece.along_m[0] - half, piece.along_m[1] - half);
            let e = stiffness(piece.layer);
            k[0] += e * (b - a);
            k[1] += e * (b * b - a * a) / 2.0;
            k[2] += e * (b.powi(3) - a.powi(3)) / 3.0;
        }
        let det = k[0] * k[2] - k[1] * k[1];
        if !(0.0 < det) {
            return None;
        }
        let e0 = (forces.axial_n_per_m * k[2] - forces.moment_n * k[1]) / det;
        let kappa = (forces.moment_n * k[0] - forces.axial_n_per_m * k[1]) / det;
        let mut worst: Option<(f64, usize, Pair)> = None;
        for piece in &self.pieces {
            let Some(limit) = limits[model.layers[piece.layer].rock] else { continue };
            for along in piece.along_m {
                let stress = stiffness(piece.layer) * (e0 + kappa * (along - half));
                let pair = Pair { demand_pa: stress, capacity_pa: limit.tensile_strength_pa, beyond_apex: false };
                if worst.is_none_or(|w| ratio(&w.2) < ratio(&pair)) {
                    worst = Some((along, piece.layer, pair));
                }
            }
        }
        worst
    }

    /// Effective normal stress of every piece, tension positive, Pa: that of the field, shifted evenly to the sum of equilibrium.
    pub(super) fn normal_stresses_pa(&self, forces: &SectionForces, coefficients: &[f64]) -> Vec<f64> {
        let field = |piece: &Piece| coefficients.iter().zip(&piece.normal_pa).map(|(c, s)| c * s).sum::<f64>();
        let stresses: Vec<f64> = self.pieces.iter().map(field).collect();
        let total: f64 = self.pieces.iter().zip(&stresses).map(|(p, s)| s * (p.along_m[1] - p.along_m[0])).sum();
        let correction = (forces.axial_n_per_m - total) / self.length_m();
        stresses.iter().map(|s| s + correction).collect()
    }

    /// Mean shear over the line against the mean of `c' + sigma' tan phi'`.
    ///
    /// The normal force is that of equilibrium; the stress field only splits it among the layers:
    /// `N_i = N_i,field + (N - sum N_field) l_i / l`. A layer without strength, or pulled beyond its apex, adds nothing.
    pub fn shear(&self, model: &Model, forces: &SectionForces, coefficients: &[f64], limits: &[Option<Strength>]) -> Pair {
        let length = self.length_m();
        let strength = |(piece, normal): (&Piece, &f64)| {
            let limit = limits[model.layers[piece.layer].rock]?;
            Some(limit.shear_strength_pa(-normal) * (piece.along_m[1] - piece.along_m[0]))
        };
        let normals = self.normal_stresses_pa(forces, coefficients);
        let capacity: f64 = self.pieces.iter().zip(&normals).filter_map(strength).sum();
        Pair { demand_pa: forces.shear_n_per_m / length, capacity_pa: capacity / length, beyond_apex: false }
    }
}

/// Order of fibres: utilization, or the sign of the demand where nothing pulls.
fn ratio(pair: &Pair) -> f64 {
    if 0.0 < pair.capacity_pa { pair.demand_pa / pair.capacity_pa } else { pair.demand_pa.signum() * f64::MAX }
}
