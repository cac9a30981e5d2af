"""Workbooks written by independent libraries: the same numbers give the same ladders and findings."""

import datetime
import json
import re
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any
from zipfile import ZipFile

import openpyxl
import pytest
import xlsxwriter
import xlwt
from odf.opendocument import OpenDocumentSpreadsheet
from odf.style import Style, TableProperties
from odf.table import CoveredTableCell, Table, TableCell, TableRow
from odf.text import P

from convergence.cli import main
from convergence.cli._judging import Judged, judge_path
from convergence.cli._said import Said
from convergence.errors import InputError
from convergence.intake._raw_table import Place
from convergence.intake.table import Tables, read_table
from convergence.report.records import findings_object

Rows = Sequence[Sequence[Any]]
Sheets = dict[str, Rows]

ARM: Rows = [
    ["h [mm]", "tip deflection [mm]", "root peak [MPa]"],
    [8.0, 6.412, 88.4],
    [4.0, 6.498, 101.7],
    [2.0, 6.524, 109.2],
    [1.0, 6.532, 112.8],
]
OTHER: Rows = [["bolt", "torque"], ["M12", 79.0]]


def write_openpyxl(path: Path, sheets: Sheets) -> None:
    book = openpyxl.Workbook()
    del book["Sheet"]
    for name, rows in sheets.items():
        page = book.create_sheet(name)
        for row in rows:
            page.append(list(row))
    book.save(path)


def write_xlsxwriter(path: Path, sheets: Sheets) -> None:
    with xlsxwriter.Workbook(path) as book:
        for name, rows in sheets.items():
            page = book.add_worksheet(name)
            for number, row in enumerate(rows):
                page.write_row(number, 0, row)


def write_xlwt(path: Path, sheets: Sheets) -> None:
    book = xlwt.Workbook()
    for name, rows in sheets.items():
        page = book.add_sheet(name)
        for r, row in enumerate(rows):
            for c, value in enumerate(row):
                if value is not None:
                    page.write(r, c, value)
    book.save(str(path))


def ods_cell(value: Any) -> TableCell:
    if value is None:
        return TableCell()
    if isinstance(value, int | float):
        cell = TableCell(valuetype="float", value=repr(value))
    else:
        cell = TableCell(valuetype="string")
    cell.addElement(P(text=str(value)))
    return cell


def write_odfpy(path: Path, sheets: Sheets) -> None:
    book = OpenDocumentSpreadsheet()
    for name, rows in sheets.items():
        page = Table(name=name)
        for row in rows:
            line = TableRow()
            for value in row:
                line.addElement(ods_cell(value))
            page.addElement(line)
        # what spreadsheets add to fill the sheet
        page.addElement(TableRow(numberrowsrepeated="1048000"))
        book.spreadsheet.addElement(page)
    book.save(str(path))


WRITERS: dict[str, tuple[str, Callable[[Path, Sheets], None]]] = {
    "xlsx": ("arm.xlsx", write_openpyxl),
    "xlsx of another library": ("arm.xlsx", write_xlsxwriter),
    "xlsm": ("arm.xlsm", write_openpyxl),
    "xls": ("arm.xls", write_xlwt),
    "ods": ("arm.ods", write_odfpy),
}
KINDS = sorted(WRITERS)


def made(folder: Path, kind: str, sheets: Sheets) -> Path:
    name, write = WRITERS[kind]
    write(folder / name, sheets)
    return folder / name


def read(folder: Path, kind: str, sheets: Sheets, place: Place | None = None) -> Tables:
    return read_table(made(folder, kind, sheets), place)


def said(folder: Path, kind: str, sheets: Sheets, place: Place | None = None) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, kind, sheets, place)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def as_text(rows: Rows, separator: str, decimal: str) -> str:
    lines = []
    for row in rows:
        cells = [str(cell).replace(".", decimal) if isinstance(cell, float) else str(cell) for cell in row]
        lines.append(separator.join(cells))
    return "\n".join(lines) + "\n"


def without_source(text: str, path: Path) -> str:
    """Findings without the one line that names the table."""
    lines = text.splitlines()
    source = [line for line in lines if line.startswith('  "ladder": ')]
    assert len(source) == 1 and path.name in source[0]
    return "\n".join(line for line in lines if line not in source)


