"""A quantity against the cell size: levels, fitted curve, limit, interval and tolerance."""

import math
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report._axes import bracket, cell_size_axis, middle, value_ticks
from convergence.report._picture import BLUE, GREEN, GREY, INK, RED, Picture, draw
from convergence.results import Ladder, Quantity, Verdict

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure


def value_figure(
    stem: str, quantity: Quantity, verdict: Verdict, ladder: Ladder, length: str
) -> Picture | None:
    """Return the figure, None where no level has a value."""
    values = ladder.column(quantity.name)
    known = np.isfinite(values)
    if not known.any():
        return None
    low, high, cut = _view(values[known], verdict)

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        cell_size_axis(axes, ladder, length)
        _interval(axes, verdict)
        _curve(axes, verdict, ladder.h[known], values[known])
        axes.plot(ladder.h[known], values[known], "o", color=INK, label="levels", zorder=4)
        value_ticks(axes, low, high)
        axes.set_ylabel(f"{middle(quantity.name)}{bracket(quantity.unit)}")
        figure.legend(loc="outside lower center", ncols=3)

    missing = int((~known).sum())
    caption = "Value on every level."
    if missing:
        caption = f"Value; {numbers.several(missing, 'level')} without one."
    if not math.isnan(verdict.low):
        caption += " Shaded: the stated interval."
    if not math.isnan(verdict.limit) and verdict.observed_order > 0:
        caption += " Curve: the stated limit approached with the observed order from the finest level."
    caption += "".join(f" The {part} lies partly outside the picture." for part in cut)
    levels = numbers.several(int(known.sum()), "level")
    alt = f"{quantity.name} against the cell size on {levels}; verdict {verdict.word}"
    return draw(stem, (5.2, 4.1), alt, caption, paint)


def _view(values: np.ndarray, verdict: Verdict) -> tuple[float, float, list[str]]:
    """Return the range of y that keeps the levels readable, and what does not fit into it."""
    ends = [*values, *([verdict.limit] if math.isfinite(verdict.limit) else [])]
    span = max(ends) - min(ends)
    cut = []
    stated = {
        "interval": (verdict.low, verdict.high),
        "tolerance": (verdict.value - verdict.tolerance, verdict.value + verdict.tolerance),
    }
    for name, pair in stated.items():
        if not all(math.isfinite(end) for end in pair):
            continue
        if span <= 1e-9 * max(map(abs, ends)) or pair[1] - pair[0] <= 4 * span:
            ends.extend(pair)
        elif pair[0] < min(ends) - 0.1 * span or pair[1] > max(ends) + 0.1 * span:
            cut.append(name)
    low, high = min(ends), max(ends)
    room = 0.08 * (high - low) or 0.01 * abs(high) or 1.0
    return low - room, high + room, cut


def _interval(axes: "Axes", verdict: Verdict) -> None:
    """Shade the interval, rule the tolerance about the finest value and the limit."""
    if math.isfinite(verdict.low) and math.isfinite(verdict.high):
        axes.axhspan(verdict.low, verdict.high, color=BLUE, alpha=0.18, linewidth=1.2, label="interval")
    if math.isfinite(verdict.tolerance) and math.isfinite(verdict.value):
        for sign, label in ((-1, "tolerance"), (1, "")):
            edge = verdict.value + sign * verdict.tolerance
            axes.axhline(edge, color=GREY, linestyle=(0, (1, 2)), label=label or None)
    if math.isfinite(verdict.limit):
        axes.axhline(verdict.limit, color=GREEN, linestyle=(0, (7, 2)), label="limit")


def _curve(axes: "Axes", verdict: Verdict, h: np.ndarray, values: np.ndarray) -> None:
    """Draw limit + (finest - limit) (h / finest h)^order."""
    if not (math.isfinite(verdict.limit) and verdict.observed_order > 0):
        return
    low, high = sorted(axes.get_xlim())
    fine = np.geomspace(low, high, 200)
    factor = np.exp(np.minimum(verdict.observed_order * np.log(fine / h[-1]), 50.0))
    curve = verdict.limit + (values[-1] - verdict.limit) * factor
    axes.plot(fine, curve, "-", color=RED, label="fitted curve", zorder=3)
