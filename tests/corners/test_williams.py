"""Exponents of corner singularities against tabulated values and an equation set up differently.

The independent equation integrates the elastic equations along the arc with a matrix exponential; it
shares no formula with the code under test.
"""

import csv
import math
import time
from collections.abc import Iterator
from fractions import Fraction
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy.linalg import expm

from convergence.corners.williams import corner_exponents, weakest_exponent
from convergence.errors import Unsuitable

PRINTED = 5.1e-11  # half a unit of the tenth digit, and rounding
Complex = NDArray[np.complex128]
PAIRS = [
    ("free", "free"),
    ("free", "clamped"),
    ("clamped", "clamped"),
    ("free", "roller"),
    ("clamped", "roller"),
    ("roller", "roller"),
]

HELD = {"free": (2, 3), "clamped": (0, 1), "roller": (1, 2)}  # entries of u_r, u_t, shear, normal stress


def conditions(exponents: Complex, opening: float, sides: tuple[str, str], kappa: float) -> Complex:
    """Determinants (of the second side's conditions, on what the first leaves free) at each exponent.

    The state (u_r, u_t, shear, normal stress across the ray) of u ~ r^lambda, stress ~ r^(lambda-1) at
    r = 1 obeys state' = M state in the angle: Hooke's law (shear modulus 1, Lame's constant
    (3 - kappa)/(kappa - 1)) and the two equations of equilibrium.
    """
    lame, e = (3 - kappa) / (kappa - 1), exponents
    m = np.zeros((*e.shape, 4, 4), dtype=complex)
    m[..., 0, 1], m[..., 0, 2] = 1 - e, 1
    m[..., 1, 0], m[..., 1, 3] = -1 - lame * e / (lame + 2), 1 / (lame + 2)
    m[..., 2, 0], m[..., 2, 3] = -4 * e**2 * (lame + 1) / (lame + 2), 1 - e * lame / (lame + 2)
    m[..., 3, 2] = -1 - e
    across = expm(m * opening)
    free = [k for k in range(4) if k not in HELD[sides[0]]]
    values: Complex = np.linalg.det(across[..., np.array(HELD[sides[1]])[:, None], np.array(free)])
    return values


def agree(found: list[complex], expected: list[complex]) -> bool:
    """Whether the printed digits of every real and imaginary part are met."""
    parts = [[x for root in roots for x in (root.real, root.imag)] for roots in (found, expected)]
    return parts[0] == pytest.approx(parts[1], rel=0, abs=PRINTED)


def table() -> Iterator[tuple[tuple[str, str], float, float, list[complex]]]:
    """Yield sides, kappa, opening and exponents of every row of the table, and with the sides exchanged."""
    lines = (Path(__file__).parent / "williams.csv").read_text(encoding="utf-8").splitlines()
    for row in csv.DictReader(line for line in lines if not line.startswith("#")):
        expected = [complex(value) for value in row["exponents"].split()]
        side, other = row["side"], row["other side"]
        for kappa in (1.04, 3.0) if row["kappa"] == "any" else (float(Fraction(row["kappa"])),):
            for sides in {(side, other), (other, side)}:
                yield sides, kappa, float(row["opening"]), expected


def test_table() -> None:
    entries = list(table())
    assert len(entries) == 2 * 22 + 2 * 60 + 36
    for sides, kappa, opening, expected in entries:
        found = corner_exponents(opening, sides, kappa=kappa)
        assert agree(found, expected), (sides, kappa, opening, found, expected)


def test_l_domain() -> None:
    """Szabo and Babuska 1991, Finite Element Analysis, L-shaped domain; all printed digits but the last."""
    found = corner_exponents(270, ("free", "free"), kappa=1.8)
    assert found == pytest.approx([0.544483736782464, 0.908529189846099], abs=2e-15)


def test_corners_of_known_parts() -> None:
    """Cook's skew panel (48 wide, left edge 44, right edge from 44 to 60), and two free corners.

    Own computation, mpmath 40 digits. The free corners are rounded: 5e-4 degrees times 0.0086 a degree.
    """
    sides = ("clamped", "free")
    upper, lower = 90 + math.degrees(math.atan2(16, 48)), 90 - math.degrees(math.atan2(44, 48))
    assert (upper, lower) == pytest.approx((108.4349488, 47.4896), abs=5e-5)
    assert weakest_exponent(upper, sides, kappa=2.0) == pytest.approx(0.677164085531, abs=1e-12)
    assert weakest_exponent(upper, sides, kappa=5 / 3) == pytest.approx(0.62441889609, abs=1e-11)
    assert weakest_exponent(lower, sides, kappa=2.0) is None
    assert weakest_exponent(lower, sides, kappa=5 / 3) is None
    assert weakest_exponent(192.888, ("free", "free"), kappa=1.8) == pytest.approx(0.874851, abs=5e-6)
    assert weakest_exponent(197.112, ("free", "free"), kappa=1.8) == pytest.approx(0.840539, abs=5e-6)


