//! `fields/*.vtu` and `fields/series.pvd`: the full stress field for any viewer.
//!
//! Axes of the files: X landward, Y up, Z along the cliff (0). Tensors have the six components XX YY ZZ XY YZ XZ. Units stand in the
//! array names. A node is written once for each value that it has, so that every layer keeps its own stress at a contact.
use std::collections::BTreeMap;
use std::fmt::Write;

use checker::outcome::FieldSnapshot;
use vtkio::model::{
    Attribute, Attributes, ByteOrder, CellType, Cells, DataArray, DataSet, IOBuffer, UnstructuredGridPiece, Version, VertexNumbers, Vtk,
};
use vtkio::xml::Compressor;

/// Why a field cannot be written.
#[derive(Debug, thiserror::Error)]
#[non_exhaustive]
pub enum FieldError {
    /// The library refused.
    #[error("the fields at depth {depth_m:.2} m cannot be written: {message}")]
    Format {
        /// Depth.
        depth_m: f64,
        /// What the library said.
        message: String,
    },
    /// A value is not finite.
    #[error("the field at depth {depth_m:.2} m has a value that is not a finite number in element {i_elem}")]
    NotFinite {
        /// Depth.
        depth_m: f64,
        /// Element.
        i_elem: usize,
    },
}

/// File names for depths, in their order: two decimals, more only where two depths would share a name.
pub fn file_names(depths_m: &[f64]) -> Vec<String> {
    (2..=9)
        .map(|decimals| depths_m.iter().map(|depth| format!("depth-{depth:.decimals$}.vtu")).collect::<Vec<_>>())
        .find(|names| names.iter().collect::<std::collections::BTreeSet<_>>().len() == names.len())
        .unwrap_or_else(|| (0..depths_m.len()).map(|i| format!("depth-{i}.vtu")).collect())
}

/// The series file: it lists the files with the depth in m in the place of the time.
pub fn series(depths_m: &[f64], rock_names: &[String]) -> String {
    let mut text = String::from("<?xml version=\"1.0\"?>\n<!-- the time of each file is the undercut depth (horizontal) in m -->\n");
    for (i, name) in rock_names.iter().enumerate() {
        // A comment must not hold "--".
        let _ = writeln!(text, "<!-- rock_id {i}: {} -->", name.replace('-', "\u{2010}").replace(char::is_control, " "));
    }
    text.push_str("<VTKFile type=\"Collection\" version=\"0.1\">\n  <Collection>\n");
    for (depth, name) in depths_m.iter().zip(file_names(depths_m)) {
        let _ = writeln!(text, "    <DataSet timestep=\"{depth}\" part=\"0\" file=\"{name}\"/>");
    }
    text.push_str("  </Collection>\n</VTKFile>\n");
    text
}

/// One depth as an XML unstructured grid of six-node triangles, or of three-node ones (four for each element).
///
/// # Errors
/// [`FieldError`]
pub fn field(snapshot: &FieldSnapshot, linear_triangles: bool) -> Result<Vec<u8>, FieldError> {
    let points = Points::gather(snapshot)?;
    let format = |message: String| FieldError::Format { depth_m: snapshot.depth_m, message };
    let cells = cells(&points.triangles, linear_triangles);
    let per_cell = if linear_triangles { 4 } else { 1 };
    let rock: Vec<i32> = snapshot.mesh.regions.iter().flat_map(|region| std::iter::repeat_n(region.cast_signed(), per_cell)).collect();
    let grid = UnstructuredGridPiece {
        points: IOBuffer::F64(
            points.owner.iter().map(|node| snapshot.mesh.points_m[*node as usize]).flat_map(|[x, z]| [x, z, 0.0]).collect(),
        ),
        cells,
        data: Attributes {
            point: points.arrays(snapshot).into_iter().map(Attribute::DataArray).collect(),
            cell: vec![Attribute::DataArray(DataArray::scalars("rock_id", 1).with_buf(IOBuffer::I32(rock)))],
        },
    };
    let vtk = Vtk {
        version: Version::new_xml(1, 0),
        title: String::new(),
        byte_order: ByteOrder::LittleEndian,
        data: DataSet::inline(grid),
        file_path: None,
    };
    // Uncompressed: the library compresses value by value, which takes longer than the analysis.
    let file = vtk.try_into_xml_format(Compressor::None, 0).map_err(|error| format(error.to_string()))?;
    let mut text = Vec::new();
    file.write(&mut text).map_err(|error| format(error.to_string()))?;
    // Some readers refuse unsigned connectivity; the bytes are the same.
    let text = String::from_utf8(text).map_err(|error| format(error.to_string()))?;
    Ok(text
        .replace("type=\"UInt64\" Name=\"connectivity\"", "type=\"Int64\" Name=\"connectivity\"")
        .replace("type=\"UInt64\" Name=\"offsets\"", "type=\"Int64\" Name=\"offsets\"")
        .into_bytes())
}

