"""Boundaries picked by plain geometry: which of the outer facets of a mesh a table of a study means."""

from dataclasses import dataclass
from typing import Annotated

import numpy as np

from convergence.bodies.shapes import Plane, Round
from convergence.dimensions import ANGLE, Bounds, Direction, Point, PositiveLength
from convergence.errors import require
from convergence.fem.outer_facets import facet_corners

NEAR = 1e-4  # of the part's size: facets this near to a surface are on it
ALONG = 0.5  # cosine between a facet's normal and that of the surface it is on, at least
Angle = Annotated[float, ANGLE, Bounds(0.0, 90.0)]
Box = tuple[tuple[float, ...], tuple[float, ...]]


@dataclass(frozen=True)
class Pick:
    """What all vertices of a picked facet fulfil; conditions of None do not count.

    `of` is the boundary of the file that is picked from, "" where all outer facets are.
    """

    of: str = ""
    on: Plane | Round | None = None
    facing: tuple[float, ...] | None = None
    angle: float = 30.0
    box: Box | None = None
    tolerance: float | None = None
    key: str = "of"

    @property
    def curve(self) -> Round | None:
        """Return the curved surface that the boundary lies on, None where none is known."""
        return self.on if isinstance(self.on, Round) else None


def boundary(
    *,
    of: Annotated[str, "a boundary of the file to pick from; all outer facets where none is given"] = "",
    plane: Annotated[Point | None, "a point of the plane, or of the straight edge, with `normal`"] = None,
    normal: Annotated[Direction | None, "direction across the plane"] = None,
    circle: Annotated[Point | None, "centre of a circle of `radius` in a plane part"] = None,
    cylinder: Annotated[Point | None, "a point on the axis of a cylinder, with `axis` and `radius`"] = None,
    axis: Annotated[Direction | None, "direction of the cylinder"] = None,
    sphere: Annotated[Point | None, "centre of a sphere of `radius`"] = None,
    radius: Annotated[PositiveLength | None, "radius of the circle, cylinder or sphere"] = None,
    facing: Annotated[Direction | None, "direction that the outward normal has, within `angle`"] = None,
    angle: Annotated[Angle, "most between normal and `facing`"] = 30.0,
    low: Annotated[Point | None, "lower corner of a box that holds the boundary, with `high`"] = None,
    high: Annotated[Point | None, "upper corner of the box"] = None,
    tolerance: Annotated[PositiveLength | None, "how far a facet may be off; 1e-4 of the part's size"] = None,
) -> Pick:
    """Return what [boundaries.NAME] picks: the facets that fulfil all. Unsuitable where keys misfit."""
    surfaces = {"plane": plane, "circle": circle, "cylinder": cylinder, "sphere": sphere}
    said = {key: at for key, at in surfaces.items() if at is not None}
    key, at = next(iter(said.items()), ("", None))
    along = {"plane": normal, "cylinder": axis}.get(key)
    is_round = key in ("circle", "cylinder", "sphere")
    require(
        (len(said) <= 1, list(said)[-1] if said else "", at, "one of plane, circle, cylinder, sphere"),
        (bool(said or of or facing or low), "", None, "of, plane, circle, cylinder, sphere, facing or low"),
        ((normal is not None) == (key == "plane"), "normal", normal, "`plane` and `normal` together"),
        ((axis is not None) == (key == "cylinder"), "axis", axis, "`cylinder` and `axis` together"),
        ((radius is not None) == is_round, "radius", radius, "`radius` with circle, cylinder or sphere"),
        ((low is None) == (high is None), "high", high, "`low` and `high` together"),
        *((way is None or any(way), name, way, "a direction, not all 0") for name, way in
          (("normal", normal), ("axis", axis), ("facing", facing))),
    )  # fmt: skip
    on: Plane | Round | None = None
    if at is not None and radius is not None:
        on = Round(at, radius, None if along is None else _unit(along))
    elif at is not None and along is not None:
        on = Plane(at, _unit(along))
    box = None if low is None or high is None else (low, high)
    leading = key or ("facing" if facing else "low" if low else "of")
    return Pick(of, on, None if facing is None else _unit(facing), angle, box, tolerance, leading)


