"""An L-shaped part with a sharp or filleted inner corner, cells growing away from the fillet."""

from collections.abc import Mapping

import numpy as np

from convergence.errors import require
from convergence.fem.part import Curve, EdgeName, Part, arc, graded
from convergence.models._grading import away_from

ARC_CELLS = 2.0
STEEP = 4.0


def _points(w: float, height: float, d: float, length: float, r: float) -> dict[str, tuple[float, float]]:
    nearest = r * (1.0 - np.sqrt(0.5))
    return {
        "outer_corner": (0.0, 0.0),
        "bottom_middle": (0.5 * w, 0.0),
        "bottom": (w + r, 0.0),
        "end_lower": (length, 0.0),
        "left_middle": (0.0, 0.5 * d),
        "centre": (0.5 * w, 0.5 * d),
        "arm_middle": (w + r, 0.5 * d),
        "tip": (length, 0.5 * d),
        "inner_corner": (w + nearest, d + nearest),
        "arm_upper": (w + r, d),
        "end_upper": (length, d),
        "left": (0.0, d + r),
        "post_middle": (0.5 * w, d + r),
        "post_right": (w, d + r),
        "top_left": (0.0, height),
        "top_middle": (0.5 * w, height),
        "top_right": (w, height),
    }


def l_shape(w: float, height: float, d: float, length: float, r: float, grading: float = 1.0) -> Part:
    """Return an L with an upright leg of width w, an arm of depth d and an inner corner of radius r.

    The outer corner is the origin. Without a fillet arm_upper and post_right fall on inner_corner, and
    cells grow away from it by `grading`. Unsuitable, in the words of the brackets, where a leg is too short.
    """
    require(
        (height > d + r, "post_height", height, f"more than arm_depth + fillet_radius {d + r:g}"),
        (length > w + r, "arm_length", length, f"more than post_width + fillet_radius {w + r:g}"),
        (r == 0.0 or grading == 1.0, "grading", grading, "1 with a fillet, where cells follow its radius"),
    )
    points = _points(w, height, d, length, r)
    arm, post = ("arm_upper", "post_right") if r else ("inner_corner", "inner_corner")
    inner: tuple[tuple[str, str, str, str], ...] = (
        (("centre", "arm_middle", arm, "inner_corner"), ("centre", "inner_corner", post, "post_middle"))
        if r
        else (("centre", "arm_middle", "inner_corner", "post_middle"),)
    )
    blocks = (
        ("outer_corner", "bottom_middle", "centre", "left_middle"),
        ("centre", "bottom_middle", "bottom", "arm_middle"),
        ("centre", "post_middle", "left", "left_middle"),
        *inner,
        ("arm_middle", "bottom", "end_lower", "tip"),
        ("arm_middle", "tip", "end_upper", arm),
        ("top_left", "left", "post_middle", "top_middle"),
        ("top_right", "top_middle", "post_middle", post),
    )
    return Part(
        points=points,
        blocks=blocks,
        curves=_curves(points, w, d, r) if r else away_from("inner_corner", points, blocks, grading),
        boundaries={
            "top": (("top_right", "top_middle"), ("top_middle", "top_left")),
            "end": (("end_lower", "tip"), ("tip", "end_upper")),
            "left": (("top_left", "left"), ("left", "left_middle"), ("left_middle", "outer_corner")),
            "bottom": (
                ("outer_corner", "bottom_middle"),
                ("bottom_middle", "bottom"),
                ("bottom", "end_lower"),
            ),
            "inner": (("end_upper", arm), (post, "top_right")),
            **({"fillet": ((arm, "inner_corner"), ("inner_corner", post))} if r else {}),
        },
        weights=_weights(w, height, d, length, r) if r else {},
    )


def _curves(points: Mapping[str, tuple[float, float]], w: float, d: float, r: float) -> dict[EdgeName, Curve]:
    """Return the two halves of the fillet, and the edges along which cells grow away from it."""
    centre = (points["arm_upper"][0], points["post_right"][1])
    arm, post = (_away(w, d, r, cells) for cells in _arc_cells(w, d, r))
    growing = {
        ("inner_corner", "centre"): _growth(0.5 * w, 0.5 * d, r),
        ("arm_upper", "arm_middle"): _growth(0.5 * w, 0.5 * d, r),
        ("post_right", "post_middle"): _growth(0.5 * w, 0.5 * d, r),
        **dict.fromkeys((("arm_upper", "end_upper"), ("arm_middle", "tip"), ("bottom", "end_lower")), arm),
        **dict.fromkeys(
            (("post_right", "top_right"), ("post_middle", "top_middle"), ("left", "top_left")), post
        ),
    }
    return {
        ("arm_upper", "inner_corner"): arc(centre, r, 270.0, 225.0),
        ("inner_corner", "post_right"): arc(centre, r, 225.0, 180.0),
        **{(a, b): graded(points[a], points[b], ratio) for (a, b), ratio in growing.items()},
    }


def _growth(half_width: float, half_depth: float, r: float) -> float:
    """Return how much longer the edge opposite half the fillet is."""
    return max(1.0, (max(half_width, half_depth) + r) / (0.25 * np.pi * r))


def _cell(w: float, d: float) -> float:
    """Return the size of cells far from the fillet at one division: a quarter of the narrower leg."""
    return 0.25 * min(w, d)


def _arc_cells(w: float, d: float, r: float) -> tuple[float, float]:
    """Return the cells at one division on the fillet's half at the arm, and on that at the post."""
    return tuple(max(ARC_CELLS, (0.5 * side + r) / _cell(w, d)) for side in (w, d))  # type: ignore[return-value]


def _away(w: float, d: float, r: float, arc_cells: float) -> float:
    """Return how much larger the last cell of a leg is than the first, next to the fillet; 1 if little."""
    ratio = _cell(w, d) * arc_cells / (0.25 * np.pi * r)
    return ratio if ratio > STEEP else 1.0


def _weights(w: float, height: float, d: float, length: float, r: float) -> dict[EdgeName, float]:
    """Return the cells per division: of one size far from the fillet, smaller at it."""
    cell, (arm, post) = _cell(w, d), _arc_cells(w, d, r)
    return {
        ("outer_corner", "bottom_middle"): 0.5 * w / cell,
        ("outer_corner", "left_middle"): 0.5 * d / cell,
        ("inner_corner", "arm_upper"): arm,
        ("inner_corner", "post_right"): post,
        ("centre", "inner_corner"): 0.5 * max(w, d) / cell + float(np.log(_growth(0.5 * w, 0.5 * d, r))),
        ("bottom", "end_lower"): (length - w - r) / cell * _more(_away(w, d, r, arm)),
        ("left", "top_left"): (height - d - r) / cell * _more(_away(w, d, r, post)),
    }


def _more(ratio: float) -> float:
    """Return how many more cells an edge has for starting with cells `ratio` times smaller than its last."""
    return float(np.log(ratio) / (1.0 - 1.0 / ratio)) if ratio > 1.0 else 1.0
