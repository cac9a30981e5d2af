"""[companion] of a study: a second ladder of the same model, climbed, kept and judged beside the first."""

import json
from pathlib import Path

import pytest

from convergence import climbing
from convergence.cli import main
from convergence.climbing import LADDER, climb
from convergence.errors import InputError
from convergence.forecast import Budget
from convergence.intake.ladder_file import read_ladder
from convergence.study import Study, load

STUDY = """
[model]
name = "thick_cylinder"
{cases}
[ladder]
divisions = 2
levels = 3
shape = "quadrilateral"
degree = 1
{companion}
[quantities.growth]
measure = "displacement"
at = "bore_x"
component = "x"
relative_tolerance = 0.05
"""
TRIANGLES = '[companion]\nshape = "triangle"'


def study(folder: Path, companion: str = TRIANGLES, cases: str = "") -> Study:
    file = folder / "barrel.toml"
    file.write_text(STUDY.format(companion=companion, cases=cases))
    return load(file)


def faults(folder: Path, **tables: str) -> str:
    with pytest.raises(InputError) as raised:
        study(folder, **tables)
    return str(raised.value)


def test_a_companion_differs_from_the_ladder_in_what_its_table_says(tmp_path: Path) -> None:
    found = study(tmp_path, '[companion]\nshape = "triangle"\ndegree = 2')
    assert found.ladder is not None and found.companion is not None and found.companion.ladder is not None
    mine, other = found.ladder, found.companion.ladder
    assert (other.shape, other.degree) == ("triangle", 2)
    assert (other.divisions, other.ratio, other.levels) == (mine.divisions, mine.ratio, mine.levels)
    assert [q.formal_order for q in found.quantities] == [2.0]
    assert [q.formal_order for q in found.companion.quantities] == [3.0]


def test_the_levels_of_a_study_stay_good_when_a_companion_is_added(tmp_path: Path) -> None:
    alone, both = study(tmp_path, ""), study(tmp_path)
    assert alone.companion is None and both.companion is not None
    assert alone.fingerprint == both.fingerprint != both.companion.fingerprint


@pytest.mark.parametrize(
    ("companion", "said"),
    [
        ("[companion]", "another degree or other cells than [ladder] has"),
        ("[companion]\ndegree = 1", "another degree or other cells than [ladder] has"),
        ('[companion]\nshape = "hexahedron"', "one of triangle, quadrilateral: the model has 2 dimensions"),
        ("[companion]\ndegree = 2\nlevels = 4", "levels"),
    ],
)
def test_a_companion_that_is_none_is_refused(tmp_path: Path, companion: str, said: str) -> None:
    found = faults(tmp_path, companion=companion)
    assert said in found and "barrel.toml:" in found


def test_a_case_cannot_take_the_folder_of_the_companion(tmp_path: Path) -> None:
    assert "keeps for itself" in faults(tmp_path, cases="[cases.companion]")


TABLES = """
[table]
file = "quads.csv"
[companion]
file = "triangles.csv"
{more}
[quantities.tip]
column = "u"
kind = "displacement"
degree = 1
"""
QUADS = "h [mm],u [mm]\n4,1.160\n2,1.040\n1,1.010\n"


def table_study(folder: Path, triangles: str, more: str = "") -> Study:
    (folder / "quads.csv").write_text(QUADS)
    (folder / "triangles.csv").write_text(triangles)
    (folder / "tip.toml").write_text(TABLES.format(more=more))
    return load(folder / "tip.toml")


def test_the_companion_of_a_table_is_another_table(tmp_path: Path) -> None:
    found = table_study(tmp_path, "h [mm],u [mm]\n3,0.910\n1.5,0.9775\n0.75,0.9944\n", "degree = 2")
    assert found.companion is not None and found.companion.table is not None
    assert list(found.companion.table.column("tip")) == [0.910, 0.9775, 0.9944]
    assert [(q.degree, q.formal_order) for q in found.quantities] == [(1, 2.0)]
    assert [(q.degree, q.formal_order) for q in found.companion.quantities] == [(2, 3.0)]


