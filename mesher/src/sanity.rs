//! What a finished mesh must satisfy besides the guarantees of its type.
use std::collections::HashMap;

use fem_core::mesh::{Mesh, MeshFault};

/// A broken promise of the mesher.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum MeshDoubt {
    /// A guarantee of the type is broken.
    #[error(transparent)]
    Fault(#[from] MeshFault),
    /// Two corner nodes share a place though no slit passes there.
    #[error("corner nodes {first} and {second} share the place ({x_m}, {y_m}) m")]
    Duplicate {
        /// The one.
        first: u32,
        /// The other.
        second: u32,
        /// x in m.
        x_m: f64,
        /// y in m.
        y_m: f64,
    },
}

/// Checks a mesh: the guarantees of [`Mesh`], and no two corner nodes in one place unless both lie on a line with one of `slit_tags`.
///
/// # Errors
/// The first broken promise.
pub fn sanity_check(mesh: &Mesh, slit_tags: &[u32]) -> Result<(), MeshDoubt> {
    mesh.check()?;
    let mut on_slit = vec![false; mesh.points_m.len()];
    for edge in mesh.edges.iter().filter(|e| slit_tags.contains(&e.tag)) {
        for node in edge.nodes {
            on_slit[node as usize] = true;
        }
    }
    let mut first_at: HashMap<[u64; 2], u32> = HashMap::with_capacity(mesh.n_corners);
    for (node, p) in mesh.points_m[..mesh.n_corners].iter().enumerate() {
        let key = p.map(|v| (v + 0.0).to_bits());
        if let Some(&first) = first_at.get(&key)
            && !(on_slit[first as usize] && on_slit[node])
        {
            return Err(MeshDoubt::Duplicate { first, second: node as u32, x_m: p[0], y_m: p[1] });
        }
        first_at.insert(key, node as u32);
    }
    Ok(())
}
