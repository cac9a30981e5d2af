"""How wide the intervals of all nodes are against what is accepted, as colours on the part."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.corner import Corner
from convergence.fields import Fields
from convergence.mapped import MappedField
from convergence.report import _plane, _scene
from convergence.report._marks import Deformed, hatch, singular_words
from convergence.report._picture import Picture, Rewrite, draw

if TYPE_CHECKING:
    from matplotlib.figure import Figure

DECADES = (-2, -1, 0, 1)  # of the tolerance
# darker all the way, with a step at the tolerance: the picture can be read without colours
COLOURS = ((0.0, "#f4f1fb"), (0.5, "#a99bd6"), (0.5, "#e07b0a"), (1.0, "#4a2303"))


def map_figure(
    field: Fields,
    turned: np.ndarray,
    mapped: MappedField,
    stem: str,
    corners: Sequence[Corner],
    comma: Rewrite | None = None,
) -> Picture:
    """Return the map of half-widths over the tolerance; `turned` is the rotation (D, D) to the page."""
    from matplotlib.colors import LinearSegmentedColormap, TwoSlopeNorm

    points = turned @ field.points
    page = _scene.on_page(turned, [points])
    width, height = _plane.panel(_plane.shape_of(page))
    share = np.where(np.isfinite(mapped.relative), mapped.relative, np.inf) / mapped.tolerance
    shade = np.log10(np.clip(share, 10.0 ** DECADES[0], 10.0 ** DECADES[-1]))

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        part = _scene.scene(field, points, width)
        norm = TwoSlopeNorm(vcenter=0.0, vmin=DECADES[0], vmax=DECADES[-1])
        colours = LinearSegmentedColormap.from_list("width", COLOURS)
        drawn = _scene.nodal(axes, part, shade, colours, norm)
        bar = figure.colorbar(drawn, ax=axes, extend="both", shrink=0.85, pad=0.02)
        shares = [numbers.percent(mapped.tolerance * 10.0**decade, digits=2) for decade in DECADES]
        bar.set_ticks(list(DECADES), labels=shares)
        scale = "largest" if mapped.scale == "largest" else "local"
        bar.set_label(f"half-width over the {scale} value")
        _scene.outline(axes, part, _plane.INK_OF_OUTLINE)
        hatch(axes, Deformed(part, turned, 0.0), corners)
        _scene.frame(axes, turned, page)

    name, accepted = mapped.name.replace("_", " "), numbers.percent(mapped.tolerance)
    where = "the surface of the finest mesh" if len(turned) == 3 else "the finest mesh"
    caption = (
        f"Pointwise interval of {name} on {where}: violet where it is narrower than the accepted {accepted},"
        " orange or brown where it is wider or nothing can be said; the darker the wider, logarithmic."
        + singular_words(corners)
    )
    alt = f"Map of the half-width of the interval of {name} over what is accepted"
    return draw(stem, (max(width + 1.5, 4.5), max(height + 0.3, 2.6)), alt, caption, paint, comma=comma)
