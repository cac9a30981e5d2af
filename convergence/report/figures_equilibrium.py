"""Loads and reactions of our own solution, to scale as arrows on the part."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from convergence import numbers
from convergence.dimensions import Units
from convergence.fields import Fields, Forces
from convergence.report import _acting, _arrows, _labels, _plane, _scene
from convergence.report._axes import middle
from convergence.report._picture import GREY, LEVELS, Picture, Rewrite, draw
from convergence.report._words import with_unit

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

LONGEST = 0.3  # arrow over the size of the part
MOMENT = 0.05  # radius of a round arrow over the size of the part
MOST_FACES = 20_000  # of the mesh whose outline is drawn
PIXELS = 0.75  # of those of other pictures: there is nothing to see on the surface
MOST_LABELS = 12
TYPE = 8.0  # size of the labels
ALL_AROUND = " Forces of the whole ring, drawn in its section; those along the radius cancel."


def equilibrium_figure(
    fields: Sequence[Fields], forces: Forces, turned: np.ndarray, units: Units, comma: Rewrite | None = None
) -> Picture:
    """Return the figure of what acts on a part, in the view of the stress figure.

    `fields` are those of all levels, coarse to fine: an outline needs no fine mesh. `turned` is the rotation
    (D, D) to the page.
    """
    field = next((one for one in reversed(fields) if one.cells.shape[1] <= MOST_FACES), fields[0])
    size, solid = _plane.size_of(field.points), len(turned) == 3
    acting = _acting.cleaned(forces, size)
    largest = _acting.largest_force(acting)
    points, places = turned @ field.points, turned @ _wide(acting.place, turned)
    arrows = turned @ _wide(LONGEST * size / (largest or 1.0) * acting.force, turned)
    ends = places + np.where(acting.is_load, arrows, -arrows)
    radius = MOMENT * size
    page = _scene.on_page(turned, [points, places - radius, places + radius, ends])
    width, height = _plane.panel(_plane.shape_of(page), 6.6, 4.2)
    added, hints = _acting.sums(forces), _hints(acting, units)

    def paint(figure: "Figure") -> None:
        axes = figure.add_subplot()
        _scene.plain(axes, _scene.scene(field, points, PIXELS * width))
        _straight(axes, acting, places[:2], arrows[:2], added, units)
        _round(axes, acting, places[:2], turned, radius)
        axes.plot(*places[:2], "o", color=GREY, markersize=3.0, zorder=6, gid=LEVELS)
        if len(acting.names) <= MOST_LABELS:
            _labelled(axes, acting, places[:2], ends[:2], units, _plane.points_per_length(page, width))
        _scene.frame(axes, turned, page)
        figure.legend(loc="outside lower center", ncols=1)

    alt = f"Loads and reactions on the part: {'; '.join(hints)}"
    lines = 0.2 * len(set(acting.is_load.tolist()))
    figure_size = (max(width + 1.2, _plane.LEAST_WIDTH), max(height + 0.7 + lines, 2.6))
    caption = _caption(acting, added, units, solid)
    return draw("equilibrium", figure_size, alt, caption, paint, hints, comma=comma)


def _caption(acting: Forces, added: _acting.Sums, units: Units, solid: bool) -> str:
    longest, left = (
        with_unit(numbers.compact(size, digits), units.force)
        for size, digits in (
            (_acting.largest_force(acting), 4),
            (float(np.linalg.norm(added.left[: len(acting.place)])), 2),
        )
    )
    caption = (
        "Loads (filled) start at the middle of their boundary, reactions (hollow) end there. The longest"
    )
    caption += f" arrow{' in space' if solid else ''} is {longest}; what is left of their sum is {left}."
    if np.any(acting.moment):
        caption += " Round arrows: moments M about that place, not to scale."
    if len(acting.names) > MOST_LABELS:
        caption += " Their names stand in the table."
    return caption + (ALL_AROUND if _acting.all_around(acting) else "")


def _wide(vectors: np.ndarray, turned: np.ndarray) -> np.ndarray:
    """Return vectors (D, k) in the dimensions of the picture: a rod is drawn as a strip."""
    return np.vstack((vectors, np.zeros((len(turned) - len(vectors), vectors.shape[1]))))


def _hints(acting: Forces, units: Units) -> list[str]:
    """Return what acts at every place in words."""
    said = []
    for row, name in enumerate(acting.names.tolist()):
        parts = [_acting.vector_text(acting.force[:, row], units.force)]
        if np.any(acting.moment[:, row]):
            parts.append(f"moment {_acting.vector_text(acting.moment[:, row], _acting.moment_unit(units))}")
        said.append(f"{'load' if acting.is_load[row] else 'reaction'} {name} {', '.join(parts)}")
    return said


def _straight(
    axes: "Axes", acting: Forces, places: np.ndarray, arrows: np.ndarray, added: _acting.Sums, units: Units
) -> None:
    """Draw the forces; the legend has the sums of loads and reactions."""
    for load, (name, *_) in _arrows.LOOKS.items():
        rows = acting.is_load == load
        total = (added.loads if load else added.reactions)[: len(acting.place)]
        shown = rows & np.any(arrows != 0.0, axis=0)
        if rows.any():
            label = f"{name}, in all {_acting.vector_text(total, units.force)}"
            _arrows.straight(axes, places[:, shown], arrows[:, shown], load, label)


def _round(axes: "Axes", acting: Forces, places: np.ndarray, turned: np.ndarray, radius: float) -> None:
    """Draw the moments."""
    for row in np.flatnonzero(np.any(acting.moment != 0.0, axis=0)):
        across, up = _arms(acting.moment[:, row], turned)
        _arrows.round_about(axes, places[:, row], radius * across, radius * up, bool(acting.is_load[row]))


def _arms(moment: np.ndarray, turned: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return two arms on the page (2,), whose turn from the first to the second a moment (1 or 3,) is."""
    if len(moment) == 1:
        return np.array((1.0, 0.0)), np.array((0.0, float(np.sign(moment[0]))))
    axis = turned @ (moment / np.linalg.norm(moment))
    across = np.cross((0.0, 1.0, 0.0) if abs(axis[1]) < 0.9 else (0.0, 0.0, 1.0), axis)
    across /= np.linalg.norm(across)
    return across[:2], np.cross(axis, across)[:2]


