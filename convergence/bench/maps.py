"""`python -m convergence.bench.maps solve|judge FOLDER [LEVELS]`: a pointwise map of tetrahedra, in JSON.

`solve` solves the solid plate and writes a file of nodes, cells and displacement per level; `judge` reads
them as those of another program, recovers stress and judges every node of the finest. Each is a process of
its own.
"""

import json
import sys
import time
from dataclasses import replace
from pathlib import Path
from typing import Any

from convergence.bench.cases import CASES, STEEL, level_mesh, problem
from convergence.bodies.boundaries import given_mesh
from convergence.bodies.field_solution import field_solution
from convergence.bodies.file_mesh import read_file_mesh
from convergence.bodies.nodal_fields import NodalFields, nodal_fields
from convergence.bodies.pointwise import Reading, pointwise
from convergence.bodies.write_fields import write_displacement, write_fields
from convergence.fem.first_guess import first_guess
from convergence.fem.given_part import GivenPart
from convergence.fem.mesh import mesh
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.memory import MB, peak_memory

CASE = replace(CASES["tetrahedra"], coarsest=(17, 10, 6))  # a million nodes on the third level
READINGS = (
    Reading("displacement", "magnitude", "displacement", 0.01),
    Reading("stress", "von_mises", "point_stress", 0.05),
    Reading("stress", "xx", "point_stress", 0.05),
)


def solved(folder: Path, levels: int) -> dict[str, Any]:
    """Return the seconds of mesh, assembly and solution of the finest level, its nodes and the peak in GB."""
    given = problem(CASE)
    solution: Solution | None = None
    seconds = 0.0
    for level in range(levels):
        start = time.perf_counter()
        made = level_mesh(given, CASE, level)
        guess = first_guess(solution.mesh.counts, solution.unknowns, made) if solution else None
        solution = solve(given, made, guess)
        seconds = time.perf_counter() - start
        write_displacement(folder / f"level-{level}.vtu", made, solution.displacement)
    assert solution is not None
    nodes = solution.mesh.nodes.shape[1]
    return {"seconds": seconds, "nodes": nodes, "peak": peak_memory() * MB / 1e9}


def judged(folder: Path) -> dict[str, Any]:
    """Return the seconds of reading, recovery, judging and writing, the nodes and the peak in GB."""
    steps = {"reading": 0.0, "recovery": 0.0}
    levels: list[NodalFields] = []
    sizes: list[float] = []
    for path in sorted(folder.glob("level-*.vtu")):
        start = time.perf_counter()
        found = read_file_mesh(path)
        part = GivenPart((given_mesh(found, found.groups[0], {}),))
        made = mesh(part, {0: 0}, shape=part.finest.shape, degree=part.finest.degree)
        read = time.perf_counter()
        body = Problem("", part, dict.fromkeys(made.regions, STEEL), (), (), kind="solid")
        levels.append(nodal_fields(field_solution(body, made, found.point_fields["displacement"])))
        sizes.append(made.h)
        steps["reading"] += read - start
        steps["recovery"] += time.perf_counter() - read
    start = time.perf_counter()
    result = pointwise(levels[-1], [[level] for level in levels[:-1]], sizes, READINGS)
    steps["judging"] = time.perf_counter() - start
    start = time.perf_counter()
    write_fields(folder / "map.vtu", [result])
    steps["writing"] = time.perf_counter() - start
    return steps | {"nodes": len(result.nodes), "peak": peak_memory() * MB / 1e9}


if __name__ == "__main__":
    place = Path(sys.argv[2])
    print(json.dumps(solved(place, int(sys.argv[3])) if sys.argv[1] == "solve" else judged(place)))
