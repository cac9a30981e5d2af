"""A solved level: displacement, energy, work, reactions and resultants."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from scipy import sparse

from convergence.errors import SolvingError, Unsuitable
from convergence.fem.assembly import load_vector, stiffness
from convergence.fem.equations import solve_equations
from convergence.fem.mesh import Mesh
from convergence.fem.problem import Problem, Support

LOOSE = 1e-12


@dataclass(frozen=True, eq=False)
class Solution:
    """The discrete solution. `unknowns` is interleaved; `held` maps each support to its unknowns."""

    problem: Problem
    mesh: Mesh
    stiffness: sparse.csr_matrix
    load: np.ndarray
    unknowns: np.ndarray
    held: Mapping[str, np.ndarray]

    @property
    def displacement(self) -> np.ndarray:
        """Return the displacement (2, nodes)."""
        return self.unknowns.reshape(-1, 2).T

    @cached_property
    def internal(self) -> np.ndarray:
        """Return the internal nodal forces K u."""
        return np.asarray(self.stiffness @ self.unknowns)

    @property
    def energy(self) -> float:
        """Return the strain energy ½ u·K u."""
        return 0.5 * float(self.unknowns @ self.internal)

    @property
    def work(self) -> float:
        """Return the work of loads and prescribed displacements, ½ (f + reactions)·u."""
        return 0.5 * float(self.unknowns @ (self.load + self.reactions))

    @cached_property
    def reactions(self) -> np.ndarray:
        """Return K u − f at the held unknowns, zero elsewhere."""
        forces = np.zeros_like(self.load)
        for numbers in self.held.values():
            forces[numbers] = (self.internal - self.load)[numbers]
        return forces

    def reaction(self, support: str, about: tuple[float, float] = (0.0, 0.0)) -> np.ndarray:
        """Return force x, force y and moment about a point (counter-clockwise) of a support."""
        forces = np.zeros_like(self.load)
        forces[self.held[support]] = self.reactions[self.held[support]]
        return self.resultant(forces, about)

    def resultant(self, forces: np.ndarray, about: tuple[float, float] = (0.0, 0.0)) -> np.ndarray:
        """Return force x, force y and moment about a point of interleaved nodal forces.

        Around a ring the radial forces cancel: only the force along the axis is left.
        """
        x, y = self.mesh.nodes
        fx, fy = forces[::2], forces[1::2]
        moment = (x - about[0]) @ fy - (y - about[1]) @ fx
        if self.problem.kind == "axisymmetric":
            return np.array([0.0, fy.sum(), 0.0])
        return np.array([fx.sum(), fy.sum(), moment])


def solve(problem: Problem, mesh: Mesh) -> Solution:
    """Solve a problem on a mesh. SolvingError where it cannot be solved."""
    held, numbers, values = _held(problem, mesh)
    _require_no_rigid_motion(problem, mesh, numbers)
    matrix, load = stiffness(problem, mesh), load_vector(problem, mesh)
    u = solve_equations(mesh, matrix, load, numbers, values)
    return Solution(problem, mesh, matrix, load, u, held)


def _held(problem: Problem, mesh: Mesh) -> tuple[dict[str, np.ndarray], np.ndarray, np.ndarray]:
    """Return the unknowns of each support, all of them, and their values; the first support keeps a node."""
    held: dict[str, np.ndarray] = {}
    taken = np.zeros(2 * mesh.nodes.shape[1], dtype=bool)
    values = np.zeros(len(taken))
    for support in problem.supports:
        nodes = support_nodes(support, mesh)
        mine = []
        for component, value in enumerate((support.x, support.y)):
            if value is None:
                continue
            numbers = 2 * nodes + component
            x, y = mesh.nodes[:, nodes]
            wanted = np.asarray(value(x, y) if callable(value) else np.full(len(nodes), value))
            new = ~taken[numbers]
            values[numbers[new]] = wanted[new]
            taken[numbers] = True
            mine.append(numbers[new])
        if not mine:
            raise Unsuitable([(support.name, None, "a support that holds x, y or both")])
        held[support.name] = np.concatenate(mine)
    numbers = np.flatnonzero(taken)
    return held, numbers, values[numbers]


def _require_no_rigid_motion(problem: Problem, mesh: Mesh, held: np.ndarray) -> None:
    """Check that the held unknowns stop every rigid motion: balanced loads hide a loose part.

    In a plane these are both shifts and the turn; a ring can only move along its axis.
    """
    x, y = (mesh.nodes - mesh.nodes.mean(axis=1, keepdims=True)) / mesh.part.size
    ones, none = np.ones_like(x), np.zeros_like(x)
    ways = {"move along x": [ones, none], "move along y": [none, ones], "turn": [-y, x]}
    if problem.kind == "axisymmetric":
        ways = {"move along y": [none, ones]}
    motions = np.array(list(ways.values())).transpose(0, 2, 1).reshape(len(ways), -1)[:, held]
    stopped, modes = np.linalg.eigh(motions @ motions.T)
    if stopped[0] <= LOOSE * max(stopped[-1], 1.0):
        way = list(ways)[int(np.abs(modes[:, 0]).argmax())]
        raise SolvingError(f"the supports do not hold the part: it can still {way}; hold it there")


def support_nodes(support: Support, mesh: Mesh) -> np.ndarray:
    """Return the scalar nodes a support acts on."""
    if support.point is not None:
        return np.array([mesh.vertices[support.point]])
    assert support.boundary is not None
    return boundary_nodes(mesh, support.boundary)


def boundary_nodes(mesh: Mesh, boundary: str) -> np.ndarray:
    """Return the scalar nodes on a named boundary."""
    return np.asarray(mesh.skfem.dofs.get_facet_dofs(mesh.facets[boundary]).all())
