"""A first guess from a coarser level: exact for polynomials of the blocks' parameters, fewer iterations."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.fem import equations, multigrid
from convergence.fem.first_guess import first_guess
from convergence.fem.material import Material
from convergence.fem.mesh import Mesh, mesh
from convergence.fem.part import Part, finer
from convergence.fem.solid_part import SolidPart
from convergence.fem.solution import solve
from convergence.models.hollow_cylinder import hollow_cylinder
from convergence.models.lug import lug

STEEL = Material(210000.0, 0.3)
# side by side, the second block's corners named from another one; coordinates are linear in the parameters
FLAT = Part(
    points={"a": (0, 0), "b": (3, 0), "c": (3, 2), "d": (0, 2), "e": (4, 0), "f": (4, 2)},
    blocks=(("a", "b", "c", "d"), ("f", "c", "b", "e")),
)
SOLID = SolidPart(FLAT, (("low", 0.0), ("middle", 1.0), ("high", 4.0)))
RATIOS = pytest.mark.parametrize("ratio", [1.5, 2.0, 1.3])
Field = Callable[..., np.ndarray]


def levels(part: Part | SolidPart, shape: str, degree: int, ratio: float) -> tuple[Mesh, Mesh]:
    counts = {family: 2 + 2 * (n % 2) for n, family in enumerate(part.divisions(size=None, divisions=1))}
    coarse, fine = (mesh(part, finer(counts, ratio, n), shape=shape, degree=degree) for n in (0, 1))  # type: ignore[arg-type]
    assert coarse.counts != fine.counts
    return coarse, fine


def interleaved(level: Mesh, degree: int) -> np.ndarray:
    """Return a polynomial of the degree in each coordinate, another one for each component."""
    factors = [1.0 + x + (0.5 * x**2 if degree == 2 else 0.0) for x in level.nodes]
    products = np.prod(factors, axis=0)
    return np.array(
        [products + 3.0 * component * level.nodes[component] for component in range(level.dimension)]
    ).T.ravel()


@RATIOS
@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("shape", ["triangle", "quadrilateral", "tetrahedron", "hexahedron", "wedge"])
def test_polynomials_of_the_degree_are_exact(shape: str, degree: int, ratio: float) -> None:
    """Products of polynomials of the degree, in two blocks, through two layers, nested or not."""
    part = FLAT if shape in ("triangle", "quadrilateral") else SOLID
    coarse, fine = levels(part, shape, degree, ratio)
    found = first_guess(coarse.counts, interleaved(coarse, degree), fine)
    exact = interleaved(fine, degree)
    assert found is not None and np.abs(found - exact).max() <= 1e-13 * np.abs(exact).max()


@pytest.mark.parametrize("degree", [1, 2])
@pytest.mark.parametrize("shape", ["quadrilateral", "tetrahedron"])
def test_equal_counts_give_the_same_unknowns(shape: str, degree: int) -> None:
    part = FLAT if shape == "quadrilateral" else SOLID
    level, _ = levels(part, shape, degree, 2.0)
    unknowns = np.random.default_rng(1).normal(size=level.nodes.size)
    found = first_guess(level.counts, unknowns, level)
    assert found is not None and list(found) == list(unknowns)


def test_a_part_with_open_layers_has_no_guess() -> None:
    step = SolidPart(FLAT, SOLID.planes, filled=((0, 1), (0,)))
    coarse, fine = levels(step, "hexahedron", 1, 2.0)
    assert first_guess(coarse.counts, np.zeros(coarse.nodes.size), fine) is None


@pytest.mark.slow
@pytest.mark.parametrize(("shape", "degree"), [("triangle", 1), ("quadrilateral", 2), ("hexahedron", 1)])
def test_iterations_fall(shape: str, degree: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """Conjugate gradients gain the digits that the coarser solution has: fewer steps to the same residual."""
    taken: list[int] = []
    original = multigrid.Multigrid.solve

    def counted(self: multigrid.Multigrid, *arguments: np.ndarray) -> multigrid.Outcome:
        outcome = original(self, *arguments)
        taken.append(outcome.iterations)
        return outcome

    monkeypatch.setattr(multigrid.Multigrid, "solve", counted)
    monkeypatch.setattr(equations, "MOST_DIRECT", {2: 0, 3: 0})
    monkeypatch.setattr(multigrid, "LARGEST_COARSEST", 300)
    problem = hollow_cylinder(material=STEEL) if shape == "hexahedron" else lug(material=STEEL)
    counts = problem.part.divisions(size=None, divisions=4 if shape == "hexahedron" else 8)
    coarse, fine = (
        mesh(problem.part, finer(counts, 2.0, n), shape=shape, degree=degree)  # type: ignore[arg-type]
        for n in (0, 1)
    )
    guess = first_guess(coarse.counts, solve(problem, coarse).unknowns, fine)
    taken.clear()
    cold, warm = solve(problem, fine), solve(problem, fine, guess)
    assert len(taken) == 2 and taken[1] < taken[0]
    assert warm.energy == pytest.approx(cold.energy, rel=1e-8)
