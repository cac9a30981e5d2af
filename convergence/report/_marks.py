"""What is marked on pictures of the part: singular corners and edges, and the places of peak quantities."""

import math
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import count, pairwise
from typing import TYPE_CHECKING, Any

import numpy as np

from convergence.corner import Corner
from convergence.field_quantities import HOT_SPOT
from convergence.fields import Fields
from convergence.report import _labels, _plane, _scene
from convergence.report._axes import middle
from convergence.report._picture import LEVELS
from convergence.results import Findings

if TYPE_CHECKING:
    from matplotlib.axes import Axes

DISC = 0.03  # radius of the hatched disc over the size of the part
STATIONS = 120  # along a singular edge
TYPE = 8.0  # size of the numbers
RIM = 0.1  # inches around the picture: a number's circle is wider than the number
NO_SPOT = sys.maxsize


@dataclass(frozen=True)
class Peak:
    """Where quantities have their peak on the finest mesh: number in figure and tables, D coordinates."""

    number: int
    names: tuple[str, ...]
    place: tuple[float, ...]


@dataclass(frozen=True)
class Deformed:
    """A part on the page with what is needed to put a place of the undeformed part there.

    `factor` times the displacement is drawn, 0 for the undeformed part.
    """

    drawn: _scene.Scene
    turned: np.ndarray
    factor: float

    def put(self, places: np.ndarray) -> np.ndarray:
        """Return places (D, k) on the page (D, k), moved with the nearest node of the part."""
        if self.factor == 0.0:
            return np.asarray(self.turned @ places)
        from scipy.spatial import KDTree

        field = self.drawn.field
        used = np.unique(field.cells)
        nearest = KDTree(field.points[:, used].T).query(places.T)[1]
        return np.asarray(self.turned @ (places + self.factor * field.displacement[:, used[nearest]]))


def peaks(findings: Findings, dimension: int) -> list[Peak]:
    """Return the places that the finest level keeps as NAME.x, NAME.y (and NAME.z), one for equal places.

    A hot spot has its own number, as in the table of hot spots; the others have the next ones.
    """
    values = findings.ladder.levels[-1].values
    found: dict[tuple[float, ...], list[str]] = {}
    for quantity in findings.quantities:
        place = tuple(values.get(f"{quantity.name}.{axis}", math.nan) for axis in "xyz"[:dimension])
        if all(math.isfinite(part) for part in place):
            found.setdefault(place, []).append(quantity.name)
    spots = {place: min(map(_spot, names)) for place, names in found.items()}
    following = count(1 + max((spot for spot in spots.values() if spot < NO_SPOT), default=0))
    marks = [
        Peak(spots[place] if spots[place] < NO_SPOT else next(following), tuple(names), place)
        for place, names in found.items()
    ]
    return sorted(marks, key=lambda mark: mark.number)


def _spot(name: str) -> int:
    """Return the number of a hot spot, `NO_SPOT` of what is none."""
    number = name.removeprefix(HOT_SPOT)
    return int(number) if name != number and number.isdecimal() else NO_SPOT


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


def singular(corners: Sequence[Corner]) -> tuple[str, str]:
    """Return what the singular places are, and how they are drawn."""
    edges = any(len(corner.path) > 1 for corner in corners)
    return ("edge", "banded") if edges else ("corner", "hatched")


def singular_words(corners: Sequence[Corner]) -> str:
    """Return what a caption says of them, with a blank before it; "" without any."""
    if not corners:
        return ""
    place, how = singular(corners)
    return f" {how.capitalize()}: singular {place}s, where stress has no limit."


def stations(path: np.ndarray) -> np.ndarray:
    """Return a walk (D, k) with stations evenly along it; a single point stays one."""
    steps = np.linalg.norm(np.diff(path, axis=1), axis=0)
    if not steps.sum() > 0:
        return path[:, :1]
    along = np.concatenate(([0.0], np.cumsum(steps)))
    even = np.linspace(0.0, along[-1], STATIONS)
    return np.array([np.interp(np.union1d(even, along), along, row) for row in path])


def mark(axes: "Axes", part: Deformed, marks: Sequence[Peak], scale: float) -> None:
    """Number the peaks, and say below which one is hidden; `scale` is points of the page per length."""
    if not marks:
        return
    places = part.put(np.array([peak.place for peak in marks]).T)
    seen = _scene.visible(part.drawn, places)
    across = places[:2]
    sizes = np.array([_labels.size_of_text(f" {peak.number} ", TYPE) for peak in marks]).T
    away = across - part.drawn.points[:2].mean(axis=1, keepdims=True)
    shifts = _labels.pairs(_labels.offsets(scale * across, sizes, away))
    for peak, at, shift, shown in zip(marks, _labels.pairs(across), shifts, seen, strict=True):
        ink, line = ("black", "-") if shown else (_plane.INK_OF_OUTLINE, ":")
        gid = f"{LEVELS}-{peak.number}"
        axes.plot(*at, "o", markersize=3.5, mfc="white", mec=ink, zorder=6, gid=gid)
        axes.annotate(
            str(peak.number), at, shift, textcoords="offset points", fontsize=TYPE,
            ha="center", va="center", zorder=7, annotation_clip=False,
            bbox={"boxstyle": "circle,pad=0.2", "fc": "white", "ec": ink, "lw": 0.9, "ls": line},
            arrowprops={"arrowstyle": "-", "color": ink, "lw": 0.9, "shrinkA": 0.0, "shrinkB": 2.0},
        )  # fmt: skip
    for peak, shown in zip(marks, seen, strict=True):
        said = f"{peak.number}: place of {middle(', '.join(peak.names))}"
        axes.plot([], [], linestyle="none", label=said if shown else f"{said}, hidden in this view")
    axes.figure.legend(loc="outside lower left", ncols=1, handlelength=0.0, handletextpad=0.0)
    engine: Any = axes.figure.get_layout_engine()
    engine.set(w_pad=RIM, h_pad=RIM)
