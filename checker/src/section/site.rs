//! What is read once from a model: the surveyed section and how it grows.
use std::sync::Arc;

use super::body::{Parts, Section, Shared};
use super::crossing::{SectionError, crack_to_surface, self_crossing};
use super::extent::Extents;
use super::fairing::{Fairing, fair, mark_back};
use super::features::Features;
use super::growth::{Hollow, SAME_DEPTH_M};
use super::path::Path;
use crate::diagnostic::{Checked, Diagnostic};
use crate::model::Model;

/// The undercut as surveyed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SurveyedUndercut {
    /// Innermost point, m.
    pub back_m: [f64; 2],
    /// Outer lower edge of the roof, m.
    pub lip_m: [f64; 2],
    /// Where the vertical through the lip meets the surface before the back, m.
    pub mouth_m: [f64; 2],
    /// Horizontal, lip to back, m; after fairing, if any.
    pub depth_m: f64,
}

/// A section at all its undercut depths.
#[derive(Debug, Clone)]
pub struct Site {
    pub(crate) shared: Arc<Shared>,
    /// Surface from the seaward side to the mouth.
    pub(crate) lead: Path,
    pub(crate) hollow: Hollow,
    /// Surface from the lip to the landward side.
    pub(crate) rest: Path,
    /// Index of the brow in `rest`.
    pub(crate) brow: usize,
    pub(crate) round_corners_m: Option<f64>,
    pub(crate) surveyed: Option<SurveyedUndercut>,
    pub(crate) fairing: Option<Fairing>,
    pub(crate) other_hollows: Vec<([f64; 2], f64)>,
    pub(crate) search_to_depth_m: f64,
}

impl Site {
    /// Reads surface, undercut, layers and extents of a model.
    ///
    /// # Errors
    /// Every reason, with its key path, for which the section cannot be made: no undercut and no start shape, brow not found,
    /// a surface that crosses itself, a ground before erosion below the present one, extents or searched depths that do not fit.
    pub fn new(model: &Model) -> Result<Checked<Self>, Vec<Diagnostic>> {
        super::prepare::site(model)
    }

    /// The section at an undercut depth in m; 0 is the straight line from mouth to lip.
    ///
    /// The surveyed depth gives the surveyed surface, point for point.
    ///
    /// # Errors
    /// [`SectionError::Depth`] for a depth that is negative, not finite or beyond the model's landward side;
    /// [`SectionError::BreaksThrough`] and [`SectionError::MeetsCrack`] where the hollow does not fit into the section.
    pub fn at_depth(&self, depth_m: f64) -> Result<Section, SectionError> {
        let lip = self.rest.points_m()[0];
        let limit_m = self.shared.extents.landward_x_m - lip[0];
        if !(0.0 <= depth_m && depth_m < limit_m) {
            return Err(SectionError::Depth { depth_m, limit_m });
        }
        let mut hollow = self.hollow_at(depth_m);
        let mouth = self.lead.n_segments();
        let back = (SAME_DEPTH_M < depth_m).then(|| mouth + mark_back(&mut hollow));
        let lip = mouth + hollow.n_segments();
        let mut surface = self.lead.clone();
        surface.extend(&hollow);
        surface.extend(&self.rest);
        self.refuse_crossings(&surface, [mouth, lip], depth_m)?;
        let features = Features::new(&mut surface, [mouth, lip, lip + self.brow], back);
        Ok(Section::new(self.shared.clone(), Parts { depth_m, surface, features }))
    }

    fn refuse_crossings(&self, surface: &Path, [mouth, lip]: [usize; 2], depth_m: f64) -> Result<(), SectionError> {
        if let Some(at_m) = self_crossing(surface, mouth, lip) {
            return Err(SectionError::BreaksThrough { depth_m, at_m });
        }
        match crack_to_surface(surface, mouth, lip, &self.shared.cracks) {
            Some((crack, at_m)) => Err(SectionError::MeetsCrack { depth_m, crack, at_m }),
            None => Ok(()),
        }
    }

    /// The hollow of a depth measured after fairing.
    fn hollow_at(&self, depth_m: f64) -> Path {
        let Some(radius) = self.round_corners_m.filter(|_| SAME_DEPTH_M < depth_m) else { return self.hollow.at_depth(depth_m) };
        let lip = self.rest.points_m()[0];
        // Fairing changes the depth by an amount that hardly depends on the depth: correct the sharp hollow by what is missing.
        let mut sharp_depth = depth_m - self.fairing.map_or(0.0, |fairing| fairing.depth_change_m);
        let mut faired = fair(&self.hollow.at_depth(sharp_depth), radius).0;
        for _ in 0..100 {
            let missing = depth_m - (faired.largest_x_m() - lip[0]);
            if missing.abs() <= SAME_DEPTH_M {
                break;
            }
            sharp_depth += missing;
            faired = fair(&self.hollow.at_depth(sharp_depth), radius).0;
        }
        faired
    }

    /// The undercut as surveyed; `None` where the survey shows none.
    pub fn surveyed(&self) -> Option<SurveyedUndercut> {
        self.surveyed
    }

    /// Undercut depth as surveyed, m; 0 without one.
    pub fn surveyed_depth_m(&self) -> f64 {
        self.surveyed.map_or(0.0, |undercut| undercut.depth_m)
    }

    /// Depth down to which is searched, m.
    pub fn search_to_depth_m(&self) -> f64 {
        self.search_to_depth_m
    }

    /// Edge of the ground, m.
    pub fn brow_m(&self) -> [f64; 2] {
        self.shared.brow_m
    }

    /// Point at which the face ends below, the same at every depth, m.
    pub fn mouth_m(&self) -> [f64; 2] {
        self.lead.points_m()[self.lead.n_segments()]
    }

    /// Point at which the face ends above the hollow, the same at every depth, m.
    pub fn lip_m(&self) -> [f64; 2] {
        self.rest.points_m()[0]
    }

    /// Cliff height: brow minus mouth, m.
    pub fn cliff_height_m(&self) -> f64 {
        self.shared.cliff_height_m
    }

    /// Sides and base of the model.
    pub fn extents(&self) -> Extents {
        self.shared.extents
    }

    /// Back point and depth in m of every other hollow deeper than 0.5 m.
    pub fn other_hollows(&self) -> &[([f64; 2], f64)] {
        &self.other_hollows
    }

    /// What fairing did to the surveyed hollow (to the start shape at the greatest searched depth); `None` when not asked for.
    pub fn fairing(&self) -> Option<Fairing> {
        self.fairing
    }
}
