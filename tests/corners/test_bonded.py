"""Exponents of bonded wedges against tabulated values, closed forms, one-material wedges and a determinant.

Tabulated: own computation from the 8 x 8 determinant of the Airy functions, mpmath, 40 digits; the plane
strain of Poisson's ratios as given. The determinant used here comes from the matrix exponential of Hooke's
law and equilibrium, set up separately from the code under test.
"""

import cmath
import math
from collections.abc import Sequence
from itertools import pairwise, product

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.linalg import expm

from convergence.corners.bonded import Sector, wedge_exponents
from convergence.corners.williams import corner_exponents
from convergence.errors import Unsuitable

PRINTED = 1e-11  # twelve digits are printed; collocation stops at a few 1e-12
FREE = ("free", "free")
CONDITIONS = ("free", "clamped", "roller")
HELD = {"free": (2, 3), "clamped": (0, 1), "roller": (1, 2)}

QUARTER_PLANES = {  # by Poisson's ratios: ratio of Young's moduli and exponent
    (0.3, 0.3): {
        2: 0.963001151258,
        3: 0.920101695698,
        5: 0.863818927551,
        10: 0.801533496663,
        100: 0.721966363523,
    },
    (0.2, 0.35): {
        2: 0.945429206229,
        3: 0.897291065060,
        5: 0.838035221253,
        10: 0.773658704384,
        100: 0.691014101194,
    },
}
STEP = {
    1.0: (0.544483736782, 0.908529189846),
    3.0: (0.610781171371, 0.976600041237),
    10.0: (0.669032495661, 0.996538549311),
    1 / 3: (0.503564863016, 0.771457664522),
    1 / 10: (0.520347548391, 0.596788147259),
}


def sector(opening: float, young: float, poisson: float) -> Sector:
    return opening, young / (2 * (1 + poisson)), 3 - 4 * poisson


def transfer(exponent: complex, one: Sector) -> np.ndarray:
    """The matrix that takes (u_r, u_t, shear, normal stress) of u ~ r^lambda across a wedge."""
    opening, mu, kappa = one
    lame, e = (3 - kappa) / (kappa - 1), exponent
    m = np.array(
        [
            [0, 1 - e, 1, 0],
            [-1 - lame * e / (lame + 2), 0, 0, 1 / (lame + 2)],
            [-4 * e**2 * (lame + 1) / (lame + 2), 0, 0, 1 - e * lame / (lame + 2)],
            [0, 0, -1 - e, 0],
        ]
    )
    scale = np.diag([1, 1, mu, mu])
    return scale @ expm(m * math.radians(opening)) @ np.linalg.inv(scale)


def determinant(exponent: complex, sectors: Sequence[Sector], sides: tuple[str, str] | None) -> complex:
    across = np.eye(4)
    for one in sectors:
        across = transfer(exponent, one) @ across
    if sides is None:
        return complex(np.linalg.det(across - np.eye(4)))
    free = [k for k in range(4) if k not in HELD[sides[0]]]
    return complex(np.linalg.det(across[np.ix_(HELD[sides[1]], free)]))


def zeros_in_strip(sectors: Sequence[Sector], sides: tuple[str, str] | None) -> int:
    """The number of zeros with 0.03 < Re < 0.97, |Im| < 0.8: argument principle, refined where it turns."""
    corners = [0.03 - 0.8j, 0.97 - 0.8j, 0.97 + 0.8j, 0.03 + 0.8j, 0.03 - 0.8j]
    turn = 0.0
    for start, end in pairwise(corners):
        stack = [(a, a + (end - start) / 8) for a in start + (end - start) * np.arange(8) / 8]
        while stack:
            a, b = stack.pop()
            ratio = determinant(b, sectors, sides) / determinant(a, sectors, sides)
            if abs(cmath.phase(ratio)) > 0.7 or not 0.2 < abs(ratio) < 5:
                if abs(b - a) < 1e-3:
                    return -1  # a zero on the contour
                stack += [(a, (a + b) / 2), ((a + b) / 2, b)]
            else:
                turn += cmath.phase(ratio)
    return round(turn / (2 * math.pi))


