"""A bare table becomes a ladder; every fault of it is named by line and column."""

import math
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.errors import InputError
from convergence.intake._cells import number, resolution, split_unit
from convergence.intake.table import read_table, table
from convergence.results import Ladder

GOOD = """# the davit's arm, by hand

h [mm], deflection [mm], "peak stress (MPa)", note
2.0,    1.950,           130.0,               coarse
# finest
0.5,    1.990,           ,                    fine
1.0,    1.980,           NaN,                 medium
1.0,    1.980,           NaN,                 medium
"""


def write(folder: Path, text: str | bytes) -> Path:
    path = folder / "t.csv"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


def one_ladder(path: Path, dimension: int = 2) -> tuple[Ladder, dict[str, str]]:
    """The ladder of a table without load cases, and its units."""
    found = read_table(path, dimension=dimension)
    assert list(found.ladders) == [""] and found.case_column == ""
    return found.ladders[""], dict(found.units)


def said(folder: Path, text: str | bytes, size: str | None = None, case: str | None = None) -> list[str]:
    path = write(folder, text)
    with pytest.raises(InputError) as caught:
        read_table(path, size=size, case=case)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def test_a_table_is_a_ladder_from_coarse_to_fine(tmp_path: Path) -> None:
    path = write(tmp_path, GOOD)
    ladder, units = one_ladder(path)
    assert list(ladder.h) == [2.0, 1.0, 0.5]
    assert list(ladder.column("deflection")) == [1.95, 1.98, 1.99]
    stress = ladder.column("peak stress")
    assert stress[0] == 130.0 and math.isnan(stress[1]) and math.isnan(stress[2])
    assert units == {"h": "mm", "deflection": "mm", "peak stress": "MPa"}
    # printed to 0.001 and to 0.1
    assert ladder.resolution == {"deflection": 0.0005, "peak stress": 0.05}
    assert ladder.source == str(path)
    assert ladder.remarks == (
        "column 'note' has no number and is ignored",
        "rows that repeat another exactly are dropped: 1",
    )
    assert [(level.cells, level.dofs, math.isnan(level.seconds)) for level in ladder.levels] == [
        (0, 0, True)
    ] * 3


@pytest.mark.parametrize("separator", [",", ";", "\t"])
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_separators_line_ends_and_byte_order_mark(tmp_path: Path, separator: str, end: str) -> None:
    text = "H,u\n1,2\n0.5,3\n".replace(",", separator).replace("\n", end)
    ladder, _ = one_ladder(write(tmp_path, b"\xef\xbb\xbf" + text.encode()))
    assert list(ladder.h) == [1.0, 0.5] and list(ladder.column("u")) == [2.0, 3.0]


@pytest.mark.parametrize("name", ["cells", "Nodes", "DOFS"])
@pytest.mark.parametrize("dimension", [2, 3])
def test_sizes_follow_from_counts(tmp_path: Path, name: str, dimension: int) -> None:
    ladder, _ = one_ladder(write(tmp_path, f"{name},u\n64,1\n4096,2\n"), dimension=dimension)
    # (1/N)^(1/d): 64 = 8^2 = 4^3, 4096 = 64^2 = 16^3; a power in doubles is exact to a few last places
    expected = [1 / 8, 1 / 64] if dimension == 2 else [1 / 4, 1 / 16]
    assert list(ladder.h) == pytest.approx(expected, rel=1e-15)


def test_h_goes_before_counts_and_costs_are_no_quantities(tmp_path: Path) -> None:
    ladder, _ = one_ladder(
        write(tmp_path, "cells,h,dofs,seconds,Memory,u\n10,1,30,.5,90,7\n40,.5,100,2,,8\n")
    )
    assert [(lv.h, lv.cells, lv.dofs, lv.seconds) for lv in ladder.levels] == [
        (1, 10, 30, 0.5),
        (0.5, 40, 100, 2),
    ]
    assert ladder.levels[0].memory == 90.0 and math.isnan(ladder.levels[1].memory)
    assert [set(level.values) for level in ladder.levels] == [{"u"}, {"u"}]


def test_the_column_of_sizes_can_be_named(tmp_path: Path) -> None:
    path = write(tmp_path, "Edge,cells,u\n1.0,10,7\n0.7,20,8\n")
    found = table(file=str(path), size="edge")
    assert list(found.ladders[""].h) == [1.0, 0.7] and found.units == {"Edge": "", "u": ""}


def test_equal_sizes_with_different_values_stay(tmp_path: Path) -> None:
    ladder, _ = one_ladder(write(tmp_path, "h,u\n1,2\n1,3\n"))
    assert list(ladder.h) == [1.0, 1.0] and list(ladder.column("u")) == [2.0, 3.0]


def test_blank_columns_of_a_spreadsheet_are_dropped(tmp_path: Path) -> None:
    ladder, units = one_ladder(write(tmp_path, "h,,u,,\n1,,2,,\n0.5,,3,,\n,,,,\n"))
    assert list(units) == ["h", "u"] and len(ladder.levels) == 2 and ladder.remarks == ()


