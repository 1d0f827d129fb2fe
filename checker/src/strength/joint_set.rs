//! Slip on a plane of weakness that is partly open and partly bridged by rock.
use super::{End, RockCapacity, StrengthError, StrengthFactors, characteristic, mean};
use crate::model::JointSet;

/// Design values of one set of planes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct JointCapacity {
    /// Share of the plane that is open, 0 to 1.
    pub persistence: f64,
    /// Cohesion on the plane, Pa.
    pub cohesion_pa: f64,
    /// Tangent of the friction angle on the plane.
    pub tan_friction: f64,
    /// Tensile strength across the plane, never above its apex, Pa.
    pub tensile_strength_pa: f64,
}

/// Stress on a plane.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PlaneStress {
    /// Normal to the plane, tension positive, Pa.
    pub normal_pa: f64,
    /// Along the plane; positive where the ground above is driven down a seaward dip (seaward on a level plane), Pa.
    pub shear_pa: f64,
}

/// Shear demand and capacity on a plane.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Slip {
    /// Shear stress, Pa.
    pub demand_pa: f64,
    /// Shear strength of joint and rock bridge by their shares, Pa.
    pub capacity_pa: f64,
    /// Demand over capacity; `None` where there is demand and no capacity.
    pub utilization: Option<f64>,
}

impl JointCapacity {
    /// Design values of a set: means, or the 5 % fractiles of the stated distributions for cautious values.
    ///
    /// # Errors
    /// [`StrengthError`] where a distribution cannot exist, a strength is negative or an angle out of range.
    pub fn new(set: &JointSet, cautious: bool, factors: &StrengthFactors) -> Result<Self, StrengthError> {
        let value = |number| if cautious { characteristic(number, None, End::Low) } else { mean(number) };
        let angle_rad = value(set.friction_angle_rad)?;
        Self::from_values(set.persistence, [value(set.tensile_strength_pa)?, value(set.cohesion_pa)?], angle_rad, factors)
    }

    /// Design values from plain numbers, the path of a sample.
    ///
    /// `tension_and_cohesion_pa` are tensile strength and cohesion.
    ///
    /// # Errors
    /// As [`JointCapacity::new`].
    pub fn from_values(
        persistence: f64,
        tension_and_cohesion_pa: [f64; 2],
        friction_angle_rad: f64,
        factors: &StrengthFactors,
    ) -> Result<Self, StrengthError> {
        if !(0.0 <= persistence && persistence <= 1.0) {
            return Err(StrengthError::Distribution { what: "the persistence", limit: "0 to 1", value: persistence });
        }
        if !(0.0 <= friction_angle_rad && friction_angle_rad < std::f64::consts::FRAC_PI_2) {
            return Err(StrengthError::FrictionAngle { angle_rad: friction_angle_rad });
        }
        let [tension, cohesion] = tension_and_cohesion_pa;
        for (what, value_pa) in [("the joint's tensile strength", tension), ("the joint's cohesion", cohesion)] {
            if !(0.0 <= value_pa && value_pa.is_finite()) {
                return Err(StrengthError::Negative { what, value_pa });
            }
        }
        let (cohesion_pa, tan_friction) = (cohesion / factors.cohesion, friction_angle_rad.tan() / factors.friction);
        let (tensile_strength_pa, _) = super::cut_to_apex(tension / factors.tension, cohesion_pa, tan_friction);
        Ok(Self { persistence, cohesion_pa, tan_friction, tensile_strength_pa })
    }

    /// Shear strength of the plane under an effective normal stress (tension positive), Pa.
    ///
    /// ```text
    /// s = persistence (c_j + sigma' tan phi_j) + (1 - persistence) (c' + sigma' tan phi')
    /// ```
    ///
    /// with each bracket at least 0: an opened share carries nothing and takes nothing from the other.
    pub fn shear_strength_pa(&self, normal_pa: f64, rock: &RockCapacity) -> f64 {
        let joint = (self.cohesion_pa - normal_pa * self.tan_friction).max(0.0);
        let bridge = match rock {
            RockCapacity::Resists(strength) => strength.shear_strength_pa(-normal_pa),
            RockCapacity::NoStrength => 0.0,
        };
        self.persistence * joint + (1.0 - self.persistence) * bridge
    }
}

/// Effective stress on a plane that dips seaward by `dip_seaward_rad` (negative: landward), x landward and y up.
///
/// ```text
/// along the plane  t = (cos d, sin d)     across it  n = (-sin d, cos d)
/// normal = n . S n                        shear = -t . S n
/// ```
///
/// `t` points landward. The ground below acts on the ground above with `-S n`; it holds it back, landward along `t`, where shear is positive.
pub fn plane_stress(stress_pa: [f64; 3], dip_seaward_rad: f64) -> PlaneStress {
    let [sx, sy, txy] = stress_pa;
    let (sin, cos) = dip_seaward_rad.sin_cos();
    PlaneStress {
        normal_pa: sx * sin * sin + sy * cos * cos - 2.0 * txy * sin * cos,
        shear_pa: (sx - sy) * sin * cos - txy * (cos * cos - sin * sin),
    }
}

/// Slip check of a plane under the effective stress on it.
pub fn slip(on_plane: PlaneStress, joint: &JointCapacity, rock: &RockCapacity) -> Slip {
    let demand_pa = on_plane.shear_pa.abs();
    let capacity_pa = joint.shear_strength_pa(on_plane.normal_pa, rock);
    let utilization = if demand_pa <= 0.0 {
        Some(0.0)
    } else if 0.0 < capacity_pa {
        Some(demand_pa / capacity_pa)
    } else {
        None
    };
    Slip { demand_pa, capacity_pa, utilization }
}
