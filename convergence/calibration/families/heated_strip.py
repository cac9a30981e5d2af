"""A flat strip heated in part: a kink of the temperature along a drawn line, steep changes along none."""

from collections.abc import Sequence
from typing import Any

import ngsolve as ng
from netgen.occ import Glue, WorkPlane

from convergence.calibration.drawn_case import DrawnCase, Elastic, Reading
from convergence.corners.williams import weakest_exponent

Place = tuple[float, float]
Region = tuple[Place, Place]  # lower left corner; length and height
STEEL = Elastic(expansion=1.2e-5)
KAPPA = (3.0 - STEEL.poisson) / (1.0 + STEEL.poisson)


def heated_strip() -> list[DrawnCase]:
    """Return two strips free of corners and two clamped at an end, whose clamped corners are singular."""
    band = 60.0 * (1.0 + _tanh((ng.x - 50.0) / 4.0))
    slant = 50.0 * (1.0 + _tanh((ng.x + 0.6 * ng.y - 55.0) / 5.0))
    across = ng.IfPos(ng.y - 14.0, 9.0 * (ng.y - 14.0), 0.0)
    along = ng.IfPos(ng.x - 45.0, 2.5 * (ng.x - 45.0), 0.0)
    high, long = [((0, 0), (90, 14)), ((0, 14), (90, 16))], [((0, 0), (45, 24)), ((45, 0), (55, 24))]
    return [
        _free("hot half, smooth and steep", [((0, 0), (120, 20))], 7.0, band, (51.6, 6.2)),
        _free("kink across the height", high, 8.0, across, (82.3, 12.7), ((0, 14), (90, 14))),
        _clamped("clamped, kink along the length", long, 8.0, along, (43.0, 7.4), ((45, 0), (45, 24))),
        _clamped("clamped, slanting steep change", [((0, 0), (100, 30))], 9.0, slant, (43.0, 9.3)),
    ]


def _free(
    name: str,
    regions: Sequence[Region],
    size: float,
    temperature: Any,
    steep: Place,
    kinks: tuple[Place, ...] = (),
) -> DrawnCase:
    """Return the half of a strip that is free at the right; steep: a place of large gradients."""
    shape, length, height = _strip(regions)
    line = {"start": (0.6 * length, height), "end": (0.9 * length, height)}
    own = (
        Reading("left", "point_stress", "stress", {"at": (0.0, 0.0), "component": "xx"}),
        Reading("turn", "rotation", "rotation", line),
        Reading("end", "displacement", "displacement", {"at": (length, height), "component": "x"}),
        *_peaks("first_principal", is_singular=False),
    )
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=shape,
        size=size,
        held={"left": {"x": 0.0}, "bottom": {"y": 0.0}},
        materials={"": STEEL},
        temperature=temperature,
        readings=_common(length, height, steep) + own,
        corners=kinks,
        levels=8,
    )


def _clamped(
    name: str,
    regions: Sequence[Region],
    size: float,
    temperature: Any,
    steep: Place,
    kinks: tuple[Place, ...] = (),
) -> DrawnCase:
    """Return a strip clamped at the left, on rollers at the right."""
    shape, length, height = _strip(regions)
    within = {"component": "yy", "near": (steep[0] + 7.0, 0.5 * height), "radius": 0.5 * height}
    corner = {"at": (0.0, 0.0), "component": "xx"}
    own = (
        Reading("right", "reaction", "reaction", {"boundary": "right", "component": "x"}),
        Reading("clamped corner", "point_stress", "stress", corner, singular=True),
        Reading("middle peak", "peak_stress", "peak", within),
        *_peaks("von_mises", is_singular=True),
    )
    return DrawnCase(
        name=name,
        kind="plane_stress",
        shape=shape,
        size=size,
        held={"left": {"x": 0.0, "y": 0.0}, "right": {"x": 0.0}},
        materials={"": STEEL},
        temperature=temperature,
        readings=_common(length, height, steep) + own,
        corners=(*kinks, (0.0, 0.0), (0.0, height)),
        exponent=weakest_exponent(90.0, ("clamped", "free"), kappa=KAPPA),
        levels=8,
    )


def _strip(regions: Sequence[Region]) -> tuple[Any, float, float]:
    """Return the shape with its sides named, its length and its height."""
    faces = [WorkPlane().MoveTo(*corner).Rectangle(*lengths).Face() for corner, lengths in regions]
    shape = Glue(faces) if len(faces) > 1 else faces[0]
    length = max(x + dx for (x, _), (dx, _) in regions)
    height = max(y + dy for (_, y), (_, dy) in regions)
    for edge in shape.edges:
        sides = {"left": edge.center.x, "right": length - edge.center.x, "bottom": edge.center.y}
        sides["top"] = height - edge.center.y
        edge.name = next((side for side, distance in sides.items() if abs(distance) < 1e-9), "kink")
    return shape, length, height


def _common(length: float, height: float, steep: Place) -> tuple[Reading, ...]:
    cut = {"start": (0.55 * length, 0.0), "end": (0.55 * length, 0.45 * height), "component": "xx"}
    rise = {"at": (0.7 * length, height), "component": "y"}
    return (
        Reading("energy", "energy", "energy"),
        Reading("rise", "displacement", "displacement", rise),
        Reading("inside u", "displacement", "displacement", {"at": steep, "component": "x"}),
        Reading("steep", "point_stress", "stress", {"at": steep, "component": "xx"}),
        Reading("steep yy", "point_stress", "stress", {"at": steep, "component": "yy", "way": "direct"}),
        Reading("membrane", "point_stress", "line_stress", cut | {"part": "membrane"}),
        Reading("bending", "point_stress", "line_stress", cut | {"part": "bending"}),
    )


def _peaks(component: str, *, is_singular: bool) -> tuple[Reading, ...]:
    direct, gauss = {"component": component, "way": "direct"}, {"component": "von_mises", "way": "gauss"}
    return (
        Reading("peak nodal", "peak_stress", "peak", {"component": "von_mises"}, is_singular),
        Reading("peak unaveraged", "peak_stress", "peak", direct, is_singular),
        Reading("peak gauss", "peak_stress", "peak", gauss, is_singular),
    )


def _tanh(s: Any) -> Any:
    return 1.0 - 2.0 / (1.0 + ng.exp(2.0 * s))
