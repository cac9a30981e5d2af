"""Quarter of a strip with a central round hole in tension, e.g. a tie of the davit with a pin hole.

Howland 1930, Phil. Trans. R. Soc. A 229:49, for the infinite strip; three widths from hole to end are
as good as that.
"""

from typing import Annotated

import numpy as np

from convergence.dimensions import PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Traction
from convergence.fem.material import Material, PlaneKind
from convergence.fem.part import Part, arc, graded
from convergence.fem.problem import Problem
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "hole_stress": {"measure": "stress", "at": "hole_top", "component": "xx", "relative_tolerance": 0.02},
    "edge_stress": {
        "measure": "stress",
        "at": "edge_opposite",
        "component": "xx",
        "relative_tolerance": 0.02,
    },
    "elongation": {
        "measure": "mean_displacement",
        "boundary": "end",
        "component": "x",
        "relative_tolerance": 0.01,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}


def holed_strip(
    *,
    width: Annotated[PositiveLength, "full width"] = 60.0,
    hole_diameter: Annotated[PositiveLength, "diameter of the hole"] = 24.0,
    half_length: Annotated[PositiveLength, "length from the middle of the hole to the loaded end"] = 180.0,
    thickness: Annotated[PositiveLength, "thickness"] = 10.0,
    tension: Annotated[Stress, "stress of the gross section at the end, along x"] = 50.0,
    kind: PlaneKind = "plane stress",
    material: Material,
) -> Problem:
    """The hole is centred on the origin, the strip along x; hole_top has the largest stress.

    Four cells per division around the hole's quarter; along the spokes they grow with the distance.
    """
    require(
        (hole_diameter < width, "hole_diameter", hole_diameter, f"less than width {width:g}"),
        (half_length > 0.5 * width, "half_length", half_length, f"more than half of width {width:g}"),
    )
    return Problem(
        title="Strip with a round hole in tension",
        part=_part(0.5 * hole_diameter, 0.5 * width, half_length),
        materials={"body": material},
        supports=SYMMETRY,
        loads=(Traction("end", (tension, 0.0)),),
        kind=kind,
        thickness=thickness,
    )


def _part(radius: float, half_width: float, half_length: float) -> Part:
    diagonal = radius * np.sqrt(0.5)
    points = {
        "hole_end": (radius, 0.0),
        "axis": (half_width, 0.0),
        "edge": (half_width, half_width),
        "edge_opposite": (0.0, half_width),
        "hole_top": (0.0, radius),
        "hole_diagonal": (diagonal, diagonal),
        "end_axis": (half_length, 0.0),
        "end_edge": (half_length, half_width),
    }
    ratio = half_width / radius
    spokes = (("hole_end", "axis"), ("hole_diagonal", "edge"), ("hole_top", "edge_opposite"))
    return Part(
        points=points,
        blocks=(
            ("hole_end", "axis", "edge", "hole_diagonal"),
            ("hole_top", "hole_diagonal", "edge", "edge_opposite"),
            ("axis", "end_axis", "end_edge", "edge"),
        ),
        curves={
            ("hole_end", "hole_diagonal"): arc((0.0, 0.0), radius, 0.0, 45.0),
            ("hole_diagonal", "hole_top"): arc((0.0, 0.0), radius, 45.0, 90.0),
            **{(a, b): graded(points[a], points[b], ratio) for a, b in spokes},
        },
        boundaries={
            "hole": (("hole_end", "hole_diagonal"), ("hole_diagonal", "hole_top")),
            "edge": (("end_edge", "edge"), ("edge", "edge_opposite")),
            "end": (("end_axis", "end_edge"),),
            "symmetry_x": (("edge_opposite", "hole_top"),),
            "symmetry_y": (("hole_end", "axis"), ("axis", "end_axis")),
        },
        weights={
            ("axis", "edge"): 2.0,
            ("edge", "edge_opposite"): 2.0,
            ("hole_end", "axis"): max(1.0, 2.0 * np.log(ratio) / (0.25 * np.pi)),
            ("axis", "end_axis"): 2.0 * (half_length - half_width) / half_width,
        },
    )
