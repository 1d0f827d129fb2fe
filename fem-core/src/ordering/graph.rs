//! The vertex graph of a mesh, and the graph of a part of it.
use crate::mesh::Mesh;

/// Part of a divided graph that a vertex belongs to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Side {
    First,
    Second,
    Separator,
}

impl Side {
    /// The other of the two parts.
    pub(super) fn opposite(self) -> Self {
        match self {
            Self::First => Self::Second,
            Self::Second => Self::First,
            Self::Separator => Self::Separator,
        }
    }
}

/// Undirected graph in compressed rows, with the place and the corner node of each vertex.
#[derive(Debug, Clone, Default)]
pub(super) struct Graph {
    starts: Vec<u32>,
    neighbors: Vec<u32>,
    pub(super) points_m: Vec<[f64; 2]>,
    pub(super) nodes: Vec<u32>,
}

impl Graph {
    /// Corner nodes joined by the sides of the triangles; a side shared by two triangles counts once, an opened one twice.
    pub(super) fn of_vertices(mesh: &Mesh) -> Self {
        let n = mesh.n_corners;
        let mut ends_of_middle = vec![[u32::MAX; 2]; mesh.points_m.len() - n];
        for t in &mesh.triangles {
            for (end, middle, other) in [(0, 3, 1), (1, 4, 2), (2, 5, 0)] {
                ends_of_middle[t[middle] as usize - n] = [t[end], t[other]];
            }
        }
        let mut starts = vec![0u32; n + 1];
        for end in ends_of_middle.iter().flatten() {
            starts[*end as usize + 1] += 1;
        }
        for i in 0..n {
            starts[i + 1] += starts[i];
        }
        let mut next = starts.clone();
        let mut neighbors = vec![0u32; 2 * ends_of_middle.len()];
        for [a, b] in ends_of_middle {
            for (from, to) in [(a, b), (b, a)] {
                neighbors[next[from as usize] as usize] = to;
                next[from as usize] += 1;
            }
        }
        Self { starts, neighbors, points_m: mesh.points_m[..n].to_vec(), nodes: (0..n as u32).collect() }
    }

    pub(super) fn len(&self) -> usize {
        self.nodes.len()
    }

    pub(super) fn neighbors(&self, vertex: usize) -> &[u32] {
        &self.neighbors[self.starts[vertex] as usize..self.starts[vertex + 1] as usize]
    }

    /// Graph of the vertices on one side, in their order; edges that leave it are dropped.
    pub(super) fn part(&self, sides: &[Side], side: Side) -> Self {
        let mut number = vec![u32::MAX; self.len()];
        let members: Vec<u32> = (0..self.len() as u32).filter(|&v| sides[v as usize] == side).collect();
        for (i, &v) in members.iter().enumerate() {
            number[v as usize] = i as u32;
        }
        let mut part = Self { starts: vec![0], neighbors: Vec::with_capacity(7 * members.len()), ..Self::default() };
        for &v in &members {
            part.neighbors.extend(self.neighbors(v as usize).iter().map(|&w| number[w as usize]).filter(|&w| w != u32::MAX));
            part.starts.push(part.neighbors.len() as u32);
        }
        part.points_m = members.iter().map(|&v| self.points_m[v as usize]).collect();
        part.nodes = members.iter().map(|&v| self.nodes[v as usize]).collect();
        part
    }

    /// Corner nodes of the vertices on one side.
    pub(super) fn nodes_on(&self, sides: &[Side], side: Side) -> Vec<u32> {
        self.nodes.iter().zip(sides).filter(|(_, s)| **s == side).map(|(node, _)| *node).collect()
    }
}
