"""Intervals of many ladders at once: those of `calibrated`, for any angle, shift, scale and resolution."""

import numpy as np
import pytest

from convergence.histories.calibrated import Calibrated, calibrated
from convergence.histories.many import CLOSE, GROWTH, Many, many

H = np.array([4.0, 2.0, 1.0])
KNOWN = ("point_stress", 1)


def ladders(count: int, seed: int) -> np.ndarray:
    """Half of them turned anyhow, half converging: angles of the changes below 60°."""
    random = np.random.default_rng(seed)
    angle = np.concatenate([random.uniform(0.0, 2.0 * np.pi, count), random.uniform(0.0, np.pi / 3.0, count)])
    size = 10.0 ** random.uniform(-3.0, 3.0, 2 * count)
    finest = random.uniform(-100.0, 100.0, 2 * count)
    return finest + size * np.array([-np.cos(angle) - np.sin(angle), -np.sin(angle), np.zeros_like(angle)])


def alone(f: np.ndarray, resolution: float = 0.0) -> list[Calibrated]:
    kind, degree = KNOWN
    return [calibrated(H, one, kind=kind, degree=degree, resolution=resolution) for one in f.T]


def half(found: list[Calibrated]) -> np.ndarray:
    return np.array([0.5 * (one.high - one.low) for one in found])


def together(f: np.ndarray, resolution: float = 0.0) -> Many:
    return many(H, f, kind=KNOWN[0], degree=KNOWN[1], resolution=resolution)


def test_intervals_are_those_of_each_ladder_alone() -> None:
    """Steps of the table are halved where their middle is off by more than CLOSE, the rest of which is less.

    Where the answer jumps, steps of 0.1° are left: two ladders in a hundred may lie in one.
    """
    f = ladders(60, 1)
    one, all_at_once = alone(f), together(f)
    width = half(one)
    off = np.abs(0.5 * (all_at_once.high - all_at_once.low) / width - 1.0)
    assert np.mean(off > 2.0 * CLOSE) <= 0.02
    assert np.median(off) < 0.2 * CLOSE
    moved = np.abs(all_at_once.limit - [found.limit for found in one]) / width
    assert np.mean(moved > 2.0 * CLOSE) <= 0.02
    alike = [GROWTH[code] == found.growth for code, found in zip(all_at_once.growth, one, strict=True)]
    assert np.mean(alike) >= 0.98


def test_half_width_about_a_value_is_that_of_the_farther_end() -> None:
    f = ladders(10, 2)
    found = together(f)
    wanted = np.maximum(found.high - f[-1], f[-1] - found.low)
    assert (found.about(f[-1]) == wanted).all()


def test_shift_and_scale_change_nothing() -> None:
    """Round-off of a shift by 100 is 1e-14 of 100, and 1e-11 of the smallest change, 1e-3."""
    f = ladders(50, 3)
    plain, moved = together(f), together(-1e4 * (f + 7.0))
    assert moved.limit == pytest.approx(-1e4 * (plain.limit + 7.0), rel=1e-6)
    assert moved.high - moved.low == pytest.approx(1e4 * (plain.high - plain.low), rel=1e-6)


def test_rounding_widens_the_interval_as_it_does_for_one() -> None:
    """The same values moved by the same turns, each looked up to CLOSE."""
    f = np.array([[10.0, 10.0], [10.8, 10.79], [11.0, 11.01]])
    wanted = half(alone(f, 0.05))
    found = together(f, 0.05)
    assert 0.5 * (found.high - found.low) == pytest.approx(wanted, rel=3.0 * CLOSE)
    assert (found.high - found.low > together(f).high - together(f).low).all()


def test_only_the_finest_three_levels_count() -> None:
    f = ladders(5, 4)
    longer = np.vstack([f[:1] + 1.0, f])
    found = many(np.array([8.0, *H]), longer, kind=KNOWN[0], degree=KNOWN[1])
    assert (found.limit == together(f).limit).all()


def test_equal_and_missing_values_have_no_interval() -> None:
    f = np.array([[1.0, np.nan, 1.0], [1.0, 2.0, 2.0], [1.0, 3.0, 2.5]])
    found = together(f)
    assert np.isnan(found.limit).tolist() == [True, True, False]
    assert np.isnan(found.high).tolist() == [True, True, False]
    assert found.growth[:2].tolist() == [1, 1]


def test_two_levels_are_refused() -> None:
    with pytest.raises(ValueError, match="2 levels; 3 or more"):
        many(H[1:], np.zeros((2, 4)))
