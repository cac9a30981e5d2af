"""The quality of the cells of a file in a few numbers: the worst of each measure, and how many are poor."""

from collections.abc import Iterable

import numpy as np

from convergence.bodies.file_cells import CellGroup
from convergence.bodies.quality import POOR, quality


def cell_summary(nodes: np.ndarray, groups: Iterable[CellGroup]) -> dict[str, float]:
    """Return the least scaled Jacobian, number and place of that cell, largest aspect and skew, poor cells.

    A cell is poor that is beyond the usual threshold of a measure; `poor` counts those of the worst measure.
    """
    summary = {"scaled_jacobian": 2.0, "aspect": 0.0, "skew": 0.0, "poor": 0.0}
    for group in groups:
        own = quality(nodes, group)
        worst = own.worst("scaled_jacobian", 1)[0]
        if worst.value < summary["scaled_jacobian"]:
            summary |= {"scaled_jacobian": worst.value, "number": float(worst.number)}
            summary |= dict(zip("xyz", worst.place, strict=False))
        summary["aspect"] = max(summary["aspect"], float(own.aspect.max()))
        summary["skew"] = max(summary["skew"], float(own.skew.max()))
        summary["poor"] += float(max(own.poor(measure) for measure in POOR))
    return summary
