//! Whether a mesh keeps the guarantees of [`Mesh`].
use super::{Mesh, NO_ELEMENT, TaggedEdge, quality};
use crate::element::{SIDES, element_points_m};

/// The first broken guarantee found.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum MeshFault {
    /// The mesh has no element.
    #[error("the mesh has no element")]
    Empty,
    /// Lists that belong together differ in length.
    #[error("{regions} region numbers for {elements} elements")]
    Lengths {
        /// Number of elements.
        elements: usize,
        /// Number of region numbers.
        regions: usize,
    },
    /// A coordinate is not finite.
    #[error("node {node} is at ({x_m}, {y_m}) m")]
    NotFinite {
        /// Node number.
        node: usize,
        /// x in m.
        x_m: f64,
        /// y in m.
        y_m: f64,
    },
    /// An element names a node that does not exist or is of the wrong kind (corner or middle).
    #[error("element {element}: node {node} is missing or of the wrong kind")]
    Node {
        /// Element number.
        element: usize,
        /// Node number.
        node: u32,
    },
    /// A node belongs to no element.
    #[error("node {node} belongs to no element")]
    Orphan {
        /// Node number.
        node: usize,
    },
    /// The lower bound of an element's Jacobian is not positive: clockwise, flat or folded over by its curved sides.
    #[error("element {element} at ({x_m:.4}, {y_m:.4}) m is turned over, flat or folded (Jacobian bound {bound_m2:e} m2)")]
    Folded {
        /// Element number.
        element: usize,
        /// Mean corner, x in m.
        x_m: f64,
        /// Mean corner, y in m.
        y_m: f64,
        /// Lower bound of the Jacobian in m².
        bound_m2: f64,
    },
    /// A side belongs to more than two elements, or two elements run along it in the same direction or with different end nodes.
    #[error("the side of element {element} with middle node {middle} does not match its neighbor")]
    Side {
        /// Element number.
        element: usize,
        /// Middle node.
        middle: u32,
    },
    /// A boundary side carries no tag.
    #[error("the boundary side with middle node {middle} carries no tag")]
    Untagged {
        /// Middle node.
        middle: u32,
    },
    /// A tagged edge does not agree with the elements it names.
    #[error("tagged edge {edge} does not agree with its elements")]
    Edge {
        /// Place in [`Mesh::edges`].
        edge: usize,
    },
}

impl Mesh {
    /// Checks every guarantee of the type.
    ///
    /// # Errors
    /// The first [`MeshFault`] found.
    pub fn check(&self) -> Result<(), MeshFault> {
        if self.triangles.is_empty() {
            return Err(MeshFault::Empty);
        }
        if self.regions.len() != self.triangles.len() {
            return Err(MeshFault::Lengths { elements: self.triangles.len(), regions: self.regions.len() });
        }
        self.check_nodes()?;
        self.check_shapes()?;
        self.check_sides()?;
        self.check_edges()
    }

    fn check_nodes(&self) -> Result<(), MeshFault> {
        if let Some(node) = self.points_m.iter().position(|p| !(p[0].is_finite() && p[1].is_finite())) {
            return Err(MeshFault::NotFinite { node, x_m: self.points_m[node][0], y_m: self.points_m[node][1] });
        }
        let mut used = vec![false; self.points_m.len()];
        for (element, triangle) in self.triangles.iter().enumerate() {
            for (i, &node) in triangle.iter().enumerate() {
                let is_corner = (node as usize) < self.n_corners;
                if self.points_m.len() <= node as usize || is_corner != (i < 3) {
                    return Err(MeshFault::Node { element, node });
                }
                used[node as usize] = true;
            }
        }
        used.iter().position(|&u| !u).map_or(Ok(()), |node| Err(MeshFault::Orphan { node }))
    }

    fn check_shapes(&self) -> Result<(), MeshFault> {
        for element in 0..self.triangles.len() {
            let bound_m2 = quality::jacobian_bound_m2(&element_points_m(self, element));
            let unfolded = 0.0 < bound_m2;
            if !unfolded {
                let [x_m, y_m] = self.corner_mean_m(element);
                return Err(MeshFault::Folded { element, x_m, y_m, bound_m2 });
            }
        }
        Ok(())
    }

    /// Both elements at a side must run along it in opposite directions and there must not be a third.
    fn check_sides(&self) -> Result<(), MeshFault> {
        let mut first: Vec<Option<[u32; 2]>> = vec![None; self.points_m.len()];
        let mut closed = vec![false; self.points_m.len()];
        for (element, triangle) in self.triangles.iter().enumerate() {
            for &[i, j, m] in &SIDES {
                let (a, b, middle) = (triangle[i], triangle[j], triangle[m]);
                match first[middle as usize] {
                    None => first[middle as usize] = Some([a, b]),
                    Some(other) if other == [b, a] && !closed[middle as usize] => closed[middle as usize] = true,
                    Some(_) => return Err(MeshFault::Side { element, middle }),
                }
            }
        }
        let mut tagged = vec![false; self.points_m.len()];
        for edge in &self.edges {
            if let Some(t) = tagged.get_mut(edge.nodes[2] as usize) {
                *t = true;
            }
        }
        let untagged = (0..self.points_m.len()).find(|&n| first[n].is_some() && !closed[n] && !tagged[n]);
        untagged.map_or(Ok(()), |middle| Err(MeshFault::Untagged { middle: middle as u32 }))
    }

    fn check_edges(&self) -> Result<(), MeshFault> {
        let has = |element: u32, [a, b, m]: [u32; 3]| {
            let triangle = self.triangles.get(element as usize);
            triangle.is_some_and(|t| SIDES.iter().any(|&[i, j, k]| [t[i], t[j], t[k]] == [a, b, m]))
        };
        let agrees = |edge: &TaggedEdge| {
            let [a, b, m] = edge.nodes;
            let left = edge.left == NO_ELEMENT || has(edge.left, [a, b, m]);
            let right = edge.right == NO_ELEMENT || has(edge.right, [b, a, m]);
            left && right && !(edge.left == NO_ELEMENT && edge.right == NO_ELEMENT)
        };
        self.edges.iter().position(|e| !agrees(e)).map_or(Ok(()), |edge| Err(MeshFault::Edge { edge }))
    }
}

#[cfg(test)]
mod tests;
