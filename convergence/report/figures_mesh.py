"""The meshes of all levels in the same view and at the same scale."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from convergence import numbers
from convergence.fields import Fields
from convergence.report import _plane
from convergence.report._picture import Picture, draw
from convergence.results import Ladder

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def mesh_figure(fields: Sequence[Fields], ladder: Ladder, length: str) -> Picture:
    """Return one panel a level; `fields` belong to the finest levels of the ladder, in its order."""
    shape = _plane.shape_of(fields[-1].points)
    columns = min(len(fields), 1 if shape > 3.5 else 2 if shape > 1.8 else 3 if shape > 0.6 else 5)
    rows = -(-len(fields) // columns)
    width, height = _plane.panel(shape, (_plane.PAGE_WIDTH - 0.4) / columns, 3.4)
    levels = ladder.levels[-len(fields) :]
    first = len(ladder.levels) - len(levels) + 1

    def paint(figure: "Figure") -> None:
        for number, (level, field) in enumerate(zip(levels, fields, strict=True), start=first):
            axes = figure.add_subplot(rows, columns, number - first + 1)
            if _plane.too_dense(field, width):
                _plane.tint(axes, field)
            else:
                _plane.edges(axes, field, width)
            _plane.view(axes, *(other.points for other in fields))
            size = f"h = {numbers.compact(level.h, 3)} {length}".strip()
            between = ", " if width > 2.4 else "\n"
            axes.set_title(f"level {number}: {numbers.count(level.cells)} cells{between}{size}")

    caption = "Same view and scale."
    dense = [str(n) for n, field in enumerate(fields, start=first) if _plane.too_dense(field, width)]
    if dense:
        caption += f" Of level {' and '.join(dense)} the outline only: its cells are too small to print."
    alt = f"Meshes of {numbers.several(len(fields), 'level')} from coarse to fine in the same view and scale"
    page = (max(width, 1.9) * columns + 0.4, rows * (height + 0.35) + 0.1)
    return draw("meshes", page, alt, caption, paint)
