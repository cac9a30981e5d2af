"""A quantity against the cell size: levels, curve, best estimate of the limit, interval and tolerance."""

import math
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report._axes import bracket, cell_size_axis, middle, value_ticks
from convergence.report._level_words import best_hint, known_hints, lost_hints
from convergence.report._levels import mark_levels, rejected_words
from convergence.report._picture import BLUE, GREEN, GREY, INK, LEVELS, RED, Picture, Rewrite, draw
from convergence.results import Companion, Ladder, Quantity, Verdict

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

SMALL = 0.25  # intervals below this share of the picture are drawn enlarged beside it


def value_figure(
    stem: str,
    quantity: Quantity,
    verdict: Verdict,
    ladder: Ladder,
    length: str,
    companion: Companion | None = None,
    comma: Rewrite | None = None,
) -> Picture | None:
    """Return the figure, None where no level has a value."""
    values = ladder.column(quantity.name)
    known = np.isfinite(values)
    if not known.any():
        return None
    second = companion.ladder.column(quantity.name) if companion else np.zeros(0)
    low, high, cut = _view(np.append(values[known], second[np.isfinite(second)]), verdict)
    order = _order(verdict, ladder.h[known], values[known])
    enlarged = verdict.high - verdict.low < SMALL * (high - low)

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        if enlarged:
            axes, beside = _two(figure)
            _enlarge(beside, verdict)
        cell_size_axis(axes, ladder, length)
        _interval(axes, verdict)
        if not math.isnan(order):
            _curve(axes, verdict.limit, ladder.h[known][-1], values[known][-1], order)
        mark_levels(axes, ladder.h, values, values)
        if companion:
            _companion(axes, companion, second)
        value_ticks(axes, low, high)
        axes.set_ylabel(f"{middle(quantity.name)}{bracket(quantity.unit)}")
        figure.legend(loc="outside lower center", ncols=3)

    there = numbers.several(int(known.sum()), "level")
    caption = "Value on every level." if known.all() else f"Value on {there}."
    caption += rejected_words(values, ladder) + _caption(verdict, companion, enlarged, order)
    caption += "".join(f" The {part} lies partly outside the picture." for part in cut)
    alt = f"{quantity.name} against the cell size on {there}; verdict {verdict.word}"
    hints = _hints(quantity, verdict, ladder, companion, enlarged)
    return draw(stem, (5.2, 4.1), alt, caption, paint, hints, "value", comma=comma)


def _caption(verdict: Verdict, companion: Companion | None, enlarged: bool, order: float) -> str:
    """Return what the marks and lines are, each sentence with a blank before it."""
    caption = ""
    if companion:
        caption += f" Squares: the companion ladder of {companion.cells}."
    if not math.isnan(verdict.low):
        caption += " Shaded: the interval, and in it the best estimate of the limit (diamond)."
    if enlarged:
        caption += " Right: enlarged, the dot is the finest value."
    if not math.isnan(order):
        caption += f" Curve: best estimate plus a power of the cell size, {numbers.order(order)} fits best."
    return caption


def _hints(
    quantity: Quantity, verdict: Verdict, ladder: Ladder, companion: Companion | None, enlarged: bool
) -> list[str]:
    """Return what the marks stand for: levels, companion, best estimate; enlarged the last level and it."""
    lost = lost_hints(ladder, quantity)
    levels = known_hints(ladder, quantity, verdict.uncertainty)
    second = known_hints(companion.ladder, quantity, math.nan) if companion else []
    best = [best_hint(verdict, quantity.unit)] if math.isfinite(verdict.limit) else []
    again = [levels[-1], *best] if enlarged else []
    return [*lost, *levels, *(f"companion, {hint}" for hint in second), *best, *again]


