"""`python -m convergence.bench [FOLDER] [--pairs N] [--levels N]`: measure, write performance.md and plots.

Ours and the peer's run in turns, each in a process of its own; a ratio is the median over the pairs. The
clock of ours starts before Python does, that of the peer's at its assembly.
"""

import argparse
import importlib.util
import json
import os
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

from convergence.bench.cases import CASES
from convergence.bench.page import Pair, Solo, write
from convergence.bench.peers import MISSING

RECOVERED, MAPPED = "triangles", "tetrahedra"
LEAST_RUNS = 8  # what a run adds is a difference of two times: it scatters most


def child(module: str, *arguments: str) -> dict[str, Any]:
    """Return what a measuring process prints, and the seconds it lived; SystemExit where it fails."""
    start = time.perf_counter()
    command = [sys.executable, "-m", f"convergence.bench.{module}", *arguments]
    environment = os.environ | {"OPENBLAS_NUM_THREADS": "1"}
    done = subprocess.run(command, capture_output=True, text=True, env=environment, check=False)
    lived = time.perf_counter() - start
    if done.returncode != 0:
        last = done.stderr.strip().splitlines()[-1:] or ["no message"]
        raise SystemExit(f"bench: {' '.join(command[1:])}: {last[0]}")
    result: dict[str, Any] = json.loads(done.stdout.splitlines()[-1])
    return result | {"lived": lived}


def quiet() -> str:
    """Return a sentence on the load before measuring, from which the peer's threads suffer most."""
    if not hasattr(os, "getloadavg"):
        return "The load of the machine before measuring is not known."
    load = os.getloadavg()[0]
    return f"Load of the machine before measuring: {load:.1f}; NGSolve's threads lose most where others work."


def measured(name: str, levels: int, method: str, pairs: int) -> list[Pair]:
    """Return pairs of a whole study and the peer's finest level, taken in turns."""
    found = []
    for number in range(pairs):
        ours = child("ours", name, str(levels))
        peer = child("peers", name, str(levels), method)
        found.append(Pair(name, levels, method, ours, peer))
        print(f"{name}, {levels} levels, {method}, pair {number + 1}: {found[-1].ratio:.2f}", flush=True)
    return found


def solo(chosen: Callable[[str], int], count: int) -> Solo:
    """Return what is measured of ours alone, `count` times each, the map once; numba in turns.

    Every second time a run comes after solving alone: memory that no process used for a while is slower.
    """
    finest = str(chosen(RECOVERED))
    compiled = []
    if importlib.util.find_spec("numba") is not None:
        for name in CASES:
            levels = str(chosen(name))
            compiled += [
                (name, child("ours", name, levels), child("ours", name, levels, "plain"))
                for _ in range(count)
            ]
    return Solo(
        recoveries=[child("ours", RECOVERED, finest, "recovery", "iteration") for _ in range(count)],
        runs=[child("runs", finest, *["solve"] * (turn % 2)) for turn in range(max(count, LEAST_RUNS))],
        compiled=compiled,
        maps=[mapped(chosen(MAPPED))],
        held=child("map_coverage")["rows"],
    )


def mapped(levels: int) -> tuple[dict[str, Any], dict[str, Any]]:
    """Return our solution of a series of files, and their pointwise map."""
    with tempfile.TemporaryDirectory() as folder:
        return child("maps", "solve", folder, str(levels)), child("maps", "judge", folder)


def main() -> None:
    """Measure all cases."""
    parser = argparse.ArgumentParser(prog="python -m convergence.bench", description=__doc__)
    parser.add_argument("folder", nargs="?", default="figures", type=Path)
    parser.add_argument("--pairs", default=3, type=int, help="pairs of each comparison")
    parser.add_argument("--levels", default=None, type=int, help="levels of every ladder, fewer for a trial")
    chosen = parser.parse_args()
    if importlib.util.find_spec("ngsolve") is None:
        raise SystemExit(MISSING)

    def finest(name: str) -> int:
        return min(CASES[name].levels, chosen.levels or CASES[name].levels)

    load = quiet()
    pairs: list[Pair] = []
    for name, case in CASES.items():
        methods = ("cholesky", case.peer) if name == RECOVERED else (case.peer,)
        for method in methods:
            pairs += measured(name, finest(name), method, chosen.pairs)
    growth = [
        pair
        for levels in range(2, finest(RECOVERED))
        for method in ("cholesky", "multigrid")
        for pair in measured(RECOVERED, levels, method, 1)
    ]
    chosen.folder.mkdir(exist_ok=True)
    write(chosen.folder, load, pairs, growth, solo(finest, chosen.pairs))


if __name__ == "__main__":
    main()