/// Points of the file: one for each node and value.
struct Points {
    /// Mesh node of each point.
    owner: Vec<u32>,
    /// Element and element node that give each point its values.
    source: Vec<(usize, usize)>,
    /// Triangles in point numbers.
    triangles: Vec<[u32; 6]>,
}

impl Points {
    fn gather(snapshot: &FieldSnapshot) -> Result<Self, FieldError> {
        let mut points = Self { owner: Vec::new(), source: Vec::new(), triangles: Vec::new() };
        let mut known: BTreeMap<(u32, [u64; 7]), u32> = BTreeMap::new();
        for (i_elem, nodes) in snapshot.mesh.triangles.iter().enumerate() {
            let mut triangle = [0; 6];
            for (i_local, node) in nodes.iter().enumerate() {
                let values = values(snapshot, i_elem, i_local);
                if !values.iter().all(|value| value.is_finite()) {
                    return Err(FieldError::NotFinite { depth_m: snapshot.depth_m, i_elem });
                }
                let next = points.owner.len() as u32;
                triangle[i_local] = *known.entry((*node, values.map(f64::to_bits))).or_insert_with(|| {
                    points.owner.push(*node);
                    points.source.push((i_elem, i_local));
                    next
                });
            }
            points.triangles.push(triangle);
        }
        Ok(points)
    }

    fn arrays(&self, snapshot: &FieldSnapshot) -> Vec<DataArray> {
        const KPA: f64 = 1e-3;
        let tensor = |[xx, zz, xz, yy]: [f64; 4]| [xx, zz, yy, xz, 0.0, 0.0].map(|value| (value * KPA) as f32);
        let single = |name: &str, value: &dyn Fn(usize, usize) -> f64| {
            let values = self.source.iter().map(|(i_elem, i_local)| value(*i_elem, *i_local) as f32).collect();
            DataArray::scalars(name, 1).with_buf(IOBuffer::F32(values))
        };
        let tensors = |name: &str, value: &dyn Fn(usize, usize) -> [f64; 4]| {
            let values = self.source.iter().flat_map(|(i_elem, i_local)| tensor(value(*i_elem, *i_local))).collect();
            DataArray::new(name, 6).with_buf(IOBuffer::F32(values))
        };
        let displacement = self.owner.iter().map(|node| snapshot.displacement_m[*node as usize]);
        let direction = self.source.iter().flat_map(|(i_elem, i_local)| {
            let (sin, cos) = snapshot.principal_effective(*i_elem, *i_local).direction_rad.sin_cos();
            [cos as f32, sin as f32, 0.0]
        });
        vec![
            DataArray::new("displacement_m", 3).with_buf(IOBuffer::F64(displacement.flat_map(|[x, z]| [x, z, 0.0]).collect())),
            tensors("effective_stress_kpa", &|e, i| snapshot.effective_stress_pa[e][i]),
            tensors("total_stress_kpa", &|e, i| snapshot.total_stress_pa(e, i)),
            single("principal_major_kpa", &|e, i| snapshot.principal_effective(e, i).major_pa * KPA),
            single("principal_minor_kpa", &|e, i| snapshot.principal_effective(e, i).minor_pa * KPA),
            DataArray::new("principal_major_direction", 3).with_buf(IOBuffer::F32(direction.collect())),
            single("water_pressure_kpa", &|e, i| snapshot.water_pressure_pa[e][i] * KPA),
            single("tension_utilization", &|e, i| snapshot.tension_utilization[e][i]),
            single("shear_utilization", &|e, i| snapshot.shear_utilization[e][i]),
        ]
    }
}

/// What makes one point differ from another at the same node.
fn values(snapshot: &FieldSnapshot, i_elem: usize, i_local: usize) -> [f64; 7] {
    let [xx, zz, xz, yy] = snapshot.effective_stress_pa[i_elem][i_local];
    let water = snapshot.water_pressure_pa[i_elem][i_local];
    [xx, zz, xz, yy, water, snapshot.tension_utilization[i_elem][i_local], snapshot.shear_utilization[i_elem][i_local]]
}

fn cells(triangles: &[[u32; 6]], linear_triangles: bool) -> Cells {
    let split = |[a, b, c, ab, bc, ca]: [u32; 6]| [[a, ab, ca], [ab, b, bc], [ca, bc, c], [ab, bc, ca]];
    let (connectivity, nodes_each, kind): (Vec<u64>, u64, CellType) = if linear_triangles {
        (triangles.iter().flat_map(|t| split(*t)).flatten().map(u64::from).collect(), 3, CellType::Triangle)
    } else {
        (triangles.iter().flatten().map(|node| u64::from(*node)).collect(), 6, CellType::QuadraticTriangle)
    };
    let n_cells = connectivity.len() as u64 / nodes_each;
    Cells {
        cell_verts: VertexNumbers::XML { connectivity, offsets: (1..=n_cells).map(|i| i * nodes_each).collect() },
        types: vec![kind; n_cells as usize],
    }
}

#[cfg(test)]
mod tests;
