//! The triangulation that refinement and smoothing work on: triangles with neighbors, regions and the pieces on their sides.
use spade::handles::FixedVertexHandle;
use spade::{ConstrainedDelaunayTriangulation, Point2, Triangulation as _};

use crate::geometry::{Point, in_circle, minus};
use crate::pieces::Pieces;

/// "No triangle", "no piece".
pub(crate) const NONE: u32 = u32::MAX;

/// A side of a triangle: `4 * triangle + k` runs from corner `k` to corner `k + 1`.
pub(crate) type Side = u32;

pub(crate) const NEXT: [usize; 3] = [1, 2, 0];
pub(crate) const PREVIOUS: [usize; 3] = [2, 0, 1];

pub(crate) fn side(triangle: u32, k: usize) -> Side {
    4 * triangle + k as u32
}

/// Triangle and place in it of a side.
pub(crate) fn place(side: Side) -> (usize, usize) {
    ((side >> 2) as usize, (side & 3) as usize)
}

/// A constrained Delaunay triangulation.
///
/// # Guarantees
/// - corners run counterclockwise; `twins` is symmetric, with [`NONE`] at the boundary;
/// - both triangles at a side carry the same piece; `side_of_piece` names one of its sides, [`NONE`] once the piece was split;
/// - no vertex lies inside the circle of a triangle unless a piece separates them. *Exception:* while vertices are being moved.
#[derive(Debug, Clone, Default)]
pub(crate) struct Triangulation {
    pub(crate) points: Vec<Point>,
    pub(crate) corners: Vec<[u32; 3]>,
    pub(crate) twins: Vec<[Side; 3]>,
    pub(crate) pieces: Vec<[u32; 3]>,
    pub(crate) regions: Vec<u32>,
    pub(crate) side_of_piece: Vec<Side>,
}

/// What a triangle has on one of its sides.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Beyond {
    pub(crate) twin: Side,
    pub(crate) piece: u32,
}

impl Triangulation {
    /// Constrained Delaunay triangulation of pieces that meet in common ends only; fills their convex hull. Regions are 0.
    ///
    /// Returns `None` where two pieces cross after all, which noding excludes.
    pub(crate) fn of(input: &Pieces) -> Option<Self> {
        type Kernel = ConstrainedDelaunayTriangulation<Point2<f64>, (), u32, ()>;
        let points: Vec<Point2<f64>> = input.points.iter().map(|p| Point2::new(p[0], p[1])).collect();
        let edges = input.ends.iter().map(|ends| ends.map(|v| v as usize)).collect();
        let mut conflict = false;
        let mut kernel = Kernel::try_bulk_load_cdt(points, edges, |_| conflict = true).ok()?;
        if conflict || kernel.num_vertices() != input.points.len() {
            return None;
        }
        let vertex = |v: u32| FixedVertexHandle::from_index(v as usize);
        for (piece, ends) in input.ends.iter().enumerate() {
            let edge = kernel.get_edge_from_neighbors(vertex(ends[0]), vertex(ends[1]))?.fix().as_undirected();
            *kernel.undirected_edge_data_mut(edge).data_mut() = piece as u32 + 1;
        }
        let n = kernel.num_inner_faces();
        let mut out = Self { points: input.points.clone(), side_of_piece: vec![NONE; input.parts.len()], ..Self::default() };
        out.corners.reserve(n);
        // The kernel numbers inner faces from 1 without gaps; the outer one is 0.
        for face in kernel.inner_faces() {
            let edges = face.adjacent_edges();
            let twins = edges.map(|edge| {
                let back = edge.rev();
                let start = back.from().fix();
                back.face().as_inner().map_or(NONE, |other| {
                    let k = other.adjacent_edges().iter().position(|e| e.from().fix() == start);
                    k.map_or(NONE, |k| side(other.fix().index() as u32 - 1, k))
                })
            });
            let pieces = edges.map(|edge| edge.as_undirected().data().data().wrapping_sub(1));
            out.push(edges.map(|edge| edge.from().fix().index() as u32), [0, 1, 2].map(|k| Beyond { twin: twins[k], piece: pieces[k] }), 0);
        }
        Some(out)
    }

    pub(crate) fn n_triangles(&self) -> u32 {
        self.corners.len() as u32
    }

    pub(crate) fn corner_points(&self, triangle: usize) -> [Point; 3] {
        self.corners[triangle].map(|v| self.points[v as usize])
    }

    /// Start and end of a side.
    pub(crate) fn ends(&self, side: Side) -> [u32; 2] {
        let (t, k) = place(side);
        [self.corners[t][k], self.corners[t][NEXT[k]]]
    }

    pub(crate) fn twin(&self, side: Side) -> Side {
        let (t, k) = place(side);
        self.twins[t][k]
    }

