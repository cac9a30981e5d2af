"""A study climbed level by level: solve, measure, record, save; what was saved is not solved again."""

import time
from collections.abc import Iterator, Mapping
from dataclasses import replace
from itertools import pairwise
from pathlib import Path

import numpy as np

from convergence import numbers
from convergence.errors import Fault, InputError, SolvingError
from convergence.fem.acting import acting
from convergence.fem.display import MOST_FACES, display, faces
from convergence.fem.first_guess import first_guess
from convergence.fem.given_part import GivenPart
from convergence.fem.mesh import Mesh, count_nodes, mesh
from convergence.fem.part import finer
from convergence.fem.problem import Problem
from convergence.fem.solution import solve_cases
from convergence.forecast import Budget, shortage
from convergence.intake.ladder_file import read_ladder, write_ladder
from convergence.ladder_spec import LadderSpec
from convergence.measuring import measured, records
from convergence.memory import allowed_memory, peak_memory, reset_peak
from convergence.results import NOT_SOLVED, Ladder, Level
from convergence.study import Study

LADDER = "ladder.csv"
NO_LIMIT = Budget()


def level_file(folder: Path, number: int) -> Path:
    """Return where the fields of a level are kept."""
    return folder / "levels" / f"level-{number}.npz"


def climb(study: Study, folder: Path, budget: Budget = NO_LIMIT) -> Iterator[Level]:
    """Yield the levels from coarse to fine, each one saved in the folder before it is yielded.

    Levels that the folder already has for the same study are yielded as they are. A ladder of another
    study, a damaged or a longer one is kept under another name. SolvingError names the level that failed.

    The cases of a study are solved together, level by level, each into the folder of its name; the
    levels of the first one are yielded. A level that only some cases have is solved for the others.

    A level that is foretold not to fit the budget or the memory of the machine is not begun, and one
    that runs out of memory is given up: the ladder ends before it with a remark. A first level raises, but
    for that of a companion: its ladder is kept without a level.
    """
    assert study.ladder is not None
    cases = study.cases or {"": study}
    folders = {name: folder / name / study.subfolder for name in cases}
    common = study.problem()
    meshes = plan(study.ladder, common)
    problems = {name: replace(case.problem(), part=common.part) for name, case in cases.items()}
    saved = {name: _saved(case, folders[name], study.ladder.levels) for name, case in cases.items()}
    first = next(iter(saved.values()))
    remarks: tuple[str, ...] = ()
    begun, sizes = time.perf_counter(), unknowns(study)
    for number, counts in enumerate(meshes):
        missing = {name: problem for name, problem in problems.items() if len(saved[name]) == number}
        if missing:
            within = replace(budget, memory=min(budget.memory, allowed_memory()))
            why = shortage(first[:number], sizes[number], within, time.perf_counter() - begun)
            try:
                coarser = meshes[number - 1] if number else None
                solved = {} if why else _level(cases, missing, counts, coarser, folders, number)
            except MemoryError:
                why = "memory ran out"
            if why:
                remarks = _ended(number, sizes[number], why, study.subfolder)
                break
            for name, level in solved.items():
                saved[name].append(level)
                _save(cases[name], saved[name], folders[name])
                _unknowns_file(folders[name], number - 1).unlink(missing_ok=True)
        yield first[number]
    for name, case in cases.items():
        ended = len(saved[name]) < study.ladder.levels
        _save(case, saved[name], folders[name], remarks if ended else ())


def _ended(number: int, dofs: int, why: str, companion: str) -> tuple[str, ...]:
    """Return the remark on a ladder that ends before a level; SolvingError where nothing can be judged."""
    whose = f"of the {companion} " if companion else ""
    what = f"level {number + 1} {whose}({numbers.count(dofs)} unknowns) {NOT_SOLVED}: {why}"
    if companion:
        return (what,)
    if number == 0:
        raise SolvingError(f"{what}; ask for a coarser first level")
    return (f"{what}; the levels before it are judged",)


