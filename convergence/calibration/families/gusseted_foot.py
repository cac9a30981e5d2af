"""Feet stiffened by sharp gussets, plane: re-entrant corners of several openings (Williams 1952)."""

import math

import ngsolve as ng

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading, name_edges, outline
from convergence.calibration.drawn_readings import (
    Place,
    displacement,
    linearised,
    mean_displacement,
    peak,
    section_force,
    stress,
)
from convergence.calibration.exponents import weakest

ALUMINIUM = Elastic(70_000.0, 0.33)


def gusseted_foot() -> list[DrawnCase]:
    """Return half a foot between gussets, pulled upwards, and a foot with one gusset, pushed aside."""
    return [_half(), _one_sided()]


def _half() -> DrawnCase:
    """Half of a post on a plate: the gusset leaves the plate at 225 degrees, the post at 225 too."""
    shape = outline(
        (0.0, 0.0, "middle"),
        (70.0, 0.0, "bottom"),
        (70.0, 12.0, "edge"),
        (44.0, 12.0, "plate"),
        (16.0, 40.0, "gusset"),
        (16.0, 80.0, "side"),
        (0.0, 80.0, "top"),
    )
    toe, shoulder = (44.0, 12.0), (16.0, 40.0)
    return DrawnCase(
        name="post between gussets, pulled",
        kind="plane_stress",
        shape=shape,
        size=9.0,
        held={"middle": {"x": 0.0}, "edge": {"y": 0.0}},
        tractions={"top": (0.0, 40.0)},
        corners=(toe, shoulder),
        exponent=weakest("plane_stress", ((Elastic(), 225.0),)),
        readings=(
            *_common((0.0, 80.0), (8.0, 61.0), "yy"),
            mean_displacement("side", "side", "x"),
            section_force("edge force", "edge", "y"),
            stress("middle", (0.0, 0.0), "xx"),
            stress("gusset", (27.0, 21.0), "von_mises", "direct"),
            *_singular(toe, 8.0, "first_principal"),
            *linearised("post", (0.0, 52.0), (16.0, 52.0), "yy"),
        ),
    )


def _one_sided() -> DrawnCase:
    """A post with a steep gusset on one side, held along the bottom of its plate, pushed on the other."""
    shape = outline(
        (-40.0, 0.0, "left"),
        (60.0, 0.0, "bottom"),
        (60.0, 14.0, "right"),
        (30.0, 14.0, "plate"),
        (10.0, 54.0, "gusset"),
        (10.0, 90.0, "lee"),
        (-10.0, 90.0, "top"),
        (-10.0, 14.0, "luff"),
        (-40.0, 14.0, "ledge"),
    )
    name_edges(shape, {"bottom": (0.0, 0.0)})
    toe = 180.0 + math.degrees(math.atan2(40.0, 20.0))
    height = (ng.y - 14.0) / 76.0
    corner = (-10.0, 14.0)
    return DrawnCase(
        name="post with one gusset, pushed",
        kind="plane_strain",
        shape=shape,
        size=10.0,
        held={"bottom": {"y": 0.0}, "right": {"x": 0.0}},
        tractions={"luff": (3.0 * height * height, 0.0)},
        materials={"": ALUMINIUM},
        corners=((30.0, 14.0), (10.0, 54.0), corner),
        exponent=weakest("plane_strain", ((ALUMINIUM, 270.0),), ((ALUMINIUM, toe),)),
        readings=(
            *_common((10.0, 90.0), (-3.0, 47.0), "yy"),
            mean_displacement("top", "top", "x"),
            section_force("hold", "right", "x"),
            stress("plate", (2.0, 0.0), "yy"),
            stress("gusset", (14.0, 25.0), "von_mises", "direct"),
            *_singular(corner, 7.0, "yy"),
            *linearised("post", (-10.0, 62.0), (10.0, 62.0), "yy"),
        ),
    )


def _common(tip: Place, inside: Place, component: str) -> tuple[Reading, ...]:
    return (
        Reading("energy", "energy", "energy"),
        displacement("tip x", tip, "x"),
        displacement("tip y", tip, "y"),
        displacement("inside moves", inside, "magnitude"),
        stress("inside", inside, component),
    )


def _singular(at: Place, radius: float, component: str) -> tuple[Reading, ...]:
    """Return what has no limit."""
    return (
        stress("corner", at, component, singular=True),
        peak("corner nodal", "von_mises", near=at, radius=radius, singular=True),
        peak("corner gauss", component, "gauss", at, radius, singular=True),
        peak("all direct", "von_mises", "direct", singular=True),
    )
