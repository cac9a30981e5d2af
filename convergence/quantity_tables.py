"""What every [quantities.NAME] table of a study has: a name and the accepted error."""

import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Annotated, Literal

from convergence.bind import bind, parameters
from convergence.dimensions import RATIO, Bounds, Units
from convergence.errors import Fault
from convergence.tomlfile import TomlFile

Thing = Literal["quantity", "case", "boundary", "support", "load"]
EXAMPLES = {
    "quantity": "peak_stress",
    "case": "side_pull",
    "boundary": "bore",
    "support": "wall",
    "load": "pull",
}
KEEPERS = {"quantity": "ladder", "case": "folder of a run", "boundary": "mesh"}
RESERVED = {
    "quantity": ("h", "cells", "nodes", "dofs", "seconds", "memory"),
    "case": ("levels", "figures", "companion"),
    "boundary": ("rest",),
}
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


def name_fault(name: str, where: str, thing: Thing) -> Fault | None:
    """Return what is wrong with the name of a table; that of a case is also the name of a folder."""
    right = f"use letters, digits, _ and -, such as {EXAMPLES[thing]}"
    plain = thing == "quantity" or re.fullmatch(r"[\w-]+", name)
    if not name.strip() or "." in name or name != name.strip() or not plain:
        return Fault(where, f"not a name for a {thing}", right, name)
    if name.lower() in RESERVED.get(thing, ()):
        return Fault(where, f"a name the {KEEPERS[thing]} keeps for itself", right, name)
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
