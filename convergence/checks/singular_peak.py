"""Whether a stress has a limit at all: growth over the ladder, and corners of the model.

Two witnesses. The model: a corner whose exponent λ is below one (Williams 1952, J. Appl. Mech. 19:526) at
the place of the value. The ladder, where the model is not known: error laws that grow outweigh those that
fall, by odds that few values with a limit reach on the bank. Faster growth than λ = 0.2 is no singularity but
a notch that the coarse levels did not resolve. The reason names what to report instead, with its interval,
where the levels hold it.
"""

import numpy as np

from convergence.checks._corner import STRESS_KINDS, described, growing_corner
from convergence.checks._growth import Growth, growth, growth_words
from convergence.checks._instead import Instead, instead
from convergence.checks._ladder import not_applicable
from convergence.corner import Corner
from convergence.corners.given_edges import path_nodes
from convergence.corners.singular_corners import singular_corners
from convergence.fem.given_part import GivenPart
from convergence.fem.mesh import Mesh
from convergence.fem.recovery import cell_volumes, element_energy
from convergence.fem.solid_mesh import edge_nodes
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

FASTEST, SLOWEST = -0.8, -0.15
STATED = 2
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
    if isinstance(mesh.part, GivenPart) and len(corner.points) > 1:
        return path_nodes(mesh, corner)
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
        which = "singular corner" if facts.all_corners else "re-entrant corner of the outline"
        return Check("singular_peak", True, f"No stress sits on a {which} or grows without limit.")
    finding = "; ".join(f"{name}: {reason}" for name, reason in spoils.items())
    return Check("singular_peak", False, finding, spoils, leads_to="singular")


def _reason(ladder: Ladder, facts: Facts, name: str) -> str:
    corner = growing_corner(ladder, facts, name)
    if corner is not None:
        found = growth(ladder.h, ladder.column(f"singular_peak.{corner.name}"))
        return f"{_at_corner(corner, found)}; {_report(corner, instead(ladder, facts, name))}"
    if (facts.corners is None or not facts.all_corners) and name in facts.growing:
        return _by_itself(*facts.growing[name])
    return ""


def _by_itself(low: float, high: float) -> str:
    """Return why the values alone show no limit, by the range of their order; "" for an unresolved notch."""
    if low + high < 2.0 * FASTEST:
        return ""
    pace = f"h^(λ-1), λ from {1.0 + low:.2f} to {1.0 + min(high, 0.0):.2f}"
    pace += ", or log h" if high > SLOWEST else ""
    return (
        f"the value grows like {pace}, over the levels and shows no limit; "
        "report the stress at a stated distance, a mean or a resultant, or model the real radius"
    )


def _at_corner(corner: Corner, found: Growth) -> str:
    growing = f"h^(λ-1) without limit: theory λ = {corner.exponent:.3f}"
    measured = growth_words(found, corner.exponent)
    if corner.exponent <= 0.0:
        growing = f"h^{corner.exponent - 1.0:.0f} without limit by theory"
        if np.isfinite(found.exponent):
            measured = f"like h^{found.exponent - 1.0:.2f} in the cells that touch it"
    return f"the value sits on {described(corner)}; stress there grows like {growing}, {measured}"


def _report(corner: Corner, others: tuple[Instead, ...]) -> str:
    """Return what to report: numbers where there are some with an interval, the nearest place first."""
    rest = f"a mean over a line or a resultant{REMEDIES.get(corner.sides, ', or model the real radius')}"
    stated = [one for one in others if np.isfinite(one.half_width)]
    if not stated:
        return f"report the stress at a stated distance, {rest}"
    return f"report instead: {'; '.join(one.words for one in stated[:STATED])}; or {rest}"
