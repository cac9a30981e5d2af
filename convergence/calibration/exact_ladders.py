"""Ladders of the models with closed-form solutions, every value with its limit."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np

from convergence import rooms
from convergence.dimensions import Located
from convergence.fem.material import material
from convergence.fem.mesh import mesh
from convergence.fem.part import Part, finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.fem.stress import component as component_of

CASES: dict[str, tuple[str, dict[str, Any]]] = {
    "thick cylinder": ("thick_cylinder", {}),
    "thin-walled cylinder": ("thick_cylinder", {"inner_radius": 50.0, "outer_radius": 60.0}),
    "plate with hole": ("perforated_plate", {}),
    "beam": ("exact_cantilever", {}),
    "sharp corner, mode I": ("l_domain", {"mode": "I"}),
    "sharp corner, mode II": ("l_domain", {"mode": "II"}),
}
LADDERS = ((2, 2.0, 5), (4, 1.5, 5))
COMPONENTS = ("xx", "yy", "von_mises")


@dataclass(frozen=True)
class KnownLadder:
    """One quantity on one ladder: sizes and values coarse to fine, the limit, theory's order."""

    case: str
    shape: str
    degree: int
    kind: str
    h: np.ndarray
    f: np.ndarray
    limit: float
    formal_order: float


@dataclass(frozen=True)
class _Probe:
    measure: str
    arguments: dict[str, Any]
    limit: float


def exact_ladders() -> Iterator[KnownLadder]:
    """Yield every quantity of every case × shape × degree × ladder."""
    for case, (model, arguments) in CASES.items():
        problem: Problem = rooms.find("models", model)(**arguments, material=material())
        probes = list(_probes(problem))
        for shape in ("triangle", "quadrilateral"):
            for degree in (1, 2):
                for divisions, ratio, levels in LADDERS:
                    yield from _ladder(case, problem, probes, shape, degree, divisions, ratio, levels)


def _ladder(
    case: str,
    problem: Problem,
    probes: list[_Probe],
    shape: Any,
    degree: int,
    divisions: int,
    ratio: float,
    levels: int,
) -> Iterator[KnownLadder]:
    coarsest = problem.part.divisions(size=None, divisions=divisions)
    meshes = [
        mesh(problem.part, finer(coarsest, ratio, n), shape=shape, degree=degree) for n in range(levels)
    ]
    rows = []
    for level in meshes:
        solution = solve(problem, level)
        rows.append([_measured(solution, probe) for probe in probes])
    h = np.array([level.h for level in meshes])
    for probe, values in zip(probes, np.array(rows).T, strict=True):
        order = rooms.beside("quantities", probe.measure, "formal_order")(degree, shape, probe.arguments)
        kind = rooms.beside("quantities", probe.measure, "KIND")
        yield KnownLadder(case, shape, degree, kind, h, values, probe.limit, order)


def _measured(solution: Solution, probe: _Probe) -> float:
    value = rooms.find("quantities", probe.measure)(solution, **probe.arguments)
    return value.value if isinstance(value, Located) else float(value)


def _probes(problem: Problem) -> Iterator[_Probe]:
    """Yield energy, displacements and stresses at the named points and inside every block."""
    exact, part = problem.exact, problem.part
    assert exact is not None and isinstance(part, Part)
    if exact.energy is not None:
        yield _Probe("strain_energy", {}, exact.energy)
    middle = np.array([0.4])
    inside = [tuple(map(float, part.block(i, middle, middle)[:, 0, 0])) for i in range(len(part.blocks))]
    for at in [*part.points.values(), *inside]:
        x, y = np.array(at[0]), np.array(at[1])
        with np.errstate(all="ignore"):
            stress = exact.stress(x, y)
        for number, name in enumerate("xy"):
            limit = float(exact.displacement(x, y)[number])
            yield _Probe("displacement", {"at": at, "component": name}, limit)
        if not np.all(np.isfinite(stress)):
            continue
        for component in COMPONENTS:
            for recovery in ("recovered", "direct"):
                limit = float(component_of(stress, component))  # type: ignore[arg-type]
                yield _Probe("stress", {"at": at, "component": component, "recovery": recovery}, limit)
