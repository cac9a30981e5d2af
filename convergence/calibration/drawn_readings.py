"""Readings in one line each: `Reading`s under the names of their measures."""

import math

from convergence.calibration.drawn_case import Reading, Way

Place = tuple[float, ...]


def displacement(label: str, at: Place, component: str) -> Reading:
    """Read a displacement at a place."""
    return Reading(label, "displacement", "displacement", {"at": at, "component": component})


def mean_displacement(label: str, boundary: str, component: str) -> Reading:
    """Read the mean displacement of a boundary."""
    return Reading(label, "displacement", "mean_displacement", {"boundary": boundary, "component": component})


def reaction(label: str, boundary: str, component: str) -> Reading:
    """Read the force of a support."""
    return Reading(label, "resultant", "reaction", {"boundary": boundary, "component": component})


def section_force(label: str, boundary: str, component: str) -> Reading:
    """Read the force of the stress on a boundary."""
    return Reading(label, "resultant", "section_force", {"boundary": boundary, "component": component})


def stress(label: str, at: Place, component: str, way: Way = "nodal", *, singular: bool = False) -> Reading:
    """Read a stress at a place."""
    arguments = {"at": at, "component": component, "way": way}
    return Reading(label, "point_stress", "stress", arguments, singular)


def peak(
    label: str,
    component: str,
    way: Way = "nodal",
    near: Place | None = None,
    radius: float = math.inf,
    *,
    singular: bool = False,
) -> Reading:
    """Read the largest stress, everywhere or within a radius of a place."""
    arguments = {"component": component, "way": way, "near": near, "radius": radius}
    return Reading(label, "peak_stress", "peak", arguments, singular)


def linearised(label: str, start: Place, end: Place, component: str) -> tuple[Reading, Reading]:
    """Read the membrane and the bending part of a stress along a line."""
    line = {"start": start, "end": end, "component": component}
    return (
        Reading(f"{label} membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        Reading(f"{label} bending", "point_stress", "line_stress", {**line, "part": "bending"}),
    )


def held_corner_readings(corner: Place, radius: float, component: str) -> tuple[Reading, ...]:
    """Read what has no limit: the stress at a held corner, its peaks within a radius, that of the part."""
    return (
        stress("corner", corner, component, singular=True),
        peak("corner nodal", "von_mises", near=corner, radius=radius, singular=True),
        peak("corner gauss", "first_principal", "gauss", corner, radius, singular=True),
        peak("all direct", "von_mises", "direct", singular=True),
    )