def test_second_mode_starts_where_tan_w_is_w() -> None:
    start = math.degrees(4.493409457909064)
    assert start == pytest.approx(257.4534, abs=5e-5)
    assert len(corner_exponents(start - 1e-3, ("free", "free"), kappa=1.8)) == 1
    modes = corner_exponents(start + 1e-3, ("free", "free"), kappa=1.8)
    assert len(modes) == 2 and 1 - 1e-4 < modes[1].real < 1


def test_nearly_flat_corner_is_found() -> None:
    """Free-free, turn d, t = d/pi: sinc(lambda w) = sin(d)/w gives lambda = 1 - 2t + 4t^2 + O(8 t^3)."""
    for turn in (1.0, 0.01, 1e-4):
        t = turn / 180
        [root] = corner_exponents(180 + turn, ("free", "free"), kappa=1.8)
        assert root == pytest.approx(1 - 2 * t + 4 * t * t, abs=20 * t**3 + 1e-14)


@pytest.mark.parametrize("kappa", [1.0001, 1.04, 1.4, 1.8, 2.5, 3.0])
def test_clamped_free_closed_forms(kappa: float) -> None:
    """A support that ends on a straight edge, and a crack: where sin w = 0, cos(2 lambda w) is known.

    Rounding over the distance of the nearly double roots at kappa = 1.0001: 1e-16 / 1e-4, times ten.
    """
    turn = 1j * math.log(kappa) / math.pi
    edge = corner_exponents(180, ("clamped", "free"), kappa=kappa)
    assert edge == pytest.approx([0.5 + turn / 2], abs=1e-11)
    crack = corner_exponents(360, ("clamped", "free"), kappa=kappa)
    assert crack == pytest.approx([0.25 + turn / 4, 0.75 + turn / 4], abs=1e-11)


@pytest.mark.parametrize("sides", PAIRS)
@pytest.mark.parametrize("opening", [75.0, 135.0, 180.0, 225.0, 291.0, 337.0, 360.0])
def test_incompressible_limit(opening: float, sides: tuple[str, str]) -> None:
    """kappa = 1 is the limit, also where roots are double: they part like sqrt(1e-10) or slower."""
    limit, near = (
        [z for z in corner_exponents(opening, sides, kappa=kappa) if z.real < 0.999]
        for kappa in (1, 1 + 1e-10)
    )
    assert limit == pytest.approx(near, abs=1e-5)


def test_close_modes_stay_apart() -> None:
    """Just short of a crack the two modes differ; in a crack they share one value, given once."""
    assert len(corner_exponents(359.99, ("free", "free"), kappa=1.8)) == 2
    assert corner_exponents(360, ("free", "free"), kappa=1.8) == pytest.approx([0.5], abs=1e-15)


def test_right_clamped_corner_stops_being_singular_at_nu_zero() -> None:
    """At nu = 0 (kappa = 3) the exponent is 1: a uniform stress, not counted; below it, above 1."""
    sides = ("clamped", "free")
    exponents = [corner_exponents(90, sides, kappa=3 - 4 * nu)[0].real for nu in (0.01, 0.001, 1e-6)]
    assert exponents == sorted(exponents) and 1 - 1e-5 < exponents[-1] < 1
    for nu in (0.0, -1e-6, -0.1):
        assert weakest_exponent(90, sides, kappa=3 - 4 * nu) is None


def test_clamped_free_is_regular_up_to_where_the_exponent_is_one() -> None:
    """The equation at lambda = 1 is (kappa + 1)(kappa + 1 - 4 sin^2 w) = 0: 60 degrees at kappa = 2."""
    assert weakest_exponent(59.999, ("clamped", "free"), kappa=2.0) is None
    assert weakest_exponent(60.001, ("clamped", "free"), kappa=2.0) == pytest.approx(1, abs=1e-4)


