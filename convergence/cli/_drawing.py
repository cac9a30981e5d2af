"""A second process that draws figures beside this one; it gets ready while the levels are solved."""

import signal
from collections.abc import Iterator, Sequence
from concurrent.futures import ThreadPoolExecutor
from contextlib import contextmanager, suppress
from multiprocessing import get_context
from multiprocessing.connection import Connection
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from convergence.report._picture import Picture
    from convergence.report.pictures import Draw, Figure

WORTH_IT = 50_000  # unknowns of the finest level: fewer are solved before a second process has begun


@contextmanager
def drawing(unknowns: int) -> Iterator["Draw | None"]:
    """Give a function that draws figures in two processes; None where the finest level is small."""
    if unknowns < WORTH_IT:
        yield None
        return
    here, there = get_context("spawn").Pipe()
    second = get_context("spawn").Process(target=_draw_what_comes, args=(there,), daemon=True)
    interrupt = signal.signal(signal.SIGINT, signal.SIG_IGN)  # inherited: Ctrl-C is for this process alone
    try:
        second.start()
    finally:
        signal.signal(signal.SIGINT, interrupt)
    there.close()
    try:
        yield lambda figures: _shared(here, figures)
    finally:
        second.terminate()


def _draw_what_comes(from_the_first: Connection) -> None:
    """Draw figures until the first process is gone; the answers stand in lists, empty ones for failures."""
    from convergence.report import _picture, pictures

    _picture.get_ready()
    while True:
        try:
            figure = from_the_first.recv()
        except EOFError:
            return
        try:
            drawn = pictures.one_by_one([figure])
        except Exception:
            drawn = []
        from_the_first.send(drawn)


def _shared(second: Connection, figures: Sequence["Figure"]) -> list["Picture | None"]:
    """Draw figures in both processes, each the last one left; all of them here where the second fails.

    Meshes and maps stand last and take longest, so they are begun first.
    """
    from convergence.report.pictures import one_by_one

    drawn: dict[int, list[Picture | None]] = {}
    numbers = iter(reversed(range(len(figures))))

    def elsewhere() -> None:
        with suppress(OSError, EOFError):
            for number in numbers:
                second.send(figures[number])
                drawn[number] = second.recv()

    with ThreadPoolExecutor(1) as beside:
        beside.submit(elsewhere)
        for number in numbers:
            drawn[number] = one_by_one([figures[number]])
    return [(drawn.get(number) or one_by_one([figures[number]]))[0] for number in range(len(figures))]
