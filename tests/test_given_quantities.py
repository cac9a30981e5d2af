"""Every model's own mesh handed over as a given mesh: all its quantities and records come out the same."""

import math
from dataclasses import replace
from typing import Any

import pytest

from convergence import rooms
from convergence.dimensions import Located
from convergence.fem.given_part import GivenMesh, GivenPart
from convergence.fem.material import material, material_names
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.rod_part import RodPart
from convergence.fem.solution import Solution, solve
from convergence.quantity_tables import TOLERANCE_KEYS

SAME = 1e-6  # both solvers leave 1e-10 in the energy norm; a stress at a point weighs it by 1/h
READ = 1e-4  # places of records are known to 1e-5 of the part's size
NOT_ASKED = {"measure", *TOLERANCE_KEYS}
MODELS = [name for name in rooms.names("models") if name not in ("tie_rod",)]


def problem_of(model: str) -> Problem:
    function = rooms.find("models", model)
    problem: Problem = function(**{name: material() for name in material_names(function)})
    return problem


def solved(model: str) -> tuple[Solution, Solution]:
    """Return the solution on the coarsest mesh of a model, and on the same mesh without its map."""
    problem = problem_of(model)
    part = problem.part
    assert not isinstance(part, RodPart | GivenPart)
    shape = "hexahedron" if part.dimension == 3 else "quadrilateral"
    made = mesh(part, part.divisions(size=None, divisions=1), shape=shape, degree=2)
    given = GivenMesh(shape, 2, made.nodes, made.cell_nodes, made.facets, made.vertices, made.regions)
    other = replace(problem, part=GivenPart((given,)))
    return solve(problem, made), solve(other, mesh(other.part, {0: 0}, shape=shape, degree=2))


def numbers(value: Any) -> tuple[float, ...]:
    if isinstance(value, Located):
        return tuple(x for x in (value.value, value.x, value.y, value.z) if x is not None)
    return (float(value),)


@pytest.mark.parametrize("model", MODELS)
def test_quantities_and_checks_do_not_need_the_map(model: str) -> None:
    mapped, given = solved(model)
    wanted = rooms.beside("models", model, "QUANTITIES")
    assert wanted
    for table in wanted.values():
        function = rooms.find("quantities", table["measure"])
        said = {key: value for key, value in table.items() if key not in NOT_ASKED}
        if said.get("at") in mapped.mesh.part.points:  # not all are vertices of cells
            said["at"] = mapped.mesh.part.points[said["at"]]
        expected, found = (numbers(function(solution, **said)) for solution in (mapped, given))
        scale = max(abs(value) for value in expected)
        assert found == pytest.approx(expected, rel=SAME, abs=SAME * scale)
    for check in rooms.names("checks"):
        record = rooms.beside("checks", check, "record")
        expected, found = record(mapped), record(given)
        scale = max((abs(value) for value in expected.values() if math.isfinite(value)), default=1.0)
        for name in expected.keys() & found.keys():
            assert found[name] == pytest.approx(expected[name], rel=READ, abs=READ * scale, nan_ok=True)
