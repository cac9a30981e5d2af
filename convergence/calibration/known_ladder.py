"""A ladder whose limit is known: what the bank is made of."""

from dataclasses import dataclass

import numpy as np

from convergence.results import Kind


@dataclass(frozen=True, eq=False)
class KnownLadder:
    """One quantity on one ladder, coarse to fine.

    source: "remeshed", "nested", "perturbed" or "similar" (mapped meshes of any ratio). exponent: weakest
    corner of the model, None without one. limit: exact, or of a reference whose error is below `bound`;
    NaN where singular.
    """

    family: str
    case: str
    label: str
    kind: Kind
    source: str
    shape: str
    dimension: int
    degree: int
    exponent: float | None
    singular: bool
    h: np.ndarray
    f: np.ndarray
    limit: float
    bound: float
