"""Drawing on the plane of the page: frame and panel, edges, outline and colours."""

import math
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.cm import ScalarMappable
    from matplotlib.colors import Colormap, Normalize

PAGE_WIDTH = 9.4
LEAST_WIDTH = 5.6  # inches of a picture with words in it: on paper narrower ones share a line, and shrink
INK_OF_EDGES, INK_OF_OUTLINE, TINT = "#27425c", "#444444", "#d9d9d9"
CLOSEST_EDGES = 2.5  # points on the page; closer ones print as a black patch


def size_of(points: np.ndarray) -> float:
    """Return the largest extent."""
    return float(np.ptp(points, axis=1).max()) or 1.0


def view(axes: "Axes", *clouds: np.ndarray) -> None:
    """Show all points with equal scales and no frame."""
    points = np.hstack(clouds)
    room = 0.04 * size_of(points)
    low, high = points.min(axis=1) - room, points.max(axis=1) + room
    axes.set(xlim=(low[0], high[0]), ylim=(low[1], high[1]), xticks=[], yticks=[])
    axes.set_aspect("equal")
    axes.set_axis_off()


def shape_of(points: np.ndarray) -> float:
    """Return width over height, kept within what a page can hold."""
    width, height = np.ptp(points, axis=1)
    return float(np.clip(width / height if height else 10.0, 0.2, 10.0))


def panel(shape: float, most_width: float = 7.6, most_height: float = 4.6) -> tuple[float, float]:
    """Return width and height of the largest panel of that shape."""
    width = min(most_width, shape * most_height)
    return width, width / shape


def points_per_length(points: np.ndarray, width: float) -> float:
    """Return how many points of the page a length is, on a panel of that width in inches."""
    return 72 * width / max(float(np.ptp(points[0])), 1e-300)


def triangles(cells: np.ndarray) -> np.ndarray:
    """Return (t, 3) triangles; a quadrilateral becomes two, the second ones behind the first."""
    if len(cells) == 3:
        return cells.T
    return np.hstack((cells[[0, 1, 2]], cells[[0, 2, 3]])).T


def edge_length(points: np.ndarray, edges: np.ndarray, width: float) -> float:
    """Return the median length of an edge in points on a panel of that width in inches."""
    ends = points[:2, edges[[0, -1]]]
    length = float(np.median(np.hypot(*(ends[:, 0] - ends[:, 1]))))
    return length * points_per_length(points, width)


def too_dense(points: np.ndarray, edges: np.ndarray, width: float) -> bool:
    """Tell whether the edges cannot be told apart on a panel of that width."""
    return edge_length(points, edges, width) < CLOSEST_EDGES


def thickness(points: np.ndarray, edges: np.ndarray, width: float) -> float:
    """Return how thick the edges are drawn: thinner where cells are small."""
    return float(np.clip(0.1 * edge_length(points, edges, width), 0.15, 0.6))


def edges(axes: "Axes", points: np.ndarray, lines: np.ndarray, thick: float) -> None:
    """Draw every edge (2 or 3, e)."""
    from matplotlib.collections import LineCollection

    drawn = LineCollection(list(points[:, lines].transpose(2, 1, 0)), colors=INK_OF_EDGES)
    drawn.set_linewidth(thick)
    drawn.set_snap(False)
    drawn.set_rasterized(lines.shape[1] > 3000)
    axes.add_collection(drawn)


def tint(axes: "Axes", points: np.ndarray, boundary: np.ndarray) -> None:
    """Fill a plane part evenly, where its edges would print as a black patch.

    The part lies on one side of all boundary segments, so that walks around holes run the other way and
    leave them open.
    """
    from matplotlib.patches import PathPatch
    from matplotlib.path import Path

    walks = Path.make_compound_path(*(Path(points[:, chain].T) for chain in _chains(boundary)))
    axes.add_patch(PathPatch(walks, facecolor=TINT, linewidth=0.0))


def nodal(
    axes: "Axes",
    points: np.ndarray,
    cells: np.ndarray,
    values: np.ndarray,
    cmap: "str | Colormap",
    norm: "Normalize",
) -> "ScalarMappable":
    """Draw values at the nodes as colours, linear in each triangle."""
    from matplotlib.tri import Triangulation

    grid = Triangulation(points[0], points[1], triangles(cells))
    drawn = axes.tripcolor(grid, values, shading="gouraud", cmap=cmap, norm=norm, rasterized=True)
    drawn.set_in_layout(False)
    return drawn


def cellwise(
    axes: "Axes",
    points: np.ndarray,
    cells: np.ndarray,
    values: np.ndarray,
    cmap: "str | Colormap",
    norm: "Normalize",
) -> "ScalarMappable":
    """Draw one value a cell as colours, with no seams between the cells."""
    flat = triangles(cells)
    shade = np.repeat(np.tile(values, len(flat) // len(values)), 3)
    split = np.arange(flat.size).reshape(-1, 3).T
    return nodal(axes, points[:, flat.ravel()], split, shade, cmap, norm)


def outline(axes: "Axes", points: np.ndarray, boundary: np.ndarray, line: str, ink: str) -> None:
    """Draw the boundary segments; they are chained, so that dashes run on from one to the next."""
    for chain in _chains(boundary):
        axes.plot(*points[:, chain], line, color=ink, linewidth=0.8, zorder=2, solid_capstyle="round")


def _chains(boundary: np.ndarray) -> list[list[int]]:
    """Return the segments as walks along the boundary, each ending where no segment is left."""
    after: dict[int, list[int]] = {}
    for first, second in boundary.T.tolist():
        after.setdefault(first, []).append(second)
        after.setdefault(second, []).append(first)
    chains = []
    for start in after:
        while after[start]:
            chain = [start]
            while after[chain[-1]]:
                here = chain[-1]
                there = after[here].pop()
                after[there].remove(here)
                chain.append(there)
            chains.append(chain)
    return chains


def round_factor(wanted: float) -> float:
    """Return the largest of 1, 2, 5 times a power of ten that does not exceed `wanted` (> 0)."""
    power = 10.0 ** math.floor(math.log10(wanted) + 1e-12)
    return next(step * power for step in (5.0, 2.0, 1.0) if step * power <= wanted * (1 + 1e-9))
