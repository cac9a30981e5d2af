"""Climbing: saved level by level, continued after a kill, ended before what is too much; nothing twice."""

import time
from collections.abc import Callable
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest

from convergence import climbing
from convergence.climbing import LADDER, climb, level_file, plan, unknowns
from convergence.errors import InputError, SolvingError
from convergence.fields import load_fields
from convergence.forecast import Budget
from convergence.intake.ladder_file import read_ladder
from convergence.ladder_spec import ladder as ladder_spec
from convergence.memory import peak_memory
from convergence.results import Ladder, Level
from convergence.rooms import names
from convergence.study import Study, load

STUDY = """
title = "Barrel of the luffing cylinder"

[model]
name = "thick_cylinder"
inner_radius = {inner}

[ladder]
divisions = {divisions}
ratio = 2.0
levels = {levels}
shape = "{shape}"
degree = {degree}

[quantities.growth]
measure = "displacement"
at = "bore_x"
component = "x"
relative_tolerance = 0.01

[quantities.peak]
measure = "peak_stress"
relative_tolerance = {tolerance}
"""


def study(folder: Path, **changes: object) -> Study:
    settings: dict[str, object] = {
        "inner": 30.0, "divisions": 2, "levels": 4, "shape": "quadrilateral", "degree": 1, "tolerance": 0.05,
    }  # fmt: skip
    file = folder / "barrel.toml"
    file.write_text(STUDY.format(**(settings | changes)))
    return load(file)


def numbers(ladder: Ladder) -> list[tuple]:
    """Everything of the levels but seconds and memory."""
    return [(level.h, level.cells, level.dofs, dict(level.values)) for level in ladder.levels]


@pytest.fixture
def solved(monkeypatch: pytest.MonkeyPatch) -> list[int]:
    """The cells of every mesh that is solved."""
    seen: list[int] = []
    original = climbing.solve_cases

    def counting(problems: object, meshed: object, starts: object) -> object:
        seen.append(meshed.cells)
        return original(problems, meshed, starts)

    monkeypatch.setattr(climbing, "solve_cases", counting)
    return seen


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    return tmp_path / "out"


def test_every_level_is_saved_before_it_is_yielded(tmp_path: Path, folder: Path) -> None:
    found: list[Level] = []
    for number, level in enumerate(climb(study(tmp_path), folder)):
        found.append(level)
        saved = read_ladder(folder / LADDER)
        assert numbers(saved) == numbers(Ladder(tuple(found), ""))
        assert saved.fingerprint == study(tmp_path).fingerprint and saved.source == "barrel.toml"
        fields = load_fields(level_file(folder, number))
        assert fields.displacement.size == level.dofs
    assert [level.cells for level in found] == [18, 72, 288, 1152]
    assert all(fine.h < coarse.h for coarse, fine in pairwise(found))
    assert all(level.seconds > 0.0 for level in found)


def test_a_level_has_the_quantities_with_their_places_and_every_record(tmp_path: Path, folder: Path) -> None:
    (first, *_) = climb(study(tmp_path, levels=1), folder)
    assert {"growth", "peak", "peak.x", "peak.y"} <= set(first.values)
    assert "growth.x" not in first.values
    recorded = {name.split(".")[0] for name in first.values} - {"growth", "peak"}
    assert {"equilibrium", "energy_norm", "linear_range"} <= recorded <= set(names("checks"))
    # a Lamé cylinder's peak stands at the bore
    assert np.hypot(first.values["peak.x"], first.values["peak.y"]) == pytest.approx(30.0)


def test_nothing_is_solved_twice(tmp_path: Path, folder: Path, solved: list[int]) -> None:
    whole = list(climb(study(tmp_path), folder))
    assert solved == [18, 72, 288, 1152]
    again = list(climb(study(tmp_path), folder))
    assert again == whole and solved == [18, 72, 288, 1152]
    more = list(climb(study(tmp_path, levels=5), folder))
    assert more[:4] == whole and solved[4:] == [4608]


@pytest.mark.parametrize("stop", [0, 1, 2, 3])
def test_a_stopped_climb_goes_on(stop: int, tmp_path: Path, folder: Path, solved: list[int]) -> None:
    """Stopped in the middle of level `stop`, whose solution is lost; the ladder ends up the same."""
    straight = list(climb(study(tmp_path), tmp_path / "straight"))
    solved.clear()
    steps = climb(study(tmp_path), folder)
    for _ in range(stop):
        next(steps)
    steps.close()
    finished = list(climb(study(tmp_path), folder))
    assert sorted(solved) == [18, 72, 288, 1152]
    assert numbers(Ladder(tuple(finished), "")) == numbers(Ladder(tuple(straight), ""))
    assert numbers(read_ladder(folder / LADDER)) == numbers(read_ladder(tmp_path / "straight" / LADDER))


