"""Loads and reactions in balance: by hand, and whatever the point, the turn and the units."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.errors import Unsuitable
from convergence.statics import COMPONENTS, IN_PLANE, Actions, Balance, Component, Printout, balances, finding

ROUND_OFF = 1e-9  # a few hundred operations on doubles, far below any printed digit


def actions(is_load: list[bool], force: np.ndarray, point: np.ndarray, moment: np.ndarray | None = None,
            half: float = 0.0) -> Actions:  # fmt: skip
    moment = np.zeros_like(force) if moment is None else moment
    names = tuple(f"row {number}" for number in range(len(is_load)))
    same = np.full(force.shape, half)
    return Actions(np.array(is_load), names, force, moment, point, same, same)


def balance(of: Actions, about: tuple[float, ...] | None = None, tolerance: float = 1e-3,
            components: tuple[str, ...] = COMPONENTS) -> Balance:  # fmt: skip
    return balances(Printout("rows", {"": of}, components), about, tolerance)[""]


def plane(*rows: tuple[str, float, float, float, float, float]) -> Actions:
    """Rows of what, fx, fy, mz, x, y."""
    what, fx, fy, mz, x, y = zip(*rows, strict=True)
    none = np.zeros(len(rows))
    force, moment, point = np.array([fx, fy, none]), np.array([none, none, mz]), np.array([x, y, none])
    return actions([word == "load" for word in what], force, point, moment)


def by_name(found: Balance) -> dict[str, Component]:
    return {one.name: one for one in found.components}


# span 6 m, 10 kN at 2 m from A: the supports take P b / L and P a / L (textbook statics)
BEAM = plane(("load", 0, -10, 0, 2, 0), ("reaction", 0, 20 / 3, 0, 0, 0), ("reaction", 0, 10 / 3, 0, 6, 0))
# a davit: 12.5 kN at 3 m and 2 kN of its own at 1.2 m; the foot takes all weight, a guide 2 m above it the
# couple (12.5 · 3 + 2 · 1.2) / 2 = 19.95 kN (own computation, moments about the foot)
DAVIT = plane(
    ("load", 0, -12.5, 0, 3, 4),
    ("load", 0, -2, 0, 1.2, 3),
    ("reaction", -19.95, 0, 0, 0, 2),
    ("reaction", 19.95, 14.5, 0, 0, 0),
)


@pytest.mark.parametrize("of", [BEAM, DAVIT])
@pytest.mark.parametrize("about", [(0.0, 0.0), (6.0, 0.0), (-3.0, 11.0)])
def test_supports_computed_by_hand_balance(of: Actions, about: tuple[float, float]) -> None:
    found = balance(of, about, components=IN_PLANE)
    assert found.passed is True and all(one.missing == 0.0 for one in found.components)
    assert found.about == about


def test_the_sums_and_what_they_are_measured_by() -> None:
    """Loads of the davit: 14.5 kN, -39.9 kNm about the foot; the points span 3 m by 4 m, that is 5 m."""
    found = by_name(balance(DAVIT, components=IN_PLANE))
    assert found["Fy"].loads == pytest.approx(-14.5) and found["Fy"].reactions == pytest.approx(14.5)
    assert found["Mz"].loads == pytest.approx(-39.9) and found["Mz"].reactions == pytest.approx(39.9)
    assert found["Fx"].scale == found["Fy"].scale == pytest.approx(14.5)
    assert found["Mz"].scale == pytest.approx(14.5 * 5.0)
    far = by_name(balance(DAVIT, (-100.0, 0.0), components=IN_PLANE))
    assert far["Mz"].scale == pytest.approx(12.5 * 103.0), "the largest moment of a single load"


def test_a_solid_by_hand() -> None:
    """Moments r × F: y Fz - z Fy, z Fx - x Fz, x Fy - y Fx with r = (3, 0.2, 4.2), F = (1.5, -0.8, -12.5)."""
    moment = [-(0.2 * -12.5 - 4.2 * -0.8), -(4.2 * 1.5 - 3 * -12.5), -(3 * -0.8 - 0.2 * 1.5)]
    of = actions(
        [True, False],
        np.array([[1.5, -1.5], [-0.8, 0.8], [-12.5, 12.5]]),
        np.array([[3.0, 0.0], [0.2, 0.0], [4.2, 0.0]]),
        np.array([[0.0, 0.0, 0.0], moment]).T,
    )
    found = balance(of)
    assert found.passed is True and [one.name for one in found.components] == list(COMPONENTS)
    assert by_name(found)["My"].loads == pytest.approx(43.8)


def test_a_lost_moment_is_found_and_named_where_forces_balance() -> None:
    """The guide 0.1 m lower than it is: 19.95 kN · 0.1 m = 1.995 kNm of 72.5 kNm are missing."""
    point = DAVIT.point.copy()
    point[1, 2] -= 0.1
    found = balance(actions(list(DAVIT.is_load), DAVIT.force, point), components=IN_PLANE)
    assert found.passed is False and found.worst.name == "Mz"
    assert found.worst.share == pytest.approx(1.995 / 72.5)
    assert "Mz, is off by 2.75 % of the load (allowed 0.1 %)" in finding(found)


def test_reactions_that_are_listed_as_forces_on_the_supports_are_recognised() -> None:
    force = np.where(DAVIT.is_load, DAVIT.force, -DAVIT.force)
    found = balance(actions(list(DAVIT.is_load), force, DAVIT.point), components=IN_PLANE)
    assert found.passed is False and found.reversed and "signs of the reactions turned" in finding(found)
    assert not balance(DAVIT, components=IN_PLANE).reversed


def test_out_of_balance_within_the_printed_digits_is_told_apart() -> None:
    """Printed as 6.667 and 3.333: moments about A are off by 0.002, 0.0005 · (2 + 6) = 0.004 is allowed."""
    force = BEAM.force.round(3)
    of = actions(list(BEAM.is_load), force, BEAM.point, half=0.0005)
    fine = balance(of, components=IN_PLANE)
    assert fine.passed is True and by_name(fine)["Mz"].missing == pytest.approx(-0.002)
    strict = balance(of, tolerance=1e-6, components=IN_PLANE)
    assert strict.passed is None and strict.worst.word == "within rounding"
    assert by_name(strict)["Mz"].rounding == pytest.approx(0.0005 * 8 + 3 * 0.0005)
    assert "cannot be told from the printed digits" in finding(strict)
    exact = actions(list(BEAM.is_load), force, BEAM.point)
    assert balance(exact, tolerance=1e-6, components=IN_PLANE).passed is False


def test_what_is_left_at_the_tolerance_itself_is_accepted_and_never_rounded_across_it() -> None:
    of = plane(("load", 0, -1024, 0, 0, 0), ("reaction", 0, 1023, 0, 0, 0))
    assert balance(of, tolerance=1 / 1024, components=IN_PLANE).passed is True
    of = plane(("load", 0, -1000, 0, 0, 0), ("reaction", 0, 998.9999, 0, 0, 0))
    found = balance(of, components=IN_PLANE)
    assert found.passed is False and "off by 0.10001 % of the load (allowed 0.1 %)" in finding(found)


def test_where_no_load_is_a_force_the_reactions_measure() -> None:
    """A couple of 60 on a span of 6 is held by 10 up and 10 down."""
    of = plane(("load", 0, 0, 60, 1, 0), ("reaction", 0, -10, 0, 6, 0), ("reaction", 0, 10, 0, 0, 0))
    found = balance(of, components=IN_PLANE)
    assert found.passed is True and by_name(found)["Fy"].scale == pytest.approx(20.0)
    held = plane(("load", 0, 0, 60, 1, 0), ("reaction", 0, 0, -60, 0, 0))
    assert balance(held, components=IN_PLANE).passed is True
    lost = balance(plane(("load", 0, 0, 0, 1, 0), ("reaction", 0, 0, -60, 0, 0)), components=IN_PLANE)
    assert lost.passed is False and lost.worst.share == math.inf


def test_a_point_needs_the_coordinates_of_the_table() -> None:
    with pytest.raises(Unsuitable, match="give 2 coordinates"):
        balances(Printout("rows", {"": BEAM}, IN_PLANE), (0.0, 0.0, 0.0))


numbers = st.floats(-100.0, 100.0).map(lambda x: round(x, 3))
vectors = st.tuples(numbers, numbers, numbers)
rows = st.lists(st.tuples(vectors, vectors, vectors), min_size=1, max_size=6)


def held(loads: list[tuple[tuple[float, ...], ...]]) -> Actions:
    """Loads (force, moment, point), and the one reaction at a fixed place that holds them."""
    force, moment, point = (np.array(part).T for part in zip(*loads, strict=True))
    foot = np.array([3.0, -2.0, 1.0])
    total = force.sum(axis=1)
    turning = (moment + np.cross(point - foot[:, None], force, axis=0)).sum(axis=1)
    return actions(
        [True] * len(loads) + [False],
        np.column_stack([force, -total]),
        np.column_stack([point, foot]),
        np.column_stack([moment, -turning]),
    )


@given(rows, vectors, vectors, st.floats(0.0, 6.0))
@settings(max_examples=60, deadline=None)
def test_a_balanced_set_stays_balanced_about_any_point_and_however_it_is_moved(
    loads: list[tuple[tuple[float, ...], ...]],
    about: tuple[float, float, float],
    shift: tuple[float, float, float],
    angle: float,
) -> None:
    of = held(loads)
    size = np.abs(of.force).sum() * 400.0 + np.abs(of.moment).sum() + 1.0
    turn = np.array(
        [[math.cos(angle), -math.sin(angle), 0], [math.sin(angle), math.cos(angle), 0], [0, 0, 1]]
    )
    moved = actions(
        list(of.is_load), turn @ of.force, turn @ of.point + np.array(shift)[:, None], turn @ of.moment
    )
    for one in (of, moved):
        found = balance(one, about)
        assert all(abs(c.missing) <= ROUND_OFF * size for c in found.components)


@given(rows, st.integers(0, 2), st.floats(0.01, 100.0))
@settings(max_examples=60, deadline=None)
def test_a_force_that_is_lost_is_found_whatever_the_unit(
    loads: list[tuple[tuple[float, ...], ...]], axis: int, unit: float
) -> None:
    of = held(loads)
    size = float(np.linalg.norm(of.force[:, :-1], axis=0).sum())
    if size < 1.0:
        return
    force = unit * of.force
    force[axis, -1] += 0.002 * unit * size
    found = balance(actions(list(of.is_load), force, of.point, unit * of.moment))
    assert found.passed is False
    assert by_name(found)[COMPONENTS[axis]].share == pytest.approx(0.002, rel=1e-6)
