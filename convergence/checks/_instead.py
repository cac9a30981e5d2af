"""What to report instead of a singular stress: numbers that have a limit, with their values on every level.

The generalised stress intensity is K = lim s(r) r^(1−λ) for r → 0 of the stress across the ray (Gross &
Mendelson 1972, Int. J. Fract. Mech. 8:267, from memory, there times √(2π)), λ by theory. It is extrapolated
linearly in r from the two nearest clean places; what the next two would give, or where they are not clean the
nearest alone, widens its interval.
"""

import re
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from convergence import numbers
from convergence.checks._field import BEFORE, Field, blamed, field_of
from convergence.corner import Corner
from convergence.fem.stress import COMPONENTS, component
from convergence.results import Facts, Ladder, VerdictWord

INVARIANTS = {
    "von_mises": "von Mises stress",
    "first_principal": "first principal stress",
    "third_principal": "third principal stress",
}
SURFACE = {
    "hot_spot": "structural hot-spot stress of the surface along {way} (0.4 t and 1.0 t, t = {t})",
    "membrane": "membrane stress along {way} through the thickness at the corner (t = {t})",
    "bending": "bending stress along {way} through the thickness at the corner (t = {t})",
}
THROUGH = ("membrane", "bending")  # integrated through the corner
NEAREST_PLACES, LEAST_PLACES, LEAST_LEVELS = 3, 2, 3


@dataclass(frozen=True, eq=False)
class Instead:
    """A number to report: `key` names its interval in the facts, `doubt` widens it, `values` per level."""

    key: str
    label: str
    unit: str
    values: np.ndarray
    low: float
    high: float
    doubt: float = 0.0

    @property
    def value(self) -> float:
        return float(self.values[-1])

    @property
    def half_width(self) -> float:
        """Return how far the interval reaches from the value, which need not be its middle."""
        return max(self.high - self.value, self.value - self.low)

    def word(self, tolerance: float) -> VerdictWord:
        """Return the verdict against a tolerance that is a share of the value."""
        if not np.isfinite(self.half_width) or len(self.values) < LEAST_LEVELS:
            return "unproven"
        return "sound" if self.half_width <= tolerance * abs(self.value) else "refine"

    @property
    def limit(self) -> float:
        """Return the best estimate of the limit, the middle of the interval."""
        return 0.5 * (self.low + self.high)

    @property
    def words(self) -> str:
        """Return label, best estimate and interval, and the finest value, which may lie outside."""
        finest = f"{numbers.rounded(self.value, self.half_width)} {self.unit}".rstrip()
        if not np.isfinite(self.half_width):
            return f"{self.label}: {finest}, without an interval"
        best = f"{numbers.rounded(self.limit, 0.5 * (self.high - self.low))} {self.unit}".rstrip()
        low, high = numbers.outward(self.low, self.high, self.limit, self.half_width)
        return f"{self.label}: {best} ({low} to {high}; {finest} on the finest mesh)"


def instead(ladder: Ladder, facts: Facts, name: str) -> tuple[Instead, ...]:
    """Return what to report instead of a stress, the nearest clean place first; none without a corner.

    Intervals are those of the facts, NaN where they have none.
    """
    corner = blamed(ladder, facts, name)
    if corner is None or not ladder.levels:
        return ()
    field = field_of(ladder, corner)
    return (
        *_stresses(ladder, facts, name, field),
        *_intensity(ladder, facts, name, field),
        *_beside(ladder, facts, name, corner),
    )


def missing(ladder: Ladder, facts: Facts, name: str) -> tuple[str, ...]:
    """Return in sentences which of these numbers a model does not allow; none where no corner is to blame."""
    corner = blamed(ladder, facts, name)
    if corner is None or not ladder.levels:
        return ()
    field, found = field_of(ladder, corner), instead(ladder, facts, name)
    if not len(field.distances) and not found:
        return (f"The levels hold no numbers of the field around {corner.name}.",)
    sentences = []
    if not field.clean:
        sentences.append("No stress at a distance: no place on the ray is clean yet.")
    if not field.single:
        sentences.append("No generalised stress intensity: no single real power leads at this corner.")
    elif field.clean < LEAST_PLACES:
        sentences.append("No generalised stress intensity: it takes two clean places.")
    if not any(".hot_spot" in one.key for one in found):
        sentences.append(
            "No hot-spot stress, membrane and bending: no straight free surface ends here that is as long as "
            "the part is thick square to it, and clear of other singular corners."
        )
    return tuple(sentences)


