"""What the levels say of the field around a singular corner: its growth, and how far it is polluted.

A place of the ray is clean where the stress tensors of the last two levels differ by at most 5 % of their
size (root of the sum of all squares), there and at all places farther out.
"""

from dataclasses import dataclass

import numpy as np

from convergence import numbers
from convergence.checks._corner import STRESS_KINDS, growing_corner
from convergence.checks._growth import Growth, growth
from convergence.corner import Corner
from convergence.fem.stress import COMPONENTS
from convergence.results import Facts, Ladder

BEFORE = "singular_field."
CLEAN = 0.05


@dataclass(frozen=True, eq=False)
class Field:
    """Distances (n,) on the ray, falling, stress there (components, n, levels); `clean` of them can be read.

    `across` (n, levels) is the stress across the ray; without a ray there are no distances. `h` is the size
    of the finest cells.
    """

    corner: Corner
    growth: Growth
    distances: np.ndarray
    stress: np.ndarray
    across: np.ndarray
    clean: int
    single: bool
    h: float

    def pollution(self, length: str) -> str:
        """Return in words over what distance the corner pollutes the field."""
        if not len(self.distances):
            return "the field around it was not recorded"
        if not self.clean:
            farthest = f"{numbers.compact(self.distances[0], 4)} {length}".strip()
            return (
                f"up to {farthest} from it, the farthest place read, the last two levels differ by over 5 %"
            )
        nearest = self.distances[self.clean - 1]
        distance = f"{numbers.compact(nearest, 4)} {length}".strip()
        cells = f"{numbers.compact(nearest / self.h, 2)} cells of the finest mesh"
        return f"from {distance} ({cells}) on the last two levels agree within 5 %"


def blamed(ladder: Ladder, facts: Facts, name: str) -> Corner | None:
    """Return the corner a stress stands and grows on, else the weakest one within its reach."""
    if facts.kinds.get(name) not in STRESS_KINDS:
        return None
    within = facts.covered.get(name, ())
    return growing_corner(ladder, facts, name) or min(within, key=lambda one: one.exponent, default=None)


def field_of(ladder: Ladder, corner: Corner) -> Field:
    """Return what a ladder says of the field around a corner."""
    name = f"{BEFORE}{corner.name}"
    values = ladder.levels[-1].values
    count = sum(f"{name}.{place}.across" in values for place in range(len(values)))
    rows = [axis for axis in COMPONENTS if f"{name}.0.{axis}" in values]
    stress = np.array(
        [[ladder.column(f"{name}.{place}.{axis}") for place in range(count)] for axis in rows]
    ).reshape(len(rows), count, len(ladder.levels))
    across = np.array([ladder.column(f"{name}.{place}.across") for place in range(count)])
    return Field(
        corner=corner,
        growth=growth(ladder.h, ladder.column(f"singular_peak.{corner.name}")),
        distances=values.get(f"{name}.reach", 0.0) * 0.5 ** np.arange(count),
        stress=stress,
        across=across,
        clean=_clean(stress),
        single=values.get(f"{name}.single") == 1.0,
        h=float(ladder.h[-1]),
    )


def _clean(stress: np.ndarray) -> int:
    """Return how many places, from the farthest on, are clean."""
    if stress.size == 0 or stress.shape[2] < 2:
        return 0
    last = stress[:, :, -1]
    agree = _size(last - stress[:, :, -2]) <= CLEAN * _size(last)
    return int(np.logical_and.accumulate(agree).sum())


def _size(stress: np.ndarray) -> np.ndarray:
    """Return the root of the sum of squares of tensors (components, n), shears twice."""
    twice = np.where(np.arange(len(stress)) < 3, 1.0, 2.0)
    return np.asarray(np.sqrt(twice @ stress**2))