@pytest.mark.parametrize(("nu", "other"), QUARTER_PLANES)
def test_bonded_quarter_planes(nu: float, other: float) -> None:
    for ratio, exponent in QUARTER_PLANES[nu, other].items():
        found = wedge_exponents([sector(90, ratio, nu), sector(90, 1, other)], FREE)
        assert found == pytest.approx([exponent], abs=PRINTED)
        turned = wedge_exponents([sector(90, 1, other), sector(90, ratio, nu)], FREE)
        assert turned == pytest.approx([exponent], abs=PRINTED)


@pytest.mark.parametrize("ratio", STEP)
def test_step_corner(ratio: float) -> None:
    found = wedge_exponents([sector(180, ratio, 0.3), sector(90, 1, 0.3)], FREE)
    assert found == pytest.approx(STEP[ratio], abs=PRINTED)


@pytest.mark.parametrize(
    ("ratio", "nu", "other"), [(3, 0.3, 0.3), (10, 0.3, 0.3), (50, 0.0, 0.49), (0.2, 0.1, 0.4)]
)
def test_interface_crack(ratio: float, nu: float, other: float) -> None:
    """1/2 + i eps, eps = ln[(1 - beta)/(1 + beta)]/(2 pi) (Williams 1959, Bull. Seismol. Soc. Am. 49:199)."""
    (_, mu, kappa), (_, mu2, kappa2) = upper, lower = sector(180, ratio, nu), sector(180, 1, other)
    beta = (mu * (kappa2 - 1) - mu2 * (kappa - 1)) / (mu * (kappa2 + 1) + mu2 * (kappa + 1))
    epsilon = abs(math.log((1 - beta) / (1 + beta))) / (2 * math.pi)
    assert wedge_exponents([upper, lower], FREE) == pytest.approx([0.5 + 1j * epsilon], abs=PRINTED)


@pytest.mark.parametrize("sides", list(product(CONDITIONS, repeat=2)))
@pytest.mark.parametrize("kappa", [1.04, 1.8, 2.0769, 3.0])
def test_one_material_in_two_pieces(sides: tuple[str, str], kappa: float) -> None:
    """The closed forms of one material, which know no interface; roots near 1 are theirs alone."""
    for opening in (30.0, 60.0, 90.0, 110.0, 135.0, 180.0, 225.0, 270.0, 300.0, 337.0, 360.0):
        expected = [e for e in corner_exponents(opening, sides, kappa=kappa) if e.real < 1 - 1e-5]
        found = wedge_exponents([(0.3 * opening, 7.0, kappa), (0.7 * opening, 7.0, kappa)], sides)
        assert found == pytest.approx(expected, abs=1e-10), opening


def test_a_double_root_is_given_once() -> None:
    """Clamped-free crack at kappa = 1: 1/4 and 3/4 twice each; a crack's two modes share 1/2."""
    assert wedge_exponents([(360, 1, 1)], ("clamped", "free")) == pytest.approx([0.25, 0.75], abs=1e-7)
    assert wedge_exponents([(120, 1, 1.8), (240, 1, 1.8)], FREE) == pytest.approx([0.5], abs=PRINTED)


def test_a_much_stiffer_neighbour_clamps() -> None:
    """Moduli of 1e6: the difference to a clamped side is of the order of 1e-6."""
    found = wedge_exponents([sector(90, 1, 0.3), sector(90, 1e6, 0.3)], FREE)
    assert found == pytest.approx(corner_exponents(90, ("free", "clamped"), kappa=1.8), abs=1e-5)


