"""The exponent of growth with its interval, and what is made of the field, on made-up levels."""

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from convergence.checks._field import field_of
from convergence.checks._growth import Growth, growth, growth_words
from convergence.checks._instead import instead, missing
from convergence.checks.singular_field import singular_field
from convergence.checks.singular_peak import singular_peak
from convergence.corner import Corner
from convergence.judgement import judge
from convergence.results import Facts, Findings, Ladder, Level, Quantity

HEEL = Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5)
FACTS = Facts(corners=(HEEL,), covered={"f": (HEEL,)}, components={"f": "yy"})
STRENGTH, SECOND = 60.0, 2.0
CORE = 0.4  # of a place's error on the level whose cells are as large as its distance


def sizes(levels: int, ratio: float = 2.0) -> np.ndarray:
    return np.asarray(8.0 * ratio ** -np.arange(float(levels)))


@pytest.mark.parametrize("exponent", [0.5, 0.75, 0.93])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
def test_a_power_is_found_exactly(exponent: float, ratio: float) -> None:
    h = sizes(5, ratio)
    found = growth(h, 3.0 * h ** (exponent - 1.0))
    assert found.exponent == pytest.approx(exponent, abs=1e-12)
    assert found.half_width == pytest.approx(0.0, abs=1e-10) and found.law == "power"


def test_growth_like_log_h_is_told_apart() -> None:
    h = sizes(5)
    assert growth(h, 5.0 + 2.0 * np.log(8.0 / h)).law == "log h"
    assert growth(h[:3], 5.0 + 2.0 * np.log(8.0 / h[:3])).law == "", "three levels prove nothing"
    assert growth(h, np.full(5, 3.0)).law == "", "no growth, no law"


@pytest.mark.parametrize("levels", [4, 5, 6, 7])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
@pytest.mark.parametrize("share", [-0.3, 0.3])
def test_the_interval_holds_the_exponent_while_it_settles(levels: int, ratio: float, share: float) -> None:
    """s = h^(λ−1) (1 + c h^0.5): the slope settles by 0.71 with each halving, faster than is assumed."""
    h = sizes(levels, ratio)
    found = growth(h, h**-0.4 * (1.0 + share * (h / h[0]) ** 0.5))
    assert found.low <= 0.6 <= found.high
    finer = growth(
        sizes(levels + 1, ratio),
        sizes(levels + 1, ratio) ** -0.4 * (1.0 + share * (sizes(levels + 1, ratio) / h[0]) ** 0.5),
    )
    assert finer.half_width < found.half_width


def test_too_few_levels() -> None:
    h = sizes(3)
    two = growth(h[:2], h[:2] ** -0.5)
    assert two.exponent == pytest.approx(0.5) and np.isnan(two.half_width) and two.agrees(0.5) is None
    for intensity in (np.array([1.0]), np.array([np.nan, 2.0]), np.array([0.0, -1.0])):
        assert np.isnan(growth(h[: len(intensity)], intensity).exponent)
    assert np.isnan(growth(np.array([]), np.array([])).exponent)


@pytest.mark.parametrize(
    ("found", "theory", "words"),
    [
        (Growth(np.nan, np.nan), 0.5, "the levels do not measure it"),
        (Growth(0.52, np.nan), 0.5, "the levels give 0.520, too few for an interval"),
        (Growth(0.52, 0.4), 0.5, "the levels give 0.520 (0.120 to 0.920), too wide to judge theory by"),
        (Growth(0.52, 0.03, "power"), 0.5, "the levels give 0.520 (0.490 to 0.550), which agrees"),
        (Growth(0.93, 0.01), 0.935, "(0.920 to 0.940), which agrees (growth like log h fits as well)"),
        (Growth(0.8, 0.1, "log h"), 0.5, "and fit growth like log h, which does not agree"),
        (Growth(0.6, 0.03, "power"), 0.5, "does not agree: coarse levels, or a load that leaves the"),
    ],
)
def test_words(found: Growth, theory: float, words: str) -> None:
    assert words in growth_words(found, theory)


def levels_of(count: int, *, surfaces: bool = True, single: float = 1.0) -> Ladder:
    """s = K r^-0.5 + 2 along y; the error at r is 0.4 (h / r)² of it, that of the surface 0.1 h²."""
    made = []
    for h in sizes(count):
        values = {"f": h**-0.5, "singular_peak.heel": h**-0.5}
        values |= {"singular_field.heel.reach": 40.0, "singular_field.heel.single": single}
        for place in range(7):
            r = 40.0 * 0.5**place
            stress = (STRENGTH * r**-0.5 + SECOND) * (1.0 - CORE * min(1.0, (h / r) ** 2))
            own = {"xx": 0.0, "yy": stress, "zz": 0.0, "xy": 0.0, "across": stress}
            values |= {f"singular_field.heel.{place}.{axis}": value for axis, value in own.items()}
        if surfaces:
            side = {"thickness": 80.0, "hot_spot": 50.0 + 0.1 * h**2, "membrane": 10.0, "bending": 30.0 + h}
            values |= {f"singular_field.heel.+x.{key}": value for key, value in side.items()}
        made.append(Level(float(h), 100, 200, 0.0, values))
    return Ladder(tuple(made), "test", h_unit="mm")


