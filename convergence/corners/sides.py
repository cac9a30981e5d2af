"""What the supports of a problem make of its faces: free, roller or clamped."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from convergence.corners.fans import Face
from convergence.corners.given_sites import facet_key, facet_places
from convergence.corners.sites import face_key
from convergence.fem.given_part import GivenPart
from convergence.fem.part import Part
from convergence.fem.problem import AnyPart, Problem, Support
from convergence.fem.rod_part import RodPart

FLAT = 1e-9  # of the part's size
FLAT_GIVEN = 1e-6  # files have single precision at times
COORDINATES = ("x", "y", "z")


@dataclass(frozen=True)
class Conditions:
    """The condition on each face of a problem; `held` has the components its supports hold there."""

    problem: Problem
    held: dict[Face, set[str]]

    def on(self, face: Face) -> str:
        """Return free, roller or clamped; a held component that is not the normal one counts as clamped.

        An elastic foundation leaves a side free: near the corner its traction is small beside the stress.
        The axis of an axisymmetric problem is a roller.
        """
        held, part = self.held.get(face, set()), self.problem.part
        places = _places(part, face)
        near = (FLAT_GIVEN if isinstance(part, GivenPart) else FLAT) * part.size
        flat = {c for c, row in zip(COORDINATES, places, strict=False) if np.ptp(row) < near}
        on_axis = self.problem.kind == "axisymmetric" and np.abs(places[0]).max() < near
        if not held and not on_axis:
            return "free"
        if held in ({"normal"}, set()) or (len(held) == 1 and held <= flat):
            return "roller"
        return "clamped"


def conditions(problem: Problem) -> Conditions:
    """Return the conditions that the supports set on the faces of a plane or solid part."""
    part = problem.part
    assert not isinstance(part, RodPart)
    held: dict[Face, set[str]] = {}
    for support in problem.supports:
        if isinstance(support, Support) and support.boundary is not None:
            components = {c for c in (*COORDINATES, "normal") if getattr(support, c) is not None}
            for face in _faces(part, support.boundary):
                held.setdefault(face, set()).update(components)
    return Conditions(problem, held)


def _faces(part: AnyPart, boundary: str) -> Iterator[Face]:
    assert not isinstance(part, RodPart)
    if isinstance(part, GivenPart):
        for group in part.boundaries[boundary]:
            yield from (facet_key(part.finest, facet) for facet in group.T)
    else:
        yield from (face_key(part, face) for face in part.boundaries[boundary])


def _places(part: AnyPart, face: Face) -> np.ndarray:
    """Return places (D, n) on a face: its ends and middles."""
    steps, (names, number) = np.array([0.0, 0.5, 1.0]), face
    assert not isinstance(part, RodPart)
    if isinstance(part, GivenPart):
        return facet_places(part.finest, face)
    if isinstance(part, Part):
        return _along(part, names, steps)
    if len(names) == 2:
        x, y = _along(part.plan, names, steps)[:, :, None]
        s = part.steps(number, steps)
        return part.sweep.place(x, y, s[None, :]).reshape(3, -1)
    block = next(k for k, corners in enumerate(part.plan.blocks) if frozenset(corners) == names)
    x, y = part.plan.block(block, steps, steps).reshape(2, -1)
    return part.sweep.place(x, y, np.full_like(x, part.planes[number][1]))


def _along(plan: Part, names: frozenset[str], steps: np.ndarray) -> np.ndarray:
    start, end = sorted(names)
    return plan.edge(start, end, steps)
