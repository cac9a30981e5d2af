"""Several materials of a study: a table for each, in the fingerprint, the template and the limits."""

from pathlib import Path
from typing import Annotated, Any

import pytest

from convergence import rooms
from convergence.dimensions import PositiveLength
from convergence.errors import InputError
from convergence.fem.loads import Traction
from convergence.fem.material import Material
from convergence.fem.part import Part
from convergence.fem.problem import Problem, Support
from convergence.judgement import facts_of
from convergence.results import Yield
from convergence.study import Study, load
from convergence.template import study_template

STUDY = """[model]
name = "bonded_bar"
[material]
young = 200000.0
yield_strength = 355.0
yield_source = "EN 10025-2"
[bond_material]
young = 3000.0
poisson = 0.38
[quantities.energy]
measure = "strain_energy"
"""
ORTHOTROPIC = """young_y = 8000.0
young_z = 8000.0
poisson_yz = 0.4
poisson_zx = 0.01
shear_xy = 4000.0
shear_yz = 3000.0
shear_zx = 4000.0
"""


def bonded_bar(
    *,
    length: Annotated[PositiveLength, "length of each half"] = 40.0,
    material: Material,
    bond_material: Material,
) -> Problem:
    """A bar of two materials, pulled."""
    part = Part(
        points={f"p{i}{j}": (i * length, j * 10.0) for i in range(3) for j in range(2)},
        blocks=(("p00", "p10", "p11", "p01"), ("p10", "p20", "p21", "p11")),
        boundaries={
            "left": (("p01", "p00"),),
            "right": (("p20", "p21"),),
            "sides": (("p00", "p10"), ("p10", "p20"), ("p21", "p11"), ("p11", "p01")),
        },
        regions={"bar": (0,), "bond": (1,)},
    )
    return Problem(
        title="Bonded bar",
        part=part,
        materials={"bar": material, "bond": bond_material},
        supports=(Support("left", x=0.0, y=0.0, boundary="left"),),
        loads=(Traction("right", (1.0, 0.0)),),
    )


@pytest.fixture(autouse=True)
def room(monkeypatch: pytest.MonkeyPatch) -> None:
    """Put `bonded_bar` into the room of the models."""
    names, find, beside = rooms.names, rooms.find, rooms.beside
    wanted = {"energy": {"measure": "strain_energy", "relative_tolerance": 0.01}}
    monkeypatch.setattr(rooms, "names", lambda of: [*names(of), *(["bonded_bar"] if of == "models" else [])])
    monkeypatch.setattr(
        rooms, "find", lambda of, name, *rest: bonded_bar if name == "bonded_bar" else find(of, name, *rest)
    )
    monkeypatch.setattr(rooms, "shelf", lambda of: {"bonded_bar": "A bonded bar."})
    monkeypatch.setattr(
        rooms, "beside", lambda of, name, what: wanted if name == "bonded_bar" else beside(of, name, what)
    )


def loaded(folder: Path, text: str) -> Study:
    path = folder / "s.toml"
    path.write_text(text)
    return load(path)


def said(folder: Path, text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        loaded(folder, text)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def test_each_material_parameter_is_a_table(tmp_path: Path) -> None:
    study = loaded(tmp_path, STUDY)
    assert list(study.materials) == ["material", "bond_material"]
    used = study.problem().materials
    assert (used["bar"].young, used["bar"].poisson) == (200000.0, 0.3)
    assert (used["bond"].young, used["bond"].poisson) == (3000.0, 0.38)


def test_the_yield_strengths_go_by_region(tmp_path: Path) -> None:
    peak = '[quantities.peak]\nmeasure = "peak_stress"\nregion = "bond"\n'
    facts = facts_of(loaded(tmp_path, STUDY + peak))
    assert facts.yields == {"bar": Yield(355.0, "EN 10025-2"), "bond": None}
    assert facts.regions == {"energy": "", "peak": "bond"}


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("young = 200000.0", "young = 210000.0"),
        ("young = 3000.0", "young = 4000.0"),
        ("0.38", "0.37"),
        ("0.38", "0.38\nexpansion = 6e-5"),
        ("0.38", "0.38\nexpansion_y = 6e-5"),
        ("0.38\n", "0.38\n" + ORTHOTROPIC),
        ("0.38\n", "0.38\n" + ORTHOTROPIC + "angle = 30.0\n"),
    ],
)
def test_every_constant_is_in_the_fingerprint(tmp_path: Path, old: str, new: str) -> None:
    plain = STUDY if "angle" not in new else STUDY.replace("0.38\n", "0.38\n" + ORTHOTROPIC)
    assert loaded(tmp_path, STUDY.replace(old, new)).fingerprint != loaded(tmp_path, plain).fingerprint


