"""Whether displacements of another program fit the supports, loads and materials that the study states.

Nodal forces of the material under the displacement of the file, as fully integrated cells give them: loads
and reactions must balance, and the strain energy equal the work (Clapeyron's theorem). Cells of another
formulation, reduced integration or incompatible modes, miss both by an error that falls with the mesh. A
wrong load, support or modulus does not fall. Limit on the finest level: 10 % (own choice: coarse cells of
another formulation stay below it, a forgotten load does not).
"""

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder

LIMIT = 0.10
EXACTLY = 1e-6


def record(solution: Solution) -> dict[str, float]:
    """Return nothing: what is solved here is judged by its residual."""
    return {}


def given_field(ladder: Ladder, facts: Facts) -> Check:
    """Pass where balance and energy on the finest level are within the limit."""
    columns = recorded(ladder, "given_field", "forces", "resultant", "energy")
    if columns is None:
        why = "No displacement of another program with its supports and loads is judged."
        return not_applicable("given_field", why)
    forces, resultant, energy = (float(columns[name][-1]) for name in ("forces", "resultant", "energy"))
    worst = max(resultant, energy)
    finding = (
        f"On the finest level the displacements of the file leave {forces:.1e} of the nodal forces, loads "
        f"and reactions miss each other by {resultant:.1e} of the load, energy and work by {energy:.1e} "
        f"(allowed {LIMIT:.0e})."
    )
    if worst <= LIMIT:
        if max(worst, forces) > EXACTLY:
            finding += " Another formulation or quadrature of the cells leaves such a share."
        return Check("given_field", True, finding, values=per_level(columns))
    finding += " Supports, loads or material of the study are not those of the files."
    reason = f"supports, loads or material of the study do not fit the files: they miss by {worst:.1e}"
    return Check("given_field", False, finding, {"": reason}, values=per_level(columns))
