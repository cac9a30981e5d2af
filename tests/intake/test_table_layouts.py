"""Tables as people have them: titles, units, comments, several load cases, repeated headers."""

from pathlib import Path

import pytest

from convergence.errors import InputError
from convergence.intake.table import Tables, read_table

CASES = """Load case; h [mm]; tip [mm]
lift; 8; 6,412
; 4; 6,5
swell, port; 8; 1,4
Lift; 2; 6,524
swell, port; 4; 1,428
"""


def read(folder: Path, text: str, size: str | None = None, case: str | None = None) -> Tables:
    path = folder / "t.csv"
    path.write_bytes(text.encode())
    return read_table(path, size=size, case=case)


def said(folder: Path, text: str, case: str | None = None) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, text, case=case)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


@pytest.mark.parametrize(
    "text",
    [
        "Davit arm, run 3\n\nh [mm];u [mm]\n2;1,5\n1;1,75\n",
        "Davit arm, run 3,,\n,,\nh,u,\nmm,mm,\n2,1.5,\n1,1.75,\n",
        "h\tu\n[mm]\t[mm]\n2\t1.5\n\n# finest\n1\t1.75\nread off the screen\t\n",
        "Davit; arm, run 3\nh [mm], u [mm]\n2, 1.5\n1, 1.75\n",
        "h [mm]  u [mm]\n2       1.5\n1       1.75\n",
        "  h [mm] u [mm]\n  2 1.5\n  1 1.75\n",
        "# h u\n# (mm) (mm)\n2.0e+00 1.50e+00\n1.0e+00 1.75e+00\n",
        "Run;3\nElement size;8\n\nh [mm];u [mm]\n2;1,5\n1;1,75\n",
        "Element size; U\nmm; mm\n2; 1,5\n1; 1,75\n",
    ],
)
def test_the_same_table_in_many_layouts(tmp_path: Path, text: str) -> None:
    found = read(tmp_path, text)
    ladder = found.ladders[""]
    assert [(level.h, *level.values.values()) for level in ladder.levels] == [(2.0, 1.5), (1.0, 1.75)]
    assert set(found.units.values()) == {"mm"} and ladder.h_unit == "mm"


def test_counts_go_by_several_names(tmp_path: Path) -> None:
    found = read(tmp_path, "Elements;Degrees of freedom;u\n1.240;2.610;1,234\n4.890;10.030;1,240\n")
    levels = found.ladders[""].levels
    assert [(level.cells, level.dofs, level.values["u"]) for level in levels] == [
        (1240, 2610, 1.234),
        (4890, 10030, 1.24),
    ]
    assert dict(found.units) == {"Elements": "", "u": ""}


def test_each_case_is_a_ladder(tmp_path: Path) -> None:
    """An empty cell means the case above; capitals make no other case; a comma in a name is not a number."""
    found = read(tmp_path, CASES)
    assert found.case_column == "Load case" and list(found.ladders) == ["lift", "swell, port"]
    lift, swell = found.ladders.values()
    assert lift.column("tip").tolist() == [6.412, 6.5, 6.524] and lift.h.tolist() == [8.0, 4.0, 2.0]
    assert swell.column("tip").tolist() == [1.4, 1.428]
    assert found.meaning() == {"lift": "Load case = lift", "swell, port": "Load case = swell, port"}
    assert list(read(tmp_path, CASES.replace("Load case", "wind"), case="Wind").ladders) == list(
        found.ladders
    )


@pytest.mark.parametrize("name", ["case", "Case", "load_case", "LC", "Loadcase"])
def test_the_column_of_cases_is_known_by_its_name(tmp_path: Path, name: str) -> None:
    found = read(tmp_path, f"{name},h,u\n1,2,5\n1,1,6\n2,2,7\n2,1,8\n")
    assert {case: ladder.column("u").tolist() for case, ladder in found.ladders.items()} == {
        "1": [5.0, 6.0],
        "2": [7.0, 8.0],
    }


def test_a_case_in_every_row_names_the_meshes(tmp_path: Path) -> None:
    text = "case,h,u\n1,4,5\n2,2,6\n3,1,7\n"
    ladder = read(tmp_path, text).ladders[""]
    assert ladder.remarks == ("column 'case' names the meshes, as it differs in every row",)
    assert len(ladder.levels) == 3 and set(ladder.levels[0].values) == {"u"}
    assert len(read(tmp_path, text, case="case").ladders) == 3


def test_a_case_may_lack_a_quantity(tmp_path: Path) -> None:
    found = read(tmp_path, "lc,h,u,v\na,2,1.5,3\na,1,1.75,4\nb,2,2.5,\nb,1,2.75,-\n")
    assert found.ladders["b"].resolution == {"u": 0.005}
    assert all(value != value for value in found.ladders["b"].column("v"))


@pytest.mark.parametrize(
    ("text", "messages"),
    [
        (
            "case,h,u\n,2,5\nlift,1,6\nlift,4,x\n",
            [
                "t.csv:2: column 'case': no load case; name the case of the first row",
                "t.csv:4: column 'u': not a number, got 'x'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
            ],
        ),
        (
            "case;h [mm];u [mm]\nlift;2;5\nlift;1;6\ncase;h [mm];u [m]\nswell;2;5\nswell;1;6\n",
            [
                "t.csv:4: column 'u': another unit than above, got 'm'; convert these rows to mm, as above",
            ],
        ),
        (
            "h;u\nmm;MPa\n2;5\n1;6\nmm;kPa\n0,5;7\n",
            [
                "t.csv:5: column 'u': another unit than above, got 'kPa'; "
                "convert these rows to MPa, as above",
            ],
        ),
        (
            "h [mm];u [mm]\nmm;m\n2;5\n1;6\n",
            ["t.csv:1: two units of the column 'u', got 'mm'; state one: the row below says 'm'"],
        ),
        (
            "lift\nh,u\n2,5\n1,6\nswell\nh,u\n2,7\n1,8\n",
            [
                "t.csv:6: a second table with the same sizes; "
                "add a column that names the load case, or give the range of one table"
            ],
        ),
        (
            "h,u\n2,#DIV/0!\n#REF!,3\n",
            [
                "t.csv:2: column 'u': not a number, got '#DIV/0!'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
                "t.csv:3: column 'h': not a number, got '#REF!'; "
                "write a number such as 1234.5 or 1.2e3, or leave the cell empty",
            ],
        ),
    ],
)
def test_faults_of_layouts_are_named(tmp_path: Path, text: str, messages: list[str]) -> None:
    assert said(tmp_path, text) == messages


def test_a_column_of_cases_that_is_not_there(tmp_path: Path) -> None:
    assert said(tmp_path, "lift,h,u\na,2,5\n", case="lifts") == [
        "t.csv: no column 'lifts'; did you mean 'lift'?"
    ]


def test_the_header_repeated_in_a_printout_is_left_out(tmp_path: Path) -> None:
    ladder = read(tmp_path, "h,u\n4,5\nh,u\n2,6\nh,u\n1,7\n").ladders[""]
    assert ladder.column("u").tolist() == [5.0, 6.0, 7.0]
