"""Whether a displacement or an energy is asked for that a force on a point leaves without a limit.

Under a force on a point the displacement grows like ln(1/h) in a plane (Flamant 1892) and like 1/h in a
solid (Boussinesq 1885; both in Timoshenko & Goodier, Theory of Elasticity, from memory), and so does the
energy. The stress there is left to the checks of peaks. What is read at a distance is not touched.
"""

from convergence.checks._ladder import not_applicable
from convergence.corner import Corner
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Kind, Ladder

SPOILED = ("displacement", "rotation", "energy")


def record(solution: Solution) -> dict[str, float]:
    """Return nothing: forces on points are facts of the model."""
    return {}


def concentrated_force(ladder: Ladder, facts: Facts) -> Check:
    """Pass where no displacement or energy depends on a force that acts on a point."""
    if facts.corners is None or not facts.all_corners:
        return not_applicable("concentrated_force", "The model is not known, nor what acts on its points.")
    spoils = {}
    for name, corners in facts.covered.items():
        if corners and facts.kinds.get(name) in SPOILED:
            spoils[name] = _reason(corners[0], facts.kinds[name])
    if not spoils:
        finding = "No displacement or energy hangs on a force that acts on a point."
        return Check("concentrated_force", True, finding)
    finding = "; ".join(f"{name}: {reason}" for name, reason in spoils.items())
    return Check("concentrated_force", False, finding, spoils, leads_to="singular")


def _reason(corner: Corner, kind: Kind) -> str:
    cause = corner.sides[1]
    subject = "the energy" if kind == "energy" else f"the {kind} there"
    instead = "report a deflection elsewhere" if kind == "energy" else "report it at another point"
    verb = "acts on" if cause == "force" else "takes a force at"
    return (
        f"a {cause} {verb} the point {corner.name} {corner.where}: {subject} has no limit, it grows as the "
        f"cells shrink; {instead}, or spread the {cause} over the area it acts on"
    )
