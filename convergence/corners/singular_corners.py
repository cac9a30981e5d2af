"""The singular corners of a problem: openings, materials, conditions on both sides, exponents.

Where no table of corners is at hand, theory alone says which ones are singular: corners of the outline
(Williams 1952, J. Appl. Mech. 19:526), places where materials meet (Bogy 1971, J. Appl. Mech. 38:377, from
memory), points that take a force. A support that ends on a straight or curved edge is a corner of 180°. Where
the exact field of the problem is known and stays bounded, as when its own displacements are prescribed, the
corner is not excited and left out.
"""

from collections.abc import Iterator

import numpy as np

from convergence.corner import Corner
from convergence.corners.chains import chained, edge_name
from convergence.corners.fans import Fan, Sides
from convergence.corners.forced_points import forced_points
from convergence.corners.sides import Conditions, conditions
from convergence.corners.sites import Site, sites
from convergence.fem.problem import Problem
from convergence.fem.rod_part import RodPart

REGULAR = 0.999
GROWTH = 1.1
FAR, NEAR = 1e-3, 1e-6  # of the part's size
BONDED = ("bonded", "bonded")


def singular_corners(problem: Problem) -> tuple[Corner, ...]:
    """Return the corners, of a solid the edges, whose weakest exponent is below one, weakest first.

    A point that takes a force has the exponent 0 in a plane, -1 in a solid and on the axis of a ring, the
    sides "point" and "force" or "support", and in a solid the opening 0. What is left out as not known is
    in `unexamined_corners`. SolvingError where a problem with a support at a point can move.
    """
    if isinstance(problem.part, RodPart):
        return ()
    faces, forced = conditions(problem), forced_points(problem)
    found: list[Corner] = []
    openings = dict.fromkeys(forced, 0.0)
    for site in sites(problem.part, problem.materials):
        if len(site.points) == 1 and site.points[0] in forced:
            openings[site.points[0]] += site.fan.opening
        else:
            found += _singular(problem, faces, site)
    found = [*chained(found), *(_forced(problem, name, forced[name], openings[name]) for name in forced)]
    return tuple(sorted(found, key=lambda corner: corner.exponent))


def unexamined_corners(problem: Problem) -> tuple[Corner, ...]:
    """Return the corners of orthotropic materials and of cones on the axis of a ring, of exponent NaN.

    Other equations hold there. Inside one material, and on its flat sides under one condition, all is
    regular whatever the material.
    """
    if isinstance(problem.part, RodPart):
        return ()
    faces, found = conditions(problem), list[Corner]()
    for site in sites(problem.part, problem.materials):
        fan, sides = site.fan, _sides(faces, site.fan)
        flat = fan.closed or (fan.opening == 180.0 and sides[0] == sides[1])
        if not _has_equations(problem, site) and not (flat and fan.materials == 1):
            found.append(_corner(site, sides, np.nan))
    return tuple(found)


def _singular(problem: Problem, faces: Conditions, site: Site) -> Iterator[Corner]:
    """Yield the corner at a site, if it is singular and excited."""
    fan = site.fan
    if not _has_equations(problem, site):
        return
    sides = _sides(faces, fan)
    exponent = fan.weakest(sides, problem.kind)
    if exponent is not None and exponent < REGULAR and _excited(problem, site):
        yield _corner(site, sides, exponent)


def _corner(site: Site, sides: Sides, exponent: float) -> Corner:
    path = tuple(tuple(float(x) for x in place) for place in site.path)
    one, other = sorted(sides)
    return Corner(edge_name(site.points), path, site.points, site.fan.opening, (one, other), exponent)


def _has_equations(problem: Problem, site: Site) -> bool:
    """Return whether the equations of isotropic wedges hold: on the axis of a ring for upright faces only."""
    if not site.fan.isotropic:
        return False
    upright = all(opening % 90.0 == 0.0 for opening, _, _ in site.fan.sectors(problem.kind))
    return upright or not _on_axis(problem, site.middle)


def _on_axis(problem: Problem, place: np.ndarray) -> bool:
    return problem.kind == "axisymmetric" and abs(place[0]) < NEAR * problem.part.size


def _sides(faces: Conditions, fan: Fan) -> Sides:
    """Return the conditions on the first and the last face of a fan."""
    return BONDED if fan.closed else (faces.on(fan.wedges[0].start), faces.on(fan.wedges[-1].end))


def _excited(problem: Problem, site: Site) -> bool:
    """Return whether the exact stress, where it is known, grows towards the site along a bisector."""
    if problem.exact is None:
        return True
    inward = site.fan.wedges[0].ways.sum(axis=0)
    step = problem.part.size * inward / np.linalg.norm(inward)
    places = site.middle[:, None] + step[:, None] * np.array([FAR, NEAR])
    outer, inner = np.linalg.norm(problem.exact.stress(*places), axis=0)
    return bool(inner > outer * GROWTH)


def _forced(problem: Problem, name: str, what: str, opening: float) -> Corner:
    place = tuple(float(x) for x in problem.part.points[name])
    exponent = -1.0 if _on_axis(problem, np.array(place)) or len(place) == 3 else 0.0
    return Corner(name, (place,), (name,), opening, ("point", what), exponent)
