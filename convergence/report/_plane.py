"""Drawing a plane mesh: view, triangles, edges, outline; the same view and scale for every level."""

import math
from typing import TYPE_CHECKING

import numpy as np

from convergence.fields import Fields

if TYPE_CHECKING:
    from matplotlib.axes import Axes

PAGE_WIDTH = 9.4
CLOSEST_EDGES = 2.5  # points on the page; closer ones print as a black patch


def size_of(points: np.ndarray) -> float:
    """Return the largest extent."""
    return float(np.ptp(points, axis=1).max()) or 1.0


def view(axes: "Axes", *clouds: np.ndarray) -> None:
    """Show all points with equal scales and no frame."""
    points = np.hstack(clouds)
    room = 0.04 * size_of(points)
    low, high = points.min(axis=1) - room, points.max(axis=1) + room
    axes.set(xlim=(low[0], high[0]), ylim=(low[1], high[1]))
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


def triangles(cells: np.ndarray) -> np.ndarray:
    """Return (t, 3) triangles; a quadrilateral becomes two, the second ones behind the first."""
    if len(cells) == 3:
        return cells.T
    return np.hstack((cells[[0, 1, 2]], cells[[0, 2, 3]])).T


def edge_length(fields: Fields, width: float) -> float:
    """Return the median length of an edge in points on a panel of that width in inches."""
    ends = fields.points[:, fields.edges[[0, -1]]]
    length = float(np.median(np.hypot(*(ends[:, 0] - ends[:, 1]))))
    return length * 72 * width / max(float(np.ptp(fields.points[0])), 1e-300)


def too_dense(fields: Fields, width: float) -> bool:
    """Tell whether the edges cannot be told apart on a panel of that width."""
    return edge_length(fields, width) < CLOSEST_EDGES


def edges(axes: "Axes", fields: Fields, width: float) -> None:
    """Draw every edge, thinner where cells are small; `width` of the panel in inches."""
    from matplotlib.collections import LineCollection

    lines = LineCollection(list(fields.points[:, fields.edges].transpose(2, 1, 0)), colors="#27425c")
    lines.set_linewidth(float(np.clip(0.1 * edge_length(fields, width), 0.15, 0.6)))
    lines.set_snap(False)
    lines.set_rasterized(fields.edges.shape[1] > 3000)
    axes.add_collection(lines)


def tint(axes: "Axes", fields: Fields) -> None:
    """Draw the outline and fill it evenly, for a mesh that would print as a black patch."""
    from matplotlib.tri import Triangulation

    x, y = fields.points
    grid = Triangulation(x, y, triangles(fields.cells))
    axes.tripcolor(
        grid, np.zeros_like(x), shading="gouraud", cmap="Greys", vmin=-1.0, vmax=3.0, rasterized=True
    )
    outline(axes, fields.points, fields.boundary, "-")


def outline(axes: "Axes", points: np.ndarray, boundary: np.ndarray, line: str) -> None:
    """Draw the boundary segments; they are chained, so that dashes run on from one to the next."""
    for chain in _chains(boundary):
        axes.plot(*points[:, chain], line, color="#444444", linewidth=0.8, zorder=2)


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
