"""Energy norm and stress averaging: they pass on good ladders and fail on coarse or tampered ones."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.checks.energy_norm import energy_norm
from convergence.checks.stress_averaging import stress_averaging
from convergence.corners.singular_corners import singular_corners
from convergence.fem.problem import Support
from convergence.fem.solution import solve
from convergence.results import Facts, Ladder


def changed(ladder: Ladder, name: str, factor: np.ndarray) -> Ladder:
    """Return the ladder with one column multiplied."""
    column = ladder.column(name) * factor
    levels = tuple(
        replace(level, values={**level.values, name: float(value)})
        for level, value in zip(ladder.levels, column, strict=True)
    )
    return replace(ladder, levels=levels)


@pytest.mark.slow
@pytest.mark.parametrize(
    ("shape", "degree"), [("triangle", 1), ("triangle", 2), ("quadrilateral", 1), ("quadrilateral", 2)]
)
@pytest.mark.parametrize("model", ["thick_cylinder", "exact_cantilever"])
def test_energy_norm_of_a_smooth_part(
    model: str, shape: str, degree: int, solved: Callable, recorded: Callable
) -> None:
    """Rate p, in agreement with the energies and with the exact error, of which it says so."""
    ladder = recorded(solved(model, shape, degree, 2, 6 - degree), "energy_norm")
    check = energy_norm(ladder, Facts(degree=degree, corners=()))
    assert check.passed is True and not check.spoils
    estimated, exact = check.values["estimated"], check.values["exact"]
    # Zienkiewicz & Zhu 1992: asymptotically exact; the last levels are within a tenth
    assert estimated[-1] == pytest.approx(exact[-1], rel=0.1)
    h = ladder.h
    rate = np.log(estimated[-2] / estimated[-1]) / np.log(h[-2] / h[-1])
    assert rate == pytest.approx(degree, abs=0.1)
    assert f"theory says {degree}." in check.finding
    assert "(agreeing: 0.5 to 2)" in check.finding or model == "exact_cantilever"


def test_energy_norm_of_a_singular_part_falls_with_the_exponent(solved: Callable, recorded: Callable) -> None:
    """Rate min(p, λ), λ = 0.5445 (Williams 1952); the two views of the error still agree."""
    solutions = solved("l_domain", "quadrilateral", 2, 2, 5)
    ladder = recorded(solutions, "energy_norm")
    corners = singular_corners(solutions[0].problem)
    check = energy_norm(ladder, Facts(degree=2, corners=corners))
    assert check.passed is True
    assert "theory says 0.544, limited by the corner exponent 0.544." in check.finding
    estimated = check.values["estimated"]
    assert np.log2(estimated[-2] / estimated[-1]) == pytest.approx(0.5445, abs=0.05)


def test_energy_norm_above_ten_percent_fails(solved: Callable, recorded: Callable) -> None:
    ladder = recorded(solved("lug", "triangle", 1, 1, 3)[:2], "energy_norm")
    assert ladder.column("energy_norm.estimated")[-1] > 0.10
    check = energy_norm(ladder, Facts(degree=1))
    assert check.passed is False
    assert "(limit 10 %)" in check.finding


def test_energy_norm_fails_where_its_two_views_disagree(solved: Callable, recorded: Callable) -> None:
    """A recovered error three times too large, or too small, is not what the energies of the ladder say."""
    ladder = recorded(solved("thick_cylinder", "triangle", 1, 2, 5), "energy_norm")
    facts = Facts(degree=1, corners=())
    assert energy_norm(ladder, facts).passed is True
    for factor in (3.0, 1.0 / 3.0):
        check = energy_norm(changed(ladder, "energy_norm.absolute", np.full(5, factor)), facts)
        assert check.passed is False
    energy = ladder.column("energy_norm.energy")
    farther = energy[-1] + 10.0 * (energy - energy[-1])
    assert energy_norm(changed(ladder, "energy_norm.energy", farther / energy), facts).passed is False


def test_energy_norm_fails_where_the_energies_show_no_limit(solved: Callable, recorded: Callable) -> None:
    """Energies that grow by a constant amount, or more, as under a point load on a solid (Flamant)."""
    ladder = recorded(solved("thick_cylinder", "quadrilateral", 2, 2, 4), "energy_norm")
    growing = changed(ladder, "energy_norm.energy", 1.0 + 0.01 * 2.0 ** np.arange(4))
    check = energy_norm(growing, Facts(degree=2, corners=()))
    assert check.passed is False and "The strain energies of the ladder show no limit." in check.finding


def test_energy_norm_of_the_patch_is_zero(solved: Callable, recorded: Callable) -> None:
    check = energy_norm(recorded(solved("patch_test", "triangle", 1, 1, 3), "energy_norm"), Facts(degree=1))
    assert check.passed is True and "zero to round-off" in check.finding


def test_the_identity_is_not_used_where_loads_and_moved_supports_act_together(
    solved: Callable, recorded: Callable
) -> None:
    solutions = []
    for solution in solved("perforated_plate", "triangle", 2, 1, 3):
        problem = solution.problem
        supports = (*problem.supports, Support("moved", y=0.05, boundary="top"))
        solutions.append(
            solve(replace(problem, supports=supports, loads=problem.loads[:1], exact=None), solution.mesh)
        )
    ladder = recorded(solutions, "energy_norm")
    assert list(ladder.column("energy_norm.identity")) == [0.0, 0.0, 0.0]
    assert "agreeing" not in energy_norm(ladder, Facts(degree=2)).finding
    loaded = recorded(solved("perforated_plate", "triangle", 2, 1, 3), "energy_norm")
    assert list(loaded.column("energy_norm.identity")) == [1.0, 1.0, 1.0]


@pytest.mark.parametrize(("shape", "degree"), [("triangle", 2), ("quadrilateral", 2)])
def test_averaging_of_a_fine_mesh_is_good(
    shape: str, degree: int, solved: Callable, recorded: Callable
) -> None:
    """Spread at the hot spot falls with h^p; it stands at the bore of the cylinder."""
    ladder = recorded(solved("thick_cylinder", shape, degree, 2, 4), "stress_averaging")
    check = stress_averaging(ladder, Facts())
    assert check.passed is True and check.finding.endswith("good.")
    assert np.hypot(check.values["x"][-1], check.values["y"][-1]) == pytest.approx(30.0)
    assert ladder.column("stress_averaging.spread")[-1] < ladder.column("stress_averaging.spread")[0]


def test_averaging_at_a_sharp_corner_fails(solved: Callable, recorded: Callable) -> None:
    """There the cells' stresses never agree; refinement does not help."""
    ladder = recorded(solved("l_bracket", "triangle", 1, 2, 3, fillet_radius=0.0), "stress_averaging")
    check = stress_averaging(ladder, Facts())
    assert check.passed is False and check.finding.endswith("too much: refine there.")


@pytest.mark.parametrize(
    ("spread", "passed", "word"),
    [
        (0.05, True, "good."),
        (0.0501, True, "acceptable."),
        (0.10, True, "acceptable."),
        (0.1001, False, "too much: refine there."),
    ],
)
def test_grades_of_averaging(
    spread: float, passed: bool, word: str, solved: Callable, recorded: Callable
) -> None:
    ladder = recorded(solved("thick_cylinder", "triangle", 2, 2, 4), "stress_averaging")
    now = ladder.column("stress_averaging.spread")
    check = stress_averaging(changed(ladder, "stress_averaging.spread", spread / now), Facts())
    assert check.passed is passed and check.finding.endswith(word)


def test_averaging_is_half_the_spread_over_the_average(solved: Callable, recorded: Callable) -> None:
    """Uniform stress has no spread at all."""
    ladder = recorded(solved("patch_test", "quadrilateral", 1, 1, 3), "stress_averaging")
    assert ladder.column("stress_averaging.spread").max() < 1e-9
