"""Drawing a solid: the direction it is seen from, its surface as pixels, the lines that nothing hides."""

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from convergence.fields import Fields
from convergence.report._plane import INK_OF_EDGES, INK_OF_OUTLINE, size_of, triangles
from convergence.report._sight import Sight, sight

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.colors import Colormap, Normalize
    from matplotlib.image import AxesImage

# towards the eye, the four from above first; y is up on the page, as in pictures of plane parts
DIRECTIONS = tuple(np.array((0.8 * x, 0.6 * y, z)) for y, z, x in product((1, -1), repeat=3))
HOTTEST = 0.99  # of the largest stress: nodes of which one must be seen
ROUGH = 300  # pixels across when directions are compared
LIGHT = np.array((-0.35, 0.6, 0.72))
ARM, GAP = 0.07, 0.03  # of the axes' arrows and of the space beside them, over the size of the picture
LETTER = 1.35  # where an arrow's letter stands, over its length


def look(points: np.ndarray, cells: np.ndarray, step: float) -> Sight:
    """Return what is seen of faces `cells` (3 or 4, m) of points (3, n) turned to the page."""
    flat = triangles(cells)
    faces = np.tile(np.arange(cells.shape[1]), len(flat) // cells.shape[1])
    return sight(points, flat, faces, step)


def turn(field: Fields) -> np.ndarray:
    """Return the rotation (3, 3) to across, up, towards the eye that shows most of a solid.

    First counts that the largest stress is seen, then that the eye is above, then the area seen.
    """
    used = np.unique(field.cells)
    hot = used[field.von_mises[used] >= HOTTEST * field.von_mises[used].max()]
    views = [_ranked(field, hot, direction) for direction in DIRECTIONS[:4]]
    if not any(hot_is_seen for (hot_is_seen, _, _), _ in views):
        views += [_ranked(field, hot, direction) for direction in DIRECTIONS[4:]]
    return max(views, key=lambda view: view[0])[1]


def _ranked(
    field: Fields, hot: np.ndarray, direction: np.ndarray
) -> tuple[tuple[bool, bool, float], np.ndarray]:
    """Return what counts for a direction, in this order, and its rotation."""
    rows = _rotation(direction)
    page = rows @ field.points
    seen = look(page, field.cells, size_of(page[:2, field.cells[0]]) / ROUGH)
    hot_is_seen = bool(seen.visible(page[:, hot]).any())
    return (hot_is_seen, bool(direction[1] > 0), round(_area_seen(seen), 2)), rows


def _rotation(direction: np.ndarray) -> np.ndarray:
    towards = direction / np.linalg.norm(direction)
    across = np.cross((0.0, 1.0, 0.0), towards)
    across /= np.linalg.norm(across)
    return np.array((across, np.cross(towards, across), towards))


def _area_seen(seen: Sight) -> float:
    """Return the area of the triangles whose middle is seen, over the square of the size."""
    corners = seen.points[:, seen.triangles]
    visible = seen.visible(corners.mean(axis=2))
    areas = 0.5 * np.linalg.norm(_normals(corners), axis=0)
    return float(areas[visible].sum()) / size_of(seen.points) ** 2


def _normals(corners: np.ndarray) -> np.ndarray:
    a, b = corners[..., 1] - corners[..., 0], corners[..., 2] - corners[..., 0]
    return np.cross(a, b, axis=0)


def image(
    axes: "Axes", seen: Sight, pixels: np.ndarray, cmap: "str | Colormap", norm: "Normalize"
) -> "AxesImage":
    """Draw values in the pixels of a sight."""
    return axes.imshow(
        np.ma.masked_invalid(pixels), origin="lower", extent=seen.extent, cmap=cmap, norm=norm, zorder=0
    )


def grey(axes: "Axes", seen: Sight) -> None:
    """Fill the surface with light greys that tell how it is turned."""
    from matplotlib.colors import Normalize

    normals = _normals(seen.points[:, seen.triangles])
    light = LIGHT @ normals / np.maximum(np.linalg.norm(normals, axis=0), 1e-300)
    pixels = np.where(seen.nearest >= 0, np.append(light, 0.0)[seen.nearest], np.nan)
    image(axes, seen, pixels, "gray", Normalize(-2.6, 1.0))


def edges(axes: "Axes", seen: Sight, lines: np.ndarray, thickness: float) -> None:
    """Draw what is seen of the mesh lines (2 or 3, e)."""
    segments = np.hstack([lines[[k, k + 1]] for k in range(len(lines) - 1)])
    _strokes(axes, seen, segments, INK_OF_EDGES, thickness)


def outline(axes: "Axes", seen: Sight, boundary: np.ndarray, ink: str) -> None:
    """Draw what is seen of the sharp edges (2, b), and where the surface turns away."""
    _strokes(axes, seen, ridges(seen, boundary), ink, 0.8)


def ridges(seen: Sight, boundary: np.ndarray) -> np.ndarray:
    """Return the sharp edges and the segments where the surface turns away, (2, s), each once."""
    return np.unique(np.sort(np.hstack((boundary, seen.turning())), axis=0), axis=1)


def _strokes(axes: "Axes", seen: Sight, segments: np.ndarray, ink: str, thickness: float) -> None:
    from matplotlib.collections import LineCollection

    segments = segments[:, facing(seen, segments)]
    drawn = seen.strokes(seen.points[:, segments[0]], seen.points[:, segments[1]])
    lines = LineCollection(list(drawn), colors=ink, linewidths=thickness, capstyle="round")
    lines.set_rasterized(len(drawn) > 3000)
    axes.add_collection(lines)


def facing(seen: Sight, segments: np.ndarray) -> np.ndarray:
    """Return which segments (2, s) have both ends on the side of the surface that faces the eye."""
    ahead = np.zeros(seen.points.shape[1], dtype=bool)
    ahead[seen.triangles] = True
    return np.asarray(ahead[segments].all(axis=0))


def unhidden(seen: Sight, boundary: np.ndarray) -> np.ndarray:
    """Return the segments (2, s) of the outline whose middle is seen."""
    segments = ridges(seen, boundary)
    kept = segments[:, facing(seen, segments)]
    return kept[:, seen.visible(seen.points[:, kept].mean(axis=1))]


def triad(turned: np.ndarray, points: np.ndarray) -> np.ndarray:
    """Return origin and tips (2, 4) of the arrows x, y, z, left of the points (2, n) at the bottom."""
    arms = ARM * size_of(points) * np.hstack((np.zeros((2, 1)), turned[:2]))
    low, room = points.min(axis=1), GAP * size_of(points)
    right, bottom = LETTER * arms[0].max(), LETTER * arms[1].min()
    return np.asarray(arms + np.array([[low[0] - room - right], [low[1] - bottom]]))


def draw_triad(axes: "Axes", places: np.ndarray) -> None:
    """Draw the arrows of `triad` with their letters."""
    origin, tips = places[:, 0], places[:, 1:].T
    for name, tip in zip("xyz", tips, strict=True):
        axes.plot(*zip(origin, tip, strict=True), color=INK_OF_OUTLINE, linewidth=1.0, zorder=4)
        x, y = origin + LETTER * (tip - origin)
        axes.text(x, y, name, fontsize=8, ha="center", va="center", color=INK_OF_OUTLINE)
