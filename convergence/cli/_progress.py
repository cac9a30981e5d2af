"""Progress of a run on the terminal: each level as it is solved, and what is foretold of those to come."""

from collections.abc import Iterable, Sequence
from contextlib import AbstractContextManager, nullcontext

from convergence import numbers
from convergence.forecast import forecast
from convergence.results import Level


def follow(levels: Iterable[Level], unknowns: Sequence[int], companion: str = "") -> None:
    """Draw levels until there are no more; say on a terminal how far it is, elsewhere nothing.

    `unknowns` has the number of unknowns of every level that was asked for; `companion` is the word before
    the levels of a companion.
    """
    from rich.console import Console

    screen = Console(stderr=True, highlight=False)
    total, word = len(unknowns), f"{companion} level".lstrip()
    status = screen.status(f"{word} 1 of {total}{ahead([], unknowns)}") if screen.is_terminal else None
    holding: AbstractContextManager[object] = status or nullcontext()
    solved: list[Level] = []
    with holding:
        for level in levels:
            solved.append(level)
            if not status:
                continue
            used = f"{level.seconds:.1f} s" + memory_text(",", level.memory)
            screen.print(f"{word} {len(solved)} of {total}: {level.dofs:,} unknowns, {used}")
            if len(solved) < total:
                status.update(f"{word} {len(solved) + 1} of {total}{ahead(solved, unknowns)}")


def ahead(solved: Sequence[Level], unknowns: Sequence[int]) -> str:
    """Return what the levels to come are expected to take: the time of all, the memory of the largest."""
    expected = [forecast(solved, dofs) for dofs in unknowns[len(solved) :]]
    seconds = sum(each.seconds for each in expected)
    left = f", about {numbers.amount(seconds, numbers.TIME)} remaining"
    return left + memory_text(", up to", max(each.memory for each in expected))


def memory_text(before: str, megabytes: float) -> str:
    """Return words and an amount such as 1.5 GB, "" where it is not known."""
    return f"{before} {numbers.amount(megabytes, numbers.MEMORY)} of memory" if megabytes > 0.0 else ""