def _companion(axes: "Axes", companion: Companion, values: np.ndarray) -> None:
    h = companion.ladder.h
    coarse, fine = axes.get_xlim()
    axes.set_xlim(max([coarse, *(1.1 * h)]), min([fine, *(h / 1.4)]))
    gid = f"{LEVELS}-companion"
    axes.plot(h, values, "s", color=INK, markerfacecolor="none", label="companion", zorder=4, gid=gid)


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
    """Shade the interval, rule the tolerance about the finest value, and mark the best estimate."""
    if math.isfinite(verdict.low) and math.isfinite(verdict.high):
        axes.axhspan(verdict.low, verdict.high, color=BLUE, alpha=0.18, linewidth=1.2, label="interval")
    if math.isfinite(verdict.tolerance) and math.isfinite(verdict.value):
        for sign, label in ((-1, "tolerance"), (1, "")):
            at = verdict.value + sign * verdict.tolerance
            axes.axhline(at, color=GREY, linestyle=(0, (1, 2)), label=label or None)
    if math.isfinite(verdict.limit):
        axes.axhline(verdict.limit, color=GREEN, linestyle=(0, (7, 2)), label="best estimate")
        _best(axes, verdict, 0.975)


def _best(axes: "Axes", verdict: Verdict, x: float) -> None:
    """Draw the best estimate with its interval at x, a share of the width."""
    across, ends = axes.get_yaxis_transform(), [verdict.low, verdict.high]
    axes.plot([x, x], ends, "_-", color=GREEN, lw=1.2, ms=9.0, zorder=5, transform=across)
    gid = f"{LEVELS}-best-{x:g}"
    axes.plot([x], [verdict.limit], "D", color=GREEN, ms=5.0, zorder=5, transform=across, gid=gid)


def _two(figure: "Figure") -> tuple["Axes", "Axes"]:
    """Return the axes of the ladder and narrow ones beside them."""
    figure.clear()
    axes, beside = figure.subplots(1, 2, width_ratios=(5, 1))
    return axes, beside


def _enlarge(axes: "Axes", verdict: Verdict) -> None:
    """Draw interval, best estimate and finest value; the tolerance where it is not far away."""
    ends = [verdict.low, verdict.high, verdict.value]
    if verdict.tolerance <= 3.0 * verdict.uncertainty:
        ends += [verdict.value - verdict.tolerance, verdict.value + verdict.tolerance]
    room = 0.15 * (max(ends) - min(ends))
    axes.axhspan(verdict.low, verdict.high, color=BLUE, alpha=0.18, linewidth=1.2)
    for sign in (-1, 1):
        axes.axhline(verdict.value + sign * verdict.tolerance, color=GREY, linestyle=(0, (1, 2)))
    _best(axes, verdict, 0.7)
    across = axes.get_yaxis_transform()
    axes.plot([0.3], [verdict.value], "o", color=INK, zorder=4, transform=across, gid=f"{LEVELS}-finest")
    value_ticks(axes, min(ends) - room, max(ends) + room)
    axes.set_xticks([])
    axes.set_xlabel("enlarged")


def _order(verdict: Verdict, h: np.ndarray, values: np.ndarray) -> float:
    """Return the power of h that fits the levels on the finest one's side of the best estimate, else NaN."""
    away = (values - verdict.limit) / (values[-1] - verdict.limit or math.nan)
    used = (away > 0.0) & (h > h[-1])
    if not used.any():
        return math.nan
    steps = np.log(h[used] / h[-1])
    order = float(steps @ np.log(away[used]) / (steps @ steps))
    return order if order > 0.0 else math.nan


def _curve(axes: "Axes", limit: float, h: float, value: float, order: float) -> None:
    """Draw limit + (value - limit) (size / h)^order, through the finest level."""
    low, high = sorted(axes.get_xlim())
    fine = np.geomspace(low, high, 200)
    curve = limit + (value - limit) * np.exp(np.minimum(order * np.log(fine / h), 50.0))
    axes.plot(fine, curve, "-", color=RED, label="fitted curve", zorder=3)
