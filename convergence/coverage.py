"""How often an interval like this one held the limit on the bank's ladders, whole families left out."""

from dataclasses import dataclass
from typing import Literal

Knowledge = Literal["nothing", "kind", "kind and degree"]
Companion = Literal["kind, degree and companion"]
WITH_COMPANION: Companion = "kind, degree and companion"


@dataclass(frozen=True)
class Coverage:
    """Measured coverage of the intervals of one state of knowledge and number of levels (5: and more).

    low, high: 95 % binomial interval of the share (Clopper & Pearson 1934, Biometrika 26:404). ratio: median
    of half-width over true error of the finest value, of the better ladder where there are two.
    """

    knowledge: Knowledge | Companion
    levels: int
    cases: int
    covered: int
    low: float
    high: float
    ratio: float

    @property
    def share(self) -> float:
        return self.covered / self.cases
