"""Load cases of a model study: each [cases.NAME] overrides loads of [model], the equations stay the same."""

from collections.abc import Callable, Mapping
from typing import Any

from convergence.bind import parameters
from convergence.dimensions import Units
from convergence.errors import Unsuitable
from convergence.fem.alike import unlike
from convergence.fem.material import Material, material_names
from convergence.fem.problem import Problem
from convergence.sections import Sections

SECTION = "cases"


def read_cases(
    sections: Sections,
    function: Callable[..., Problem],
    arguments: Mapping[str, Any],
    materials: Mapping[str, Material],
) -> dict[str, dict[str, Any]]:
    """Return the arguments of the model in every case, in the order of the file; none without [cases].

    `arguments` are those of [model], which are good. Faults of the cases are kept in `sections`.
    """
    if SECTION not in sections.file.data:
        return {}
    names = [name for name in sections.named(SECTION, "case") if _is_first(sections, name)]
    if sections.file.data[SECTION] == {}:
        sections.fault((SECTION,), "no case", "add [cases.NAME] with the loads that differ from [model]")
    found = {name: _case(sections, name, function, arguments, materials) for name in names}
    return {name: case for name, case in found.items() if case is not None}


def loads_of(
    function: Callable[..., Problem],
    usual: Mapping[str, Any],
    cases: Mapping[str, Mapping[str, Any]],
    units: Units,
) -> dict[str, str]:
    """Return the arguments of every case that are not the same in all, e.g. "tip_shear = -3 MPa"."""
    own: dict[str, list[str]] = {name: [] for name in cases}
    for parameter in parameters(function, material_names(function)):
        values = {name: case[parameter.name] for name, case in cases.items()}
        if all(value == usual[parameter.name] for value in values.values()):
            continue
        unit = units.label(parameter.dimension) if parameter.dimension else ""
        for name, value in values.items():
            shown = f"{value:.12g}" if isinstance(value, float) else str(value)
            own[name].append(f"{parameter.name} = {shown} {unit}".rstrip())
    return {name: ", ".join(loads) or "as in [model]" for name, loads in own.items()}


def _is_first(sections: Sections, name: str) -> bool:
    """Keep a fault where an earlier case has the name but for capitals: it may have the same folder."""
    first = next(other for other in sections.table(SECTION) if other.lower() == name.lower())
    if first != name:
        sections.fault((SECTION, name), f"the name of case {first!r} but for capitals", "take another", name)
    return first == name


def _case(
    sections: Sections,
    name: str,
    function: Callable[..., Problem],
    base: Mapping[str, Any],
    materials: Mapping[str, Material],
) -> dict[str, Any] | None:
    """Return the arguments of one case, None where it has faults."""
    own = sections.table(SECTION)[name]
    said = {key: value for key, value in sections.table("model").items() if key != "name"}
    arguments = sections.bound(function, {**said, **own}, SECTION, name, given=materials)
    if arguments is None:
        return None
    problem = sections.called(function, {**arguments, **materials}, SECTION, name)
    if problem is None:
        return None
    usual = function(**base, **materials)
    what = unlike(usual, problem)
    if not what:
        return arguments
    changes = {key: _changed(function, {**base, key: arguments[key]}, materials, usual) for key in own}
    if not any(changes.values()):
        changes = {"": what}
    for key, change in changes.items():
        if change:
            told = f"changes {change}, not only the loads"
            sections.fault((SECTION, name, key), told, "make it a study of its own", own.get(key))
    return None


def _changed(
    function: Callable[..., Problem],
    arguments: Mapping[str, Any],
    materials: Mapping[str, Material],
    usual: Problem,
) -> str:
    """Return what the arguments change but loads, "" where the model refuses them."""
    try:
        return unlike(usual, function(**arguments, **materials))
    except Unsuitable:
        return ""
