"""Quantities of a model study: a measure with its arguments, checked against the names of the problem."""

import functools
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from typing import Any

import numpy as np

from convergence import rooms
from convergence.bind import bind, parameters
from convergence.dimensions import LENGTH, Units, returned_dimension
from convergence.errors import Fault, Unsuitable, listing, nearest
from convergence.fem.problem import Problem
from convergence.quantity_tables import TOLERANCE_KEYS, place_of, read_tolerances
from convergence.results import Quantity
from convergence.tomlfile import TomlFile


@dataclass(frozen=True)
class Measured:
    """A quantity of a model study, and the arguments of its measure, for the fingerprint."""

    quantity: Quantity
    measure: str
    arguments: Mapping[str, Any] = field(default_factory=dict)


def read_measured(
    file: TomlFile,
    name: str,
    degree: int,
    shape: str,
    units: Units,
    problem: Problem | None,
) -> tuple[Measured | None, list[Fault]]:
    """Read one quantity of a model study; `problem` is None where it cannot be built."""
    table, place = file.data["quantities"][name], place_of(file, name)
    accepted, faults = read_tolerances(file, name, units)
    measure, known_measures = table.get("measure"), rooms.names("quantities")
    if measure is None:
        right = f"add measure = one of {listing(known_measures)}"
        return None, [*faults, Fault(place(""), "the key 'measure' is missing", right)]
    if measure not in known_measures:
        right = nearest(str(measure), known_measures)
        return None, [*faults, Fault(place("measure"), "unknown measure", right, measure)]
    function = rooms.find("quantities", measure)
    also = ("measure", *TOLERANCE_KEYS)
    arguments, more = bind(function, table, where=place, units=units, also=also)
    faults += more + (misplaced(function, arguments, place, problem) if problem else [])
    if faults:
        return None, faults
    try:
        order = rooms.beside("quantities", measure, "formal_order")(degree, shape, arguments)
    except Unsuitable as error:
        return None, [Fault(place(key), "unsuitable", right, found) for key, found, right in error.problems]
    dimension = returned_dimension(function)
    said = ", ".join(f"{key} {value}" for key, value in arguments.items() if value is not None)
    quantity = Quantity(
        name=name,
        kind=rooms.beside("quantities", measure, "KIND"),
        unit=units.label(dimension) if dimension else "",
        degree=degree,
        formal_order=order,
        relative=accepted.relative,
        absolute=accepted.absolute,
        assumed_tolerance=accepted.assumed,
        measure=functools.partial(function, **arguments),
        description=f"{measure} ({said})" if said else measure,
    )
    return Measured(quantity, measure, arguments), []


def misplaced(
    function: Callable[..., Any],
    arguments: Mapping[str, Any],
    place: Callable[[str], str],
    problem: Problem,
    given: Iterable[str] = (),
) -> list[Fault]:
    """Return a fault for every name the problem has not, and every place outside the part.

    The caller gives the parameters `given` itself.
    """
    faults = []
    names = problem.names()
    for parameter in parameters(function, given):
        value = arguments.get(parameter.name)
        if isinstance(value, str) and value not in names.get(parameter.names, (value,)):
            what = f"the model has no such {parameter.names}"
            faults.append(Fault(place(parameter.name), what, nearest(value, names[parameter.names]), value))
        if isinstance(value, tuple) and "point" in parameter.forms:
            if len(value) != problem.part.dimension:
                right = f"[{', '.join('xyz'[: problem.part.dimension])}]"
                what = f"a {'point' if parameter.dimension == LENGTH else 'vector'} of another dimension"
                faults.append(Fault(place(parameter.name), what, right, value))
            elif parameter.on_part and not problem.part.contains(np.array(value)[:, None])[0]:
                faults.append(Fault(place(parameter.name), "outside the part", "a place on the part", value))
    return faults
