"""The loads of a problem, and the body forces of gravity and rotation."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

FieldFunction = Callable[..., np.ndarray]
Vector = tuple[float, ...]


@dataclass(frozen=True)
class Traction:
    """Force per area on a boundary: a vector, or a function of the coordinates returning (D, ...)."""

    boundary: str
    value: Vector | FieldFunction


@dataclass(frozen=True)
class Pressure:
    """Pressure on a boundary, positive against the outward normal: a number or a function of the place."""

    boundary: str
    value: float | FieldFunction


@dataclass(frozen=True)
class BearingLoad:
    """A force passed by a pin: pressure with a cosine distribution over the half of the hole it presses on.

    Scaled on every mesh so that its resultant along the force is exact (common practice). In a solid
    the hole is a cylinder around the line through `centre` along `axis`.
    """

    boundary: str
    force: Vector
    centre: Vector
    axis: Vector | None = None


@dataclass(frozen=True)
class Resultant:
    """A force and a moment on a boundary, spread as a traction that is linear in the coordinates.

    In a plane the moment has one component, counter-clockwise. The traction is the one of a rigid motion,
    a + b × (x - about), as in beam theory; on every mesh force and moment about `about` are exact.
    """

    boundary: str
    force: Vector
    moment: Vector
    about: Vector


@dataclass(frozen=True)
class PointForce:
    """A force at a named point: in a plane and in a solid stress and displacement under it have no limit."""

    point: str
    force: Vector


@dataclass(frozen=True)
class BodyForce:
    """Force per volume in a region (every region where None): a vector, or a function of the coordinates."""

    value: Vector | FieldFunction
    region: str | None = None


@dataclass(frozen=True)
class TemperatureRise:
    """Rise above the stress-free temperature in a region (every region where None): number or function."""

    value: float | FieldFunction
    region: str | None = None


Load = Traction | Pressure | BearingLoad | Resultant | PointForce | BodyForce | TemperatureRise


def gravity(density: float, acceleration: Vector, region: str | None = None) -> BodyForce:
    """Return the own weight; units must be consistent, e.g. density in tonnes/mm³ with mm/s²."""
    return BodyForce(tuple(density * component for component in acceleration), region)


def centrifugal(density: float, rate: float, axis: int, region: str | None = None) -> BodyForce:
    """Return the body force of rotation at `rate` (rad/s) about a coordinate axis: 0 x, 1 y, 2 z."""

    def value(*places: np.ndarray) -> np.ndarray:
        return np.array(
            [np.zeros_like(x) if number == axis else density * rate**2 * x for number, x in enumerate(places)]
        )

    return BodyForce(value, region)


def scaled(load: Load, factor: float) -> Load:
    """Return a load times a factor."""
    if isinstance(load, BearingLoad | PointForce):
        return replace(load, force=_times(load.force, factor))
    if isinstance(load, Resultant):
        return replace(load, force=_times(load.force, factor), moment=_times(load.moment, factor))
    return replace(load, value=_times(load.value, factor))


def _times(value: Any, factor: float) -> Any:
    """Return a number, a vector or a field times a factor."""
    if callable(value):
        return lambda *places: factor * value(*places)
    return tuple(factor * part for part in value) if isinstance(value, tuple) else factor * value


def values_at(value: float | Vector | FieldFunction, places: np.ndarray) -> np.ndarray:
    """Return a number, a vector or a field at places (D, ...)."""
    if callable(value):
        return np.asarray(value(*places))
    return np.asarray(np.multiply.outer(value, np.ones_like(places[0])))


def rigid_motions(arm: np.ndarray) -> np.ndarray:
    """Return the rigid motions (motions, D, ...) at places relative to a point: shifts, then turns."""
    none = np.zeros_like(arm[0])
    shifts = [[none + (c == d) for c in range(len(arm))] for d in range(len(arm))]
    if len(arm) == 1:
        return np.array(shifts)
    if len(arm) == 2:
        return np.array([*shifts, [-arm[1], arm[0]]])
    x, y, z = arm
    return np.array([*shifts, [none, -z, y], [z, none, -x], [-y, x, none]])
