"""What a pointwise map says of one field, in a few numbers."""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np


@dataclass(frozen=True)
class MappedField:
    """What a pointwise map says of one field: shares of the nodes by verdict, half-widths over the scale.

    `worst` is the largest of these at places that are not singular, `typical` the median; `extrapolated`
    nodes lie outside a coarser mesh, `missing` ones have no value there. `relative` are the half-widths over
    the scale at the points of the finest field that is drawn, NaN where there are none; empty without one.
    """

    name: str
    unit: str
    tolerance: float
    scale: str
    nodes: int
    largest: float
    shares: Mapping[str, float]
    typical: float
    worst: float
    worst_half_width: float
    worst_place: tuple[float, ...]
    extrapolated: int
    missing: int
    relative: np.ndarray = field(default_factory=lambda: np.empty(0), compare=False)
