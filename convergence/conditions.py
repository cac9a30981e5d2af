"""Supports and loads on a mesh of a file: each [supports.NAME] and [loads.NAME] calls one of these."""

from collections.abc import Callable
from typing import Annotated, Any, Literal

import numpy as np

from convergence.dimensions import (
    FORCE,
    FORCE_PER_VOLUME,
    MOMENT,
    POSITIVE,
    STRESS,
    BoundaryName,
    Direction,
    ForcePerVolume,
    Length,
    Point,
    PointName,
    Ratio,
    RegionName,
    Stress,
    Temperature,
)
from convergence.errors import require
from convergence.fem.loads import (
    BearingLoad,
    BodyForce,
    PointForce,
    Pressure,
    Resultant,
    TemperatureRise,
    Traction,
    centrifugal,
    gravity,
)
from convergence.fem.problem import ElasticSupport, Support

Stiffness = Annotated[float, FORCE_PER_VOLUME, POSITIVE]
Tractions = Annotated[tuple[float, float] | tuple[float, float, float], STRESS]
Forces = Annotated[tuple[float, float] | tuple[float, float, float], FORCE]
Moments = Annotated[float | tuple[float, float, float], MOMENT]
Axis = Literal["x", "y", "z"]


def rigid(
    *,
    name: str,
    boundary: Annotated[BoundaryName | None, "boundary that is held"] = None,
    point: Annotated[PointName | None, "named point that is held"] = None,
    x: Annotated[Length | None, "displacement along x, usually 0; free where none is given"] = None,
    y: Annotated[Length | None, "displacement along y"] = None,
    z: Annotated[Length | None, "displacement along z, of a solid"] = None,
    normal: Annotated[Length | None, "displacement along the outward normal of the boundary"] = None,
) -> Support:
    """Return a support that holds displacements. Unsuitable where it holds nothing or nowhere."""
    held = any(value is not None for value in (x, y, z, normal))
    require(
        ((boundary is None) != (point is None), "boundary", boundary, "either `boundary` or `point`"),
        (held, "x", None, "at least one of x, y, z and normal"),
        (normal is None or point is None, "normal", normal, "x, y, z: a point has no normal"),
    )
    return Support(name, x, y, z, normal, boundary, point)


def elastic(
    *,
    name: str,
    boundary: Annotated[BoundaryName, "boundary on springs"],
    stiffness: Annotated[Stiffness, "pressure per displacement along the normal"],
    tangential: Annotated[ForcePerVolume, "traction per displacement across the normal"] = 0.0,
) -> ElasticSupport:
    """Return an elastic foundation."""
    return ElasticSupport(name, boundary, stiffness, tangential)


def traction(
    *,
    boundary: Annotated[BoundaryName, "boundary that is loaded"],
    value: Annotated[Tractions, "force per area"],
) -> Traction:
    """Return a force per area, the same all over a boundary."""
    return Traction(boundary, value)


def pressure(
    *,
    boundary: Annotated[BoundaryName, "boundary that is loaded"],
    value: Annotated[Stress, "pressure, positive against the outward normal"],
) -> Pressure:
    """Return a pressure."""
    return Pressure(boundary, value)


def force(
    *,
    boundary: Annotated[BoundaryName, "boundary that is loaded"],
    force: Annotated[Forces, "resultant force"],
    moment: Annotated[Moments | None, "resultant moment about `about`, none if not given"] = None,
    about: Annotated[Point | None, "point that force and moment act at; the origin if not given"] = None,
) -> Resultant:
    """Return a force and a moment on a boundary, spread as in beam theory."""
    solid = len(force) == 3
    turning = (0.0,) * (3 if solid else 1)
    if moment is not None:
        turning = moment if isinstance(moment, tuple) else (moment,)
    right = "[x, y, z] of a solid, a number of a plane part"
    require((len(turning) == (3 if solid else 1), "moment", moment, right))
    at = (0.0,) * len(force) if about is None else about
    require((len(at) == len(force), "about", about, "as many coordinates as `force` has components"))
    return Resultant(boundary, force, turning, at)


def bearing(
    *,
    boundary: Annotated[BoundaryName, "hole that a pin presses on"],
    force: Annotated[Forces, "force of the pin"],
    centre: Annotated[Point, "a point on the axis of the hole"],
    axis: Annotated[Direction | None, "direction of the hole, of a solid"] = None,
) -> BearingLoad:
    """Return the force of a pin: pressure with a cosine distribution. Unsuitable where it misfits."""
    solid = len(force) == 3
    require(
        (any(force), "force", force, "a force, not all 0"),
        (len(centre) == len(force), "centre", centre, "as many coordinates as `force` has components"),
        ((axis is not None) == solid, "axis", axis, "a direction in a solid, none in a plane part"),
        (axis is None or any(axis), "axis", axis, "a direction, not all 0"),
    )
    if axis is not None:
        along = abs(float(np.dot(axis, force))) / float(np.linalg.norm(axis) * np.linalg.norm(force))
        require((along < 1e-6, "force", force, "a force square to `axis`"))
    return BearingLoad(boundary, force, centre, axis)


def point_force(
    *,
    point: Annotated[PointName, "named point that takes the force"],
    force: Annotated[Forces, "force"],
) -> PointForce:
    """Return a force at a point: stress there has no limit."""
    return PointForce(point, force)


def weight(
    *,
    value: Annotated[ForcePerVolume, "weight per volume"],
    direction: Annotated[Direction, "direction it acts in"],
    region: Annotated[RegionName | None, "region that is heavy, all if not given"] = None,
) -> BodyForce:
    """Return the own weight."""
    require((any(direction), "direction", direction, "a direction, not all 0"))
    return gravity(value, tuple((np.array(direction) / np.linalg.norm(direction)).tolist()), region)


def rotation(
    *,
    axis: Annotated[Axis, "coordinate axis it turns about"],
    density: Annotated[Ratio, "density, in units that go with the others, e.g. tonne/mm³"],
    rate: Annotated[Ratio, "rad/s"],
    region: Annotated[RegionName | None, "region, all if not given"] = None,
) -> BodyForce:
    """Return the body force of a steady rotation."""
    return centrifugal(density, rate, "xyz".index(axis), region)


def temperature(
    *,
    rise: Annotated[Temperature, "rise above the temperature without stress"],
    region: Annotated[RegionName | None, "region, all if not given"] = None,
) -> TemperatureRise:
    """Return a uniform rise of temperature."""
    return TemperatureRise(rise, region)


SUPPORTS: dict[str, Callable[..., Any]] = {each.__name__: each for each in (rigid, elastic)}
LOADS: dict[str, Callable[..., Any]] = {
    each.__name__: each
    for each in (traction, pressure, force, bearing, point_force, weight, rotation, temperature)
}