def judged(ladder: Ladder, facts: Facts = FACTS) -> Findings:
    return judge(ladder, (Quantity("f", "point_stress", "MPa", 2.0, relative=0.05),), facts, "test")


def test_clean_places() -> None:
    """Sizes 8 to 0.5: the error at r changes by 0.4 · 3 · (0.5/r)² from level to level, 5 % at r = 2.45."""
    field = field_of(levels_of(5), HEEL)
    assert field.distances == pytest.approx([40.0, 20.0, 10.0, 5.0, 2.5, 1.25, 0.625])
    assert field.clean == 5
    assert (
        field.pollution("mm")
        == "from 2.5 mm (5 cells of the finest mesh) on the last two levels agree within 5 %"
    )
    assert field_of(levels_of(1), HEEL).clean == 0, "one level shows no agreement"
    assert "up to 40 mm from it" in field_of(levels_of(1), HEEL).pollution("mm")
    assert "not recorded" in field_of(levels_of(3), replace(HEEL, name="toe")).pollution("mm")


def test_what_to_report_instead() -> None:
    findings = judged(levels_of(6))
    found = {one.key: one for one in instead(findings.ladder, findings.facts, "f")}
    keys = ["at 5", "at 4", "at 3", "intensity", "+x.hot_spot", "+x.membrane", "+x.bending"]
    assert list(found) == [f"f: {key}" for key in keys]
    nearest = found["f: at 5"]
    assert nearest.label == "stress yy 1.25 mm from the corner" and nearest.unit == "MPa"
    assert nearest.low <= STRENGTH * 1.25**-0.5 + SECOND <= nearest.high
    intensity = found["f: intensity"]
    assert intensity.low <= STRENGTH <= intensity.high and intensity.unit == "MPa mm^0.5"
    assert intensity.doubt > 0.0
    assert found["f: +x.membrane"].value == 10.0 and found["f: +x.membrane"].word(0.05) == "sound"
    assert found["f: +x.hot_spot"].low <= 50.0 <= found["f: +x.hot_spot"].high
    assert found["f: +x.bending"].word(1e-6) == "refine"
    assert "along +x (0.4 t and 1.0 t, t = 80 mm)" in found["f: +x.hot_spot"].label
    assert missing(findings.ladder, findings.facts, "f") == ()
    (reason,) = findings.verdicts["f"].reasons
    assert f"report instead: {nearest.words}; {found['f: at 4'].words}; or a mean" in reason


def test_what_the_model_does_not_allow_is_said() -> None:
    told = missing(levels_of(4, surfaces=False, single=0.0), replace(FACTS, kinds={"f": "point_stress"}), "f")
    assert [sentence.split(":")[0] for sentence in told] == [
        "No generalised stress intensity",
        "No hot-spot stress, membrane and bending",
    ]
    one = missing(levels_of(1), replace(FACTS, kinds={"f": "point_stress"}), "f")
    assert one[0].startswith("No stress at a distance") and "two clean places" in one[1]


def test_a_corner_without_a_record() -> None:
    """A fifth corner, a point of a solid, an older ladder: said, and the reason keeps its advice."""
    toe = replace(HEEL, name="toe")
    facts = replace(FACTS, corners=(toe,), covered={"f": (toe,)}, kinds={"f": "point_stress"})
    ladder = levels_of(4)
    assert instead(ladder, facts, "f") == ()
    assert missing(ladder, facts, "f") == ("The levels hold no numbers of the field around toe.",)
    assert "report the stress at a stated distance, a mean" in singular_peak(ladder, facts).spoils["f"]
    assert singular_field(ladder, facts).passed is None


@pytest.mark.parametrize("kind", ["displacement", "energy"])
def test_only_stresses_have_something_instead(kind: str) -> None:
    facts = replace(FACTS, kinds={"f": kind})
    assert instead(levels_of(4), facts, "f") == () and missing(levels_of(4), facts, "f") == ()


@pytest.mark.parametrize("levels", [1, 2])
def test_two_levels_prove_nothing(levels: int) -> None:
    """One gives values alone, two an interval for orientation; neither settles a value."""
    findings = judged(levels_of(levels))
    found = instead(findings.ladder, findings.facts, "f")
    assert found and all(one.word(1e9) == "unproven" for one in found)
    assert all(("without an interval" in one.words) == (levels == 1) for one in found)


@pytest.mark.parametrize("change", [lambda f: f, lambda f: -f])
def test_signs(change: Callable[[float], float]) -> None:
    """Compression is reported with its sign."""
    ladder = levels_of(5)
    levels = tuple(
        replace(
            level,
            values={k: v if k.endswith(("h", "e", "s")) else change(v) for k, v in level.values.items()},
        )
        for level in ladder.levels
    )
    findings = judged(replace(ladder, levels=levels))
    first = instead(findings.ladder, findings.facts, "f")[0]
    assert np.sign(first.value) == np.sign(change(1.0)) and first.low <= first.value <= first.high
