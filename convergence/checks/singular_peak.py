"""Whether a stress has a limit at all: growth over the ladder, and corners of the model.

Two witnesses. The model: a corner whose exponent λ is below one (Williams 1952, J. Appl. Mech. 19:526) at
the place of the value. The ladder: increments that do not shrink, as h^(λ−1) or log h makes them grow. Faster
growth than λ = 0.2 is no singularity but a notch that the coarse levels did not resolve.
"""

import numpy as np

from convergence.checks._corner import STRESS_KINDS, described, growing_corner
from convergence.checks._ladder import not_applicable
from convergence.corners.singular_corners import singular_corners
from convergence.fem.mesh import Mesh
from convergence.fem.recovery import cell_volumes, element_energy
from convergence.fem.solid_mesh import edge_nodes
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution
from convergence.results import Check, Corner, Facts, Ladder
from convergence.sequences import noise_floor, observed_order

FASTEST, SLOWEST = -0.8, 0.05
REMEDIES = {
    ("point", "force"): ", or spread the force over the area it acts on",
    ("point", "support"): ", or spread the support over the area it acts on",
    ("bonded", "bonded"): "",
}


def record(solution: Solution) -> dict[str, float]:
    """Return the mean stress intensity of the cells that touch each singular corner, by its name.

    That is the root of the mean energy density, which grows like h^(λ−1) whatever the component.
    """
    numbers, mesh = {}, solution.mesh
    for corner in singular_corners(solution.problem):
        nodes = _nodes(mesh, corner)
        cells = np.flatnonzero(np.isin(mesh.cell_nodes, nodes).any(axis=0))
        energy, volume = element_energy(solution, cells).sum(), cell_volumes(solution, cells).sum()
        numbers[corner.name] = float(np.sqrt(energy / volume))
    return numbers


def _nodes(mesh: Mesh, corner: Corner) -> np.ndarray:
    """Return the nodes at a corner or along an edge."""
    if isinstance(mesh.part, SolidPart) and len(corner.points) > 1:
        return edge_nodes(mesh.part, mesh.counts, mesh.degree, corner.points)
    return np.array([mesh.vertices[name] for name in corner.points])


def singular_peak(ladder: Ladder, facts: Facts) -> Check:
    """Pass where no stress sits on a singular corner or grows like one."""
    names = [name for name, kind in facts.kinds.items() if kind in STRESS_KINDS]
    if not names:
        return not_applicable("singular_peak", "No stress among the quantities.")
    spoils = {}
    for name in names:
        reason = _reason(ladder, facts, name)
        if reason:
            spoils[name] = reason
    if not spoils:
        return Check("singular_peak", True, "No stress sits on a singular corner or grows without limit.")
    finding = "; ".join(f"{name}: {reason}" for name, reason in spoils.items())
    return Check("singular_peak", False, finding, spoils, leads_to="singular")


def growth_exponent(h: np.ndarray, f: np.ndarray) -> float:
    """Return λ of f = B + A h^(λ−1) through the three finest levels; NaN where the values do not grow so."""
    values = np.abs(f)
    if len(f) < 3 or not np.all(np.isfinite(values[-3:])) or not values[-3] < values[-2] < values[-1]:
        return float("nan")
    if values[-1] - values[-2] <= noise_floor(f):
        return float("nan")
    order = observed_order(h, values)
    return 1.0 + order if FASTEST <= order <= SLOWEST else float("nan")


def _reason(ladder: Ladder, facts: Facts, name: str) -> str:
    f = ladder.column(name)
    exponent = growth_exponent(ladder.h, f)
    before = growth_exponent(ladder.h[:-1], f[:-1])
    corner = growing_corner(ladder, facts, name)
    if corner is not None:
        return _at_corner(corner, corner_exponent(ladder, corner.name))
    if facts.corners is None and np.isfinite(exponent) and np.isfinite(before):
        growth = "log h" if abs(exponent - 1.0) <= SLOWEST else f"h^({exponent:.2f}-1)"
        return (
            f"the value grows like {growth} over the levels and shows no limit; "
            "report the stress at a stated distance, a mean or a resultant, or model the real radius"
        )
    return ""


def corner_exponent(ladder: Ladder, corner: str) -> float:
    """Return λ from the stress intensity at a corner on the last two levels; NaN without them."""
    intensity = ladder.column(f"singular_peak.{corner}")[-2:]
    if len(intensity) < 2 or not np.all(intensity > 0.0):
        return float("nan")
    return float(1.0 + np.log(intensity[1] / intensity[0]) / np.log(ladder.h[-1] / ladder.h[-2]))


def _at_corner(corner: Corner, exponent: float) -> str:
    growth = f"h^(λ-1) without limit: theory λ = {corner.exponent:.3f}"
    measured = f"the cells that touch it give {exponent:.3f}"
    if corner.exponent <= 0.0:
        growth = f"h^{corner.exponent - 1.0:.0f} without limit by theory"
        measured = f"like h^{exponent - 1.0:.2f} in the cells that touch it"
    if not np.isfinite(exponent):
        measured = "the levels do not measure it"
    return (
        f"the value sits on {described(corner)}; stress there grows like {growth}, {measured}; report the "
        "stress at a stated distance, a mean over a line or a resultant"
        f"{REMEDIES.get(corner.sides, ', or model the real radius')}"
    )