@pytest.fixture
def same_numbers(tmp_path: Path) -> list[Path]:
    """One table in every kind of workbook and of text."""
    paths = []
    for kind in KINDS:
        folder = tmp_path / kind.replace(" ", "-")
        folder.mkdir()
        paths.append(made(folder, kind, {"Davit": ARM, "Bolts": OTHER}))
    for name, separator, decimal in (("arm.csv", ",", "."), ("arm.txt", ";", ","), ("arm.tsv", "\t", ",")):
        (tmp_path / name).write_text(as_text(ARM, separator, decimal))
        paths.append(tmp_path / name)
    assert len(paths) == 8
    return paths


def test_the_same_numbers_give_identical_findings(same_numbers: list[Path]) -> None:
    """All that findings.json has, byte by byte, but for the line that names the file and the sheet."""
    found = []
    for path in same_numbers:
        judged = judge_path(path, Said({"root peak": "peak_stress"}, degree=1))
        assert isinstance(judged, Judged)
        text = json.dumps(findings_object(judged.findings), indent=2, ensure_ascii=False, allow_nan=False)
        found.append(without_source(text, path))
    assert len(set(found)) == 1 and "6.412" in found[0] and "101.7" in found[0]


@pytest.mark.slow  # draws the figures of three reports
def test_the_same_numbers_keep_identical_findings(same_numbers: list[Path], tmp_path: Path) -> None:
    """The file itself, of a text, an Excel workbook and an OpenDocument."""
    found = []
    for path in (one for one in same_numbers if one.name in ("arm.csv", "arm.xls", "arm.ods")):
        assert main.outcome(["judge", str(path), "--degree", "1", "--out", str(tmp_path / "out")]) == 1
        found.append(without_source((tmp_path / "out" / "findings.json").read_text(), path))
    assert len(found) == 3 and len(set(found)) == 1


@pytest.mark.parametrize("kind", KINDS)
def test_the_only_sheet_with_a_table_is_read(tmp_path: Path, kind: str) -> None:
    """Titles, blank rows, a row of units, a footnote and blank columns are not part of the table."""
    rows: Rows = [
        ["Davit arm, run 3", None, None, None],
        [],
        [None, "h", "tip", "peak"],
        [None, "mm", "mm", "MPa"],
        [None, 8, 6.412, 88.4],
        [],
        [None, 4, 6.498, "101,7"],
        [None, "by hand"],
    ]
    found = read(tmp_path, kind, {"Bolts": OTHER, "Empty": [], "Davit": rows})
    ladder = found.ladders[""]
    assert list(ladder.h) == [8.0, 4.0] and list(ladder.column("tip")) == [6.412, 6.498]
    assert list(ladder.column("peak")) == [88.4, 101.7]  # a number typed as text
    assert dict(found.units) == {"h": "mm", "tip": "mm", "peak": "MPa"}
    assert ladder.resolution == {"tip": 0.0005, "peak": 0.05}
    assert ladder.source == f"{tmp_path / WRITERS[kind][0]}: sheet 'Davit', B3:D7"
    assert ladder.remarks == ("row 8 has no number and is ignored",)


@pytest.mark.parametrize("kind", KINDS)
def test_a_sheet_and_a_range_are_named(tmp_path: Path, kind: str) -> None:
    two: Rows = [[*ARM[0], None, "h", "u"], *([*row, None, row[0], 2.0 * row[1]] for row in ARM[1:])]
    sheets = {"First": ARM, "Second": two}
    place = Place(sheet="second", range="$F$5:E1")
    found = read(tmp_path, kind, sheets, place).ladders[""]
    assert list(found.column("u")) == [2 * 6.412, 2 * 6.498, 2 * 6.524, 2 * 6.532]
    assert found.source.endswith("sheet 'Second', E1:F5")
    name = WRITERS[kind][0]
    assert said(tmp_path, kind, {"First": ARM, "Second": ARM}) == [
        f"{name}: 2 sheets hold a table; name one with --sheet: 'First', 'Second'"
    ]
    assert said(tmp_path, kind, sheets, Place(sheet="Frist")) == [
        f"{name}: no sheet 'Frist'; did you mean 'First'?"
    ]
    assert said(tmp_path, kind, sheets, Place(sheet="First", range="A3")) == [
        "range A3: not a range of cells; write e.g. A3:F9"
    ]
    assert said(tmp_path, kind, {"Bolts": OTHER, "Nuts": OTHER}) == [
        f"{name}: no sheet holds a table that is known; name one with --sheet: 'Bolts', 'Nuts'"
    ]
    assert said(tmp_path, kind, {"Bolts": OTHER}) == [
        f"{name}: sheet 'Bolts': no column of sizes; "
        "name one of the columns h, cells, nodes or dofs; found: bolt, torque"
    ]


