"""Von Mises stress on the deformed part, with singular corners hatched and peaks marked."""

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.corner import Corner
from convergence.fields import Fields
from convergence.report import _plane, _scene, _words
from convergence.report._axes import bracket
from convergence.report._marks import Deformed, Peak, hatch, mark, peaks, singular, top
from convergence.report._picture import Picture, Rewrite, draw
from convergence.results import Findings

if TYPE_CHECKING:
    from matplotlib.figure import Figure

FINEST = "the finest mesh"


def stress_figure(
    field: Fields,
    turned: np.ndarray,
    findings: Findings,
    stress: str,
    mesh: str = FINEST,
    comma: Rewrite | None = None,
) -> Picture:
    """Return the figure for a mesh, called `mesh`, turned to the page by a rotation (D, D).

    The colours end at the largest stress outside the discs.
    """
    from matplotlib.colors import Normalize

    corners, marks = findings.facts.corners or (), peaks(findings, len(field.points))
    factor = deformation_factor(field)
    still, moved = turned @ field.points, turned @ (field.points + factor * field.displacement)
    page = _scene.on_page(turned, [still, moved])
    shown, end = field.von_mises[np.unique(field.cells)], top(field, corners)
    width, height = _plane.panel(_plane.shape_of(page))

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        part = Deformed(_scene.scene(field, moved, width), turned, factor)
        norm = Normalize(min(0.0, float(shown.min())), end)
        drawn = _scene.nodal(axes, part.drawn, field.von_mises, "viridis", norm)
        over = "max" if float(shown.max()) > end else "neither"
        bar = figure.colorbar(drawn, ax=axes, extend=over, shrink=0.85, pad=0.02)
        bar.set_label(f"von Mises stress{bracket(stress)}")
        if part.drawn.seen:
            _scene.outline(axes, part.drawn, _scene.ink_on_colours(part.drawn))
        _scene.ghost(axes, _scene.scene(field, still, width))
        hatch(axes, part, corners)
        mark(axes, part, marks, _plane.points_per_length(page, width))
        _scene.frame(axes, turned, page)

    size = (max(width + 1.5, _plane.LEAST_WIDTH), max(height + 0.4 + 0.2 * len(marks), 2.6))
    place, how = singular(corners)
    places = numbers.several(len(corners), f"singular {place}")
    alt = f"Von Mises stress on the deformed part, {mesh}; {places} {how}"
    caption = _caption(len(turned) == 3, factor, corners, marks, mesh)
    return draw("stress", size, alt, caption, paint, _hints(findings, marks), comma=comma)


def _hints(findings: Findings, marks: Sequence[Peak]) -> list[str]:
    """Return for each place of peak quantities their values on the finest mesh and where it is."""
    units = {quantity.name: quantity.unit for quantity in findings.quantities}
    return [
        f"{peak.number}: "
        + ", ".join(
            f"{name} {_words.with_unit(_words.finest_text(findings.verdicts[name]), units[name])}"
            for name in peak.names
        )
        + f"; at ({', '.join(numbers.compact(x, 4) for x in peak.place)})"
        for peak in marks
    ]


def deformation_factor(field: Fields) -> float:
    """Return the round factor that shows the largest displacement as about a twentieth of the part."""
    largest = float(np.linalg.norm(field.displacement, axis=0).max())
    if largest == 0 or not math.isfinite(largest):
        return 1.0
    return max(1.0, _plane.round_factor(0.06 * _plane.size_of(field.points) / largest))


def _caption(solid: bool, factor: float, corners: Sequence[Corner], marks: Sequence[Peak], mesh: str) -> str:
    times = numbers.at_step(factor, factor)
    scale = "at true scale" if factor == 1.0 else f"deformation drawn {times} times as large"
    where = f"the surface of {mesh}" if solid else mesh
    caption = f"Recovered von Mises stress on {where}, {scale}; dashed: the undeformed outline."
    if corners:
        place, how = singular(corners)
        around = "tubes around them" if place == "edge" else "the discs"
        caption += (
            f" {how.capitalize()}: singular {place}s, where stress has no limit; the colours end at the"
            f" largest stress outside {around}."
        )
    return caption + (" Numbers: places of peak quantities on the finest mesh." if marks else "")
