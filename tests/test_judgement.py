"""Judging a ladder: every quantity gets a verdict, checks reach the right ones, nothing is solved."""

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from convergence import judgement, rooms
from convergence.climbing import climb
from convergence.fem import solution as solution_module
from convergence.judgement import facts_of, judge, spoiled
from convergence.results import Check, Facts, Findings, Ladder, Level, Quantity
from convergence.study import load

H = np.array([16.0, 8.0, 4.0, 2.0, 1.0])
STUDIES = Path(judgement.__file__).parents[1] / "studies"
NAN = float("nan")


def table(h: np.ndarray = H, **columns: object) -> Ladder:
    levels = []
    for number, size in enumerate(h):
        values = {name.replace("__", "."): float(column[number]) for name, column in columns.items()}
        levels.append(Level(float(size), int(1e4 / size**2), int(2e4 / size**2), 0.1, values))
    return Ladder(tuple(levels), "table.csv")


def quantity(name: str = "f", **said: object) -> Quantity:
    settings: dict = {"kind": "displacement", "unit": "mm", "formal_order": 2.0, "relative": 0.05}
    return Quantity(name, **(settings | said))


def judged(ladder: Ladder, *quantities: Quantity, facts: Facts | None = None) -> Findings:
    return judge(ladder, quantities or (quantity(),), facts or Facts(), "title")


@pytest.mark.parametrize("order", [1.0, 2.0, 4.0])
@pytest.mark.parametrize("h", [H, H[-3:], np.array([9.0, 6.0, 4.0, 2.5])])
def test_a_power_law_from_a_table(order: float, h: np.ndarray) -> None:
    """f0 + c h^p: the limit lies in the interval, and the verdict follows the tolerance."""
    ladder = table(h, f=12.0 - 0.02 * h**order)
    wide = judged(ladder, quantity(formal_order=order, absolute=1e6)).verdicts["f"]
    assert wide.word == "sound"
    assert wide.observed_order == pytest.approx(order, abs=1e-6)
    assert wide.low <= 12.0 <= wide.high and wide.low < wide.limit < wide.high
    assert wide.coverage is not None and wide.coverage.levels == len(h)
    assert wide.coverage.knowledge == "kind"
    tight = judged(ladder, quantity(formal_order=order, relative=1e-7)).verdicts["f"]
    assert tight.word == "refine"
    assert (tight.low, tight.high) == (wide.low, wide.high), "the tolerance does not move the interval"


def test_everything_is_there() -> None:
    ladder = table(f=12.0 - 0.02 * H**2, g=3.0 + 0.1 * H)
    findings = judged(ladder, quantity("f"), quantity("g", kind="energy", formal_order=1.0))
    assert set(findings.verdicts) == set(findings.estimates) == {"f", "g"}
    for name in ("f", "g"):
        assert set(findings.estimates[name]) == set(rooms.names("estimators"))
    assert [check.name for check in findings.checks] == rooms.names("checks")
    assert findings.facts.kinds == {"f": "displacement", "g": "energy"}
    low, high = findings.facts.intervals["f"]
    assert (low, high) == (findings.verdicts["f"].low, findings.verdicts["f"].high)
    assert (findings.title, findings.ladder) == ("title", ladder)
    assert findings.all_sound == all(verdict.word == "sound" for verdict in findings.verdicts.values())


def test_a_quantity_the_ladder_does_not_have() -> None:
    verdict = judged(table(g=H), quantity("f")).verdicts["f"]
    assert verdict.word == "unproven" and np.isnan(verdict.value)
    assert "No interval: the finest level has no value." in verdict.reasons


def test_no_level_at_all() -> None:
    findings = judged(Ladder((), "empty"))
    assert findings.verdicts["f"].word == "unproven" and not findings.all_sound


def test_balance_out_of_order_spoils_every_quantity() -> None:
    off = np.array([0.0, 0.0, 1e-3, 0.0, 0.0])
    columns = {
        f"equilibrium__{name}": 0.0 * H for name in ("moment", "load_x", "load_y", "reaction_x", "reaction_y")
    }
    ladder = table(f=12.0 - 0.02 * H**2, g=3.0 + 0.001 * H, equilibrium__force=off, **columns)
    findings = judged(ladder, quantity("f", relative=0.5), quantity("g", relative=0.5))
    for verdict in findings.verdicts.values():
        assert verdict.word == "unproven"
        assert verdict.reasons[0] == "Loads and reactions are out of balance."


def test_differences_below_the_balance_are_no_evidence() -> None:
    """A ladder whose solver leaves 1e-9 of the forces: changes of 1e-10 of the value are noise."""
    f = 5.0 + 5e-10 * np.array([1.0, -1.0, 1.0, -1.0, 1.0])
    noisy = table(f=f, solver_residual__relative=np.full(5, 1e-9))
    assert judged(noisy).verdicts["f"].behaviour == "constant"
    clean = table(f=5.0 + 5e-9 * np.array([1.0, -1.0, 1.0, -1.0, 1.0]), solver_residual__relative=0.0 * H)
    assert judged(clean).verdicts["f"].behaviour != "constant"