@pytest.mark.parametrize("far", [0.0, 5.0])
def test_tables_meet_or_prove_nothing_and_their_folder_can_be_judged_again(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str], far: float
) -> None:
    rows = "".join(f"{h},{1.0 + far - 0.01 * h * h:.4f}\n" for h in (3.0, 1.5, 0.75))
    table_study(tmp_path, f"h [mm],u [mm]\n{rows}")
    monkeypatch.chdir(tmp_path)
    main.outcome(["run", "tip.toml", "--out", "out"])
    for name in ("quads.csv", "triangles.csv", "tip.toml"):
        (tmp_path / name).unlink()
    capsys.readouterr()
    main.outcome(["judge", "--json", "out"])
    found = json.loads(capsys.readouterr().out)["quantities"]["tip"]
    if far:
        assert found["verdict"] == "unproven" and found["low"] is None
        assert "the two ladders do not meet" in " ".join(found["reasons"])
    else:
        assert found["low"] < 1.0 < found["high"]
        assert "The two ladders meet" in " ".join(found["reasons"])


@pytest.mark.parametrize(
    ("triangles", "more", "said"),
    [
        ("h [mm],v [mm]\n3,1\n1,2\n", "", "triangles.csv has no column 'u'"),
        ("h [mm],u [m]\n3,1\n1,2\n", "", "the column 'u' is in m; mm, as in [table]"),
        ("h [mm],u [mm]\n3,1\n1,2\n", "degree = 0", "degree"),
        ("h [mm],u [mm]\n3,1\n1,2\n", "levels = 3", "levels"),
    ],
)
def test_a_table_that_is_no_companion_is_refused(
    tmp_path: Path, triangles: str, more: str, said: str
) -> None:
    with pytest.raises(InputError) as raised:
        table_study(tmp_path, triangles, more)
    assert said in str(raised.value)


def test_both_ladders_are_kept_and_nothing_is_solved_twice(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    asked, folder = study(tmp_path), tmp_path / "out"
    assert asked.companion is not None
    first = list(climb(asked, folder)), list(climb(asked.companion, folder))
    assert len(read_ladder(folder / LADDER).levels) == 3
    kept = read_ladder(folder / "companion" / LADDER)
    assert [level.cells for level in kept.levels] == [2 * level.cells for level in first[0]]

    def refuse(*_: object) -> None:
        raise AssertionError("solved again")

    monkeypatch.setattr(climbing, "solve_cases", refuse)
    again = list(climb(asked, folder)), list(climb(asked.companion, folder))
    assert [[level.values for level in ladder] for ladder in again] == [
        [level.values for level in ladder] for ladder in first
    ]


def test_a_stopped_companion_goes_on_where_it_was(tmp_path: Path) -> None:
    asked, folder = study(tmp_path), tmp_path / "out"
    assert asked.companion is not None
    whole = [level.values for level in climb(asked.companion, tmp_path / "whole")]
    levels = climb(asked.companion, folder)
    next(levels)
    levels.close()
    assert [level.values for level in climb(asked.companion, folder)] == whole


def test_a_companion_beyond_the_budget_leaves_a_remark_and_the_ladder_is_judged(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    asked, folder = study(tmp_path), tmp_path / "out"
    assert asked.companion is not None
    list(climb(asked, folder))
    assert list(climb(asked.companion, folder, Budget(seconds=0.0))) == []
    monkeypatch.chdir(tmp_path)
    (folder / "study.toml").write_text(asked.text)
    main.outcome(["judge", "--json", "out"])
    found = json.loads(capsys.readouterr().out)["quantities"]["growth"]
    assert found["low"] < found["limit"] < found["high"]
    assert any("The companion ladder is not used" in reason for reason in found["reasons"])
    main.outcome(["judge", "out"])
    assert "level 1 of the companion" in capsys.readouterr().out


def test_run_climbs_both_and_reports_both(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    study(tmp_path, cases="[cases.full]\n[cases.half]\npressure = 50.0")
    monkeypatch.chdir(tmp_path)
    main.outcome(["run", "barrel.toml", "--out", "out"])
    for case in ("full", "half"):
        folder = tmp_path / "out" / case
        found = json.loads((folder / "findings.json").read_text())
        assert found["companion"]["cells"] == "triangles of degree 1"
        assert len(found["companion"]["table"]) == 3
        assert any("The two ladders meet" in reason for reason in found["quantities"]["growth"]["reasons"])
        page = (folder / "report.html").read_text()
        assert "on 3 levels of triangles of degree 1" in page
        assert "Squares: the companion ladder of triangles of degree 1." in page


def test_a_study_whose_companion_is_not_solved_says_how_to_solve_it(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    list(climb(study(tmp_path, ""), tmp_path / "out"))
    (tmp_path / "out" / "study.toml").write_text(study(tmp_path).text)
    monkeypatch.chdir(tmp_path)
    assert main.outcome(["judge", "out"]) == 2
    assert "nothing solved yet; meshassay run" in capsys.readouterr().err