def test_yield_strengths_are_not_in_the_fingerprint(tmp_path: Path) -> None:
    other = STUDY.replace("0.38", '0.38\nyield_strength = 30.0\nyield_source = "data sheet"')
    assert loaded(tmp_path, other).fingerprint == loaded(tmp_path, STUDY).fingerprint


@pytest.mark.parametrize(
    ("old", "new", "messages"),
    [
        (
            "[bond_material]",
            "[bond_materal]",
            [
                "s.toml:7: bond_materal: unknown key; did you mean 'bond_material'?",
                "s.toml: no table [bond_material]; add it: the model has material and bond_material",
            ],
        ),
        (
            "young = 3000.0\n",
            "yield_strength = 30.0\n",
            [
                "s.toml:8: bond_material.yield_strength: a yield strength without its source; "
                'add yield_source = "where the value stands"'
            ],
        ),
        (
            "0.38",
            "0.5",
            ["s.toml:9: bond_material.poisson: unsuitable poisson, got 0.5; -1 < value < 0.5"],
        ),
        (
            "0.38\n",
            "0.38\n" + ORTHOTROPIC.replace("shear_zx = 4000.0\n", ""),
            [
                "s.toml:7: bond_material: unsuitable shear_zx; a value: an orthotropic material has all of "
                "young_y, young_z, poisson_yz, poisson_zx, shear_xy, shear_yz, shear_zx"
            ],
        ),
        (
            "0.38\n",
            "0.38\n" + ORTHOTROPIC.replace("0.4", "1.5"),
            [
                "s.toml:12: bond_material.poisson_yz: unsuitable poisson_yz, got 1.5; "
                "a size below √(young_y/young_z) = 1"
            ],
        ),
    ],
)
def test_faults_of_a_material_table(tmp_path: Path, old: str, new: str, messages: list[str]) -> None:
    assert said(tmp_path, STUDY.replace(old, new)) == messages


def test_a_model_not_known_says_nothing_of_its_materials(tmp_path: Path) -> None:
    (message,) = said(tmp_path, STUDY.replace('"bonded_bar"', '"bonded_baar"'))
    assert "unknown model, got 'bonded_baar'; did you mean 'bonded_bar'?" in message


def test_a_material_that_the_model_has_not(tmp_path: Path) -> None:
    text = STUDY.replace('"bonded_bar"', '"lug"')
    assert said(tmp_path, text) == ["s.toml:7: bond_material: unknown key; did you mean 'material'?"]
    (tmp_path / "t.csv").write_text("h,w\n1,1.5\n")
    table = '[table]\nfile = "t.csv"\n[bond_material]\nyoung = 3000.0\n'
    assert said(tmp_path, table) == ["s.toml:3: bond_material: unknown key; did you mean 'material'?"]


def test_closed_forms_are_for_isotropic_materials(tmp_path: Path) -> None:
    text = '[model]\nname = "thick_cylinder"\n[quantities.e]\nmeasure = "strain_energy"\n[material]\n'
    (message,) = said(tmp_path, text + "young = 9000.0\n" + ORTHOTROPIC)
    assert message.startswith(
        "s.toml:7: material.young_y: orthotropic in a model with a closed form; leave out "
    )
    bar = loaded(tmp_path, STUDY.replace("0.38\n", "0.38\n" + ORTHOTROPIC))
    assert not bar.problem().materials["bond"].isotropic


def test_the_template_has_every_table(tmp_path: Path) -> None:
    text = study_template("bonded_bar")
    for table in ("\n[material]\n", "\n[bond_material]\n"):
        below = text.split(table)[1].split("\n[")[0]
        assert "young = 210000.0" in below and "# shear_zx =" in below and "[1/K]" in below
    assert "bond_material =" not in text
    study: Any = loaded(tmp_path, text)
    assert list(study.materials) == ["material", "bond_material"]
