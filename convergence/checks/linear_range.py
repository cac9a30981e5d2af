"""Whether a linear analysis may speak: peak stress below yield, displacement and rotation small.

The upper end of the peak's interval counts, not its value, and in each region its own yield strength.
Small-displacement theory: largest displacement up to 1 % of the part's size and largest rotation up to
0.1 rad, where cos differs from one by 0.5 % (common practice).
"""

import numpy as np

from convergence.checks._ladder import not_applicable, per_level, recorded
from convergence.fem.geometry import geometry
from convergence.fem.recovery import recovered_von_mises
from convergence.fem.solution import Solution
from convergence.fem.stress import gradient_at
from convergence.fem.workers import workers
from convergence.results import Check, Facts, Ladder, Yield

CHUNK = 10_000  # cells at once
DISPLACEMENT_LIMIT, ROTATION_LIMIT = 0.01, 0.1
BEFORE, AFTER = "linear_range.", ".peak_von_mises"


def record(solution: Solution) -> dict[str, float]:
    """Return the peak von Mises stress of each region, the largest displacement over the size, rotation."""
    mesh = solution.mesh
    stress = recovered_von_mises(solution)
    numbers: dict[str, float] = {}
    for region, cells in mesh.regions.items():
        own = stress[:, cells]
        node, cell = np.unravel_index(own.argmax(), own.shape)
        place = mesh.nodes[:, mesh.cell_nodes[node, cells[cell]]].tolist()
        name = f"{region}{AFTER}"
        numbers[name] = float(own[node, cell])
        numbers |= {f"{name}.{axis}": x for axis, x in zip("xyz", place, strict=False)}
    return numbers | {
        "displacement": float(np.linalg.norm(solution.displacement, axis=0).max()) / mesh.part.size,
        "rotation": _largest_rotation(solution),
    }


def _largest_rotation(solution: Solution) -> float:
    """Return the largest part of the rotation in the middle of a cell, rad."""
    mesh, kind = solution.mesh, solution.mesh.element
    middle = kind.nodes[: kind.corners].mean(axis=0)[:, None]

    def largest(cells: np.ndarray) -> float:
        gradient = gradient_at(solution, geometry(mesh, middle, cells), cells)
        return float(np.abs(gradient - gradient.swapaxes(0, 1)).max())

    with workers() as pool:
        found = pool.map(largest, np.array_split(np.arange(mesh.cells), -(-mesh.cells // CHUNK)))
        return 0.5 * max(found)


def own_peaks(ladder: Ladder) -> dict[str, str]:
    """Return column -> region of the peaks that `record` has left in a ladder."""
    columns = ladder.levels[-1].values if ladder.levels else ()
    return {
        name: name.removeprefix(BEFORE).removesuffix(AFTER)
        for name in columns
        if name.startswith(BEFORE) and name.endswith(AFTER)
    }


def linear_range(ladder: Ladder, facts: Facts) -> Check:
    """Pass where stress, displacement and rotation stay in the range of linear theory."""
    columns = recorded(ladder, "linear_range", "displacement", "rotation")
    stress_peaks = _peaks(ladder, facts)
    if columns is None and not stress_peaks:
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
    shown: list[bool | None] = [passed]
    for limit, peaks in stress_peaks.items():
        below, about_yield = _against_yield(limit, peaks)
        shown.append(below)
        sentences.append(about_yield)
    sentences += _unlimited(facts)
    return Check(
        "linear_range",
        False if False in shown else None if None in shown else True,
        " ".join(sentences),
        values=per_level(columns) if columns else {},
    )


def _peaks(ladder: Ladder, facts: Facts) -> dict[Yield, dict[str, tuple[float, float]]]:
    """Return value and upper end of the interval of every von Mises peak, by the yield strength it must keep.

    A peak that a singular corner can reach has no upper end. A quantity's peak that is not confined to a
    region counts where the part has one yield strength: the peaks of the regions cover it where not.
    """
    own = own_peaks(ladder)
    asked = {
        name: facts.regions.get(name, "")
        for name, kind in facts.kinds.items()
        if kind == "peak_stress" and facts.components.get(name, "") in ("", "von_mises")
    }
    reached = {name for name in asked if facts.covered.get(name)} | (set(own) if facts.corners else set())
    everywhere = set(facts.yields.values())
    peaks: dict[Yield, dict[str, tuple[float, float]]] = {}
    for name, region in (asked | own).items() if ladder.levels else ():
        limit = facts.yields.get(region, next(iter(everywhere)) if len(everywhere) == 1 else None)
        value = float(ladder.column(name)[-1])
        upper = np.nan if name in reached else facts.intervals.get(name, (np.nan, np.nan))[1]
        if limit is not None and np.isfinite(value):
            whose = region if len(facts.yields) > 1 else "the part"
            label = f"{whose}'s peak von Mises stress" if name in own else name
            peaks.setdefault(limit, {})[label] = (value, upper)
    return peaks


def _against_yield(limit: Yield, peaks: dict[str, tuple[float, float]]) -> tuple[bool | None, str]:
    """Return whether all peaks stay below yield (None: not shown for some), and a sentence on it."""
    words = []
    for label, (value, upper) in peaks.items():
        if np.isfinite(upper):
            words.append(f"{label} reaches {upper:.5g} at the upper end of its interval")
        else:
            words.append(f"{label} is {value:.5g} on the finest level but has no upper end")
    source = f" ({limit.source})" if limit.source else ""
    about = f"Against the yield strength {limit.strength:.5g}{source}: {'; '.join(words)}"
    if any(max(value, upper) >= limit.strength for value, upper in peaks.values() if np.isfinite(upper)):
        return False, f"{about}: not below yield."
    if any(value >= limit.strength for value, _ in peaks.values()):
        return False, f"{about}: above yield on the finest level, if only next to a corner."
    if any(not np.isfinite(upper) for _, upper in peaks.values()):
        return None, f"{about}: below yield on the finest level, not shown beyond it."
    return True, f"{about}: below yield."


def _unlimited(facts: Facts) -> list[str]:
    """Return a sentence on the regions without a yield strength."""
    if not any(facts.yields.values()):
        return ["No yield strength is given, so stresses were not compared with it."]
    without = [region for region, limit in facts.yields.items() if limit is None]
    return [f"No yield strength is given for {', '.join(without)}."] if without else []
