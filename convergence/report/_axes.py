"""Axes that all figures share: cell size with its levels, values with honest ticks."""

import itertools
import math
import unicodedata
from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.results import Ladder

if TYPE_CHECKING:
    from matplotlib.axes import Axes


# points on the page: from the coarsest to the finest level in the narrowest axes, a character, between labels
SHORTEST, CHARACTER, BETWEEN = 185.0, 5.0, 5.0
# steps of a decade on a log axis, each up to so many decades
STEPS = ((1.0, math.inf), (1.5, 1.3), (2.0, 2.5), (3.0, 1.3), (5.0, 2.5), (7.0, 1.3))


def cell_size_axis(axes: "Axes", ladder: Ladder, unit: str) -> None:
    """Make x the cell size on a log axis, finer to the right; levels are ticked, cells stand on top."""
    h = ladder.h[np.isfinite(ladder.h) & (ladder.h > 0)]
    pad = (h.max() / h.min()) ** 0.08 if h.max() > h.min() else 1.3
    axes.set_xscale("log")
    axes.set_xlim(h.max() * pad, h.min() / pad**2)
    axes.set_xlabel(f"cell size h{bracket(unit)}, finer to the right")
    ticks = _apart({float(value): numbers.compact(float(value), 3) for value in h})
    _fix(axes, "x", list(ticks), list(ticks.values()))
    cells = _apart({level.h: _cells(level.cells) for level in ladder.levels if level.cells > 0})
    if cells:
        top = axes.secondary_xaxis("top")
        top.set_xticks(list(cells), list(cells.values()))
        top.minorticks_off()
        top.set_xlabel("cells")


def _cells(number: int) -> str:
    return numbers.count(number) if number < 1_000_000 else f"{numbers.compact(number / 1e6, 3)} M"


def _apart(labels: Mapping[float, str]) -> dict[float, str]:
    """Return the labels by value, finest first, that leave room between them on a log axis."""
    ordered = sorted(value for value in labels if math.isfinite(value) and value > 0)
    if not ordered:
        return {}
    length = SHORTEST / (math.log(ordered[-1] / ordered[0]) or 1.0)
    kept = {ordered[0]: labels[ordered[0]]}
    for value in ordered[1:]:
        last = next(reversed(kept))
        needed = 0.5 * CHARACTER * (len(kept[last]) + len(labels[value])) + BETWEEN
        if length * math.log(value / last) >= needed:
            kept[value] = labels[value]
    return kept


def _fix(axes: "Axes", which: str, ticks: Sequence[float], labels: Sequence[str]) -> None:
    axis = axes.xaxis if which == "x" else axes.yaxis
    axis.set_ticks(list(ticks), labels=list(labels))
    axis.set_ticks([], minor=True)


def value_ticks(axes: "Axes", low: float, high: float) -> None:
    """Limit y to low..high and tick it with no more digits than the steps need."""
    from matplotlib.ticker import MaxNLocator

    axes.set_ylim(low, high)
    ticks = [t for t in MaxNLocator(6).tick_values(low, high) if low <= t <= high]
    step = ticks[1] - ticks[0] if len(ticks) > 1 else abs(high - low)
    _fix(axes, "y", ticks, [numbers.at_step(tick, step) for tick in ticks])


def log_ticks(axes: "Axes", low: float, high: float, percent: bool = False, which: str = "y") -> None:
    """Make y (or x) logarithmic from low to high (> 0) with ticks that are readable over any span."""
    from matplotlib.ticker import MaxNLocator

    axes.set(**{f"{which}scale": "log", f"{which}lim": (low, high)})
    decades = math.log10(high / low)
    if decades < 0.7:
        ticks = [float(t) for t in MaxNLocator(6).tick_values(low, high)]
    else:
        steps = [step for step, most in STEPS if decades < most]
        every = max(1, round(decades / 7))
        powers = range(math.floor(math.log10(low)), math.ceil(math.log10(high)) + 1)
        ticks = [step * 10.0**power for power in powers if power % every == 0 for step in steps]
    ticks = [tick for tick in ticks if low <= tick <= high]
    labels = [f"{numbers.compact(100 * t, 3)} %" if percent else numbers.compact(t, 3) for t in ticks]
    _fix(axes, which, ticks, labels)


def bracket(unit: str) -> str:
    """Return a unit in brackets behind a label, nothing for a bare number."""
    return f" [{unit}]" if unit else ""


def middle(name: str, most: int = 42) -> str:
    """Shorten a long name in the middle, where names differ least, to the width of `most` common letters."""
    if sum(map(_width, name)) <= most:
        return name
    half = (most - 1) / 2
    return f"{_beginning(name, half)}…{_beginning(name[::-1], half)[::-1]}"


def _beginning(name: str, most: float) -> str:
    widths = itertools.accumulate(map(_width, name))
    return name[: sum(1 for _ in itertools.takewhile(lambda width: width <= most, widths))]


def _width(letter: str) -> float:
    """Return about how wide a letter is, in common ones."""
    if unicodedata.east_asian_width(letter) in "WF":
        return 2.0
    return 1.7 if letter in "MW@%mw" else 1.2 if letter.isupper() else 1.0