@pytest.mark.parametrize("opening", [95, 110, 120, 128, 135, 150, 170, 180])
def test_roller_is_a_mirror(opening: float) -> None:
    """The mirrored wedge has these exponents (its symmetric modes) and those of its skew modes besides."""
    free = corner_exponents(opening, ("free", "roller"), kappa=1.8)
    mode_one, *_ = corner_exponents(2 * opening, ("free", "free"), kappa=1.8)
    assert free == pytest.approx([mode_one], abs=1e-14)
    clamped = corner_exponents(opening, ("clamped", "roller"), kappa=1.8)
    both = corner_exponents(2 * opening, ("clamped", "clamped"), kappa=1.8)
    assert clamped == pytest.approx(both[-1:], abs=1e-14)


def test_roller_roller_closed_form() -> None:
    sides = ("roller", "roller")
    assert corner_exponents(120, sides, kappa=1.8) == pytest.approx([0.5], abs=1e-15)
    assert corner_exponents(270, sides, kappa=1.8) == pytest.approx([1 / 3], abs=1e-15)
    assert corner_exponents(360, sides, kappa=1.8) == pytest.approx([0.5], abs=1e-15)
    assert corner_exponents(300, sides, kappa=1.8) == pytest.approx([0.2, 0.4, 0.8], abs=1e-15)
    for opening in (60, 90, 180):
        assert corner_exponents(opening, sides, kappa=1.8) == []


@pytest.mark.slow
@pytest.mark.parametrize("sides", PAIRS)
@pytest.mark.parametrize("kappa", [1.04, 1.8, 2.7 / 1.3, 3.0, 6.0])
@pytest.mark.parametrize("opening", [37.0, 75.0, 108.0, 152.0, 203.0, 236.0, 291.0, 337.0])
def test_every_root_and_no_other(opening: float, kappa: float, sides: tuple[str, str]) -> None:
    """Each exponent is a root of the independent equation, and the argument principle counts no more.

    The distance to its root is one Newton step, with the slope by a central difference. The count goes
    round 0.013 < Re < 0.987, |Im| < 4/w (which holds all), in steps small enough to follow the phase.
    """
    angle = math.radians(opening)
    found: Complex = np.array(corner_exponents(opening, sides, kappa=kappa), dtype=complex)
    step = 1e-5
    above, below = (conditions(found + d, angle, sides, kappa) for d in (step, -step))
    newton = conditions(found, angle, sides, kappa) * 2 * step / (above - below)
    assert np.all(abs(newton) < 1e-10)

    left, right, top = 0.013, 0.987, 4 / angle
    corners = [left - 1j * top, right - 1j * top, right + 1j * top, left + 1j * top, left - 1j * top]
    side = (1 + np.linspace(-1, 1, 400) ** 3) / 2  # dense at the real axis, where the roots are
    path: Complex = np.concatenate([a + (b - a) * side for a, b in pairwise(corners)])
    phases = np.angle(conditions(path[1:], angle, sides, kappa) / conditions(path[:-1], angle, sides, kappa))
    assert abs(phases).max() < 1
    inside = [1 if root.imag == 0 else 2 for root in found if left < root.real < right]
    assert phases.sum() / (2 * math.pi) == pytest.approx(sum(inside), abs=1e-6)


@given(
    opening=st.floats(20, 359.9),
    kappa=st.floats(1.05, 3.0),
    sides=st.sampled_from(PAIRS),
)
def test_exponents_move_continuously(opening: float, kappa: float, sides: tuple[str, str]) -> None:
    """Every exponent well inside the strip has a neighbour at an angle 1e-4 degrees away.

    Two real ones meet like a square root: sqrt(1.7e-6 rad) = 1.3e-3, times a factor of order one.
    """
    one = corner_exponents(opening, sides, kappa=kappa)
    other = corner_exponents(opening + 1e-4, sides, kappa=kappa)
    for here, there in ((one, other), (other, one)):
        for root in here:
            if 0.02 < root.real < 0.98:
                assert min((abs(root - near) for near in there), default=1.0) < 0.01


@pytest.mark.parametrize("sides", PAIRS)
def test_is_quick(sides: tuple[str, str]) -> None:
    """Under 20 ms a corner, the best of five: every corner of every study asks."""
    durations = []
    for _ in range(5):
        start = time.perf_counter()
        corner_exponents(270, sides, kappa=1.8)
        durations.append(time.perf_counter() - start)
    assert min(durations) < 0.02


def test_refuses() -> None:
    with pytest.raises(Unsuitable) as caught:
        corner_exponents(0, ("free", "glued"), kappa=0.5)
    assert [key for key, _, _ in caught.value.problems] == ["opening_degrees", "sides", "kappa"]
    with pytest.raises(Unsuitable):
        corner_exponents(math.nan, ("free", "free"), kappa=1.8)
