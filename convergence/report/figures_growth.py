"""Growth of a singular quantity: no limit is drawn, because there is none."""

from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report._axes import bracket, cell_size_axis, log_ticks, middle
from convergence.report._picture import GREEN, INK, RED, Picture, draw
from convergence.results import Ladder, Quantity

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def growth_figure(
    stem: str, quantity: Quantity, ladder: Ladder, length: str, exponent: float | None
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
        axes.plot(h, size, "o", color=INK, label="levels", zorder=4)
        log_ticks(axes, float(size.min()) / 1.15, float(size.max()) * 1.25)
        axes.set_ylabel(f"|{middle(quantity.name)}|{bracket(quantity.unit)}")
        axes.set_title("No limit exists: the mesh sets this value", color=RED, loc="left")
        figure.legend(loc="outside lower center", ncols=3)

    caption = "Both axes logarithmic. A straight rise means growth by the same factor with every refinement."
    grown = ", ".join(f"{name} h^({numbers.compact(power, 3)})" for name, power in powers.items())
    alt = f"{quantity.name} grows without limit as cells shrink; {grown or 'one level only'}"
    return draw(stem, (5.2, 4.1), alt, caption, paint)


def _powers(h: np.ndarray, size: np.ndarray, exponent: float | None) -> dict[str, float]:
    """Return the power of h of the data (three finest levels) and of the corner."""
    powers = {}
    if len(h) > 1 and h[-1] < h[-2]:
        powers["data"] = float(np.polyfit(np.log(h[-3:]), np.log(size[-3:]), 1)[0])
    if exponent is not None:
        powers["corner theory"] = exponent - 1.0
    return powers
