"""A solved level as it lies on the page: one way to draw plane parts and solids."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from convergence.fields import Fields
from convergence.report import _plane, _space
from convergence.report._sight import Sight

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.cm import ScalarMappable
    from matplotlib.colors import Colormap, Normalize

DOTS_PER_INCH = 200  # of a solid's surface
INK_ON_COLOURS = "#a0a0a0"  # for lines across a solid's surface: readable on the dark and the bright end


@dataclass(frozen=True)
class Scene:
    """Points turned to the page, (2, n) or with a third row towards the eye, and what is seen of a solid."""

    field: Fields
    points: np.ndarray
    seen: Sight | None


def turn(field: Fields) -> np.ndarray:
    """Return the rotation (D, D) to the page; that of the finest level serves all."""
    return _space.turn(field) if len(field.points) == 3 else np.eye(2)


def scene(field: Fields, points: np.ndarray, width: float) -> Scene:
    """Return the scene of points that are turned already, on a panel of that width in inches."""
    if len(points) == 2:
        return Scene(field, points, None)
    step = max(float(np.ptp(points[0, field.cells])), 1e-300) / (width * DOTS_PER_INCH)
    return Scene(field, points, _space.look(points, field.cells, step))


def mesh(axes: "Axes", drawn: Scene, width: float) -> None:
    """Draw the mesh lines, or of a mesh that would print as a black patch the tinted part."""
    field, points = drawn.field, drawn.points
    dense = _plane.too_dense(points, field.edges, width)
    thick = _plane.thickness(points, field.edges, width)
    if drawn.seen:
        _space.grey(axes, drawn.seen)
        if not dense:
            _space.edges(axes, drawn.seen, field.edges, thick)
    elif dense:
        _plane.tint(axes, points, field.boundary)
    else:
        _plane.edges(axes, points, field.edges, thick)
    if dense or drawn.seen:
        outline(axes, drawn, _plane.INK_OF_OUTLINE)


def plain(axes: "Axes", drawn: Scene) -> None:
    """Draw the tinted part with its outline."""
    if drawn.seen:
        _space.grey(axes, drawn.seen)
    else:
        _plane.tint(axes, drawn.points, drawn.field.boundary)
    outline(axes, drawn, _plane.INK_OF_OUTLINE)


def nodal(
    axes: "Axes", drawn: Scene, values: np.ndarray, cmap: "str | Colormap", norm: "Normalize"
) -> "ScalarMappable":
    """Draw values at the nodes (n,) as colours."""
    if drawn.seen:
        return _space.image(axes, drawn.seen, drawn.seen.nodal(values), cmap, norm)
    return _plane.nodal(axes, drawn.points, drawn.field.cells, values, cmap, norm)


def cellwise(
    axes: "Axes", drawn: Scene, values: np.ndarray, cmap: "str | Colormap", norm: "Normalize"
) -> "ScalarMappable":
    """Draw one value a cell (m,) as colours; of a solid, one a face of its surface."""
    if drawn.seen:
        return _space.image(axes, drawn.seen, drawn.seen.facial(values), cmap, norm)
    return _plane.cellwise(axes, drawn.points, drawn.field.cells, values, cmap, norm)


def outline(axes: "Axes", drawn: Scene, ink: str) -> None:
    """Draw the outline of a plane part, of a solid its sharp edges and where it turns away."""
    if drawn.seen:
        _space.outline(axes, drawn.seen, drawn.field.boundary, ink)
    else:
        _plane.outline(axes, drawn.points, drawn.field.boundary, "-", ink)


def ghost(axes: "Axes", drawn: Scene) -> None:
    """Draw the outline dashed, over everything that is there."""
    boundary, ink = drawn.field.boundary, ink_on_colours(drawn)
    if drawn.seen:
        boundary = _space.unhidden(drawn.seen, boundary)
    _plane.outline(axes, drawn.points[:2], boundary, "--", ink)


def ink_on_colours(drawn: Scene) -> str:
    """Return the ink of lines in coloured pictures."""
    return INK_ON_COLOURS if drawn.seen else _plane.INK_OF_OUTLINE


def visible(drawn: Scene, places: np.ndarray) -> np.ndarray:
    """Return which places (D, k) on the page are seen; in a plane all are."""
    if drawn.seen is None:
        return np.ones(places.shape[1], dtype=bool)
    return drawn.seen.visible(places, slack=0.005 * _plane.size_of(drawn.points))


def on_page(turned: np.ndarray, clouds: Sequence[np.ndarray]) -> np.ndarray:
    """Return what the frame must hold (2, k): the turned points and, for a solid, the arrows x, y, z."""
    points = np.hstack([cloud[:2] for cloud in clouds])
    return np.hstack((points, _space.triad(turned, points))) if len(turned) == 3 else points


def frame(axes: "Axes", turned: np.ndarray, page: np.ndarray) -> None:
    """Show what `on_page` returned, with equal scales and no frame."""
    if len(turned) == 3:
        _space.draw_triad(axes, page[:, -4:])
    _plane.view(axes, page)
