"""A table of forces as people have it: columns, units, cases, printed digits, and what is wrong with it."""

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from convergence.errors import InputError
from convergence.intake._raw_table import Place
from convergence.intake.force_table import read_force_table
from convergence.statics import Printout, balances

DAVIT = """what, name, fx [kN], fy [kN], x [m], y [m]
load, hook, , -12.5, 3.0, 4.0
load, arm, , -2.0, 1.2, 3.0
reaction, guide, -19.95, , 0, 2.0
reaction, foot, 19.95, 14.5, 0, 0
"""


def read(folder: Path, text: str, name: str = "forces.csv") -> Printout:
    (folder / name).write_text(text)
    return read_force_table(folder / name)


def faults(folder: Path, text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, text)
    return [str(fault).removeprefix(f"{folder}/") for fault in caught.value.faults]


def test_rows_columns_and_units(tmp_path: Path) -> None:
    found = read(tmp_path, DAVIT)
    assert (found.force_unit, found.length_unit, found.dimension) == ("kN", "m", 2)
    assert found.components == ("Fx", "Fy", "Mz") and found.remarks == ()
    rows = found.cases[""]
    assert rows.is_load.tolist() == [True, True, False, False] and rows.names[3] == "foot"
    assert rows.force[:, 3].tolist() == [19.95, 14.5, 0.0] and rows.point[:, 0].tolist() == [3.0, 4.0, 0.0]
    assert balances(found)[""].passed is True


def test_other_names_of_columns_and_any_order(tmp_path: Path) -> None:
    text = "Force Y (N);Type;Node;x (mm);Load case;M (Nmm)\n-10;Applied;7;2;lift;0\n10;reaction;9;0;lift;20\n"
    found = read(tmp_path, text)
    assert list(found.cases) == ["lift"] and found.cases["lift"].names == ("7", "9")
    assert balances(found)["lift"].passed is True


@pytest.mark.parametrize(
    ("force", "length", "moment", "factors"),
    [("N", "mm", "N mm", (1e3, 1e3, 1e6)), ("N", "m", "kNm", (1e3, 1, 1)),
     ("MN", "cm", "N·m", (1e-3, 100, 1e3)),
     ("lbf", "in", "lbf-ft", (1 / 4.4482216152605e-3, 1 / 0.0254, 1 / (4.4482216152605e-3 * 0.3048)))],
)  # fmt: skip
def test_units_that_differ_are_converted(
    tmp_path: Path, force: str, length: str, moment: str, factors: tuple[float, float, float]
) -> None:
    """A cantilever of 3 m under 12.5 kN, its moment of 37.5 kNm; the foot pound is 0.3048 m by 4.448 N."""
    header = f"what,fx [kN],fy [{force}],m [{moment}],x [m],y [{length}]\n"
    load, arm, turning = (value * factor for value, factor in zip((12.5, 4.0, 37.5), factors, strict=True))
    found = read(tmp_path, f"{header}load,,{-load!r},,3,{arm!r}\nreaction,0,{load!r},{turning!r},0,0\n")
    assert (found.force_unit, found.length_unit) == ("kN", "m")
    rows = found.cases[""]
    assert rows.force[1] == pytest.approx([-12.5, 12.5]) and rows.point[1, 0] == pytest.approx(4.0)
    assert rows.moment[2, 1] == pytest.approx(37.5) and balances(found)[""].passed is True


def test_moments_are_not_balanced_without_points(tmp_path: Path) -> None:
    found = read(tmp_path, "what,fx,fy,fz\nload,1,2,-3\nreaction,-1,-2,3\n")
    assert found.components == ("Fx", "Fy", "Fz")
    assert found.remarks == ("no row has a point (x, y): moments are not balanced",)
    assert balances(found)[""].passed is True


def test_load_cases_and_what_they_lack(tmp_path: Path) -> None:
    text = "what,case,fy,x\nload,lift,-1,0\nreaction,,1,0\nreaction,heel,1,0\nreaction,heel,-1,0\n"
    found = read(tmp_path, text)
    assert {case: len(rows.names) for case, rows in found.cases.items()} == {"lift": 2, "heel": 2}
    assert found.remarks == ("case 'heel' lists no load",)


