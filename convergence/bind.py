"""The signature is the schema: a table of a study file becomes keyword arguments, checked."""

import inspect
import math
import types
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, replace
from typing import Annotated, Any, Literal, Union, get_args, get_origin, get_type_hints

from convergence.dimensions import Bounds, Dimension, Names, OnPart, Units
from convergence.errors import Fault, nearest

Form = Literal["number", "whole number", "text", "true or false", "point", "point of a solid"]

REQUIRED: Any = inspect.Parameter.empty
_FORMS: dict[Any, Form] = {float: "number", int: "whole number", str: "text", bool: "true or false"}


@dataclass(frozen=True)
class Parameter:
    """What a keyword accepts. `forms` are the alternatives, `many` a list of them of any length.

    `names` is the kind of thing a text names ("boundary" ...), `on_part` whether a place must lie on the
    part; `default` is in mm, N, MPa.
    """

    name: str
    forms: tuple[Form, ...] = ()
    dimension: Dimension | None = None
    bounds: Bounds | None = None
    choices: tuple[Any, ...] = ()
    names: str = ""
    on_part: bool = False
    doc: str = ""
    optional: bool = False
    many: bool = False
    default: Any = REQUIRED

    def wanted(self, units: Units) -> str:
        """Say what is allowed, e.g. "a number [mm], 0 < value"."""
        if self.choices:
            return f"one of {', '.join(_shown(choice) for choice in self.choices)}"
        unit = units.label(self.dimension) if self.dimension else ""
        unit = f" [{unit}]" if unit else ""
        words = {
            "number": f"a number{unit}",
            "whole number": f"a whole number{unit}",
            "text": f"a text that names a {self.names}" if self.names else "a text",
            "true or false": "true or false",
            "point": f"a point [x, y]{unit}",
            "point of a solid": "[x, y, z] in a solid",
        }
        allowed = " or ".join(words[form] for form in self.forms)
        bounds = f", {self.bounds}" if self.bounds else ""
        return f"a list, each {allowed}{bounds}" if self.many else f"{allowed}{bounds}"

    def default_in(self, units: Units) -> Any:
        """Return the default in the study's units."""
        return _converted(self.default, self.dimension, units)


def parameters(function: Callable[..., Any], given: Iterable[str] = ()) -> list[Parameter]:
    """Return the keyword-only parameters of a function, without those the caller gives itself."""
    hints = get_type_hints(function, include_extras=True)
    found = []
    for parameter in inspect.signature(function).parameters.values():
        if parameter.kind is parameter.KEYWORD_ONLY and parameter.name not in set(given):
            read = _read(hints[parameter.name], Parameter(parameter.name))
            found.append(replace(read, default=parameter.default))
    return found


def bind(
    function: Callable[..., Any],
    table: Mapping[str, Any],
    *,
    where: Callable[[str], str],
    units: Units,
    given: Iterable[str] = (),
    also: Iterable[str] = (),
) -> tuple[dict[str, Any], list[Fault]]:
    """Return keyword arguments for `function`, defaults included, and every fault of the table.

    `where` gives the place of a key in the file, of the table itself for "". Defaults are converted
    to `units`; numbers of the table are taken as they are. Faulty keys are not among the arguments.
    The caller gives the parameters `given` itself, and reads the keys `also` itself.
    """
    known = {parameter.name: parameter for parameter in parameters(function, given)}
    allowed = {*known, *also}
    faults = [Fault(where(key), "unknown key", nearest(key, allowed)) for key in table if key not in allowed]
    arguments: dict[str, Any] = {}
    for name, parameter in known.items():
        if name in table:
            problem = _problem(table[name], parameter)
            if problem:
                faults.append(Fault(where(name), problem, _right(table[name], parameter, units), table[name]))
            else:
                arguments[name] = _taken(table[name], parameter)
        elif parameter.default is REQUIRED:
            right = f"add {name} = {parameter.wanted(units)}"
            faults.append(Fault(where(""), f"the key {name!r} is missing", right))
        else:
            arguments[name] = parameter.default_in(units)
    return arguments, faults


