"""The stress intensity of a drawn solution against Isida's centre-cracked plate."""

import math

import pytest

pytest.importorskip("ngsolve", reason="NGSolve has no package for this system")

from convergence.calibration.crack_reading import stress_intensity
from convergence.calibration.drawn_case import DrawnCase, outline
from convergence.calibration.drawn_ladders import DOUBT, _reference

# a/W -> F of a long plate; Isida 1971, Int. J. Fracture 7:301, from memory
ISIDA = {0.4: 1.1094, 0.6: 1.3033}
HALF_PRINTED = 0.00005
HALF_WIDTH, TENSION = 20.0, 50.0


def quarter(crack: float, *, turned: bool, kind: str = "plane_stress") -> DrawnCase:
    """A quarter of the plate, its crack along x; turned, upwards, with the part on its right."""
    places = {
        "crack": (crack, 0.0),
        "ligament": (HALF_WIDTH, 0.0),
        "side": (HALF_WIDTH, 4.0 * HALF_WIDTH),
        "end": (0.0, 4.0 * HALF_WIDTH),
        "middle": (0.0, 0.0),
    }
    along, across = ("y", "x") if turned else ("x", "y")
    if turned:  # mirrored, so walked the other way round: a line's name goes to its other end
        names = list(places)
        corners = [(*places[name][::-1], names[(at + 1) % len(names)]) for at, name in enumerate(names)][::-1]
    else:
        corners = [(*place, name) for name, place in places.items()]
    tip = (0.0, crack) if turned else (crack, 0.0)
    return DrawnCase(
        name="quarter",
        kind=kind,
        shape=outline(*corners),
        size=8.0,
        held={"ligament": {across: 0.0}, "middle": {along: 0.0}},
        tractions={"end": (TENSION, 0.0) if turned else (0.0, TENSION)},
        readings=(),
        corners=(tip,),
        exponent=0.5,
    )


@pytest.mark.slow
@pytest.mark.parametrize("share", ISIDA)
@pytest.mark.parametrize("turned", [False, True])
@pytest.mark.parametrize("kind", ["plane_stress", "plane_strain"])
def test_centre_crack(share: float, turned: bool, kind: str) -> None:
    """The factor depends neither on the plane kind nor on the radius (Rice 1968, J. Appl. Mech. 35:379)."""
    crack = share * HALF_WIDTH
    tip, ahead, side = ((0.0, crack), (0.0, 1.0), -1.0) if turned else ((crack, 0.0), (1.0, 0.0), 1.0)
    coarser, finest = (
        [
            stress_intensity(solution, tip=tip, ahead=ahead, side=side, radius=radius)
            / (TENSION * math.sqrt(math.pi * crack))
            for radius in (5.5, 7.5)
        ]
        for solution in (
            _reference(quarter(crack, turned=turned, kind=kind), fine=fine) for fine in (False, True)
        )
    )
    doubts = [DOUBT * abs(one - other) for one, other in zip(finest, coarser, strict=True)]
    assert max(doubts) < HALF_PRINTED
    assert abs(finest[0] - ISIDA[share]) < HALF_PRINTED + doubts[0]
    assert abs(finest[1] - finest[0]) < sum(doubts)
