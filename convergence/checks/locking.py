"""Locking: cells that are too stiff, near Poisson's ratio 0.5 or in bending.

Linear cells cannot keep their volume and bend (Hughes 1987, The Finite Element Method, sect. 4.4); they
still converge, but only once cells are much smaller. In plane stress no volume locks, nor with mean
dilatation. Limits: 0.49, where the displacement of a thick cylinder on its first mesh comes out at half, and
0.49999 for degree 2, where eight quadrilaterals leave 68 % error in the energy norm (own computations). A
stress that varies much inside the cells is bending they cannot follow: with n cells through a depth in pure
bending the share 1/n² of the energy varies inside them. Limit: 1/16, four cells.
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.recovery import variation_energy
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMITS = {1: 0.49, 2: 0.49999}  # by degree
BENDING = 1.0 / 16.0
LOCKS = ("plane strain", "axisymmetric", "solid")


def record(solution: Solution) -> dict[str, float]:
    """Return degree, largest Poisson's ratio where it can lock, and share of energy that varies in cells."""
    problem, mesh = solution.problem, solution.mesh
    ratio = max((m.poisson for m in problem.materials.values() if m.isotropic), default=0.0)
    locks = problem.kind in LOCKS and mesh.formulation == "displacement"
    share = 0.0
    if mesh.degree == 1 and mesh.dimension > 1:
        share = float(variation_energy(solution).sum()) / max(2.0 * solution.energy, np.finfo(float).tiny)
    return {"poisson": ratio if locks else 0.0, "degree": float(mesh.degree), "bending": share}


def locking(ladder: Ladder, facts: Facts) -> Check:
    """Pass where neither Poisson's ratio near 0.5 nor bending inside the cells makes them too stiff."""
    columns = recorded(ladder, "locking", "poisson", "degree", "bending")
    if columns is None:
        return not_applicable("locking", "Degree and material of the ladder are not known.")
    ratio, degree, share = (float(columns[name][-1]) for name in ("poisson", "degree", "bending"))
    wrong = []
    if ratio >= LIMITS[int(degree)]:
        better = "degree 2, or " if degree == 1 else ""
        wrong.append(
            f"Cells of degree {degree:.0f} lock at Poisson's ratio {ratio:.5g}: values are too stiff until "
            f"the cells are very small; use {better}quadrilaterals or hexahedra with mean dilatation."
        )
    if degree == 1 and share > BENDING:
        wrong.append(
            f"On the finest level {100 * share:.2g} % of the energy is stress that varies inside the cells "
            f"(limit {100 * BENDING:.2g} %): cells of degree 1 are too stiff in bending; use degree 2."
        )
    finding = " ".join(wrong) or "Cells and material do not lock."
    return Check("locking", not wrong, finding, values=per_level(columns))
