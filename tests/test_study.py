"""Study files: what they become, and what their fingerprint depends on."""

from pathlib import Path

import pytest

from convergence import rooms
from convergence.errors import InputError
from convergence.study import Study, load
from convergence.template import study_template

STUDIES = Path(__file__).parent / "studies"
CYLINDER = (STUDIES / "cylinder.toml").read_text()
TABLE = (STUDIES / "arm_table.toml").read_text()


def write(folder: Path, text: str, name: str = "s.toml") -> Path:
    path = folder / name
    path.write_text(text)
    return path


def changed(folder: Path, old: str, new: str) -> Study:
    assert old in CYLINDER
    return load(write(folder, CYLINDER.replace(old, new)))


def test_a_model_study(tmp_path: Path) -> None:
    study = load(write(tmp_path, CYLINDER))
    assert (study.name, study.title) == ("s", "Barrel of the luffing cylinder")
    assert study.head.units == "mm, N, MPa" and study.model == "thick_cylinder"
    assert study.arguments is not None and study.arguments["inner_radius"] == 25.0
    assert study.arguments["outer_radius"] == 45.0
    assert study.ladder is not None
    assert (study.ladder.size, study.ladder.divisions, study.ladder.levels) == (None, 3, 4)
    assert set(study.materials) == {"material"} and study.materials["material"].poisson == 0.3
    hoop, growth = study.quantities
    assert (hoop.name, hoop.kind, hoop.unit) == ("hoop", "point_stress", "MPa")
    # recovered stress of degree 1: order 2; displacement: order 2
    assert hoop.formal_order == 2.0 and growth.formal_order == 2.0
    assert (hoop.relative, hoop.absolute, hoop.assumed_tolerance) == (None, 0.5, False)
    assert (growth.relative, growth.absolute, growth.assumed_tolerance) == (0.05, None, True)
    assert growth.arguments["at"] == (25.0, 0.0) and growth.measure_name == "displacement"
    assert study.problem().names()["boundary"] == ("bore", "outer", "symmetry_x", "symmetry_y")


def test_defaults_follow_the_units(tmp_path: Path) -> None:
    text = 'units = "m, N, Pa"\n[model]\nname = "thick_cylinder"\n[quantities.e]\nmeasure = "strain_energy"\n'
    study = load(write(tmp_path, text))
    assert study.arguments is not None and study.ladder is not None
    # 45 mm and 210000 MPa, each converted by a power of ten: exact to one unit in the last place
    assert study.arguments["outer_radius"] == pytest.approx(0.045, rel=1e-15)
    assert study.materials["material"].young == pytest.approx(2.1e11, rel=1e-15)
    assert study.quantities[0].unit == "N m" and study.ladder.divisions == 2


def test_the_fingerprint_changes_with_the_numbers_only(tmp_path: Path) -> None:
    first = load(write(tmp_path, CYLINDER)).fingerprint
    for old, new in (
        ("levels = 4", "levels = 6"),
        ("Barrel", "Tube"),
        ("absolute_tolerance = 0.5", "relative_tolerance = 0.02"),
        ("355.0", "275.0"),
        ("EN 10025-2", "EN 10210-1"),
        ("inner_radius = 25", "inner_radius = 25.0  # mm"),
    ):
        assert changed(tmp_path, old, new).fingerprint == first
    others = [
        changed(tmp_path, old, new).fingerprint
        for old, new in (
            ("inner_radius = 25", "inner_radius = 24"),
            ("young = 200000.0", "young = 210000.0"),
            ("young = 200000.0", "young = 200000.0\npoisson = 0.29"),
            ("young = 200000.0", "young = 200000.0\nexpansion = 1.1e-5"),
            ("young = 200000.0", "young = 200000.0\nexpansion_z = 1.1e-5"),
            ("divisions = 3", "divisions = 4"),
            ("divisions = 3", "size = 3.0"),
            ("degree = 1", "degree = 2"),
            ("levels = 4", "ratio = 1.5"),
            ("quadrilateral", "triangle"),
            ('"yy"', '"xx"'),
            ("quantities.hoop", "quantities.tangential"),
            ("title", 'units = "consistent"\ntitle'),
        )
    ]
    assert len({first, *others}) == len(others) + 1


def test_a_table_study(tmp_path: Path) -> None:
    (tmp_path / "data").mkdir()
    (tmp_path / "data" / "arm.csv").write_text("cells,w [mm],energy,other\n8,1.5,2.0,3\n64,1.6,2.1,3\n")
    study = load(write(tmp_path, TABLE))
    assert study.table is not None and study.model == "" and study.dimension == 3
    # h = N^(-1/3)
    assert list(study.table.h) == pytest.approx([0.5, 0.25], rel=1e-15)
    assert list(study.table.column("tip")) == [1.5, 1.6] and set(study.table.levels[0].values) == {
        "tip",
        "energy",
    }
    assert study.table.resolution == {"tip": 0.05, "energy": 0.05}
    tip, energy = study.quantities
    assert (tip.unit, tip.kind, tip.formal_order, tip.relative) == ("mm", "displacement", 3.0, 0.01)
    assert (energy.formal_order, energy.assumed_tolerance) == (None, True)
    assert study.fingerprint
    with pytest.raises(InputError):
        study.problem()


def test_a_table_study_without_quantities_takes_every_column(tmp_path: Path) -> None:
    (tmp_path / "arm.csv").write_text("h,w,peak,peak.x,peak.y\n1,1.5,2.0,3,4\n")
    study = load(write(tmp_path, '[table]\nfile = "arm.csv"\n'))
    assert [quantity.name for quantity in study.quantities] == ["w", "peak"]
    assert study.table is not None and set(study.table.levels[0].values) == {"w", "peak", "peak.x", "peak.y"}


def test_a_copy_finds_the_table_beside_it(tmp_path: Path) -> None:
    (tmp_path / "arm.csv").write_text("h,w\n1,1.5\n")
    study = load(write(tmp_path, '[table]\nfile = "../elsewhere/arm.csv"\n'), name="lifted")
    assert study.table_file == tmp_path / "arm.csv" and study.title == "lifted"


@pytest.mark.parametrize("model", rooms.names("models"))
def test_the_template_of_every_model_is_a_study(tmp_path: Path, model: str) -> None:
    study = load(write(tmp_path, study_template(model)))
    assert study.model == model and study.quantities
    assert not any(quantity.assumed_tolerance for quantity in study.quantities)
