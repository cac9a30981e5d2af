"""Half of a strip of two materials bonded end to end, in tension, e.g. a steel-aluminium transition joint.

The ends of the bond line are singular where the materials contract differently across the strip (Bogy 1971,
J. Appl. Mech. 38:377), but weakly: stress ~ r^-0.08 for Young's moduli 1 : 3 and one Poisson's ratio of 0.3,
plane strain. Where the materials contract alike the stress is uniform, and the field exact.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part
from convergence.fem.problem import Exact, Problem
from convergence.models._grading import Grading, away_from
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "bond_stress": {"measure": "stress", "at": "bond_axis", "component": "xx", "relative_tolerance": 0.03},
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
ALUMINIUM = Material(70000.0, 0.33)
ALIKE = 1e-12


def bonded_strip(
    *,
    width: Annotated[PositiveLength, "full width"] = 60.0,
    length: Annotated[PositiveLength, "length from the held end to the bond line"] = 60.0,
    bonded_length: Annotated[PositiveLength, "length of the bonded piece, to the loaded end"] = 60.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    tension: Annotated[Stress, "tension on the end, along x"] = 60.0,
    grading: Grading = 1.0,
    kind: PlaneKind = "plane stress",
    material: Material,
    bond_material: Material = ALUMINIUM,
) -> Problem:
    """The strip's axis is y = 0 from the held end, which is free to contract; bond_edge is singular.

    The piece beyond the bond line is of `bond_material`, aluminium by default. `grading` makes the
    cells at bond_edge smaller.
    """
    half = 0.5 * width
    return Problem(
        title="Strip of two materials in tension",
        part=_part(half, length, length + bonded_length, grading),
        materials={"held": material, "bonded": bond_material},
        supports=SYMMETRY,
        loads=(Traction("end", (tension, 0.0)),),
        kind=kind,
        thickness=thickness,
        exact=_series((length, bonded_length), half * thickness, tension, kind, (material, bond_material)),
    )


def _part(half: float, bond: float, end: float, grading: float) -> Part:
    points = {
        "held_axis": (0.0, 0.0),
        "bond_axis": (bond, 0.0),
        "end_axis": (end, 0.0),
        "end_edge": (end, half),
        "bond_edge": (bond, half),
        "held_edge": (0.0, half),
    }
    blocks = (
        ("held_axis", "bond_axis", "bond_edge", "held_edge"),
        ("bond_edge", "bond_axis", "end_axis", "end_edge"),
    )
    return Part(
        points=points,
        blocks=blocks,
        curves=away_from("bond_edge", points, blocks, grading),
        boundaries={
            "symmetry_x": (("held_edge", "held_axis"),),
            "symmetry_y": (("held_axis", "bond_axis"), ("bond_axis", "end_axis")),
            "end": (("end_axis", "end_edge"),),
            "edge": (("end_edge", "bond_edge"), ("bond_edge", "held_edge")),
        },
        regions={"held": (0,), "bonded": (1,)},
    )


def _series(
    lengths: tuple[float, float],
    section: float,
    tension: float,
    kind: PlaneKind,
    materials: tuple[Material, Material],
) -> Exact | None:
    """Return the uniform field of two materials that contract alike across the strip, else None."""
    out = 1.0 if kind == "plane strain" else 0.0
    along = [tension * (1.0 - out * m.poisson**2) / m.young for m in materials]
    across = [tension * m.poisson * (1.0 + out * m.poisson) / m.young for m in materials]
    if abs(across[1] - across[0]) > ALIKE * abs(across[0]):
        return None
    bond = lengths[0]

    def displacement(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        beyond = np.maximum(x - bond, 0.0)
        return np.array([along[0] * (x - beyond) + along[1] * beyond, -across[0] * y])

    def stress(x: np.ndarray, y: np.ndarray) -> np.ndarray:
        zz = out * tension * np.where(x < bond, materials[0].poisson, materials[1].poisson)
        return np.array([np.full_like(zz, tension), 0.0 * zz, zz, 0.0 * zz])

    elongation = along[0] * lengths[0] + along[1] * lengths[1]
    return Exact(displacement, stress, energy=0.5 * tension * section * elongation)
