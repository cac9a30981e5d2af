"""What two problems have in common besides their loads: one factorization then serves both."""

from typing import Any

import numpy as np

from convergence.fem.part import Part
from convergence.fem.problem import AnyPart, ElasticSupport, Problem, Support
from convergence.fem.solid_part import SolidPart

STEPS = np.linspace(0.0, 1.0, 9)


def unlike(one: Problem, other: Problem) -> str:
    """Return what differs of two problems but loads and prescribed values, "" where nothing does.

    Curves, sweeps and thicknesses that are functions are compared at nine places each.
    """
    pairs = {
        "the part": (_shape(one.part), _shape(other.part)),
        "the kind": (one.kind, other.kind),
        "the thickness": (_depths(one), _depths(other)),
        "a material": (one.materials, other.materials),
        "a support": ([_holding(s) for s in one.supports], [_holding(s) for s in other.supports]),
    }
    return next((what for what, (first, second) in pairs.items() if first != second), "")


def _shape(part: AnyPart) -> tuple[Any, ...]:
    """Return what says where the nodes of every mesh of a part lie and what they are named."""
    if isinstance(part, SolidPart):
        x, y = np.array(list(part.plan.points.values())).T
        start, end = part.planes[0][1], part.planes[-1][1]
        places = part.sweep.place(x[:, None], y[:, None], start + (end - start) * STEPS[None, :])
        own = (part.planes, part.filled, part.named, part.weights, part.ratios, places.tolist())
        return *_shape(part.plan), *own
    if isinstance(part, Part):
        curves = {edge: np.asarray(curve(STEPS)).tolist() for edge, curve in part.curves.items()}
        return part.points, part.blocks, part.boundaries, part.regions, part.weights, curves
    return (part,)


def _depths(problem: Problem) -> list[float]:
    """Return the extent out of the mesh's dimensions at places across the part."""
    x = np.array([place[0] for place in problem.part.points.values()])
    depths: list[float] = problem.depth(x.min() + np.ptp(x) * STEPS).tolist()
    return depths


def _holding(support: Support | ElasticSupport) -> Any:
    """Return what a support holds, and where; the displacement of a rigid one may be any."""
    if isinstance(support, ElasticSupport):
        return support
    held = tuple(value is not None for value in (support.x, support.y, support.z, support.normal))
    return support.name, support.boundary, support.point, held
