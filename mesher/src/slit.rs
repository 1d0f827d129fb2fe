//! Opens the mesh along slits: a vertex on an open side gets one node for each sector of its fan.
use crate::node::Segment;
use crate::pieces::Piece;
use crate::triangulation::{NEXT, NONE, PREVIOUS, Side, Triangulation, place, side};

/// Opens all sides whose segment is open; both triangles there lose each other as neighbors and keep the piece.
///
/// # Guarantees
/// - a vertex with `n` sectors, parted by open sides and by the boundary, becomes `n` nodes at the same place; the tip of a slit has one;
/// - other vertices are not changed, even if the body hangs together in a single point there;
/// - a slit that runs through parts the body into two that share no node.
///
/// Returns the number of nodes added.
pub(crate) fn open_slits(of: &mut Triangulation, pieces: &[Piece], segments: &[Segment]) -> usize {
    let is_open = |piece: u32| piece != NONE && segments[pieces[piece as usize].segment as usize].open;
    // Step 1: the vertices on open sides, and a cut between the triangles there.
    let mut on_slit = vec![false; of.points.len()];
    let mut any = false;
    for t in 0..of.corners.len() {
        for k in 0..3 {
            if is_open(of.pieces[t][k]) {
                on_slit[of.corners[t][k] as usize] = true;
                on_slit[of.corners[t][NEXT[k]] as usize] = true;
                of.twins[t][k] = NONE;
                any = true;
            }
        }
    }
    if !any {
        return 0;
    }
    // Step 2: one node for each sector. The first sector met keeps the vertex.
    let n_before = of.points.len();
    let mut taken = vec![false; n_before];
    let mut done = vec![[false; 3]; of.corners.len()];
    for t in 0..of.corners.len() {
        for k in 0..3 {
            let v = of.corners[t][k];
            if done[t][k] || (v as usize) >= n_before || !on_slit[v as usize] {
                continue;
            }
            let node = if taken[v as usize] {
                of.points.push(of.points[v as usize]);
                of.points.len() as u32 - 1
            } else {
                v
            };
            taken[v as usize] = true;
            for at in sector(of, side(t as u32, k)) {
                let (u, l) = place(at);
                of.corners[u][l] = node;
                done[u][l] = true;
            }
        }
    }
    of.points.len() - n_before
}

/// Sides that start at the same vertex as `start` in the triangles that hang together around it.
fn sector(of: &Triangulation, start: Side) -> Vec<Side> {
    let mut sides = vec![start];
    // Counterclockwise until a cut or back at the start, then clockwise.
    let mut at = start;
    loop {
        let (t, k) = place(at);
        at = of.twin(side(t as u32, PREVIOUS[k]));
        if at == start {
            return sides;
        }
        if at == NONE {
            break;
        }
        sides.push(at);
    }
    let mut at = start;
    loop {
        let twin = of.twin(at);
        if twin == NONE {
            return sides;
        }
        let (t, k) = place(twin);
        at = side(t as u32, NEXT[k]);
        sides.push(at);
    }
}
