"""One run of a peer from mesh arrays to displacements, in a process of its own. Prints one JSON line.

usage: peer.py MESH METHOD SOLUTION, METHOD one of superlu, superlu-mmd, cholmod, cholmod-metis; SOLUTION is a file of ours to compare with
"""
import json
import resource
import sys
import time

import numpy as np
import scipy.sparse.linalg as sla
from skfem import Basis, BilinearForm, ElementTriP2, ElementVector, LinearForm, MeshTri2, condense
from skfem.helpers import ddot, eye, sym_grad, trace

YOUNGS_MODULUS_PA, POISSONS_RATIO, UNIT_WEIGHT_N_PER_M3 = 2e9, 0.3, 22e3
LAME = YOUNGS_MODULUS_PA * POISSONS_RATIO / ((1 + POISSONS_RATIO) * (1 - 2 * POISSONS_RATIO))
SHEAR = YOUNGS_MODULUS_PA / (2 * (1 + POISSONS_RATIO))


@BilinearForm
def stiffness(u, v, _):
    strain = sym_grad(u)
    return ddot(2 * SHEAR * strain + LAME * eye(trace(strain), 2), sym_grad(v))


@LinearForm
def weight(v, _):
    return -UNIT_WEIGHT_N_PER_M3 * v[1]


def read_mesh(path):
    with open(path) as file:
        n_nodes, _, n_elements = map(int, file.readline().split())
        nodes = np.loadtxt(file, max_rows=n_nodes)
        triangles = np.loadtxt(file, dtype=np.int64, max_rows=n_elements)
    return nodes[:, :2], nodes[:, 2:] > 0.5, triangles


def solve(matrix, right, method):
    if method == "superlu":
        return sla.spsolve(matrix.tocsc(), right)
    if method == "superlu-mmd":
        return sla.splu(matrix.tocsc(), permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.0, options={"SymmetricMode": True}).solve(right)
    from sksparse.cholmod import cholesky

    ordering = "metis" if method == "cholmod-metis" else "amd"
    return cholesky(matrix.tocsc(), ordering_method=ordering)(right)


def main():
    mesh_file, method, solution_file = sys.argv[1:]
    points, fixed, triangles = read_mesh(mesh_file)
    clock, processor = time.perf_counter(), time.process_time()
    mesh = MeshTri2(points.T.copy(), triangles.T.copy())
    basis = Basis(mesh, ElementVector(ElementTriP2()))
    # Unknowns of each node: the rows of `element_dofs` follow the six nodes of a triangle, two unknowns each.
    unknowns = np.empty((len(points), 2), dtype=np.int64)
    for i in range(6):
        for direction in range(2):
            unknowns[triangles[:, i], direction] = basis.element_dofs[2 * i + direction]
    matrix = stiffness.assemble(basis)
    loads = weight.assemble(basis)
    reduced, right, x, inner = condense(matrix, loads, D=unknowns[fixed])
    assembled = time.perf_counter()
    x[inner] = solve(reduced, right, method)
    seconds, processor = time.perf_counter() - clock, time.process_time() - processor
    ours = np.loadtxt(solution_file)
    print(
        json.dumps(
            {
                "seconds": seconds,
                "processor_seconds": processor,
                "solve_seconds": seconds - (assembled - clock),
                "unknowns": int(len(right)),
                "peak_bytes": 1024 * resource.getrusage(resource.RUSAGE_SELF).ru_maxrss,
                "difference": float(np.abs(x[unknowns] - ours).max() / np.abs(ours).max()),
            }
        )
    )


main()
