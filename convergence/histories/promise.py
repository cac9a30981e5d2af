"""How far a finer mesh may be counted on to narrow the interval: a bound that nine ladders in ten keep.

On a mesh finer by a ratio, the half-width about the finest value is at most safety / ratio of the present
one. On the bank neither the order that a ladder shows nor a rate for each class of quantities foretells it
better: what breaks promises is ladders that look settled and move again.
"""

from dataclasses import dataclass

PROBABILITY = 0.9
LEAST_RATIO = 1.25
MOST_RATIO = 8.0  # the bank shows too little of what lies farther ahead
ONE_STEP = 2.6  # ratio above which levels are needed between
REGULAR = 3.0  # half-width over last change, up to which a ladder is a regular one
ENOUGH = 40  # cases
WHOLE = ("energy", "displacement", "rotation", "reaction", "resultant")


@dataclass(frozen=True)
class Promise:
    """The bound of one class; of `cases` promised on the bank, their families left out, `kept` held.

    low, high: 95 % binomial interval of the share (Clopper & Pearson 1934, Biometrika 26:404).
    """

    safety: float
    cases: int
    kept: int
    low: float
    high: float

    @property
    def is_good(self) -> bool:
        """Return whether the bank bears the promise out."""
        return self.cases >= ENOUGH and self.kept >= PROBABILITY * self.cases

    def ratio(self, share: float) -> float:
        """Return the ratio of sizes at which the half-width is down to a share (> 0) of the present one."""
        return max(self.safety / share, LEAST_RATIO)


def promise_class(kind: str, degree: int | None, half_width: float, last_change: float) -> str:
    """Return the class: stresses by kind and degree, other quantities by how regular their ladder is."""
    if kind == "peak_stress":
        return kind
    if kind == "point_stress":
        return f"{kind}/{min(degree or 1, 2)}"
    manner = "regular" if half_width <= REGULAR * last_change else "irregular"
    return f"{'whole' if kind in WHOLE else 'unknown'}, {manner}"
