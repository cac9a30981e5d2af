"""Equilibrium, energy balance and residual: true on every mesh, false when a solution is tampered with."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.checks.energy_balance import energy_balance
from convergence.checks.equilibrium import equilibrium
from convergence.checks.equilibrium import record as balance_of
from convergence.checks.solver_residual import solver_residual
from convergence.fem.problem import Support
from convergence.fem.solution import Solution, solve
from convergence.results import Check, Facts, Ladder

BALANCES = {
    "equilibrium": equilibrium,
    "energy_balance": energy_balance,
    "solver_residual": solver_residual,
}


def all_of(ladder: Ladder) -> dict[str, Check]:
    return {name: check(ladder, Facts()) for name, check in BALANCES.items()}


def with_unknowns(solution: Solution, unknowns: np.ndarray) -> Solution:
    return replace(solution, unknowns=unknowns)


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("model", ["lug", "tapered_arm", "thick_cylinder", "patch_test"])
def test_a_sound_ladder_passes(
    model: str, shape: str, degree: int, solved: Callable, recorded: Callable
) -> None:
    ladder = recorded(solved(model, shape, degree, 1, 3), *BALANCES)
    for check in all_of(ladder).values():
        assert check.passed is True and not check.spoils
        assert all(len(column) == 3 for column in check.values.values())


def test_a_changed_load_breaks_equilibrium_and_residual(solved: Callable, recorded: Callable) -> None:
    """One node of the free tip pulled by a hundredth of the load more than was solved for."""
    coarse, middle, fine = solved("tapered_arm", "triangle", 2, 1, 3)
    load = middle.load.copy()
    load[2 * middle.mesh.vertices["tip"] + 1] += 0.01 * abs(load).sum()
    tampered = replace(middle, load=load)
    checks = all_of(recorded((coarse, tampered, fine), *BALANCES))
    for name in BALANCES:
        assert checks[name].passed is False, name
        assert list(checks[name].spoils) == [""], "every quantity is spoilt"
        assert checks[name].leads_to == "unproven"
    assert checks["equilibrium"].finding.startswith("Loads and reactions miss each other by ")
    assert "allowed 1e-06" in checks["equilibrium"].finding


def test_perturbed_unknowns_break_residual_and_energy(solved: Callable, recorded: Callable) -> None:
    """One free unknown of the finest level off by a millionth of the largest displacement."""
    *coarser, fine = solved("tapered_arm", "quadrilateral", 2, 1, 3)
    unknowns = fine.unknowns.copy()
    unknowns[2 * fine.mesh.vertices["tip"] + 1] *= 1.0 + 1e-4
    checks = all_of(recorded((*coarser, with_unknowns(fine, unknowns)), *BALANCES))
    assert checks["solver_residual"].passed is False
    assert checks["energy_balance"].passed is False
    assert checks["solver_residual"].spoils == {"": "the equations are not solved accurately enough"}
    assert checks["energy_balance"].spoils == {"": "strain energy and external work disagree"}


def test_a_scaled_solution_is_not_in_balance(solved: Callable, recorded: Callable) -> None:
    """1 % too much displacement: energy 2.01 %, work 1 %, reactions 1 % more."""
    *coarser, fine = solved("lug", "triangle", 1, 1, 3)
    ladder = recorded((*coarser, with_unknowns(fine, 1.01 * fine.unknowns)), *BALANCES)
    assert all(check.passed is False for check in all_of(ladder).values())
    assert ladder.column("energy_balance.difference")[-1] == pytest.approx(0.01 / 1.01, rel=1e-6)
    # the share is of the sum of the sizes of all nodal forces: a cosine's is 4/π of its resultant
    assert ladder.column("equilibrium.force")[-1] == pytest.approx(0.01 * np.pi / 4.0, rel=0.01)


def test_a_lost_moment_is_found_where_forces_balance(solved: Callable) -> None:
    """A couple added to the load: no force is missing, a moment is."""
    solution = solved("tapered_arm", "triangle", 1, 1, 3)[-1]
    load = solution.load.copy()
    for name, sign in (("tip_upper", 1.0), ("tip_lower", -1.0)):
        load[2 * solution.mesh.vertices[name]] += sign * 1000.0
    numbers = balance_of(replace(solution, load=load))
    assert numbers["force"] < 1e-9 and numbers["moment"] > 1e-3


def test_loads_and_reactions_are_recorded(solved: Callable) -> None:
    """6 MPa on 120 x 12 mm downward."""
    numbers = balance_of(solved("tapered_arm", "triangle", 2, 1, 3)[0])
    assert numbers["load_y"] == pytest.approx(-6.0 * 120.0 * 12.0, rel=1e-9)
    assert numbers["reaction_y"] == pytest.approx(6.0 * 120.0 * 12.0, rel=1e-9)
    assert numbers["load_x"] == pytest.approx(0.0, abs=1e-8)


def test_prescribed_displacements_and_loads_together(solved: Callable, recorded: Callable) -> None:
    """The work of the reactions on moved supports counts."""
    solutions = []
    for solution in solved("perforated_plate", "triangle", 2, 1, 3):
        problem = solution.problem
        supports = (*problem.supports, Support("moved", y=0.05, boundary="top"))
        loads = problem.loads[:1]
        solutions.append(solve(replace(problem, supports=supports, loads=loads, exact=None), solution.mesh))
    assert all(check.passed is True for check in all_of(recorded(solutions, *BALANCES)).values())


def test_the_unloaded_part_is_in_balance(solved: Callable, recorded: Callable) -> None:
    solutions = [
        solve(replace(solution.problem, loads=()), solution.mesh)
        for solution in solved("lug", "triangle", 1, 1, 3)
    ]
    assert all(check.passed is True for check in all_of(recorded(solutions, *BALANCES)).values())


@pytest.mark.parametrize("name", BALANCES)
def test_one_bad_level_anywhere_fails(name: str, solved: Callable, recorded: Callable) -> None:
    ladder = recorded(solved("lug", "triangle", 1, 1, 3), *BALANCES)
    key = {"equilibrium": "moment", "energy_balance": "difference", "solver_residual": "relative"}[name]
    for number in range(3):
        levels = list(ladder.levels)
        levels[number] = replace(levels[number], values={**levels[number].values, f"{name}.{key}": 1e-3})
        check = BALANCES[name](replace(ladder, levels=tuple(levels)), Facts())
        assert check.passed is False and "1.0e-03" in check.finding
