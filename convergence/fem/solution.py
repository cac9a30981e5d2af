"""A solved level: displacement, energy, work, reactions and resultants."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from scipy import sparse

from convergence.fem.assembly import foundation, stiffness, stretching
from convergence.fem.equations import Equations
from convergence.fem.held import Held, held_by
from convergence.fem.load_vector import load_vector, thermal_load
from convergence.fem.loads import rigid_motions
from convergence.fem.mesh import Mesh
from convergence.fem.problem import ElasticSupport, Problem
from convergence.fem.strain import is_heated


@dataclass(frozen=True, eq=False)
class Solution:
    """The discrete solution. `unknowns` is interleaved, D per node.

    `assembled` is the stiffness of the material, None where it was not needed for the displacement, and
    `foundations` those of the elastic supports; `load` are the nodal forces of the loads, `thermal` those
    that a temperature asks for, with their energy when all is held.
    """

    problem: Problem
    mesh: Mesh
    assembled: sparse.csr_matrix | None
    load: np.ndarray
    unknowns: np.ndarray
    held: Held
    foundations: Mapping[str, sparse.csr_matrix] = field(default_factory=dict)
    thermal: np.ndarray | None = None
    thermal_energy: float = 0.0

    @property
    def displacement(self) -> np.ndarray:
        """Return the displacement (D, nodes)."""
        return self.unknowns.reshape(-1, self.mesh.dimension).T

    @cached_property
    def _stretching(self) -> np.ndarray:
        """Return K u of the material."""
        if self.assembled is None:
            return stretching(self.problem, self.mesh, self.unknowns)
        return np.asarray(self.assembled @ self.unknowns)

    @property
    def internal(self) -> np.ndarray:
        """Return the nodal forces of the material, K u less those of the temperature."""
        return self._stretching if self.thermal is None else self._stretching - self.thermal

    @cached_property
    def springs(self) -> np.ndarray:
        """Return the nodal forces that stretch the elastic supports."""
        forces = np.zeros_like(self.load)
        for matrix in self.foundations.values():
            forces += matrix @ self.unknowns
        return forces

    @property
    def energy(self) -> float:
        """Return the elastic strain energy of the material."""
        thermal = 0.0 if self.thermal is None else 0.5 * float(self.thermal @ self.unknowns)
        return 0.5 * float(self.unknowns @ self.internal) - thermal + self.thermal_energy

    @property
    def quadratic_energy(self) -> float:
        """Return ½ a(u, u) of material and elastic supports: it rises to its limit as the mesh is refined.

        Without temperature and elastic supports it is the strain energy.
        """
        return 0.5 * float(self.unknowns @ (self._stretching + self.springs))

    @property
    def work(self) -> float:
        """Return ½ (f + reactions)·u of loads, temperature and prescribed displacements."""
        forces = self.load + self.holding
        return 0.5 * float(self.unknowns @ (forces if self.thermal is None else forces + self.thermal))

    @cached_property
    def holding(self) -> np.ndarray:
        """Return the nodal forces of the rigid supports, zero elsewhere."""
        missing = self.held.turned(self.internal + self.springs - self.load)
        forces = np.zeros_like(missing)
        forces[self.held.numbers] = missing[self.held.numbers]
        return self.held.back(forces)

    @property
    def reactions(self) -> np.ndarray:
        """Return the nodal forces of all supports on the part."""
        return np.asarray(self.holding - self.springs)

    def reaction(self, support: str, about: tuple[float, ...] | None = None) -> np.ndarray:
        """Return force and moment of a support on the part, as `resultant`."""
        return self.resultant(self.reactions_of(support), about)

    def reactions_of(self, support: str) -> np.ndarray:
        """Return the nodal forces of one support on the part."""
        if support in self.foundations:
            return np.asarray(-(self.foundations[support] @ self.unknowns))
        turned = self.held.turned(self.holding)
        forces = np.zeros_like(turned)
        forces[self.held.by_support[support]] = turned[self.held.by_support[support]]
        return self.held.back(forces)

    def resultant(self, forces: np.ndarray, about: tuple[float, ...] | None = None) -> np.ndarray:
        """Return force and moment about a point (the origin) of interleaved nodal forces.

        In a plane Fx, Fy and M counter-clockwise, in a solid Fx, Fy, Fz, Mx, My, Mz, of a rod Fx. Around
        a ring the radial forces cancel: only the force along the axis is left.
        """
        nodes = self.mesh.nodes
        arm = nodes if about is None else nodes - np.array(about)[:, None]
        total = np.einsum("acn,nc->a", rigid_motions(arm), forces.reshape(-1, len(nodes)))
        if self.problem.kind == "axisymmetric":
            return np.array([0.0, total[1], 0.0])
        return np.asarray(total)


def solve(problem: Problem, mesh: Mesh, start: np.ndarray | None = None) -> Solution:
    """Solve a problem on a mesh, from a first guess of the unknowns if given. SolvingError where it fails."""
    return solve_cases([problem], mesh, [start])[0]


def solve_cases(
    problems: Sequence[Problem], mesh: Mesh, starts: Sequence[np.ndarray | None] | None = None
) -> list[Solution]:
    """Solve problems that differ in their loads and prescribed values only, with one factorization."""
    first = problems[0]
    matrix = stiffness(first, mesh)
    springs = {s.name: foundation(first, mesh, s) for s in first.supports if isinstance(s, ElasticSupport)}
    equations: Equations | None = None
    solutions: list[Solution] = []
    for problem, start in zip(problems, starts or [None] * len(problems), strict=True):
        held = held_by(problem, mesh)
        equations = equations or Equations(mesh, sum(springs.values(), start=matrix), held)
        load = load_vector(problem, mesh)
        thermal, energy = thermal_load(problem, mesh) if is_heated(problem) else (None, 0.0)
        forces = load if thermal is None else load + thermal
        known = [found.unknowns for found in solutions] + ([] if start is None else [start])
        if len(known) > 1 and not held.values.any():
            start = _nearest(equations.whole, forces, np.array(known))
        u = equations.solve(forces, held.values, start)
        solutions.append(Solution(problem, mesh, matrix, load, u, held, springs, thermal, energy))
    return solutions


def _nearest(matrix: sparse.csr_matrix, forces: np.ndarray, known: np.ndarray) -> np.ndarray:
    """Return the combination of known displacements (k, n) that is nearest to K u = f in the energy norm."""
    stretched = np.array([matrix @ u for u in known])
    factors = np.linalg.lstsq(known @ stretched.T, known @ forces, rcond=1e-12)[0]
    return np.asarray(factors @ known)
