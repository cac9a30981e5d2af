"""`--report-decimal` and the key of the study: documents with a decimal comma, JSON and CSV with a point."""

import html
import json
import re
from pathlib import Path

import pytest

from convergence.cli.main import outcome
from convergence.study import load

STUDY = """title = "Pin of the quayside davit"
report_decimal = "comma"

[table]
file = "pin.csv"

[quantities.sag]
kind = "displacement"
degree = 2
relative_tolerance = 0.05
"""
TABLE = "h [mm],sag [mm]\n8,1.0\n4,1.1\n2,1.125\n1,1.131\n"
NAMES = """case;h [mm];S.1.2 at 3.5 mm [MPa]
boom 1.5;8;200,5
boom 1.5;4;220,25
boom 1.5;2;225,5
boom 1.5;1;226,75
0.5;8;100,25
0.5;4;110,5
0.5;2;112,75
0.5;1;113,25
"""
PRINTOUT = """what,name,case,fx [N],fy [N],x [mm],y [mm]
load,hook 2.5,lift 1.5,0,-1250.5,10.5,0
reaction,pin 0.5,lift 1.5,0,1250.5,10.5,0
"""


@pytest.fixture(autouse=True)
def _inside(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("pin.toml").write_text(STUDY, encoding="utf-8")
    for name, text in (("pin.csv", TABLE), ("names.csv", NAMES), ("printout.csv", PRINTOUT)):
        Path(name).write_text(text, encoding="utf-8")


def page(folder: str) -> str:
    """What a page says before its end, where command and versions stand; no drawing."""
    whole = (Path(folder) / "report.html").read_text(encoding="utf-8")
    whole = re.sub(r"<(style|script|svg|pre)\b.*?</\1>", " ", whole, flags=re.DOTALL)
    text = html.unescape(re.sub(r"<[^>]+>", " ", whole))
    return text[: text.index("How to get these numbers again")]


def points_left(text: str, *names: str) -> list[str]:
    """Decimal points outside of names and of the sources of methods."""
    for name in (*names, "7.5-03-01-01", "10.1016/j.jcp.2014.01.006"):
        text = text.replace(name, "")
    return re.findall(r"\d\.\d+", text)


def test_the_study_says_it_for_all_its_reports() -> None:
    assert outcome(["run", "pin.toml", "--out", "out"]) == 0
    assert "1,131" in page("out") and points_left(page("out")) == []
    assert "1.131" in Path("out/ladder.csv").read_text() and "1,131" not in Path("out/ladder.csv").read_text()
    assert json.loads(Path("out/findings.json").read_text())["quantities"]["sag"]["value"] == 1.131
    assert outcome(["report", "out", "--as", "html", "--out", "again"]) == 0
    assert "1,131" in page("again") and points_left(page("again")) == []


def test_the_option_comes_before_the_study() -> None:
    assert outcome(["run", "pin.toml", "--out", "out", "--report-decimal", "point"]) == 0
    assert "1.131" in page("out") and "1,131" not in page("out")
    pages = {}
    for mark in ("point", "comma"):
        command = ["report", "out", "--as", "html,pdf,docx", "--date", "2031-05-02", "--out", mark]
        assert outcome([*command, "--report-decimal", mark]) == 0
        pages[mark] = page(mark)
    assert "1.131" in pages["point"] and "1,131" in pages["comma"] and points_left(pages["comma"]) == []


def test_the_decimal_mark_changes_no_number() -> None:
    text = STUDY.replace('report_decimal = "comma"\n', "")
    study, plain = load(Path("pin.toml")), load(Path("pin.toml"), text=text)
    assert study.head.report_decimal == "comma" and plain.head.report_decimal == "point"
    assert study.fingerprint == plain.fingerprint


def test_an_unknown_mark_in_a_study(capsys: pytest.CaptureFixture[str]) -> None:
    Path("pin.toml").write_text(STUDY.replace('"comma"', '"komma"'), encoding="utf-8")
    assert outcome(["judge", "pin.toml"]) == 2
    said = capsys.readouterr().err
    assert "pin.toml:2: report_decimal" in said and "'komma'" in said and "comma" in said


def test_how_a_table_is_read_and_how_a_report_is_written_are_two_things() -> None:
    command = ["judge", "names.csv", "--decimal", "comma"]
    outcome([*command, "--out", "point"])
    outcome([*command, "--out", "comma", "--report-decimal", "comma"])
    assert "226.75 ±" in page("point")
    whole = page("comma")
    assert "S.1.2 at 3.5 mm" in whole and "boom 1.5" in whole and re.search(r"\b0\.5\b", whole)
    assert points_left(whole, "S.1.2 at 3.5 mm", "boom 1.5", "0.5") == [] and "226,75 ±" in whole


def test_balances_and_comparisons() -> None:
    assert outcome(["balance", "printout.csv", "--out", "balance", "--report-decimal", "comma"]) == 0
    text = page("balance")
    assert "1250,5" in text and points_left(text, "lift 1.5", "hook 2.5", "pin 0.5") == []
    assert text.count("lift 1.5") > 1 and "hook 2.5" in text and "pin 0.5" in text
    Path("second 1.5").mkdir()
    Path("second 1.5/pin.csv").write_text(TABLE.replace("1.131", "1.132"), encoding="utf-8")
    command = ["compare", "pin.csv", "second 1.5/pin.csv", "--out", "both"]
    assert outcome([*command, "--report-decimal", "comma"]) == 0
    text = page("both")
    assert "1,13" in text and "second 1.5/pin.csv" in text
    assert points_left(text, "second 1.5/pin.csv") == []


def test_a_comparison_is_written_as_the_first_study_says() -> None:
    Path("point.toml").write_text(STUDY.replace('report_decimal = "comma"\n', ""), encoding="utf-8")
    assert outcome(["compare", "pin.toml", "point.toml", "--out", "comma"]) == 0
    assert outcome(["compare", "point.toml", "pin.toml", "--out", "point"]) == 0
    assert "1,13" in page("comma") and points_left(page("comma")) == []
    assert "1.13" in page("point") and "1,13" not in page("point")
