"""Moment through a straight section of a plane part, from stresses integrated along it.

About the middle of the section, so the normal force has no part in it. Around a ring it is the sum over the
circumference. Order as the stress.
"""

from collections.abc import Mapping
from typing import Annotated, Any

from convergence.dimensions import Moment, PartPoint, PointName
from convergence.fem.solution import Solution
from convergence.quantities._place import Recovery, stress_order
from convergence.quantities._section import section
from convergence.results import Kind

KIND: Kind = "resultant"


def formal_order(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    """Return the order of the stress."""
    return stress_order(degree, shape, arguments.get("recovery", "recovered"))


def section_moment(
    solution: Solution,
    *,
    start: Annotated[PartPoint | PointName, "first end of the section"],
    end: Annotated[PartPoint | PointName, "second end of the section"],
    recovery: Annotated[Recovery, "recovered by patches, or direct from the elements"] = "recovered",
) -> Moment:
    """Positive with tension at `start`: then the right of start → end turns the left counter-clockwise."""
    cut = section(solution, "section_moment", start, end, recovery)
    return -float((cut.arm * (cut.normal @ cut.traction)) @ cut.areas)
