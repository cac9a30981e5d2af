"""The contract of the room of quantities, swept over its members, and tested with bad ones."""

import importlib
import inspect
import math
import re
from collections.abc import Callable, Mapping
from itertools import product
from types import ModuleType
from typing import Annotated, Any, Literal, get_args, get_origin, get_type_hints

import pytest

from convergence import rooms
from convergence.dimensions import STRESS, Dimension, Force, Located, Names, returned_dimension
from convergence.fem.solution import Solution
from convergence.results import Kind

NAMED = {"boundary", "support", "point", "region"}


def function_of(module: ModuleType) -> Any:
    return getattr(module, module.__name__.rsplit(".", 1)[-1])


def notes_of(annotation: Any) -> list[Any]:
    """Return everything noted in an annotation, inside unions too."""
    own = list(get_args(annotation)[1:]) if get_origin(annotation) is Annotated else []
    inner = () if get_origin(annotation) is Literal else get_args(annotation)
    return own + [note for part in inner for note in notes_of(part)]


def check_signature(module: ModuleType) -> None:
    """name(solution, *, ...): every other argument by keyword, annotated, with one phrase."""
    function = function_of(module)
    first, *others = inspect.signature(function).parameters.values()
    hints = get_type_hints(function, include_extras=True)
    assert first.name == "solution" and hints["solution"] is Solution
    for parameter in others:
        assert parameter.kind is inspect.Parameter.KEYWORD_ONLY, parameter.name
        notes = notes_of(hints[parameter.name])
        phrases = [note for note in notes if isinstance(note, str)]
        assert len(phrases) == 1 and phrases[0] and not phrases[0].endswith("."), parameter.name
        assert {note.kind for note in notes if isinstance(note, Names)} <= NAMED


def check_result(module: ModuleType) -> None:
    """The return annotation carries a dimension, of a float or a located value."""
    function = function_of(module)
    assert isinstance(returned_dimension(function), Dimension)
    assert get_args(get_type_hints(function, include_extras=True)["return"])[0] in (float, Located)


def check_kind(module: ModuleType) -> None:
    assert module.KIND in get_args(Kind) and module.KIND != "unknown"
    stress = returned_dimension(function_of(module)) == STRESS
    assert stress == module.KIND.endswith("_stress")


def check_order(module: ModuleType) -> None:
    """formal_order(degree, shape, arguments) is a positive number that does not fall with the degree."""
    shape = re.sub(r"[\w.]*\.", "", str(inspect.signature(module.formal_order)))
    assert shape == "(degree: int, shape: str, arguments: Mapping[str, Any]) -> float"
    default: Mapping[str, Any] = {
        name: parameter.default
        for name, parameter in inspect.signature(function_of(module)).parameters.items()
        if parameter.default is not parameter.empty
    }
    for arguments, cells in product(({}, default), ("triangle", "quadrilateral")):
        linear, quadratic = (module.formal_order(degree, cells, arguments) for degree in (1, 2))
        assert isinstance(linear, float) and isinstance(quadratic, float)
        assert 0.0 < linear <= quadratic < math.inf
        said, meant = (module.formal_order(2, cells, given) for given in ({}, default))
        assert said == meant, "defaults of the function"


def check_words(module: ModuleType) -> None:
    """The file says what it is in one line and then on what its order rests; the function what to know."""
    first, _, rest = (inspect.getdoc(module) or "").partition("\n")
    assert first.endswith(".") and len(first) < 100
    assert "order" in rest.lower()
    assert inspect.getdoc(function_of(module))


CHECKS = [check_signature, check_result, check_kind, check_order, check_words]
MEMBERS = rooms.names("quantities")


def member_module(name: str) -> ModuleType:
    return importlib.import_module(f"convergence.quantities.{name}")


def test_the_room_is_complete() -> None:
    assert {
        "displacement",
        "mean_displacement",
        "reaction_force",
        "reaction_moment",
        "strain_energy",
        "stress",
        "peak_stress",
        "section_force",
        "mean_stress",
        "section_moment",
        "cut_force",
        "cut_moment",
        "linearised_stress",
        "hot_spot_stress",
        "stress_intensity",
        "rotation",
        "region_stress",
        "work_of_load",
        "potential_energy",
    } <= set(MEMBERS)


@pytest.mark.parametrize("name", MEMBERS)
@pytest.mark.parametrize("check", CHECKS)
def test_member(check: Callable[[ModuleType], None], name: str) -> None:
    check(member_module(name))


def altered(**changes: Any) -> ModuleType:
    """Return a copy of a good member with something in it replaced."""
    good = member_module("section_force")
    bad = ModuleType("convergence.quantities.section_force", changes.pop("doc", good.__doc__))
    kept = {name: getattr(good, name) for name in ("KIND", "formal_order", "section_force")}
    bad.__dict__.update(kept | changes)
    return bad


def positional(solution: Solution, at: Annotated[str, "place"]) -> Force:
    """An argument by position."""
    return 0.0


def wordless(solution: Solution, *, at: str) -> Force:
    """An argument without a phrase."""
    return 0.0


def misnamed(solution: Solution, *, at: Annotated[str, Names("corner"), "place"]) -> Force:
    """A kind of name that no problem has."""
    return 0.0


def bare(solution: Solution) -> float:
    """No dimension."""
    return 0.0


def counted(solution: Solution) -> Annotated[int, STRESS]:
    """No float."""
    return 0


def undocumented(solution: Solution) -> Force:
    return 0.0


def falling(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    return 1.0 / degree


def whole(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    return degree


def other_default(degree: int, shape: str, arguments: Mapping[str, Any]) -> float:
    return float(degree + (arguments.get("recovery", "direct") == "recovered"))


def short(degree: int) -> float:
    return float(degree)


BAD = [
    (check_signature, altered(section_force=positional)),
    (check_signature, altered(section_force=wordless)),
    (check_signature, altered(section_force=misnamed)),
    (check_result, altered(section_force=bare)),
    (check_result, altered(section_force=counted)),
    (check_kind, altered(KIND="force")),
    (check_kind, altered(KIND="unknown")),
    (check_kind, altered(KIND="point_stress")),
    (check_order, altered(formal_order=falling)),
    (check_order, altered(formal_order=whole)),
    (check_order, altered(formal_order=other_default)),
    (check_order, altered(formal_order=short)),
    (check_order, altered(formal_order=2.0)),
    (check_words, altered(doc="Force through a straight section.")),
    (check_words, altered(doc="A section\n\nOrder p.")),
    (check_words, altered(section_force=undocumented)),
]


@pytest.mark.parametrize(("check", "bad"), BAD)
def test_bad_members_fail(check: Callable[[ModuleType], None], bad: ModuleType) -> None:
    check(altered())
    with pytest.raises((AssertionError, TypeError)):
        check(bad)
