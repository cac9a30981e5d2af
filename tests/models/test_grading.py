"""Cells that grow away from a corner: their sizes, how far one can go, and what it buys."""

from collections.abc import Callable

import numpy as np
import pytest

from convergence.errors import SolvingError, Unsuitable
from convergence.fem.material import Material
from convergence.fem.mesh import Shape, mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution
from convergence.models.bonded_strip import bonded_strip
from convergence.models.centre_cracked_plate import centre_cracked_plate
from convergence.models.l_bracket import l_bracket
from convergence.models.l_domain import l_domain
from convergence.models.skew_panel import skew_panel

Climb = Callable[..., list[Solution]]
UNIT = Material(1.0, 0.3)
LOOSE = 0.1  # of the exponent, by the next powers of h on these meshes


def domain(grading: float) -> Problem:
    return l_domain(leg=1.0, thickness=1.0, stress=1.0, grading=grading, material=UNIT)


def crack(grading: float) -> Problem:
    return centre_cracked_plate(
        half_width=1.0,
        half_height=4.0,
        half_crack=0.5,
        thickness=1.0,
        tension=1.0,
        grading=grading,
        material=UNIT,
    )


GRADED: dict[str, Callable[[float], Problem]] = {
    "inner_corner": lambda grading: l_bracket(fillet_radius=0.0, grading=grading, material=UNIT),
    "free_corner": domain,
    "root_upper": lambda grading: skew_panel(grading=grading, material=UNIT),
    "bond_edge": lambda grading: bonded_strip(grading=grading, material=UNIT),
    "tip": crack,
}


@pytest.mark.parametrize("corner", GRADED)
def test_cells_grow_along_the_edges_that_leave_the_corner(corner: str) -> None:
    """The last of n cells is `grading`^((n - 1)/n) times as long as the first; all other edges are even."""
    part, count = GRADED[corner](16.0).part, 4
    name = "inner_corner" if corner == "free_corner" else corner
    for block in part.blocks:
        for start, end in zip(block, block[1:] + block[:1], strict=True):
            if start == name:
                start, end = end, start
            along = part.edge(start, end, np.linspace(0.0, 1.0, count + 1))
            lengths = np.hypot(*np.diff(along, axis=1))
            growth = lengths[0] / lengths[-1]
            assert growth == pytest.approx(16.0 ** ((count - 1) / count) if end == name else 1.0, rel=1e-9)


@pytest.mark.parametrize("corner", GRADED)
def test_even_is_the_default(corner: str) -> None:
    part = GRADED[corner](1.0).part
    counts = part.divisions(size=None, divisions=2)
    for curve in part.curves:
        ends = np.array([part.points[name] for name in curve]).T
        assert part.edge(*curve, np.array([0.5]))[:, 0] == pytest.approx(
            ends.mean(axis=1), abs=1e-12 * part.size
        )
    assert mesh(part, counts, shape="quadrilateral", degree=2).cells > 0


def test_one_quadratic_cell_grows_up_to_nine() -> None:
    """The middle node of an edge must stay beyond its first quarter: sqrt(grading) below 3."""
    part = domain(8.9).part
    mesh(part, part.divisions(size=None, divisions=1), shape="triangle", degree=2)
    part = domain(9.1).part
    with pytest.raises(SolvingError, match="inverted"):
        mesh(part, part.divisions(size=None, divisions=1), shape="triangle", degree=2)


@pytest.mark.slow
@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
@pytest.mark.parametrize(
    ("make", "energy", "exponent", "divisions"),
    [(domain, 4.1545442274, 0.544483736782464, 32), (crack, 2.23224635522, 0.5, 16)],
)
def test_the_error_of_the_energy_follows_the_corner_cell(
    climb: Climb,
    make: Callable[[float], Problem],
    energy: float,
    exponent: float,
    divisions: int,
    shape: Shape,
) -> None:
    """At the same unknowns the error falls as (first cell)^(2 l): to 0.13 and 0.16 of it at grading 20.

    The energies: Szabo & Babuska 1991 (l_domain), own computation of degree 8 with 36 layers (crack).
    """
    first = np.log(20.0) / 19.0  # of the even cell
    even, graded = (climb(make(grading), shape, 2, divisions, 1)[0] for grading in (1.0, 20.0))
    assert len(even.load) == len(graded.load)
    gain = (energy - graded.energy) / (energy - even.energy)
    assert np.log(gain) / np.log(first) == pytest.approx(2.0 * exponent, abs=LOOSE)


def test_a_fillet_has_its_own_cells() -> None:
    with pytest.raises(Unsuitable) as caught:
        l_bracket(grading=5.0, material=UNIT)
    assert [key for key, _, _ in caught.value.problems] == ["grading"]
