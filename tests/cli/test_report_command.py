"""`meshassay report`: the pages of a run in three forms, the same bytes for the same folder and date."""

import pytest

from convergence.cli.main import outcome

STUDY = """title = "Pin of the quayside davit"

[table]
file = "pin.csv"

[quantities.sag]
kind = "displacement"
degree = 2
relative_tolerance = 0.05

[record]
checker = "initials"
"""
TABLE = "h [mm],sag [mm]\n8,1.0\n4,1.1\n2,1.125\n1,1.131\n"


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "pin.toml").write_text(STUDY, encoding="utf-8")
    (tmp_path / "pin.csv").write_text(TABLE, encoding="utf-8")
    assert outcome(["run", str(tmp_path / "pin.toml"), "--out", str(tmp_path / "out")]) == 0
    return tmp_path / "out"


def test_three_forms_twice(folder, capsys) -> None:
    command = ["report", str(folder), "--date", "2031-05-02"]
    assert outcome(command) == 0
    forms = [folder / f"report.{form}" for form in ("html", "pdf", "docx")]
    assert [str(form) in capsys.readouterr().out or form.is_file() for form in forms] == [True] * 3
    before = [form.read_bytes() for form in forms]
    assert outcome(command) == 0
    assert [form.read_bytes() for form in forms] == before
    page = before[0].decode()
    assert "2031-05-02" in page and "SHA-256 of pin.csv" in page and "SHA-256 of the study" in page
    assert "<td>initials</td>" in page


def test_only_the_forms_asked_for(folder) -> None:
    elsewhere = folder.with_name("pages")
    assert outcome(["report", str(folder), "--as", "pdf", "--out", str(elsewhere)]) == 0
    assert sorted(path.suffix for path in elsewhere.glob("report.*")) == [".pdf"]


@pytest.mark.parametrize(
    ("options", "said"),
    [
        (["--as", "odt"], "--as: unknown form, got 'odt'"),
        (["--as", ""], "--as: unknown form, got 'nothing'"),
        (["--date", "2.5.2031"], "--date: not a date, got '2.5.2031'"),
        (["--as", "pdf", "--template", "x.docx"], "--template: a template without docx"),
        (["--template", "missing.docx"], "missing.docx: not a Word document"),
    ],
)
def test_what_cannot_be_done_is_said(folder, capsys, options: list[str], said: str) -> None:
    capsys.readouterr()
    assert outcome(["report", str(folder), *options]) == 2
    assert said in capsys.readouterr().err


def test_a_key_that_is_none_of_the_record(tmp_path, capsys) -> None:
    (tmp_path / "pin.csv").write_text(TABLE, encoding="utf-8")
    (tmp_path / "pin.toml").write_text(STUDY.replace("checker", "cheker"), encoding="utf-8")
    assert outcome(["judge", str(tmp_path / "pin.toml")]) == 2
    assert "record.cheker: unknown key; did you mean 'checker'?" in capsys.readouterr().err


def test_a_bare_table_in_other_forms(tmp_path, capsys) -> None:
    (tmp_path / "pin.csv").write_text(TABLE, encoding="utf-8")
    outcome(["judge", str(tmp_path / "pin.csv"), "--out", str(tmp_path / "out"), "--as", "docx,pdf"])
    assert sorted(path.suffix for path in (tmp_path / "out").glob("report.*")) == [".docx", ".pdf"]
    assert outcome(["judge", str(tmp_path / "pin.csv"), "--as", "odt"]) == 2
    assert "--as: unknown form, got 'odt'" in capsys.readouterr().err
