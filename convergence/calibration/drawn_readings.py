"""Readings in one line each: `Reading`s under the names of their measures."""

import math
from collections.abc import Sequence
from typing import Any

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


def sharp_readings(label: str, place: Place, radius: float) -> tuple[Reading, ...]:
    """Read what has no limit at a sharp inner corner or edge: the stress there, its peaks within a radius."""
    ways: tuple[Way, ...] = ("nodal", "direct", "gauss")
    return (
        stress(label, place, "yy", singular=True),
        *(peak(way, "von_mises", way, place, radius, singular=True) for way in ways),
    )


def crack_readings(
    tip: tuple[float, float],
    shares: tuple[float, float],
    ligament: float,
    far: Place,
    *,
    upwards: bool = False,
    radii: Sequence[float] = (),
) -> tuple[Reading, ...]:
    """Read energy, what is ahead of the tip, between shares of the ligament and far away, singular stresses.

    The crack runs along x, the part above it, or upwards, the part on its right. Stress intensity is read
    within `radii`.
    """
    along, opening = ((0.0, 1.0), "xx") if upwards else ((1.0, 0.0), "yy")

    def ahead(share: float) -> Place:
        return tip[0] + share * ligament * along[0], tip[1] + share * ligament * along[1]

    line: dict[str, Any] = {"start": ahead(shares[0]), "end": ahead(shares[1]), "component": opening}
    near: dict[str, Any] = {"near": tip, "radius": 0.35 * ligament}
    return (
        Reading("energy", "energy", "energy"),
        *(
            Reading(
                f"intensity {radius:g}",
                "intensity",
                "stress_intensity",
                {"tip": tip, "ahead": along, "side": -1.0 if upwards else 1.0, "radius": radius},
            )
            for radius in radii
        ),
        displacement("inside", far, "magnitude"),
        Reading("membrane", "point_stress", "line_stress", {**line, "part": "membrane"}),
        stress("ahead", ahead(0.25), opening),
        stress("far", far, "von_mises", "direct"),
        stress("tip", tip, opening, singular=True),
        peak("peak", "von_mises", singular=True),
        peak("peak gauss", "first_principal", "gauss", **near, singular=True),
        peak("peak direct", opening, "direct", **near, singular=True),
    )
