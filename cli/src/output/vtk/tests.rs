//! The fields files as their own library reads them back; independent readers are in `tests/readers/`.
use vtkio::model::{DataSet, IOBuffer, Piece, Vtk};

use super::super::fixture;
use super::{FieldError, field, file_names, series};

fn read(bytes: &[u8]) -> vtkio::model::UnstructuredGridPiece {
    let Vtk { data: DataSet::UnstructuredGrid { pieces, .. }, .. } = Vtk::parse_xml(bytes).unwrap() else { panic!("a grid is expected") };
    let Some(Piece::Inline(piece)) = pieces.into_iter().next() else { panic!("a piece is expected") };
    *piece
}

#[test]
fn coordinates_come_back_bit_for_bit_and_cells_are_quadratic() {
    let snapshot = fixture::snapshot(3.0);
    let bytes = field(&snapshot, false).unwrap();
    let grid = read(&bytes);
    assert_eq!(grid.cells.types.len(), snapshot.mesh.triangles.len());
    let IOBuffer::F64(points) = grid.points else { panic!("f64 is expected") };
    let (connectivity, _) = grid.cells.cell_verts.into_xml();
    for (i, node) in snapshot.mesh.triangles.iter().flatten().enumerate() {
        let at = 3 * connectivity[i] as usize;
        assert_eq!([points[at], points[at + 1]].map(f64::to_bits), snapshot.mesh.points_m[*node as usize].map(f64::to_bits));
    }
    let text = String::from_utf8(bytes).unwrap();
    assert!(text.contains("type=\"Int64\" Name=\"connectivity\""));
}

#[test]
fn each_layer_keeps_its_own_value_at_a_contact() {
    let mut snapshot = fixture::snapshot(0.0);
    let before = super::Points::gather(&snapshot).unwrap().owner.len();
    assert_eq!(before, snapshot.mesh.points_m.len(), "a continuous field needs no second point");
    for (i_elem, region) in snapshot.mesh.regions.iter().enumerate() {
        if *region == 0 {
            snapshot.effective_stress_pa[i_elem].iter_mut().for_each(|stress| stress[0] += 1e5);
        }
    }
    let after = super::Points::gather(&snapshot).unwrap();
    let level = 27.4_f64;
    let on_contact = snapshot.mesh.points_m.iter().filter(|p| (p[1] - level).abs() < 1e-9).count();
    assert_eq!(after.owner.len() - before, on_contact);
}

#[test]
fn linear_triangles_are_four_an_element() {
    let snapshot = fixture::snapshot(1.0);
    let grid = read(&field(&snapshot, true).unwrap());
    assert_eq!(grid.cells.types.len(), 4 * snapshot.mesh.triangles.len());
}

#[test]
fn a_value_that_is_no_number_is_an_error() {
    let mut snapshot = fixture::snapshot(1.0);
    snapshot.effective_stress_pa[7][3][1] = f64::NAN;
    let error = field(&snapshot, false).unwrap_err();
    assert!(matches!(error, FieldError::NotFinite { i_elem: 7, .. }), "{error}");
}

#[test]
fn the_series_lists_depths_as_times_and_names_are_unique() {
    assert_eq!(file_names(&[0.0, 2.3]), ["depth-0.00.vtu", "depth-2.30.vtu"]);
    assert_eq!(file_names(&[5.1, 5.101]), ["depth-5.100.vtu", "depth-5.101.vtu"]);
    let text = series(&[0.0, 2.3], &["clay -- cap".into()]);
    assert!(text.contains("<DataSet timestep=\"2.3\" part=\"0\" file=\"depth-2.30.vtu\"/>"));
    assert!(!text.contains("clay --"));
}
