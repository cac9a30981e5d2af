"""A second process that draws half of the figures; it gets ready while the levels are solved."""

import signal
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
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
    """Draw lists of figures until the first process is gone; None stands for what cannot be drawn."""
    from convergence.report import _picture, pictures

    _picture.get_ready()
    while True:
        try:
            figures = from_the_first.recv()
        except EOFError:
            return
        try:
            drawn: list[Picture | None] | None = pictures.one_by_one(figures)
        except Exception:
            drawn = None
        from_the_first.send(drawn)


def _shared(second: Connection, figures: Sequence["Figure"]) -> list["Picture | None"]:
    """Draw every other figure here; all of them where the second process fails."""
    from convergence.report.pictures import one_by_one

    drawn: list[Picture | None] = [None] * len(figures)
    try:
        second.send(figures[1::2])
        drawn[::2] = one_by_one(figures[::2])
        others = second.recv()
    except (OSError, EOFError):
        others = None
    if others is None:
        return one_by_one(figures)
    drawn[1::2] = others
    return drawn
