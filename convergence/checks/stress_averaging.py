"""Averaged against unaveraged stress around the hot spot of every level.

Up to 5 % is good, up to 10 % acceptable, more asks for refinement (common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, place_words, recorded
from convergence.fem.averaging import stress_spread
from convergence.fem.recovery import recovered_von_mises
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

GOOD, LIMIT = 0.05, 0.10


def record(solution: Solution) -> dict[str, float]:
    """Return half the largest spread around the node of the largest recovered von Mises stress, and where."""
    mesh = solution.mesh
    recovered = recovered_von_mises(solution)
    place, cell = np.unravel_index(recovered.argmax(), recovered.shape)
    hot = int(mesh.cell_nodes[place, cell])
    region = next(cells for cells in mesh.regions.values() if cell in cells)
    spread, average = stress_spread(solution, hot, region)
    at = dict(zip("xyz", mesh.nodes[:, hot].tolist(), strict=False))
    return {"spread": spread, "average": average, **at}


def _grade(spread: float) -> str:
    if spread <= GOOD:
        return "good"
    return "acceptable" if spread <= LIMIT else "too much: refine there"


def stress_averaging(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the spread around the hot spot of the finest level is within 10 %."""
    columns = recorded(ladder, "stress_averaging", "spread", "average", "x", "y")
    if columns is None:
        return not_applicable("stress_averaging", "The ladder has no element stresses of our own solver.")
    spread = float(columns["spread"][-1])
    place = place_words(ladder, "stress_averaging")
    word = _grade(spread)
    finding = (
        f"Around the hot spot {place} of the finest level the cells' stresses differ from "
        f"their average by up to {100 * spread:.2g} %: {word}."
    )
    return Check("stress_averaging", spread <= LIMIT, finding, values=per_level(columns))
