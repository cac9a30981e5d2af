"""What is marked on the stress figure: singular corners and edges, and the places of peak quantities."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from convergence.corner import Corner
from convergence.fields import Fields
from convergence.report import _plane, _scene
from convergence.report._axes import middle
from convergence.results import Findings

if TYPE_CHECKING:
    from matplotlib.axes import Axes

DISC = 0.03  # radius of the hatched disc over the size of the part
STATIONS = 120  # along a singular edge


@dataclass(frozen=True)
class Peak:
    """Where quantities have their peak on the finest mesh: D coordinates."""

    names: str
    place: tuple[float, ...]


@dataclass(frozen=True)
class Deformed:
    """A part on the page with what is needed to put a place of the undeformed part there."""

    drawn: _scene.Scene
    turned: np.ndarray
    factor: float

    def put(self, places: np.ndarray) -> np.ndarray:
        """Return places (D, k) on the page (D, k), moved with the nearest node of the part."""
        field = self.drawn.field
        used = np.unique(field.cells)
        points = field.points[:, used]
        nearest = [int(np.linalg.norm(points - place[:, None], axis=0).argmin()) for place in places.T]
        return np.asarray(self.turned @ (places + self.factor * field.displacement[:, used[nearest]]))


def peaks(findings: Findings, dimension: int) -> list[Peak]:
    """Return the places that the finest level keeps as NAME.x, NAME.y (and NAME.z), one for equal places."""
    values = findings.ladder.levels[-1].values
    found: dict[tuple[float, ...], list[str]] = {}
    for quantity in findings.quantities:
        place = tuple(values.get(f"{quantity.name}.{axis}", math.nan) for axis in "xyz"[:dimension])
        if all(math.isfinite(part) for part in place):
            found.setdefault(place, []).append(quantity.name)
    return [Peak(", ".join(names), place) for place, names in found.items()]


def top(field: Fields, corners: Sequence[Corner]) -> float:
    """Return the largest stress of the surface outside the discs, where the colours end."""
    used = np.unique(field.cells)
    points, stress = field.points[:, used], field.von_mises[used]
    outside = np.ones(len(used), dtype=bool)
    for corner in corners:
        outside &= _distance(points, np.array(corner.path).T) > DISC * _plane.size_of(field.points)
    largest = float(stress[outside].max()) if outside.any() else 0.0
    return largest if largest > 0 else max(float(stress.max()), 1e-300)


def _distance(points: np.ndarray, path: np.ndarray) -> np.ndarray:
    """Return the distance of points (D, n) from a walk (D, k)."""
    nearest = np.linalg.norm(points - path[:, :1], axis=0)
    for start, end in pairwise(path.T):
        along = end - start
        away = points - start[:, None]
        share = np.clip(along @ away / max(along @ along, 1e-300), 0.0, 1.0)
        nearest = np.minimum(nearest, np.linalg.norm(away - along[:, None] * share, axis=0))
    return np.asarray(nearest)


def hatch(axes: "Axes", part: Deformed, corners: Sequence[Corner]) -> None:
    """Draw a hatched disc at a singular corner, a banded line along a singular edge, thin where hidden."""
    from matplotlib.patches import Circle

    radius = DISC * _plane.size_of(part.drawn.field.points)
    for corner in corners:
        places = part.put(stations(np.array(corner.path).T))
        if places.shape[1] == 1:
            (x, y), look = places[:2, 0], {"facecolor": "#ffffff66", "edgecolor": "black"}
            axes.add_patch(Circle((x, y), radius, hatch="//////", zorder=5, **look))
            continue
        seen = _scene.visible(part.drawn, places)
        x, y = np.where(seen, places[:2], np.nan)
        axes.plot(*places[:2], ":", color="black", linewidth=0.9, zorder=4)
        axes.plot(x, y, color="black", linewidth=4.0, solid_capstyle="butt", zorder=5)
        axes.plot(x, y, color="white", linewidth=2.6, linestyle=(0, (1.2, 0.8)), zorder=5)


def stations(path: np.ndarray) -> np.ndarray:
    """Return a walk (D, k) with stations evenly along it; a single point stays one."""
    steps = np.linalg.norm(np.diff(path, axis=1), axis=0)
    if not steps.sum() > 0:
        return path[:, :1]
    along = np.concatenate(([0.0], np.cumsum(steps)))
    even = np.linspace(0.0, along[-1], STATIONS)
    return np.array([np.interp(np.union1d(even, along), along, row) for row in path])


def mark(axes: "Axes", part: Deformed, marks: Sequence[Peak]) -> None:
    """Draw the peaks with a legend that says which one is hidden."""
    symbols = "^svDPX*p"
    for number, peak in enumerate(marks):
        place = part.put(np.array(peak.place)[:, None])
        (seen,) = _scene.visible(part.drawn, place)
        axes.plot(
            place[0],
            place[1],
            symbols[number % len(symbols)],
            markersize=7,
            markerfacecolor="#ffffff99" if seen else "none",
            markeredgecolor="black" if seen else _plane.INK_OF_OUTLINE,
            linestyle="none",
            label=f"place of {middle(peak.names)}" + ("" if seen else ", hidden in this view"),
            zorder=6,
        )
    if marks:
        axes.figure.legend(loc="outside lower left", ncols=1)
