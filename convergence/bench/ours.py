"""`python -m convergence.bench.ours CASE LEVELS [plain] [recovery] [iteration]`: one study here, in JSON.

Levels start from the solution of the one below, as in a run. `plain` hides numba.
"""

import json
import sys
import time
from typing import Any

from convergence.bench.bandwidth import iteration
from convergence.bench.cases import CASES, level_mesh, problem
from convergence.fem.first_guess import first_guess
from convergence.fem.recovery import energy_error, recovered_stress
from convergence.fem.solution import Solution, solve
from convergence.memory import MB, peak_memory


def study(name: str, levels: int, wanted: set[str]) -> dict[str, Any]:
    """Return seconds of every level, the finest level's parts, energy, unknowns and the peak in GB.

    `recovery` also recovers the stress on the finest level and takes the energy norm of its error;
    `iteration` times one iteration of the finest level against the bytes it must move.
    """
    case = CASES[name]
    given = problem(case)
    seconds: list[float] = []
    result: dict[str, Any] = {}
    solution: Solution | None = None
    for level in range(levels):
        start = time.perf_counter()
        meshed = level_mesh(given, case, level)
        made = time.perf_counter()
        guess = first_guess(solution.mesh.counts, solution.unknowns, meshed) if solution else None
        solution = solve(given, meshed, guess)
        seconds.append(time.perf_counter() - start)
        result["mesh"], result["solution"] = made - start, time.perf_counter() - made
    assert solution is not None
    result |= {
        "seconds": seconds,
        "unknowns": len(solution.load),
        "energy": solution.energy,
        "peak": peak_memory() * MB / 1e9,
    }
    if "recovery" in wanted:
        start = time.perf_counter()
        recovered_stress(solution)
        energy_error(solution)
        result["recovery"] = time.perf_counter() - start
    if "iteration" in wanted:
        result |= iteration(solution)
    return result


if __name__ == "__main__":
    asked = set(sys.argv[3:])
    if "plain" in asked:
        sys.modules["numba"] = None  # type: ignore[assignment]  # as if it were not installed
    print(json.dumps(study(sys.argv[1], int(sys.argv[2]), asked)))
