"""Loads and reactions to scale: arrows in one view of a plane, in three of a solid."""

from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.report import _arrows
from convergence.report._axes import bracket, middle
from convergence.report._picture import GREY, LEVELS, Picture, Rewrite, draw
from convergence.report._words import with_unit
from convergence.statics import COMPONENTS, Actions, Balance, moment_unit

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

LONGEST = 0.3  # arrow over the extent of the points
NARROWEST = 0.4  # view over the widest one
MOST_LABELS = 10
MOST_DRAWN = 500
RADIUS = 0.05  # of a moment's arrow over the extent of the points
VIEWS = {(0, 2): (0, 0), (1, 2): (0, 1), (0, 1): (1, 0)}  # of a solid, with their places in the figure


def balance_figure(stem: str, balance: Balance, comma: Rewrite | None = None) -> Picture | None:
    """Return the figure of one load case, None where its table has no points."""
    if "Mz" not in balance.printout.components:
        return None
    actions, solid = _largest(balance.actions), balance.printout.dimension == 3
    largest = float(np.linalg.norm(actions.force, axis=0).max())
    arrows = LONGEST * _extent(actions) / (largest or 1.0) * actions.force
    low, high = _limits(actions, arrows)

    def paint(figure: "Figure") -> None:
        for axes, view in _panels(figure, high - low, solid):
            _paint_view(axes, balance, actions, view, arrows)
            across, up = view
            axes.set(xlim=(low[across], high[across]), ylim=(low[up], high[up]))
        handles, labels = axes.get_legend_handles_labels()
        figure.legend(handles, labels, loc="outside lower center", ncols=3)

    force = with_unit(numbers.compact(largest, 4), balance.printout.force_unit)
    caption = (
        "Loads (filled) start at their points, reactions (hollow) end there;"
        f" an arrow of {force} is the longest one."
    )
    if np.any(actions.moment):
        caption += " Round arrows: moments, not to scale."
    if len(actions.names) > MOST_LABELS:
        caption += f" {_how_many(len(actions.names), len(balance.actions.names))}, without their names."
    alt = f"Loads and reactions{f' of {balance.case}' if balance.case else ''}: {balance.worst.word}"
    hints = _hints(balance, actions) * (len(VIEWS) if solid else 1)
    return draw(stem, (7.0, 6.6) if solid else (5.2, 4.4), alt, caption, paint, hints, comma=comma)


def _hints(balance: Balance, actions: Actions) -> list[str]:
    """Return what stands at each point: whose it is, forces and moments that are not zero, the place."""
    printout = balance.printout
    units = [printout.force_unit] * 3 + [moment_unit(printout)] * 3
    hints = []
    for row, name in enumerate(actions.names):
        parts = [*actions.force[:, row], *actions.moment[:, row]]
        said = [
            f"{part} {with_unit(numbers.compact(float(size), 5), unit)}"
            for part, size, unit in zip(COMPONENTS, parts, units, strict=True)
            if size
        ]
        place = ", ".join(numbers.compact(float(x), 5) for x in actions.point[: printout.dimension, row])
        what = f"{'load' if actions.is_load[row] else 'reaction'} {name}".strip()
        at = with_unit(f"({place})", printout.length_unit)
        hints.append(f"{what}: {', '.join(said) or 'zero'}; at {at}")
    return hints


def _largest(actions: Actions) -> Actions:
    """Return the actions that are drawn: those of the largest forces where there are very many."""
    rows = np.argsort(-np.linalg.norm(actions.force, axis=0), kind="stable")[:MOST_DRAWN]
    return actions.of(np.isin(np.arange(len(actions.names)), rows))


def _how_many(drawn: int, rows: int) -> str:
    return f"{drawn} rows" if drawn == rows else f"The {drawn} largest forces of {numbers.count(rows)} rows"


def _extent(actions: Actions) -> float:
    return float(np.linalg.norm(np.ptp(actions.point, axis=1))) or 1.0


def _limits(actions: Actions, arrows: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return both ends of what is drawn along x, y and z, no view too narrow to read."""
    ends = np.where(actions.is_load, actions.point + arrows, actions.point - arrows)
    places = np.hstack([actions.point, ends])
    low, high = places.min(axis=1), places.max(axis=1)
    wide = np.maximum(1.25 * (high - low), NARROWEST * (high - low).max())
    centre = 0.5 * (low + high)
    return centre - 0.5 * wide, centre + 0.5 * wide


def _panels(figure: "Figure", wide: np.ndarray, solid: bool) -> list[tuple["Axes", tuple[int, int]]]:
    """Return the axes and what is to the right and up in them: all views are of one scale."""
    if not solid:
        return [(figure.add_subplot(), (0, 1))]
    x, y, z = wide
    grid = figure.add_gridspec(2, 2, width_ratios=(x, y), height_ratios=(z, y))
    return [(figure.add_subplot(grid[place]), view) for view, place in VIEWS.items()]


def _paint_view(
    axes: "Axes", balance: Balance, actions: Actions, view: tuple[int, int], all_arrows: np.ndarray
) -> None:
    unit = balance.printout.length_unit
    points, arrows = actions.point[list(view)], all_arrows[list(view)]
    axes.set_aspect("equal", adjustable="box")
    axes.plot(*points, "o", color=GREY, markersize=3.0, zorder=3, gid=f"{LEVELS}-{view[0]}{view[1]}")
    axes.plot(*[balance.about[k] for k in view], "+", color="black", markersize=10, label="point of moments")
    for load, (label, *_) in _arrows.LOOKS.items():
        rows = (actions.is_load == load) & np.any(arrows != 0.0, axis=0)
        _arrows.straight(axes, points[:, rows], arrows[:, rows], load, label)
    _moments(axes, actions, view, moment_unit(balance.printout))
    if len(actions.names) <= MOST_LABELS:
        _names(axes, actions, points, arrows)
    axes.set_xlabel(f"{'xyz'[view[0]]}{bracket(unit)}")
    axes.set_ylabel(f"{'xyz'[view[1]]}{bracket(unit)}")


def _moments(axes: "Axes", actions: Actions, view: tuple[int, int], unit: str) -> None:
    """Mark the moments about the axis towards the reader, with their values where there is room."""
    towards = 3 - sum(view)
    sense = -1.0 if view == (0, 2) else 1.0  # x to the right and z up have -y towards the reader
    for row in np.flatnonzero(actions.moment[towards]):
        moment = actions.moment[towards, row]
        x, y = actions.point[list(view), row].tolist()
        colour = _arrows.LOOKS[bool(actions.is_load[row])][1]
        radius, up = RADIUS * _extent(actions), np.sign(sense * moment)
        arms = np.array((radius, 0.0)), np.array((0.0, radius * up))
        _arrows.round_about(axes, np.array((x, y)), *arms, bool(actions.is_load[row]))
        if len(actions.names) <= MOST_LABELS:
            size = with_unit(numbers.compact(abs(moment), 4), unit)
            axes.annotate(size, (x, y), (12, 4), textcoords="offset points", color=colour, fontsize=8)


def _names(axes: "Axes", actions: Actions, points: np.ndarray, arrows: np.ndarray) -> None:
    """Write the name of each row beside the free end of its arrow."""
    for row, name in enumerate(actions.names):
        load = bool(actions.is_load[row])
        if name and np.any(arrows[:, row]):
            end = points[:, row] + (arrows[:, row] if load else -arrows[:, row])
            axes.annotate(
                middle(name, 24),
                end,
                (4, -8),
                textcoords="offset points",
                fontsize=8,
                color=_arrows.LOOKS[load][1],
            )