@pytest.mark.parametrize(
    ("text", "messages"),
    [
        ("", ["t.csv: the file is empty; give the path of a table (.csv, .xlsx, .ods)"]),
        ("\n \n", ["t.csv: the file is empty; give a table"]),
        (
            b"h,u\n1,\x00\x8d2\n",
            [
                "t.csv: neither a text nor a workbook; "
                "give a table as text (.csv, .txt) or a workbook (.xlsx, .xls, .ods)"
            ],
        ),
        (
            "<html><table><tr><td>h</td></tr></table>",
            [
                "t.csv: a page of HTML or XML, not a table; "
                "open it in a spreadsheet and save it as .xlsx, .ods or .csv"
            ],
        ),
        ("h,u\n", ["t.csv: no rows of numbers; give a header and one row for each mesh"]),
        ("1,2\n3,4\n", ["t.csv:1: no header; the first row names the columns, e.g. h,deflection"]),
        (
            "mesh,u\n1,2\n",
            ["t.csv: no column of sizes; name one of the columns h, cells, nodes or dofs; found: mesh, u"],
        ),
        ("h,cells\n1,2\n", ["t.csv: no column of a quantity; add a column of numbers beside the sizes"]),
        (
            "h,u\n1,nan\n",
            [
                "t.csv: no column of a quantity; "
                "add a column of numbers beside the sizes ('u' has none, 'nan' for one)"
            ],
        ),
        (
            "h,u,U\n1,2,3\n",
            ["t.csv:1: two columns of one name, got 'U'; give each column its own"],
        ),
        ("h,u,\n1,2,3\n", ["t.csv:1: a column without a name; name every column"]),
        (
            "h,u\n\n1,2\n3\n4,5,6\n",
            [
                "t.csv:4: a row of 1 cells; the header has 2",
                "t.csv:5: a row of 3 cells; the header has 2; "
                "decimal commas need another separator, such as ;",
            ],
        ),
        ('h,u\n1,"2\n', ["t.csv:3: not a table (unexpected end of data); separate the cells by commas"]),
        (
            "h;u\n1;2.5\n0;3\n;4\n-1;x\n1e999;inf\n",
            [
                "t.csv:3: column 'h': not a size, got '0'; give a number above 0",
                "t.csv:4: column 'h': not a size, got ''; give a number above 0",
                "t.csv:5: column 'h': not a size, got '-1'; give a number above 0",
                "t.csv:5: column 'u': not a number, got 'x'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
                "t.csv:6: column 'h': not a number, got '1e999'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
                "t.csv:6: column 'u': not a number, got 'inf'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
            ],
        ),
        (
            "cells,u\n10.5,1\n1e3,2\n",
            ["t.csv:2: column 'cells': not a count, got '10.5'; give a whole number above 0"],
        ),
    ],
)
def test_bad_tables_are_named(tmp_path: Path, text: str | bytes, messages: list[str]) -> None:
    assert said(tmp_path, text) == messages


def test_a_column_that_is_not_there_is_named(tmp_path: Path) -> None:
    assert said(tmp_path, "h,u\n1,2\n", size="edge") == [
        "t.csv: no column 'edge'; name one of the columns h, cells, nodes or dofs; found: h, u"
    ]


@pytest.mark.parametrize(
    ("cells", "expected"),
    [
        (["1.234", "1.230"], 0.0005),
        (["1.5", "1.523"], 0.0005),  # a spreadsheet drops trailing zeros
        (["9.998", "10.02"], 0.005),  # four digits each
        (["99.98", "100.02"], 0.005),  # two decimals each
        (["1200", "900"], 0.5),
        (["1.50e3", "1.49E3"], 5.0),
        (["1.50D+03"], 5.0),
        (["0.00", "0.00"], 0.005),
        (["-0.012", "0.011"], 0.0005),
    ],
)
def test_resolution_is_half_the_last_printed_digit(cells: list[str], expected: float) -> None:
    assert resolution(cells) == expected


@pytest.mark.parametrize("text", ["1_000", "0x1f", "1,5", "٣", "1.2.3", "--1", "e5", ".", "1e", "infinity"])
def test_what_is_no_number(text: str) -> None:
    assert number(text) is None


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_every_printed_double_is_a_number(value: float) -> None:
    assert number(repr(value)) == value


def test_units_in_brackets() -> None:
    assert split_unit("deflection [mm]") == ("deflection", "mm")
    assert split_unit("stress(MPa)") == ("stress", "MPa")
    assert split_unit("k [N/mm]") == ("k", "N/mm")
    assert split_unit("u(0)") == ("u(0)", "")
    assert split_unit("[mm]") == ("[mm]", "")


@settings(deadline=None, max_examples=200)
@given(st.text(alphabet='h,;u\t1234567890.\n"[]()#e-nan ', max_size=80))
def test_no_text_breaks_the_reader(tmp_path_factory: pytest.TempPathFactory, text: str) -> None:
    path = write(tmp_path_factory.getbasetemp(), text)
    try:
        found = read_table(path)
    except InputError:
        return
    assert found.ladders
    for ladder in found.ladders.values():
        assert all(level.h > 0 for level in ladder.levels) and ladder.levels
