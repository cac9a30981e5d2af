"""Energies approach their limit from one side: what is cut off, and where theory says so."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from convergence.fem.loads import TemperatureRise
from convergence.fem.material import material
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.intervals import Interval, interval
from convergence.judgement import facts_of, judge
from convergence.models.thick_cylinder import thick_cylinder
from convergence.one_sided import one_sided
from convergence.quantities import potential_energy, strain_energy, work_of_load
from convergence.results import Ladder, Level
from convergence.study import load

H = np.array([8.0, 4.0, 2.0, 1.0])
RISING = np.array([93.0, 97.5, 98.2, 99.4])  # as meshed anew each time: the interval reaches below 99.4


def judged(f: np.ndarray) -> Interval:
    return interval(H, f, kind="energy", degree=1)


def test_the_side_without_the_limit_is_cut_off() -> None:
    whole = judged(RISING)
    found = one_sided(whole, RISING, 1)
    assert whole.low < found.low == found.value == RISING[-1]
    assert (found.high, found.limit, found.coverage) == (whole.high, whole.limit, whole.coverage)
    assert found.half_width == found.high - found.value
    assert found.side.startswith("By theory the limit is above the value")


def test_the_side_turns_with_the_sign_of_the_values() -> None:
    up, down = one_sided(judged(RISING), RISING, 1), one_sided(judged(-RISING), -RISING, -1)
    assert (down.low, down.high) == pytest.approx((-up.high, -up.low))


def test_nothing_is_cut_where_theory_is_silent() -> None:
    whole = judged(RISING)
    assert one_sided(whole, RISING, 0) is whole


def test_nothing_is_cut_where_the_ladder_moves_against_theory() -> None:
    whole = judged(RISING)
    assert one_sided(whole, RISING, -1) is whole


def test_nothing_is_cut_from_an_interval_on_the_other_side_or_from_none() -> None:
    beyond = replace(judged(RISING), low=80.0, high=90.0)
    assert one_sided(beyond, RISING, 1) is beyond
    none = interval(H[:1], RISING[:1])
    assert one_sided(none, RISING[:1], 1) is none


@pytest.fixture
def cylinder() -> Problem:
    return thick_cylinder(material=material())


@pytest.mark.parametrize(
    ("supports", "warmed", "strain", "work", "potential"),
    [
        ((Support("foot", x=0.0, boundary="bore"),), False, 1, 1, -1),
        ((Support("foot", x=0.0, boundary="bore"),), True, 0, 0, -1),
        ((Support("foot", x=0.1, boundary="bore"),), False, 0, 0, -1),
        ((Support("foot", x=lambda x, y: x * y, boundary="bore"),), False, 0, 0, 0),
        ((ElasticSupport("bed", "bore", 1.0),), False, 0, 1, -1),
    ],
)
def test_what_theory_says_of_a_problem(
    cylinder: Problem, supports: tuple, warmed: bool, strain: int, work: int, potential: int
) -> None:
    warmth = (TemperatureRise(10.0),) if warmed else ()
    problem = replace(cylinder, supports=supports, loads=cylinder.loads + warmth)
    assert strain_energy.side(problem, {"region": None}) == strain
    assert work_of_load.side(problem, {"boundary": None}) == work
    assert potential_energy.side(problem, {}) == potential


def test_a_part_of_an_energy_has_no_side(cylinder: Problem) -> None:
    assert strain_energy.side(cylinder, {"region": "body"}) == 0
    assert work_of_load.side(cylinder, {"boundary": "bore"}) == 0


STUDY = """
[model]
name = "thick_cylinder"
[ladder]
divisions = 1
levels = 4
shape = "triangle"
degree = 1
[quantities.strain]
measure = "strain_energy"
[quantities.potential]
measure = "potential_energy"
"""


def test_a_study_uses_what_theory_says_and_says_so(tmp_path: Path) -> None:
    file = tmp_path / "barrel.toml"
    file.write_text(STUDY)
    study = load(file)
    facts = facts_of(study)
    assert facts.sides == {"strain": 1, "potential": -1}
    rows = zip(H, RISING, strict=True)
    levels = tuple(Level(h, 1, 1, 0.1, {"strain": f, "potential": -f}) for h, f in rows)
    found = judge(Ladder(levels, "barrel"), study.quantities, facts, "barrel").verdicts
    strain, potential = found["strain"], found["potential"]
    assert strain.low == strain.value < strain.limit < strain.high
    assert potential.low < potential.limit < potential.value == potential.high
    for verdict in (strain, potential):
        assert any(reason.startswith("By theory") for reason in verdict.reasons)


def test_mean_dilatation_has_no_such_side(tmp_path: Path) -> None:
    file = tmp_path / "barrel.toml"
    cells = 'shape = "quadrilateral"\nformulation = "mean dilatation"'
    file.write_text(STUDY.replace('shape = "triangle"', cells))
    assert facts_of(load(file)).sides == {"strain": 0, "potential": 0}
