"""Whether a stress may come from a corner on which theory is silent here.

Corners of orthotropic materials and of cones on the axis of a ring follow other equations than those that are
solved for exponents. A stress that sits on such a corner and grows proves nothing. One that stands elsewhere
keeps its verdict, with a remark: the corner might pass it on finer meshes.
"""

from dataclasses import replace

from convergence.checks._corner import STRESS_KINDS, growing_corner
from convergence.checks._ladder import not_applicable
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder


def record(solution: Solution) -> dict[str, float]:
    """Return nothing: corners are facts of the model."""
    return {}


def unexamined_corner(ladder: Ladder, facts: Facts) -> Check:
    """Pass where no stress is near such a corner; no statement where one could still become the largest."""
    if facts.corners is None:
        return not_applicable("unexamined_corner", "The model is not known, so its corners are not.")
    stresses = [name for name in facts.doubtful if facts.kinds.get(name) in STRESS_KINDS]
    silent = replace(facts, corners=facts.unexamined, covered=facts.doubtful)
    spoils = {}
    for name in stresses:
        corner = growing_corner(ladder, silent, name)
        if corner is not None:
            spoils[name] = (
                f"the value sits on the corner {corner.name} {corner.where} and grows; its material or shape "
                "is outside the theory of singular corners used here, so whether it has a limit is not "
                "known; report the stress at a stated distance, a mean over a line or a resultant"
            )
    if spoils:
        finding = "; ".join(f"{name}: {reason}" for name, reason in spoils.items())
        return Check("unexamined_corner", False, finding, spoils)
    held = [name for name in stresses if facts.doubtful[name]]
    if held:
        finding = (
            f"{', '.join(held)}: corners within reach were not examined; none of them leads on these levels."
        )
        return not_applicable("unexamined_corner", finding)
    return Check("unexamined_corner", True, "No stress is asked for where a corner was not examined.")
