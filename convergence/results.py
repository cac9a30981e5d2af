"""Level, Ladder, Estimate, Check, Verdict, Findings: what the four steps hand to each other."""

import functools
import math
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any, Literal

import numpy as np

from convergence.corner import Corner
from convergence.coverage import Coverage
from convergence.mapped import MappedField
from convergence.statics import Balance

if TYPE_CHECKING:
    import pandas as pd

VerdictWord = Literal["sound", "refine", "singular", "unproven"]
Kind = Literal[
    "energy",
    "displacement",
    "rotation",
    "reaction",
    "resultant",
    "point_stress",
    "peak_stress",
    "intensity",
    "unknown",
]
COST = ("h", "cells", "dofs", "seconds", "memory")
NOT_SOLVED = "is not solved"  # in the remark on a level that would not fit


@dataclass(frozen=True)
class Level:
    """One mesh: measured cell size h, its cost, and one number per quantity and record.

    A place belonging to a quantity is kept as NAME.x and NAME.y, a check's record as CHECK.NAME.
    `memory` is the largest resident memory of the process in MB meanwhile, NaN where it is not known.
    """

    h: float
    cells: int
    dofs: int
    seconds: float
    values: Mapping[str, float]
    memory: float = math.nan


@dataclass(frozen=True)
class Ladder:
    """Levels from coarse to fine; index 0 is the coarsest.

    `resolution`: half a unit of the last printed digit; `h_unit`: "" where not known or relative.
    """

    levels: tuple[Level, ...]
    source: str
    fingerprint: str = ""
    remarks: tuple[str, ...] = ()
    resolution: Mapping[str, float] = field(default_factory=dict)
    h_unit: str = ""

    @property
    def h(self) -> np.ndarray:
        return np.array([level.h for level in self.levels], dtype=float)

    @property
    def unsolved(self) -> tuple[str, ...]:
        """Return the remarks on levels that were asked for and not solved."""
        return tuple(remark for remark in self.remarks if NOT_SOLVED in remark)

    def column(self, name: str) -> np.ndarray:
        """Return one number per level, NaN where a level has none."""
        return np.array([level.values.get(name, np.nan) for level in self.levels], dtype=float)

    def frame(self) -> "pd.DataFrame":
        """Return the ladder as a table, one row a level."""
        import pandas as pd

        return pd.DataFrame(
            [{**{name: getattr(level, name) for name in COST}, **level.values} for level in self.levels]
        )


@dataclass(frozen=True)
class Quantity:
    """A quantity of interest: how it is measured, what theory says of it, what is accepted.

    `degree` is that of the elements, `formal_order` holds for a smooth solution; None where not known.
    `measure` maps a Solution to a float or Located; None for a column of a table. A kind is assumed where
    only its unit tells it.
    """

    name: str
    kind: Kind = "unknown"
    unit: str = ""
    degree: int | None = None
    formal_order: float | None = None
    relative: float | None = None
    absolute: float | None = None
    assumed_tolerance: bool = False
    assumed_kind: bool = False
    measure: "functools.partial[Any] | None" = None
    description: str = ""

    @property
    def measure_name(self) -> str:
        """Return the name of the quantity function, "" for a column of a table."""
        return self.measure.func.__name__ if self.measure else ""

    @property
    def arguments(self) -> Mapping[str, Any]:
        """Return the arguments of the quantity function."""
        return self.measure.keywords if self.measure else {}


@dataclass(frozen=True)
class Yield:
    """A yield strength and where it stands."""

    strength: float
    source: str = ""


@dataclass(frozen=True)
class Facts:
    """What is known beside the ladder: the model's theory and the limits of linear analysis.

    `size` is the largest extent of the part; `corners` is None where the model is not known, `all_corners`
    False where supports are not known, and corners that they make may be missing; `covered`
    has the singular corners within the reach of each quantity; `unexamined` and `doubtful` say the same of
    corners on which theory is silent; `components` what a stress is, `regions` the one it is confined to,
    "" where none; `yields` the yield strengths by region, of a table under ""; `intervals` the stated
    (low, high) per name, NaN where there is none; `units` the unit of each quantity; `growing` the range of
    the order of those whose levels show growth without limit; `sides` has 1 where the limit is never below a
    value, -1 where it is never above; `balance` is that of printed loads and reactions, None without them.
    """

    degree: int | None = None
    dimension: int = 2
    size: float | None = None
    yields: Mapping[str, Yield | None] = field(default_factory=dict)
    corners: tuple[Corner, ...] | None = None
    covered: Mapping[str, tuple[Corner, ...]] = field(default_factory=dict)
    unexamined: tuple[Corner, ...] = ()
    doubtful: Mapping[str, tuple[Corner, ...]] = field(default_factory=dict)
    kinds: Mapping[str, Kind] = field(default_factory=dict)
    components: Mapping[str, str] = field(default_factory=dict)
    regions: Mapping[str, str] = field(default_factory=dict)
    intervals: Mapping[str, tuple[float, float]] = field(default_factory=dict)
    units: Mapping[str, str] = field(default_factory=dict)
    sides: Mapping[str, int] = field(default_factory=dict)
    growing: Mapping[str, tuple[float, float]] = field(default_factory=dict)
    all_corners: bool = True
    balance: Balance | None = None

    @property
    def exponent(self) -> float | None:
        """Return the weakest exponent of the corners, None without one.

        Points that take a force, of exponent 0 and below, are left out: what they spoil has no order.
        """
        return min((c.exponent for c in self.corners or () if c.exponent > 0.0), default=None)


@dataclass(frozen=True)
class Estimate:
    """What one published method says: limit, observed order, half-width about the finest value.

    `remark` is empty where the method's own conditions hold; NaN stands for "none".
    """

    limit: float
    order: float
    uncertainty: float
    remark: str = ""


@dataclass(frozen=True)
class Check:
    """A passed (or None: no statement is possible) check, its finding in one sentence, what a failure spoils.

    `spoils` maps quantity names ("" for every one) to the reason; `leads_to` is the verdict it forces.
    """

    name: str
    passed: bool | None
    finding: str
    spoils: Mapping[str, str] = field(default_factory=dict)
    leads_to: VerdictWord = "unproven"
    values: Mapping[str, tuple[float, ...]] = field(default_factory=dict)


@dataclass(frozen=True)
class Verdict:
    """The statement on one quantity. `uncertainty` is about the finest value; NaN where there is none."""

    word: VerdictWord
    value: float
    limit: float
    low: float
    high: float
    uncertainty: float
    tolerance: float
    behaviour: str
    observed_order: float
    order_low: float
    order_high: float
    formal_order: float | None
    expected_order: float | None
    next_h: float
    next_cells: float
    next_dofs: float
    next_seconds: float
    next_memory: float
    coverage: Coverage | None
    reasons: tuple[str, ...]


@dataclass(frozen=True)
class Companion:
    """A second ladder, of another degree or other cells; the quantities are those measured there."""

    ladder: Ladder
    quantities: tuple[Quantity, ...]
    cells: str


@dataclass(frozen=True)
class Findings:
    """Everything that is said about one ladder."""

    title: str
    ladder: Ladder
    quantities: tuple[Quantity, ...]
    facts: Facts
    estimates: Mapping[str, Mapping[str, Estimate]]
    checks: tuple[Check, ...]
    verdicts: Mapping[str, Verdict]
    companion: Companion | None = None
    mapped: tuple[MappedField, ...] = ()

    @property
    def all_sound(self) -> bool:
        return all(verdict.word == "sound" for verdict in self.verdicts.values())
