"""Arrows of forces and moments: loads, filled, start at their points; reactions, hollow, end there."""

from typing import TYPE_CHECKING

import numpy as np

from convergence.report._picture import BLUE, RED_TEXT

if TYPE_CHECKING:
    from matplotlib.axes import Axes

LOOKS = {True: ("loads", BLUE, BLUE, "tail"), False: ("reactions", RED_TEXT, "white", "tip")}


def straight(axes: "Axes", points: np.ndarray, arrows: np.ndarray, load: bool, label: str) -> None:
    """Draw arrows (2, k) at points (2, k), both in the lengths of the axes."""
    _, colour, fill, pivot = LOOKS[load]
    axes.quiver(
        *points, *arrows, angles="xy", scale_units="xy", scale=1.0, units="inches", width=0.022,
        headwidth=5.0, headlength=7.0, headaxislength=6.0, facecolor=fill, edgecolor=colour, linewidth=0.9,
        pivot=pivot, label=label, zorder=4,
    )  # fmt: skip


def round_about(axes: "Axes", place: np.ndarray, across: np.ndarray, up: np.ndarray, load: bool) -> None:
    """Draw three quarters of a turn about a place (2,), from the arm `across` (2,) by way of the arm `up`."""
    from matplotlib.patches import FancyArrowPatch
    from matplotlib.path import Path

    colour = LOOKS[load][1]
    turns = np.radians(np.linspace(-45.0, 225.0, 28))
    walk = place[:, None] + np.outer(across, np.cos(turns)) + np.outer(up, np.sin(turns))
    turned = FancyArrowPatch(
        path=Path(walk.T), arrowstyle="-|>", mutation_scale=9.0, edgecolor=colour, facecolor="none", zorder=5
    )
    axes.add_patch(turned)
