"""Half of a C-shaped bar under end moment and end force with its exact field, e.g. the davit's bow.

Golovin 1881; Timoshenko & Goodier, Theory of Elasticity, 3rd ed., art. 29 (moment) and art. 33 (force). The
free end carries the exact tractions, the symmetry plane at the other end is what the field needs.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import Force, Moment, PositiveLength
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc
from convergence.fem.problem import Exact, Problem, Support
from convergence.models._exact import energy_of, traction_of

QUANTITIES = {
    "inner_stress": {"measure": "stress", "at": "root_inner", "component": "xx", "relative_tolerance": 0.02},
    "outer_stress": {"measure": "stress", "at": "root_outer", "component": "xx", "relative_tolerance": 0.02},
    "opening": {"measure": "displacement", "at": "end_inner", "component": "x", "relative_tolerance": 0.01},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def curved_bar(
    *,
    inner_radius: Annotated[PositiveLength, "inner radius"] = 150.0,
    outer_radius: Annotated[PositiveLength, "outer radius"] = 250.0,
    thickness: Annotated[PositiveLength, "thickness"] = 30.0,
    moment: Annotated[Moment, "moment at the free end, positive where it opens the bar"] = 0.0,
    force: Annotated[Force, "radial force on the free end, positive outward"] = 10000.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The centre is the origin, the free end on the x axis, the symmetry plane of the C on the y axis.

    The point support takes out the rigid motion along y and carries no force.
    """
    a, b = inner_radius, outer_radius
    require(
        (outer_radius > a, "outer_radius", outer_radius, f"more than inner_radius {a:g}"),
        (moment != 0.0 or force != 0.0, "force", force, "not 0 where moment is 0 too"),
    )
    part = Part(
        points={"end_inner": (a, 0.0), "end_outer": (b, 0.0), "root_outer": (0.0, b), "root_inner": (0.0, a)},
        blocks=(("end_inner", "end_outer", "root_outer", "root_inner"),),
        curves={
            ("end_inner", "root_inner"): arc((0.0, 0.0), a, 0.0, 90.0),
            ("end_outer", "root_outer"): arc((0.0, 0.0), b, 0.0, 90.0),
        },
        boundaries={
            "inner": (("root_inner", "end_inner"),),
            "end": (("end_inner", "end_outer"),),
            "outer": (("end_outer", "root_outer"),),
            "symmetry_x": (("root_outer", "root_inner"),),
        },
    )
    exact = _golovin(a, b, moment / thickness, -force / thickness, kind, material)
    energy = energy_of(exact, part, (("end_inner", "end_outer"),), thickness)
    return Problem(
        title="Curved bar with an exact solution",
        part=part,
        materials={"body": material},
        supports=(
            Support("symmetry_x", x=0.0, boundary="symmetry_x"),
            Support("pin", y=0.0, point="root_inner"),
        ),
        loads=(Traction("end", traction_of(exact.stress, (0.0, -1.0))),),
        kind=kind,
        thickness=thickness,
        exact=Exact(exact.displacement, exact.stress, energy),
    )


def _golovin(a: float, b: float, moment: float, push: float, kind: PlaneKind, material: Material) -> Exact:
    """Return the sum of both fields, of a moment and of an inward force per thickness.

    Displacements are those of plane stress; in plane strain with E/(1 - nu^2) and nu/(1 - nu).
    """
    out = material.poisson if kind == "plane strain" else 0.0
    young, nu = material.young / (1.0 - out**2), material.poisson / (1.0 - out)

    def polar(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r, angle = np.hypot(x, y), np.arctan2(y, x)
        return np.asarray(_bent(a, b, moment, nu, r, angle) + _pushed(a, b, push, nu, r, angle))

    lift = polar(np.array(0.0), np.array(a))[0]

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        c, s, (radial, around) = x / r, y / r, polar(x, y)[:2]
        return np.array([c * radial - s * around, s * radial + c * around - lift]) / young

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r = np.hypot(x, y)
        c, s, (rr, tt, rt) = x / r, y / r, polar(x, y)[2:]
        xx, yy = c * c * rr + s * s * tt - 2 * c * s * rt, s * s * rr + c * c * tt + 2 * c * s * rt
        return np.array([xx, yy, out * (rr + tt), c * s * (rr - tt) + (c * c - s * s) * rt])

    return Exact(displacement, stress)


def _bent(a: float, b: float, moment: float, nu: float, r: np.ndarray, angle: np.ndarray) -> np.ndarray:
    """Return E times the radial and tangential displacement, and the stresses rr, tt, rt, of a moment.

    Stress rr is A/r² + B (1 + 2 ln r) + 2 C in the source's letters.
    """
    log = np.log(b / a)
    scale = -2.0 * moment / ((b**2 - a**2) ** 2 - 4.0 * (a * b * log) ** 2)
    A, B = 2.0 * scale * (a * b) ** 2 * log, scale * (b**2 - a**2)
    C = scale * (a**2 * np.log(a) - b**2 * np.log(b)) - 0.5 * B
    radial = -(1 + nu) * (A / r + B * r) + 2 * (1 - nu) * (B * r * np.log(r) + C * r)
    around = 2 * B * r * (2 * angle - np.pi)
    rr = A / r**2 + B * (1 + 2 * np.log(r)) + 2 * C
    tt = -A / r**2 + B * (3 + 2 * np.log(r)) + 2 * C
    return np.array([radial, around, rr, tt, np.zeros_like(r)])


def _pushed(a: float, b: float, push: float, nu: float, r: np.ndarray, angle: np.ndarray) -> np.ndarray:
    """Return the same of an inward force: stress rr is (2 A r - 2 B/r³ + D/r) sin of the angle."""
    c, s, rest = np.cos(angle), np.sin(angle), np.pi - 2 * angle
    share = push / (a**2 - b**2 + (a**2 + b**2) * np.log(b / a))
    A, B, D = 0.5 * share, -0.5 * share * (a * b) ** 2, -share * (a**2 + b**2)
    log = D * (1 - nu) * np.log(r)
    radial = D * rest * c + s * (log + A * (1 - 3 * nu) * r**2 + B * (1 + nu) / r**2)
    around = -D * rest * s + c * (log - A * (5 + nu) * r**2 + (1 + nu) * (D - B / r**2))
    common = 2 * A * r - 2 * B / r**3 + D / r
    tt = 6 * A * r + 2 * B / r**3 + D / r
    return np.array([radial, around, common * s, tt * s, -common * c])
