"""The bank made in two processes: every case, in order, a line of progress for each, nothing lost."""

from pathlib import Path

import pytest

from convergence.calibration import making
from convergence.calibration.making import (
    FAMILIES,
    MAPPED,
    UNSEEN,
    family_names,
    made_ladders,
    mapped_cases,
)

RODS = [number for number, case in enumerate(mapped_cases()) if case.model == "tie_rod"]
NONE = len(mapped_cases())


@pytest.mark.slow
def test_cases_come_in_order_whichever_process_makes_them_and_a_failure_is_told(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    order = [RODS[1], NONE, RODS[0]]
    monkeypatch.setattr(making, "_tasks", lambda package: [(package, MAPPED, number) for number in order])
    lines: list[str] = []
    ladders, failed = made_ladders(FAMILIES, lines.append, tmp_path)
    cases = list(dict.fromkeys(one.case.split(",")[0] for one in ladders))
    assert cases == [mapped_cases()[number].name.split(",")[0] for number in (RODS[1], RODS[0])]
    assert failed == [f"{MAPPED} {NONE}"]
    assert [line.split(":")[0] for line in lines] == [f"case {n} of 3" for n in (1, 2, 3)]


@pytest.mark.slow
def test_what_is_finished_is_not_solved_again_unless_a_source_changes(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    monkeypatch.setattr(making, "_tasks", lambda package: [(package, MAPPED, RODS[0])])
    first, _ = made_ladders(FAMILIES, lambda _: None, tmp_path)
    (kept,) = tmp_path.glob("*/*")
    written = kept.stat().st_mtime_ns
    again, _ = made_ladders(FAMILIES, lambda _: None, tmp_path)
    assert kept.stat().st_mtime_ns == written and len(again) == len(first) > 0
    monkeypatch.setattr(making, "_fingerprint", lambda: "other")
    made_ladders(FAMILIES, lambda _: None, tmp_path)
    assert len(list(tmp_path.glob("*/*"))) == 2


def test_no_drawn_family_is_called_as_the_mapped_ones_are() -> None:
    drawn = family_names(FAMILIES) + family_names(UNSEEN)
    assert MAPPED not in drawn and len(drawn) >= 16
