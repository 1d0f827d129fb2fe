//! Inserting a vertex into a constrained Delaunay triangulation by retriangulating its cavity (Bowyer 1981, Watson 1981).
use crate::geometry::{Point, in_circle, orient};
use crate::triangulation::{Beyond, NONE, Side, Triangulation, place, side};

/// The triangles whose circles hold a point, and the sides around them. Buffers are reused.
#[derive(Debug, Default)]
pub(crate) struct Cavity {
    triangles: Vec<u32>,
    rim: Vec<Rim>,
    /// Triangles of the last fan.
    fan: Vec<u32>,
    /// Round in which a triangle was last taken.
    stamp: Vec<u32>,
    round: u32,
    /// Triangle of the fan whose rim starts at a vertex.
    spoke: Vec<u32>,
}

/// A side of the cavity, seen from inside.
#[derive(Debug, Clone, Copy)]
struct Rim {
    from: u32,
    to: u32,
    beyond: Beyond,
    region: u32,
}

impl Cavity {
    /// Collects the cavity of `p`, which lies in or on the rim of the `seeds`. `split` is the piece that `p` lies on, if any: its sides do not
    /// count as rim. Triangles beyond other pieces do not belong to the cavity.
    pub(crate) fn collect(&mut self, of: &Triangulation, p: Point, seeds: &[u32], split: u32) {
        self.triangles.clear();
        self.rim.clear();
        self.stamp.resize(of.corners.len(), 0);
        self.round += 1;
        for &t in seeds {
            self.take(t);
        }
        let mut i = 0;
        while i < self.triangles.len() {
            let t = self.triangles[i];
            i += 1;
            for k in 0..3 {
                let beyond = of.beyond(side(t, k));
                let is_open = beyond.piece == NONE && beyond.twin != NONE;
                if is_open {
                    let other = beyond.twin >> 2;
                    if self.stamp[other as usize] == self.round {
                        continue;
                    }
                    let [a, b, c] = of.corner_points(other as usize);
                    if 0.0 < in_circle(a, b, c, p) {
                        self.take(other);
                        continue;
                    }
                } else if beyond.piece == split && split != NONE {
                    continue;
                }
                let [from, to] = of.ends(side(t, k));
                self.rim.push(Rim { from, to, beyond, region: of.regions[t as usize] });
            }
        }
        // A side looked at before the triangle beyond it was taken is not rim.
        let (stamp, round) = (&self.stamp, self.round);
        self.rim.retain(|r| r.beyond.piece != NONE || r.beyond.twin == NONE || stamp[(r.beyond.twin >> 2) as usize] != round);
    }

    fn take(&mut self, t: u32) {
        if self.stamp[t as usize] != self.round {
            self.stamp[t as usize] = self.round;
            self.triangles.push(t);
        }
    }

    /// Pieces on the rim for which a test on their end points holds.
    pub(crate) fn pieces_where<'a>(
        &'a self,
        of: &'a Triangulation,
        test: impl Fn(Point, Point) -> bool + 'a,
    ) -> impl Iterator<Item = u32> + 'a {
        let holds = move |r: &&Rim| r.beyond.piece != NONE && test(of.points[r.from as usize], of.points[r.to as usize]);
        self.rim.iter().filter(holds).map(|r| r.beyond.piece)
    }

    /// Whether `p` sees the whole rim from inside, so that the fan has no flat or turned triangle.
    pub(crate) fn is_star_shaped(&self, of: &Triangulation, p: Point) -> bool {
        self.rim.iter().all(|r| 0.0 < orient(of.points[r.from as usize], of.points[r.to as usize], p))
    }

    /// Replaces the cavity by a fan around a new vertex at `p` and returns the vertex. `halves` are the pieces that the spokes to two vertices
    /// carry, where `p` splits a piece.
    pub(crate) fn fill(&mut self, of: &mut Triangulation, p: Point, halves: &[(u32, u32)]) -> u32 {
        let vertex = of.points.len() as u32;
        of.points.push(p);
        self.spoke.resize(of.points.len(), NONE);
        let spoke_piece = |v: u32| halves.iter().find(|(end, _)| *end == v).map_or(NONE, |(_, piece)| *piece);
        // Step 1: the triangles, joined to what lies beyond the rim.
        self.fan.clear();
        for (i, r) in self.rim.iter().enumerate() {
            let corners = [r.from, r.to, vertex];
            let spoke = |v| Beyond { twin: NONE, piece: spoke_piece(v) };
            let beyond = [r.beyond, spoke(r.to), spoke(r.from)];
            let t = match self.triangles.get(i) {
                Some(&t) => {
                    of.set(t, corners, beyond, r.region);
                    t
                }
                None => of.push(corners, beyond, r.region),
            };
            of.join(side(t, 0), r.beyond.twin);
            self.fan.push(t);
            self.spoke[r.from as usize] = t;
        }
        // Step 2: the triangles of the fan to each other; at the boundary the fan is open.
        for (r, &t) in self.rim.iter().zip(&self.fan) {
            let next = self.spoke[r.to as usize];
            if next != NONE {
                of.join(side(t, 1), side(next, 2));
            }
        }
        for r in &self.rim {
            self.spoke[r.from as usize] = NONE;
        }
        vertex
    }

    /// Triangles around the vertex inserted last.
    pub(crate) fn fan(&self) -> &[u32] {
        &self.fan
    }
}

/// Splits a piece at a point exactly on it. The pieces `halves` belong to its ends. Returns the vertex, or `None` if the point cannot be placed.
pub(crate) fn split_piece(of: &mut Triangulation, cavity: &mut Cavity, at: Side, p: Point, halves: [u32; 2]) -> Option<u32> {
    let piece = of.piece(at);
    let [a, b] = of.ends(at);
    let twin = of.twin(at);
    let (near, far) = (place(at).0 as u32, twin >> 2);
    let seeds = [near, far];
    cavity.collect(of, p, if twin == NONE { &seeds[..1] } else { &seeds }, piece);
    if !cavity.is_star_shaped(of, p) {
        return None;
    }
    of.side_of_piece[piece as usize] = NONE;
    Some(cavity.fill(of, p, &[(a, halves[0]), (b, halves[1])]))
}
