"""The bank made in two processes: every case, in order, a line of progress for each."""

import pytest

from convergence.calibration import making
from convergence.calibration.making import MAPPED, family_names, made_bank, mapped_cases


@pytest.mark.slow
def test_cases_come_in_order_whichever_process_makes_them(monkeypatch: pytest.MonkeyPatch) -> None:
    rods = [number for number, case in enumerate(mapped_cases()) if case.model == "tie_rod"]
    monkeypatch.setattr(making, "_tasks", lambda: [(MAPPED, number) for number in reversed(rods)])
    lines: list[str] = []
    ladders = made_bank(lines.append)
    cases = list(dict.fromkeys(one.case.split(",")[0] for one in ladders))
    assert len(rods) > 1 and cases == [mapped_cases()[number].name.split(",")[0] for number in reversed(rods)]
    assert [line.split(":")[0] for line in lines] == [
        f"case {n} of {len(rods)}" for n in range(1, len(rods) + 1)
    ]


def test_no_drawn_family_is_called_as_the_mapped_ones_are() -> None:
    assert MAPPED not in family_names() and len(family_names()) >= 16
