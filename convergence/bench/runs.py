"""`python -m convergence.bench.runs LEVELS [solve]`: a whole `meshassay run` in a new folder, in JSON.

The same levels are also meshed, assembled and solved alone, after the run or with `solve` before it: the rest
is what a run adds, start-up included.
"""

import json
import subprocess
import sys
import tempfile
import time
from pathlib import Path
from typing import Any

from convergence.climbing import plan
from convergence.fem.first_guess import first_guess
from convergence.fem.mesh import mesh
from convergence.fem.solution import Solution, solve
from convergence.study import Study, load

STUDY = """title = "Quarter of a plate with a hole"
units = "mm, N, MPa"
[model]
name = "perforated_plate"
[material]
young = 210000.0
poisson = 0.3
[ladder]
divisions = 6
ratio = 2.0
levels = {levels}
shape = "triangle"
degree = 2
[quantities.hole_peak]
measure = "peak_stress"
boundary = "hole"
component = "first_principal"
relative_tolerance = 0.02
[quantities.energy]
measure = "strain_energy"
relative_tolerance = 0.01
"""


def measured(levels: int, solve_first: bool) -> dict[str, Any]:
    """Return the seconds of a run and of solving alone, and the unknowns of the finest level."""
    with tempfile.TemporaryDirectory() as name:
        path = Path(name) / "plate.toml"
        path.write_text(STUDY.format(levels=levels), encoding="utf-8")
        study = load(path)
        before = solved(study) if solve_first else None
        whole = run(path)
        solving, unknowns = before or solved(study)
    return {"run": whole, "solving": solving, "unknowns": unknowns}


def run(path: Path) -> float:
    """Return the seconds of the command as a user gives it."""
    command = [sys.executable, "-m", "convergence", "run", str(path), "--out", str(path.with_name("out"))]
    start = time.perf_counter()
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    whole = time.perf_counter() - start
    if done.returncode > 1:
        raise SystemExit(done.stderr.strip() or "the run failed")
    return whole


def solved(study: Study) -> tuple[float, int]:
    """Return the seconds of meshes, assembly and solution of all levels, and the finest level's unknowns."""
    assert study.ladder is not None and study.ladder.shape is not None
    problem = study.problem()
    solution: Solution | None = None
    start = time.perf_counter()
    for counts in plan(study.ladder, problem):
        made = mesh(problem.part, counts, shape=study.ladder.shape, degree=study.ladder.degree)
        guess = first_guess(solution.mesh.counts, solution.unknowns, made) if solution else None
        solution = solve(problem, made, guess)
    assert solution is not None
    return time.perf_counter() - start, len(solution.load)


if __name__ == "__main__":
    print(json.dumps(measured(int(sys.argv[1]), "solve" in sys.argv[2:])))