@pytest.mark.parametrize("kind", KINDS)
def test_every_bad_cell_is_named(tmp_path: Path, kind: str) -> None:
    rows: Rows = [["h", "u", "v"], [0, "x", 1.5], [None, 2.5, "1e999"], [1, 2.5, 3.5, 4.5]]
    where = f"{WRITERS[kind][0]}: sheet 'Davit': cell"
    right = "write a number such as 1234.5 or 1.2e3, or leave the cell empty"
    assert said(tmp_path, kind, {"Davit": rows}) == [
        f"{where} D4: a column without a name; name every column"
    ]
    assert said(tmp_path, kind, {"Davit": [row[:3] for row in rows]}) == [
        f"{where} A2: not a size, got '0'; give a number above 0",
        f"{where} B2: not a number, got 'x'; {right}",
        f"{where} A3: not a size, got ''; give a number above 0",
        f"{where} C3: not a number, got '1e999'; {right}",
    ]


def test_errors_of_formulas_are_named_in_each_kind(tmp_path: Path) -> None:
    """As the programs store them: Excel a type of cell of its own, OpenDocument a mark at the cell."""
    book = openpyxl.Workbook()
    page = book.active
    assert page is not None
    for row in (["h", "u"], [2, 1.5], [1, "#DIV/0!"]):
        page.append(row)
    page["B3"].data_type = "e"
    book.save(tmp_path / "a.xlsx")
    old = xlwt.Workbook()
    sheet = old.add_sheet("Sheet")
    for r, row in enumerate([["h", "u"], [2, 1.5], [1]]):
        for c, value in enumerate(row):
            sheet.write(r, c, value)
    sheet.row(2).set_cell_error(1, "#DIV/0!")
    old.save(str(tmp_path / "a.xls"))
    write_odfpy(tmp_path / "a.ods", {"Sheet": [["h", "u"], [2, 1.5], [1, "#DIV/0!"]]})
    space = "urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0"
    shown = '<table:table-cell office:value-type="string"><text:p>#DIV/0!'
    marks = {
        "a.ods": 'table:formula="of:=1/0"',
        "b.ods": f'xmlns:calcext="{space}" calcext:value-type="error"',
    }
    with ZipFile(tmp_path / "a.ods") as archive:
        parts = {name: archive.read(name).decode("utf-8", "replace") for name in archive.namelist()}
    assert parts["content.xml"].count(shown) == 1
    for name, mark in marks.items():
        marked = shown.replace("<table:table-cell", f"<table:table-cell {mark}")
        with ZipFile(tmp_path / name, "w") as archive:
            for part, text in parts.items():
                archive.writestr(part, text.replace(shown, marked))
    for name in ("a.xlsx", "a.xls", "a.ods", "b.ods"):
        with pytest.raises(InputError) as caught:
            read_table(tmp_path / name)
        assert str(caught.value) == (
            f"{tmp_path / name}: sheet 'Sheet': cell B3: an error in a formula, got '#DIV/0!'; "
            "give the number itself"
        )


def test_formulas_count_with_their_stored_values(tmp_path: Path) -> None:
    rows: Rows = [["h", "u", "v"], [2, 1.5, None], [1, 1.75, None]]
    with xlsxwriter.Workbook(tmp_path / "a.xlsx") as book:
        page = book.add_worksheet("Davit")
        for number, row in enumerate(rows):
            page.write_row(number, 0, row)
        page.write_formula("C2", "=B2*2", None, 3.0)
        page.write_formula("C3", '=IF(B3>2,B3,"")', None, "")
    column = read_table(tmp_path / "a.xlsx").ladders[""].column("v")
    assert column[0] == 3.0 and column[1] != column[1]  # an empty text is no value
    write_openpyxl(tmp_path / "b.xlsx", {"Davit": [["h", "u"], [2, "=1+0.5"], [1, "=1+0.75"]]})
    with pytest.raises(InputError) as caught:
        read_table(tmp_path / "b.xlsx")
    assert [str(fault).partition("Davit")[2] for fault in caught.value.faults] == [
        "': cell B2: a formula without a stored value, got '=1+0.5'; give the number itself",
        "': cell B3: a formula without a stored value, got '=1+0.75'; give the number itself",
    ]


