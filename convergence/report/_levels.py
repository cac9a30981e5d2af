"""Levels as marks: those that count, those that do not, and those without a value."""

from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.histories.calibrated import FINEST_LEVELS
from convergence.report._picture import GREY, INK, LEVELS
from convergence.report._words import sentence
from convergence.results import Ladder

if TYPE_CHECKING:
    from matplotlib.axes import Axes


def counted(values: np.ndarray) -> np.ndarray:
    """Return which of the values (n), NaN for none, an interval is made from."""
    known = np.isfinite(values)
    return np.asarray(known & (known[::-1].cumsum()[::-1] <= FINEST_LEVELS))


def mark_levels(axes: "Axes", h: np.ndarray, shown: np.ndarray, values: np.ndarray) -> None:
    """Draw a mark a level at `shown` (n), NaN for none, in the order of the levels.

    Filled where its value counts, hollow where it does not.
    """
    early, counts = np.isfinite(shown) & ~counted(values), np.isfinite(shown) & counted(values)
    if early.any():
        label, gid = "levels that do not count", f"{LEVELS}-early"
        axes.plot(h[early], shown[early], "o", color=INK, mfc="white", label=label, zorder=4, gid=gid)
    axes.plot(h[counts], shown[counts], "o", color=INK, label="levels", zorder=4, gid=LEVELS)
    mark_lost(axes, h, values)


def mark_lost(axes: "Axes", h: np.ndarray, values: np.ndarray) -> None:
    """Draw a cross on the axis at every level without a value, before the other levels."""
    lost = ~np.isfinite(values) & (h > 0)
    if lost.any():
        across, low = axes.get_xaxis_transform(), np.full(lost.sum(), 0.03)
        label, gid = "levels without a value", f"{LEVELS}-lost"
        axes.plot(h[lost], low, "x", color=GREY, mew=1.8, label=label, transform=across, zorder=3.5, gid=gid)


def rejected_words(values: np.ndarray, ladder: Ladder, has_interval: bool = True) -> str:
    """Return what a caption says of levels that do not count, with a blank before it; "" where all do."""
    known = np.isfinite(values)
    said = []
    if not known.all():
        lost = numbers.several(int((~known).sum()), "level")
        said.append(f"Crosses on the axis: {lost} without a value.")
    if has_interval and (known & ~counted(values)).any():
        said.append(f"Hollow: too coarse to count, as the {FINEST_LEVELS} finest levels make the interval.")
    said += [sentence(remark[:1].upper() + remark[1:]) for remark in ladder.unsolved]
    return "".join(f" {one}" for one in said)
