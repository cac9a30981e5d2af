"""The next mesh: promises that hold, nothing promised beyond them, and what would do instead."""

import math
from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence import numbers
from convergence.corner import Corner
from convergence.histories.promise import LEAST_RATIO, MOST_RATIO, ONE_STEP, Promise, promise_class
from convergence.intervals import Interval, interval
from convergence.next_mesh import Next, finer, next_mesh
from convergence.results import Facts, Kind, Ladder, Level, Quantity

H = np.array([8.0, 4.0, 2.0, 1.0])
GOOD = Promise(safety=1.2, cases=100, kept=93, low=0.86, high=0.97)
BAD = Promise(safety=1.2, cases=100, kept=89, low=0.81, high=0.94)
CORNER = Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5445)


def ladder_of(h: np.ndarray, f: np.ndarray, unknowns: float = 2e4) -> Ladder:
    """Costs in the plane: seconds grow with the power 1.2 of the unknowns, memory in proportion."""
    levels = []
    for size, value in zip(h, f, strict=True):
        dofs = int(unknowns / size**2)
        levels.append(
            Level(float(size), dofs // 2, dofs, 1e-4 * dofs**1.2, {"f": float(value)}, 50.0 + 0.01 * dofs)
        )
    return Ladder(tuple(levels), "t", h_unit="mm")


def judged(f: np.ndarray, h: np.ndarray = H, kind: Kind = "displacement", degree: int | None = 1) -> Interval:
    return interval(h, f, kind=kind, degree=degree)


def ahead(
    f: np.ndarray,
    share: float,
    kind: Kind = "displacement",
    degree: int | None = 1,
    facts: Facts | None = None,
    unknowns: float = 2e4,
) -> Next:
    """What is said where the tolerance is a share of the half-width."""
    found = judged(f, kind=kind, degree=degree)
    quantity = Quantity("f", kind, "mm", degree, 2.0)
    return next_mesh(
        quantity, found, share * found.half_width, 2.0, ladder_of(H, f, unknowns), facts or Facts()
    )


def taught(monkeypatch: pytest.MonkeyPatch, promise: Promise) -> None:
    kinds = ("whole, regular", "whole, irregular", "unknown, regular", "unknown, irregular")
    table = SimpleNamespace(next_mesh=dict.fromkeys((*kinds, "peak_stress", "point_stress/1"), promise))
    monkeypatch.setattr("convergence.next_mesh.table", lambda: table)


def test_the_bound_solved_for_the_ratio() -> None:
    """Safety / ratio is the share asked for; no ratio below the least that counts as a level."""
    for share in (0.9, 0.5, 0.05):
        assert GOOD.safety / GOOD.ratio(share) == pytest.approx(share)
    assert GOOD.ratio(0.999) == LEAST_RATIO


def test_a_promise_the_bank_did_not_keep_is_no_promise() -> None:
    assert GOOD.is_good and not BAD.is_good
    assert not Promise(1.2, 20, 20, 0.83, 1.0).is_good, "too few cases"


def test_classes() -> None:
    assert promise_class("energy", 2, 3.0, 1.0) == "whole, regular"
    assert promise_class("energy", None, 3.1, 1.0) == "whole, irregular"
    assert promise_class("unknown", None, 3.1, 0.0) == "unknown, irregular"
    assert promise_class("point_stress", None, 1.0, 1.0) == "point_stress/1"
    assert promise_class("point_stress", 3, 1.0, 1.0) == "point_stress/2"
    assert promise_class("peak_stress", 2, 1.0, 1.0) == "peak_stress"


def test_the_promised_size_and_its_cost(monkeypatch: pytest.MonkeyPatch) -> None:
    """Half the half-width at safety 1.2: 2.4 times finer; in the plane 2.4² times the cells."""
    taught(monkeypatch, GOOD)
    said = ahead(40.0 + 0.1 * H**2, 0.5)
    assert said.mesh.h == pytest.approx(1.0 / 2.4)
    growth = 2.4**2
    assert said.mesh.cells == pytest.approx(1e4 * growth) and said.mesh.dofs == pytest.approx(2e4 * growth)
    assert said.mesh.seconds == pytest.approx(1e-4 * 2e4**1.2 * growth**1.2, rel=1e-6)
    assert said.mesh.memory == pytest.approx(50.0 + 0.01 * 2e4 * growth, rel=1e-6)
    cost = numbers.cost(said.mesh.cells, said.mesh.dofs, said.mesh.seconds, said.mesh.memory)
    assert said.advice == (f"A cell size of about 0.417 mm{cost} would do with a probability of 90 %.",)


def test_a_far_promise_asks_for_levels_between(monkeypatch: pytest.MonkeyPatch) -> None:
    taught(monkeypatch, GOOD)
    far = ahead(40.0 + 0.1 * H**2, 0.3)
    assert ONE_STEP < far.mesh.ratio <= MOST_RATIO
    assert "with levels between, at ratios up to 2.6." in far.advice[0]


def test_nothing_is_promised_farther_than_the_bank_shows(monkeypatch: pytest.MonkeyPatch) -> None:
    """A size 8 times finer is the last one: 1.2 / 8 is 0.15."""
    taught(monkeypatch, GOOD)
    f = 40.0 + 0.1 * H**2
    assert ahead(f, 0.151).mesh.ratio == pytest.approx(1.2 / 0.151)
    beyond = ahead(f, 0.149)
    assert math.isnan(beyond.mesh.h)
    assert beyond.advice[0].startswith("No mesh can be promised to do")
    step = finer(ladder_of(H, f), 2.0, 2)
    cost = numbers.cost(step.cells, step.dofs, step.seconds, step.memory)
    assert f"Refine in steps: a cell size of about 0.5 mm{cost} next, then judge again." in beyond.advice[0]
    assert "is needed in the end." in beyond.advice[0]


def test_what_the_bank_did_not_keep_is_refined_in_steps(monkeypatch: pytest.MonkeyPatch) -> None:
    taught(monkeypatch, BAD)
    said = ahead(40.0 + 0.1 * H**2, 0.5)
    assert math.isnan(said.mesh.h) and "Refine in steps" in said.advice[0]


def test_out_of_reach_says_what_would_do(monkeypatch: pytest.MonkeyPatch) -> None:
    taught(monkeypatch, GOOD)
    f = 40.0 - 10.0 * H**0.3
    said = ahead(f, 1e-4)
    assert math.isnan(said.mesh.h) and said.advice[0].startswith(
        "No affordable mesh would do: if an order of"
    )
    assert "use cells of degree 2 or another quantity" in said.advice[0]
    assert "graded towards the corners" in ahead(f, 1e-4, facts=Facts(corners=(CORNER,))).advice[0]
    assert "degree 2" not in ahead(f, 1e-4, degree=2).advice[0]
    assert "if these are of degree 1" in ahead(f, 1e-4, kind="unknown", degree=None).advice[0]
    place = ahead(f, 1e-4, kind="point_stress").advice[0]
    assert "a mesh graded towards the place or a mean over a region or a resultant." in place


def test_a_promised_mesh_may_be_out_of_reach_too(monkeypatch: pytest.MonkeyPatch) -> None:
    taught(monkeypatch, GOOD)
    large = ahead(40.0 + 0.1 * H**2, 0.5, unknowns=4e7)
    assert large.mesh.dofs > 5e7 and "would do with a probability" in large.advice[0]
    assert large.advice[1].startswith("That is out of reach; use cells of degree 2")


@settings(deadline=None, max_examples=25)
@given(
    order=st.floats(0.2, 4.0),
    stray=st.lists(st.floats(-0.3, 0.3), min_size=4, max_size=4),
    kind=st.sampled_from(["displacement", "peak_stress", "point_stress", "unknown"]),
    degree=st.sampled_from([1, 2]),
)
def test_a_tighter_tolerance_never_gives_a_coarser_mesh(
    order: float, stray: list[float], kind: Kind, degree: int
) -> None:
    """Nor a promise where a wider tolerance had none."""
    f = 40.0 + 0.1 * H**order * (1.0 + np.array(stray))
    found, ladder = judged(f, kind=kind, degree=degree), ladder_of(H, f)
    quantity = Quantity("f", kind, "mm", degree, 2.0)
    shares = (0.99, 0.9, 0.7, 0.5, 0.3, 0.1, 0.01, 1e-9)
    said = [next_mesh(quantity, found, x * found.half_width, 2.0, ladder, Facts()) for x in shares]
    sizes = [one.mesh.h for one in said]
    promised = [size for size in sizes if math.isfinite(size)]
    assert promised == sorted(promised, reverse=True) and all(math.isnan(x) for x in sizes[len(promised) :])
    assert all(one.advice and one.advice[0].endswith(".") for one in said)


@pytest.mark.parametrize("kind, degree", [("displacement", 1), ("energy", 2), ("unknown", None)])
def test_promises_hold_on_ladders_that_follow_a_power(kind: Kind, degree: int | None) -> None:
    """Errors c h^p, straying by a few per cent: nine promises in ten are kept, as is said of the bank."""
    random = np.random.default_rng(7)
    kept = []
    for order in (1.0, 1.5, 2.0, 2.5, 3.0):
        for share in (0.8, 0.6, 0.4):

            def value(h: np.ndarray, order: float = order) -> np.ndarray:
                return np.asarray(40.0 + 0.1 * h**order * (1.0 + 0.03 * random.standard_normal(len(h))))

            f = value(H)
            said = ahead(f, share, kind=kind, degree=degree)
            if math.isfinite(said.mesh.h):
                count = math.ceil(math.log(said.mesh.ratio) / math.log(ONE_STEP))
                added = said.mesh.ratio ** (-np.arange(1.0, count + 1.0) / count)
                more = np.append(f, value(added))
                after = judged(more, np.append(H, added), kind, degree).half_width
                kept.append(after <= share * judged(f, kind=kind, degree=degree).half_width)
    assert len(kept) >= 5 and sum(kept) >= 0.9 * len(kept)
