"""The calibration table: weights of the error laws and stretches of the interval, by what is known.

`table.json` is made by `make calibrate` and never by hand. Keys of `weights`: "" for nothing known, a kind of
quantity, "kind/degree" (degree 2 stands for all higher ones). Keys of `stretch`: the state of knowledge, then
the number of levels.
"""

import gzip
import json
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np

from convergence.coverage import Coverage, Knowledge
from convergence.histories.laws import COURSES, SCATTERS
from convergence.histories.promise import Promise

TABLE = Path(__file__).with_name("table.json")
OUTCOMES = Path(__file__).with_name("outcomes.csv.gz")
LEAST_EXPONENT = 0.45  # of a corner; what converges more slowly is not calibrated
CAUTION = 0.35  # evidence of n levels counts with the power (3 / n)^CAUTION
HIGHEST_DEGREE = 2
WORD = "U16"
OUTCOME = np.dtype(
    [
        *(("levels", int), ("kind", WORD), ("degree", int), ("dimension", int), ("source", WORD)),
        *((f"{what}_{known}", float) for known in ("nothing", "known") for what in ("regularity", "share")),
    ]
)


@dataclass(frozen=True, eq=False)
class Table:
    """What the bank taught. `growing` are the weights of the laws without limit, of even odds.

    `growth` has, by the state of knowledge, the log odds above which growth is "shown" and "possible".
    `next_mesh` has what a finer mesh may be promised to do, by class.
    """

    made_of: Mapping[str, Any]
    weights: Mapping[str, np.ndarray]
    growing: np.ndarray
    stretch: Mapping[str, Mapping[str, Mapping[str, float]]]
    growth: Mapping[str, Mapping[str, float]]
    coverage: Mapping[str, Mapping[str, Coverage]]
    next_mesh: Mapping[str, Promise]


def knowledge(kind: str, degree: int | None) -> Knowledge:
    """Return what is known of a quantity."""
    if kind == "unknown":
        return "nothing"
    return "kind" if degree is None else "kind and degree"


def key(kind: str, degree: int | None) -> str:
    """Return the name of the weights for a kind and a degree."""
    if kind == "unknown":
        return ""
    return kind if degree is None else f"{kind}/{min(degree, HIGHEST_DEGREE)}"


@cache
def table() -> Table:
    """Return the packaged table."""
    return read_table(TABLE)


def read_table(path: Path) -> Table:
    """Return the table of a file."""
    return as_table(json.loads(path.read_text(encoding="utf-8")))


def as_table(found: Mapping[str, Any]) -> Table:
    """Return the table of what its file holds."""
    shape = (len(COURSES), len(SCATTERS))
    return Table(
        made_of=found["made_of"],
        weights={name: np.reshape(values, shape) for name, values in found["weights"].items()},
        growing=np.reshape(found["growing"], shape),
        stretch=found["stretch"],
        growth=found["growth"],
        coverage={
            known: {levels: Coverage(**counts) for levels, counts in by_levels.items()}
            for known, by_levels in found["coverage"].items()
        },
        next_mesh={name: Promise(**bound) for name, bound in found["next_mesh"].items()},
    )


@cache
def outcomes() -> np.ndarray:
    """Return the bank's sub-ladders judged with their families left out, as a structured array.

    Beside what they are, with nothing and with kind and degree known: regularity (half-width over span of the
    values) and share (error of the best estimate over half-width).
    """
    with gzip.open(OUTCOMES, "rt", encoding="utf-8") as rows:
        return np.loadtxt(rows, dtype=OUTCOME, delimiter=",", skiprows=1)
