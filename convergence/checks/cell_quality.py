"""Whether the cells of other programs' meshes are well shaped.

Scaled Jacobian and edge ratio as in Knupp et al., "The Verdict Geometric Quality Library", SAND2007-1751
(2007), equiangle skew and the thresholds as in common practice. A poor cell makes the field poor around it,
which the change from mesh to mesh shows; so nothing is spoilt here, it is stated.
"""

import math

import numpy as np

from convergence.bodies.cell_summary import cell_summary
from convergence.bodies.file_cells import CellGroup
from convergence.checks._ladder import not_applicable, per_level, place_words, recorded
from convergence.fem.given_part import GivenPart
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder


def record(solution: Solution) -> dict[str, float]:
    """Return the quality of the cells of a mesher that we solve on, nothing of cells that are made here.

    The worst cell has no number: a refined mesh has not the cells of a file. Cells of fields are looked at
    where their files are read.
    """
    mesh = solution.mesh
    if not isinstance(mesh.part, GivenPart) or solution.assembled is None:
        return {}
    cells = CellGroup(mesh.shape, mesh.degree, mesh.cell_nodes, np.arange(mesh.cells))
    found = cell_summary(mesh.nodes, (cells,))
    return {name: value for name, value in found.items() if name != "number"}


def cell_quality(ladder: Ladder, facts: Facts) -> Check:
    """Pass where no cell of the finest mesh is beyond the usual thresholds."""
    columns = recorded(ladder, "cell_quality", "scaled_jacobian", "aspect", "skew", "poor")
    if columns is None:
        return not_applicable("cell_quality", "The ladder has no cells of another program.")
    jacobian, aspect, skew, poor = (float(column[-1]) for column in columns.values())
    number = float(ladder.column("cell_quality.number")[-1])
    place = place_words(ladder, "cell_quality")
    cells = ladder.levels[-1].cells
    which = f"cell {number:.0f} of the file from 0, " if math.isfinite(number) else ""
    finding = (
        f"Cells of the finest mesh: least scaled Jacobian {jacobian:.2g} ({which}near {place}), "
        f"longest over shortest edge up to {aspect:.2g}, skew up to {skew:.2g}; "
        f"{poor:.0f} of {cells} beyond the usual thresholds (0.2, 10 and 0.9)."
    )
    return Check("cell_quality", poor == 0.0, finding, values=per_level(columns))
