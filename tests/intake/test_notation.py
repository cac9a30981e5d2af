"""Numbers survive each way of writing them; what may be read in two ways is never guessed."""

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.errors import InputError
from convergence.intake._grid import Cell
from convergence.intake._notation import decimals, plain
from convergence.intake._raw_table import Place
from convergence.intake.table import read_table

# decimal sign, thousands separator, and the signs between cells that go with them
WAYS = [
    (".", "", (",", ";", "\t")),
    (".", ",", (";", "\t")),
    (".", "'", (",", ";", "\t")),
    (".", " ", (",", ";", "\t")),
    (",", "", (";", "\t")),
    (",", ".", (";", "\t")),
    (",", " ", (";", "\t")),
    (",", "\u00a0", (";", "\t")),
    (",", "\u202f", (";", "\t")),
    (",", "’", (";", "\t")),
]


def written(value: float, places: int, decimal: str, group: str) -> str:
    text = f"{value:,.{places}f}"
    return text.replace(",", "G").replace(".", decimal).replace("G", group)


def cells_of(*texts: str) -> dict[str, list[Cell]]:
    return {"u": [Cell(text) for text in texts]}


@pytest.mark.parametrize(
    ("text", "point", "comma"),
    [
        ("1234.5", "1234.5", None),
        ("1,234.5", "1234.5", None),
        ("1.234,5", None, "1234.5"),
        ("1 234,5", None, "1234.5"),
        ("1'234.5", "1234.5", None),
        ("1,234", "1234", "1.234"),
        ("1.234", "1.234", "1234"),
        ("0,234", None, "0.234"),
        ("12,34", None, "12.34"),
        ("1,234,567", "1234567", None),
        ("1234,567", None, "1234.567"),
        ("−3,5e-2", None, "-3.5e-2"),
        ("+.5D+03", "+.5D+03", None),
        ("12.5 %", "0.125", None),
        ("5%", "0.05", "0.05"),
        ("1,23,456.0", None, None),
        ("1.2.3", None, None),
        ("1,,2", None, None),
        ("٣", None, None),
        ("", None, None),
        (".", None, None),
        ("-", None, None),
        ("6.4 mm", None, None),
    ],
)
def test_what_a_text_is_in_each_notation(text: str, point: str | None, comma: str | None) -> None:
    assert (plain(text, "point"), plain(text, "comma")) == (point, comma)


@pytest.mark.parametrize(
    ("texts", "sign", "doubtful"),
    [
        (["1,234", "1,240"], "point", "1,234"),
        (["1,234", "0,5"], "comma", ""),
        (["1,234", "1,234.5"], "point", ""),
        (["1.234", "1.240"], "point", ""),  # the program's own notation
        (["1.234", "0,5"], "comma", ""),
        (["1234", "5e3", ""], "point", ""),
    ],
)
def test_a_column_is_read_by_all_its_cells(texts: list[str], sign: str, doubtful: str) -> None:
    assert decimals(cells_of(*texts), ()) == {"u": (sign, doubtful)}


def test_other_columns_decide_what_one_leaves_open() -> None:
    columns = {"u": [Cell("1,234")], "v": [Cell("0,5")]}
    assert decimals(columns, ())["u"] == ("comma", "")
    # two ways of writing in one file decide nothing
    assert decimals({**columns, "w": [Cell("0.5")]}, ())["u"] == ("point", "1,234")
    # numbers of a spreadsheet are no evidence for texts
    assert decimals({"u": [Cell("1,234"), Cell("0.5", stored=True)]}, ())["u"] == ("point", "1,234")


def test_a_sign_in_a_count_separates_thousands() -> None:
    columns = {"cells": [Cell("1.240"), Cell("19.720")], "u": [Cell("1,234")]}
    assert decimals(columns, ("cells",)) == {"cells": ("comma", ""), "u": ("comma", "")}


@settings(deadline=None)
@given(
    st.lists(st.integers(-(10**9), 10**9), min_size=2, max_size=5),
    st.integers(1, 6),
    st.sampled_from(WAYS),
    st.data(),
)
def test_numbers_survive_each_notation(
    tmp_path_factory: pytest.TempPathFactory,
    mantissas: list[int],
    places: int,
    way: tuple[str, str, tuple[str, ...]],
    data: st.DataObject,
) -> None:
    """A column of sizes such as 0,5 tells how all others are written; decimals to six places are exact."""
    decimal, group, separators = way
    separator = data.draw(st.sampled_from(separators))
    values = [float(f"{mantissa}e-{places}") for mantissa in mantissas]
    lines = [separator.join(("h", "u"))]
    for number, value in enumerate(values):
        cells = (written(number + 0.5, 1, decimal, group), written(value, places, decimal, group))
        lines.append(separator.join(cells))
    path = tmp_path_factory.getbasetemp() / "fuzz.csv"
    path.write_text("\n".join(lines), encoding="utf-8")
    ladder = read_table(path).ladders[""]
    assert sorted(zip(ladder.h, ladder.column("u"), strict=True)) == [
        (number + 0.5, value) for number, value in enumerate(values)
    ]


@settings(deadline=None)
@given(st.lists(st.integers(1000, 10**7), min_size=2, max_size=4), st.sampled_from(WAYS), st.integers(0, 4))
def test_a_number_is_right_or_refused(
    tmp_path_factory: pytest.TempPathFactory,
    mantissas: list[int],
    way: tuple[str, str, tuple[str, ...]],
    places: int,
) -> None:
    """Nothing but the column itself tells: either the fault says so, or the numbers are those written.

    Dots alone are decimal points unless another cell shows commas, so that columns of three decimals are
    readable: groups of dots alone are left out here.
    """
    decimal, group, _ = way
    values = [float(f"{mantissa}e-{places}") for mantissa in mantissas]
    texts = [written(value, places, decimal, group) for value in values]
    if group == "." and places == 0:
        return
    path = tmp_path_factory.getbasetemp() / "open.csv"
    lines = "".join(f"{2 * len(values) - number};{text}\n" for number, text in enumerate(texts))
    path.write_text(f"h;u\n{lines}", encoding="utf-8")
    try:
        assert list(read_table(path).ladders[""].column("u")) == values
    except InputError as error:
        assert len(error.faults) == 1 and " may be " in str(error)
        found = read_table(path, Place(decimal="point" if decimal == "." else "comma"))
        assert list(found.ladders[""].column("u")) == values


def test_a_doubtful_cell_is_named_with_both_readings(tmp_path: Path) -> None:
    path = tmp_path / "t.csv"
    path.write_text("h;u\n8;1,234\n4;1,240\n")
    with pytest.raises(InputError) as caught:
        read_table(path)
    assert str(caught.value) == (
        f"{path}:2: column 'u': may be 1234 or 1.234, got '1,234'; "
        "say --decimal point or --decimal comma (in a study decimal = ...), or write one clearly"
    )
    assert list(read_table(path, Place(decimal="comma")).ladders[""].column("u")) == [1.234, 1.24]
