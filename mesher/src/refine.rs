//! Delaunay refinement: pieces that a vertex encroaches upon are split first, then triangles that are too large or too thin, first in first out.
use std::collections::VecDeque;

use crate::cavity::{Cavity, split_piece};
use crate::criterion::{Criterion, Fault};
use crate::error::MeshError;
use crate::geometry::{Point, distance, orient};
use crate::params::MeshParams;
use crate::patch::Body;
use crate::pieces::Piece;
use crate::sharp::{Corners, sharp_corners};
use crate::size::SizeIndex;
use crate::snap::{Grid, STEPS, lattice};
use crate::triangulation::{NEXT, NONE, Side, Triangulation, place, side};

/// Shortest piece that may still be split, in steps of the lattice.
const SHORTEST: u32 = 4;
/// Steps after which a walk towards a new vertex gives up.
const WALK: usize = 100_000;

/// A body being refined, and the refined body.
#[derive(Debug)]
pub(crate) struct Refined {
    pub(crate) body: Body,
    pub(crate) pieces: Vec<Piece>,
    /// Wanted size at every vertex.
    pub(crate) sizes: Vec<f64>,
    pub(crate) sharp: Vec<bool>,
    /// Triangles left as they were because no vertex could be placed.
    pub(crate) n_unimproved: usize,
}

/// Refines a body.
///
/// # Guarantees
/// - every triangle meets the [`Criterion`]; *exceptions:* those that fill a sharp input corner, and the `n_unimproved` ones, whose pieces are
///   at the resolution of the lattice;
/// - pieces stay exactly on their segments;
/// - ends: with an error at the cap on vertices at the latest; the same input gives the same result, bit by bit.
///
/// # Errors
/// [`MeshError::TooManyVertices`].
pub(crate) fn refine(body: Body, pieces: Vec<Piece>, size: &SizeIndex, grid: &Grid, params: &MeshParams) -> Result<Refined, MeshError> {
    let sizes = body.triangulation.points.iter().map(|&p| size.size(p)).collect();
    let sharp = sharp_corners(&body.triangulation, &body.segment_of);
    let n_triangles = body.triangulation.n_triangles();
    let n_pieces = pieces.len() as u32;
    let state = Refined { body, pieces, sizes, sharp, n_unimproved: 0 };
    let mut run = Run {
        state,
        size,
        criterion: Criterion::new(params.smallest_angle_rad),
        faces: VecDeque::new(),
        suspects: (0..n_pieces).rev().collect(),
        cavity: Cavity::default(),
    };
    for t in 0..n_triangles {
        run.queue_face(t);
    }
    loop {
        if params.n_vertices_max < run.triangulation().points.len() {
            let at = run.faces.front().map_or(0, |(t, _)| *t as usize);
            let [x_m, y_m] = grid.global(run.triangulation().center(at));
            return Err(MeshError::TooManyVertices { limit: params.n_vertices_max, x_m, y_m });
        }
        if let Some(piece) = run.suspects.pop() {
            run.treat_piece(piece);
        } else if let Some((t, corners)) = run.faces.pop_front() {
            run.treat_face(t, corners);
        } else {
            return Ok(run.state);
        }
    }
}

struct Run<'a> {
    state: Refined,
    size: &'a SizeIndex,
    criterion: Criterion,
    /// Triangles that had a fault, with the corners by which to tell that they are still there.
    faces: VecDeque<(u32, [u32; 3])>,
    /// Pieces upon which a vertex may encroach.
    suspects: Vec<u32>,
    cavity: Cavity,
}

/// Where a walk ended.
enum Place {
    In(u32),
    Blocked(u32),
    Nowhere,
}