def test_a_ring() -> None:
    """Regular without a corner; a much stiffer quarter clamps the rest, a much softer one frees it."""
    assert wedge_exponents([(100, 1, 1.8), (260, 1, 1.8)], None) == []
    assert wedge_exponents([(180, 1, 1.8), (180, 30, 2.6)], None) == []
    stiff = wedge_exponents([sector(90, 1e6, 0.3), sector(270, 1, 0.3)], None)
    assert stiff == pytest.approx(corner_exponents(270, ("clamped", "clamped"), kappa=1.8), abs=1e-5)
    soft = wedge_exponents([sector(90, 1e-6, 0.3), sector(270, 1, 0.3)], None)
    assert [z for z in soft if z.real < 0.92] == pytest.approx(
        corner_exponents(270, FREE, kappa=1.8), abs=1e-5
    )


SECTORS = st.lists(
    st.tuples(st.floats(20, 110), st.floats(0.1, 10), st.floats(1.1, 2.9)), min_size=2, max_size=3
)


@settings(max_examples=20, deadline=None)
@given(sectors=SECTORS, sides=st.none() | st.tuples(st.sampled_from(CONDITIONS), st.sampled_from(CONDITIONS)))
def test_all_zeros_of_the_determinant_and_nothing_else(
    sectors: list[Sector], sides: tuple[str, str] | None
) -> None:
    """Each is a zero to 1e-7 (or its root, where double), and as many are in the strip as it has zeros."""
    if sides is None:
        sectors = [*sectors, (360 - sum(s[0] for s in sectors), 1.0, 1.8)]
    found = wedge_exponents(sectors, sides)
    for exponent in found:
        step = 1e-4
        around = max(abs(determinant(exponent + step * 1j**k, sectors, sides)) for k in range(4))
        assert abs(determinant(exponent, sectors, sides)) < 1e-3 * around
    at_edge = any(abs(z.real - 0.03) < 0.01 or abs(z.real - 0.97) < 0.01 for z in found)
    counted = zeros_in_strip(sectors, sides)
    if counted >= 0 and not at_edge:
        inside = [z for z in found if 0.03 < z.real < 0.97 and z.imag < 0.8]
        assert sum(1 if z.imag == 0 else 2 for z in inside) == counted


def test_antiplane() -> None:
    """W ~ r^lambda: multiples of 180/w, of 90/w odd where one side is clamped (textbook)."""
    for side in ("free", "roller"):
        found = wedge_exponents([(100, 2, 1.8), (170, 2, 1.8)], (side, "free"), mode="antiplane")
        assert found == pytest.approx([180 / 270], abs=PRINTED)
        mixed = wedge_exponents([(330, 2, 1.8)], ("clamped", side), mode="antiplane")
        assert mixed == pytest.approx([90 / 330, 270 / 330], abs=PRINTED)
    assert wedge_exponents([(180, 1, 1.8), (180, 5, 1.8)], FREE, mode="antiplane") == pytest.approx(
        [0.5], abs=PRINTED
    )


@pytest.mark.parametrize("ratio", [0.1, 3.0, 40.0])
def test_antiplane_of_two_materials(ratio: float) -> None:
    """Free sides, 60 and 120 degrees: mu1 tan(lambda w1) + mu2 tan(lambda w2) = 0 (textbook).

    The left side rises from minus infinity at lambda = 3/4 to (mu1 - mu2) tan 60 at 1, and is positive below.
    """
    found = wedge_exponents([(60, ratio, 1.8), (120, 1, 1.8)], FREE, mode="antiplane")
    assert len(found) == (1 if ratio > 1 else 0)
    for exponent in found:
        one, two = (math.tan(exponent.real * math.radians(w)) for w in (60, 120))
        assert ratio * one + two == pytest.approx(0, abs=1e-9)


def test_refuses() -> None:
    for sectors, sides in (
        ([], FREE),
        ([(0.0, 1.0, 1.8)], FREE),
        ([(200.0, 1.0, 1.8), (170.0, 1.0, 1.8)], FREE),
        ([(90.0, 0.0, 1.8)], FREE),
        ([(90.0, 1.0, 0.9)], FREE),
        ([(90.0, 1.0, 1.8)], ("free", "glued")),
        ([(90.0, 1.0, 1.8)], None),
    ):
        with pytest.raises(Unsuitable):
            wedge_exponents(sectors, sides)
