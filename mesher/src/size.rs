//! Wanted element size at every point: the gradation-limited minimum over sources and a background.
//!
//! ```text
//! h(p) = min( largest, min over sources s of  size_s + gradation * max(0, |p - s| - within_s) )
//! ```
//!
//! The field is Lipschitz with constant `gradation`, so neighboring elements differ little however abrupt the sources are (docs/theory.md
//! eq. (2.1)).
mod index;

use crate::error::MeshError;
use crate::geometry::{Point, between, distance, foot};

pub(crate) use index::SizeIndex;

/// A background point stands for the element around it: its size holds within this many sizes.
const BACKGROUND_REACH: f64 = 0.6;

/// Wanted edge lengths.
#[derive(Debug, Clone, PartialEq)]
pub struct SizeField {
    /// Size far from every source, m.
    pub largest_m: f64,
    /// Growth of the size per distance; 0.1 grows slowly, 0.5 fast.
    pub gradation: f64,
    /// Points and segments near which elements are smaller.
    pub sources: Vec<SizeSource>,
    /// Sizes in m at points in m, for instance those that an error field asks for at the corner nodes of the last mesh. As the smallest governs,
    /// scatter from point to point makes the mesh finer than its mean: give means over the triangles around a node rather than single triangles.
    pub background: Vec<([f64; 2], f64)>,
}

/// A point or segment with a size around it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SizeSource {
    /// Start, m.
    pub from_m: [f64; 2],
    /// End, m; equal to the start for a point.
    pub to_m: [f64; 2],
    /// The size holds up to this distance, m.
    pub within_m: f64,
    /// The size, m.
    pub size_m: f64,
}

impl SizeSource {
    /// A size at a point.
    pub fn point(at_m: [f64; 2], size_m: f64) -> Self {
        Self::segment(at_m, at_m, size_m)
    }

    /// A size along a segment.
    pub fn segment(from_m: [f64; 2], to_m: [f64; 2], size_m: f64) -> Self {
        Self { from_m, to_m, within_m: 0.0, size_m }
    }

    /// The same size up to a distance.
    #[must_use]
    pub fn within(self, within_m: f64) -> Self {
        Self { within_m, ..self }
    }

    /// Distance of a point from the source, m.
    fn distance_m(&self, p_m: Point) -> f64 {
        if distance(self.from_m, self.to_m) <= 0.0 {
            return distance(p_m, self.from_m);
        }
        let (t, _) = foot(p_m, self.from_m, self.to_m);
        distance(p_m, between(self.from_m, self.to_m, t.clamp(0.0, 1.0)))
    }

    fn size_at_m(&self, p_m: Point, gradation: f64) -> f64 {
        self.size_m + gradation * (self.distance_m(p_m) - self.within_m).max(0.0)
    }
}

impl SizeField {
    /// The same size everywhere; gradation 0.3 for sources added later.
    pub fn uniform(size_m: f64) -> Self {
        Self { largest_m: size_m, gradation: 0.3, sources: Vec::new(), background: Vec::new() }
    }

    /// Wanted size at a point, m, by trying every source. The mesher itself asks an index that gives the same values.
    pub fn evaluate_m(&self, p_m: [f64; 2]) -> f64 {
        self.all_sources().map(|s| s.size_at_m(p_m, self.gradation)).fold(self.largest_m, f64::min)
    }

    /// Sources and background alike.
    pub(crate) fn all_sources(&self) -> impl Iterator<Item = SizeSource> + '_ {
        let background = self.background.iter().map(|&(at, size)| SizeSource::point(at, size).within(BACKGROUND_REACH * size));
        self.sources.iter().copied().chain(background)
    }

    /// # Errors
    /// [`MeshError::Setting`] where a size is not positive, a gradation or distance negative, or a value not finite.
    pub(crate) fn validate(&self) -> Result<(), MeshError> {
        let positive = |what, value: f64| {
            let fits = 0.0 < value && value.is_finite();
            if fits { Ok(()) } else { Err(MeshError::Setting { what, limit: "positive", value }) }
        };
        let not_negative = |what, value: f64| {
            let fits = 0.0 <= value && value.is_finite();
            if fits { Ok(()) } else { Err(MeshError::Setting { what, limit: "finite and not negative", value }) }
        };
        positive("the largest size in m", self.largest_m)?;
        not_negative("the gradation of the size", self.gradation)?;
        for source in &self.sources {
            positive("the size of a source in m", source.size_m)?;
            not_negative("the reach of a source in m", source.within_m)?;
        }
        for source in self.all_sources() {
            positive("the size of a source in m", source.size_m)?;
            for value in [source.from_m, source.to_m].concat() {
                if !value.is_finite() {
                    return Err(MeshError::Setting { what: "the place of a source in m", limit: "finite", value });
                }
            }
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests;
