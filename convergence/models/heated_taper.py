"""Heated hollow part of a sphere, a cone and a neck in its meridian plane, under pressure too if wanted.

Axisymmetric, e.g. the end fitting of the davit's hydraulic cylinder. Without pressure it is the solid of test
LE11 of "The Standard NAFEMS Benchmarks" (TNSB, Rev. 3, 1990) at a tenth of its size. The two corners of
the outside are weakly singular (Williams 1952, J. Appl. Mech. 19:526).
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress, Temperature
from convergence.errors import require
from convergence.fem.loads import Pressure, TemperatureRise
from convergence.fem.material import Material
from convergence.fem.part import Part, arc
from convergence.fem.problem import Problem, Support

QUANTITIES = {
    "inner_stress": {"measure": "stress", "at": "inner", "component": "yy", "relative_tolerance": 0.03},
    "inner_growth": {"measure": "displacement", "at": "inner", "component": "x", "relative_tolerance": 0.01},
    "end_force": {
        "measure": "reaction_force",
        "support": "upper",
        "component": "y",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def heated_taper(
    *,
    inner_radius: Annotated[PositiveLength, "radius of the sphere inside"] = 100.0,
    outer_radius: Annotated[PositiveLength, "radius of the sphere outside"] = 140.0,
    bore_radius: Annotated[PositiveLength, "radius of the neck's bore"] = 70.7107,
    neck_radius: Annotated[PositiveLength, "outer radius of the neck"] = 100.0,
    cone_start: Annotated[PositiveLength, "height where the outer sphere goes over into the cone"] = 70.0,
    cone_end: Annotated[PositiveLength, "height where the cone goes over into the neck"] = 139.0,
    height: Annotated[PositiveLength, "height over all"] = 179.0,
    warmth: Annotated[Temperature, "rise at `inner`; elsewhere as radius plus height"] = 20.0,
    pressure: Annotated[Stress, "pressure inside"] = 20.0,
    material: Material,
) -> Problem:
    """x is the radius, y the height above the sphere's equator. Both ends are held along the axis.

    inner and outer lie on the equator. The rise is warmth × (x + y) / inner_radius; it needs a material
    with an expansion.
    """
    a, b = inner_radius, outer_radius
    within = f"less than outer_radius {b:g}"
    low = max(cone_start, float(np.sqrt(max(a**2 - bore_radius**2, 0.0))))
    require(
        (a < b, "inner_radius", a, within),
        (bore_radius < min(a, neck_radius), "bore_radius", bore_radius, "less than the radii around it"),
        (neck_radius < b, "neck_radius", neck_radius, within),
        (cone_end > low, "cone_end", cone_end, f"above cone_start and the bore's lower end, {low:g}"),
        (cone_end < height, "cone_end", cone_end, f"less than height {height:g}"),
        (cone_start < b, "cone_start", cone_start, within),
    )

    def rise(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.asarray(warmth * (x + y) / a)

    return Problem(
        title="Heated sphere, cone and neck",
        part=_part((a, b), (bore_radius, neck_radius), (cone_start, cone_end, height)),
        materials={"body": material},
        supports=(Support("lower", y=0.0, boundary="lower"), Support("upper", y=0.0, boundary="upper")),
        loads=(TemperatureRise(rise), Pressure("inside", pressure)),
        kind="axisymmetric",
    )


def _part(
    sphere: tuple[float, float], neck: tuple[float, float], heights: tuple[float, float, float]
) -> Part:
    (a, b), (bore, outside), (start, end, height) = sphere, neck, heights
    junction, waist = float(np.sqrt(a**2 - bore**2)), float(np.sqrt(b**2 - start**2))
    points = {
        "inner": (a, 0.0),
        "outer": (b, 0.0),
        "cone_foot": (waist, start),
        "inner_junction": (bore, junction),
        "cone_top": (outside, end),
        "bore_middle": (bore, end),
        "outer_end": (outside, height),
        "bore_end": (bore, height),
    }
    rows = (("inner", "outer"), ("inner_junction", "cone_foot"), ("bore_middle", "cone_top"))
    levels = (*rows, ("bore_end", "outer_end"))
    return Part(
        points=points,
        blocks=tuple((*low, high[1], high[0]) for low, high in zip(rows, levels[1:], strict=True)),
        curves={
            ("inner", "inner_junction"): arc(
                (0.0, 0.0), a, 0.0, float(np.degrees(np.arctan2(junction, bore)))
            ),
            ("outer", "cone_foot"): arc((0.0, 0.0), b, 0.0, float(np.degrees(np.arctan2(start, waist)))),
        },
        boundaries={
            "inside": tuple((high[0], low[0]) for low, high in zip(rows, levels[1:], strict=True)),
            "outside": tuple((low[1], high[1]) for low, high in zip(rows, levels[1:], strict=True)),
            "lower": (("inner", "outer"),),
            "upper": (("outer_end", "bore_end"),),
        },
    )
