"""The singular corner that a stress sits on, and grows at."""

import numpy as np

from convergence.results import Corner, Facts, Ladder

NEAR = 2.0
STRESS_KINDS = ("peak_stress", "point_stress", "unknown")


def growing_corner(ladder: Ladder, facts: Facts, name: str) -> Corner | None:
    """Return the corner where the value stands, if it grows there or the levels are too few to tell.

    A point stress stands on a corner or not; a peak counts within two cells of it on the finest level.
    """
    f = ladder.column(name)
    if len(f) >= 3 and not abs(f[-1]) > abs(f[-2]):
        return None
    if facts.kinds.get(name) == "point_stress":
        return next(iter(facts.covered.get(name, ())), None)
    columns = [ladder.column(f"{name}.{axis}") for axis in "xyz"]
    place = tuple(float(column[-1]) for column in columns if len(column) and np.isfinite(column[-1]))
    if not facts.corners or not place:
        return None
    distance = {corner: corner.distance(place) for corner in facts.corners}
    near = [corner for corner in distance if distance[corner] <= NEAR * float(ladder.h[-1])]
    return min(near, key=lambda corner: distance[corner], default=None)
