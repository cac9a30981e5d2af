"""Eye plate with a pin hole as a solid, plain or with a boss on both sides, e.g. the davit's hanging lug.

The pin presses on half of the hole with a cosine distribution, the same over the thickness (common
practice). The edges of the clamped base and the foot of a boss are singular.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import LENGTH, Bounds, Degrees, Force, PositiveLength
from convergence.errors import require
from convergence.fem.loads import BearingLoad
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.fem.solid_part import Side, SolidPart
from convergence.models._lug_plan import RING, lug_plan

QUANTITIES = {
    "hole_stress": {
        "measure": "peak_stress",
        "boundary": "hole",
        "component": "first_principal",
        "relative_tolerance": 0.03,
    },
    "pin_travel": {
        "measure": "displacement",
        "at": "hole_0_middle",
        "component": "y",
        "relative_tolerance": 0.01,
    },
    "shank_stress": {
        "measure": "stress",
        "at": "rim_225_middle",
        "component": "yy",
        "relative_tolerance": 0.02,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def solid_lug(
    *,
    head_radius: Annotated[PositiveLength, "radius of the head, half of the shank's width"] = 40.0,
    hole_radius: Annotated[PositiveLength, "radius of the pin hole"] = 16.0,
    height: Annotated[PositiveLength, "from the clamped base to the middle of the hole"] = 90.0,
    thickness: Annotated[PositiveLength, "thickness of the plate"] = 20.0,
    boss_radius: Annotated[PositiveLength, "outer radius of the boss, if there is one"] = 26.0,
    boss_height: Annotated[
        float,
        LENGTH,
        Bounds(low=0.0, closed=True),
        "height of the boss above the plate on each side, 0 is none",
    ] = 0.0,
    force: Annotated[Force, "pull of the pin, positive"] = 25000.0,
    angle: Annotated[
        Degrees, "direction of the pull, counter-clockwise from straight away from the base"
    ] = 0.0,
    material: Material,
) -> Problem:
    """The pin's axis is z, the hole's middle the origin, the base lies on y = -height.

    Points hole_0, hole_22, hole_45 ... are named by their angle from the pull, counter-clockwise; the
    pressure begins and ends at hole_270 and hole_90. Points rim_0, rim_22 ... count from the x axis. Each
    lies on the planes back, middle and front, the hole's on the ends of a boss (boss_back, boss_front) too.
    """
    between = f"between hole_radius {hole_radius:g} and head_radius {head_radius:g}"
    fits = boss_height == 0.0 or hole_radius < boss_radius < head_radius
    require(
        (hole_radius < head_radius, "hole_radius", hole_radius, f"less than head_radius {head_radius:g}"),
        (height > head_radius, "height", height, f"more than head_radius {head_radius:g}"),
        (force > 0.0, "force", force, "a positive pull; `angle` turns it"),
        (fits, "boss_radius", boss_radius, between),
    )
    direction = np.radians(90.0 + angle)
    pull = (force * float(np.cos(direction)), force * float(np.sin(direction)), 0.0)
    boss = boss_radius if boss_height else None
    return Problem(
        title="Solid lug with a pin hole" + (" and a boss" if boss_height else ""),
        part=_part(
            lug_plan(head_radius, hole_radius, height, 90.0 + angle, boss), 0.5 * thickness, boss_height
        ),
        materials={"body": material},
        supports=(Support("base", x=0.0, y=0.0, z=0.0, boundary="base"),),
        loads=(BearingLoad("hole", pull, centre=(0.0, 0.0, 0.0), axis=(0.0, 0.0, 1.0)),),
        kind="solid",
    )


def _part(plan: Part, half: float, boss: float) -> SolidPart:
    """Return the plan swept through the plate, its ring of blocks around the hole through the boss too."""
    plate = (("back", -half), ("middle", 0.0), ("front", half))
    if not boss:
        return SolidPart(plan, plate)
    everywhere = tuple(range(len(plan.blocks)))
    foot = [(a, b) for _, a, b, _ in (plan.blocks[index] for index in RING)]
    return SolidPart(
        plan,
        (("boss_back", -half - boss), *plate, ("boss_front", half + boss)),
        filled=(RING, everywhere, everywhere, RING),
        named={"boss": tuple(Side(edge, layer) for edge in foot for layer in (0, 3))},
    )