def test_fields_without_their_level_are_solved_again(tmp_path: Path, folder: Path, solved: list[int]) -> None:
    """A kill after the fields and before the ladder: the level does not count as solved."""
    next(climb(study(tmp_path), folder))
    level_file(folder, 0).replace(level_file(folder, 1))
    list(climb(study(tmp_path), folder))
    assert solved == [18, 72, 288, 1152]


@pytest.mark.parametrize("change", [{"inner": 31.0}, {"degree": 2}, {"shape": "triangle"}, {"divisions": 3}])
def test_the_ladder_of_another_study_is_kept(change: dict, tmp_path: Path, folder: Path) -> None:
    first = study(tmp_path)
    list(climb(first, folder))
    before = (folder / LADDER).read_bytes()
    second = study(tmp_path, **change)
    assert second.fingerprint != first.fingerprint
    found = list(climb(second, folder))
    assert (folder / f"ladder-{first.fingerprint}.csv").read_bytes() == before
    assert read_ladder(folder / LADDER).fingerprint == second.fingerprint
    fresh = list(climb(second, tmp_path / "fresh"))
    assert numbers(Ladder(tuple(found), "")) == numbers(Ladder(tuple(fresh), ""))


def test_a_change_of_tolerance_or_title_solves_nothing(
    tmp_path: Path, folder: Path, solved: list[int]
) -> None:
    list(climb(study(tmp_path), folder))
    list(climb(study(tmp_path, tolerance=0.01), folder))
    assert len(solved) == 4 and len(list(folder.glob("ladder*.csv"))) == 1


def test_fewer_levels_than_saved(tmp_path: Path, folder: Path, solved: list[int]) -> None:
    """The ladder holds what the study asks for; the longer one is kept beside it."""
    whole = list(climb(study(tmp_path), folder))
    kept = list(climb(study(tmp_path, levels=2), folder))
    assert kept == whole[:2] and len(solved) == 4
    assert len(read_ladder(folder / LADDER).levels) == 2
    assert len(read_ladder(folder / f"ladder-{study(tmp_path).fingerprint}.csv").levels) == 4


