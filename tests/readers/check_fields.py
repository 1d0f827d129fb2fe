"""Reads fields/*.vtu of a results folder with two independent readers and compares what they see, value by value.

usage: check_fields.py RESULTS_FOLDER
"""
import pathlib
import sys
import xml.etree.ElementTree as ElementTree

import meshio
import numpy as np
import vtk
from vtk.util.numpy_support import vtk_to_numpy

POINT_ARRAYS = {
    "displacement_m": 3,
    "effective_stress_kpa": 6,
    "total_stress_kpa": 6,
    "principal_major_kpa": 1,
    "principal_minor_kpa": 1,
    "principal_major_direction": 3,
    "water_pressure_kpa": 1,
    "tension_utilization": 1,
    "shear_utilization": 1,
}
QUADRATIC_TRIANGLE = 22


def read_with_vtk(path):
    reader = vtk.vtkXMLUnstructuredGridReader()
    errors = []
    reader.AddObserver("ErrorEvent", lambda *_: errors.append("error"))
    reader.SetFileName(str(path))
    reader.Update()
    assert not errors, f"{path}: the reader reported errors"
    return reader.GetOutput()


def check(path):
    grid = read_with_vtk(path)
    mesh = meshio.read(path)
    assert set(vtk_to_numpy(grid.GetCellTypesArray()) if hasattr(grid, "GetCellTypesArray") else []) <= {QUADRATIC_TRIANGLE, 5}
    points = vtk_to_numpy(grid.GetPoints().GetData())
    assert np.array_equal(points, mesh.points), f"{path}: points differ"
    assert np.all(points[:, 2] == 0.0)
    cells = np.vstack([block.data for block in mesh.cells])
    connectivity = vtk_to_numpy(grid.GetCells().GetConnectivityArray()).reshape(cells.shape)
    assert np.array_equal(connectivity, cells), f"{path}: cells differ"
    for name, components in POINT_ARRAYS.items():
        array = grid.GetPointData().GetArray(name)
        assert array is not None, f"{path}: {name} is missing"
        assert array.GetNumberOfComponents() == components, f"{path}: {name} has {array.GetNumberOfComponents()} components"
        ours, theirs = vtk_to_numpy(array), mesh.point_data[name]
        assert np.all(np.isfinite(ours)), f"{path}: {name} is not finite"
        assert np.array_equal(ours, theirs.reshape(ours.shape)), f"{path}: {name} differs"
    rock = vtk_to_numpy(grid.GetCellData().GetArray("rock_id"))
    assert len(rock) == grid.GetNumberOfCells() and rock.min() >= 0
    check_principal(path, grid)
    check_areas(path, points, cells)
    return grid.GetNumberOfPoints(), grid.GetNumberOfCells()


def check_principal(path, grid):
    """Principal values and direction against an eigenvalue routine on the tensor."""
    get = lambda name: vtk_to_numpy(grid.GetPointData().GetArray(name)).astype(float)
    stress, direction = get("effective_stress_kpa"), get("principal_major_direction")
    plane = np.stack([stress[:, [0, 3]], stress[:, [3, 1]]], axis=1)
    values = np.linalg.eigvalsh(plane)
    scale = np.abs(values).max() + 1e-12
    assert np.abs(values[:, 1] - get("principal_major_kpa")).max() < 1e-5 * scale, f"{path}: major principal stress"
    assert np.abs(values[:, 0] - get("principal_minor_kpa")).max() < 1e-5 * scale, f"{path}: minor principal stress"
    along = np.einsum("ni,nij,nj->n", direction[:, :2], plane, direction[:, :2])
    assert np.abs(along - values[:, 1]).max() < 1e-4 * scale, f"{path}: direction of the major principal stress"


def check_areas(path, points, cells):
    a, b, c = (points[cells[:, i]] for i in range(3))
    doubled = (b[:, 0] - a[:, 0]) * (c[:, 1] - a[:, 1]) - (c[:, 0] - a[:, 0]) * (b[:, 1] - a[:, 1])
    assert doubled.min() > 0, f"{path}: a triangle is turned over"


def main():
    folder = pathlib.Path(sys.argv[1]) / "fields"
    listed = [node.attrib for node in ElementTree.parse(folder / "series.pvd").getroot().iter("DataSet")]
    names = [entry["file"] for entry in listed]
    assert sorted(names) == sorted(path.name for path in folder.glob("*.vtu")), "series.pvd does not list the files"
    times = [float(entry["timestep"]) for entry in listed]
    assert times == sorted(times), "the depths of series.pvd do not grow"
    for name in names:
        n_points, n_cells = check(folder / name)
        print(f"{name}: {n_points} points, {n_cells} cells, same in both readers")
    print(f"{len(names)} passed, 0 failed")


main()
