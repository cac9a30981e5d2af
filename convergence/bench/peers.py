"""`python -m convergence.bench.peers CASE LEVELS METHOD`: NGSolve on the finest mesh here, in JSON.

Quadratic cells on the nodes of our own mesh: NGSolve gets a lattice of straight cells and a quadratic
deformation that brings its vertices and the middles of its edges to our places. METHOD is cholesky (the
finest mesh alone), multigrid (the coarsest level's lattice refined up to it, by bisection, so that some
diagonals run otherwise) or bddc. Counted are assembly and solution of the finest level, not the mesh; the
peak counts all.
"""

import itertools
import json
import sys
import time
from typing import Any

import numpy as np

from convergence.bench.cases import CASES, STEEL, TENSION, Case, lattice
from convergence.memory import MB, peak_memory

MISSING = "NGSolve is not installed; the comparison needs it: pip install 'meshassay[bench]'"
THREADS = 2
TOLERANCE, MOST_ITERATIONS = 1e-10, 500
NAMES = ("hole", "outer", "symmetry_y", "symmetry_x", "symmetry_z", "free")


def peer() -> tuple[Any, Any]:
    """Return the modules of NGSolve and its meshes; SystemExit says what is missing."""
    try:
        import netgen.meshing
        import ngsolve
    except ImportError as error:
        raise SystemExit(MISSING) from error
    return ngsolve, netgen.meshing


