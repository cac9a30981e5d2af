"""Load cases of a study: read and refused, solved together, each judged by itself."""

from pathlib import Path

import numpy as np
import pytest

from convergence import climbing, rooms
from convergence.climbing import LADDER, climb, level_file
from convergence.errors import InputError
from convergence.fem import solution
from convergence.forecast import Budget
from convergence.intake.ladder_file import read_ladder, write_ladder
from convergence.results import Ladder
from convergence.study import Study, load
from convergence.template import study_template

MODEL = """[model]
name = "tapered_arm"
tip_shear = -6.0
"""
CASES = """[cases.lift]
[cases.drag]
tip_shear = 0.0
tip_tension = 2
"""
REST = """[ladder]
divisions = 1
levels = 3
degree = 1
shape = "quadrilateral"
[quantities.energy]
measure = "strain_energy"
[quantities.peak]
measure = "peak_stress"
"""
MORE = "[cases.weight]\ntip_shear = 0.0\nweight = 7.7e-5\n"


def loaded(folder: Path, text: str) -> Study:
    path = folder / "arm.toml"
    path.write_text(text)
    return load(path)


def said(folder: Path, text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        loaded(folder, text)
    return [str(fault).replace(f"{folder}/", "") for fault in caught.value.faults]


def numbers(ladder: Ladder) -> list[tuple]:
    """Everything of the levels but seconds and memory."""
    return [(level.h, level.cells, level.dofs, dict(level.values)) for level in ladder.levels]


def test_a_case_is_a_study_of_its_own(tmp_path: Path) -> None:
    study = loaded(tmp_path, 'title = "Arm"\n' + MODEL + CASES + REST)
    lift, drag = study.cases["lift"], study.cases["drag"]
    assert list(study.cases) == ["lift", "drag"]
    assert (drag.name, drag.title, drag.cases) == ("arm/drag", "Arm: drag", {})
    assert drag.arguments is not None and lift.arguments == study.arguments
    assert (drag.arguments["tip_shear"], drag.arguments["tip_tension"]) == (0.0, 2.0)
    assert drag.quantities == study.quantities and drag.ladder == study.ladder
    assert study.loads() == {
        "lift": "tip_shear = -6 MPa, tip_tension = 0 MPa",
        "drag": "tip_shear = 0 MPa, tip_tension = 2 MPa",
    }


def test_a_case_has_the_fingerprint_of_the_study_that_says_the_same(tmp_path: Path) -> None:
    """So a ladder is the same with and without other cases."""
    study = loaded(tmp_path, MODEL + CASES + REST)
    alone = MODEL.replace("tip_shear = -6.0", "tip_shear = 0.0\ntip_tension = 2.0")
    assert study.cases["drag"].fingerprint == loaded(tmp_path, alone + REST).fingerprint
    without = loaded(tmp_path, MODEL + REST)
    assert study.fingerprint == study.cases["lift"].fingerprint == without.fingerprint
    assert study.cases["drag"].fingerprint != study.fingerprint
    assert without.cases == {}


OTHER = "not only the loads, got {}; make it a study of its own"


@pytest.mark.parametrize(
    ("cases", "messages"),
    [
        (
            "[cases]\n",
            ["arm.toml:4: cases: no case; add [cases.NAME] with the loads that differ from [model]"],
        ),
        (
            "[cases]\nlift = 3\n",
            ["arm.toml:5: cases.lift: not a table, got 3; write [cases.lift] and its keys below"],
        ),
        (
            '[cases."side/pull"]\n[cases."../up"]\n[cases.Levels]\n',
            [
                "arm.toml:4: cases.side/pull: not a name for a case, got 'side/pull'; "
                "use letters, digits, _ and -, such as side_pull",
                "arm.toml:5: cases.../up: not a name for a case, got '../up'; "
                "use letters, digits, _ and -, such as side_pull",
                "arm.toml:6: cases.Levels: a name the folder of a run keeps for itself, got 'Levels'; "
                "use letters, digits, _ and -, such as side_pull",
            ],
        ),
        (
            "[cases.lift]\n[cases.Lift]\n",
            ["arm.toml:5: cases.Lift: the name of case 'lift' but for capitals, got 'Lift'; take another"],
        ),
        (
            '[cases.lift]\ntip_sheer = 1.0\nname = "lug"\n[cases.drag]\ntip_tension = "much"\n',
            [
                "arm.toml:5: cases.lift.tip_sheer: unknown key; did you mean 'tip_shear'?",
                "arm.toml:6: cases.lift.name: unknown key; KNOWN",
                "arm.toml:8: cases.drag.tip_tension: not a number, got 'much'; give a number [MPa]",
            ],
        ),
        (
            '[cases.lift]\ntip_shear = 1.0\ndepth_tip = 100\nkind = "plane strain"\nthickness = 8.0\n',
            [
                f"arm.toml:6: cases.lift.depth_tip: changes the part, {OTHER.format(100)}",
                f"arm.toml:7: cases.lift.kind: changes the kind, {OTHER.format(repr('plane strain'))}",
                f"arm.toml:8: cases.lift.thickness: changes the thickness, {OTHER.format(8.0)}",
            ],
        ),
    ],
)
def test_faults_of_cases(tmp_path: Path, cases: str, messages: list[str]) -> None:
    found = said(tmp_path, MODEL + cases + REST)
    assert [one.split("; known: ")[0] + "; KNOWN" if "; known: " in one else one for one in found] == messages


def test_what_the_model_refuses_is_refused_in_a_case(tmp_path: Path) -> None:
    lug = '[model]\nname = "lug"\n[cases.back]\nforce = -1.0\n[cases.askew]\nangle = 30.0\n'
    assert said(tmp_path, lug + REST) == [
        "arm.toml:4: cases.back.force: unsuitable force, got -1.0; a positive pull; `angle` turns it",
        f"arm.toml:6: cases.askew.angle: changes the part, {OTHER.format(30.0)}",
    ]


def test_a_table_has_no_cases(tmp_path: Path) -> None:
    (tmp_path / "t.csv").write_text("h,w\n1,1.5\n")
    assert said(tmp_path, '[table]\nfile = "t.csv"\n[cases.lift]\n') == [
        "arm.toml:3: cases: a table has levels in rows, cases in a column: it has no cases; remove [cases]"
    ]


def test_every_case_has_the_numbers_of_its_own_study(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """One stiffness a level; the same factorization of it as alone, so the same numbers to the last digit."""
    made: list[int] = []
    original = solution.stiffness

    def counting(problem: object, meshed: object) -> object:
        made.append(meshed.cells)
        return original(problem, meshed)

    study = loaded(tmp_path, MODEL + CASES + MORE + REST)
    with monkeypatch.context() as patch:
        patch.setattr(solution, "stiffness", counting)
        levels = list(climb(study, tmp_path / "out"))
    assert made == [level.cells for level in levels] and len(made) == 3
    for name, case in study.cases.items():
        alone = list(climb(case, tmp_path / "alone" / name))
        together = read_ladder(tmp_path / "out" / name / LADDER)
        assert numbers(together) == numbers(Ladder(tuple(alone), ""))
        assert together.fingerprint == case.fingerprint
        assert all(level_file(tmp_path / "out" / name, number).exists() for number in range(3))
        assert [level.seconds for level in together.levels] == [level.seconds for level in levels]
    assert not (tmp_path / "out" / LADDER).exists()


@pytest.fixture
def solved(monkeypatch: pytest.MonkeyPatch) -> list[tuple[int, int]]:
    """Cells of every mesh that is solved, and for how many cases."""
    seen: list[tuple[int, int]] = []
    original = climbing.solve_cases

    def counting(problems: list, meshed: object, starts: object) -> object:
        seen.append((meshed.cells, len(problems)))
        return original(problems, meshed, starts)

    monkeypatch.setattr(climbing, "solve_cases", counting)
    return seen


def test_stopped_between_two_cases_of_a_level(tmp_path: Path, solved: list[tuple[int, int]]) -> None:
    """The first case has its third level, the second one not yet: only that one is solved again."""
    study = loaded(tmp_path, MODEL + CASES + REST)
    first, second, third = (level.cells for level in climb(study, tmp_path / "straight"))
    assert solved == [(first, 2), (second, 2), (third, 2)]
    folder = tmp_path / "out"
    list(climb(study, folder))
    path = folder / "drag" / LADDER
    whole = read_ladder(path)
    write_ladder(Ladder(whole.levels[:2], whole.source, whole.fingerprint, h_unit=whole.h_unit), path)
    solved.clear()
    list(climb(study, folder))
    assert solved == [(third, 1)]
    for name in study.cases:
        straight = read_ladder(tmp_path / "straight" / name / LADDER)
        assert numbers(read_ladder(folder / name / LADDER)) == numbers(straight)


def test_a_new_or_changed_case_is_solved_without_the_others(
    tmp_path: Path, solved: list[tuple[int, int]]
) -> None:
    folder = tmp_path / "out"
    list(climb(loaded(tmp_path, MODEL + CASES + REST), folder))
    kept = (folder / "lift" / LADDER).read_bytes()
    solved.clear()
    more = MODEL + CASES.replace("tip_tension = 2", "tip_tension = 3") + MORE + REST
    list(climb(loaded(tmp_path, more), folder))
    assert [cases for _, cases in solved] == [2, 2, 2], "the changed case and the new one"
    assert (folder / "lift" / LADDER).read_bytes() == kept


def test_a_ladder_that_ends_early_says_so_in_every_case(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """With 1 MB an unknown the third level is foretold to be above the budget."""
    study = loaded(tmp_path, MODEL + CASES + REST)
    sizes = iter(climbing.unknowns(study))
    monkeypatch.setattr(climbing, "peak_memory", lambda: float(next(sizes)))
    budget = Budget(memory=0.5 * climbing.unknowns(study)[2])
    assert len(list(climb(study, tmp_path, budget))) == 2
    remarks = [read_ladder(tmp_path / name / LADDER).remarks for name in study.cases]
    assert remarks[0] == remarks[1] and "level 3" in remarks[0][0]


@pytest.mark.parametrize("model", rooms.names("models"))
def test_the_case_in_a_template_can_be_taken(model: str, tmp_path: Path) -> None:
    text = study_template(model)
    found = loaded(tmp_path, text.replace("# [cases.half_load]\n# ", "[cases.half_load]\n"))
    assert list(found.cases) == ([] if "# [cases.half_load]" not in text else ["half_load"])
    for case in found.cases.values():
        usual, own = found.problem(), case.problem()
        assert usual.loads != own.loads and np.isclose(usual.part.size, own.part.size, rtol=0.0)