def picked(pick: Pick, nodes: np.ndarray, groups: tuple[np.ndarray, ...]) -> tuple[np.ndarray, ...]:
    """Return those of the outward facets (k, f), in groups of one shape, that are picked.

    Unsuitable where none or all of several are, or the pick has another dimension than nodes (D, n).
    """
    _require_dimension(pick, len(nodes))
    size = float(np.linalg.norm(np.ptp(nodes, axis=1)))
    allowed = NEAR * size if pick.tolerance is None else pick.tolerance
    places = [nodes[:, group[: facet_corners(len(nodes), len(group))]] for group in groups]
    off = [_off(pick, vertices) for vertices in places]
    turned = [_looks_away(pick, vertices) for vertices in places]
    kept = [(distance <= allowed) & ~away for distance, away in zip(off, turned, strict=True)]
    if not any(mask.any() for mask in kept):
        right = [distance[~away] for distance, away in zip(off, turned, strict=True)]
        nearest = min((float(group.min()) for group in right if len(group)), default=np.inf)
        told = f"the nearest facet is {nearest:.4g} away" if np.isfinite(nearest) else "none faces that way"
        require((False, pick.key, _found(pick), f"what picks a facet: {told} (tolerance {allowed:.4g})"))
    _require_whole(pick, off, kept)
    if not pick.of and all(mask.all() for mask in kept):
        require((False, pick.key, _found(pick), "what picks a part of the outline: this picks all of it"))
    return tuple(group[:, mask] for group, mask in zip(groups, kept, strict=True) if mask.any())


def _require_whole(pick: Pick, off: list[np.ndarray], kept: list[np.ndarray]) -> None:
    """Raise `Unsuitable` where only a part of a named boundary lies on the curve that is said of it."""
    missed = np.concatenate([distance[~mask] for distance, mask in zip(off, kept, strict=True)])
    if pick.of and pick.curve and not (pick.box or pick.facing) and len(missed):
        count = sum(map(len, off))
        told = f"{len(missed)} of {count} facets are not on it, up to {missed.max():.4g} away"
        require((False, pick.key, _found(pick), f"what all of {pick.of} lies on: {told}"))


def _off(pick: Pick, places: np.ndarray) -> np.ndarray:
    """Return how far the farthest vertex of each facet (D, k, f) is from surface and box."""
    off = np.zeros(places.shape[1:])
    if pick.on is not None:
        off = pick.on.distance(places)
    if pick.box is not None:
        low, high = (np.array(corner)[:, None, None] for corner in pick.box)
        off = np.maximum(off, np.maximum(low - places, places - high).max(axis=0))
    return np.asarray(off.max(axis=0))


def _looks_away(pick: Pick, places: np.ndarray) -> np.ndarray:
    """Return which facets (D, k, f) stand across the surface or do not face the way that is asked for."""
    normals = facet_normals(places)
    away = np.zeros(places.shape[2], dtype=bool)
    if pick.on is not None:
        across = pick.on.square(places.mean(axis=1))
        away |= np.abs((across * normals).sum(axis=0)) < ALONG
    if pick.facing is not None:
        away |= np.array(pick.facing) @ normals < np.cos(np.radians(pick.angle)) - 1e-9
    return away


def facet_normals(places: np.ndarray) -> np.ndarray:
    """Return the unit normals (D, f) of facets by their vertices (D, k, f)."""
    if len(places) == 2:
        along = places[:, 1] - places[:, 0]
        across = np.array([along[1], -along[0]])
    elif places.shape[1] == 3:
        across = np.cross(places[:, 1] - places[:, 0], places[:, 2] - places[:, 0], axis=0)
    else:
        across = np.cross(places[:, 2] - places[:, 0], places[:, 3] - places[:, 1], axis=0)
    return np.asarray(across / np.linalg.norm(across, axis=0))


def _require_dimension(pick: Pick, dimension: int) -> None:
    """Raise `Unsuitable` for places and directions that do not have the part's dimension."""
    said: list[tuple[str, tuple[float, ...] | None]] = [("facing", pick.facing)]
    said += [("low", pick.box[0]), ("high", pick.box[1])] if pick.box else []
    if isinstance(pick.on, Plane):
        said += [("plane", pick.on.at), ("normal", pick.on.normal)]
    if isinstance(pick.on, Round):
        said += [(pick.key, pick.on.centre), ("axis", pick.on.axis)]
    right = f"[{', '.join('xyz'[:dimension])}]"
    flat = pick.key == "circle"
    require(
        *((value is None or len(value) == dimension, key, value, right) for key, value in said),
        (not flat or dimension == 2, "circle", _found(pick), "cylinder, with axis: the part is a solid"),
        (pick.key != "sphere" or dimension == 3, "sphere", _found(pick), "circle: the part is plane"),
    )


def _found(pick: Pick) -> object:
    """Return the value of the leading key."""
    if isinstance(pick.on, Plane):
        return pick.on.at
    if isinstance(pick.on, Round):
        return pick.on.centre
    return {"facing": pick.facing, "low": pick.box and pick.box[0]}.get(pick.key, pick.of)


def _unit(way: tuple[float, ...]) -> tuple[float, ...]:
    return tuple((np.array(way) / np.linalg.norm(way)).tolist())
