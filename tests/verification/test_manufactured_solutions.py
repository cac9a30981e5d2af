"""Rates of convergence in every kind, shape and degree k, isotropic and orthotropic, by manufactured fields.

A displacement is chosen, the body force and the tractions that belong to it are applied (Roache 2002, J.
Fluids Eng. 124:4). Theory for a smooth solution (Strang & Fix 1973, An Analysis of the Finite Element Method,
ch. 3): displacement h^(k+1) in L2, stress h^k in the energy norm, strain energy h^(2k) where supports are
homogeneous.
The order seen on two meshes is off by what the next power leaves, c h / ln 2: a tenth of a power where
cells span an eighth of the part or less, two tenths in a solid, whose cells are coarser.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
import pytest

from convergence.fem.geometry import at_rule
from convergence.fem.loads import BodyForce, Traction
from convergence.fem.material import Material, ProblemKind
from convergence.fem.mesh import mesh
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart, Exact, Problem, Support
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution
from convergence.fem.strain import ROWS, volumes

ISOTROPIC = Material(1000.0, 0.3)
LAYERED = Material(
    young=1000.0,
    poisson=0.25,
    young_y=400.0,
    young_z=150.0,
    poisson_yz=0.2,
    poisson_zx=0.05,
    shear_xy=200.0,
    shear_yz=90.0,
    shear_zx=120.0,
)
TURNED = Material(**{**LAYERED.__dict__, "angle": 30.0})
WAVES = np.array([[1.0, 0.9, 0.7], [0.8, 1.1, 0.6], [0.9, 0.7, 1.2]])
AMPLITUDES = (1.0, -0.7, 0.8)
PLANE_KINDS: tuple[ProblemKind, ...] = ("plane stress", "plane strain", "axisymmetric")
NEXT_POWER = {1: 0.1, 2: 0.1, 3: 0.2}


@dataclass(frozen=True)
class Manufactured:
    """u_c is a product of sines of its own coordinate and cosines of the others: zero at x_c = 0."""

    kind: ProblemKind
    material: Material

    @property
    def dimension(self) -> int:
        return {"rod": 1, "solid": 3}.get(self.kind, 2)

    def derivative(self, component: int, by: Sequence[int], places: Any) -> np.ndarray:
        """Return the derivative of a component by the coordinates `by`, one after the other."""
        product = np.full_like(places[0], AMPLITUDES[component])
        for number, x in enumerate(places):
            wave, order = WAVES[component, number], list(by).count(number)
            phase = 0.5 * np.pi * (order + (number != component))
            product = product * wave**order * np.sin(wave * x + phase)
        return product

    def strain(self, places: Any, by: tuple[int, ...] = ()) -> np.ndarray:
        """Return the strains, or their derivative by one coordinate."""
        rows = []
        for terms in ROWS[self.dimension]:
            parts = [self.derivative(component, (by_of, *by), places) for component, by_of in terms]
            rows.append(sum(parts, start=np.zeros_like(places[0])))
        if self.kind == "axisymmetric":
            r = places[0]
            rows[2] = self.derivative(0, by, places) / r
            if by == (0,):
                rows[2] = rows[2] - self.derivative(0, (), places) / r**2
        return np.array(rows)

    def stress(self, *places: np.ndarray, by: tuple[int, ...] = ()) -> np.ndarray:
        elasticity = self.material.elasticity(self.kind)
        return np.einsum("st,t...->s...", elasticity, self.strain(places, by))

    def displacement(self, *places: np.ndarray) -> np.ndarray:
        return np.array([self.derivative(c, (), places) for c in range(self.dimension)])

    def tensor(self, stress: np.ndarray) -> list[list[np.ndarray]]:
        if self.dimension == 1:
            return [[stress[0]]]
        if self.dimension == 2:
            return [[stress[0], stress[3]], [stress[3], stress[1]]]
        xx, yy, zz, xy, yz, zx = stress
        return [[xx, xy, zx], [xy, yy, yz], [zx, yz, zz]]

    def body_force(self, *places: np.ndarray) -> np.ndarray:
        """Return minus the divergence of the stress."""
        slopes = [self.tensor(self.stress(*places, by=(d,))) for d in range(self.dimension)]
        total = sum(np.array(slopes[d][d]) for d in range(self.dimension))
        if self.kind == "axisymmetric":
            xx, _, hoop, xy = self.stress(*places)
            total = total + np.array([xx - hoop, xy]) / places[0]
        return -np.asarray(total)

    def traction(self, normal: np.ndarray) -> Callable[..., np.ndarray]:
        return lambda *places: np.einsum("ij...,j->i...", np.array(self.tensor(self.stress(*places))), normal)


def plan() -> Part:
    """Return a quarter whose free sides are at odd angles; x = 0 and y = 0 are its symmetry lines."""
    corners = {"o": (0.0, 0.0), "a": (1.2, 0.0), "b": (1.1, 1.3), "c": (0.0, 1.0)}
    sides = {"y": ("o", "a"), "right": ("a", "b"), "top": ("b", "c"), "x": ("c", "o")}
    blocks = (("o", "a", "b", "c"),)
    return Part(corners, blocks, boundaries={name: (side,) for name, side in sides.items()})


def part_of(kind: ProblemKind) -> AnyPart:
    if kind == "rod":
        return RodPart({"x": (0.0,), "right": (1.2,)})
    return SolidPart(plan(), (("z", 0.0), ("front", 0.9))) if kind == "solid" else plan()


def outward(kind: ProblemKind) -> dict[str, np.ndarray]:
    """Return the unit normals of the sides, but not of an axis of revolution, where no area is."""
    sides = {"x": [-1.0, 0.0, 0.0], "y": [0.0, -1.0, 0.0], "z": [0.0, 0.0, -1.0], "front": [0.0, 0.0, 1.0]}
    sides |= {"right": [1.3, 0.1, 0.0], "top": [-0.3, 1.1, 0.0]}
    part = part_of(kind)
    normals = {name: np.array(sides[name][: part.dimension]) for name in part.boundaries}
    if kind == "axisymmetric":
        del normals["x"]
    return {name: normal / np.linalg.norm(normal) for name, normal in normals.items()}


def problem_of(kind: ProblemKind, material: Material) -> Problem:
    field = Manufactured(kind, material)
    tractions = (Traction(name, field.traction(normal)) for name, normal in outward(kind).items())
    names = "xyz"[: field.dimension]
    return Problem(
        title="Manufactured",
        part=part_of(kind),
        materials={"body": material},
        supports=tuple(Support(name, **{name: 0.0}, boundary=name) for name in names),
        loads=(BodyForce(field.body_force), *tractions),
        kind=kind,
        exact=Exact(field.displacement, field.stress),
    )


def exact_energy(problem: Problem) -> float:
    """Return the energy of the exact field, by Gauss quadrature far beyond round-off."""
    shape = {1: "line", 2: "quadrilateral", 3: "hexahedron"}[problem.part.dimension]
    counts = problem.part.divisions(size=None, divisions=1)
    at = at_rule(mesh(problem.part, counts, shape=shape, degree=1), 25)  # type: ignore[arg-type]
    assert problem.exact is not None
    stress = problem.exact.stress(*at.x)
    compliance = problem.materials["body"].compliance(problem.kind)
    density = np.einsum("s...,st,t...->...", stress, compliance, stress)
    return float(0.5 * (density * volumes(problem, at)).sum())


CASES = [
    *(("rod", "line", degree, ISOTROPIC, 8, 3) for degree in (1, 2)),
    *(
        (kind, shape, degree, material, 4, 4)
        for kind in PLANE_KINDS
        for shape in ("triangle", "quadrilateral")
        for degree in (1, 2)
        for material in (ISOTROPIC, LAYERED if kind == "axisymmetric" else TURNED)
    ),
    *(
        ("solid", shape, degree, TURNED, 2, 4 if degree == 1 else 3)
        for shape in ("tetrahedron", "hexahedron", "wedge")
        for degree in (1, 2)
    ),
]


def label(case: Any) -> str:
    kind, shape, degree, material, *_ = case
    return f"{kind}, {shape}s of degree {degree}, {'isotropic' if material.isotropic else 'orthotropic'}"


@pytest.mark.slow
@pytest.mark.parametrize("case", CASES, ids=label)
def test_rates(climb: Any, displacement_error: Any, energy_norm: Any, last_order: Any, case: Any) -> None:
    kind, shape, degree, material, divisions, levels = case
    problem = problem_of(kind, material)
    solutions: list[Solution] = climb(problem, shape, degree, divisions, levels)
    room = NEXT_POWER[problem.part.dimension]
    # theory bounds the displacement's error from above; stress and energy cannot do better either
    assert last_order(solutions, [displacement_error(s) for s in solutions]) > degree + 1 - room
    assert last_order(solutions, [energy_norm(s) for s in solutions]) == pytest.approx(degree, abs=room)
    errors = [exact_energy(problem) - solution.energy for solution in solutions]
    assert min(errors) > 0.0
    assert last_order(solutions, errors) == pytest.approx(2 * degree, abs=2 * room)
