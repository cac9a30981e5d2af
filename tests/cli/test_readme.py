"""The examples of the README print what it shows: a change of table or output changes the README with it."""

import re
from pathlib import Path

import pytest
from xlsxwriter import Workbook

from convergence.cli.main import outcome

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"^```\w*\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)
SWELL = 0.22  # of the lift


def block(begin: str) -> str:
    """Return the one block that begins so."""
    (found,) = [text for text in BLOCKS if text.startswith(begin)]
    return found


def arguments(shown: str) -> list[str]:
    """Return the arguments of the command that a block begins with."""
    command = re.match(r"\$ meshassay ((?:.*\\\n)*.*)\n", shown)
    assert command is not None
    return [word.strip('"') for word in re.findall(r'"[^"]*"|[^\s\\]+', command[1])]


def is_printed(shown: str, printed: str) -> bool:
    """Return whether the lines shown are printed in this order, but for blanks; `...` stands for some."""
    lines = iter([" ".join(line.split()) for line in printed.splitlines()])
    for line in shown.splitlines():
        wanted = " ".join(line.split())
        if wanted.startswith(("$", "--kind", "...")) or not wanted:
            continue
        begun = wanted.removesuffix(" ...")
        if not any(one == wanted or (begun != wanted and one.startswith(begun)) for one in lines):
            return False
    return True


@pytest.fixture
def folder(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    return tmp_path


def lift() -> list[list[str]]:
    return [re.split(r",\s*", line) for line in block("h [mm], tip").splitlines()]


def test_a_table(folder, capsys) -> None:
    (folder / "arm.csv").write_text(block("h [mm], tip"), encoding="utf-8")
    shown = block("$ meshassay judge arm.csv")
    assert outcome(arguments(shown)) == 1
    assert is_printed(shown, capsys.readouterr().out)


def test_a_workbook_of_load_cases(folder, capsys) -> None:
    rows = [[float(cell) for cell in row] for row in lift()[1:]]
    with Workbook("arm.xlsx") as book:
        sheet = book.add_worksheet("Davit arm")
        sheet.write_row("A1", ["Ladder of the davit's arm"])
        sheet.write_row("A3", ["load case", "h", "tip deflection", "root peak"])
        sheet.write_row("A4", ["", "mm", "mm", "MPa"])
        for number, row in enumerate(rows):
            sheet.write_row(4 + number, 0, ["" if number else "lift", *row])
            small = [row[0], *(float(f"{SWELL * value:.5g}") for value in row[1:])]
            sheet.write_row(8 + number, 0, ["" if number else "swell", *small])
    shown = block("$ meshassay judge arm.xlsx")
    assert outcome(arguments(shown)) == 1
    assert is_printed(shown, capsys.readouterr().out)


def test_two_ladders(folder, capsys) -> None:
    (folder / "arm_a.csv").write_text(block("h [mm], tip"), encoding="utf-8")
    (folder / "arm_b.csv").write_text(block("h [mm], u_tip"), encoding="utf-8")
    shown = block("$ meshassay compare arm_a.csv")
    assert outcome(arguments(shown)) == 0
    assert is_printed(shown, capsys.readouterr().out)


def test_a_reaction_printout(folder, capsys) -> None:
    (folder / "reactions.csv").write_text(block("case, what,"), encoding="utf-8")
    shown = block("$ meshassay balance")
    assert outcome(arguments(shown)) == 1
    assert is_printed(shown, capsys.readouterr().out)


@pytest.mark.slow
def test_result_files(folder, capsys) -> None:
    files = [str(path) for path in sorted((ROOT / "studies" / "results").glob("foot-*.vtu"))]
    command = block("meshassay fields foot-*.vtu").split()
    assert outcome(["fields", *files, *command[3:]]) == 1
    assert is_printed(block("quantity           verdict   value "), capsys.readouterr().out)


@pytest.mark.slow
def test_a_study_of_result_files(capsys) -> None:
    assert outcome(["judge", str(ROOT / "studies" / "foot_results.toml")]) == 1
    assert is_printed(block("fillet_peak  refine"), capsys.readouterr().out)


@pytest.mark.slow
def test_a_mesh_refined_here(folder, capsys) -> None:
    assert outcome(["run", str(ROOT / "studies" / "foot_bracket.toml")]) == 1
    assert is_printed(block("quantity       verdict   value "), capsys.readouterr().out)


def test_the_check_finds_another_number() -> None:
    shown = block("$ meshassay judge arm.csv")
    printed = "\n".join(shown.splitlines()[2:])
    assert is_printed(shown, printed)
    assert not is_printed(shown, printed.replace("6.5320", "6.5321"))
    assert not is_printed("b\na", "a\nb")
