"""What a reading of a drawn case may amount to: beside it a value can be told from nothing.

A reaction that statics makes zero, or a displacement that symmetry holds, is read as round-off and as what
the rules of integration differ by. Such values have no order and no interval to learn from.
"""

import ngsolve as ng
import numpy as np

from convergence.calibration.drawn_case import Reading
from convergence.calibration.drawn_solution import DrawnSolution

NOTHING = 1e-4  # of the scale: nobody signs for less


def is_nothing(values: np.ndarray, scale: float) -> bool:
    """Return whether all values (n,) are nothing beside their scale."""
    return bool(np.abs(values).max() <= NOTHING * scale)


def natural_scale(solution: DrawnSolution, reading: Reading) -> float:
    """Return what a reading may amount to, in its unit; 0 where it has no sign to cancel.

    Root mean square of displacement or stress over the part; a rotation is that of a line whose ends move
    so; a resultant that of the mean stress on its boundary.
    """
    match reading.kind:
        case "displacement":
            return solution.rms_displacement
        case "rotation":
            line = np.subtract(reading.arguments["end"], reading.arguments["start"])
            return solution.rms_displacement / float(np.linalg.norm(line))
        case "point_stress" | "peak_stress":
            return solution.rms_stress
        case "resultant":
            boundary = solution.weight * ng.ds(reading.arguments["boundary"])
            return solution.rms_stress * float(ng.Integrate(boundary, solution.mesh))
    return 0.0