def _read(annotation: Any, found: Parameter) -> Parameter:
    """Add what an annotation says to what was found so far."""
    origin, parts = get_origin(annotation), get_args(annotation)
    if origin is Annotated:
        found = _read(parts[0], found)
        for note in parts[1:]:
            found = _noted(note, found)
        return found
    if origin in (Union, types.UnionType):
        for part in parts:
            found = replace(found, optional=True) if part is type(None) else _read(part, found)
        return found
    if origin is Literal:
        return replace(found, choices=found.choices + parts)
    if origin is tuple and parts[-1] is ...:
        return replace(_read(parts[0], found), many=True)
    if origin is tuple and len(parts) in (2, 3):
        return replace(found, forms=(*found.forms, "point" if len(parts) == 2 else "point of a solid"))
    if annotation in _FORMS:
        return replace(found, forms=(*found.forms, _FORMS[annotation]))
    raise TypeError(f"parameter {found.name!r}: a study file cannot give a value of type {annotation}")


def _noted(note: Any, found: Parameter) -> Parameter:
    if isinstance(note, Dimension):
        return replace(found, dimension=note)
    if isinstance(note, Bounds):
        return replace(found, bounds=note)
    if isinstance(note, OnPart):
        return replace(found, on_part=True)
    if isinstance(note, Names):
        return replace(found, names=note.kind)
    return replace(found, doc=note) if isinstance(note, str) else found


def _problem(value: Any, parameter: Parameter) -> str:
    """Say what is wrong with a value, "" where nothing is."""
    if parameter.many:
        if not isinstance(value, list):
            return "not a list"
        single = replace(parameter, many=False)
        return next((problem for item in value if (problem := _problem(item, single))), "")
    if parameter.choices:
        known = any(type(value) is type(choice) and value == choice for choice in parameter.choices)
        return "" if known else "not one of the choices"
    numbers = value if isinstance(value, list) else [value]
    if not all(_finite(number) for number in numbers):
        return "not a finite number"
    if not any(_fits(value, form) for form in parameter.forms):
        return f"not a {' or a '.join(parameter.forms)}".replace("a true", "true")
    if parameter.bounds and not all(parameter.bounds.admits(n) for n in numbers if _fits(n, "number")):
        return "out of range"
    return ""


def _finite(value: Any) -> bool:
    try:
        return not isinstance(value, int | float) or math.isfinite(value)
    except OverflowError:
        return False


def _fits(value: Any, form: Form) -> bool:
    if form in ("point", "point of a solid"):
        size = 2 if form == "point" else 3
        return isinstance(value, list) and len(value) == size and all(_fits(v, "number") for v in value)
    if form == "number":
        return isinstance(value, int | float) and not isinstance(value, bool)
    if form == "whole number":
        return isinstance(value, int) and not isinstance(value, bool)
    return isinstance(value, bool if form == "true or false" else str)


def _right(value: Any, parameter: Parameter, units: Units) -> str:
    texts = [choice for choice in parameter.choices if isinstance(choice, str)]
    guess = nearest(value, texts) if texts and isinstance(value, str) else ""
    return guess if guess.startswith("did you mean") else f"give {parameter.wanted(units)}"


def _taken(value: Any, parameter: Parameter) -> Any:
    if isinstance(value, list):
        return tuple(_taken(item, parameter) for item in value)
    whole = "whole number" in parameter.forms or isinstance(value, bool)
    return float(value) if isinstance(value, int) and not whole and not parameter.choices else value


def _converted(value: Any, dimension: Dimension | None, units: Units) -> Any:
    if isinstance(value, tuple):
        return tuple(_converted(item, dimension, units) for item in value)
    return units.from_millimetres(value, dimension) if dimension and _fits(value, "number") else value


def _shown(choice: Any) -> str:
    return f'"{choice}"' if isinstance(choice, str) else str(choice)
