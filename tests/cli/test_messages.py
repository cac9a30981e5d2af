"""What cannot be used, or fails while solving, ends in a message and an exit code, no stack trace."""

from collections.abc import Iterator
from pathlib import Path

import pytest

from convergence import climbing
from convergence.cli import main
from convergence.cli._said import tolerance_of
from convergence.errors import InputError, SolvingError
from convergence.results import Level

STUDY = """[model]
name = "patch_test"
[ladder]
divisions = 1
levels = 3
degree = 1
[quantities.energy]
measure = "strain_energy"
"""


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("good.csv").write_text("h,length\n2,6.1\n1,6.0\n")
    Path("patch.toml").write_text(STUDY)


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (["judge", "god.csv"], "god.csv: no such file; did you mean 'good.csv'?\n"),
        (["run", "path.toml"], "path.toml: no such file; did you mean 'patch.toml'?\n"),
        (["judge", "patch.toml"], "out/patch/ladder.csv: nothing solved yet; meshassay run patch.toml\n"),
        (["judge", "."], "study.toml: no such file; give the path of a study file (.toml)\n"),
        (
            ["judge", "none.csv", "missing.csv"],
            "none.csv: no such file; give the path of a table (.csv, .xlsx, .ods)\n"
            "missing.csv: no such file; give the path of a table (.csv, .xlsx, .ods)\n",
        ),
        (
            ["judge", "good.csv", "--kind", "length=displacment"],
            "--kind length: unknown kind, got 'displacment'; did you mean 'displacement'?\n",
        ),
        (
            ["judge", "good.csv", "--kind", "lenght=energy"],
            "--kind lenght: good.csv has no such column; did you mean 'length'?\n",
        ),
        (
            ["judge", "good.csv", "--kind", "energy"],
            "--kind energy: not NAME=KIND; e.g. --kind deflection=displacement\n",
        ),
        (
            ["judge", "good.csv", "--tolerance", "tight"],
            "--tolerance: not a tolerance, got 'tight'; write e.g. 5% or 0.05\n",
        ),
        (
            ["judge", "patch.toml", "--degree", "2"],
            "patch.toml: --kind, --degree and the other options on tables are for bare tables; "
            "write them in the study\n",
        ),
    ],
)
def test_what_cannot_be_used_is_said(
    capsys: pytest.CaptureFixture[str], arguments: list[str], message: str
) -> None:
    assert call(capsys, *arguments) == (2, "", message)


@pytest.mark.parametrize(
    "arguments", [["judge"], ["jugde"], ["run"], ["list", "x"], ["judge", "good.csv", "-z"]]
)
def test_wrong_usage_is_exit_code_2(capsys: pytest.CaptureFixture[str], arguments: list[str]) -> None:
    code, out, err = call(capsys, *arguments)
    assert code == 2 and out == "" and "Error: " in err


@pytest.mark.parametrize(("word", "value"), [("5%", 0.05), ("0.05", 0.05), (" 0.5 % ", 0.005), (None, None)])
def test_tolerance_words(word: str | None, value: float | None) -> None:
    assert tolerance_of(word) == value


@pytest.mark.parametrize("word", ["", "%", "0", "-5%", "nan", "inf", "5 per cent"])
def test_no_tolerance(word: str) -> None:
    with pytest.raises(InputError):
        tolerance_of(word)


@pytest.mark.parametrize(
    ("error", "code", "message"),
    [
        (SolvingError("level 1: the solver stalled"), 3, "level 1: the solver stalled\n"),
        (MemoryError(), 3, "not enough memory; ask for fewer levels or a coarser first level\n"),
        (KeyboardInterrupt(), 130, "stopped; solved levels are kept, the same command goes on from there\n"),
        (
            ZeroDivisionError("division\nby zero"),
            3,
            "defect of meshassay: ZeroDivisionError: division by zero; please report the command\n",
        ),
    ],
)
def test_what_goes_wrong_while_solving(
    capsys: pytest.CaptureFixture[str],
    monkeypatch: pytest.MonkeyPatch,
    error: BaseException,
    code: int,
    message: str,
) -> None:
    def fails(study: object, folder: Path, budget: object) -> Iterator[Level]:
        yield Level(1.0, 1, 8, 0.0, {})
        raise error

    monkeypatch.setattr(climbing, "climb", fails)
    ended, out, err = call(capsys, "run", "patch.toml")
    # click ends the line of a ^C first
    assert (ended, out, err.lstrip("\n")) == (code, "", message)
