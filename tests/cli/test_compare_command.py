"""`meshassay compare`: tables, studies and folders of runs; exit codes, the screen, JSON, the report."""

import json
from pathlib import Path

import pytest

from convergence.cli import main

FIRST = "h [mm],tip [mm],root [MPa]\n8,10.64,88.4\n4,10.16,101.7\n2,10.04,109.2\n1,10.01,112.8\n"
SECOND = "nodes,u_tip [mm],root [MPa]\n300,9.84,120.0\n1200,9.96,118.0\n4800,9.99,117.0\n19200,9.9975,116.5\n"
OTHER = FIRST.replace("10.", "11.")
KINDS = ("--kind", "tip=displacement", "--kind", "root=peak_stress", "--degree", "1")
STUDY = """[table]
file = "first.csv"
[material]
young = 210000.0
poisson = 0.3
[quantities.tip]
kind = "displacement"
degree = 1
relative_tolerance = 0.05
"""


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("first.csv").write_text(FIRST)
    Path("second.csv").write_text(SECOND)
    Path("other.csv").write_text(OTHER)
    Path("arm.toml").write_text(STUDY)


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


def test_ladders_that_meet(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, err = call(capsys, "compare", "first.csv", "second.csv", "--match", "tip=u_tip", *KINDS)
    assert (code, err) == (0, "") and max(map(len, out.splitlines())) <= 80
    assert (
        out.startswith("first.csv | second.csv\n") and " ".join(out.split()).count("the intervals meet") == 2
    )
    assert "Both quantities meet: the intervals overlap." in out


def test_ladders_that_part_and_what_has_no_partner(capsys: pytest.CaptureFixture[str]) -> None:
    Path("other.csv").write_text(OTHER.replace("root", "peak"))
    code, out, _ = call(capsys, "compare", "arm.toml", "other.csv")
    words = " ".join(out.split())
    assert (
        code == 1 and "tip: the intervals part" in words and "The second lies above the first with" in words
    )
    assert (
        "0 of 1 quantities meet. Not so: tip (part)." in words and "Remark: Only in other.csv: peak." in words
    )


def test_revisions_state_the_change(capsys: pytest.CaptureFixture[str]) -> None:
    code, out, _ = call(capsys, "compare", "first.csv", "other.csv", "--revisions", *KINDS)
    words = " ".join(out.split())
    assert (
        code == 1
        and "tip: the revision changes it by 1.0" in words
        and "wherever both intervals hold" in words
    )
    assert "The revision changes tip. No change is shown of root." in words


def test_as_json_and_with_a_report(capsys: pytest.CaptureFixture[str]) -> None:
    arguments = ("first.csv", "second.csv", "--match", "tip=u_tip", *KINDS, "--json", "--out", "page")
    code, out, err = call(capsys, "compare", *arguments)
    found = json.loads(out)
    assert code == 0 and err == "Report: page/report.html\n"
    assert (found["first"], found["second"], found["as"]) == ("first.csv", "second.csv", "one model")
    tip = found["quantities"]["tip"]
    assert tip["outcome"] == "meet" and tip["second"]["quantity"] == "u_tip" and tip["distance"] <= 1
    # both columns are 10 + c h²
    for side in ("first", "second", "together"):
        assert tip[side]["low"] <= 10.0 <= tip[side]["high"]
    page = Path("page/report.html").read_text()
    assert "first.csv and second.csv" in page and "second.csv: u_tip" in page and page.count("<svg") == 2
    assert {path.name for path in Path("page/figures").iterdir()} == {
        f"{name}-comparison.{kind}" for name in ("tip", "root") for kind in ("svg", "png")
    }
    kept = json.loads(Path("page/comparison.json").read_text())
    assert {key: kept[key] for key in found} == found


def test_load_cases_are_compared_one_by_one(capsys: pytest.CaptureFixture[str]) -> None:
    rows = FIRST.splitlines()
    lift, heel = ([f"{case},{row}" for row in rows[1:]] for case in ("lift", "heel"))
    Path("cases.csv").write_text("\n".join([f"case,{rows[0]}", *lift, *heel]) + "\n")
    code, out, _ = call(capsys, "compare", "cases.csv", "cases.csv", "--json", *KINDS)
    found = json.loads(out)
    assert code == 0 and found["all_meet"] and list(found["cases"]) == ["lift", "heel"]
    code, _, err = call(capsys, "compare", "cases.csv", "first.csv")
    assert code == 2 and err == (
        "first.csv: no load case in common: lift, heel in cases.csv, none in first.csv; give the folder of"
        " one case of each\n"
    )


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (
            ["frist.csv", "oter.csv"],
            "frist.csv: no such file; did you mean 'first.csv'?\n"
            "oter.csv: no such file; did you mean 'other.csv'?\n",
        ),
        (["first.csv", "other.csv", "--match", "tip"], "--match tip: not FIRST=SECOND; e.g. --match"),
        (
            ["first.csv", "other.csv", *(["--degree", "1"] * 3)],
            "--degree: more than two, got (1, 1, 1); once",
        ),
        (["arm.toml", "arm.toml", "--degree", "1"], "arm.toml: --kind, --degree"),
    ],
)
def test_what_cannot_be_used(capsys: pytest.CaptureFixture[str], arguments: list[str], message: str) -> None:
    code, out, err = call(capsys, "compare", *arguments)
    assert code == 2 and out == "" and err.startswith(message)