def test_a_workbook_gives_the_same_rows(tmp_path: Path) -> None:
    openpyxl = pytest.importorskip("openpyxl")
    book = openpyxl.Workbook()
    for line in DAVIT.splitlines():
        cells = [cell.strip() for cell in line.split(",")]
        book.active.append(
            [float(c) if c.strip("-.").replace(".", "").isdigit() else c or None for c in cells]
        )
    book.save(tmp_path / "forces.xlsx")
    text, sheet = read(tmp_path, DAVIT), read_force_table(tmp_path / "forces.xlsx", Place(sheet="Sheet"))
    for name in ("force", "moment", "point", "is_load"):
        assert np.array_equal(getattr(text.cases[""], name), getattr(sheet.cases[""], name))
    assert sheet.source.endswith("forces.xlsx: sheet 'Sheet', A1:F5")


def test_all_faults_of_a_header_are_named_at_once(tmp_path: Path) -> None:
    assert faults(tmp_path, "what,fx [kN],fy,m [kN],x [m],y [kg]\nload,1,2,3,4,5\n") == [
        "forces.csv: column 'fy': no unit, though other columns have one; write e.g. fy [N]",
        "forces.csv: column 'm': not a unit of a moment, got 'kN'; did you mean 'kN m'?",
        "forces.csv: column 'y': not a unit of a length, got 'kg'; known: cm, ft, in, m, mm",
    ]
    assert faults(tmp_path, "name,load,x\na,1,2\n") == [
        "forces.csv: no column says what a row is; add a column 'what' with load or reaction in each row;"
        " found: name, x, load",
        "forces.csv: no column of a force or a moment; name the columns fx, fy, fz, mx, my, mz; found: name,"
        " x, load",
    ]
    assert faults(tmp_path, "what,fx,force x\nload,1,2\n") == [
        "forces.csv: the columns 'fx' and 'force x' say the same; keep one of them"
    ]


def test_all_faults_of_cells_are_named_at_once(tmp_path: Path) -> None:
    assert faults(tmp_path, "what,fx,x,y\nlode,1,0,0\nload,abc,0,0\nload,5,,1\nload,NaN,0,0\n") == [
        "forces.csv:2: column 'what': neither load nor reaction, got 'lode'; write load or reaction",
        "forces.csv:3: column 'fx': not a number, got 'abc'; write a number such as 1234.5 or 1.2e3, or leave"
        " the cell empty for zero",
        "forces.csv:5: column 'fx': not a number, got 'nan'; write a number such as 1234.5 or 1.2e3, or leave"
        " the cell empty for zero",
        "forces.csv:4: column 'x': a force without its point; give all its coordinates",
    ]


@pytest.mark.parametrize(
    ("cells", "half"),
    [
        (("1250", "1187.25"), (0.005, 0.005)),  # a spreadsheet drops the zeros of 1250.00
        (("1.250E+03", "3.1E+01"), (0.5, 0.5)),  # four digits in the longest: 3.1E+01 may be 3.1000E+01
        (("1235", "12.35"), (0.5, 0.005)),  # four digits each
        (("", "12"), (0.0, 0.5)),  # an empty cell is zero
    ],
)
def test_how_far_rounding_may_have_moved_a_cell(
    tmp_path: Path, cells: tuple[str, str], half: tuple[float, float]
) -> None:
    found = read(tmp_path, f"what,fx,x\nload,{cells[0]},1\nreaction,{cells[1]},1\n")
    assert found.cases[""].force_rounding[0] == pytest.approx(half)


sizes = st.floats(0.01, 1e5).flatmap(lambda x: st.sampled_from([x, -x]))


@given(
    st.lists(st.tuples(sizes, sizes, st.integers(-40, 40), st.integers(-40, 40)), min_size=1, max_size=5),
    st.sampled_from([".0f", ".2f", ".3e", ".4g", ".6g"]),
)
@settings(max_examples=120, deadline=None)
def test_a_balanced_set_that_was_rounded_is_never_called_out_of_balance(
    tmp_path_factory: pytest.TempPathFactory, loads: list[tuple[float, float, int, int]], digits: str
) -> None:
    """Rounding to printed digits moves every number by half a unit at most; dropped zeros move it less."""
    total = [sum(load[k] for load in loads) for k in (0, 1)]
    turning = sum(x * fy - y * fx for fx, fy, x, y in loads)
    lines = [f"load,{fx:{digits}},{fy:{digits}},0,{x},{y}" for fx, fy, x, y in loads]
    lines.append(f"reaction,{-total[0]:{digits}},{-total[1]:{digits}},{-turning:{digits}},0,0")
    path = tmp_path_factory.mktemp("rounded") / "forces.csv"
    path.write_text("what,fx,fy,m,x,y\n" + "\n".join(lines) + "\n")
    (found,) = balances(read_force_table(path), tolerance=1e-12).values()
    assert found.passed is not False, found.components
