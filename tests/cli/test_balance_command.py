"""`meshassay balance`: exit codes, the screen, JSON, the report, and what cannot be used."""

import json
from pathlib import Path

import pytest

from convergence.cli import main

HEAD = "case,what,name,fx [kN],fy [kN],m [kN m],x [m],y [m]\n"
# 12.5 kN at 3 m on a mast: 12.5 kN and 37.5 kNm at its foot (own computation)
LIFT = "lift,load,hook,0.000,-12.500,,3.0,4.0\nlift,reaction,foot,0.000,12.500,37.500,0,0\n"
HEEL = "heel,load,hook,2.500,-12.500,,3.0,4.0\nheel,reaction,foot,-2.500,12.500,47.000,0,0\n"


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("good.csv").write_text(HEAD + LIFT)
    Path("both.csv").write_text(HEAD + LIFT + HEEL)


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


def test_a_balanced_printout(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "balance", "good.csv")
    assert (code, err) == (0, "")
    assert [line.split() for line in out.splitlines()[2:5]] == [
        ["Fx", "[kN]", "0", "0", "0", "0", "%", "±0.001", "balanced"],
        ["Fy", "[kN]", "-12.5000", "12.5000", "0", "0", "%", "±0.001", "balanced"],
        ["Mz", "[kN", "m]", "-37.5000", "37.5000", "0", "0", "%", "±0.004", "balanced"],
    ]
    assert "printout balance to the last digit (allowed 0.1 %), \nmoments about (0, 0) m." in out


def test_the_worst_case_comes_first_and_decides(capsys: pytest.CaptureFixture[str]) -> None:
    """47.0 instead of 2.5 · 4 + 12.5 · 3 = 47.5 kNm: 0.5 of 12.748 kN · 5 m."""
    code, out, _ = call(capsys, "balance", "both.csv")
    assert code == 1 and out.startswith("heel\n") and max(map(len, out.splitlines())) <= 80
    assert "the worst component, Mz, is \noff by 0.784 % of the load" in out
    assert "1 of 2 load cases is balanced. Not settled: heel (out of balance)." in out
    assert call(capsys, "balance", "both.csv", "--tolerance", "1%")[0] == 0
    assert call(capsys, "balance", "both.csv", "--about", "3,4")[0] == 1


def test_as_json(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "balance", "both.csv", "--json", "--about=-1,0.5")
    found = json.loads(out)
    heel = found["cases"]["heel"]
    assert code == 1 and found["all_balanced"] is False and found["table"] == "both.csv"
    assert (heel["passed"], heel["worst"], heel["about"]) == (False, "Mz", [-1.0, 0.5])
    assert heel["units"] == {"force": "kN", "length": "m"}
    assert heel["components"]["Mz"]["missing"] == pytest.approx(-0.5)
    assert heel["components"]["Fx"]["outcome"] == "balanced"


def test_the_report_stands_alone(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "balance", "both.csv", "--out", "page")
    assert code == 1 and out.endswith("Report: page/report.html\n")
    page = Path("page/report.html").read_text()
    assert "Equilibrium of both" in page and "0.784 % of the load" in page and page.count("<svg") == 2
    assert {path.name for path in Path("page/figures").iterdir()} == {
        f"{case}-balance.{kind}" for case in ("lift", "heel") for kind in ("svg", "png")
    }
    kept = json.loads(Path("page/balance.json").read_text())
    assert kept["cases"]["lift"]["passed"] is True and "meshassay" in kept["versions"]


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (["god.csv"], "god.csv: no such file; did you mean 'good.csv'?\n"),
        (["good.csv", "--about", "1"], "--about: not a point, got '1'; write e.g. 0,0 or 1.5,0,2\n"),
        (
            ["good.csv", "--about", "0,0,0"],
            "--about: unsuitable about, got '0,0,0'; give 2 coordinates, as the table has\n",
        ),
        (
            ["good.csv", "--tolerance", "-1"],
            "--tolerance: not a tolerance, got '-1'; write e.g. 5% or 0.05\n",
        ),
    ],
)
def test_what_cannot_be_used(capsys: pytest.CaptureFixture[str], arguments: list[str], message: str) -> None:
    assert call(capsys, "balance", *arguments) == (2, "", message)
