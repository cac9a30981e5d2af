"""Quarter of a block under a rectangular patch of pressure, e.g. the concrete under the davit's base plate.

On an elastic bed (Winkler 1867) it is a base plate on grout.

Far from its sides and its bottom it is a half space: Love 1929, Phil. Trans. R. Soc. A 228:377; Newmark 1935,
Univ. of Illinois Eng. Exp. Station Circ. 24, for the stress below a corner of the patch (both from memory).
Under the edge of the patch the stress depends on the direction one comes from: no value belongs there.
"""

from typing import Annotated, Literal

import numpy as np

from convergence.dimensions import ForcePerVolume, PositiveLength, Stress
from convergence.errors import require
from convergence.fem.loads import Pressure
from convergence.fem.material import Material
from convergence.fem.part import Part, graded
from convergence.fem.problem import ElasticSupport, Problem, Support
from convergence.fem.solid_part import Cap, SolidPart
from convergence.models._supports import SYMMETRY

QUANTITIES = {
    "settlement": {
        "measure": "mean_displacement",
        "boundary": "patch",
        "component": "z",
        "relative_tolerance": 0.01,
    },
    "stress_below": {
        "measure": "stress",
        "at": "centre_below",
        "component": "zz",
        "relative_tolerance": 0.02,
    },
    "bottom_force": {
        "measure": "reaction_force",
        "support": "bottom",
        "component": "z",
        "relative_tolerance": 0.001,
    },
    "energy": {"measure": "strain_energy", "relative_tolerance": 0.01},
}
Bottom = Literal["clamped", "roller", "bedded"]


def loaded_block(
    *,
    patch_half_x: Annotated[PositiveLength, "half side of the patch along x"] = 150.0,
    patch_half_y: Annotated[PositiveLength, "half side of the patch along y"] = 150.0,
    half_width: Annotated[PositiveLength, "half side of the block, along x and y"] = 600.0,
    depth: Annotated[PositiveLength, "depth of the block"] = 600.0,
    probe_depth: Annotated[PositiveLength, "depth of the plane `below`, where stress may be read"] = 150.0,
    pressure: Annotated[Stress, "pressure on the patch"] = 4.0,
    bottom: Annotated[Bottom, "held in all directions, only along z, or on an elastic bed"] = "roller",
    bedding: Annotated[ForcePerVolume, "pressure of the bed per sinking, where bedded"] = 500.0,
    material: Material,
) -> Problem:
    """z points up, the middle of the patch is the origin; symmetry on x = 0 and y = 0.

    Points centre, patch_x, patch_corner, patch_y, side_x, side_corner, side_y lie on the planes top (z = 0),
    below and bottom. Cells grow away from the patch. The bed resists along z only, in tension too.
    """
    less = f"less than half_width {half_width:g}"
    require(
        (patch_half_x < half_width, "patch_half_x", patch_half_x, less),
        (patch_half_y < half_width, "patch_half_y", patch_half_y, less),
        (probe_depth < depth, "probe_depth", probe_depth, f"less than depth {depth:g}"),
        (bedding > 0.0, "bedding", bedding, "more than 0"),
    )
    return Problem(
        title="Block under a patch of pressure",
        part=_part((patch_half_x, patch_half_y), half_width, depth, probe_depth),
        materials={"body": material},
        supports=(*SYMMETRY, _bottom(bottom, bedding)),
        loads=(Pressure("patch", pressure),),
        kind="solid",
    )


def _bottom(bottom: Bottom, bedding: float) -> Support | ElasticSupport:
    if bottom == "bedded":
        return ElasticSupport("bottom", "bottom", bedding)
    across = None if bottom == "roller" else 0.0
    return Support("bottom", x=across, y=across, z=0.0, boundary="bottom")


def _part(patch: tuple[float, float], side: float, depth: float, probe: float) -> SolidPart:
    a, b = patch
    points = {
        "centre": (0.0, 0.0),
        "patch_x": (a, 0.0),
        "patch_corner": (a, b),
        "patch_y": (0.0, b),
        "side_x": (side, 0.0),
        "side_corner": (side, side),
        "side_y": (0.0, side),
    }
    growth, deeper = side / max(a, b), depth / probe
    spokes = (("patch_x", "side_x"), ("patch_corner", "side_corner"), ("patch_y", "side_y"))
    plan = Part(
        points=points,
        blocks=(
            ("centre", "patch_x", "patch_corner", "patch_y"),
            ("patch_x", "side_x", "side_corner", "patch_corner"),
            ("patch_y", "patch_corner", "side_corner", "side_y"),
        ),
        curves={(start, end): graded(points[start], points[end], growth) for start, end in spokes},
        boundaries={
            "symmetry_x": (("side_y", "patch_y"), ("patch_y", "centre")),
            "symmetry_y": (("centre", "patch_x"), ("patch_x", "side_x")),
            "sides": (("side_x", "side_corner"), ("side_corner", "side_y")),
        },
        weights={
            ("centre", "patch_x"): 2.0,
            ("centre", "patch_y"): 2.0,
            ("patch_x", "side_x"): max(1.0, 2.0 * np.log(growth)),
        },
    )
    return SolidPart(
        plan,
        (("bottom", -depth), ("below", -probe), ("top", 0.0)),
        named={"patch": (Cap(2, 0),)},
        weights={0: max(1.0, 2.0 * np.log(deeper)), 1: max(1.0, 2.0 * probe / max(a, b))},
        ratios={0: 1.0 / deeper},
    )
