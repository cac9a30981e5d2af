"""Fans: the wedges of material around a point of a plane or an edge of a solid, and their exponent.

A wedge lies between two faces; wedges that share a face form a fan. A fan with two outer faces is open and
has a condition on each; a closed one surrounds the point. Near a smooth edge of a solid the field is that
of plane strain across the edge and of shear along it (Grisvard 1992, Singularities in Boundary Value
Problems, from memory), so that a plane and a solid share this file.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from functools import lru_cache
from itertools import accumulate, pairwise

import numpy as np

from convergence.corners.bonded import Sector, wedge_exponents
from convergence.corners.williams import weakest_exponent
from convergence.fem.material import Material, ProblemKind

WHOLE = 1e-2  # angles this close to a whole number of degrees are one: tangents are differences
Sides = tuple[str, str]
Face = tuple[
    frozenset[str], int
]  # the points of an edge and its layer, 0 in a plane; of a block and its plane


@dataclass(frozen=True)
class Wedge:
    """Material from the face `start` to the face `end`, which lie along the unit vectors `ways` (2, D)."""

    start: Face
    end: Face
    ways: np.ndarray
    material: Material

    @property
    def opening(self) -> float:
        """Return the angle between the faces in degrees, below 180."""
        one, other = self.ways
        return float(np.degrees(2.0 * np.arctan2(np.linalg.norm(one - other), np.linalg.norm(one + other))))


@dataclass(frozen=True)
class Fan:
    """Wedges in angular order, each starting on the face where the one before ends."""

    wedges: tuple[Wedge, ...]

    @property
    def closed(self) -> bool:
        return self.wedges[0].start == self.wedges[-1].end

    @property
    def openings(self) -> list[float]:
        """Return the opening of each wedge in degrees, faces at nearly whole degrees taken as whole."""
        faces = [0.0, *accumulate(wedge.opening for wedge in self.wedges)]
        whole = [float(round(face)) if abs(face - round(face)) < WHOLE else face for face in faces]
        return [end - start for start, end in pairwise(whole)]

    @property
    def opening(self) -> float:
        return sum(self.openings)

    @property
    def isotropic(self) -> bool:
        return all(wedge.material.isotropic for wedge in self.wedges)

    @property
    def materials(self) -> int:
        """Return how many different materials the fan has."""
        return len({wedge.material for wedge in self.wedges})

    def sectors(self, kind: ProblemKind) -> tuple[Sector, ...]:
        """Return (opening, shear modulus, kappa) in angular order, neighbours of one material joined."""
        joined: list[Sector] = []
        for opening, wedge in zip(self.openings, self.wedges, strict=True):
            mu, kappa = wedge.material.shear_modulus, wedge.material.kappa(kind)
            if joined and joined[-1][1:] == (mu, kappa):
                opening += joined.pop()[0]
            joined.append((opening, mu, kappa))
        if self.closed and len(joined) > 1 and joined[0][1:] == joined[-1][1:]:
            opening, mu, kappa = joined.pop()
            joined[0] = (joined[0][0] + opening, mu, kappa)
        return tuple(joined)

    def weakest(self, sides: Sides, kind: ProblemKind) -> float | None:
        """Return the smallest real part of the exponents below one, None where the fan is regular.

        `sides` are the conditions on the first and the last face; they do not matter where it is closed.
        """
        return _weakest(self.sectors(kind), None if self.closed else sides, kind == "solid")


def fans(wedges: Iterable[Wedge]) -> tuple[Fan, ...]:
    """Return the fans that the wedges around one point or edge form."""
    by_start = {wedge.start: wedge for wedge in wedges}
    ends = {wedge.end for wedge in by_start.values()}
    found = []
    while by_start:
        face = next((face for face in by_start if face not in ends), next(iter(by_start)))
        chain = []
        while face in by_start:
            chain.append(by_start.pop(face))
            face = chain[-1].end
        found.append(Fan(tuple(chain)))
    return tuple(found)


@lru_cache(maxsize=512)
def _weakest(sectors: tuple[Sector, ...], sides: Sides | None, solid: bool) -> float | None:
    found = []
    if len(sectors) > 1:
        found += [exponent.real for exponent in wedge_exponents(sectors, sides)[:1]]
    elif sides is not None:
        opening, _, kappa = sectors[0]
        in_plane = weakest_exponent(opening, sides, kappa=kappa)
        found += [] if in_plane is None else [in_plane]
    if solid and (len(sectors) > 1 or sides is not None):
        found += [exponent.real for exponent in wedge_exponents(sectors, sides, mode="antiplane")[:1]]
    return min(found, default=None)
