//! Strengths from laboratory results: fits, fractiles and what must be said about them.
//!
//! ```text
//! LabResults (SI, each value with its line) ──► summarize() ──► LabSummary ──► rock_strength() ──► LabRock, ready for the model
//! ```
mod formulas;
mod grubbs;
mod regression;
mod rock;
mod sample;
mod summary;

pub use formulas::{
    STANDARD_GRAVITY_M_PER_S2, disc_tensile_strength_pa, equivalent_core_diameter_m, point_load_index_pa, point_load_size_factor,
    saturated_unit_weight_n_per_m3, uniaxial_size_factor,
};
pub use grubbs::{grubbs_critical, grubbs_statistic};
pub use regression::{Fit, FitError, Interval, Point};
pub use rock::{LabRock, rock_strength};
pub use sample::Sample;
pub use summary::{LabSummary, Value, summarize};

use crate::model::TestedState;

/// Where a result stands in its file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Origin {
    /// Line of the file, from 1.
    pub line: usize,
    /// Specimen as the file names it.
    pub specimen: String,
    /// Rock as the file names it.
    pub rock: Option<String>,
}

/// Whether pore water could leave the specimen.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Drainage {
    /// It could: effective strength.
    Drained,
    /// It could not: total strength.
    Undrained,
}

/// What a shear box specimen was sheared along.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ShearedAlong {
    /// Through the rock.
    Intact,
    /// Along an existing plane.
    Joint,
    /// The file does not say; treated as rock.
    NotStated,
}

/// One stage of a direct shear test.
#[derive(Debug, Clone, PartialEq)]
pub struct ShearStage {
    /// Where it stands.
    pub origin: Origin,
    /// Normal stress at peak, compression positive, Pa.
    pub normal_at_peak_pa: f64,
    /// Peak shear stress, Pa.
    pub peak_pa: Option<f64>,
    /// Normal stress at residual, compression positive, Pa.
    pub normal_at_residual_pa: f64,
    /// Residual shear stress, Pa.
    pub residual_pa: Option<f64>,
    /// Rate of shear displacement, m/s.
    pub rate_m_per_s: Option<f64>,
    /// Drainage where stated.
    pub drainage: Option<Drainage>,
    /// Plane of shearing.
    pub along: ShearedAlong,
    /// A remade specimen, which is not the rock.
    pub remoulded: bool,
    /// Moisture state where stated.
    pub state: Option<TestedState>,
}

/// One strength test with one result.
#[derive(Debug, Clone, PartialEq)]
pub struct StrengthTest {
    /// Where it stands.
    pub origin: Origin,
    /// Strength, or point load index for 50 mm, Pa.
    pub value_pa: f64,
    /// Specimen diameter, m.
    pub diameter_m: Option<f64>,
    /// Specimen length or thickness, m.
    pub length_m: Option<f64>,
    /// Moisture state where stated.
    pub state: Option<TestedState>,
}

/// One density test.
#[derive(Debug, Clone, PartialEq)]
pub struct DensityTest {
    /// Where it stands.
    pub origin: Origin,
    /// Density at natural moisture, kg/m3.
    pub bulk_kg_per_m3: Option<f64>,
    /// Dry density, kg/m3.
    pub dry_kg_per_m3: Option<f64>,
    /// Porosity, 0 to 1.
    pub porosity: Option<f64>,
}

/// The laboratory's own fit of one shear test, to compare with.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnFit {
    /// Where it stands.
    pub origin: Origin,
    /// Cohesion at peak, Pa.
    pub cohesion_pa: f64,
    /// Friction angle at peak, rad.
    pub friction_angle_rad: f64,
}

/// One modulus test.
#[derive(Debug, Clone, PartialEq)]
pub struct ModulusTest {
    /// Where it stands.
    pub origin: Origin,
    /// Young's modulus of the specimen, Pa.
    pub youngs_modulus_pa: f64,
    /// Poisson's ratio.
    pub poissons_ratio: Option<f64>,
}

/// Everything read from one file.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LabResults {
    /// Direct shear stages.
    pub shear: Vec<ShearStage>,
    /// The laboratory's own shear fits.
    pub own_fits: Vec<OwnFit>,
    /// Uniaxial compression.
    pub uniaxial: Vec<StrengthTest>,
    /// Moduli from uniaxial compression.
    pub modulus: Vec<ModulusTest>,
    /// Tensile strength.
    pub tensile: Vec<StrengthTest>,
    /// Point load index, reduced to 50 mm.
    pub point_load: Vec<StrengthTest>,
    /// Density.
    pub density: Vec<DensityTest>,
}

impl LabResults {
    /// Names of the rocks in the file, in order of appearance.
    pub fn rocks(&self) -> Vec<&str> {
        let mut names: Vec<&str> = Vec::new();
        for name in self.origins().filter_map(|origin| origin.rock.as_deref()) {
            if !names.contains(&name) {
                names.push(name);
            }
        }
        names
    }

    /// Number of results.
    pub fn len(&self) -> usize {
        self.origins().count()
    }

    /// Whether there is nothing.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// The results of one rock.
    #[must_use]
    pub fn of_rock(&self, name: &str) -> Self {
        let is_it = |origin: &Origin| origin.rock.as_deref() == Some(name);
        let mut only = self.clone();
        only.shear.retain(|x| is_it(&x.origin));
        only.own_fits.retain(|x| is_it(&x.origin));
        only.uniaxial.retain(|x| is_it(&x.origin));
        only.modulus.retain(|x| is_it(&x.origin));
        only.tensile.retain(|x| is_it(&x.origin));
        only.point_load.retain(|x| is_it(&x.origin));
        only.density.retain(|x| is_it(&x.origin));
        only
    }

    fn origins(&self) -> impl Iterator<Item = &Origin> {
        let strength = self.uniaxial.iter().chain(&self.tensile).chain(&self.point_load).map(|x| &x.origin);
        let shear = self.shear.iter().map(|x| &x.origin).chain(self.own_fits.iter().map(|x| &x.origin));
        shear.chain(strength).chain(self.density.iter().map(|x| &x.origin)).chain(self.modulus.iter().map(|x| &x.origin))
    }
}

#[cfg(test)]
mod tests;
