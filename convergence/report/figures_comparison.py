"""Two ladders of one quantity over the cell size, and beside them both intervals enlarged."""

import math
from typing import TYPE_CHECKING

import numpy as np

from convergence.comparison import Compared, Comparison
from convergence.report._axes import bracket, log_ticks, middle, value_ticks
from convergence.report._level_words import best_hint, known_hints
from convergence.report._picture import BLUE, GREEN, LEVELS, RED, Picture, Rewrite, draw
from convergence.results import Verdict

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

SIDES = ("first", "second")
LOOKS = ((BLUE, "o"), (RED, "s"))


def comparison_figure(
    stem: str, found: Comparison, one: Compared, comma: Rewrite | None = None
) -> Picture | None:
    """Return the figure of one quantity, None where neither ladder has a value."""
    ladders = [findings.ladder for findings in found.findings]
    relative = ladders[0].h_unit != ladders[1].h_unit or not ladders[0].h_unit
    columns = [
        (ladder.h / (ladder.h[-1] if relative else 1.0), ladder.column(quantity.name))
        for ladder, quantity in zip(ladders, (one.first, one.second), strict=True)
    ]
    known = [np.isfinite(values) for _, values in columns]
    if not any(map(np.any, known)):
        return None
    stated = _stated(one)

    def paint(figure: "Figure") -> None:
        axes, beside = (
            figure.subplots(1, 2, width_ratios=(2.6, 1.0)) if stated else (figure.add_subplot(), None)
        )
        for side, (h, values) in enumerate(columns):
            colour, mark = LOOKS[side]
            name = f"{SIDES[side]}: {middle(found.names[side], 30)}"
            x, y = h[known[side]], values[known[side]]
            axes.plot(x, y, mark, color=colour, label=name, zorder=4, gid=f"{LEVELS}-{side}")
        _sizes(axes, np.concatenate([h for h, _ in columns]), "" if relative else ladders[0].h_unit, relative)
        heights = np.concatenate([values[of] for (_, values), of in zip(columns, known, strict=True)])
        ends = [end for verdict, _ in stated.values() for end in (verdict.low, verdict.high)]
        _spread(axes, [*heights, *ends])
        axes.set_ylabel(f"{middle(one.first.name)}{bracket(one.unit)}")
        if beside is not None:
            _enlarge(beside, stated)
        figure.legend(loc="outside lower center", ncols=2)

    caption = "Values of both ladders over the cell size"
    caption += ", each over the finest of its own ladder." if relative else "."
    if stated:
        caption += " Right: the intervals and the best estimates in them, enlarged."
    hints = [
        f"{label}, {hint}"
        for label, ladder, quantity in zip(SIDES, ladders, (one.first, one.second), strict=True)
        for hint in known_hints(ladder, quantity, math.nan)
    ]
    hints += [f"{label}: {best_hint(verdict, one.unit)}" for label, (verdict, _) in stated.items()]
    alt = f"{one.first.name} on two ladders: {one.word}"
    return draw(stem, (6.6, 4.1), alt, caption, paint, hints, comma=comma)


def _stated(one: Compared) -> dict[str, tuple[Verdict, str]]:
    """Return each interval there is with its colour, that of both together last."""
    stated = {
        label: (verdict, LOOKS[side][0])
        for side, (label, verdict) in enumerate(zip(SIDES, one.verdicts, strict=True))
        if math.isfinite(verdict.high - verdict.low)
    }
    return stated | ({"both": (one.joint, GREEN)} if one.joint else {})


def _sizes(axes: "Axes", h: np.ndarray, unit: str, relative: bool) -> None:
    room = 1.25
    log_ticks(axes, float(h.min()) / room, float(h.max()) * room, which="x")
    axes.invert_xaxis()
    what = "cell size over the finest" if relative else f"cell size h{bracket(unit)}"
    axes.set_xlabel(f"{what}, finer to the right")


def _spread(axes: "Axes", heights: list[float]) -> None:
    low, high = min(heights), max(heights)
    room = 0.08 * (high - low) or 0.01 * abs(high) or 1.0
    value_ticks(axes, low - room, high + room)


def _enlarge(axes: "Axes", stated: dict[str, tuple[Verdict, str]]) -> None:
    """Draw one bar an interval with a diamond at the best estimate."""
    for place, (verdict, colour) in enumerate(stated.values()):
        gid = f"{LEVELS}-best-{place}"
        axes.plot([place, place], [verdict.low, verdict.high], "_-", color=colour, lw=2.0, ms=14.0)
        axes.plot([place], [verdict.limit], "D", color=colour, ms=5.0, gid=gid)
    _spread(axes, [end for verdict, _ in stated.values() for end in (verdict.low, verdict.high)])
    axes.set_xticks(range(len(stated)), list(stated))
    axes.set_xlim(-0.6, len(stated) - 0.4)
