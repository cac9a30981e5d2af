"""Figures drawn by two processes: the same ones, in their order, whatever becomes of the second one."""

import os
import signal
import time
from collections.abc import Sequence
from pathlib import Path

import pytest

from convergence.cli import _drawing
from convergence.cli._drawing import WORTH_IT, drawing
from convergence.report._picture import Picture

NAMES = ["a", "b", "c", "d", "e"]


def picture(name: str) -> Picture | None:
    """A picture that says in which process it was drawn; none called c."""
    return None if name == "c" else Picture(name, "", "", str(os.getpid()), b"", 1.0)


def picture_here_only(name: str, here: int) -> Picture | None:
    if os.getpid() != here:
        raise ValueError(name)
    return picture(name)


def picture_that_ends_the_second(name: str, here: int) -> Picture | None:
    if os.getpid() != here:
        os._exit(1)
    return picture(name)


def picture_after_another(name: str, here: int, drawn: Path) -> Picture | None:
    if os.getpid() != here:
        drawn.touch()
    deadline = time.monotonic() + 60.0
    while not drawn.exists() and time.monotonic() < deadline:
        time.sleep(0.01)
    return picture(name)


def names(drawn: Sequence[Picture | None]) -> list[str | None]:
    return [found and found.name for found in drawn]


def test_a_small_study_has_no_second_process() -> None:
    with drawing(WORTH_IT - 1) as draw_all:
        assert draw_all is None


def test_both_processes_draw(tmp_path: Path) -> None:
    """The first of them to be asked here waits until one was drawn elsewhere."""
    with drawing(WORTH_IT) as draw_all:
        assert draw_all is not None
        drawn = draw_all([(picture_after_another, (name, os.getpid(), tmp_path / "drawn")) for name in NAMES])
    assert names(drawn) == ["a", "b", None, "d", "e"]
    processes = {found.svg for found in drawn if found}
    assert str(os.getpid()) in processes and len(processes) == 2


@pytest.mark.parametrize("function", [picture_here_only, picture_that_ends_the_second])
def test_a_second_process_that_fails_costs_nothing_but_time(function) -> None:
    with drawing(WORTH_IT) as draw_all:
        assert draw_all is not None
        for _ in range(2):
            drawn = draw_all([(function, (name, os.getpid())) for name in NAMES])
            assert names(drawn) == ["a", "b", None, "d", "e"]
            assert {found.svg for found in drawn if found} == {str(os.getpid())}


def test_a_fault_of_a_figure_is_told_as_without_it() -> None:
    with drawing(WORTH_IT) as draw_all:
        assert draw_all is not None
        with pytest.raises(ValueError, match="d"):
            draw_all([(picture_here_only, (name, 0 if name == "d" else os.getpid())) for name in NAMES])


@pytest.mark.skipif(not Path("/proc").exists(), reason="looks for the process in /proc")
def test_the_second_process_ends_with_the_first(monkeypatch) -> None:
    """Also where the first is killed: its end of the pipe is closed then, as here."""
    started = []
    process = _drawing.get_context("spawn").Process
    monkeypatch.setattr(
        _drawing.get_context("spawn"),
        "Process",
        lambda **kwargs: started.append(process(**kwargs)) or started[-1],
    )
    with drawing(WORTH_IT) as draw_all:
        assert draw_all is not None
        os.kill(started[0].pid, signal.SIGINT)  # Ctrl-C reaches the whole group: ignored here
        assert names(draw_all([(picture, ("a",)), (picture, ("b",))])) == ["a", "b"]
    deadline = time.monotonic() + 10.0
    while started[0].is_alive() and time.monotonic() < deadline:
        time.sleep(0.05)
    assert not started[0].is_alive()