    pub(crate) fn piece(&self, side: Side) -> u32 {
        let (t, k) = place(side);
        self.pieces[t][k]
    }

    pub(crate) fn beyond(&self, side: Side) -> Beyond {
        Beyond { twin: self.twin(side), piece: self.piece(side) }
    }

    /// Corner opposite a side.
    pub(crate) fn apex(&self, side: Side) -> u32 {
        let (t, k) = place(side);
        self.corners[t][PREVIOUS[k]]
    }

    /// Adds a triangle. Twins of its neighbors are not changed.
    pub(crate) fn push(&mut self, corners: [u32; 3], beyond: [Beyond; 3], region: u32) -> u32 {
        let triangle = self.n_triangles();
        self.corners.push(corners);
        self.twins.push([NONE; 3]);
        self.pieces.push([NONE; 3]);
        self.regions.push(region);
        self.set(triangle, corners, beyond, region);
        triangle
    }

    /// Overwrites a triangle. Twins of its neighbors are not changed.
    pub(crate) fn set(&mut self, triangle: u32, corners: [u32; 3], beyond: [Beyond; 3], region: u32) {
        let t = triangle as usize;
        self.corners[t] = corners;
        self.regions[t] = region;
        for (k, Beyond { twin, piece }) in beyond.into_iter().enumerate() {
            self.twins[t][k] = twin;
            self.pieces[t][k] = piece;
            if piece != NONE {
                self.side_of_piece[piece as usize] = side(triangle, k);
            }
        }
    }

    /// Makes two sides each other's twin; either may be [`NONE`].
    pub(crate) fn join(&mut self, a: Side, b: Side) {
        for (of, to) in [(a, b), (b, a)] {
            if of != NONE {
                let (t, k) = place(of);
                self.twins[t][k] = to;
            }
        }
    }

    /// Turns the side between two triangles into the other diagonal of their quadrilateral, which must be convex.
    pub(crate) fn flip(&mut self, at: Side) {
        let twin = self.twin(at);
        let ((t, k), (u, l)) = (place(at), place(twin));
        let (t_number, u_number) = (t as u32, u as u32);
        let (p, q, r, s) = (self.corners[t][k], self.corners[t][NEXT[k]], self.corners[t][PREVIOUS[k]], self.corners[u][PREVIOUS[l]]);
        let (qr, rp) = (self.beyond(side(t_number, NEXT[k])), self.beyond(side(t_number, PREVIOUS[k])));
        let (ps, sq) = (self.beyond(side(u_number, NEXT[l])), self.beyond(side(u_number, PREVIOUS[l])));
        let diagonal = |twin| Beyond { twin, piece: NONE };
        self.set(t_number, [p, s, r], [ps, diagonal(side(u_number, 2)), rp], self.regions[t]);
        self.set(u_number, [s, q, r], [sq, qr, diagonal(side(t_number, 1))], self.regions[u]);
        self.join(side(t_number, 0), ps.twin);
        self.join(side(t_number, 2), rp.twin);
        self.join(side(u_number, 0), sq.twin);
        self.join(side(u_number, 1), qr.twin);
    }

    /// Flips sides until every one that carries no piece is Delaunay; returns how many were flipped.
    ///
    /// Ends, because each flip strictly lowers the paraboloid lifting of the triangulation and the in-circle test is exact.
    pub(crate) fn restore_delaunay(&mut self) -> usize {
        let mut stack: Vec<Side> = Vec::new();
        let mut n = 0;
        for start in 0..self.n_triangles() {
            stack.extend((0..3).map(|k| side(start, k)));
            while let Some(at) = stack.pop() {
                let twin = self.twin(at);
                if twin == NONE || self.piece(at) != NONE {
                    continue;
                }
                let [a, b, c] = self.corner_points(place(at).0);
                if 0.0 < in_circle(a, b, c, self.points[self.apex(twin) as usize]) {
                    let (t, u) = (at >> 2, twin >> 2);
                    self.flip(at);
                    stack.extend([side(t, 0), side(t, 2), side(u, 0), side(u, 1)]);
                    n += 1;
                }
            }
        }
        n
    }

    /// Mean of the corners of a triangle.
    pub(crate) fn center(&self, triangle: usize) -> Point {
        let [a, b, c] = self.corner_points(triangle);
        [(a[0] + b[0] + c[0]) / 3.0, (a[1] + b[1] + c[1]) / 3.0]
    }

    /// Twice the area of a triangle and its perimeter.
    pub(crate) fn measures(&self, triangle: usize) -> (f64, f64) {
        let [a, b, c] = self.corner_points(triangle);
        let length = |u: Point| u[0].hypot(u[1]);
        (crate::geometry::cross(minus(b, a), minus(c, a)), length(minus(b, a)) + length(minus(c, b)) + length(minus(a, c)))
    }
}