def test_percent_and_dates(tmp_path: Path) -> None:
    """A cell shown as 5 % holds 0.05; a date where numbers stand is most often 1.5 misread by the program."""
    with xlsxwriter.Workbook(tmp_path / "a.xlsx") as book:
        page = book.add_worksheet("Davit")
        percent, day = book.add_format({"num_format": "0.0%"}), book.add_format({"num_format": "d mmm yyyy"})
        page.write_row(0, 0, ["h", "strain", "run on"])
        for row, (h, strain) in enumerate([(2, 0.0512), (1, 0.0523)], 1):
            page.write_number(row, 0, h)
            page.write_number(row, 1, strain, percent)
            page.write_datetime(row, 2, datetime.datetime(2024, 5, row), day)
    found = read_table(tmp_path / "a.xlsx").ladders[""]
    assert list(found.column("strain")) == [0.0512, 0.0523]
    assert found.remarks == ("column 'run on' has no number and is ignored",)
    (tmp_path / "a.csv").write_text("h,strain\n2,5.12 %\n1,5.23%\n")
    text = read_table(tmp_path / "a.csv").ladders[""]
    assert text.levels == found.levels and text.resolution == found.resolution
    write_openpyxl(tmp_path / "b.xlsx", {"Davit": [["h", "u"], [2, 1.5], [1, datetime.date(2024, 5, 1)]]})
    with pytest.raises(InputError) as caught:
        read_table(tmp_path / "b.xlsx")
    assert re.search(r"cell B3: not a number, got '2024-05-01", str(caught.value))


def test_merged_repeated_and_hidden_in_an_open_document(tmp_path: Path) -> None:
    book = OpenDocumentSpreadsheet()
    style = Style(name="hidden", family="table")
    style.addElement(TableProperties(display="false"))
    book.automaticstyles.addElement(style)
    for name, look in (("Old", style), ("Davit", None)):
        page = Table(name=name, stylename=look) if look else Table(name=name)
        title = TableRow()
        title.addElement(TableCell(valuetype="string", numbercolumnsspanned="3"))
        title.childNodes[0].addElement(P(text="Davit arm"))
        title.addElement(CoveredTableCell(numbercolumnsrepeated="2"))
        page.addElement(title)
        for row in (["h", "u", "v"], [2, 1.5, 1.5]):
            line = TableRow()
            for value in row[:1] if row[0] == 2 else row:
                line.addElement(ods_cell(value))
            if row[0] == 2:
                line.addElement(TableCell(valuetype="float", value="1.5", numbercolumnsrepeated="2"))
            page.addElement(line)
        book.spreadsheet.addElement(page)
    book.save(str(tmp_path / "a.ods"))
    ladder = read_table(tmp_path / "a.ods").ladders[""]
    assert dict(ladder.levels[0].values) == {"u": 1.5, "v": 1.5} and "'Davit', A2:C3" in ladder.source
    assert "'Old', A2:C3" in read_table(tmp_path / "a.ods", Place(sheet="Old")).ladders[""].source


def test_hidden_sheets_are_read_only_by_name(tmp_path: Path) -> None:
    book = openpyxl.Workbook()
    book["Sheet"].append(["Davit"])
    old = xlwt.Workbook()
    old.add_sheet("Sheet").write(0, 0, "Davit")
    hidden, second = book.create_sheet("Old"), old.add_sheet("Old")
    hidden.sheet_state, second.visibility = "hidden", 1
    for r, row in enumerate(ARM):
        hidden.append(list(row))
        for c, value in enumerate(row):
            second.write(r, c, value)
    book.save(tmp_path / "a.xlsx")
    old.save(str(tmp_path / "a.xls"))
    for name in ("a.xlsx", "a.xls"):
        with pytest.raises(InputError, match="no rows of numbers"):
            read_table(tmp_path / name)
        assert len(read_table(tmp_path / name, Place(sheet="Old")).ladders[""].levels) == 4