def test_printed_digits_are_known() -> None:
    ladder = table(f=[10.4, 10.42, 10.42, 10.43, 10.42])
    assert judged(replace(ladder, resolution={"f": 0.005})).verdicts["f"].behaviour == "constant"
    assert judged(ladder).verdicts["f"].behaviour != "constant"


def test_which_failures_concern_a_quantity() -> None:
    checks = (
        Check("one", False, "x.", {"f": "first"}),
        Check("two", False, "x.", {"": "for all"}, leads_to="singular"),
        Check("three", True, "x.", {"f": "passed, so not counted"}),
        Check("four", None, "x.", {"f": "not applicable"}),
        Check("five", False, "x.", {"f": "second of its word"}),
        Check("six", False, "x."),
    )
    assert spoiled(checks, "f") == {"unproven": "first", "singular": "for all"}
    assert spoiled(checks, "g") == {"singular": "for all"}
    assert spoiled((), "f") == {}


@pytest.mark.parametrize("file", sorted(STUDIES.glob("*.toml")), ids=lambda file: file.stem)
def test_facts_of_the_studies(file: Path) -> None:
    """What theory says beforehand: a stress is covered only by corners within its own reach."""
    study = load(file)
    facts = facts_of(study)
    strengths = {region: found and found.strength for region, found in facts.yields.items()}
    if study.table is not None:
        assert facts.dimension == 2 and strengths == {"": study.materials["material"].yield_strength}
        assert facts.corners is None and facts.degree is None and facts.covered == {}
        return
    problem = study.problem()
    assert facts.dimension == problem.part.dimension
    assert strengths == {region: material.yield_strength for region, material in problem.materials.items()}
    assert facts.corners is not None and facts.size is not None
    assert facts.degree == study.ladder.degree
    assert set(facts.covered) == set(facts.components) == {q.name for q in study.quantities}
    for q in study.quantities:
        assert set(facts.covered[q.name]) <= set(facts.corners)
        if not q.kind.endswith("_stress"):
            assert all(corner.exponent <= 0.0 for corner in facts.covered[q.name]), "a force on a point"


def test_the_sharp_study_covers_its_corner_and_the_filleted_one_none() -> None:
    sharp = facts_of(load(STUDIES / "bracket_sharp.toml"))
    assert [corner.name for corner in sharp.covered["corner_stress"]] == ["inner_corner"]
    assert sharp.covered["arm_stress"] == ()
    filleted = facts_of(load(STUDIES / "bracket_filleted.toml"))
    assert all(corners == () for corners in filleted.covered.values())
    assert sharp.exponent == pytest.approx(0.5444837368, abs=1e-9)  # Williams 1952, 270 degrees, free


def test_an_orthotropic_part_has_corners_that_are_not_examined(tmp_path: Path) -> None:
    """The clamped corners of a wooden arm: within the reach of a peak over all, not of a stress elsewhere."""
    wood = (
        "young = 12000.0\nyoung_y = 800.0\nyoung_z = 500.0\npoisson = 0.4\npoisson_yz = 0.4\n"
        "poisson_zx = 0.02\nshear_xy = 700.0\nshear_yz = 60.0\nshear_zx = 700.0"
    )
    steel = (STUDIES / "arm.toml").read_text()
    start, end = steel.index("young"), steel.index("[ladder]")
    (tmp_path / "arm.toml").write_text(f"{steel[:start]}{wood}\n\n{steel[end:]}")
    facts = facts_of(load(tmp_path / "arm.toml"))
    assert facts.corners == () and facts.covered["root_peak"] == ()
    reach = {corner.name for corner in facts.doubtful["root_peak"]}
    assert {"root_lower", "root_upper"} <= reach == {corner.name for corner in facts.unexamined}
    assert facts.doubtful["mid_span_stress"] == facts.doubtful["tip_deflection"] == ()
    assert facts_of(load(STUDIES / "arm.toml")).unexamined == ()


def test_judging_solves_nothing(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    file = tmp_path / "patch.toml"
    file.write_text((STUDIES / "patch.toml").read_text())
    study = load(file)
    ladder = Ladder(tuple(climb(study, tmp_path / "out")), "patch", study.fingerprint)

    def refuse(*_: object) -> Callable:
        raise AssertionError("solved while judging")

    monkeypatch.setattr(solution_module, "stiffness", refuse)
    monkeypatch.setattr(solution_module, "Equations", refuse)
    findings = judge(ladder, study.quantities, facts_of(study), study.title)
    assert findings.all_sound, "a linear field is exact on every mesh"
    assert all(check.passed is not False for check in findings.checks)