def _labelled(
    axes: "Axes", acting: Forces, places: np.ndarray, ends: np.ndarray, units: Units, scale: float
) -> None:
    """Write name, size of the force and of the moment beside the free end of every arrow."""
    texts = [_label(acting, row, units) for row in range(len(acting.names))]
    sizes = np.array([_labels.size_of_text(text, TYPE) for text in texts]).T
    shifts = _labels.pairs(_labels.offsets(scale * ends, sizes, ends - places))
    for text, load, end, shift in zip(texts, acting.is_load, _labels.pairs(ends), shifts, strict=True):
        colour = _arrows.LOOKS[bool(load)][1]
        axes.annotate(
            text, end, shift, textcoords="offset points", fontsize=TYPE, color=colour,
            ha="center", va="center", zorder=7, annotation_clip=False,
            bbox={"boxstyle": "square,pad=0.1", "fc": "#ffffffb0", "lw": 0.0},
        )  # fmt: skip


def _label(acting: Forces, row: int, units: Units) -> str:
    force, moment = (float(np.linalg.norm(parts[:, row])) for parts in (acting.force, acting.moment))
    lines = [middle(str(acting.names[row]), 24)]
    if force or not moment:
        lines.append(with_unit(numbers.compact(force, 4), units.force))
    if moment:
        lines.append(f"M {with_unit(numbers.compact(moment, 4), _acting.moment_unit(units))}")
    return "\n".join(lines)
