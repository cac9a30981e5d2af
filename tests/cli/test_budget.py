"""`run --budget`: words of memory and time, and a run that ends before what is too much."""

import json
from pathlib import Path

import pytest

from convergence.cli import main
from convergence.cli._budget import budget_of
from convergence.errors import InputError
from convergence.forecast import Budget

STUDY = """[model]
name = "patch_test"
[ladder]
divisions = 1
levels = {levels}
degree = 1
[quantities.energy]
measure = "strain_energy"
"""
EXAMPLE = "write e.g. 10GB, 500MB, 5min or 2h"


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("patch.toml").write_text(STUDY.format(levels=3))
    Path("huge.toml").write_text(STUDY.format(levels=12).replace("divisions = 1", "divisions = 1000"))


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


@pytest.mark.parametrize(
    ("words", "budget"),
    [
        ((), Budget()),
        (("10GB",), Budget(memory=10_000.0)),
        (("500 MB",), Budget(memory=500.0)),
        ((" 1.5tb ",), Budget(memory=1_500_000.0)),
        (("5min",), Budget(seconds=300.0)),
        (("90S",), Budget(seconds=90.0)),
        ((".5h", "2gb"), Budget(seconds=1800.0, memory=2000.0)),
    ],
)
def test_words_of_a_budget(words: tuple[str, ...], budget: Budget) -> None:
    assert budget_of(words) == budget


@pytest.mark.parametrize(
    "word", ["", "10", "GB", "-5GB", "0 min", "5 minutes", "1e3 MB", "1.2.3s", "nanh", "9" * 400 + "s"]
)
def test_what_is_no_budget(word: str) -> None:
    with pytest.raises(InputError) as caught:
        budget_of([word])
    assert str(caught.value) == f"--budget: not a memory or a time, got {word!r}; {EXAMPLE}"


def test_every_fault_of_a_budget_is_told() -> None:
    with pytest.raises(InputError) as caught:
        budget_of(["1GB", "much", "2 GB", "1h"])
    assert str(caught.value) == (
        f"--budget: not a memory or a time, got 'much'; {EXAMPLE}\n"
        "--budget: a second memory, got '2 GB'; give one memory and one time"
    )


def test_a_fault_is_told_before_anything_is_done(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "run", "patch.toml", "--budget", "lots")
    assert (code, out, err) == (2, "", f"--budget: not a memory or a time, got 'lots'; {EXAMPLE}\n")
    assert not Path("out").exists()


def test_a_budget_that_suffices_changes_nothing(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "run", "patch.toml", "--budget", "100GB", "--budget", "10h")
    assert code == 0 and "not solved" not in out


def test_a_first_level_above_the_memory_of_any_machine(capsys: pytest.CaptureFixture[str]) -> None:
    Path("huge.toml").write_text(Path("huge.toml").read_text().replace("levels = 12", "levels = 1"))
    code, out, err = call(capsys, "run", "huge.toml", "--budget", "100MB")
    assert code == 3 and out == ""
    assert err.startswith("level 1 (") and "of memory where 100 MB are available" in err
    assert err.endswith("; ask for a coarser first level\n")


def test_levels_above_the_budget_are_named_and_the_others_are_judged(
    capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    """With 10 MB an unknown (16, 50, 178, 674 of them) three levels fit 3.5 GB, the fourth would not."""
    from convergence import climbing

    taken = iter([160.0, 500.0, 1780.0])
    monkeypatch.setattr(climbing, "peak_memory", lambda: next(taken))
    Path("patch.toml").write_text(STUDY.format(levels=5))
    code, out, _ = call(capsys, "run", "patch.toml", "--budget", "3.5GB", "--json")
    found = json.loads(out)
    assert code == 0 and found["levels"] == 3 and found["quantities"]["energy"]["verdict"] == "sound"
    kept = json.loads(Path("out/patch/findings.json").read_text())
    (remark,) = kept["remarks"]
    assert remark.startswith("level 4 (674 unknowns) is not solved: it would need about 6.7 GB of memory")
    assert remark.endswith("; the levels before it are judged")
    assert [level["memory"] for level in kept["table"]] == [160.0, 500.0, 1780.0]
    shown = call(capsys, "judge", "out/patch")[1]
    assert "Remark: level 4" in shown and "of memory where 3.5 GB are available" in " ".join(shown.split())
    assert "level 4" in Path("out/patch/report.html").read_text()
