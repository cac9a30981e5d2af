"""The bank made anew: every drawn case meshed and solved, every mapped one, in two processes.

Needs NGSolve with Netgen (`pip install -e .[dev]`). Takes about an hour on two processors that are free.
"""

import importlib
import multiprocessing
from collections.abc import Callable
from pathlib import Path
from typing import Any

from convergence.calibration.known_ladder import KnownLadder

FAMILIES = Path(__file__).with_name("families")
MAPPED = "mapped"
PROCESSES = 2
Task = tuple[str, int]


def made_bank(say: Callable[[str], None]) -> list[KnownLadder]:
    """Return all ladders, always in the same order; `say` takes a line for each case."""
    tasks = _tasks()
    found: list[KnownLadder] = []
    with multiprocessing.get_context("spawn").Pool(PROCESSES, maxtasksperchild=1) as pool:
        for number, ladders in enumerate(pool.imap(_ladders, tasks), start=1):
            found += ladders
            made = f"{ladders[0].family}, {ladders[0].case}: {len(ladders)} ladders"
            say(f"case {number} of {len(tasks)}: {made}")
    return found


def family_names() -> list[str]:
    """Return the families of drawn cases."""
    return sorted(path.stem for path in FAMILIES.glob("*.py") if path.stem != "__init__")


def drawn_cases(family: str) -> list[Any]:
    """Return the cases of a family of drawn parts."""
    cases: list[Any] = getattr(
        importlib.import_module(f"convergence.calibration.families.{family}"), family
    )()
    return cases


def mapped_cases() -> list[Any]:
    """Return the cases of mapped parts."""
    from convergence.calibration.mapped_plane_cases import plane_cases
    from convergence.calibration.mapped_solid_cases import solid_cases

    return [*plane_cases(), *solid_cases()]


def _tasks() -> list[Task]:
    """Return a family, or "mapped", and the number of a case."""
    counts = {name: len(drawn_cases(name)) for name in family_names()} | {MAPPED: len(mapped_cases())}
    return [(name, number) for name, count in counts.items() for number in range(count)]


def _ladders(task: Task) -> list[KnownLadder]:
    name, number = task
    if name == MAPPED:
        from convergence.calibration.mapped_ladders import mapped_ladders

        return list(mapped_ladders(mapped_cases()[number]))
    from convergence.calibration.drawn_ladders import drawn_ladders

    return list(drawn_ladders(name, drawn_cases(name)[number]))
