"""A model of this program with its arguments, and the quantities to read on its ladders.

Short forms make a reading of each measure of the quantities' room.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, Literal

from convergence.fem.material import Material
from convergence.fem.stress import Component
from convergence.quantities._place import Recovery

STEEL = Material(210_000.0, 0.3, expansion=1.2e-5)
ALUMINIUM = Material(70_000.0, 0.33, expansion=2.3e-5)
BRONZE = Material(110_000.0, 0.34, expansion=1.8e-5)
RUBBER = Material(6.0, 0.49)

Place = tuple[float, ...] | str


@dataclass(frozen=True)
class MappedReading:
    """A member of the quantities' room and its arguments; `limit` where a closed form is at hand."""

    measure: str
    arguments: Mapping[str, Any] = field(default_factory=dict)
    limit: float | None = None

    @property
    def label(self) -> str:
        return " ".join([self.measure, *(str(value) for value in self.arguments.values())])


@dataclass(frozen=True)
class MappedCase:
    """A problem by its model and arguments, its coarsest mesh and what is read.

    `divisions` are those of the coarsest mesh. `corners` are points besides the singular ones towards which
    the mesh is refined that gives the limits where there is no closed form. `short` leaves ladders out to
    save time.
    """

    family: str
    name: str
    model: str
    readings: tuple[MappedReading, ...]
    arguments: Mapping[str, Any] = field(default_factory=dict)
    divisions: int = 1
    corners: tuple[str, ...] = ()
    short: bool = False


def energy() -> MappedReading:
    """Return the strain energy of the part."""
    return MappedReading("strain_energy")


def displacement(at: Place, component: str) -> MappedReading:
    """Return a displacement at a place."""
    return MappedReading("displacement", {"at": at, "component": component})


def mean_displacement(boundary: str, component: str) -> MappedReading:
    """Return the mean displacement of a boundary."""
    return MappedReading("mean_displacement", {"boundary": boundary, "component": component})


def rotation_of(boundary: str) -> MappedReading:
    """Return the rotation of a boundary of a plane part."""
    return MappedReading("rotation", {"boundary": boundary})


def rotation_at(at: Place) -> MappedReading:
    """Return the rotation at a place of a plane part."""
    return MappedReading("rotation", {"at": at})


def stress(at: Place, component: Component, recovery: Recovery = "recovered") -> MappedReading:
    """Return a stress at a place."""
    return MappedReading("stress", {"at": at, "component": component, "recovery": recovery})


def peak(component: Component, recovery: Recovery = "recovered") -> MappedReading:
    """Return the largest stress of all."""
    return MappedReading("peak_stress", {"component": component, "recovery": recovery})


def peak_on(boundary: str, component: Component, recovery: Recovery = "recovered") -> MappedReading:
    """Return the largest stress on a boundary."""
    return MappedReading("peak_stress", {"component": component, "boundary": boundary, "recovery": recovery})


def peak_near(
    near: Place, radius: float, component: Component, recovery: Recovery = "recovered"
) -> MappedReading:
    """Return the largest stress around a place."""
    return MappedReading(
        "peak_stress", {"component": component, "near": near, "radius": radius, "recovery": recovery}
    )


def mean_stress(start: Place, end: Place, component: Component) -> MappedReading:
    """Return the mean stress along a line."""
    return MappedReading("mean_stress", {"start": start, "end": end, "component": component})


def linearised(
    start: Place,
    end: Place,
    component: Component,
    share: Literal["membrane", "bending", "membrane_plus_bending"],
) -> MappedReading:
    """Return a linearised stress of a line."""
    arguments = {"start": start, "end": end, "component": component, "share": share}
    return MappedReading("linearised_stress", arguments)


def section_force(start: Place, end: Place, component: str, recovery: Recovery) -> MappedReading:
    """Return the force through a section of a plane part."""
    arguments = {"start": start, "end": end, "component": component, "recovery": recovery}
    return MappedReading("section_force", arguments)


def section_moment(start: Place, end: Place) -> MappedReading:
    """Return the moment through a section of a plane part."""
    return MappedReading("section_moment", {"start": start, "end": end})


def reaction(support: str, component: str) -> MappedReading:
    """Return the force of a support."""
    return MappedReading("reaction_force", {"support": support, "component": component})


def around(near: Place, radius: float, component: Component) -> MappedReading:
    """Return the mean stress around a place."""
    return MappedReading("region_stress", {"component": component, "near": near, "radius": radius})
