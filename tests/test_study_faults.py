"""What is wrong with a study file is said word for word, all of it at once."""

from pathlib import Path

import pytest

from convergence import rooms
from convergence.errors import InputError
from convergence.study import load

STUDIES = Path(__file__).parent / "studies"
CYLINDER = (STUDIES / "cylinder.toml").read_text()
TABLE = (STUDIES / "arm_table.toml").read_text()


def said(folder: Path, text: str) -> list[str]:
    path = folder / "s.toml"
    path.write_text(text)
    with pytest.raises(InputError) as caught:
        load(path)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def test_all_faults_of_a_model_study(tmp_path: Path) -> None:
    text = """titel = "x"
units = "mm, N, GPa"
[model]
name = "thick_cylinder"
inner_radius = -1.0
[material]
young = 2e5
yield_strength = 355.0
[ladder]
levels = 40
[quantities.h]
measure = "stress"
[quantities.hoop]
measure = "stres"
[quantities.peak]
measure = "peak_stress"
relative_tolerence = 0.1
absolute_tolerance = -1
[quantities.bare]
"""
    measures = ", ".join(rooms.names("quantities"))
    assert said(tmp_path, text) == [
        "s.toml:1: titel: unknown key; did you mean 'title'?",
        "s.toml:2: units: unknown unit system, got 'mm, N, GPa'; did you mean 'mm, N, MPa'?",
        "s.toml:8: material.yield_strength: a yield strength without its source; "
        'add yield_source = "where the value stands"',
        "s.toml:10: ladder.levels: out of range, got 40; give a whole number, 1 <= value <= 12",
        "s.toml:5: model.inner_radius: out of range, got -1.0; give a number [mm], 0 < value",
        "s.toml:11: quantities.h: a name the ladder keeps for itself, got 'h'; "
        "use letters, digits, _ and -, such as peak_stress",
        "s.toml:14: quantities.hoop.measure: unknown measure, got 'stres'; did you mean 'stress'?",
        "s.toml:18: quantities.peak.absolute_tolerance: out of range, got -1; give a number, 0 < value",
        "s.toml:17: quantities.peak.relative_tolerence: unknown key; did you mean 'relative_tolerance'?",
        f"s.toml:19: quantities.bare: the key 'measure' is missing; add measure = one of {measures}",
    ]


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        (
            "inner_radius = 25",
            "inner_radius = 50",
            "s.toml:3: model: unsuitable outer_radius, got 45.0; more than inner_radius 50",
        ),
        (
            "inner_radius = 25",
            "outer_radius = 20",
            "s.toml:5: model.outer_radius: unsuitable outer_radius, got 20.0; more than inner_radius 30",
        ),
        (
            '"thick_cylinder"',
            '"thick_cylindre"',
            "s.toml:4: model.name: unknown model, got 'thick_cylindre'; did you mean",
        ),
        ('name = "thick_cylinder"', "", "s.toml:3: model: the key 'name' is missing; add name = one of "),
        (
            'at = "bore_x"',
            'at = "bor_x"',
            "s.toml:20: quantities.hoop.at: the model has no such point, got 'bor_x'; ",
        ),
        (
            "divisions = 3",
            "divisions = 3\nsize = 2.0",
            "s.toml:13: ladder.divisions: unsuitable divisions, got 3; ",
        ),
        ("young = 200000.0", "young = nan", "s.toml:8: material.young: not a finite number, got nan; "),
        (
            "[quantities.growth]",
            '[quantities."a.b"]',
            "s.toml:24: quantities.a.b: not a name for a quantity, got 'a.b'; ",
        ),
        (
            "[quantities.growth]",
            '[quantities." "]',
            "s.toml:24: quantities. : not a name for a quantity, got ' '; ",
        ),
        ("[model]", "[table]\nfile = 'a.csv'\n[model]", "s.toml: both [model] and [table]; give one of "),
    ],
)
def test_a_fault_of_a_model_study(tmp_path: Path, old: str, new: str, message: str) -> None:
    assert old in CYLINDER
    found = said(tmp_path, CYLINDER.replace(old, new))
    assert any(line.startswith(message) for line in found), found


@pytest.mark.parametrize(
    ("text", "messages"),
    [
        (
            "title = 3\n",
            [
                "s.toml:1: title: not a text, got 3; give a text",
                "s.toml: nothing to judge; give one of [model] with name, [table] with file, "
                "[meshes] or [fields] with files = [...]",
            ],
        ),
        (
            "model = 3\n[quantities]\na = 1\n",
            [
                "s.toml:1: model: not a table, got 3; write [model] and its keys below",
                "s.toml:1: model: the key 'name' is missing; add name = one of "
                + ", ".join(rooms.names("models")),
                "s.toml:3: quantities.a: not a table, got 1; write [quantities.a] and its keys below",
            ],
        ),
        (
            '[model]\nname = "thick_cylinder"\n',
            ["s.toml: no quantity of interest; add [quantities.NAME] with measure = ..."],
        ),
        (
            '[table]\nfile = "none.csv"\n[ladder]\n',
            [
                "s.toml:3: ladder: a table has levels in rows, cases in a column: it has no ladder; "
                "remove [ladder]",
                "none.csv: no such file; give the path of a table (.csv, .xlsx, .ods)",
            ],
        ),
        ("[table]\n", ["s.toml:1: table: the key 'file' is missing; add file = a text"]),
    ],
)
def test_faults_of_a_whole_file(tmp_path: Path, text: str, messages: list[str]) -> None:
    assert said(tmp_path, text) == messages


def test_faults_of_a_table_study(tmp_path: Path) -> None:
    (tmp_path / "data").mkdir()
    (tmp_path / "data" / "arm.csv").write_text("cells,wx,power\n8,1.5,2.0\n")
    assert said(tmp_path, TABLE.replace('"displacement"', '"displacment"')) == [
        "s.toml:7: quantities.tip.kind: not one of the choices, got 'displacment'; "
        "did you mean 'displacement'?",
        "s.toml:10: quantities.energy: no such column, got 'energy'; known: cells, power, wx",
    ]


def test_a_place_outside_the_part(tmp_path: Path) -> None:
    text = CYLINDER.replace("at = [25.0, 0.0]", "at = [24.0, 0.0]")
    assert said(tmp_path, text) == [
        "s.toml:26: quantities.growth.at: outside the part, got (24.0, 0.0); a place on the part"
    ]
