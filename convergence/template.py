"""A commented study file that runs, made from the signatures it will be checked against."""

import json
import re
from collections.abc import Callable, Iterable, Mapping
from typing import Any

from convergence import rooms
from convergence.bind import REQUIRED, Parameter, parameters
from convergence.dimensions import FORCE, MOMENT, STRESS, SYSTEMS
from convergence.fem.material import material, material_names
from convergence.ladder_spec import ladder
from convergence.study_head import DEFAULT_SYSTEM, head

WIDTH = 30
LOADS = (FORCE, STRESS, MOMENT)


def study_template(model: str) -> str:
    """Return the text of a study file; `InputError` where there is no such model."""
    function = rooms.find("models", model)
    materials = material_names(function)
    about = rooms.shelf("models")[model]
    wanted: Mapping[str, Mapping[str, Any]] = rooms.beside("models", model, "QUANTITIES") or {}
    lines = [
        f"# {about}",
        f"# Run it with: meshassay run {model}.toml",
        "",
        *above_tables(about.rstrip(".")),
        *section("model", function, given=materials, first={"name": model}),
        *_cases(parameters(function, materials)),
        *(row for name in materials for row in section(name, material)),
        *section("ladder", ladder, first={"divisions": 2}),
        "",
        "# A second ladder of the same model with other cells narrows the intervals where the two meet.",
        "# [companion]",
        '# shape = "triangle"',
        "",
        "# A quantity is sound when its interval lies inside the tolerance.",
        f"# Measures: {', '.join(rooms.names('quantities'))}.",
    ]
    for name, table in wanted.items():
        lines += ["", f"[quantities.{_key(name)}]"]
        lines += [f"{key} = {toml(value)}" for key, value in table.items()]
    return "\n".join(lines) + "\n"


def section(
    name: str, function: Callable[..., Any], given: Iterable[str] = (), first: Mapping[str, Any] | None = None
) -> list[str]:
    """Return a table with every parameter, those in `first` on top with the values given there."""
    return ["", f"[{name}]", *_keys(function, given, first or {})]


def above_tables(title: str) -> list[str]:
    """Return what stands above the tables of a study."""
    return _keys(head, (), {"title": title, "units": DEFAULT_SYSTEM})


def _keys(function: Callable[..., Any], given: Iterable[str], first: Mapping[str, Any]) -> list[str]:
    found = {parameter.name: parameter for parameter in parameters(function, given)}
    lines = []
    for key, value in first.items():
        lines.append(line(f"{key} = {toml(value)}", _about(found.pop(key)) if key in found else ""))
    return lines + [_parameter(parameter) for parameter in found.values()]


def _cases(known: Iterable[Parameter]) -> list[str]:
    """Return a load case that is commented out, nothing where the model has no load that could be halved."""
    load = next((each for each in known if each.dimension in LOADS and each.default), None)
    if load is None:
        return []
    return [
        "",
        "# Load cases: each says what differs from [model], loads only. They are solved together.",
        "# [cases.half_load]",
        f"# {load.name} = {toml(0.5 * load.default)}",
    ]


def _parameter(parameter: Parameter) -> str:
    if parameter.default in (None, "", REQUIRED):
        state = "to be filled in" if parameter.default is REQUIRED else "optional"
        return line(f"# {parameter.name} =", f"{state}: {_about(parameter)}")
    return line(f"{parameter.name} = {toml(parameter.default)}", _about(parameter))


def _about(parameter: Parameter) -> str:
    wanted = parameter.wanted(SYSTEMS[DEFAULT_SYSTEM])
    return f"{parameter.doc}; {wanted}" if parameter.doc else wanted


def line(text: str, comment: str) -> str:
    """Return a line of a study with its comment, those of a table one below the other."""
    return f"{text:<{WIDTH}}  # {comment}" if comment else text


def toml(value: Any) -> str:
    """Return a value as TOML writes it."""
    if isinstance(value, tuple | list):
        return f"[{', '.join(toml(item) for item in value)}]"
    return json.dumps(value, ensure_ascii=False) if isinstance(value, str | bool) else repr(value)


def _key(name: str) -> str:
    return name if re.fullmatch(r"[A-Za-z0-9_-]+", name) else toml(name)
