"""Values on given meshes, digit by digit, as another finite element library gives them."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from convergence.fem.material import Material
from convergence.fem.solution import Solution
from convergence.models.l_domain import l_domain
from convergence.models.skew_panel import skew_panel
from convergence.quantities.displacement import displacement

Climb = Callable[..., list[Solution]]


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
@pytest.mark.parametrize("degree", [1, 2])
def test_cook_sequence(climb: Climb, sequences: Any, published: Any, shape: str, degree: int) -> None:
    data, cook = sequences["cook"], published["cook"]
    sizes = {name: cook[name] for name in ("length", "depth_root", "depth_tip", "rise", "shear")}
    problem = skew_panel(**sizes, thickness=1.0, material=Material(1.0, cook["poisson"]))
    solutions = climb(problem, shape, degree, data["n"][0], len(data["n"]))
    cells = (1 if shape == "quadrilateral" else 2) * np.array(data["n"]) ** 2
    assert [solution.mesh.cells for solution in solutions] == list(cells)
    found = [[displacement(solution, at="tip", component="y"), solution.energy] for solution in solutions]
    half_digit = 0.5 * 10.0 ** -data["digits"]
    # one more in the last digit for the other library's rounding, 1e-11 relative
    assert np.abs(np.array(found) - np.array(data[f"{shape}_{degree}"])).max() < 2 * half_digit


@pytest.mark.parametrize("degree", [1, 2])
def test_l_domain_sequence(climb: Climb, sequences: Any, degree: int) -> None:
    data = sequences["l_domain"]
    problem = l_domain(leg=1.0, thickness=1.0, stress=1.0, mode="I", material=Material(1.0, 0.3))
    assert problem.exact is not None
    assert problem.exact.energy is not None
    solutions = climb(problem, "quadrilateral", degree, data["n"][0], len(data["n"]))
    assert [solution.mesh.cells for solution in solutions] == [3 * n**2 for n in data["n"]]
    energies = np.array([solution.energy for solution in solutions])
    wanted = np.array(data[f"quadrilateral_{degree}"])
    assert np.abs(energies - wanted).max() < 2 * 0.5 * 10.0 ** -data["digits"]
    error = 100 * np.sqrt(1.0 - energies / problem.exact.energy)
    assert np.abs(error - data[f"error_{degree}"]).max() < 0.51e-4
