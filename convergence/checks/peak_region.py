"""Whether a stress is asked for where the model has a singular corner.

The largest stress of a region that holds a singular corner (Williams 1952, J. Appl. Mech. 19:526) has no
limit, even where another place leads on the levels so far: the corner overtakes it on some finer mesh.
A value that stands and grows on the corner itself is left to the check of singular peaks.
"""

from convergence.checks._corner import STRESS_KINDS, described, growing_corner
from convergence.checks._ladder import not_applicable
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder


def record(solution: Solution) -> dict[str, float]:
    """Return nothing: corners and regions are facts of the model."""
    return {}


def peak_region(ladder: Ladder, facts: Facts) -> Check:
    """Pass where no stress can come from a singular corner."""
    if facts.corners is None:
        return not_applicable("peak_region", "The model is not known, so its corners are not.")
    spoils = {}
    for name, corners in facts.covered.items():
        if corners and facts.kinds.get(name) in STRESS_KINDS and growing_corner(ladder, facts, name) is None:
            weakest = min(corners, key=lambda corner: corner.exponent)
            spoils[name] = (
                f"its region holds {described(weakest)}; stress there grows like h^"
                f"{weakest.exponent - 1.0:.3g} by theory and passes every value on finer meshes; leave it "
                "out by `boundary`, or by `near` and `radius`"
            )
    if not spoils and not facts.all_corners:
        finding = "The supports are not known: where they end, stress may have no limit."
        return not_applicable("peak_region", finding)
    if not spoils:
        return Check("peak_region", True, "No stress is asked for where the model has a singular corner.")
    finding = "; ".join(f"{name}: {reason}" for name, reason in spoils.items())
    return Check("peak_region", False, finding, spoils)
