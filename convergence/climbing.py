"""A study climbed level by level: solve, measure, record, save; what was saved is not solved again."""

import time
from collections.abc import Iterator
from itertools import pairwise
from pathlib import Path
from typing import Any

from convergence import rooms
from convergence.dimensions import Located
from convergence.errors import Fault, InputError, SolvingError, Unsuitable
from convergence.fem.display import display
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution, solve
from convergence.intake.ladder_file import read_ladder, write_ladder
from convergence.ladder_spec import LadderSpec
from convergence.results import Ladder, Level
from convergence.study import Study

LADDER = "ladder.csv"


def level_file(folder: Path, number: int) -> Path:
    """Return where the fields of a level are kept."""
    return folder / "levels" / f"level-{number}.npz"


def climb(study: Study, folder: Path) -> Iterator[Level]:
    """Yield the levels from coarse to fine, each one saved in the folder before it is yielded.

    Levels that the folder already has for the same study are yielded as they are. A ladder of another
    study, a damaged or a longer one is kept under another name. SolvingError names the level that failed.
    """
    assert study.ladder is not None
    problem = study.problem()
    meshes = plan(study.ladder, problem)
    levels = _saved(study, folder, study.ladder.levels)
    yield from levels
    (folder / "levels").mkdir(parents=True, exist_ok=True)
    for number in range(len(levels), study.ladder.levels):
        level = _level(study, problem, meshes[number], level_file(folder, number), number)
        levels.append(level)
        _save(study, levels, folder)
        yield level


def plan(spec: LadderSpec, problem: Problem) -> list[dict[int, int]]:
    """Return the cells per family of edges of every level; InputError where two levels are the same mesh."""
    coarsest = problem.part.divisions(size=spec.size, divisions=spec.divisions)
    counts = [finer(coarsest, spec.ratio, number) for number in range(spec.levels)]
    for number, (coarse, fine) in enumerate(pairwise(counts)):
        if coarse == fine:
            what = f"levels {number} and {number + 1} have the same mesh"
            raise InputError([Fault("[ladder]", what, "take a larger ratio or more divisions", spec.ratio)])
    return counts


def _save(study: Study, levels: list[Level], folder: Path) -> None:
    ladder = Ladder(tuple(levels), study.file.name, study.fingerprint, h_unit=study.units.length)
    write_ladder(ladder, folder / LADDER)


def _saved(study: Study, folder: Path, wanted: int) -> list[Level]:
    """Return up to `wanted` levels of the same study; the file is left with no others."""
    path = folder / LADDER
    if not path.exists():
        return []
    try:
        ladder = read_ladder(path)
    except InputError:
        path.replace(folder / "ladder-damaged.csv")
        return []
    same = ladder.fingerprint == study.fingerprint
    if same and len(ladder.levels) <= wanted:
        return list(ladder.levels)
    path.replace(folder / f"ladder-{ladder.fingerprint or 'earlier'}.csv")
    if not same:
        return []
    levels = list(ladder.levels[:wanted])
    _save(study, levels, folder)
    return levels


def _level(study: Study, problem: Problem, counts: dict[int, int], fields: Path, number: int) -> Level:
    assert study.ladder is not None
    start = time.perf_counter()
    try:
        meshed = mesh(problem.part, counts, shape=study.ladder.shape, degree=study.ladder.degree)
        solution = solve(problem, meshed)
        values = {**_measured(study, solution), **_records(solution)}
        display(solution).save(fields)
    except SolvingError as error:
        raise SolvingError(f"level {number}: {error}") from error
    except MemoryError as error:
        raise SolvingError(f"level {number}: out of memory; the levels before it are kept") from error
    return Level(meshed.h, meshed.cells, len(solution.load), time.perf_counter() - start, values)


def _measured(study: Study, solution: Solution) -> dict[str, float]:
    values: dict[str, float] = {}
    faults = []
    for quantity in study.quantities:
        assert quantity.measure is not None
        try:
            values |= _numbers(quantity.name, quantity.measure(solution))
        except Unsuitable as error:
            where = f"{study.file.name}: quantities.{quantity.name}"
            faults += [
                Fault(f"{where}.{key}", "unsuitable", right, found) for key, found, right in error.problems
            ]
    if faults:
        raise InputError(faults)
    return values


def _numbers(name: str, measured: Any) -> dict[str, float]:
    if isinstance(measured, Located):
        return {name: measured.value, f"{name}.x": measured.x, f"{name}.y": measured.y}
    return {name: float(measured)}


def _records(solution: Solution) -> dict[str, float]:
    return {
        f"{check}.{name}": value
        for check in rooms.names("checks")
        for name, value in rooms.beside("checks", check, "record")(solution).items()
    }
