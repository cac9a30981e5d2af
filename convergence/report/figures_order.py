"""Error against the cell size on log axes, beside the slopes of theory and of the data."""

import math
from itertools import compress
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report import _words
from convergence.report._axes import bracket, cell_size_axis, log_ticks
from convergence.report._level_words import level_hints, lost_hints
from convergence.report._levels import mark_levels, rejected_words
from convergence.report._picture import BLUE, GREY, Picture, Rewrite, draw
from convergence.report._slopes import slope_words, slopes
from convergence.results import Ladder, Quantity, Verdict

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure


def error_figure(
    stem: str, quantity: Quantity, verdict: Verdict, ladder: Ladder, length: str, comma: Rewrite | None = None
) -> Picture | None:
    """Return the figure, None where no difference beyond round-off is left to draw.

    Without a stated limit the changes from level to level are drawn: they fall with the same order.
    """
    values = ladder.column(quantity.name)
    limited = math.isfinite(verdict.limit)
    errors = np.abs(values - verdict.limit) if limited else np.abs(np.diff(values, prepend=np.nan))
    drawn = np.isfinite(errors) & (errors > 0)
    if verdict.behaviour == "constant" or not drawn.any():
        return None
    what = "difference from the best estimate" if limited else "change from the level before"

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        cell_size_axis(axes, ladder, length)
        h, error = ladder.h[drawn], errors[drawn]
        _believed(axes, h[-1], error[-1], verdict)
        slopes(axes, h[-1], error[-1], _orders(verdict))
        mark_levels(axes, ladder.h, np.where(drawn, errors, np.nan), values)
        low, high = float(error.min()) / 2.5, float(error.max()) * 1.8
        if low < verdict.tolerance < high * 30:
            high = max(high, 1.3 * verdict.tolerance)
            axes.axhline(verdict.tolerance, color=GREY, linestyle=(0, (1, 2)), label="tolerance")
        log_ticks(axes, low, high)
        axes.set_ylabel(f"{what}{bracket(quantity.unit)}")
        figure.legend(loc="outside lower center", ncols=2)

    caption = f"Size of the {what}, both axes logarithmic: a constant order is a straight line."
    caption += rejected_words(values, ladder)
    if limited:
        caption += " The best estimate is made from the same levels and is no independent witness."
    alt = f"{what} of {quantity.name} against the cell size; {slope_words(_orders(verdict))}"
    said = level_hints(ladder, quantity, verdict.uncertainty)
    hints = lost_hints(ladder, quantity) + [
        f"{hint}; {what} {_words.with_unit(numbers.significant(error, 3), quantity.unit)}"
        for hint, error in compress(zip(said, errors, strict=True), drawn)
    ]
    return draw(stem, (5.2, 4.1), alt, caption, paint, hints, "error", comma=comma)


def _believed(axes: "Axes", h: float, error: float, verdict: Verdict) -> None:
    """Shade the orders that 95 % of the belief lie between, through the finest level."""
    if not (math.isfinite(verdict.limit) and verdict.order_high > 0.0):
        return
    low, high = sorted(axes.get_xlim())
    steps = np.log(np.geomspace(low, high, 50) / h)
    lower, upper = (max(order, 0.0) for order in (verdict.order_low, verdict.order_high))
    flat, steep = error * np.exp(lower * steps), error * np.exp(upper * steps)
    label = f"believed: {numbers.order(verdict.order_low)} to {numbers.order(verdict.order_high)}"
    axes.fill_between(h * np.exp(steps), flat, steep, color=BLUE, alpha=0.16, linewidth=0, label=label)


def _orders(verdict: Verdict) -> dict[str, float]:
    """Return the orders worth a line: of the data, of a smooth solution, of this model."""
    formal, expected = verdict.formal_order or math.nan, verdict.expected_order or math.nan
    orders = {"observed": verdict.observed_order}
    if math.isfinite(expected) and not math.isclose(expected, formal):
        orders["expected here"] = expected
    orders["smooth theory" if "expected here" in orders else "theory"] = formal
    return {name: order for name, order in orders.items() if math.isfinite(order) and order > 0}
