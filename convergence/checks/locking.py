"""Volumetric locking: cells of degree 1 are far too stiff where Poisson's ratio nears 0.5.

Linear cells cannot keep their volume and bend (Hughes 1987, The Finite Element Method, sect. 4.4); they
still converge, but only once cells are much smaller. In plane stress nothing locks. Limit: 0.49, where the
displacement of a thick cylinder on its first mesh comes out at half (own computation).
"""

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMIT = 0.49


def record(solution: Solution) -> dict[str, float]:
    """Return the degree, and the largest Poisson's ratio where it can lock, 0 in plane stress."""
    problem = solution.problem
    ratio = max(material.poisson for material in problem.materials.values())
    locks = problem.kind != "plane stress"
    return {"poisson": ratio if locks else 0.0, "degree": float(solution.mesh.degree)}


def locking(ladder: Ladder, facts: Facts) -> Check:
    """Pass where degree and Poisson's ratio do not meet."""
    columns = recorded(ladder, "locking", "poisson", "degree")
    if columns is None:
        return not_applicable("locking", "Degree and material of the ladder are not known.")
    ratio, degree = float(columns["poisson"][-1]), int(columns["degree"][-1])
    passed = degree > 1 or ratio < LIMIT
    finding = (
        "Cells and material do not lock."
        if passed
        else f"Cells of degree 1 lock at Poisson's ratio {ratio:.5g}: values are too stiff until the cells "
        "are very small; use degree 2."
    )
    return Check("locking", passed, finding, values=per_level(columns))
