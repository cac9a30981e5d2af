"""Error in the energy norm: recovered from one solution, and from the energies of the ladder.

Recovered: Zienkiewicz & Zhu 1992 (Int. J. Numer. Meth. Engng 33:1365), relative to
sqrt(‖u_h‖² + η²) (Zienkiewicz & Zhu 1987, 24:337). From energies: ‖e‖² = 2 |U − U_h| with the limit U of the
strain energy (Szabó & Babuška 1991, Finite Element Analysis, ch. 4), valid where only loads or only
prescribed displacements act. The two are views of one error and must agree. Expected rate
min(p, λ). Limit 10 % of the norm (common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.estimators.richardson import richardson
from convergence.fem.recovery import energy_error, exact_energy_error
from convergence.fem.solution import Solution
from convergence.results import Check, Facts, Ladder
from convergence.sequences import behaviour, noise_floor

LIMIT = 0.10
AGREE = 2.0


def record(solution: Solution) -> dict[str, float]:
    """Return η, relative and absolute, the exact one where known, the energy, whether the identity holds."""
    squared = float(energy_error(solution).sum())
    total = 2.0 * solution.quadratic_energy + squared
    loaded, moved = (
        bool(np.any(solution.load)) or solution.thermal is not None,
        bool(np.any(solution.held.values)),
    )
    numbers = {
        "estimated": float(np.sqrt(squared / total)) if total > 0.0 else 0.0,
        "absolute": float(np.sqrt(squared)),
        "energy": solution.quadratic_energy,
        "identity": float(not (loaded and moved)),
    }
    if solution.problem.exact is not None:
        numbers["exact"] = float(np.sqrt(exact_energy_error(solution).sum() / total)) if total > 0.0 else 0.0
    return numbers


def energy_norm(ladder: Ladder, facts: Facts) -> Check:
    """Pass where the finest level is within the limit and the views agree within a factor of 2."""
    columns = recorded(ladder, "energy_norm", "estimated", "absolute", "energy", "identity")
    if columns is None:
        return not_applicable("energy_norm", "The ladder has no stress fields of our own solver.")
    forced = next((corner for corner in facts.corners or () if corner.exponent <= 0.0), None)
    if forced is not None:
        finding = f"A force acts on the point {forced.name}: the energy has no limit, nor has its error."
        return not_applicable("energy_norm", finding)
    relative = float(columns["estimated"][-1])
    sentences = [
        f"Estimated error in the energy norm on the finest level: {100 * relative:.3g} % (limit 10 %)."
    ]
    if relative < 1e-7:
        sentences = [
            "The energy norm of the error is zero to round-off: the elements hold the exact solution."
        ]
        return Check("energy_norm", True, sentences[0], values=per_level(columns))
    sentences.append(_rate(ladder, columns["absolute"], facts))
    ratio = _effectivity(ladder, columns, facts)
    manner = behaviour(ladder.h, columns["energy"], noise_floor(columns["energy"]))
    unsettled = bool(columns["identity"][-1]) and manner.endswith("divergence")
    agree = not unsettled and bool(np.isnan(ratio) or 1.0 / AGREE <= ratio <= AGREE)
    if unsettled:
        sentences.append("The strain energies of the ladder show no limit.")
    if not np.isnan(ratio):
        sentences.append(
            f"It is {ratio:.2f} times what the energies of the ladder give (agreeing: 0.5 to 2)."
        )
    exact = ladder.column("energy_norm.exact")
    if np.isfinite(exact[-1]) and exact[-1] > 0.0:
        sentences.append(f"The exact error of this part is {100 * exact[-1]:.3g} %.")
        columns["exact"] = exact
    passed = relative <= LIMIT and agree
    return Check(
        "energy_norm", passed, " ".join(part for part in sentences if part), values=per_level(columns)
    )


def _rate(ladder: Ladder, absolute: np.ndarray, facts: Facts) -> str:
    if len(absolute) < 2 or not np.all(absolute[-2:] > 0.0):
        return ""
    rate = float(np.log(absolute[-2] / absolute[-1]) / np.log(ladder.h[-2] / ladder.h[-1]))
    if facts.degree is None:
        return f"It falls with h^{rate:.2f}."
    theory = min(float(facts.degree), facts.exponent or np.inf)
    why = f", limited by the corner exponent {facts.exponent:.3f}" if facts.exponent else ""
    return f"It falls with h^{rate:.2f}; theory says {theory:.3g}{why}."


def _effectivity(ladder: Ladder, columns: dict[str, np.ndarray], facts: Facts) -> float:
    """Return the recovered error over the one from the energies, NaN where those tell nothing."""
    if not columns["identity"][-1]:
        return float("nan")
    order = None if facts.degree is None else 2.0 * min(float(facts.degree), facts.exponent or np.inf)
    limit = richardson(ladder.h, columns["energy"], formal_order=order).limit
    squared = 2.0 * abs(limit - columns["energy"][-1])
    if not np.isfinite(squared) or squared <= 1e-9 * abs(limit):
        return float("nan")
    return float(columns["absolute"][-1] / np.sqrt(squared))
