"""Tables on the command line: workbooks, pasted text, load cases, and the studies that name them."""

import io
import json
from pathlib import Path
from urllib.parse import unquote

import openpyxl
import pytest

from convergence.cli import main

HEAD = ["Load case", "h [mm]", "tip [mm]"]
# differences fall by four with h halved: second order, as theory has for the displacement of linear elements
LIFT = [["lift", 8, 6.4], [None, 4, 6.5], [None, 2, 6.525], [None, 1, 6.53125]]
SWELL = [["swell / port", 8, 1.2], [None, 4, 1.5], [None, 2, 1.575], [None, 1, 1.59375]]
STUDY = """title = "Davit arm"
[table]
file = "arm.xlsx"
sheet = "Davit"
range = "B2:D10"
[quantities.tip]
kind = "displacement"
degree = 1
relative_tolerance = 0.002
"""


@pytest.fixture(autouse=True)
def _inside(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    book = openpyxl.Workbook()
    page = book["Sheet"]
    page.title = "Davit"
    page["B1"] = "by hand"
    for row in (HEAD, *LIFT, *SWELL):
        page.append([None, *row])
    page["B12"] = "mean"
    page["D12"] = 4.0
    book.save("arm.xlsx")


def call(capsys: pytest.CaptureFixture[str], *arguments: str) -> tuple[int, str, str]:
    code = main.outcome(list(arguments))
    out, err = capsys.readouterr()
    assert "Traceback" not in out + err
    return code, out, err


def text_of(rows: list[list[object]]) -> str:
    return "\n".join("\t".join("" if cell is None else str(cell) for cell in row) for row in rows)


def test_each_case_of_a_workbook_is_judged(capsys: pytest.CaptureFixture[str]) -> None:
    options = ("--sheet", "davit", "--range", "B2:D10", "--degree", "1", "--kind", "tip=displacement")
    code, out, err = call(capsys, "judge", "arm.xlsx", *options, "--tolerance", "0.2%")
    lines = [line.split() for line in out.splitlines()]
    assert (code, err) == (1, "") and max(map(len, out.splitlines())) <= 80
    # the worst case first
    assert lines[2][:3] == ["tip", "swell", "/"] and lines[3][:2] == ["lift", "sound"]
    assert "1 of 2 cases is sound. Not settled: swell / port (refine)." in out
    assert "Ladder: arm.xlsx: sheet 'Davit', B2:D10" in out
    code, out, _ = call(capsys, "judge", "arm.xlsx", *options, "--tolerance", "0.2%", "--json")
    found = json.loads(out)
    assert code == 1 and list(found["cases"]) == ["lift", "swell / port"]
    assert found["cases"]["lift"]["ladder"] == "arm.xlsx: sheet 'Davit', B2:D10"
    assert found["envelope"]["tip"]["case"] == "lift"
    # the number below the table is a row without a size
    code, _, err = call(capsys, "judge", "arm.xlsx")
    assert code == 2 and "arm.xlsx: sheet 'Davit': cell C12: not a size, got ''" in err


def test_a_table_is_pasted(monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
    def paste(content: bytes) -> None:
        monkeypatch.setattr("sys.stdin", io.TextIOWrapper(io.BytesIO(content)))

    Path("lift.csv").write_text(text_of([HEAD, *LIFT]))
    _, filed, _ = call(capsys, "judge", "lift.csv")
    paste(Path("lift.csv").read_bytes())
    code, out, err = call(capsys, "judge", "-")
    assert (code, err) == (0, "")
    assert out.replace("standard input", "lift").replace("Ladder: lift", "Ladder: lift.csv") == filed
    paste(Path("arm.xlsx").read_bytes())
    assert call(capsys, "judge", "-", "--range", "B2:D6")[0] == 0
    paste(b"")
    assert call(capsys, "judge", "-") == (2, "", "standard input: the file is empty; give a table\n")
    paste(b"h,u\n2,x\n1,3\n")
    assert call(capsys, "judge", "-")[2].startswith("standard input:2: column 'u': not a number, got 'x'")


@pytest.mark.slow  # draws the figures of two reports
def test_a_study_of_a_workbook_with_cases(capsys: pytest.CaptureFixture[str]) -> None:
    Path("davit.toml").write_text(STUDY)
    code, out, err = call(capsys, "run", "davit.toml")
    assert (code, err) == (1, "") and "Report: out/davit/report.html" in out
    folder = Path("out/davit")
    for case in ("lift", "swell-port"):
        for name in ("ladder.csv", "report.html", "findings.json"):
            assert (folder / case / name).exists()
    assert "sheet &#x27;Davit&#x27;, B2:D10" in (folder / "report.html").read_text()
    for part in (folder / "report.html").read_text().split('href="')[1:]:
        link = unquote(part.partition('"')[0])
        if not link.startswith("#"):
            assert (folder / link.partition("#")[0]).exists()
    shown = out.replace("Report: out/davit/report.html\n", "")
    assert call(capsys, "judge", "davit.toml") == (1, shown, "")
    # the folder has all it needs
    Path("arm.xlsx").unlink()
    again = call(capsys, "judge", "out/davit")[1]
    assert again == shown.replace("Ladder: arm.xlsx", "Ladder: out/davit/arm.xlsx")
    assert call(capsys, "judge", "out/davit/lift")[1].startswith("Davit arm: lift\n")


def test_what_a_study_says_of_its_table_is_checked(capsys: pytest.CaptureFixture[str]) -> None:
    Path("davit.toml").write_text(STUDY.replace('"Davit"\nrange', '"Davits"\nrange'))
    assert call(capsys, "judge", "davit.toml") == (
        2,
        "",
        "arm.xlsx: no sheet 'Davits'; did you mean 'Davit'?\n",
    )
    Path("davit.toml").write_text(STUDY.replace("range =", 'case = "Lode case"\nrange ='))
    code, _, err = call(capsys, "judge", "davit.toml")
    assert code == 2 and err == (
        "arm.xlsx: sheet 'Davit': no column 'Lode case'; did you mean 'Load case'?\n"
    )
    Path("davit.toml").write_text(f'{STUDY}[companion]\nfile = "other.csv"\n')
    Path("other.csv").write_text("h [mm],tip [mm]\n2,1.5\n1,1.75\n")
    code, _, err = call(capsys, "judge", "davit.toml")
    assert code == 2 and err == (
        "davit.toml:11: companion.file: other.csv has no load cases; "
        "the load cases lift, swell / port, as in [table]\n"
    )
    Path("other.csv").write_text(text_of([HEAD, *LIFT, *SWELL]))
    assert call(capsys, "judge", "davit.toml")[0] == 1


def test_options_of_tables_are_for_bare_tables(capsys: pytest.CaptureFixture[str]) -> None:
    Path("davit.toml").write_text(STUDY)
    for option in (
        ("--sheet", "Davit"),
        ("--range", "A1:B2"),
        ("--case-column", "x"),
        ("--decimal", "comma"),
    ):
        code, _, err = call(capsys, "judge", "davit.toml", *option)
        assert code == 2 and "are for bare tables; write them in the study" in err
