"""Quantities of a table: its columns, with what is known of their kind."""

from collections.abc import Mapping
from typing import Annotated, get_args

from convergence.bind import bind
from convergence.dimensions import Bounds, Units
from convergence.errors import Fault, InputError, nearest
from convergence.quantity_tables import ASSUMED_TOLERANCE, TOLERANCE_KEYS, place_of, read_tolerances
from convergence.results import Kind, Ladder, Quantity
from convergence.stated_units import LENGTHS
from convergence.tomlfile import TomlFile

Degree = Annotated[int, Bounds(1, 10, closed=True)]


def column(
    *,
    column: Annotated[str | None, "the table's column, the quantity's name if not given"] = None,
    kind: Annotated[Kind | None, "what the numbers are; lengths are displacements if not given"] = None,
    degree: Annotated[Degree | None, "polynomial degree of the elements they come from"] = None,
) -> tuple[str | None, Kind | None, int | None]:
    """Return what a study says of a column."""
    return column, kind, degree


def _kind(said: Kind | None, unit: str) -> tuple[Kind, bool]:
    """Return the kind of a column, and whether only its unit tells it.

    A length that a model answers is a displacement. A stress may be one at a point or a peak, a force a
    reaction or a resultant: no unit tells.
    """
    if said is None and unit in LENGTHS:
        return "displacement", True
    return said or "unknown", False


def formal_order(kind: Kind, degree: int | None) -> float | None:
    """Return the order of theory for a smooth solution, None where kind or degree is not known.

    Energy and reactions 2p, displacements p + 1, stresses, what is integrated from them and rotations p
    (textbook results), stress intensities 1 as the crack itself limits them; a program that recovers its
    stresses well can be better.
    """
    if degree is None or kind == "unknown":
        return None
    orders = {"energy": 2 * degree, "reaction": 2 * degree, "displacement": degree + 1, "intensity": 1}
    return float(orders.get(kind, degree))


def read_column(
    file: TomlFile, name: str, units: Units, found: Mapping[str, str]
) -> tuple[Quantity | None, str, list[Fault]]:
    """Read one quantity of a table study; `found` is the unit per column. Return its column too."""
    table, place = file.data["quantities"][name], place_of(file, name)
    accepted, faults = read_tolerances(file, name, units)
    arguments, more = bind(column, table, where=place, units=units, also=TOLERANCE_KEYS)
    faults += more
    if faults:
        return None, "", faults
    source, said, degree = column(**arguments)
    if (source or name) not in found:
        key = "column" if source else ""
        return None, "", [Fault(place(key), "no such column", nearest(source or name, found), source or name)]
    kind, assumed_kind = _kind(said, found[source or name])
    quantity = Quantity(
        name=name,
        kind=kind,
        unit=found[source or name],
        degree=degree,
        formal_order=formal_order(kind, degree),
        relative=accepted.relative,
        absolute=accepted.absolute,
        assumed_tolerance=accepted.assumed,
        assumed_kind=assumed_kind,
        description=f"column {source or name}",
    )
    return quantity, source or name, []


def bare_quantities(
    ladder: Ladder,
    found: Mapping[str, str],
    *,
    kinds: Mapping[str, Kind],
    degree: int | None,
    relative: float | None,
) -> tuple[Quantity, ...]:
    """Return a quantity for every column of a bare table; NAME.x and NAME.y are the place of NAME."""
    columns = list(dict.fromkeys(name for level in ladder.levels for name in level.values))
    quantities = []
    for name in columns:
        if name.endswith((".x", ".y")) and name[:-2] in columns:
            continue
        unit = found.get(name, "")
        kind, assumed_kind = _kind(kinds.get(name), unit)
        quantities.append(
            Quantity(
                name=name,
                kind=kind,
                unit=unit,
                degree=degree,
                formal_order=formal_order(kind, degree),
                relative=ASSUMED_TOLERANCE if relative is None else relative,
                assumed_tolerance=relative is None,
                assumed_kind=assumed_kind,
            )
        )
    return tuple(quantities)


def kind_of(name: str, word: str) -> Kind:
    """Return a kind by its name; `InputError` names the nearest one."""
    kinds: dict[str, Kind] = {kind: kind for kind in get_args(Kind)}
    if word not in kinds:
        raise InputError([Fault(f"--kind {name}", "unknown kind", nearest(word, kinds), word)])
    return kinds[word]
