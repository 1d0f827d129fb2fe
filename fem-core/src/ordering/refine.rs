//! From a separator to a smaller one: passes of Fiduccia-Mattheyses moves on vertices.
//!
//! A move takes a vertex out of the separator into one part and pulls its neighbors of the other part into the separator. A pass makes the
//! best move at each step, even one that enlarges the separator, each vertex at most once, and goes back to the best state it has seen.
//! Source: Fiduccia and Mattheyses (1982), "A linear-time heuristic for improving network partitions", here for vertex separators.
use super::graph::{Graph, Side};
use super::separator::SMALLEST_SHARE;
use std::collections::BinaryHeap;

/// Passes after which little improves any more.
const MOST_PASSES: usize = 3;

/// Weight of unequal parts against the size of the separator.
const IMBALANCE_WEIGHT: f64 = 2.0;

/// Shrinks the separator in place; it stays a separator.
pub(super) fn refine(graph: &Graph, sides: &mut [Side]) {
    for _ in 0..MOST_PASSES {
        if !Pass::new(graph, sides).run() {
            break;
        }
    }
}

/// State of one pass.
struct Pass<'a> {
    graph: &'a Graph,
    sides: &'a mut [Side],
    /// Vertices on each side, by [`index`].
    sizes: [usize; 3],
    /// Candidates to move into the first and into the second part: change of the separator's size by the move, negated, and the vertex.
    /// An entry may be stale: gains that rise are entered anew, gains that fell are corrected at the top.
    queues: [BinaryHeap<(isize, u32)>; 2],
    has_moved: Vec<bool>,
    /// Vertex and its side before each change, for the way back.
    changes: Vec<(u32, Side)>,
}

fn index(side: Side) -> usize {
    match side {
        Side::First => 0,
        Side::Second => 1,
        Side::Separator => 2,
    }
}

impl<'a> Pass<'a> {
    fn new(graph: &'a Graph, sides: &'a mut [Side]) -> Self {
        let mut sizes = [0; 3];
        for &side in sides.iter() {
            sizes[index(side)] += 1;
        }
        let has_moved = vec![false; graph.len()];
        let mut pass = Self { graph, sides, sizes, queues: [BinaryHeap::new(), BinaryHeap::new()], has_moved, changes: Vec::new() };
        for v in 0..graph.len() as u32 {
            pass.enqueue(v, Side::First);
            pass.enqueue(v, Side::Second);
        }
        pass
    }

    /// Moves until nothing can move or nothing has improved for long; true when the separator is better than before.
    fn run(mut self) -> bool {
        let n = self.graph.len();
        let patience = 40 + n / 400;
        let largest_part = ((1.0 - 0.9 * SMALLEST_SHARE) * n as f64) as usize + 1;
        let start = self.score();
        let (mut best, mut best_length, mut n_idle) = (start, 0, 0);
        while n_idle <= patience {
            let Some((v, to)) = self.next_move(largest_part) else { break };
            self.move_vertex(v, to);
            let score = self.score();
            if score < best - 1e-9 {
                (best, best_length, n_idle) = (score, self.changes.len(), 0);
            } else {
                n_idle += 1;
            }
        }
        for &(v, side) in self.changes[best_length..].iter().rev() {
            self.sides[v as usize] = side;
        }
        best < start
    }

    /// Size of the separator, weighted up for unequal parts.
    fn score(&self) -> f64 {
        let imbalance = self.sizes[0].abs_diff(self.sizes[1]) as f64 / (2 * self.graph.len()) as f64;
        self.sizes[2] as f64 * (1.0 + IMBALANCE_WEIGHT * imbalance * imbalance)
    }

    /// Vertices that the separator loses by moving `v` to `to`.
    fn gain(&self, v: u32, to: Side) -> isize {
        let pulled = self.graph.neighbors(v as usize).iter().filter(|&&w| self.sides[w as usize] == to.opposite()).count();
        1 - pulled.cast_signed()
    }

    fn enqueue(&mut self, v: u32, to: Side) {
        if self.sides[v as usize] == Side::Separator && !self.has_moved[v as usize] {
            let gain = self.gain(v, to);
            self.queues[index(to)].push((gain, v));
        }
    }

    /// Best candidate for a part with its true gain; stale entries above it are dropped or put back in their place.
    fn top(&mut self, to: Side) -> Option<(isize, u32)> {
        while let Some(&(gain, v)) = self.queues[index(to)].peek() {
            let is_open = self.sides[v as usize] == Side::Separator && !self.has_moved[v as usize];
            let true_gain = self.gain(v, to);
            if is_open && gain == true_gain {
                return Some((gain, v));
            }
            self.queues[index(to)].pop();
            if is_open {
                self.queues[index(to)].push((true_gain, v));
            }
        }
        None
    }

    /// The move of highest gain into a part that may still grow; on a tie into the smaller part.
    fn next_move(&mut self, largest_part: usize) -> Option<(u32, Side)> {
        let mut candidates = [Side::First, Side::Second].map(|to| self.top(to).map(|(gain, v)| (gain, v, to)));
        for (candidate, size) in candidates.iter_mut().zip(self.sizes) {
            if largest_part <= size {
                *candidate = None;
            }
        }
        let second_is_smaller = self.sizes[1] <= self.sizes[0];
        let chosen = match candidates {
            [Some(first), Some(second)] if second.0 > first.0 || (second.0 == first.0 && second_is_smaller) => Some(second),
            [Some(first), _] => Some(first),
            [None, second] => second,
        };
        chosen.map(|(_, v, to)| (v, to))
    }

    fn set_side(&mut self, v: u32, side: Side) {
        let before = std::mem::replace(&mut self.sides[v as usize], side);
        self.changes.push((v, before));
        self.sizes[index(before)] -= 1;
        self.sizes[index(side)] += 1;
    }

    fn move_vertex(&mut self, v: u32, to: Side) {
        let graph = self.graph;
        self.has_moved[v as usize] = true;
        self.set_side(v, to);
        for &w in graph.neighbors(v as usize) {
            if self.sides[w as usize] == to.opposite() {
                self.set_side(w, Side::Separator);
                self.enqueue(w, Side::First);
                self.enqueue(w, Side::Second);
                // Vertices of the separator around w no longer pull it in.
                for &x in graph.neighbors(w as usize) {
                    self.enqueue(x, to);
                }
            }
        }
    }
}
