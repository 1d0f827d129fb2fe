//! Slip and opening of a joint path.
use super::line::{LineValue, SectionForces};
use super::place::Pair;
use crate::model::Model;
use crate::strength::joint_set::JointCapacity;
use crate::strength::{RockCapacity, Strength};

/// What a path is held by in one case of inputs.
#[derive(Debug, Clone, Copy)]
pub(super) struct Held<'a> {
    /// Model.
    pub(super) model: &'a Model,
    /// Strength of each rock.
    pub(super) limits: &'a [Option<Strength>],
    /// Strength of each set.
    pub(super) joints: &'a [JointCapacity],
}

impl LineValue {
    /// Mean shear on the path against the mean of what joint and rock bridge carry.
    ///
    /// ```text
    /// demand    V / l                                          V from equilibrium of the cut-off body
    /// capacity  (1/l) sum_i l_i [ p (c_j + s_i' tan phi_j)+ + (1 - p) (c' + s_i' tan phi')+ ]    in rocks that hold the set
    ///           (1/l) sum_i l_i (c' + s_i' tan phi')+                                            in others
    /// ```
    ///
    /// with the effective compression `s_i'` of the stress field on piece `i`, shifted evenly so that its sum is that of equilibrium: an
    /// opened piece carries nothing. `None` for a line that is no path of a set.
    pub(super) fn slip(&self, held: &Held<'_>, forces: &SectionForces, coefficients: &[f64]) -> Option<Pair> {
        let joint = held.joints.get(self.set?)?;
        let normals = self.normal_stresses_pa(forces, coefficients);
        let capacity = |(piece, normal): (&super::Piece, &f64)| {
            let rock = held.limits[held.model.layers[piece.layer].rock].map_or(RockCapacity::NoStrength, RockCapacity::Resists);
            let whole = JointCapacity { persistence: 0.0, ..*joint };
            let plane = if self.holds_set(held.model, piece.layer) { joint } else { &whole };
            plane.shear_strength_pa(*normal, &rock) * (piece.along_m[1] - piece.along_m[0])
        };
        let total: f64 = self.pieces.iter().zip(&normals).map(capacity).sum();
        let length = self.length_m();
        Some(Pair { demand_pa: forces.shear_n_per_m / length, capacity_pa: total / length, beyond_apex: false })
    }

    /// Length of the path that tension opens from its free ends, against its length, both in m.
    ///
    /// Open is where the effective tension across the plane exceeds `p t_j + (1 - p) t_rock`, from an end up to the first piece that
    /// holds, with straight interpolation between the middles of the pieces. The stress field is that of unbroken rock.
    pub(super) fn opening(&self, held: &Held<'_>, forces: &SectionForces, coefficients: &[f64]) -> Option<Pair> {
        let joint = held.joints.get(self.set?)?;
        let normals = self.normal_stresses_pa(forces, coefficients);
        let excess = |(piece, normal): (&super::Piece, &f64)| {
            let rock = held.limits[held.model.layers[piece.layer].rock].map_or(0.0, |l| l.tensile_strength_pa);
            let share = if self.holds_set(held.model, piece.layer) { joint.persistence } else { 0.0 };
            (0.5 * (piece.along_m[0] + piece.along_m[1]), normal - share * joint.tensile_strength_pa - (1.0 - share) * rock)
        };
        let length = self.length_m();
        let from_below: Vec<(f64, f64)> = self.pieces.iter().zip(&normals).map(excess).collect();
        let from_above: Vec<(f64, f64)> = from_below.iter().rev().map(|(s, e)| (length - s, *e)).collect();
        let opened = (opened_m(&from_below, length) + opened_m(&from_above, length)).min(length);
        Some(Pair { demand_pa: opened, capacity_pa: length, beyond_apex: false })
    }

    fn holds_set(&self, model: &Model, layer: usize) -> bool {
        self.set.is_some_and(|s| model.joint_sets[s].rocks.contains(&model.layers[layer].rock))
    }
}

/// Distance from the end at which the excess first falls to 0; the excess at the end itself is taken on from the first two values.
fn opened_m(excess: &[(f64, f64)], length_m: f64) -> f64 {
    let first = excess[0];
    let end = match excess.get(1) {
        Some(second) => first.1 - first.0 * (second.1 - first.1) / (second.0 - first.0),
        None => first.1,
    };
    let mut last = (0.0, end);
    if end <= 0.0 {
        return 0.0;
    }
    for &(s, e) in excess {
        if e <= 0.0 {
            return last.0 + (s - last.0) * last.1 / (last.1 - e);
        }
        last = (s, e);
    }
    length_m
}

#[cfg(test)]
mod tests;
