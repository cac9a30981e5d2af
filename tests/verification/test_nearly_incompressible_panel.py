"""Cook's membrane in plane strain near incompressibility: one singular corner, bending, shear.

Cook 1974, J. Struct. Div. ASCE 100:1851: length 48, depths 44 and 16, rise 44, shear 1/16 on the loaded side.
Values: own computation, p-version elements of degree 8 to 10 graded towards the corners, for Poisson's ratio
0.4999, and for lambda = 0.75e7, G = 0.375, Poisson's ratio 0.499999975. Here lambda is a hundredth of that:
what is left to 0.5 grows from 2.5e-8 to 2.5e-6 and moves the values by 5e-6 of them, as the 2e-4 that the
deflection times G loses between 0.4999 and 0.5 shows.
"""

import pytest

from convergence.fem.material import Material
from convergence.fem.mesh import Formulation, Shape, mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.models.skew_panel import skew_panel
from convergence.quantities.displacement import displacement

LAME, SHEAR = 0.75e5, 0.375
POISSON = LAME / (2.0 * (LAME + SHEAR))
# material, deflection of the middle of the loaded side and what is unsure of it, energy
PANELS = [
    pytest.param(Material(1.0, 0.4999), 18.511926, 1e-6, 9.283668, id="0.4999"),
    pytest.param(Material(2.0 * SHEAR * (1.0 + POISSON), POISSON), 16.4530, 2e-4, 8.25112, id="0.4999975"),
]
METHODS: tuple[tuple[Shape, int, Formulation], ...] = (
    ("quadrilateral", 1, "mean dilatation"),
    ("quadrilateral", 2, "mean dilatation"),
    ("triangle", 2, "displacement"),
)


def ladder(material: Material, shape: Shape, degree: int, formulation: Formulation) -> list[Solution]:
    problem: Problem = skew_panel(
        length=48.0,
        depth_root=44.0,
        depth_tip=16.0,
        rise=44.0,
        thickness=1.0,
        shear=1.0 / 16.0,
        kind="plane strain",
        material=material,
    )
    counts = problem.part.divisions(size=None, divisions=4)
    return [
        solve(
            problem,
            mesh(problem.part, finer(counts, 2.0, n), shape=shape, degree=degree, formulation=formulation),
        )
        for n in range(5 if degree == 1 else 4)
    ]


@pytest.mark.parametrize(("material", "deflection", "unsure", "energy"), PANELS)
@pytest.mark.parametrize(("shape", "degree", "formulation"), METHODS)
def test_cooks_membrane(
    material: Material,
    deflection: float,
    unsure: float,
    energy: float,
    shape: Shape,
    degree: int,
    formulation: Formulation,
) -> None:
    """The corner's exponent is above 1/2, the order above 1: what is left is no more than the last change."""
    solutions = ladder(material, shape, degree, formulation)
    found = {
        deflection: [displacement(s, at="tip", component="y") for s in solutions],
        energy: [s.energy for s in solutions],
    }
    for wanted, values in found.items():
        assert abs(values[-1] - wanted) <= abs(values[-1] - values[-2]) + unsure
        assert values[-1] == pytest.approx(wanted, rel=5e-3)


def test_plain_quadrilaterals_of_degree_1_lock() -> None:
    """64 × 64 cells stay below half of the deflection; with mean dilatation they reach 0.5 per cent."""
    finest = ladder(Material(2.0 * SHEAR * (1.0 + POISSON), POISSON), "quadrilateral", 1, "displacement")[-1]
    assert displacement(finest, at="tip", component="y") < 0.5 * 16.4530
