"""Drawn cases whose solution is known: their limits are right within the bound that is stored with them.

Thick ring under inner pressure between fixed planes (Lamé; Timoshenko & Goodier 1970, Theory of Elasticity,
3rd ed., section 28, with plane strain).
"""

import math

import pytest

pytest.importorskip("ngsolve", reason="NGSolve has no package for this system")

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_ladders import drawn_ladders
from convergence.calibration.known_ladder import KnownLadder
from convergence.calibration.making import FAMILIES, UNSEEN, drawn_cases, family_names

INNER, OUTER, HEIGHT, PRESSURE = 17.0, 31.0, 9.0, 40.0
STEEL = Elastic()


def ring() -> DrawnCase:
    """Return the ring; the radius is x."""
    face = outline(
        *((OUTER, 0.0, "bottom"), (OUTER, HEIGHT, "outside"), (INNER, HEIGHT, "top"), (INNER, 0.0, "bore")),
    )
    at = (INNER, 0.5 * HEIGHT)
    return DrawnCase(
        name="ring",
        kind="axisymmetric",
        shape=face,
        size=7.0,
        held={"bottom": {"y": 0.0}, "top": {"y": 0.0}},
        tractions={"bore": (PRESSURE, 0.0)},
        readings=(
            Reading("energy", "energy", "energy"),
            Reading("widening", "displacement", "displacement", {"at": at, "component": "x"}),
            Reading("hoop", "point_stress", "stress", {"at": at, "component": "zz"}),
        ),
        levels=4,
    )


def exact() -> dict[str, float]:
    share = PRESSURE * INNER**2 / (OUTER**2 - INNER**2)
    hoop = share * (1.0 + OUTER**2 / INNER**2)
    nu = STEEL.poisson
    radius_term = (1.0 - 2.0 * nu) * INNER + OUTER**2 / INNER
    widening = (1.0 + nu) / STEEL.young * share * radius_term
    work = PRESSURE * 2.0 * math.pi * INNER * HEIGHT * widening
    return {"energy": 0.5 * work, "widening": widening, "hoop": hoop}


@pytest.fixture(scope="module")
def ladders() -> list[KnownLadder]:
    return list(drawn_ladders("ring", ring()))


@pytest.mark.slow
def test_limits_are_exact_within_their_bound(ladders) -> None:
    values = exact()
    assert {ladder.label for ladder in ladders} == set(values)
    for ladder in ladders:
        assert abs(ladder.limit - values[ladder.label]) <= ladder.bound <= 1e-6 * abs(ladder.limit)


@pytest.mark.slow
def test_every_way_of_meshing_converges_to_them(ladders) -> None:
    assert {(one.source, one.degree) for one in ladders} == {
        (source, degree) for source in ("remeshed", "nested", "perturbed") for degree in (1, 2)
    }
    for one in ladders:
        if one.label == "energy":  # from below under loads alone; other values may pass their limit
            errors = one.limit - one.f
            assert 0.0 < errors[-1] < errors[0], one


@pytest.mark.slow
def test_every_family_draws_its_cases() -> None:
    for package in (FAMILIES, UNSEEN):
        for family in family_names(package):
            cases = drawn_cases(package, family)
            assert len({case.name for case in cases}) == len(cases) >= 1, family
            for case in cases:
                assert len({one.label for one in case.readings}) == len(case.readings), case.name
