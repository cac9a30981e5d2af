"""Readings of a sheet under uniform tension: scales known by hand, and what is nothing is left out."""

import math

import numpy as np
import pytest

pytest.importorskip("ngsolve", reason="NGSolve has no package for this system")

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, outline
from convergence.calibration.drawn_ladders import _read, _reference, drawn_ladders
from convergence.calibration.drawn_readings import displacement, reaction, section_force, stress
from convergence.calibration.natural_scale import NOTHING, is_nothing, natural_scale

LONG, HIGH, PULL = 30.0, 12.0, 60.0
STEEL = Elastic()


def sheet() -> DrawnCase:
    """Return a sheet whose lower and left edges glide: u = εx, v = -νεy."""
    face = outline((LONG, 0.0, "low"), (LONG, HIGH, "end"), (0.0, HIGH, "high"), (0.0, 0.0, "wall"))
    return DrawnCase(
        name="sheet",
        kind="plane_stress",
        shape=face,
        size=8.0,
        held={"wall": {"x": 0.0}, "low": {"y": 0.0}},
        tractions={"end": (PULL, 0.0)},
        readings=(
            Reading("energy", "energy", "energy"),
            displacement("end", (LONG, HIGH), "x"),
            displacement("held", (0.0, HIGH), "x"),
            Reading("turn", "rotation", "rotation", {"start": (0.0, HIGH), "end": (LONG, HIGH)}),
            reaction("wall", "wall", "x"),
            reaction("low", "low", "y"),
            section_force("end force", "end", "x"),
            stress("inside", (0.5 * LONG, 0.5 * HIGH), "xx"),
            stress("shear", (0.5 * LONG, 0.5 * HIGH), "xy"),
        ),
        levels=4,
    )


def test_scales_are_those_of_the_exact_solution() -> None:
    case = sheet()
    solution = _reference(case, fine=False)
    strain = PULL / STEEL.young
    moves = strain * math.sqrt((LONG**2 + (STEEL.poisson * HIGH) ** 2) / 3.0)
    force = PULL * HIGH
    exact = {
        "energy": 0.0,
        "end": moves,
        "held": moves,
        "turn": moves / LONG,
        "wall": force,
        "end force": force,
    }
    exact |= {"low": PULL * LONG, "inside": PULL, "shear": PULL}
    for reading in case.readings:
        assert natural_scale(solution, reading) == pytest.approx(exact[reading.label], rel=1e-9)
        nothing = reading.label in ("held", "turn", "low", "shear")
        value = _read(reading, solution)
        assert is_nothing(np.array([value]), natural_scale(solution, reading)) == nothing, reading.label


def test_one_value_above_the_bar_keeps_a_ladder() -> None:
    assert is_nothing(np.array([-NOTHING, 0.0]), 1.0)
    assert not is_nothing(np.array([-1.01 * NOTHING, 0.0]), 1.0)
    assert not is_nothing(np.array([1e-20]), 0.0)


@pytest.mark.slow
def test_what_is_nothing_is_not_in_the_ladders() -> None:
    labels = {ladder.label for ladder in drawn_ladders("sheet", sheet())}
    assert labels == {"energy", "end", "wall", "end force", "inside"}
