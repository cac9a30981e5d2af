"""Where the field of a singular corner is read: along a ray into the body, and on free surfaces beside it.

The ray starts at the corner, of an edge of a solid at its middle, and halves the opening of the widest piece
of one material around it; a plane of symmetry (a roller) beside a free side halves the whole one, and the
ray lies on it. A surface is straight and free for one thickness from the corner at least; thickness is what a
line from the corner, square to the surface, crosses of the part.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import groupby, pairwise

import numpy as np

from convergence.corner import Corner
from convergence.corners.bonded import wedge_exponents
from convergence.corners.fans import Face, Fan
from convergence.corners.sides import Conditions, conditions
from convergence.corners.sites import Site, sites
from convergence.fem.given_part import GivenPart
from convergence.fem.problem import AnyPart, Problem
from convergence.fem.rod_part import RodPart

STEPS = (32, 4, 4, 4, 4, 4, 4)  # into which a line is cut to find where it leaves the part
EDGE = 1e-5  # of the part's size: what `contains` counts as inside
NUDGE = 1e-6  # of the part's size, into the material of a surface where others meet it at the corner
OUTSIDE = 1e-3  # of the part's size
NEAREST = 0.399  # of the thickness: no corner is nearer to a place on a surface than 0.4 t, as its own is
HALVINGS = 11
SINGLE = 0.2  # exponents nearer than this are two terms of one strength


@dataclass(frozen=True, eq=False)
class Surface:
    """A free surface from `toe` (D,) along `way`, and the body below: `thickness` deep along `inward`."""

    toe: np.ndarray
    way: np.ndarray
    inward: np.ndarray
    thickness: float


@dataclass(frozen=True, eq=False)
class Ray:
    """A ray from `start` (D,) along `way`, in the part up to twice `reach`; `across` is square to it.

    In a solid both are square to the edge. `single` says whether one term of the field, of a real exponent,
    leads near the corner.
    """

    corner: Corner
    start: np.ndarray
    way: np.ndarray
    across: np.ndarray
    reach: float
    single: bool
    surfaces: tuple[Surface, ...]


def rays(problem: Problem, corners: Sequence[Corner], most: int) -> tuple[Ray, ...]:
    """Return the rays of the first `most` of the singular corners of a problem, none of points of solids."""
    part = problem.part
    if isinstance(part, RodPart) or not corners:
        return ()
    around: dict[frozenset[str], list[Site]] = {}
    for site in sites(part, problem.materials):
        around.setdefault(frozenset(site.points), []).append(site)
    faces = conditions(problem)
    found = ((corner, _site(corner, around)) for corner in corners[:most])
    return tuple(_ray(faces, corner, site, corners) for corner, site in found if site is not None)


def _site(corner: Corner, around: dict[frozenset[str], list[Site]]) -> Site | None:
    """Return the site of a corner, of a chain of edges the middle one's."""
    links: list[tuple[str, ...]] = list(pairwise(corner.points)) or [corner.points]
    found = around.get(frozenset(links[(len(links) - 1) // 2]), [])
    return min(found, key=lambda site: abs(site.fan.opening - corner.opening), default=None)


def _ray(faces: Conditions, corner: Corner, site: Site, corners: Sequence[Corner]) -> Ray:
    part = faces.problem.part
    start = _middle(corner, site, part.size)
    way, across = _bisector(faces, site.fan)
    surfaces = tuple(_surfaces(faces, site.fan, start, corners))
    single = _single(faces, corner, site.fan)
    return Ray(corner, start, way, across, _reach(part, start, way), single, surfaces)


def _middle(corner: Corner, site: Site, size: float) -> np.ndarray:
    """Return the middle of a straight edge, of others the middle of their middle piece."""
    path = np.array(corner.path)
    length = np.linalg.norm(np.diff(path, axis=0), axis=1).sum()
    straight = length - np.linalg.norm(path[-1] - path[0]) < NUDGE * size
    return np.asarray(path[[0, -1]].mean(axis=0)) if straight else site.middle


def _bisector(faces: Conditions, fan: Fan) -> tuple[np.ndarray, np.ndarray]:
    """Return the unit vector along the ray, and the one across."""
    ends = {faces.on(face): (way, inward) for face, way, inward in _ends(fan)}
    if set(ends) == {"free", "roller"}:
        return ends["roller"]
    wedges = fan.wedges
    if fan.closed and fan.materials > 1:
        first = next(k for k, w in enumerate(wedges) if w.material != wedges[k - 1].material)
        wedges = wedges[first:] + wedges[:first]
    pieces = [tuple(group) for _, group in groupby(wedges, key=lambda wedge: wedge.material)]
    piece = max(pieces, key=lambda group: round(sum(wedge.opening for wedge in group), 6))
    angle = 0.5 * sum(wedge.opening for wedge in piece)
    for wedge in piece:
        if angle <= wedge.opening:
            break
        angle -= wedge.opening
    first_way, turn = wedge.ways[0], np.radians(angle)
    square = _square(wedge.ways[1], first_way)
    return np.cos(turn) * first_way + np.sin(turn) * square, np.cos(turn) * square - np.sin(turn) * first_way


def _square(way: np.ndarray, to: np.ndarray) -> np.ndarray:
    """Return the unit vector of what a direction has square to another."""
    rest = way - (way @ to) * to
    return np.asarray(rest / np.linalg.norm(rest))


def _single(faces: Conditions, corner: Corner, fan: Fan) -> bool:
    """Return whether the weakest exponent is real, and no other follows closely that a ray can feel.

    On the bisector of one material between equal sides the skew terms leave no stress across.
    """
    if corner.exponent <= 0.0:
        return True
    sides = None if fan.closed else (faces.on(fan.wedges[0].start), faces.on(fan.wedges[-1].end))
    kind = faces.problem.kind
    first, *others = wedge_exponents(fan.sectors(kind), sides) or [complex(corner.exponent)]
    alike = sides is not None and sides[0] == sides[1] and fan.materials == 1
    leads = first.imag == 0.0 and abs(first.real - corner.exponent) < 1e-6
    return leads and (alike or all(other.real - first.real > SINGLE for other in others))


def _surfaces(faces: Conditions, fan: Fan, start: np.ndarray, corners: Sequence[Corner]) -> Iterator[Surface]:
    """Yield the straight free surfaces beside a corner that no other singular corner is near to."""
    part = faces.problem.part
    for face, way, inward in _ends(fan):
        toe = start + NUDGE * part.size * way
        if faces.on(face) != "free" or not _holds(part, toe, np.array([OUTSIDE * part.size]), inward).all():
            continue
        thickness = _thickness(part, toe, inward)
        steps = np.array([0.2, 0.4, 0.6, 0.8, 1.0]) * thickness
        above = toe - max(0.02 * thickness, OUTSIDE * part.size) * inward
        straight = _holds(part, toe, steps, way).all() and not _holds(part, above, steps, way).any()
        places = [tuple(toe + step * way) for step in steps[[1, 4]]]
        if straight and all(c.distance(at) >= NEAREST * thickness for c in corners for at in places):
            yield Surface(toe, way, inward, thickness)


def _ends(fan: Fan) -> Iterator[tuple[Face, np.ndarray, np.ndarray]]:
    """Yield the outer faces of an open fan, the direction along each, and the one into the body."""
    if not fan.closed:
        first, last = fan.wedges[0], fan.wedges[-1]
        yield first.start, first.ways[0], _square(first.ways[1], first.ways[0])
        yield last.end, last.ways[1], _square(last.ways[0], last.ways[1])


def _reach(part: AnyPart, start: np.ndarray, way: np.ndarray) -> float:
    """Return a quarter of the part's size or less, 1, 2, 4 or 8 times a power of ten, or that halved again.

    A line is in the part up to twice it; 0 where it leaves the part at once.
    """
    power = 10.0 ** np.floor(np.log10(0.25 * part.size))
    largest = power * max(digit for digit in (1, 2, 4, 8) if digit * power <= 0.25 * part.size)
    steps = largest * 0.5 ** np.arange(HALVINGS)
    kept = np.logical_and.accumulate(_holds(part, start, 2.0 * steps, way)[::-1])
    return float(steps[::-1][kept].max(initial=0.0))


def _thickness(part: AnyPart, start: np.ndarray, way: np.ndarray) -> float:
    """Return how far a line goes before it leaves the part, to 1e-6 of the part's size."""
    low, high = 0.0, part.size
    for count in STEPS:
        steps = np.linspace(low, high, count + 1)[1:]
        outside = ~_holds(part, start, steps, way)
        if outside.any():
            high = float(steps[outside.argmax()])
            low = high - float(steps[1] - steps[0])
    return low - EDGE * part.size


def _holds(part: AnyPart, start: np.ndarray, steps: np.ndarray, way: np.ndarray) -> np.ndarray:
    """Return which places of a line lie in the part."""
    assert not isinstance(part, RodPart)
    holds = part.encloses if isinstance(part, GivenPart) else part.contains
    return holds((start + np.multiply.outer(steps, way)).T)
