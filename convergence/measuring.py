"""What a solution leaves in its level: a number for each quantity, and the records of the checks."""

from collections.abc import Collection
from typing import Any

from convergence import rooms
from convergence.dimensions import Located
from convergence.errors import Fault, InputError, Unsuitable
from convergence.fem.solution import Solution
from convergence.results import Quantity


def measured(quantities: Collection[Quantity], solution: Solution, file: str) -> dict[str, float]:
    """Return the numbers of all quantities; InputError with the faults of all that the solution refuses.

    `file` is the name of the study, for the faults.
    """
    values: dict[str, float] = {}
    faults = []
    for quantity in quantities:
        assert quantity.measure is not None
        try:
            values |= as_numbers(quantity.name, quantity.measure(solution))
        except Unsuitable as error:
            where = f"{file}: quantities.{quantity.name}"
            faults += [
                Fault(f"{where}.{key}", "unsuitable", right, found) for key, found, right in error.problems
            ]
    if faults:
        raise InputError(faults)
    return values


def as_numbers(name: str, found: Any) -> dict[str, float]:
    """Return a measured value, and its place as NAME.x and so on where it has one."""
    if isinstance(found, Located):
        places = {"x": found.x, "y": found.y, "z": found.z}
        return {name: found.value, **{f"{name}.{axis}": x for axis, x in places.items() if x is not None}}
    return {name: float(found)}


def records(solution: Solution, without: Collection[str] = ()) -> dict[str, float]:
    """Return what the checks record of a solution, as CHECK.NAME."""
    return {
        f"{check}.{name}": value
        for check in rooms.names("checks")
        if check not in without
        for name, value in rooms.beside("checks", check, "record")(solution).items()
    }
