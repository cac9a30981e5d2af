"""The largest stress that the files have themselves, against the one recomputed from their displacements.

A program averages at nodes, extrapolates or gives a value a cell; here patches are fitted to the cells' own
stress (Zienkiewicz & Zhu 1992). The two differ by about the error of the poorer one, and by a factor where
units, material or the kind of problem are not those of the files. Limit: 25 % (own choice); a difference
spoils nothing, it is stated.
"""

from convergence.checks._corner import NEAR, described
from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.corner import Corner
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMIT = 0.25


def record(solution: Solution) -> dict[str, float]:
    """Return nothing: what is solved here has no stress of a file."""
    return {}


def file_stress(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the two peaks of von Mises stress are within the limit on the finest level."""
    columns = recorded(ladder, "file_stress", "file", "recomputed", "by_cell")
    if columns is None:
        return not_applicable("file_stress", "No stress of another program stands beside a recomputed one.")
    corner = _corner(ladder, facts)
    if corner is not None:
        what = "where every program and every mesh gives another value: it is not compared"
        return not_applicable("file_stress", f"The files' own peak stands on {described(corner)}, {what}.")
    file, own, by_cell = (float(columns[name][-1]) for name in ("file", "recomputed", "by_cell"))
    share = (file - own) / max(abs(own), 1e-300)
    how = "one value a cell" if by_cell else "nodal values"
    side = "above" if share > 0.0 else "below"
    finding = (
        f"The largest von Mises stress of the finest file itself ({how}) is {file:.5g}, "
        f"{100 * abs(share):.2g} % {side} the {own:.5g} recovered from its displacements."
    )
    passed = abs(share) <= LIMIT
    if not passed:
        finding += " So large a difference asks whether material, units and kind are those of the files."
    return Check("file_stress", passed, finding, values=per_level(columns))


def _corner(ladder: Ladder, facts: Facts) -> Corner | None:
    """Return the singular corner within two cells of the files' own peak."""
    columns = (ladder.column(f"file_stress.{axis}") for axis in "xyz"[: facts.dimension])
    place = tuple(float(column[-1]) for column in columns)
    near = NEAR * float(ladder.h[-1])
    return next((one for one in facts.corners or () if one.distance(place) <= near), None)