impl Run<'_> {
    fn triangulation(&self) -> &Triangulation {
        &self.state.body.triangulation
    }

    fn wanted_size(&self, triangle: usize) -> f64 {
        let [a, b, c] = self.triangulation().corners[triangle].map(|v| self.state.sizes[v as usize]);
        (a + b + c) / 3.0
    }

    fn fault(&self, triangle: usize) -> Option<Fault> {
        let fault = self.criterion.fault(self.triangulation().corner_points(triangle), self.wanted_size(triangle));
        if fault == Some(Fault::Angle) && self.corners().fills_a_corner(self.triangulation(), triangle) { None } else { fault }
    }

    fn corners(&self) -> Corners<'_> {
        Corners { segments: &self.state.body.segments, segment_of: &self.state.body.segment_of, sharp: &self.state.sharp }
    }

    fn queue_face(&mut self, triangle: u32) {
        if self.fault(triangle as usize).is_some() {
            self.faces.push_back((triangle, self.triangulation().corners[triangle as usize]));
        }
    }

    /// Splits a piece if the vertex opposite it, on either side, lies in its lens.
    fn treat_piece(&mut self, piece: u32) {
        let at = self.triangulation().side_of_piece[piece as usize];
        if at == NONE {
            return;
        }
        let of = self.triangulation();
        let [a, b] = of.ends(at).map(|v| of.points[v as usize]);
        let sides = [at, of.twin(at)];
        let encroached = sides.iter().any(|&s| s != NONE && self.criterion.encroaches(of.points[of.apex(s) as usize], a, b));
        if encroached {
            self.split(piece);
        }
    }

    /// Improves a triangle by a new vertex, or splits the pieces that are in the way and comes back to it later.
    fn treat_face(&mut self, triangle: u32, corners: [u32; 3]) {
        let t = triangle as usize;
        if self.triangulation().corners[t] != corners || self.fault(t).is_none() {
            return;
        }
        let p = self.criterion.new_vertex(self.triangulation().corner_points(t), self.wanted_size(t));
        let in_the_way = match self.walk(triangle, p) {
            Place::In(found) => {
                let of = &self.state.body.triangulation;
                self.cavity.collect(of, p, &[found], NONE);
                let criterion = self.criterion;
                let pieces: Vec<u32> = self.cavity.pieces_where(of, |a, b| criterion.encroaches(p, a, b)).collect();
                if pieces.is_empty() {
                    self.insert(p);
                    return;
                }
                pieces
            }
            Place::Blocked(piece) => vec![piece],
            Place::Nowhere => Vec::new(),
        };
        let mut improved = false;
        for piece in in_the_way {
            improved |= self.split(piece);
        }
        if improved {
            self.faces.push_back((triangle, corners));
        } else {
            self.state.n_unimproved += 1;
        }
    }

    /// Walks from a triangle towards a point; a piece in between stops it.
    fn walk(&self, start: u32, p: Point) -> Place {
        let of = self.triangulation();
        let (mut t, mut entered) = (start, NONE);
        for _ in 0..WALK {
            let points = of.corner_points(t as usize);
            let beyond = |k: usize| side(t, k) != entered && orient(points[k], points[NEXT[k]], p) < 0.0;
            let Some(k) = (0..3).find(|&k| beyond(k)) else { return Place::In(t) };
            let at = side(t, k);
            if of.piece(at) != NONE {
                return Place::Blocked(of.piece(at));
            }
            entered = of.twin(at);
            if entered == NONE {
                return Place::Nowhere;
            }
            t = entered >> 2;
        }
        Place::Nowhere
    }

    /// Puts a free vertex into the collected cavity.
    fn insert(&mut self, p: Point) {
        if !self.cavity.is_star_shaped(&self.state.body.triangulation, p) {
            self.state.n_unimproved += 1;
            return;
        }
        self.cavity.fill(&mut self.state.body.triangulation, p, &[]);
        self.vertex_added(p, NONE);
    }

    /// Splits a piece near its middle. Returns whether it could be.
    fn split(&mut self, piece: u32) -> bool {
        let at = self.triangulation().side_of_piece[piece as usize];
        let Piece { segment, from, to } = self.state.pieces[piece as usize];
        if at == NONE || to - from < SHORTEST {
            return false;
        }
        let [a, b] = self.state.body.segments[segment as usize].ends;
        let of = &mut self.state.body.triangulation;
        let (start, end) = (of.points[a as usize], of.points[b as usize]);
        let j = split_step([from, to], distance(start, end), [a, b].map(|v| self.state.sharp[v as usize]));
        let p = lattice(start, end, j);
        let halves = [self.state.pieces.len() as u32, self.state.pieces.len() as u32 + 1];
        of.side_of_piece.extend([NONE, NONE]);
        self.state.pieces.extend([Piece { segment, from, to: j }, Piece { segment, from: j, to }]);
        let forward = runs_forward(of, at, start, end);
        let by_side = if forward { halves } else { [halves[1], halves[0]] };
        if split_piece(of, &mut self.cavity, at, p, by_side).is_none() {
            return false;
        }
        self.vertex_added(p, segment);
        self.suspects.extend(halves);
        true
    }

    /// Book-keeping after a vertex: its size, its triangles, the pieces it may encroach upon.
    fn vertex_added(&mut self, p: Point, segment: u32) {
        self.state.sizes.push(self.size.size(p));
        self.state.body.segment_of.push(segment);
        for i in 0..self.cavity.fan().len() {
            let t = self.cavity.fan()[i];
            self.queue_face(t);
            let piece = self.triangulation().piece(side(t, 0));
            if piece != NONE && segment != NONE {
                self.suspects.push(piece);
            }
        }
    }
}

/// Whether a side runs in the direction of its segment.
pub(crate) fn runs_forward(of: &Triangulation, at: Side, start: Point, end: Point) -> bool {
    let (t, k) = place(at);
    let (p, q) = (of.points[of.corners[t][k] as usize], of.points[of.corners[t][NEXT[k]] as usize]);
    0.0 < (q[0] - p[0]) * (end[0] - start[0]) + (q[1] - p[1]) * (end[1] - start[1])
}

/// Lattice step at which a piece is split: its middle, or a power-of-two circle around the sharp corner that it ends in.
fn split_step([from, to]: [u32; 2], length: f64, [start_is_sharp, end_is_sharp]: [bool; 2]) -> u32 {
    let at_start = from == 0 && start_is_sharp;
    let at_end = to == STEPS && end_is_sharp;
    if at_start == at_end {
        return u32::midpoint(from, to);
    }
    let radius = circle_radius(f64::from(to - from) / f64::from(STEPS) * length);
    let steps = ((radius / length * f64::from(STEPS)).round() as u32).clamp(1, to - from - 1);
    if at_start { from + steps } else { to - steps }
}

/// The power of two between a third and two thirds of a length.
fn circle_radius(length: f64) -> f64 {
    let mut radius = (0.5 * length).log2().round().exp2();
    if 2.0 / 3.0 * length < radius {
        radius *= 0.5;
    }
    if radius < length / 3.0 {
        radius *= 2.0;
    }
    radius
}
