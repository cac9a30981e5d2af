"""Von Mises stress on the deformed part, with singular corners hatched and peaks marked."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.fields import Fields
from convergence.report import _plane
from convergence.report._axes import bracket, middle
from convergence.report._picture import Picture, draw
from convergence.results import Corner, Findings

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

DISC = 0.03  # radius of the hatched disc over the size of the part


@dataclass(frozen=True)
class Peak:
    """Where quantities have their peak on the finest mesh."""

    names: str
    x: float
    y: float


def peaks(findings: Findings) -> list[Peak]:
    """Return the places that the finest level keeps as NAME.x and NAME.y, one for equal places."""
    values = findings.ladder.levels[-1].values
    found: dict[tuple[float, float], list[str]] = {}
    for quantity in findings.quantities:
        place = values.get(f"{quantity.name}.x", math.nan), values.get(f"{quantity.name}.y", math.nan)
        if all(math.isfinite(part) for part in place):
            found.setdefault(place, []).append(quantity.name)
    return [Peak(", ".join(names), *place) for place, names in found.items()]


def stress_figure(field: Fields, findings: Findings, stress: str) -> Picture:
    """Return the figure for the finest mesh; the colours end at the largest stress outside the discs."""
    from matplotlib.tri import Triangulation

    corners, marks = findings.facts.corners or (), peaks(findings)
    factor = deformation_factor(field)
    moved = field.points + factor * field.displacement
    top = _top(field, corners)
    width, height = _plane.panel(_plane.shape_of(moved))

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        drawn = axes.tripcolor(
            Triangulation(moved[0], moved[1], _plane.triangles(field.cells)),
            field.von_mises,
            shading="gouraud",
            cmap="viridis",
            vmin=min(0.0, float(field.von_mises.min())),
            vmax=top,
            rasterized=True,
        )
        over = "max" if float(field.von_mises.max()) > top else "neither"
        bar = figure.colorbar(drawn, ax=axes, extend=over, shrink=0.85, pad=0.02)
        bar.set_label(f"von Mises stress{bracket(stress)}")
        _plane.outline(axes, field.points, field.boundary, "--")
        _hatch(axes, field, factor, corners)
        _mark(axes, field, factor, marks)
        _plane.view(axes, field.points, moved)

    page = (max(width + 1.5, 4.5), max(height + 0.4 + 0.2 * len(marks), 2.6))
    hatched = numbers.several(len(corners), "singular corner")
    alt = f"Von Mises stress on the deformed part, finest mesh; {hatched} hatched"
    return draw("stress", page, alt, _caption(factor, bool(corners), marks), paint)


def deformation_factor(field: Fields) -> float:
    """Return the round factor that shows the largest displacement as about a twentieth of the part."""
    largest = float(np.hypot(*field.displacement).max())
    if largest == 0 or not math.isfinite(largest):
        return 1.0
    return max(1.0, _plane.round_factor(0.06 * _plane.size_of(field.points) / largest))


def _near(field: Fields, place: Corner | Peak) -> np.ndarray:
    return np.asarray(np.hypot(field.points[0] - place.x, field.points[1] - place.y))


def _top(field: Fields, corners: Sequence[Corner]) -> float:
    outside = np.ones(field.points.shape[1], dtype=bool)
    for corner in corners:
        outside &= _near(field, corner) > DISC * _plane.size_of(field.points)
    top = float(field.von_mises[outside].max()) if outside.any() else 0.0
    return top if top > 0 else max(float(field.von_mises.max()), 1e-300)


def _moved(field: Fields, factor: float, place: Corner | Peak) -> tuple[float, float]:
    shift = factor * field.displacement[:, int(np.argmin(_near(field, place)))]
    return place.x + float(shift[0]), place.y + float(shift[1])


def _hatch(axes: "Axes", field: Fields, factor: float, corners: Sequence[Corner]) -> None:
    from matplotlib.patches import Circle

    radius = DISC * _plane.size_of(field.points)
    for corner in corners:
        place = _moved(field, factor, corner)
        disc = Circle(place, radius, facecolor="#ffffff66", edgecolor="black", hatch="//////", zorder=5)
        axes.add_patch(disc)


def _mark(axes: "Axes", field: Fields, factor: float, marks: Sequence[Peak]) -> None:
    symbols = "^svDPX*p"
    for number, mark in enumerate(marks):
        x, y = _moved(field, factor, mark)
        axes.plot(
            x,
            y,
            symbols[number % len(symbols)],
            markersize=7,
            markerfacecolor="#ffffff99",
            markeredgecolor="black",
            linestyle="none",
            label=f"place of {middle(mark.names)}",
            zorder=6,
        )
    if marks:
        axes.figure.legend(loc="outside lower left", ncols=1)


def _caption(factor: float, hatched: bool, marks: Sequence[Peak]) -> str:
    times = numbers.at_step(factor, factor)
    scale = "at true scale" if factor == 1.0 else f"deformation drawn {times} times as large"
    caption = f"Recovered von Mises stress on the finest mesh, {scale}; dashed: the undeformed outline."
    if hatched:
        caption += (
            " Hatched: singular corners, where stress has no limit; the colours end at the largest"
            " stress outside the discs."
        )
    return caption + (" Marks: places of peak quantities on this mesh." if marks else "")
