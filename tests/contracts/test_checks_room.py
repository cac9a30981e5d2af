"""The contract of the room of checks, swept over its members, and tested with bad ones."""

import importlib
import inspect
import math
from collections.abc import Callable
from dataclasses import replace
from functools import cache
from types import ModuleType
from typing import Any, get_args

import pytest

from convergence import rooms
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.solution import Solution, solve
from convergence.results import Check, Facts, Ladder, Level, VerdictWord, Yield


def name_of(module: ModuleType) -> str:
    return module.__name__.rsplit(".", 1)[-1]


@cache
def solutions() -> tuple[Solution, ...]:
    """Three levels of a part with a hole, a load and singular corners."""
    problem = rooms.find("models", "lug")(material=Material(210000.0, 0.3))
    coarsest = problem.part.divisions(size=None, divisions=1)
    return tuple(
        solve(problem, mesh(problem.part, finer(coarsest, 1.5, n), shape="triangle", degree=1))
        for n in range(3)
    )


def recorded_ladder(module: ModuleType) -> Ladder:
    """Return the ladder as climbing leaves it for this check alone."""
    levels = []
    for solution in solutions():
        numbers = {f"{name_of(module)}.{key}": value for key, value in module.record(solution).items()}
        levels.append(Level(solution.mesh.h, solution.mesh.cells, len(solution.load), 0.1, numbers))
    return Ladder(tuple(levels), "lug")


TABLE = Ladder(tuple(Level(h, 10, 20, 0.0, {"f": 1.0 + h**2}) for h in (4.0, 2.0, 1.0)), "table")
EMPTY = Ladder((), "table")


def check_signatures(module: ModuleType) -> None:
    member = getattr(module, name_of(module))
    assert str(inspect.signature(module.record)) == (
        "(solution: convergence.fem.solution.Solution) -> dict[str, float]"
    )
    parameters = list(inspect.signature(member).parameters.values())
    assert [(p.name, p.annotation) for p in parameters] == [("ladder", Ladder), ("facts", Facts)]
    assert inspect.signature(member).return_annotation is Check


def check_record(module: ModuleType) -> None:
    """Finite floats under the same plain keys on every level, and no solution is changed."""
    keys = set()
    for solution in solutions():
        before = solution.unknowns.copy()
        record = module.record(solution)
        assert (solution.unknowns == before).all()
        keys.add(tuple(record))
        for key, value in record.items():
            assert key and not key.startswith(".") and " " not in key and "," not in key
            assert type(value) is float and math.isfinite(value)
    assert len(keys) == 1


def check_result(module: ModuleType) -> None:
    """A Check under the member's own name, whose finding is one line of whole sentences."""
    member, ladder = getattr(module, name_of(module)), recorded_ladder(module)
    for facts in (
        Facts(),
        Facts(degree=1, corners=(), yields={"": Yield(200.0)}, kinds={"f": "peak_stress"}),
    ):
        for given in (ladder, replace(ladder, levels=ladder.levels[:1]), TABLE, EMPTY):
            check = member(given, facts)
            assert isinstance(check, Check) and check.name == name_of(module)
            assert check.passed in (True, False, None)
            assert check.finding.endswith(".") and "\n" not in check.finding and "nan" not in check.finding
            assert check.finding[0].isupper() or check.finding.split(":")[0] in facts.kinds
            assert check.leads_to in get_args(VerdictWord) and check.leads_to != "sound"
            assert check.passed is False or not check.spoils, "only a failure spoils"
            assert all(len(column) == len(given.levels) for column in check.values.values())


def check_bare_table(module: ModuleType) -> None:
    """Without its own numbers, and without facts, a check does not pass or fail: it says why not."""
    for ladder in (TABLE, EMPTY):
        assert getattr(module, name_of(module))(ladder, Facts()).passed is None


def check_words(module: ModuleType) -> None:
    first, _, rest = (inspect.getdoc(module) or "").partition("\n")
    assert first.endswith(".") and len(first) < 110 and rest.strip()
    assert inspect.getdoc(module.record) and inspect.getdoc(getattr(module, name_of(module)))


CHECKS = [check_signatures, check_record, check_result, check_bare_table, check_words]
MEMBERS = rooms.names("checks")


def member_module(name: str) -> ModuleType:
    return importlib.import_module(f"convergence.checks.{name}")


def test_the_room_is_complete() -> None:
    balances = {"equilibrium", "energy_balance", "solver_residual"}
    others = {"energy_norm", "stress_averaging", "singular_peak", "linear_range", "peak_region"}
    assert balances | others <= set(MEMBERS)


@pytest.mark.parametrize("name", MEMBERS)
@pytest.mark.parametrize("check", CHECKS)
def test_member(check: Callable[[ModuleType], None], name: str) -> None:
    check(member_module(name))


def altered(**changes: Any) -> ModuleType:
    """Return a copy of a good member with something in it replaced."""
    good = member_module("solver_residual")
    bad = ModuleType("convergence.checks.solver_residual", changes.pop("doc", good.__doc__))
    bad.__dict__.update({"record": good.record, "solver_residual": good.solver_residual} | changes)
    return bad


def answering(**changes: Any) -> ModuleType:
    """Return a copy of a good member whose answers are changed."""
    good = member_module("solver_residual").solver_residual

    def solver_residual(ladder: Ladder, facts: Facts) -> Check:
        """Return the changed answer."""
        return replace(good(ladder, facts), **changes)

    return altered(solver_residual=solver_residual)


def recording(change: Callable[[Solution], dict[str, Any]]) -> ModuleType:
    def record(solution: Solution) -> dict[str, float]:
        """Return the changed record."""
        return change(solution)

    return altered(record=record)


def spoilt(solution: Solution) -> dict[str, float]:
    solution.unknowns[:] *= 1.0 + 1e-12
    return {"relative": 0.0}


BAD = [
    (check_signatures, altered(record=lambda solution: {})),
    (check_signatures, altered(solver_residual=lambda ladder: None)),
    (check_record, recording(lambda s: {"relative": float("nan")})),
    (check_record, recording(lambda s: {"relative": 1})),
    (check_record, recording(lambda s: {"": 1.0})),
    (check_record, recording(lambda s: {"a, b": 1.0})),
    (check_record, recording(lambda s: {str(s.mesh.cells): 1.0})),
    (check_record, recording(spoilt)),
    (check_result, answering(name="residual")),
    (check_result, answering(passed=0.5)),
    (check_result, answering(finding="No full stop")),
    (check_result, answering(finding="Two\nlines.")),
    (check_result, answering(finding="The residual is nan.")),
    (check_result, answering(leads_to="sound")),
    (check_result, answering(passed=True, spoils={"": "because"})),
    (check_result, answering(values={"relative": (1.0, 2.0)})),
    (check_result, altered(solver_residual=lambda ladder, facts: None)),
    (check_bare_table, answering(passed=True)),
    (check_bare_table, answering(passed=False)),
    (check_words, altered(doc="Residual of the equations.")),
    (check_words, altered(doc="Residual\n\nof the equations")),
    (check_words, altered(record=lambda solution: {})),
]


@pytest.mark.parametrize(("check", "bad"), BAD)
def test_bad_members_fail(check: Callable[[ModuleType], None], bad: ModuleType) -> None:
    check(altered())
    with pytest.raises((AssertionError, AttributeError)):
        check(bad)
