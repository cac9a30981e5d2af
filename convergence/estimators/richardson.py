"""Richardson extrapolation of the three finest values with their observed order.

Richardson 1911; observed order at unequal ratios after Celik et al. 2008, steps 3 and 4.
"""

import numpy as np

from convergence.estimators._triplet import doubts, nothing, richardson_error, three_finest
from convergence.results import Estimate

SOURCE = (
    "L. F. Richardson, The approximate arithmetical solution by finite differences of physical problems "
    "involving differential equations, with an application to the stresses in a masonry dam, "
    "Phil. Trans. R. Soc. A 210 (1911) 307-357"
)
LEVELS = 3


def richardson(h: np.ndarray, f: np.ndarray, *, formal_order: float | None = None) -> Estimate:
    """Return the limit and, as uncertainty, the plain error estimate without any safety factor.

    Half of the true errors exceed such an estimate even on good ladders: use it as a limit, not as an
    interval. The formal order serves the remark only.
    """
    triplet = three_finest(h, f)
    if isinstance(triplet, Estimate):
        return triplet
    if triplet.oscillates:
        return nothing("the values oscillate: no power of h passes through them")
    error = richardson_error(triplet.f1, triplet.f2, triplet.ratio, triplet.order)
    return Estimate(triplet.f1 - error, triplet.order, abs(error), doubts(triplet, formal_order))
