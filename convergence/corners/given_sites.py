"""Where a plane part that is given by its meshes could be singular: its named points, with what is around."""

from collections.abc import Iterator, Mapping
from itertools import accumulate
from weakref import WeakKeyDictionary

import numpy as np

from convergence.corners.fans import Face, Fan, Wedge, fans
from convergence.corners.outline import corner_ways, true_openings
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.material import Material
from convergence.fem.outer_facets import facet_corners

Openings = Mapping[str, Mapping[int, float]]
_found: WeakKeyDictionary[GivenPart, Openings] = WeakKeyDictionary()


def given_fans(part: GivenPart, materials: Mapping[str, Material]) -> Iterator[tuple[str, Fan]]:
    """Yield every named point of a plane part with a fan around it, none where one material surrounds it.

    Directions are those of the finest mesh, openings those of the part.
    """
    finest, openings = part.finest, _openings(part)
    for name, node in finest.vertices.items():
        wedges = list(_wedges(finest, materials, node))
        whole = len(wedges) > 0 and all(node not in found for found in openings.values())
        for fan in () if whole else fans(wedge for _, wedge in wedges):
            regions = {id(wedge): region for region, wedge in wedges}
            yield name, _turned(fan, [regions[id(wedge)] for wedge in fan.wedges], node, openings)


def _openings(part: GivenPart) -> Openings:
    """Return the openings on the outline of each region by node, kept as long as the part."""
    if part not in _found:
        _found[part] = {
            region: dict(zip(*(rows.tolist() for rows in true_openings(part.telling, region)), strict=True))
            for region in part.finest.regions
        }
    return _found[part]


def facet_key(made: GivenMesh, facet: np.ndarray) -> Face:
    """Return what a facet of a boundary is called in a fan."""
    corners = facet_corners(made.dimension, len(facet))
    return frozenset(str(node) for node in facet[:corners].tolist()), 0


def facet_places(made: GivenMesh, face: Face) -> np.ndarray:
    """Return the places (D, k) of the vertices of a facet."""
    return made.nodes[:, [int(node) for node in face[0]]]


def _wedges(made: GivenMesh, materials: Mapping[str, Material], node: int) -> Iterator[tuple[str, Wedge]]:
    """Yield the corner of each cell at a node, from its next edge to the one before, with its region."""
    for region, members in made.regions.items():
        cells = members[(made.cell_nodes[:, members] == node).any(axis=0)]
        ways = corner_ways(made, cells)
        corners = ways.shape[2]
        for number, cell in enumerate(cells):
            around = made.cell_nodes[:corners, cell]
            at = int(np.flatnonzero(around == node)[0])
            start, end = (
                (frozenset((str(node), str(around[other]))), 0) for other in ((at + 1) % corners, at - 1)
            )
            own = ways[:, :, at, number]
            unit = own / np.linalg.norm(own, axis=1, keepdims=True)
            yield region, Wedge(start, end, unit, materials[region])


def _turned(fan: Fan, regions: list[str], node: int, openings: Openings) -> Fan:
    """Return the fan with the openings that its regions have in the part, from the same first direction."""
    own = np.array([wedge.opening for wedge in fan.wedges])
    for region in set(regions):
        mine = np.array([other == region for other in regions])
        own[mine] *= openings[region].get(node, 360.0) / own[mine].sum()
    if fan.closed:
        own *= 360.0 / own.sum()
    x, y = fan.wedges[0].ways[0]
    faces = np.arctan2(y, x) + np.radians([0.0, *accumulate(own)])
    ways = np.array([np.cos(faces), np.sin(faces)]).T
    return Fan(
        tuple(
            Wedge(wedge.start, wedge.end, ways[number : number + 2], wedge.material)
            for number, wedge in enumerate(fan.wedges)
        )
    )