def instead_columns(ladder: Ladder, facts: Facts) -> dict[str, np.ndarray]:
    """Return the values per level of all that is to be reported instead, by the key of their interval."""
    return {one.key: one.values for name in facts.kinds for one in instead(ladder, facts, name)}


def _stresses(ladder: Ladder, facts: Facts, name: str, field: Field) -> Iterator[Instead]:
    asked = facts.components.get(name, "")
    shown = asked if asked in (*COMPONENTS, *INVARIANTS) else "von_mises"
    words = INVARIANTS.get(shown, f"stress {shown}")
    for place in range(field.clean - 1, max(field.clean - 1 - NEAREST_PLACES, -1), -1):
        distance = _with_unit(field.distances[place], ladder.h_unit)
        values = component(field.stress[:, place], shown)  # type: ignore[arg-type]
        yield _one(facts, name, f"at {place}", f"{words} {distance} from the corner", values)


def _intensity(ladder: Ladder, facts: Facts, name: str, field: Field) -> Iterator[Instead]:
    if not field.single or field.clean < LEAST_PLACES:
        return
    near = slice(max(0, field.clean - NEAREST_PLACES), field.clean)
    power = 1.0 - field.corner.exponent
    *far, middle, last = field.across[near] * field.distances[near, None] ** power
    values = 2.0 * last - middle
    other = 2.0 * middle - far[0] if far else last
    label = "generalised stress intensity, limit of stress across the ray times r^(1-λ)"
    stress, length = facts.units.get(name, ""), ladder.h_unit
    unit = f"{stress} {length}^{numbers.compact(power, 4)}" if stress and length else ""
    yield _one(facts, name, "intensity", label, values, unit, float(abs(values[-1] - other[-1])))


def _beside(ladder: Ladder, facts: Facts, name: str, corner: Corner) -> Iterator[Instead]:
    start = re.escape(f"{BEFORE}{corner.name}.")
    for column in ladder.levels[-1].values:
        surface = re.fullmatch(rf"{start}(.+)\.thickness", column)
        if surface:
            way, before = surface[1], column.removesuffix("thickness")
            t = _with_unit(ladder.levels[-1].values[column], ladder.h_unit)
            shown = f"({way.replace('_', ', ')})" if "_" in way else way
            for key, label in SURFACE.items():
                values, of = ladder.column(f"{before}{key}"), f"{way}.{key}"
                doubt = _slowness(ladder, facts, f"{name}: {of}", values, corner) if key in THROUGH else 0.0
                yield _one(facts, name, of, label.format(way=shown, t=t), values, doubt=doubt)


def _slowness(ladder: Ladder, facts: Facts, key: str, values: np.ndarray, corner: Corner) -> float:
    """Return how far the middle of an interval is from where the order λ of theory leads the last two levels.

    What is integrated through a corner converges with λ (the stress there grows like r^(λ-1)), more slowly
    than nearly all that the interval is calibrated on.
    """
    low, high = facts.intervals.get(key, (np.nan, np.nan))
    known = corner.exponent > 0.0 and bool(np.isfinite([*values[-2:], low, high]).all())
    if len(values) < LEAST_LEVELS or not known:
        return 0.0
    gain = float(ladder.h[-2] / ladder.h[-1]) ** corner.exponent - 1.0
    limit = float(values[-1] + (values[-1] - values[-2]) / gain)
    return abs(limit - 0.5 * (low + high))


def _one(
    facts: Facts, name: str, key: str, label: str, values: np.ndarray, unit: str = "", doubt: float = 0.0
) -> Instead:
    key = f"{name}: {key}"
    low, high = facts.intervals.get(key, (np.nan, np.nan))
    unit = unit or facts.units.get(name, "")
    return Instead(key, label, unit, values, low - doubt, high + doubt, doubt)


def _with_unit(value: float, unit: str) -> str:
    return f"{numbers.compact(value, 4)} {unit}".strip()
