"""Whether a linear analysis may speak: peak stress below yield, displacement and rotation small.

The upper end of the peak's interval counts, not its value. Small-displacement theory: largest displacement
up to 1 % of the part's size and largest rotation up to 0.1 rad, where cos differs from one by 0.5 %
(common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.recovery import nodal_values, recovered_stress
from convergence.fem.solution import Solution
from convergence.fem.stress import component, displacement_gradient
from convergence.results import Check, Facts, Ladder

DISPLACEMENT_LIMIT, ROTATION_LIMIT = 0.01, 0.1
PEAK = "linear_range.peak_von_mises"


def record(solution: Solution) -> dict[str, float]:
    """Return the peak von Mises stress, the largest displacement over the size, and the largest rotation."""
    stress = component(nodal_values(solution, recovered_stress(solution)), "von_mises")
    hot = int(stress.argmax())
    middle = solution.mesh.skfem.elem.doflocs[: solution.mesh.skfem.t.shape[0]].mean(axis=0)[:, None]
    gradient = displacement_gradient(solution, middle, np.arange(solution.mesh.cells))
    rotation = 0.5 * np.abs(gradient[1, 0] - gradient[0, 1])
    x, y = solution.mesh.nodes[:, hot]
    return {
        "peak_von_mises": float(stress[hot]),
        "peak_von_mises.x": float(x),
        "peak_von_mises.y": float(y),
        "displacement": float(np.hypot(*solution.displacement).max()) / solution.mesh.part.size,
        "rotation": float(rotation.max()),
    }


def linear_range(ladder: Ladder, facts: Facts) -> Check:
    """Pass where stress, displacement and rotation stay in the range of linear theory."""
    columns = recorded(ladder, "linear_range", "peak_von_mises", "displacement", "rotation")
    stress_peaks = _peaks(ladder, facts)
    if columns is None and (facts.yield_strength is None or not stress_peaks):
        return not_applicable(
            "linear_range", "Neither a yield strength with a peak stress nor displacements are known."
        )
    sentences, passed = [], True
    if columns is not None:
        small = (
            columns["displacement"][-1] <= DISPLACEMENT_LIMIT and columns["rotation"][-1] <= ROTATION_LIMIT
        )
        passed = bool(small)
        sentences.append(
            f"Largest displacement {100 * columns['displacement'][-1]:.3g} % of the part's size (limit 1 %), "
            f"largest rotation {columns['rotation'][-1]:.2g} rad (limit 0.1 rad): "
            + ("small-displacement theory holds." if small else "small-displacement theory does not hold.")
        )
    below, about_yield = _against_yield(stress_peaks, facts)
    sentences.append(about_yield)
    return Check(
        "linear_range",
        below if passed else False,
        " ".join(sentences),
        values=per_level(columns) if columns else {},
    )


def _peaks(ladder: Ladder, facts: Facts) -> dict[str, tuple[float, float]]:
    """Return value and upper end of the interval of every von Mises peak, the part's own included.

    A peak that a singular corner can reach has no upper end.
    """
    names = [
        n
        for n, kind in facts.kinds.items()
        if kind == "peak_stress" and facts.components.get(n, "") in ("", "von_mises")
    ]
    reached = {name for name in names if facts.covered.get(name)} | ({PEAK} if facts.corners else set())
    peaks = {}
    for name in (*names, PEAK) if ladder.levels else ():
        value = float(ladder.column(name)[-1])
        upper = np.nan if name in reached else facts.intervals.get(name, (np.nan, np.nan))[1]
        if np.isfinite(value):
            peaks[name] = (value, upper)
    return peaks


def _against_yield(peaks: dict[str, tuple[float, float]], facts: Facts) -> tuple[bool | None, str]:
    """Return whether all peaks stay below yield (None: not shown for some), and a sentence on it."""
    limit = facts.yield_strength
    if limit is None:
        return True, "No yield strength is given, so stresses were not compared with it."
    words = []
    for name, (value, upper) in peaks.items():
        label = "the part's peak von Mises stress" if name == PEAK else name
        if np.isfinite(upper):
            words.append(f"{label} reaches {upper:.5g} at the upper end of its interval")
        else:
            words.append(f"{label} is {value:.5g} on the finest level but has no upper end")
    source = f" ({facts.yield_source})" if facts.yield_source else ""
    about = f"Against the yield strength {limit:.5g}{source}: {'; '.join(words)}"
    if any(max(value, upper) >= limit for value, upper in peaks.values() if np.isfinite(upper)):
        return False, f"{about}: not below yield."
    if any(value >= limit for value, _ in peaks.values()):
        return False, f"{about}: above yield on the finest level, if only next to a corner."
    if any(not np.isfinite(upper) for _, upper in peaks.values()):
        return None, f"{about}: below yield on the finest level, not shown beyond it."
    return True, f"{about}: below yield."
