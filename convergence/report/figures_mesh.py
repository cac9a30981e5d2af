"""The meshes of all levels in the same view and at the same scale."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.fields import Fields
from convergence.report import _plane, _scene
from convergence.report._picture import Picture, Rewrite, draw
from convergence.results import Ladder

if TYPE_CHECKING:
    from matplotlib.figure import Figure


TITLE, TALLEST = 0.35, 8.0  # inches: of a panel's title, and of a figure, which would shrink on a page
MOST_COLUMNS = 5


def mesh_figure(
    fields: Sequence[Fields], turned: np.ndarray, ladder: Ladder, length: str, comma: Rewrite | None = None
) -> Picture:
    """Return one panel a level; `fields` belong to the coarsest levels of the ladder, in its order.

    `turned` is the rotation (D, D) to the page.
    """
    pages = [turned @ field.points for field in fields]
    whole = _scene.on_page(turned, pages)
    shape = _plane.shape_of(whole)
    columns = _columns(shape, len(fields))
    rows = -(-len(fields) // columns)
    width, height = _panel(shape, columns)
    levels = ladder.levels[: len(fields)]
    dense = [_plane.too_dense(page, field.edges, width) for page, field in zip(pages, fields, strict=True)]

    def paint(figure: "Figure") -> None:
        for place, (level, field, page) in enumerate(zip(levels, fields, pages, strict=True)):
            axes = figure.add_subplot(rows, columns, place + 1)
            _scene.mesh(axes, _scene.scene(field, page, width), width)
            _scene.frame(axes, turned, whole)
            h = f"h = {numbers.compact(level.h, 3)} {length}".strip()
            between = ", " if width > 2.4 else "\n"
            axes.set_title(f"level {place + 1}: {numbers.count(level.cells)} cells{between}{h}", y=1.0)

    caption = "Same view and scale."
    if any(dense):
        unprinted = " and ".join(str(n) for n, much in enumerate(dense, start=1) if much)
        caption += f" Of level {unprinted} the outline only: its cells are too small to print."
    if len(levels) < len(ladder.levels):
        caption += f" The levels from {len(levels) + 1} on are too fine to be drawn."
    alt = f"Meshes of {numbers.several(len(fields), 'level')} from coarse to fine in the same view and scale"
    size = (max(width, 1.9) * columns + 0.4, rows * (height + TITLE) + 0.1)
    return draw("meshes", size, alt, caption, paint, comma=comma)


def _panel(shape: float, columns: int) -> tuple[float, float]:
    return _plane.panel(shape, (_plane.PAGE_WIDTH - 0.4) / columns, 3.4)


def _columns(shape: float, count: int) -> int:
    """Return how many panels of a shape stand side by side: more where the figure would be too tall."""
    fewest = 1 if shape > 3.5 else 2 if shape > 1.8 else 3 if shape > 0.6 else MOST_COLUMNS
    fits = (
        columns
        for columns in range(fewest, MOST_COLUMNS)
        if -(-count // columns) * (_panel(shape, columns)[1] + TITLE) <= TALLEST
    )
    return min(count, next(fits, MOST_COLUMNS))
