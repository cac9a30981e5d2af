"""Growth of a singular quantity, with no limit because there is none, and the field beside its corner."""

import math
from itertools import compress
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.checks._field import Field, blamed, field_of
from convergence.fem.stress import component
from convergence.report import _words
from convergence.report._axes import bracket, cell_size_axis, log_ticks, middle
from convergence.report._level_words import level_hints, lost_hints
from convergence.report._levels import mark_lost, rejected_words
from convergence.report._picture import BLUE, GREEN, GREY, INK, LEVELS, RED, RED_TEXT, Picture, Rewrite, draw
from convergence.results import Facts, Ladder, Quantity

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def growth_figure(
    stem: str,
    quantity: Quantity,
    ladder: Ladder,
    length: str,
    exponent: float | None,
    comma: Rewrite | None = None,
) -> Picture | None:
    """Return the figure of |value| on log axes, None where no level has a value other than zero.

    `exponent` is lambda of the corner that is to blame: stress grows like h^(lambda - 1) there
    (Williams 1952); None where it is not known.
    """
    values = np.abs(ladder.column(quantity.name))
    drawn = np.isfinite(values) & (values > 0) & (ladder.h > 0)
    if not drawn.any():
        return None
    h, size = ladder.h[drawn], values[drawn]
    powers = _powers(h, size, exponent)

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        cell_size_axis(axes, ladder, length)
        low, high = sorted(axes.get_xlim())
        fine = np.geomspace(low, high, 50)
        for name, line, colour in (("data", "-", RED), ("corner theory", "--", GREEN)):
            if name in powers:
                label = f"{name}: h^({numbers.compact(powers[name], 3)})"
                axes.plot(fine, size[-1] * (fine / h[-1]) ** powers[name], line, color=colour, label=label)
        axes.plot(h, size, "o", color=INK, label="levels", zorder=4, gid=LEVELS)
        mark_lost(axes, ladder.h, values)
        log_ticks(axes, float(size.min()) / 1.15, float(size.max()) * 1.25)
        axes.set_ylabel(f"|{middle(quantity.name)}|{bracket(quantity.unit)}")
        axes.set_title("No limit exists: the mesh sets this value", color=RED_TEXT, loc="left")
        figure.legend(loc="outside lower center", ncols=3)

    caption = "Both axes logarithmic. A straight rise means growth by the same factor with every refinement."
    caption += rejected_words(values, ladder, has_interval=False)
    grown = ", ".join(f"{name} h^({numbers.compact(power, 3)})" for name, power in powers.items())
    alt = f"{quantity.name} grows without limit as cells shrink; {grown or 'one level only'}"
    hints = [*lost_hints(ladder, quantity), *compress(level_hints(ladder, quantity, math.nan), drawn)]
    return draw(stem, (5.2, 4.1), alt, caption, paint, hints, comma=comma)


def _powers(h: np.ndarray, size: np.ndarray, exponent: float | None) -> dict[str, float]:
    """Return the power of h of the data (three finest levels) and of the corner."""
    powers = {}
    if len(h) > 1 and h[-1] < h[-2]:
        powers["data"] = float(np.polyfit(np.log(h[-3:]), np.log(size[-3:]), 1)[0])
    if exponent is not None:
        powers["corner theory"] = exponent - 1.0
    return powers


def field_figure(
    stem: str, quantity: Quantity, ladder: Ladder, facts: Facts, comma: Rewrite | None = None
) -> Picture | None:
    """Return the figure of the von Mises stress over the distance from the corner, a line a level.

    None where no corner is to blame, or the levels did not record its field.
    """
    corner = blamed(ladder, facts, quantity.name)
    field = field_of(ladder, corner) if corner is not None and ladder.levels else None
    if corner is None or field is None or not len(field.distances):
        return None
    r, stress = field.distances, component(field.stress, "von_mises")
    length = ladder.h_unit

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        axes.set_xscale("log")
        axes.set_xlim(r[-1] / 1.2, r[0] * 1.2)
        axes.set_xticks(r, [numbers.compact(distance, 3) for distance in r])
        axes.minorticks_off()
        for level in range(stress.shape[1] - 1):
            label = "coarser levels" if level == 0 else None
            axes.plot(
                r, stress[:, level], "-", color=GREY, alpha=0.3 + 0.5 * level / stress.shape[1], label=label
            )
        axes.plot(r, stress[:, -1], "o-", color=INK, label="finest level", gid=LEVELS)
        if field.clean:
            slope = stress[field.clean - 1, -1] * (r / r[field.clean - 1]) ** (corner.exponent - 1.0)
            axes.plot(r, slope, "--", color=GREEN, label=f"corner theory: r^({corner.exponent - 1.0:.3f})")
        axes.axvspan(r[-1] / 1.2, _border(field), color=RED, alpha=0.12, label="polluted", linewidth=0)
        log_ticks(axes, float(stress[stress > 0].min()) / 1.15, float(stress.max()) * 1.25)
        axes.set_xlabel(f"distance from {middle(corner.name)}{bracket(length)}")
        axes.set_ylabel(f"von Mises stress{bracket(quantity.unit)}")
        axes.set_title("Levels agree outside the polluted core", color=BLUE, loc="left")
        figure.legend(loc="outside lower center", ncols=2)

    hints = [
        f"{_words.with_unit(numbers.compact(distance, 4), length)} from the corner; finest level"
        f" {_words.with_unit(numbers.significant(finest, 4), quantity.unit)}; {word}"
        for distance, finest, word in zip(r, stress[:, -1], _clean_words(field), strict=True)
    ]
    words = field.pollution(length)
    caption = f"Stress on a ray from the corner into the body, both axes logarithmic: {words}."
    alt = f"Stress over the distance from {corner.name}; {words}"
    return draw(stem, (5.2, 4.1), alt, caption, paint, hints, comma=comma)


def _clean_words(field: Field) -> list[str]:
    """Return for every place whether the last two levels agree there."""
    polluted = len(field.distances) - field.clean
    return ["agrees with the level before"] * field.clean + ["polluted"] * polluted


def _border(field: Field) -> float:
    """Return the distance where the polluted core ends: between the last clean place and the next."""
    if not field.clean:
        return float(field.distances[0] * 1.2)
    return float(
        field.distances[field.clean - 1] / (1.2 if field.clean == len(field.distances) else 2.0**0.5)
    )
