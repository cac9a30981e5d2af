"""What a user reads of forces on points, of edges, of materials that meet, and of corners not examined."""

from dataclasses import replace

import pytest

from convergence.checks._corner import described
from convergence.checks.concentrated_force import concentrated_force
from convergence.checks.energy_norm import energy_norm
from convergence.checks.peak_region import peak_region
from convergence.checks.singular_peak import singular_peak
from convergence.checks.unexamined_corner import unexamined_corner
from convergence.corner import Corner
from convergence.judgement import judge
from convergence.results import Facts, Ladder, Level, Quantity

NAN = float("nan")
HOOK = Corner("tip_lower", ((1200.0, -60.0),), ("tip_lower",), 92.86, ("point", "force"), 0.0)
FOOT = Corner("foot", ((1.0, 2.0, 3.0),), ("foot",), 0.0, ("point", "support"), -1.0)
HEEL = Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5445)
RING = ((1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (1.0, 0.0, 0.0))
RIM = Corner("a-b-a", RING, ("a", "b", "a"), 270.0, ("free", "free"), 0.5445)
WELD = Corner("a-b", ((0.0, 0.0, 0.0), (0.0, 0.0, 9.0)), ("a", "b"), 90.0, ("clamped", "free"), 0.758)
SEAM = Corner("c", ((5.0, 5.0),), ("c",), 360.0, ("bonded", "bonded"), 0.9)
INNER = Corner("c-d", ((5.0, 5.0, 0.0), (5.0, 5.0, 9.0)), ("c", "d"), 360.0, ("bonded", "bonded"), 0.9)
WORDS = {
    HOOK: "the point tip_lower at (1200, -60), where a force acts",
    FOOT: "the point foot at (1, 2, 3), where a support takes a force",
    HEEL: "the free-free corner heel of 270° at (0, 0)",
    RIM: "the free-free edge a-b-a of 270° all around through (1, 0, 0)",
    WELD: "the clamped-free edge a-b of 90° from (0, 0, 0) to (0, 0, 9)",
    SEAM: "the point c at (5, 5), where materials meet",
    INNER: "the edge c-d from (5, 5, 0) to (5, 5, 9), where materials meet",
}


def ladder_of(*values: float, place: tuple[float, ...] = (), **records: tuple[float, ...]) -> Ladder:
    levels = []
    for n, value in enumerate(values):
        numbers = {"f": value, **dict(zip(("f.x", "f.y", "f.z"), place, strict=False))}
        numbers |= {f"singular_peak.{name}": column[n] for name, column in records.items()}
        levels.append(Level(0.5**n, 4**n, 4**n, 0.0, numbers))
    return Ladder(tuple(levels), "table")


def facts_of(kind: str, *corners: Corner, **more: object) -> Facts:
    return Facts(corners=corners, covered={"f": corners}, kinds={"f": kind}, **more)  # type: ignore[arg-type, dict-item]


@pytest.mark.parametrize("corner", WORDS)
def test_corners_in_words(corner: Corner) -> None:
    assert described(corner) == WORDS[corner]


@pytest.mark.parametrize("corner", WORDS)
@pytest.mark.parametrize("measured", [True, False])
def test_a_stress_on_each_kind_of_corner(corner: Corner, measured: bool) -> None:
    """Names the corner, how stress grows by theory and on the levels, and what to report instead."""
    growing = (1.0, 2.0, 4.0)
    ladder = ladder_of(*growing, **({corner.name: growing} if measured else {}))
    reason = singular_peak(ladder, facts_of("point_stress", corner)).spoils["f"]
    assert reason.startswith(f"the value sits on {WORDS[corner]}; stress there grows like h^")
    assert ("the levels do not measure it" in reason) is not measured
    assert ("real radius" in reason) is (corner in (HEEL, RIM, WELD))
    assert ("spread the force over" in reason) is (corner is HOOK)
    assert ("spread the support over" in reason) is (corner is FOOT)
    assert "nan" not in reason and "point-" not in reason and "bonded" not in reason


def test_growth_at_points() -> None:
    """1/r in a plane, 1/r² in a solid (Flamant 1892, Boussinesq 1885)."""
    ladder = ladder_of(1.0, 2.0, 4.0, tip_lower=(1.0, 2.0, 4.0))
    plane = singular_peak(ladder, facts_of("point_stress", HOOK)).spoils["f"]
    assert "like h^-1 without limit by theory, like h^-1.00 in the cells that touch it" in plane
    solid = singular_peak(ladder, facts_of("point_stress", FOOT)).spoils["f"]
    assert "like h^-2 without limit by theory, the levels do not measure it" in solid
    region = peak_region(ladder_of(4.0, 3.0, 2.0), facts_of("peak_stress", HOOK)).spoils["f"]
    assert f"{WORDS[HOOK]}; stress there grows like h^-1 by theory" in region


@pytest.mark.parametrize(
    ("corner", "kind", "words"),
    [
        (HOOK, "displacement", "a force acts on the point tip_lower at (1200, -60): the displacement there"),
        (HOOK, "energy", "a force acts on the point tip_lower at (1200, -60): the energy has no limit"),
        (FOOT, "rotation", "a support takes a force at the point foot at (1, 2, 3): the rotation there"),
    ],
)
def test_displacement_and_energy_at_points(corner: Corner, kind: str, words: str) -> None:
    check = concentrated_force(ladder_of(1.0, 2.0, 3.0), facts_of(kind, corner))
    assert check.passed is False and check.leads_to == "singular"
    assert check.spoils["f"].startswith(words)
    assert f"spread the {corner.sides[1]} over the area" in check.spoils["f"]


def test_the_energy_norm_makes_no_statement_where_a_force_acts_on_a_point() -> None:
    columns = {"estimated": 0.03, "absolute": 9.0, "energy": 5.0, "identity": 1.0}
    numbers = {f"energy_norm.{name}": value for name, value in columns.items()}
    ladder = Ladder(tuple(Level(0.5**n, 4**n, 4**n, 0.0, numbers) for n in range(3)), "table")
    told = energy_norm(ladder, facts_of("energy", HOOK))
    assert told.passed is None and "the point tip_lower: the energy has no limit" in told.finding
    assert energy_norm(ladder, facts_of("energy", HEEL)).passed is not None


UNKNOWN = replace(HEEL, exponent=NAN)
SILENT = Facts(corners=(), unexamined=(UNKNOWN,), doubtful={"f": (UNKNOWN,)}, kinds={"f": "peak_stress"})
STRESS = Quantity("f", "peak_stress", "MPa", 2.0, relative=0.2)


def test_a_peak_that_grows_on_an_unexamined_corner_is_unproven() -> None:
    ladder = ladder_of(9.0, 9.9, 10.1, place=(0.1, 0.1))
    check = unexamined_corner(ladder, SILENT)
    assert check.passed is False and check.leads_to == "unproven"
    assert "the corner heel at (0, 0) and grows" in check.spoils["f"]
    assert judge(ladder, (STRESS,), SILENT, "t").verdicts["f"].word == "unproven"
    assert judge(ladder, (STRESS,), Facts(corners=()), "t").verdicts["f"].word == "sound"


@pytest.mark.parametrize("values", [(9.0, 9.9, 10.1), (11.0, 10.2, 10.0)])
def test_a_peak_elsewhere_keeps_its_word_with_a_remark(values: tuple[float, ...]) -> None:
    ladder = ladder_of(*values, place=(50.0, 50.0))
    assert unexamined_corner(ladder, SILENT).passed is None
    verdict = judge(ladder, (STRESS,), SILENT, "t").verdicts["f"]
    assert verdict.word == "sound"
    assert verdict.reasons[-1].startswith("Within its reach, not examined: heel,")


def test_nothing_is_said_where_all_was_examined() -> None:
    ladder = ladder_of(9.0, 9.9, 10.1, place=(0.1, 0.1))
    facts = replace(SILENT, unexamined=(), doubtful={"f": ()})
    assert unexamined_corner(ladder, facts).passed is True
    assert not any("not examined" in r for r in judge(ladder, (STRESS,), facts, "t").verdicts["f"].reasons)
    assert unexamined_corner(ladder, Facts()).passed is None
