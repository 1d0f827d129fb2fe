//! The mesh that the solver works on: nodes, six-node triangles with a region each, tagged edges.
mod check;
pub mod quality;
pub mod structured;

pub use check::MeshFault;

/// "No element on that side" in [`TaggedEdge::left`] and [`TaggedEdge::right`].
pub const NO_ELEMENT: u32 = u32::MAX;

/// A plane mesh of six-node triangles.
///
/// # Guarantees
/// - every triangle runs counterclockwise: corners 0, 1, 2, then the nodes on the sides 01, 12, 20;
/// - nodes `0 .. n_corners` are corner nodes, the rest mid-side nodes; every node belongs to a triangle;
/// - two triangles that share a side share its three nodes, except across an opened slit;
/// - every boundary side carries at least one [`TaggedEdge`].
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Mesh {
    /// Node coordinates in m, shape `[n_nodes][2]`.
    pub points_m: Vec<[f64; 2]>,
    /// Number of corner nodes; they come first.
    pub n_corners: usize,
    /// Node numbers of the triangles, shape `[n_elements][6]`.
    pub triangles: Vec<[u32; 6]>,
    /// Region number of each triangle, shape `[n_elements]`.
    pub regions: Vec<u32>,
    /// Sides that lie on an input line; a side on two lines appears once for each tag.
    pub edges: Vec<TaggedEdge>,
}

/// A side of the mesh that lies on an input line.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct TaggedEdge {
    /// Tag of the input line.
    pub tag: u32,
    /// Start, end and mid-side node; runs in the direction of the input line.
    pub nodes: [u32; 3],
    /// Element on the left of start to end, or [`NO_ELEMENT`].
    pub left: u32,
    /// Element on the right of start to end, or [`NO_ELEMENT`].
    pub right: u32,
}

impl Mesh {
    /// Area of an element in m², curved sides included.
    pub fn area_m2(&self, element: usize) -> f64 {
        crate::element::area_m2(&crate::element::element_points_m(self, element))
    }

    /// Total area per region number in m².
    pub fn region_areas_m2(&self) -> Vec<f64> {
        let n_regions = self.regions.iter().max().map_or(0, |&r| r as usize + 1);
        let mut areas = vec![0.0; n_regions];
        for (element, &region) in self.regions.iter().enumerate() {
            areas[region as usize] += self.area_m2(element);
        }
        areas
    }

    /// Mean of the three corners of an element, m.
    pub fn corner_mean_m(&self, element: usize) -> [f64; 2] {
        let [a, b, c] = [0, 1, 2].map(|i| self.points_m[self.triangles[element][i] as usize]);
        [(a[0] + b[0] + c[0]) / 3.0, (a[1] + b[1] + c[1]) / 3.0]
    }

    /// Sides with an element on one side only, in the order of the elements.
    pub fn boundary_sides(&self) -> Vec<BoundarySide> {
        let mut sides: Vec<(u32, BoundarySide)> = Vec::with_capacity(3 * self.triangles.len());
        for (element, triangle) in self.triangles.iter().enumerate() {
            for (side, &[i, j, m]) in crate::element::SIDES.iter().enumerate() {
                let nodes = [triangle[i], triangle[j], triangle[m]];
                sides.push((nodes[2], BoundarySide { element: element as u32, side: side as u8, nodes }));
            }
        }
        // A side is known by its middle node: two elements share it, one does at the boundary.
        let mut count = vec![0u8; self.points_m.len()];
        for (middle, _) in &sides {
            count[*middle as usize] = count[*middle as usize].saturating_add(1);
        }
        sides.into_iter().filter(|(middle, _)| count[*middle as usize] == 1).map(|(_, side)| side).collect()
    }
}

/// A side with an element on one side only; it runs with the body on its left.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct BoundarySide {
    /// Element that has the side.
    pub element: u32,
    /// Which side of the element: 0 = 01, 1 = 12, 2 = 20.
    pub side: u8,
    /// Start, end and middle node.
    pub nodes: [u32; 3],
}
