"""L-shaped domain with the exact singular field of its inner corner, one mode at a time.

Szabó & Babuška 1991, Finite Element Analysis, the L-shaped domain; Williams 1952, J. Appl. Mech.
19:526. The outer sides carry the exact tractions, the two sides of the corner are free.
"""

from typing import Annotated, Literal

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem, Support
from convergence.models._exact import energy_of, traction_of
from convergence.models._grading import Grading, away_from
from convergence.models._supports import exact_support

Mode = Literal["I", "II"]

QUANTITIES = {
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.02},
    "opening": {"measure": "displacement", "at": "free_left", "component": "y", "relative_tolerance": 0.02},
    "corner_stress": {
        "measure": "peak_stress",
        "near": "inner_corner",
        "radius": 20.0,
        "relative_tolerance": 0.05,
    },
}
EXPONENTS = {"I": 0.544483736782464, "II": 0.908529189846099}
NORMALS = {"bottom": (0.0, -1.0), "right": (1.0, 0.0), "top": (0.0, 1.0), "left": (-1.0, 0.0)}
BISECTOR = np.radians(45.0)
HALF_OPENING = np.radians(135.0)


def l_domain(
    *,
    leg: Annotated[PositiveLength, "side of each of the three squares"] = 100.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    stress: Annotated[Stress, "strength of the field at the distance `leg` from the corner"] = 20.0,
    mode: Annotated[Mode, "symmetric (I) or skew (II) about the bisector"] = "I",
    grading: Grading = 1.0,
    kind: PlaneKind = "plane strain",
    material: Material,
) -> Problem:
    """The inner corner is the origin, the quadrant below and left of it is missing.

    A stress s means the amplitude A = s leg^(1 - lambda) of the source. The two point supports take out
    the rigid motion, far from the corner, and carry no force. `grading` makes the corner's
    cells smaller.
    """
    part = _part(leg, grading)
    exact = _singular_field(leg, stress, mode, kind, material)
    edges = [edge for name in NORMALS for edge in part.boundaries[name]]
    return Problem(
        title=f"L-shaped domain, mode {mode}",
        part=part,
        materials={"body": material},
        supports=(
            exact_support("pin", exact.displacement, point="upper_right"),
            Support("roller", y=lambda x, y: exact.displacement(x, y)[1], point="upper_left"),
        ),
        loads=tuple(Traction(name, traction_of(exact.stress, normal)) for name, normal in NORMALS.items()),
        kind=kind,
        thickness=thickness,
        exact=Exact(exact.displacement, exact.stress, energy_of(exact, part, edges, thickness)),
    )


def _part(leg: float, grading: float) -> Part:
    points = {
        "inner_corner": (0.0, 0.0),
        "free_bottom": (0.0, -leg),
        "lower_right": (leg, -leg),
        "right": (leg, 0.0),
        "upper_right": (leg, leg),
        "top": (0.0, leg),
        "upper_left": (-leg, leg),
        "free_left": (-leg, 0.0),
    }
    blocks = (
        ("inner_corner", "free_bottom", "lower_right", "right"),
        ("inner_corner", "right", "upper_right", "top"),
        ("inner_corner", "top", "upper_left", "free_left"),
    )
    return Part(
        points=points,
        blocks=blocks,
        curves=away_from("inner_corner", points, blocks, grading),
        boundaries={
            "free": (("free_left", "inner_corner"), ("inner_corner", "free_bottom")),
            "bottom": (("free_bottom", "lower_right"),),
            "right": (("lower_right", "right"), ("right", "upper_right")),
            "top": (("upper_right", "top"), ("top", "upper_left")),
            "left": (("upper_left", "free_left"),),
        },
    )


def _singular_field(leg: float, scale: float, mode: Mode, kind: PlaneKind, material: Material) -> Exact:
    """Return the source's field, turned so that its x axis is the bisector."""
    power, kappa = EXPONENTS[mode], material.kappa(kind)
    wave = np.cos if mode == "I" else np.sin
    q = -float(wave((power - 1) * HALF_OPENING) / wave((power + 1) * HALF_OPENING))
    out = material.poisson if kind == "plane strain" else 0.0
    sign, other = (1.0, np.sin) if mode == "I" else (-1.0, np.cos)
    cos, sin = float(np.cos(BISECTOR)), float(np.sin(BISECTOR))

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r, angle = np.hypot(x, y), np.arctan2(y, x) - BISECTOR
        amplitude = 0.5 * scale * leg / material.shear_modulus * (r / leg) ** power
        along = (kappa - q * (power + 1)) * wave(power * angle) - power * wave((power - 2) * angle)
        across = (kappa + q * (power + 1)) * other(power * angle) + power * other((power - 2) * angle)
        u, v = amplitude * along, amplitude * sign * across
        return np.array([cos * u - sin * v, sin * u + cos * v])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        r, angle = np.hypot(x, y), np.arctan2(y, x) - BISECTOR
        amplitude = scale * power * (r / leg) ** (power - 1)
        first, third = (power - 1) * angle, (power - 3) * angle
        xx = amplitude * ((2 - q * (power + 1)) * wave(first) - (power - 1) * wave(third))
        yy = amplitude * ((2 + q * (power + 1)) * wave(first) + (power - 1) * wave(third))
        xy = amplitude * sign * ((power - 1) * other(third) + q * (power + 1) * other(first))
        return np.array(
            [
                cos**2 * xx + sin**2 * yy - 2 * cos * sin * xy,
                sin**2 * xx + cos**2 * yy + 2 * cos * sin * xy,
                out * (xx + yy),
                cos * sin * (xx - yy) + (cos**2 - sin**2) * xy,
            ]
        )

    return Exact(displacement, stress)
