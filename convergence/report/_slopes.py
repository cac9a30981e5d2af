"""Lines of constant order on log axes, and the same in words."""

from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report._picture import GREEN, GREY, RED

if TYPE_CHECKING:
    from matplotlib.axes import Axes


def slope_words(orders: dict[str, float]) -> str:
    """Return the orders as words for a reader who does not see the lines."""
    return ", ".join(f"{name} order {numbers.compact(p, 3)}" for name, p in orders.items()) or "no order"


def slopes(axes: "Axes", h: float, error: float, orders: dict[str, float]) -> None:
    """Draw one line of each order through the finest point."""
    low, high = sorted(axes.get_xlim())
    fine = np.geomspace(low, high, 50)
    looks = {"observed": ("-", RED), "theory": ("--", GREEN), "smooth theory": (":", GREY)}
    for name, order in orders.items():
        line, colour = looks.get(name, ("--", GREEN))
        curve = error * np.exp(np.minimum(order * np.log(fine / h), 50.0))
        axes.plot(fine, curve, line, color=colour, label=f"{name}: {numbers.compact(order, 3)}")
