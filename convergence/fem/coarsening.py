"""Which coarser grid serves a multigrid level: cells are first joined along the directions they are short in.

Full coarsening fails on stretched cells, because point smoothers leave what is smooth in their short
direction alone; joining along that direction until cells are about as wide as long restores it (Trottenberg,
Oosterlee & Schüller, Multigrid, sect. 5.1). Where one step is left of a thin direction, linear fields through
it are too stiff in bending: cells more than STRETCHED times as long as thick are not made longer.
"""

from collections.abc import Mapping

import numpy as np

from convergence.fem.given_part import GivenPart
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart
from convergence.fem.rod_part import RodPart
from convergence.fem.solid_part import SolidPart

ALIKE = 1.5  # families whose steps are this near to the shortest are halved with it
STRETCHED = 3.0  # measured: bending of plates takes 31 cycles at 2, more than 60 at 4
Steps = Mapping[int, int]


def family_lengths(part: AnyPart) -> dict[int, float]:
    """Return the mean length of the edges of each family, of layers their thickness."""
    if isinstance(part, RodPart):
        return dict(enumerate(np.diff(part.stations).tolist()))
    if isinstance(part, GivenPart):
        raise TypeError("a part that is given by its meshes has no families of edges")
    plan = part.plan if isinstance(part, SolidPart) else part
    lengths = _plan_lengths(plan)
    if isinstance(part, SolidPart):
        lengths |= {family: part.thickness(layer) for layer, family in enumerate(part.layer_families)}
    return lengths


def _plan_lengths(plan: Part) -> dict[int, float]:
    found: dict[int, list[float]] = {}
    for edge, family in plan.families.items():
        found.setdefault(family, []).append(plan.length(edge))
    return {family: float(np.mean(lengths)) for family, lengths in found.items()}


def coarser(lengths: Mapping[int, float], steps: Steps) -> dict[int, int] | None:
    """Return the steps along each family on the next coarser grid, None where there is none that helps."""
    size = {family: lengths[family] / count for family, count in steps.items()}
    open_families = [family for family, count in steps.items() if count > 1]
    if not open_families:
        return None
    shortest = min(size[family] for family in open_families)
    if shortest > STRETCHED * min(size.values()):
        return None
    return {
        family: -(-count // 2) if count > 1 and size[family] <= ALIKE * shortest else count
        for family, count in steps.items()
    }
