"""Quarter of a thick cylinder with a bonded liner under internal pressure, e.g. a lined hydraulic cylinder.

Lamé's field in each layer (Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 28), with one radial
displacement and one pressure at the interface. The hoop stress jumps there. Warmth strains the layers, by
their own expansion each.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress, Temperature
from convergence.errors import require
from convergence.fem.loads import Pressure, TemperatureRise
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem
from convergence.models._lame import compliances, free_growth, in_sector, ring
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "bore_hoop_stress": {"measure": "stress", "at": "bore_x", "component": "yy", "relative_tolerance": 0.02},
    "bore_growth": {"measure": "displacement", "at": "bore_x", "component": "x", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
BRONZE = Material(110000.0, 0.34, expansion=1.8e-5)


def lined_cylinder(
    *,
    inner_radius: Annotated[PositiveLength, "bore radius of the liner"] = 30.0,
    bond_radius: Annotated[PositiveLength, "radius of the interface"] = 40.0,
    outer_radius: Annotated[PositiveLength, "outer radius of the barrel"] = 55.0,
    length: Annotated[PositiveLength, "length along the axis"] = 1.0,
    pressure: Annotated[Stress, "pressure in the bore"] = 21.0,
    warmth: Annotated[Temperature, "uniform rise of temperature"] = 0.0,
    kind: PlaneKind = "plane strain",
    material: Material,
    liner_material: Material = BRONZE,
) -> Problem:
    """The barrel is of `material`, the liner of bronze by default. Points bore_x, bond_x ... lie on the axes.

    The exact field is that of the liner within the circle of the interface; cells with straight sides
    have slivers on the other side of it.
    """
    both = (liner_material, material)
    alike = all(one.expansion_y is None and one.expansion_z is None for one in both)
    require(
        (warmth == 0.0 or alike, "warmth", warmth, "0, or materials that expand alike in all directions"),
        (bond_radius > inner_radius, "bond_radius", bond_radius, f"more than inner_radius {inner_radius:g}"),
        (outer_radius > bond_radius, "outer_radius", outer_radius, f"more than bond_radius {bond_radius:g}"),
    )
    radii = (inner_radius, bond_radius, outer_radius)
    exact = _layers(*radii, pressure, warmth, kind, both)
    return Problem(
        title="Lined thick cylinder under internal pressure",
        part=_part(*radii),
        materials={"liner": liner_material, "barrel": material},
        supports=SYMMETRY,
        loads=(Pressure("bore", pressure), TemperatureRise(warmth)),
        kind=kind,
        thickness=length,
        exact=in_sector(exact, 90.0, length),
    )


def _part(a: float, c: float, b: float) -> Part:
    radii = {"bore": a, "bond": c, "outer": b}
    points = {f"{name}_x": (r, 0.0) for name, r in radii.items()}
    points |= {f"{name}_y": (0.0, r) for name, r in radii.items()}
    return Part(
        points=points,
        blocks=(("bore_x", "bond_x", "bond_y", "bore_y"), ("bond_x", "outer_x", "outer_y", "bond_y")),
        curves={(f"{name}_x", f"{name}_y"): arc((0.0, 0.0), r, 0.0, 90.0) for name, r in radii.items()},
        boundaries={
            "bore": (("bore_x", "bore_y"),),
            "outer": (("outer_x", "outer_y"),),
            "symmetry_x": (("bore_y", "bond_y"), ("bond_y", "outer_y")),
            "symmetry_y": (("bore_x", "bond_x"), ("bond_x", "outer_x")),
        },
        regions={"liner": (0,), "barrel": (1,)},
    )


def _layers(
    a: float,
    c: float,
    b: float,
    pressure: float,
    warmth: float,
    kind: PlaneKind,
    materials: tuple[Material, Material],
) -> Exact:
    """Return the field; the interface's pressure makes both layers move alike."""
    (m1, n1), (m2, n2) = (compliances(kind, material) for material in materials)
    yielding = (m1 * c**2 + n1 * a**2) / (c**2 - a**2) + (m2 * c**2 + n2 * b**2) / (b**2 - c**2)
    apart = warmth * (free_growth(kind, materials[0]) - free_growth(kind, materials[1]))
    contact = (pressure * (m1 + n1) * a**2 / (c**2 - a**2) + apart) / yielding
    liner = ring(a, c, (pressure, contact), kind, materials[0], warmth)
    barrel = ring(c, b, (contact, 0.0), kind, materials[1], warmth)

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.where(np.hypot(x, y) < c, liner.displacement(x, y), barrel.displacement(x, y))

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        return np.where(np.hypot(x, y) < c, liner.stress(x, y), barrel.stress(x, y))

    return Exact(displacement, stress, sum(layer.energy or 0.0 for layer in (liner, barrel)))
