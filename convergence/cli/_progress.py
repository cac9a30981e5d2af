"""Progress of a run on the terminal: each level as it is solved, and the time that is left."""

from collections.abc import Iterable, Sequence
from contextlib import AbstractContextManager, nullcontext

from convergence.results import Level

SOLVE_EXPONENT = 1.2


def follow(levels: Iterable[Level], total: int, ratio: float, dimension: int = 2) -> None:
    """Draw levels until there are no more; say on a terminal how far it is, elsewhere nothing."""
    from rich.console import Console

    screen = Console(stderr=True, highlight=False)
    status = screen.status(f"level 1 of {total}") if screen.is_terminal else None
    holding: AbstractContextManager[object] = status or nullcontext()
    solved: list[Level] = []
    with holding:
        for level in levels:
            solved.append(level)
            if not status:
                continue
            screen.print(f"level {len(solved)} of {total}: {level.dofs:,} unknowns, {level.seconds:.1f} s")
            if len(solved) < total:
                left = remaining(solved, total, ratio**dimension)
                status.update(f"level {len(solved) + 1} of {total}, about {left:.0f} s remaining")


def remaining(solved: Sequence[Level], total: int, growth: float) -> float:
    """Return the seconds of the levels to come, where the cost grows as unknowns^1.2."""
    factor = float(growth**SOLVE_EXPONENT)
    return sum(solved[-1].seconds * factor**step for step in range(1, total - len(solved) + 1))
