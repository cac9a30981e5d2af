"""Stress intensity factor of a crack in a plane part, by the interaction integral around its tip.

Yau, Wang & Corten 1980, J. Appl. Mech. 47:335 (two states), as a domain integral: Shih, Moran & Nakamura
1986, Int. J. Fract. 30:79. The weight is 1 within half the radius and falls smoothly to 0 at the radius.
Order 2p on a smooth solution, 2 min(p, λ) = 1 with the crack's own λ = 1/2 on uniform meshes (Szabó &
Babuška 1991, ch. 10). The crack is straight within the radius and its faces carry no load there.
"""

from collections.abc import Mapping
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import Direction, Point, PointName, PositiveLength, StressIntensity
from convergence.errors import require
from convergence.fem.geometry import at_rule
from convergence.fem.loads import BodyForce, TemperatureRise
from convergence.fem.mesh import Mesh
from convergence.fem.solution import Solution
from convergence.fem.stress import gradient_at, stress_at
from convergence.quantities._crack import Mode, interaction
from convergence.quantities._place import place_of, unit
from convergence.results import Kind

KIND: Kind = "intensity"

PLANE = ("plane stress", "plane strain")
RULE_ORDER = 10


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return 2p; the exponent of the crack tip limits it to 1 on uniform meshes."""
    return 2.0 * degree


def stress_intensity(
    solution: Solution,
    *,
    tip: Annotated[Point | PointName, "crack tip"],
    ahead: Annotated[Direction, "direction of the crack, from its faces through the tip into the part"],
    radius: Annotated[PositiveLength, "radius around the tip, reaching no other boundary"],
    mode: Annotated[Literal["I", "II"], "opening or sliding"] = "I",
    symmetric: Annotated[bool, "the part is one half, the crack on its symmetry plane"] = False,
) -> StressIntensity:
    """Of isotropic material, without body force or temperature; Unsuitable elsewhere."""
    problem, mesh = solution.problem, solution.mesh
    require((problem.kind in PLANE, "measure", "stress_intensity", f"a part in {' or '.join(PLANE)}"))
    bulk = any(isinstance(load, BodyForce | TemperatureRise) for load in problem.loads)
    require(
        (not bulk, "measure", "stress_intensity", "a part without body force and temperature"),
        (mode == "I" or not symmetric, "mode", mode, "I where the crack lies on a symmetry plane"),
    )
    first = unit(ahead, "ahead", 2)
    turn = np.array([first, [-first[1], first[0]]])
    arm = turn @ (mesh.nodes - np.array(place_of(mesh.part, tip))[:, None])
    weight = _weight(np.hypot(*arm) / radius)
    _require_clear(mesh, weight, arm, radius)
    cells = np.flatnonzero((weight[mesh.cell_nodes] > 0.0).any(axis=0))
    regions = [name for name, own in mesh.regions.items() if np.isin(cells, own).any()]
    right = "a radius within one material"
    require((len({problem.materials[name] for name in regions}) == 1, "radius", radius, right))
    material = problem.materials[regions[0]]
    kappa, shear = material.kappa(problem.kind), material.shear_modulus
    total = _interaction(solution, cells, weight, arm, turn, mode, shear, kappa)
    stiffness = 8.0 * shear / (1.0 + kappa)
    return float(0.5 * stiffness * total * (2.0 if symmetric else 1.0))


def _weight(share: np.ndarray) -> np.ndarray:
    """Return 1 up to half the radius, 0 beyond it, between them a polynomial with two smooth derivatives."""
    s = np.clip(2.0 * share - 1.0, 0.0, 1.0)
    return np.asarray(1.0 - s**3 * (10.0 - 15.0 * s + 6.0 * s**2))


def _require_clear(mesh: Mesh, weight: np.ndarray, arm: np.ndarray, radius: float) -> None:
    """Check that the weight is zero on every named boundary but where it lies on the line of the crack."""
    facets = np.concatenate([group for groups in mesh.facets.values() for group in groups], axis=1)
    aside = (np.abs(arm[1, facets]) > 1e-6 * mesh.part.size).any(axis=0)
    right = "a smaller one: it reaches another boundary"
    require((not bool((weight[facets[:, aside]] > 0.0).any()), "radius", radius, right))


def _interaction(
    solution: Solution,
    cells: np.ndarray,
    weight: np.ndarray,
    arm: np.ndarray,
    turn: np.ndarray,
    mode: Mode,
    shear: float,
    kappa: float,
) -> float:
    """Return ∫ flow_j w_,j dA with the flow of `interaction` and the weight w."""
    mesh = solution.mesh
    at = at_rule(mesh, RULE_ORDER, cells)
    numbers = mesh.cell_nodes[:, cells]
    x, y = np.einsum("dnm,nq->dmq", arm[:, numbers], at.shapes)
    r, angle = np.hypot(x, y), np.arctan2(y, x)
    xx, yy, _, xy = stress_at(solution, at, cells)
    stress = np.einsum("ai,ij...,bj->ab...", turn, np.array([[xx, xy], [xy, yy]]), turn)
    slopes = np.einsum("ai,ij...,bj->ab...", turn, gradient_at(solution, at, cells), turn)
    falling = turn @ np.einsum("nm,ndmq->dmq", weight[numbers], at.gradients).reshape(2, -1)
    falling = falling.reshape(2, *r.shape)
    flow = interaction(stress, slopes, mode, r, angle, shear, kappa)
    return float(((flow * falling).sum(axis=0) * at.dx).sum())