def _cells(corners: np.ndarray, shape: str, mirrored: np.ndarray) -> np.ndarray:
    """Return the cells (m, k) of squares or cubes by their corners (2, 2, [2,] m)."""
    if shape == "hexahedron":
        order = [(0, 0, 0), (1, 0, 0), (1, 1, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (1, 1, 1), (0, 1, 1)]
        return np.array([corners[at] for at in order]).T
    if shape == "triangle":
        a, b, c, d = corners[0, 0], corners[1, 0], corners[1, 1], corners[0, 1]
        one, two = np.where(mirrored, [a, b, d], [a, b, c]), np.where(mirrored, [b, c, d], [a, c, d])
        return np.concatenate([one, two], axis=1).T
    found = []
    for path in itertools.permutations(range(3)):
        at, chain = [0, 0, 0], [(0, 0, 0)]
        for axis in path:
            at[axis] = 1
            chain.append((at[0], at[1], at[2]))
        if np.linalg.det(np.eye(3)[list(path)]) < 0.0:
            chain[2], chain[3] = chain[3], chain[2]
        found.append(np.array([corners[place] for place in chain]).T)
    return np.concatenate(found)


def _skin(numbers: np.ndarray, shape: str) -> list[tuple[int, list[int]]]:
    """Return the facets of a lattice of numbers with the index of their name, from 1."""
    found = []
    for axis, end in itertools.product(range(numbers.ndim), (0, -1)):
        side = np.take(numbers, end, axis=axis)
        if side.ndim == 1:
            facets = np.array([side[:-1], side[1:]])
        else:
            a, b, c, d = side[:-1, :-1], side[1:, :-1], side[1:, 1:], side[:-1, 1:]
            square = np.array([part.ravel() for part in (a, b, c, d)])
            halves = np.hstack([square[[0, 1, 2]], square[[0, 2, 3]]])
            facets = square if shape == "hexahedron" else halves
        found += [(2 * axis + 1 - end, facet) for facet in facets.T.tolist()]
    return found


def straight_mesh(case: Case, level: int) -> Any:
    """Return NGSolve's mesh of the lattice itself, vertices at whole numbers of the level's cells."""
    ngsolve, meshing = peer()
    counts = case.counts(level)
    size = (counts[0], 2 * counts[1], *counts[2:])
    flat = len(size) == 2
    ends = tuple(count + 1 for count in size)
    places = np.moveaxis(np.indices(ends), 0, -1).reshape(-1, len(size)).astype(float)
    numbers = 1 + np.arange(len(places)).reshape(ends)
    every = itertools.product((slice(0, -1), slice(1, None)), repeat=len(size))
    corners = np.array([numbers[at].ravel() for at in every]).reshape(*[2] * len(size), -1)
    mirrored = np.tile(np.arange(size[1]) >= counts[1], size[0])
    made = meshing.Mesh(dim=len(size))
    for place in places.tolist():
        made.Add(meshing.MeshPoint(meshing.Pnt(*place, *[0.0] * (3 - len(size)))))
    for number in range(1 if flat else 6):
        made.Add(meshing.FaceDescriptor(surfnr=number + 1, domin=1, bc=number + 1))
    for cell in _cells(corners, case.shape, mirrored).tolist():
        made.Add(meshing.Element2D(1, cell) if flat else meshing.Element3D(1, cell))
    for name, facet in _skin(numbers, case.shape):
        made.Add(meshing.Element1D(facet, index=name) if flat else meshing.Element2D(name, facet))
    for number in range(2 * len(size)):
        made.SetBCName(number, NAMES[number])
    return ngsolve.Mesh(made)


class Deformation:
    """Brings a lattice mesh, however often refined, to the places of a level's nodes."""

    def __init__(self, mesh: Any, case: Case, level: int):
        self.ngsolve, _ = peer()
        self.mesh, self.places = mesh, lattice(case, level)
        self.field = self.ngsolve.GridFunction(self.ngsolve.VectorH1(mesh, order=2))

    def update(self) -> None:
        """Follow a refinement of the mesh."""
        self.field.space.Update()
        self.field.Update()

    def apply(self, steps: int) -> None:
        """Bend the mesh; `steps` is how many steps of the level's lattice one unit of it is."""
        space, mesh = self.field.space.components[0], self.mesh
        names = [self.ngsolve.NodeId(self.ngsolve.EDGE, edge) for edge in range(mesh.nedge)]
        owned = [(name, numbers[0]) for name in names if len(numbers := space.GetDofNrs(name)) == 1]
        used = [(name, number) for name, number in owned if number >= 0]
        ends = np.array([[vertex.nr for vertex in mesh[name].vertices] for name, _ in used])
        dimension = self.places.shape[-1]
        vertices = np.array(mesh.ngmesh.Coordinates())[: mesh.nv, :dimension]
        values = np.zeros((space.ndof, dimension))
        values[: mesh.nv] = self._shift(vertices, steps)
        middles = self._shift(0.5 * (vertices[ends[:, 0]] + vertices[ends[:, 1]]), steps)
        bulge = middles - 0.5 * (values[ends[:, 0]] + values[ends[:, 1]])
        values[[number for _, number in used]] = -8.0 * bulge  # its edge function is -1/8 in the middle
        self.field.vec.FV().NumPy()[:] = values.T.ravel()
        mesh.SetDeformation(self.field)

    def _shift(self, at: np.ndarray, steps: int) -> np.ndarray:
        index = tuple(np.rint(at * steps).astype(int).T)
        return np.asarray(self.places[index] - at)


def solved(name: str, levels: int, method: str) -> dict[str, Any]:
    """Return seconds of assembly and solution, iterations, energy, unknowns and the peak in GB."""
    ngsolve, _ = peer()
    ngsolve.SetNumThreads(THREADS)
    case = CASES[name]
    first = 0 if method == "multigrid" else levels - 1
    mesh = straight_mesh(case, first)
    deformation = Deformation(mesh, case, levels - 1)
    held = {f"dirichlet{axis}": f"symmetry_{axis}" for axis in "xyz"[: mesh.dim]}
    space = ngsolve.VectorH1(mesh, order=2, **held)
    stiffness, load = _forms(ngsolve, space, method == "bddc")
    precondition = None if method == "cholesky" else ngsolve.Preconditioner(stiffness, method)
    start = 0.0
    for level in range(first, levels):
        if level > first:
            mesh.UnsetDeformation()
            mesh.Refine()
            space.Update()
            deformation.update()
        deformation.apply(2 ** (levels - first))
        start = time.perf_counter()
        with ngsolve.TaskManager():
            stiffness.Assemble()
            load.Assemble()
    assembled = time.perf_counter()
    with ngsolve.TaskManager():
        energy, iterations = _solve(ngsolve, space, stiffness, load, precondition)
    return {
        "assembly": assembled - start,
        "solution": time.perf_counter() - assembled,
        "iterations": iterations,
        "energy": energy,
        "unknowns": space.ndof,
        "peak": peak_memory() * MB / 1e9,
    }


def _solve(ngsolve: Any, space: Any, stiffness: Any, load: Any, precondition: Any) -> tuple[float, int]:
    """Return the energy and the iterations, none where there is no preconditioner."""
    answer = ngsolve.GridFunction(space)
    if precondition is None:
        inverse = stiffness.mat.Inverse(space.FreeDofs(), inverse="sparsecholesky")
        answer.vec.data = inverse * load.vec
        return 0.5 * ngsolve.InnerProduct(answer.vec, load.vec), 0
    inverse = ngsolve.krylovspace.CGSolver(
        stiffness.mat, precondition.mat, tol=TOLERANCE, maxiter=MOST_ITERATIONS
    )
    right = load.vec.CreateVector()
    right.data = load.vec
    if stiffness.condense:
        right.data += stiffness.harmonic_extension_trans * load.vec
    answer.vec.data = inverse * right
    if stiffness.condense:
        answer.vec.data += stiffness.harmonic_extension * answer.vec
        answer.vec.data += stiffness.inner_solve * load.vec
    return 0.5 * ngsolve.InnerProduct(answer.vec, load.vec), inverse.iterations


def _forms(ngsolve: Any, space: Any, condensed: bool) -> tuple[Any, Any]:
    """Return the stiffness and the load of the plate, flat or solid."""
    young, nu = STEEL.young, STEEL.poisson
    flat = space.mesh.dim == 2
    shear = young / (2.0 * (1.0 + nu))
    first = young * nu / ((1.0 - nu**2) if flat else (1.0 + nu) * (1.0 - 2.0 * nu))
    u, v = space.TnT()
    strain_u, strain_v = ngsolve.Sym(ngsolve.Grad(u)), ngsolve.Sym(ngsolve.Grad(v))
    stiffness = ngsolve.BilinearForm(space, symmetric=True, condense=condensed)
    energy = 2.0 * shear * ngsolve.InnerProduct(strain_u, strain_v) + first * ngsolve.div(u) * ngsolve.div(v)
    stiffness += energy * ngsolve.dx
    load = ngsolve.LinearForm(space)
    on_side = ngsolve.IfPos(ngsolve.x - ngsolve.y, 1.0, 0.0)  # of the outer faces that with x the larger
    load += TENSION * on_side * v[0] * ngsolve.ds("outer")
    return stiffness, load


if __name__ == "__main__":
    print(json.dumps(solved(sys.argv[1], int(sys.argv[2]), sys.argv[3])))
