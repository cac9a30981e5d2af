"""The calibrated intervals of many ladders on the same sizes, such as those of all nodes of a mesh.

Neither a shift nor a scale of the values changes what three levels say, so on given sizes all depends on one
number, the angle of their two changes. `calibrated` is asked at angles chosen so that halving any step would
move half-width and best estimate by less than `CLOSE` of the half-width; between them they are interpolated
(the logarithm of the half-width). Where the answer jumps from angle to angle, steps end at `FINEST`.

A fourth level would need a table over two angles, ten times as long to make and off by more than 2 % at a
fifth of the nodes of a field, for intervals as wide: the median of their ratio to those of three is 1.03
(measured).
"""

from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np

from convergence.histories.calibrated import NEGLIGIBLE, read
from convergence.histories.table import table

LEVELS = 3
GROWTH = ("excluded", "possible", "shown")  # by code
STEPS = 96  # of half a turn, before any is halved
CLOSE = 0.01
FINEST = np.radians(0.05)
DIGITS = 3  # of the ratios of sizes: what lies beyond them moves nothing by more than CLOSE
KEPT = 8  # tables


@dataclass(frozen=True, eq=False)
class Many:
    """Best estimates (n,), their intervals, orders in 95 % of the belief, growth as a code of GROWTH.

    NaN, and growth 1, where the values of a ladder are all equal or not finite.
    """

    limit: np.ndarray
    low: np.ndarray
    high: np.ndarray
    order_low: np.ndarray
    order_high: np.ndarray
    growth: np.ndarray

    def about(self, values: np.ndarray) -> np.ndarray:
        """Return the half-widths about values (n,): the distances to the farther ends."""
        return np.asarray(np.maximum(self.high - values, values - self.low))


@dataclass(frozen=True, eq=False)
class Angles:
    """What `calibrated` says at angles of the two changes; their squares add up to 1, the last value is 0."""

    angles: np.ndarray
    limit: np.ndarray
    log_half: np.ndarray
    order_low: np.ndarray
    order_high: np.ndarray
    growth: np.ndarray

    def __len__(self) -> int:
        return len(self.angles)


def many(
    h: np.ndarray, f: np.ndarray, *, kind: str = "unknown", degree: int | None = None, resolution: float = 0.0
) -> Many:
    """Return what the finest three levels of ladders f (levels, n) over falling sizes h (levels,) say.

    `resolution`: how far rounding may have moved each value, as for `calibrated`. ValueError with fewer.
    """
    if len(h) < LEVELS:
        raise ValueError(f"{len(h)} levels; {LEVELS} or more")
    h, f = h[-LEVELS:], np.asarray(f[-LEVELS:], dtype=float)
    known = angles(round(float(h[0] / h[1]), DIGITS), round(float(h[1] / h[2]), DIGITS), kind, degree)
    found = _looked_up(known, f)
    moved = resolution > NEGLIGIBLE * np.ptp(f, axis=0)
    if not moved.any():
        return found
    turns = resolution * np.array([[1.0], [-1.0], [1.0]])
    limit = found.limit[moved]
    half = np.maximum(found.high[moved] - limit, resolution)
    for one in (_looked_up(known, f[:, moved] + turn) for turn in (turns, -turns)):
        half = np.fmax(half, np.fmax(np.abs(one.low - limit), np.abs(one.high - limit)))
    low, high = found.low.copy(), found.high.copy()
    low[moved], high[moved] = limit - half, limit + half
    return replace(found, low=low, high=high)


def _looked_up(known: Angles, f: np.ndarray) -> Many:
    """Return what is known of ladders (3, n), interpolated; growth that of the nearest angle."""
    changes = np.diff(f, axis=0)
    angle = np.arctan2(changes[1], changes[0])
    back = angle < 0.0
    angle = np.where(back, angle + np.pi, angle)
    size = np.hypot(*changes)
    size[size == 0.0] = np.nan
    scale = np.where(back, -size, size)
    limit, log_half, low, high = (
        np.interp(angle, known.angles, row)
        for row in (known.limit, known.log_half, known.order_low, known.order_high)
    )
    between = 0.5 * (known.angles[1:] + known.angles[:-1])
    told = np.isfinite(size)
    growth = np.where(told, known.growth[np.searchsorted(between, np.where(told, angle, 0.0))], 1)
    centre, half = f[2] + scale * limit, size * np.exp(log_half)
    low, high = (np.where(told, row, np.nan) for row in (low, high))
    return Many(centre, centre - half, centre + half, low, high, growth.astype(np.int8))


@lru_cache(maxsize=KEPT)
def angles(first_ratio: float, second_ratio: float, kind: str, degree: int | None) -> Angles:
    """Return the table for three levels with these ratios of sizes, coarse to fine."""
    h = np.array([first_ratio * second_ratio, second_ratio, 1.0])
    at = np.linspace(0.0, np.pi, STEPS + 1)
    rows = _asked(h, at, kind, degree)
    doubtful = np.arange(STEPS)
    while len(doubtful):
        middle = 0.5 * (at[doubtful] + at[doubtful + 1])
        new = _asked(h, middle, kind, degree)
        straight = 0.5 * (rows[:, doubtful] + rows[:, doubtful + 1])
        off = np.maximum(np.abs(new[1] - straight[1]), np.abs(new[0] - straight[0]) / np.exp(new[1]))
        wide = (off > CLOSE) & (middle - at[doubtful] > FINEST)
        at, rows = np.insert(at, doubtful + 1, middle), np.insert(rows, doubtful + 1, new, axis=1)
        first = (doubtful + np.arange(len(doubtful)))[wide]
        doubtful = np.sort(np.concatenate([first, first + 1]))
    limit, log_half, low, high, growth = rows
    return Angles(at, limit, log_half, low, high, growth.astype(int))


def _asked(h: np.ndarray, at: np.ndarray, kind: str, degree: int | None) -> np.ndarray:
    """Return limit, logarithm of the half-width, orders and growth (5, n) at angles."""
    taught = table()
    found = []
    for angle in at:
        first, second = np.cos(angle), np.sin(angle)
        one = read(h, np.array([-first - second, -second, 0.0]), kind, degree, taught)
        half = np.log(0.5 * (one.high - one.low))
        found.append((one.limit, half, one.order_low, one.order_high, GROWTH.index(one.growth)))
    return np.array(found).T
