"""Where the error sits on the finest mesh, and how its energy norm falls over the ladder."""

import math
from collections.abc import Sequence
from itertools import compress
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.corner import Corner
from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.report import _plane, _scene
from convergence.report._axes import bracket, cell_size_axis, log_ticks
from convergence.report._level_words import level_names
from convergence.report._marks import Deformed, hatch, singular_words
from convergence.report._picture import INK, LEVELS, RED, Picture, Rewrite, draw
from convergence.report._slopes import slope_words, slopes
from convergence.results import Facts, Ladder

if TYPE_CHECKING:
    from matplotlib.figure import Figure

NORMS = {"estimated": ("o", INK, 6.0), "exact": ("x", RED, 8.0)}  # mark, colour and size


def error_map(
    field: Fields,
    turned: np.ndarray,
    units: Units,
    mesh: str = "the finest mesh",
    corners: Sequence[Corner] = (),
    comma: Rewrite | None = None,
) -> Picture | None:
    """Return the map of the squared energy-norm error per volume, None where it is zero everywhere.

    `turned` is the rotation (D, D) to the page, `mesh` what the mesh is called.
    """
    from matplotlib.colors import LogNorm

    known = field.error[np.isfinite(field.error) & (field.error > 0)]
    if not known.size:
        return None
    high = float(known.max())
    low = float(np.clip(np.quantile(known, 0.02), high * 1e-9, high * 0.1))
    points = turned @ field.points
    page = _scene.on_page(turned, [points])
    width, height = _plane.panel(_plane.shape_of(page))
    energy = f"{units.force} {units.length}/{units.length}³" if units.length and units.force else ""

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        part = _scene.scene(field, points, width)
        shade = np.clip(np.nan_to_num(field.error), low, high)
        drawn = _scene.cellwise(axes, part, shade, "cividis", LogNorm(low, high))
        bar = figure.colorbar(drawn, ax=axes, extend="min", shrink=0.85, pad=0.02)
        bar.set_label(f"error density{bracket(energy)}")
        log_ticks(bar.ax, low, high)
        _scene.outline(axes, part, _scene.ink_on_colours(part))
        hatch(axes, Deformed(part, turned, 0.0), corners)
        _scene.frame(axes, turned, page)

    where = "in the cells at the surface of" if len(turned) == 3 else "on"
    caption = (
        f"Squared energy-norm error per volume {where} {mesh}, from the recovered stress,"
        " logarithmic colours: bright cells are where refinement pays." + singular_words(corners)
    )
    alt = f"Map of the estimated energy-norm error density on {mesh}"
    return draw(
        "error-map", (max(width + 1.5, 4.5), max(height + 0.3, 2.6)), alt, caption, paint, comma=comma
    )


def norm_figure(ladder: Ladder, facts: Facts, length: str, comma: Rewrite | None = None) -> Picture | None:
    """Return the relative energy-norm error against the cell size, None where it was not recorded."""
    columns = {name: ladder.column(f"energy_norm.{name}") for name in ("estimated", "exact")}
    columns = {name: column for name, column in columns.items() if np.any(column > 0)}
    if "estimated" not in columns:
        return None
    estimated = columns["estimated"]
    drawn = {name: column > 0 for name, column in columns.items()}
    known = drawn["estimated"]
    orders = _orders(ladder.h[known], estimated[known], facts)

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        cell_size_axis(axes, ladder, length)
        slopes(axes, ladder.h[known][-1], estimated[known][-1], orders)
        for name, (look, colour, size) in NORMS.items():
            if name in columns:
                h, error = ladder.h[drawn[name]], columns[name][drawn[name]]
                axes.plot(h, error, look, color=colour, ms=size, label=name, zorder=4, gid=f"{LEVELS}-{name}")
        seen = np.concatenate([column[column > 0] for column in columns.values()])
        log_ticks(axes, float(seen.min()) / 1.6, float(seen.max()) * 1.6, percent=True)
        axes.set_ylabel("error in the energy norm, relative")
        figure.legend(loc="outside lower center", ncols=2)

    caption = (
        "Relative error in the energy norm on every level, both axes logarithmic. It speaks for the whole"
        " part, not for one quantity."
    )
    alt = f"Relative energy-norm error against the cell size; {slope_words(orders)}"
    hints = [
        f"{level}; {name} error {numbers.percent(error)}"
        for name, column in columns.items()
        for level, error in compress(zip(level_names(ladder), column, strict=True), drawn[name])
    ]
    return draw("energy-norm", (5.2, 4.1), alt, caption, paint, hints, comma=comma)


def _orders(h: np.ndarray, error: np.ndarray, facts: Facts) -> dict[str, float]:
    """Return the slope of the three finest levels and min(degree, exponent), where known."""
    orders = {}
    if len(h) > 1 and h[-1] < h[-2]:
        orders["observed"] = float(np.polyfit(np.log(h[-3:]), np.log(error[-3:]), 1)[0])
    if facts.degree is not None:
        orders["theory"] = min(float(facts.degree), facts.exponent or math.inf)
    return {name: order for name, order in orders.items() if order > 0}
