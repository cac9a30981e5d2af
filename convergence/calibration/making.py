"""The bank, or the ladders that it is held against, made anew: every case meshed and solved, two at a time.

Each is solved in a process of its own and kept on disk: what was interrupted goes on, unless a source has
changed that the numbers may depend on. Needs NGSolve with Netgen (`pip install -e .[dev]`). Takes about an
hour on two processors that are free.
"""

import hashlib
import importlib
import multiprocessing
from collections.abc import Callable
from multiprocessing.pool import ThreadPool
from pathlib import Path
from typing import Any

from convergence.calibration.bank import read_bank, write_bank
from convergence.calibration.known_ladder import KnownLadder

KEPT = Path("out", "bank")
PACKAGE = Path(__file__).parents[1]
SOURCES = ("calibration", "corners", "fem", "models", "quantities")
FAMILIES, UNSEEN = "families", "unseen"  # packages of drawn cases: of the bank, and those no table is made of
MAPPED = "mapped"
PROCESSES = 2
Task = tuple[str, str, int]  # package, family, number of the case


def made_ladders(
    package: str, say: Callable[[str], None], kept: Path = KEPT
) -> tuple[list[KnownLadder], list[str]]:
    """Return all ladders of a package of families, always in the same order, and the cases that failed.

    `say` takes a line for each. The mapped cases belong to the bank.

    What is finished is kept in a folder of `kept` for the next call.
    """
    folder, tasks = kept / _fingerprint(), _tasks(package)
    folder.mkdir(parents=True, exist_ok=True)
    found: list[KnownLadder] = []
    failed: list[str] = []
    with ThreadPool(PROCESSES) as pool:
        paths = pool.imap(lambda task: _finished(task, folder), tasks)
        for number, path in enumerate(paths, start=1):
            ladders = read_bank(path) if path.exists() else []
            found += ladders
            made = f"{ladders[0].family}, {ladders[0].case}: {len(ladders)} ladders" if ladders else "FAILED"
            say(f"case {number} of {len(tasks)}: {path.name.split('.')[0]}: {made}")
            failed += [] if ladders else [path.name.split(".")[0]]
    return found, failed


def family_names(package: str) -> list[str]:
    """Return the families of drawn cases in a package."""
    folder = Path(__file__).with_name(package)
    return sorted(path.stem for path in folder.glob("*.py") if path.stem != "__init__")


def drawn_cases(package: str, family: str) -> list[Any]:
    """Return the cases of a family of drawn parts."""
    found = importlib.import_module(f"convergence.calibration.{package}.{family}")
    cases: list[Any] = getattr(found, family)()
    return cases


def mapped_cases() -> list[Any]:
    """Return the cases of mapped parts."""
    from convergence.calibration.mapped_plane_cases import plane_cases
    from convergence.calibration.mapped_solid_cases import solid_cases

    return [*plane_cases(), *solid_cases()]


def _tasks(package: str) -> list[Task]:
    """Return package, family, or "mapped", and the number of each case."""
    counts = {name: len(drawn_cases(package, name)) for name in family_names(package)}
    if package == FAMILIES:
        counts[MAPPED] = len(mapped_cases())
    return [(package, name, number) for name, count in counts.items() for number in range(count)]


def _fingerprint() -> str:
    """Return what changes with any source that the numbers may depend on."""
    files = sorted(path for room in SOURCES for path in (PACKAGE / room).rglob("*.py"))
    return hashlib.sha256(b"".join(path.read_bytes() for path in files)).hexdigest()[:12]


def _finished(task: Task, folder: Path) -> Path:
    """Return the path of a case's ladders, solved unless they are there; there is no file where it failed."""
    path = folder / "{} {}.csv.gz".format(*task[1:])
    if not path.exists():
        process = multiprocessing.get_context("spawn").Process(target=_make, args=(task, path))
        process.start()
        process.join()
    return path


def _make(task: Task, path: Path) -> None:
    begun = path.with_suffix(".part")
    write_bank(_ladders(task), begun)
    begun.rename(path)


def _ladders(task: Task) -> list[KnownLadder]:
    package, name, number = task
    if name == MAPPED:
        from convergence.calibration.mapped_ladders import mapped_ladders

        return list(mapped_ladders(mapped_cases()[number]))
    import ngsolve

    from convergence.calibration.drawn_ladders import drawn_ladders

    ngsolve.SetNumThreads(1)  # a second would wait for the processor that the other process has
    return list(drawn_ladders(name, drawn_cases(package, name)[number]))
