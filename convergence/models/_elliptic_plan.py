"""The plan of a quarter of an elliptic panel with an elliptic opening."""

import numpy as np

from convergence.fem.part import Part, ellipse, graded


def elliptic_plan(opening: tuple[float, float], outer: tuple[float, float]) -> Part:
    """Return the plan from the half axes (x, y) of the opening and of the outer edge."""
    middle = np.sqrt(0.5)
    points = {
        "opening_x": (opening[0], 0.0),
        "outer_x": (outer[0], 0.0),
        "outer_middle": (middle * outer[0], middle * outer[1]),
        "opening_middle": (middle * opening[0], middle * opening[1]),
        "opening_y": (0.0, opening[1]),
        "outer_y": (0.0, outer[1]),
    }
    ratio = sum(outer) / sum(opening)
    spokes = (("opening_x", "outer_x"), ("opening_middle", "outer_middle"), ("opening_y", "outer_y"))
    return Part(
        points=points,
        blocks=(
            ("opening_x", "outer_x", "outer_middle", "opening_middle"),
            ("opening_y", "opening_middle", "outer_middle", "outer_y"),
        ),
        curves={
            ("opening_x", "opening_middle"): ellipse(*opening, 0.0, 45.0),
            ("opening_middle", "opening_y"): ellipse(*opening, 45.0, 90.0),
            ("outer_x", "outer_middle"): ellipse(*outer, 0.0, 45.0),
            ("outer_middle", "outer_y"): ellipse(*outer, 45.0, 90.0),
            **{(a, b): graded(points[a], points[b], ratio) for a, b in spokes},
        },
        boundaries={
            "opening": (("opening_x", "opening_middle"), ("opening_middle", "opening_y")),
            "outer": (("outer_x", "outer_middle"), ("outer_middle", "outer_y")),
            "symmetry_x": (("outer_y", "opening_y"),),
            "symmetry_y": (("opening_x", "outer_x"),),
        },
    )
