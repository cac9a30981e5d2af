"""What every [quantities.NAME] table of a study has: a name and the accepted error."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Annotated

from convergence.bind import bind, parameters
from convergence.dimensions import RATIO, Bounds, Units
from convergence.errors import Fault
from convergence.tomlfile import TomlFile

RESERVED = ("h", "cells", "nodes", "dofs", "seconds")
ASSUMED_TOLERANCE = 0.05

Tolerance = Annotated[float, RATIO, Bounds(low=0.0)]


@dataclass(frozen=True)
class Accepted:
    """What a quantity may be off by; `assumed` where the study does not say."""

    relative: float | None
    absolute: float | None
    assumed: bool = False


def tolerances(
    *,
    relative_tolerance: Annotated[Tolerance | None, "accepted error relative to the value"] = None,
    absolute_tolerance: Annotated[Tolerance | None, "accepted error in the quantity's unit"] = None,
) -> Accepted:
    """Return what is accepted: 5 % where nothing is said."""
    if relative_tolerance is None and absolute_tolerance is None:
        return Accepted(ASSUMED_TOLERANCE, None, assumed=True)
    return Accepted(relative_tolerance, absolute_tolerance)


TOLERANCE_KEYS = tuple(parameter.name for parameter in parameters(tolerances))


def name_fault(name: str, where: str) -> Fault | None:
    """Return what is wrong with a quantity's name."""
    right = "use letters, digits, _ and -, such as peak_stress"
    if not name.strip() or "." in name or name != name.strip():
        return Fault(where, "not a name for a quantity", right, name)
    if name.lower() in RESERVED:
        return Fault(where, "a name the ladder keeps for itself", right, name)
    return None


def place_of(file: TomlFile, name: str) -> Callable[[str], str]:
    """Return where a key of [quantities.NAME] stands; the table where it has no such key."""
    known = file.data["quantities"][name]
    return lambda key: file.where("quantities", name, key if key in known else "")


def read_tolerances(file: TomlFile, name: str, units: Units) -> tuple[Accepted, list[Fault]]:
    """Read what [quantities.NAME] accepts."""
    table = file.data["quantities"][name]
    said = {key: table[key] for key in TOLERANCE_KEYS if key in table}
    arguments, faults = bind(tolerances, said, where=place_of(file, name), units=units)
    return tolerances(**arguments), faults
