"""The plan of a quarter of a strip with a round hole, cells growing away from the hole."""

import numpy as np

from convergence.fem.part import Part, arc, graded


def holed_strip_plan(radius: float, half_width: float, half_length: float) -> Part:
    """Return the plan; the hole is centred on the origin, the strip along x."""
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
