"""`python -m convergence.bench.ours CASE LEVELS [recovery]`: one study in this process, in JSON."""

import json
import sys
import time
from typing import Any

from convergence.bench.cases import CASES, level_mesh, problem
from convergence.fem.recovery import energy_error, recovered_stress
from convergence.fem.solution import solve
from convergence.memory import MB, peak_memory


def study(name: str, levels: int, recovery: bool) -> dict[str, Any]:
    """Return seconds of every level, the finest level's parts, energy, unknowns and the peak in GB.

    `recovery` also recovers the stress on the finest level and takes the energy norm of its error.
    """
    case = CASES[name]
    given = problem(case)
    seconds: list[float] = []
    result: dict[str, Any] = {}
    solution = None
    for level in range(levels):
        start = time.perf_counter()
        meshed = level_mesh(given, case, level)
        made = time.perf_counter()
        solution = solve(given, meshed)
        seconds.append(time.perf_counter() - start)
        result["mesh"], result["solution"] = made - start, time.perf_counter() - made
    assert solution is not None
    result |= {
        "seconds": seconds,
        "unknowns": len(solution.load),
        "energy": solution.energy,
        "peak": peak_memory() * MB / 1e9,
    }
    if recovery:
        start = time.perf_counter()
        recovered_stress(solution)
        energy_error(solution)
        result["recovery"] = time.perf_counter() - start
    return result


if __name__ == "__main__":
    print(json.dumps(study(sys.argv[1], int(sys.argv[2]), "recovery" in sys.argv[3:])))