def unknowns(study: Study) -> list[int]:
    """Return the number of unknowns of every level the study asks for."""
    assert study.ladder is not None
    problem, degree = study.problem(), study.ladder.degree
    part = problem.part
    return [part.dimension * count_nodes(part, counts, degree) for counts in plan(study.ladder, problem)]


def plan(spec: LadderSpec, problem: Problem) -> list[dict[int, int]]:
    """Return the cells per family of edges of every level; InputError where two levels are the same mesh.

    Of a part that is given by its meshes they are the numbers of these.
    """
    if isinstance(problem.part, GivenPart):
        return [{0: number} for number in range(spec.levels)]
    coarsest = problem.part.divisions(size=spec.size, divisions=spec.divisions)
    counts = [finer(coarsest, spec.ratio, number) for number in range(spec.levels)]
    for number, (coarse, fine) in enumerate(pairwise(counts)):
        if coarse == fine:
            what = f"levels {number + 1} and {number + 2} have the same mesh"
            raise InputError([Fault("[ladder]", what, "take a larger ratio or more divisions", spec.ratio)])
    return counts


def _save(study: Study, levels: list[Level], folder: Path, remarks: tuple[str, ...] = ()) -> None:
    folder.mkdir(parents=True, exist_ok=True)
    said = (*study.remarks, *remarks)
    ladder = Ladder(tuple(levels), study.file.name, study.fingerprint, said, h_unit=study.units.length)
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


def _level(
    cases: Mapping[str, Study],
    problems: Mapping[str, Problem],
    counts: dict[int, int],
    coarser: dict[int, int] | None,
    folders: Mapping[str, Path],
    number: int,
) -> dict[str, Level]:
    """Solve one level of problems that differ in their loads only; save their fields.

    `coarser` are the counts of the level below, None for the first.

    Seconds and memory are those of all these problems together.
    """
    spec = next(iter(cases.values())).ladder
    assert spec is not None and spec.shape is not None
    reset_peak()
    start = time.perf_counter()
    values = {}
    try:
        meshed = mesh(
            next(iter(problems.values())).part,
            counts,
            shape=spec.shape,
            degree=spec.degree,
            formulation=spec.formulation,
        )
        guesses = [_guess(_unknowns_file(folders[name], number - 1), coarser, meshed) for name in problems]
        solutions = solve_cases(list(problems.values()), meshed, guesses)
        for name, solution in zip(problems, solutions, strict=True):
            study = cases[name]
            values[name] = measured(study.quantities, solution, study.file.name) | records(solution)
            (folders[name] / "levels").mkdir(parents=True, exist_ok=True)
            if number == 0 or faces(meshed) <= MOST_FACES:
                drawn = replace(display(solution), forces=acting(solution))
                drawn.save(level_file(folders[name], number))
            np.save(_unknowns_file(folders[name], number), solution.unknowns)
    except SolvingError as error:
        raise SolvingError(f"level {number + 1}: {error}") from error
    dofs, seconds, memory = meshed.nodes.size, time.perf_counter() - start, peak_memory()
    return {name: Level(meshed.h, meshed.cells, dofs, seconds, v, memory) for name, v in values.items()}


def _unknowns_file(folder: Path, number: int) -> Path:
    """Return where the solution of the finest level so far is kept, for a first guess of the next."""
    return folder / "levels" / f"solution-{number}.npy"


def _guess(path: Path, counts: dict[int, int] | None, meshed: Mesh) -> np.ndarray | None:
    """Return a first guess from the solution of the level below, None where there is none of its size."""
    if counts is None or not path.exists():
        return None
    unknowns, nodes = np.load(path), count_nodes(meshed.part, counts, meshed.degree)
    return first_guess(counts, unknowns, meshed) if len(unknowns) == meshed.dimension * nodes else None
