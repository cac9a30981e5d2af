"""The columns of a table of forces: recognised by their names, their units brought to one."""

import re
from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass

from convergence.errors import Fault, InputError, listing, nearest
from convergence.stated_units import FORCES, LENGTHS, MOMENTS

FORCE, MOMENT, POINT = ("fx", "fy", "fz"), ("mx", "my", "mz"), ("x", "y", "z")
NUMBERS = (*FORCE, *MOMENT, *POINT)
KNOWN = ("what", "name", "case", *NUMBERS)
ALIKE = {
    **{f"force{axis}": f"f{axis}" for axis in POINT},
    **{f"moment{axis}": f"m{axis}" for axis in POINT},
    **dict.fromkeys(("type", "kind"), "what"),
    **dict.fromkeys(("loadcase", "lc"), "case"),
    **dict.fromkeys(("label", "node", "support"), "name"),
    **dict.fromkeys(("m", "moment"), "mz"),
}


@dataclass(frozen=True)
class ForceColumns:
    """The cells and headers of each known column, the factor to the common units, and these units."""

    cells: Mapping[str, Sequence[str]]
    headers: Mapping[str, str]
    factors: Mapping[str, float]
    force_unit: str
    length_unit: str
    unused: tuple[str, ...]

    @property
    def solid(self) -> bool:
        return not {"fz", "mx", "my", "z"}.isdisjoint(self.cells)


def force_columns(columns: Mapping[str, Sequence[str]], units: Mapping[str, str], where: str) -> ForceColumns:
    """Return what is known of the columns of a table; `InputError` has every fault of its header."""
    headers: dict[str, str] = {}
    faults, unused = [], []
    for header in columns:
        plain = re.sub(r"[\s_.-]", "", header.casefold())
        name = ALIKE.get(plain, plain)
        if name not in KNOWN:
            unused.append(header)
        elif name in headers:
            what = f"the columns {headers[name]!r} and {header!r} say the same"
            faults.append(Fault(where, what, "keep one of them"))
        else:
            headers[name] = header
    faults += _missing(headers, unused, where)
    stated = {name: units[header] for name, header in headers.items() if name in NUMBERS}
    faults += _unit_faults(stated, headers, where)
    if faults:
        raise InputError(faults)
    cells = {name: columns[header] for name, header in headers.items()}
    return ForceColumns(cells, headers, *_common(stated), tuple(unused))


def _missing(headers: Mapping[str, str], unused: Sequence[str], where: str) -> Iterator[Fault]:
    if "what" not in headers:
        right = (
            f"add a column 'what' with load or reaction in each row; found: {listing([*headers, *unused])}"
        )
        yield Fault(where, "no column says what a row is", right)
    if headers.keys().isdisjoint((*FORCE, *MOMENT)):
        right = (
            f"name the columns {', '.join(FORCE)}, {', '.join(MOMENT)}; found: {listing([*headers, *unused])}"
        )
        yield Fault(where, "no column of a force or a moment", right)


def _meaning(name: str) -> tuple[str, Collection[str], list[str]]:
    """Return what a column is, all units of that, and those to name in a message."""
    if name in MOMENT:
        return "moment", MOMENTS, [f"{force} {length}" for force in FORCES for length in LENGTHS]
    return ("force", FORCES, list(FORCES)) if name in FORCE else ("length", LENGTHS, list(LENGTHS))


def _unit_faults(stated: Mapping[str, str], headers: Mapping[str, str], where: str) -> Iterator[Fault]:
    some = any(stated.values())
    for name, unit in stated.items():
        place, (what, known, named) = f"{where}: column {headers[name]!r}", _meaning(name)
        if some and not unit:
            yield Fault(place, "no unit, though other columns have one", f"write e.g. {name} [{named[0]}]")
        elif unit and unit not in known:
            yield Fault(place, f"not a unit of a {what}", nearest(unit, named), unit)


def _common(stated: Mapping[str, str]) -> tuple[dict[str, float], str, str]:
    """Return the factor of each column to the first unit of force and the first of length, and both."""
    if not any(stated.values()):
        return dict.fromkeys(stated, 1.0), "", ""
    moments = {name: MOMENTS[unit] for name, unit in stated.items() if name in MOMENT}
    forces = [unit for name, unit in stated.items() if name in FORCE] + [f for f, _ in moments.values()]
    lengths = [unit for name, unit in stated.items() if name in POINT] + [at for _, at in moments.values()]
    force, length = forces[0], lengths[0] if lengths else ""
    factors = {}
    for name, unit in stated.items():
        if name in moments:
            own_force, own_length = moments[name]
            factors[name] = FORCES[own_force] / FORCES[force] * (LENGTHS[own_length] / LENGTHS[length])
        elif name in FORCE:
            factors[name] = FORCES[unit] / FORCES[force]
        else:
            factors[name] = LENGTHS[unit] / LENGTHS[length]
    return factors, force, length
