"""Two ladders side by side: those of one model meet, revisions part by what the closed form says."""

import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from convergence.climbing import climb
from convergence.comparison import Compared, Comparison, compare
from convergence.coverage import WITH_COMPANION
from convergence.errors import InputError
from convergence.intake.ladder_file import read_ladder
from convergence.judgement import facts_of, judge
from convergence.results import Facts, Findings, Kind, Ladder, Level, Quantity
from convergence.study import load

H = np.array([8.0, 4.0, 2.0, 1.0])
NAMES = ("a.csv", "b.csv")
BARREL = """[model]
name = "thick_cylinder"
inner_radius = 30.0
outer_radius = {outer}
pressure = 21.0
[material]
young = 210000.0
poisson = 0.3
[ladder]
divisions = 2
levels = {levels}
shape = "{shape}"
degree = {degree}
[quantities.bore_hoop_stress]
measure = "stress"
at = "bore_x"
component = "yy"
relative_tolerance = 0.02
[quantities.bore_growth]
measure = "displacement"
at = "bore_x"
component = "x"
relative_tolerance = 0.01
"""


def findings(
    *columns: tuple[Quantity, np.ndarray], h: np.ndarray = H, resolution: dict[str, float] | None = None
) -> Findings:
    values = [{q.name: float(f[k]) for q, f in columns} for k in range(len(h))]
    levels = tuple(Level(float(size), 10, 20, 0.1, of) for size, of in zip(h, values, strict=True))
    ladder = Ladder(levels, "test", resolution=resolution or {}, h_unit="mm")
    return judge(ladder, tuple(q for q, _ in columns), Facts(degree=1), "test")


def tip(name: str = "tip", kind: Kind = "displacement", unit: str = "mm", degree: int | None = 1) -> Quantity:
    return Quantity(name, kind, unit, degree=degree, formal_order=2.0, relative=0.05)


def errors(limit: float, error: float) -> np.ndarray:
    return limit + error * H**2


def one(first: Findings, second: Findings, revisions: bool = False) -> Compared:
    (found,) = compare(first, second, names=NAMES, match={}, revisions=revisions).compared
    return found


def lame(outer: float) -> dict[str, float]:
    """Hoop stress and growth of the bore, plane strain (Timoshenko & Goodier, 3rd ed., art. 28)."""
    inner, p, young, nu = 30.0, 21.0, 210000.0, 0.3
    ratio = (outer**2 + inner**2) / (outer**2 - inner**2)
    growth = p * inner * (1 + nu) / young * ((1 - 2 * nu) * inner**2 + outer**2) / (outer**2 - inner**2)
    return {"bore_hoop_stress": p * ratio, "bore_growth": growth}


@pytest.fixture(scope="module")
def barrels(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Findings]:
    """The barrel on triangles of degree 1 and quadrilaterals of degree 2, and with a wall 3 % thicker."""
    asked = {
        "triangles": (45.0, 5, "triangle", 1),
        "quadrilaterals": (45.0, 3, "quadrilateral", 2),
        "thicker": (45.45, 3, "quadrilateral", 2),
    }
    found = {}
    for name, (outer, levels, shape, degree) in asked.items():
        folder: Path = tmp_path_factory.mktemp(name)
        text = BARREL.format(outer=outer, levels=levels, shape=shape, degree=degree)
        (folder / "barrel.toml").write_text(text)
        study = load(folder / "barrel.toml")
        list(climb(study, folder))
        ladder = read_ladder(folder / "ladder.csv")
        found[name] = judge(ladder, study.quantities, facts_of(study), study.title)
    return found


def test_two_element_types_of_one_part_meet_and_hold_the_closed_form(barrels: dict[str, Findings]) -> None:
    exact = lame(45.0)
    for first, second in (("triangles", "quadrilaterals"), ("quadrilaterals", "triangles")):
        found = compare(barrels[first], barrels[second], names=NAMES, match={})
        assert found.all_meet and [each.first.name for each in found.compared] == list(exact)
        for each in found.compared:
            assert each.distance <= 1.0 and each.gap == 0.0
            assert each.joint is not None and each.joint.coverage is not None
            assert each.joint.coverage.knowledge == WITH_COMPANION
            assert each.joint.low <= exact[each.first.name] <= each.joint.high
            width = each.joint.high - each.joint.low
            assert width <= each.verdicts[0].high - each.verdicts[0].low


def test_a_wall_three_per_cent_thicker_parts(barrels: dict[str, Findings]) -> None:
    for first in ("triangles", "quadrilaterals"):
        found = compare(barrels[first], barrels["thicker"], names=NAMES, match={}, revisions=True)
        assert not found.all_meet
        for each in found.compared:
            before, after = lame(45.0)[each.first.name], lame(45.45)[each.first.name]
            assert each.word == "part" and each.distance > 1.0 and each.joint is None
            assert each.low <= after - before <= each.high < 0.0, "a thicker wall is stressed less"