def test_a_damaged_ladder_is_put_aside(tmp_path: Path, folder: Path) -> None:
    """Its message says: run the study again. That has to work."""
    straight = list(climb(study(tmp_path), folder))
    text = (folder / LADDER).read_text()
    (folder / LADDER).write_text(text[: len(text) // 2])
    with pytest.raises(InputError, match="run the study again"):
        read_ladder(folder / LADDER)
    again = list(climb(study(tmp_path), folder))
    assert numbers(Ladder(tuple(again), "")) == numbers(Ladder(tuple(straight), ""))
    assert (folder / "ladder-damaged.csv").read_text() == text[: len(text) // 2]


def fail(monkeypatch: pytest.MonkeyPatch, cells: int, error: Exception) -> None:
    """Let the solution of the mesh with so many cells raise."""
    original: Callable = climbing.solve_cases

    def failing(problems: object, meshed: object, starts: object) -> object:
        if meshed.cells == cells:
            raise error
        return original(problems, meshed, starts)

    monkeypatch.setattr(climbing, "solve_cases", failing)


def test_a_level_that_fails_is_named_and_the_others_are_kept(
    tmp_path: Path, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    fail(monkeypatch, 288, SolvingError("the cells are badly shaped"))
    with pytest.raises(SolvingError) as caught:
        list(climb(study(tmp_path), folder))
    assert str(caught.value) == "level 3: the cells are badly shaped"
    assert len(read_ladder(folder / LADDER).levels) == 2


def test_a_level_that_runs_out_of_memory_ends_the_ladder(
    tmp_path: Path, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    with monkeypatch.context() as patch:
        fail(patch, 288, MemoryError())
        assert len(list(climb(study(tmp_path), folder))) == 2
    ladder = read_ladder(folder / LADDER)
    # 8 × 36 cells have 9 × 37 nodes of two unknowns
    told = "level 3 (666 unknowns) is not solved: memory ran out; the levels before it are judged"
    assert ladder.remarks == (told,) and len(ladder.levels) == 2
    assert len(list(climb(study(tmp_path), folder))) == 4, "the same command goes on"
    assert read_ladder(folder / LADDER).remarks == ()


def test_a_first_level_without_memory_is_an_error(
    tmp_path: Path, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    fail(monkeypatch, 18, MemoryError())
    with pytest.raises(SolvingError) as caught:
        list(climb(study(tmp_path), folder))
    told = "level 1 (60 unknowns) is not solved: memory ran out; ask for a coarser first level"
    assert str(caught.value) == told


@pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
@pytest.mark.parametrize("degree", [1, 2])
def test_unknowns_are_known_before_the_mesh(shape: str, degree: int, tmp_path: Path, folder: Path) -> None:
    asked = study(tmp_path, shape=shape, degree=degree, levels=3)
    assert unknowns(asked) == [level.dofs for level in climb(asked, folder)]


def test_a_level_above_the_budget_is_not_begun(
    tmp_path: Path, folder: Path, solved: list[int], monkeypatch: pytest.MonkeyPatch
) -> None:
    """With 1 MB an unknown, level 4 of 2482 unknowns does not fit 1000 MB."""
    monkeypatch.setattr(climbing, "peak_memory", lambda: float(unknowns_solved(solved)))
    asked = study(tmp_path)
    assert len(list(climb(asked, folder, Budget(memory=1000.0)))) == 3
    (told,) = read_ladder(folder / LADDER).remarks
    assert told == (
        "level 4 (2,482 unknowns) is not solved: it would need about 2.5 GB of memory where 1 GB are "
        "available; the levels before it are judged"
    )
    assert solved == [18, 72, 288]
    list(climb(asked, folder, Budget(memory=1000.0)))
    assert solved == [18, 72, 288] and read_ladder(folder / LADDER).remarks == (told,)
    list(climb(study(tmp_path, levels=3), folder))
    assert read_ladder(folder / LADDER).remarks == (), "three levels are all that is asked for"
    list(climb(asked, folder, Budget(memory=3000.0)))
    assert solved == [18, 72, 288, 1152] and read_ladder(folder / LADDER).remarks == ()


def unknowns_solved(solved: list[int]) -> int:
    return {18: 60, 72: 190, 288: 666, 1152: 2482}[solved[-1]]


def test_the_memory_left_on_the_machine_is_a_budget(
    tmp_path: Path, folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(climbing, "allowed_memory", lambda: 10.0)
    with pytest.raises(SolvingError, match=r"level 1 .* of memory where 10 MB are available; ask for"):
        list(climb(study(tmp_path), folder))
    assert not (folder / LADDER).exists()


def test_time_that_is_spent_is_not_there_any_more(tmp_path: Path, folder: Path) -> None:
    """A caller that takes half a second between levels has used up 0.4 s."""
    steps = climb(study(tmp_path), folder, Budget(seconds=0.4))
    next(steps)
    time.sleep(0.5)
    assert list(steps) == []
    assert "where 0 s are left" in read_ladder(folder / LADDER).remarks[0]


@pytest.mark.skipif(not Path("/proc/self/clear_refs").exists(), reason="no peak of a level on this system")
def test_a_level_has_its_own_memory(tmp_path: Path, folder: Path) -> None:
    """What was held before the climb and freed since is not counted."""
    block = np.ones(60_000_000)
    held = peak_memory()
    assert held > block.nbytes / 1e6
    del block
    levels = list(climb(study(tmp_path), folder))
    assert all(10.0 < level.memory < held - 200.0 for level in levels)


def test_a_region_without_a_node_names_the_quantity(tmp_path: Path, folder: Path) -> None:
    asked = study(tmp_path)
    peak = 'measure = "peak_stress"\nnear = [0.0, 0.0]\nradius = 1.0\n'
    text = f"{asked.text}\n[quantities.centre_peak]\n{peak}"
    (tmp_path / "barrel.toml").write_text(text)
    with pytest.raises(InputError) as caught:
        list(climb(load(tmp_path / "barrel.toml"), folder))
    assert str(caught.value) == (
        "barrel.toml: quantities.centre_peak.radius: unsuitable, got 1.0; "
        "a region, boundary and radius that hold at least one node"
    )
    assert not (folder / LADDER).exists()


def test_two_levels_of_the_same_mesh_are_refused(tmp_path: Path, folder: Path) -> None:
    problem = study(tmp_path).problem()
    assert len(plan(ladder_spec(divisions=2, ratio=1.5, levels=4), problem)) == 4
    with pytest.raises(InputError) as caught:
        plan(ladder_spec(divisions=1, ratio=1.05, levels=3), problem)
    assert str(caught.value) == (
        "[ladder]: levels 1 and 2 have the same mesh, got 1.05; take a larger ratio or more divisions"
    )
    (tmp_path / "barrel.toml").write_text(study(tmp_path).text.replace("ratio = 2.0", "ratio = 1.02"))
    with pytest.raises(InputError, match="have the same mesh"):
        next(climb(load(tmp_path / "barrel.toml"), folder))
    assert not folder.exists(), "refused before anything is solved"