def test_distance_and_gap_are_those_of_the_intervals() -> None:
    first, second = findings((tip(), errors(10.0, 0.01))), findings((tip(), errors(12.0, 0.01)))
    found = one(first, second)
    a, b = found.verdicts
    halves = 0.5 * (a.high - a.low) + 0.5 * (b.high - b.low)
    assert found.word == "part" and found.joint is None
    assert found.gap == pytest.approx(b.low - a.high)
    assert found.distance == pytest.approx(1.0 + found.gap / halves)
    assert (found.low, found.difference, found.high) == pytest.approx((2 - halves, 2.0, 2 + halves))


def test_the_order_of_both_does_not_matter() -> None:
    first, second = findings((tip(), errors(10.0, 0.01))), findings((tip(), errors(10.005, -0.02)))
    found, turned = one(first, second), one(second, first)
    assert found.word == turned.word and found.distance == pytest.approx(turned.distance)
    assert (found.low, found.high) == pytest.approx((-turned.high, -turned.low))


def test_nothing_is_said_together_where_it_was_not_measured() -> None:
    """The bank's factor holds where kind and degree of both are known."""
    first, bare = findings((tip(), errors(10.0, 0.01))), findings((tip(degree=None), errors(10.0, -0.01)))
    assert one(first, findings((tip(), errors(10.0, -0.01)))).joint is not None
    found = one(first, bare)
    assert found.word == "meet" and found.joint is None


def test_values_that_do_not_move_are_compared_by_their_digits() -> None:
    fixed = np.full(4, 12.5)
    same = findings((tip(), fixed), resolution={"tip": 0.05})
    assert one(same, same).word == "meet" and one(same, same).distance == 0.0
    other = findings((tip(), fixed + 1.0), resolution={"tip": 0.05})
    assert one(same, other).word == "part" and math.isfinite(one(same, other).distance)


def spoilt(found: Findings, **changes: object) -> Findings:
    verdicts = {name: replace(v, **changes) for name, v in found.verdicts.items()}  # type: ignore[arg-type]
    return replace(found, verdicts=verdicts)


def test_what_has_no_limit_or_no_interval_cannot_be_compared() -> None:
    good, nan = findings((tip(), errors(10.0, 0.01))), math.nan
    single = findings((tip(), errors(10.0, 0.01)[-1:]), h=H[-1:])
    for bad, why in (
        (spoilt(good, word="singular", low=nan, high=nan), "The second has no limit (singular)."),
        (single, "The second has no interval. No interval: one level says nothing"),
        (
            findings((tip(kind="reaction"), errors(10.0, 0.01))),
            "The first is a displacement, the second a reac",
        ),
    ):
        found = one(good, bad)
        assert found.word == "cannot be compared" and found.reasons[0].startswith(why)
        assert math.isnan(found.distance) and not compare(good, bad, names=NAMES, match={}).all_meet


def test_an_unproven_partner_is_compared_and_said_so() -> None:
    good = findings((tip(), errors(10.0, 0.01)))
    found = one(good, spoilt(good, word="unproven", reasons=("Loads are out of balance.",)))
    assert found.word == "meet" and found.reasons == ("The second is unproven. Loads are out of balance.",)


def matched(match: dict[str, str]) -> Comparison:
    first = findings((tip("tip"), errors(10.0, 0.01)), (tip("root"), errors(5.0, 0.01)))
    second = findings((tip("u"), errors(10.0, 0.01)), (tip("root"), errors(5.0, 0.01)))
    return compare(first, second, names=NAMES, match=match)


def test_quantities_are_matched_by_name_or_as_is_said() -> None:
    found = matched({"tip": "u"})
    assert [(each.first.name, each.second.name) for each in found.compared] == [
        ("tip", "u"),
        ("root", "root"),
    ]
    assert found.alone == ((), ()) and matched({}).alone == (("tip",), ("u",))
    taken = matched({"tip": "root"})
    assert [(each.first.name, each.second.name) for each in taken.compared] == [("tip", "root")]
    assert taken.alone == (("root",), ("u",))


def test_names_and_units_that_are_wrong_are_all_named() -> None:
    with pytest.raises(InputError) as caught:
        matched({"tipp": "u", "root": "v"})
    assert [str(fault) for fault in caught.value.faults] == [
        "--match tipp=u: a.csv has no such quantity, got 'tipp'; did you mean 'tip'?",
        "--match root=v: b.csv has no such quantity, got 'v'; known: root, u",
    ]
    first, second = findings((tip(), errors(10.0, 0.01))), findings((tip(unit="m"), errors(0.01, 1e-5)))
    with pytest.raises(InputError) as caught:
        compare(first, second, names=NAMES, match={})
    assert str(caught.value) == "b.csv: 'tip': another unit, got 'm'; mm, as 'tip' in a.csv"
    other = findings((tip("sag"), errors(10.0, 0.01)))
    with pytest.raises(InputError, match=r'the name of one in a\.csv .* --match "tip=sag"'):
        compare(first, other, names=NAMES, match={})
