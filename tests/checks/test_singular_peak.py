"""What has no limit: sharp against filleted, growth in bare tables, and sequences that only look like it."""

from collections.abc import Callable
from dataclasses import replace
from functools import partial

import numpy as np
import pytest

from convergence.checks._growth import growth
from convergence.checks.peak_region import peak_region
from convergence.checks.singular_peak import singular_peak
from convergence.corner import Corner
from convergence.corners.singular_corners import singular_corners
from convergence.judgement import judge
from convergence.quantities.displacement import displacement
from convergence.quantities.peak_stress import peak_stress
from convergence.quantities.stress import stress
from convergence.results import Facts, Findings, Ladder, Level, Quantity, Verdict

LAMBDA = 0.5444837367825  # 270 degrees, free on both sides: Williams 1952, J. Appl. Mech. 19:526
NOTCH = (309.0, 285.0, 283.0, 296.0, 357.0)  # peak at a steep notch, own computation; the limit is 475
LATE = (57.0, 56.6, 58.9, 67.8, 78.8)  # peak at a clamped corner, own computation; it has no limit
SHAPES = pytest.mark.parametrize("shape", ["triangle", "quadrilateral"])
PEAK = {"component": "first_principal", "near": "inner_corner", "radius": 30.0}


def table(values: object, ratio: float = 2.0) -> Ladder:
    f = np.asarray(values, dtype=float)
    h = 16.0 * ratio ** -np.arange(len(f))
    cells = (1e4 / h**2).astype(int)
    levels = [
        Level(float(s), int(n), int(n), 0.0, {"f": float(v)}) for s, n, v in zip(h, cells, f, strict=True)
    ]
    return Ladder(tuple(levels), "table")


def verdict_of(
    values: object, kind: str = "peak_stress", relative: float = 0.05, ratio: float = 2.0
) -> Verdict:
    quantity = Quantity("f", kind, relative=relative)
    return judge(table(values, ratio), (quantity,), Facts(), "table").verdicts["f"]


def judged(solutions: tuple, recorded: Callable, levels: int = 5) -> Findings:
    measures = {"peak": partial(peak_stress, **PEAK), "deflection": partial(displacement, at="tip")}
    checks = (
        "singular_peak",
        "peak_region",
        "equilibrium",
        "energy_balance",
        "solver_residual",
        "linear_range",
    )
    ladder = recorded(solutions[:levels], *checks, **measures)
    corners = singular_corners(solutions[0].problem)
    covered = {"peak": tuple(c for c in corners if c.name == "inner_corner"), "deflection": ()}
    facts = Facts(degree=2, corners=corners, covered=covered, size=283.0)
    quantities = (
        Quantity("peak", "peak_stress", "MPa", 2.0, relative=0.05),
        Quantity("deflection", "displacement", "mm", 3.0, relative=0.01),
    )
    return judge(ladder, quantities, facts, "bracket")


@SHAPES
@pytest.mark.slow
def test_the_sharp_bracket_is_singular_with_the_exponent_of_theory(
    shape: str, solved: Callable, recorded: Callable
) -> None:
    """Five levels: λ of theory inside the measured interval; the deflection has a limit."""
    findings = judged(solved("l_bracket", shape, 2, 2, 5, fillet_radius=0.0), recorded)
    ladder = findings.ladder
    # the weaker clamped corners, plane stress with nu = 0.3, are still on their way
    for corner, exponent, width in (
        ("inner_corner", LAMBDA, 0.05),
        ("top_left", 0.7583491579, 0.1),
        ("top_right", 0.7583491579, 0.1),
    ):
        found = growth(ladder.h, ladder.column(f"singular_peak.{corner}"))
        assert found.agrees(exponent) and 0.0 < found.half_width < width
    peak, deflection = findings.verdicts["peak"], findings.verdicts["deflection"]
    assert peak.word == "singular" and np.isnan([peak.limit, peak.low, peak.high]).all()
    (reason,) = peak.reasons
    assert "the free-free corner inner_corner of 270° at (80, 80)" in reason
    assert "theory λ = 0.544" in reason and "report the stress at a stated distance" in reason
    assert deflection.word in ("sound", "refine")
    assert deflection.low < deflection.limit < deflection.high
    assert deflection.uncertainty == max(
        deflection.high - deflection.value, deflection.value - deflection.low
    )


@SHAPES
@pytest.mark.parametrize("levels", [3, 4])
def test_fewer_levels_suffice_where_the_model_is_known(
    shape: str, levels: int, solved: Callable, recorded: Callable
) -> None:
    solutions = solved("l_bracket", shape, 2, 2, 5, fillet_radius=0.0)
    assert judged(solutions, recorded, levels).verdicts["peak"].word == "singular"


@SHAPES
@pytest.mark.slow
def test_the_filleted_bracket_is_not_singular(shape: str, solved: Callable, recorded: Callable) -> None:
    findings = judged(solved("l_bracket", shape, 2, 1, 4, fillet_radius=20.0), recorded)
    checks = {check.name: check for check in findings.checks}
    assert checks["singular_peak"].passed is True and checks["peak_region"].passed is True
    assert findings.verdicts["peak"].word in ("sound", "refine")
    assert "singular_peak.inner_corner" not in findings.ladder.levels[0].values


def test_a_stress_away_from_the_corner_is_not_singular(solved: Callable, recorded: Callable) -> None:
    solutions = solved("l_bracket", "quadrilateral", 2, 2, 5, fillet_radius=0.0)
    measures = {"arm": partial(stress, at=(140.0, 80.0), component="xx")}
    ladder = recorded(solutions, "singular_peak", **measures)
    facts = Facts(corners=singular_corners(solutions[0].problem), kinds={"arm": "point_stress"})
    assert singular_peak(ladder, facts).passed is True


@pytest.mark.parametrize("exponent", [0.5, LAMBDA, 0.75])
@pytest.mark.parametrize("ratio", [1.5, 2.0])
def test_growth_of_a_bare_table(exponent: float, ratio: float) -> None:
    """B + A h^(λ−1): never a limit; what is called singular holds λ; two and three levels prove nothing."""
    values = 20.0 + 30.0 * (16.0 * ratio ** -np.arange(6.0)) ** (exponent - 1.0)
    for sign in (1.0, -1.0):
        words = [verdict_of(sign * values[:levels], ratio=ratio).word for levels in range(2, 7)]
        assert words[:2] == ["unproven"] * 2
        assert set(words[2:]) <= {"singular", "unproven"} and words[-1] == "singular"
    said = verdict_of(values, ratio=ratio)
    assert said.order_low < exponent - 1.0 < said.order_high
    assert f"h^(λ-1), λ from {1.0 + said.order_low:.2f} to" in said.reasons[0]


@pytest.mark.parametrize("kind", ["peak_stress", "point_stress", "unknown"])
def test_logarithmic_growth(kind: str) -> None:
    """A constant amount per halving: no limit either, hard to tell from very slow convergence."""
    values = 50.0 + 8.0 * np.arange(6.0)
    for levels in (2, 3, 4, 5, 6):
        verdict = verdict_of(values[:levels], kind, relative=0.5)
        assert verdict.word in ("singular", "unproven")
        assert verdict.word == "unproven" or (levels >= 4 and "or log h" in verdict.reasons[0])


def test_the_range_of_the_order_in_words() -> None:
    """λ is the order and one; growth like log h is named where the order may be nearly zero."""

    def finding(low: float, high: float) -> str:
        facts = Facts(kinds={"f": "peak_stress"}, growing={"f": (low, high)})
        check = singular_peak(table((1.0, 2.0)), facts)
        assert (check.passed is False) == ("f" in check.spoils)
        return check.finding

    assert "grows like h^(λ-1), λ from 0.40 to 0.70, over the levels" in finding(-0.6, -0.3)
    assert "grows like h^(λ-1), λ from 0.70 to 1.00, or log h, over" in finding(-0.3, 0.2)
    steep = "No stress sits on a singular corner or grows without limit."
    assert finding(-1.3, -0.6) == steep, "no corner is that steep: a notch which the cells do not resolve"


@pytest.mark.parametrize("kind", ["energy", "displacement", "reaction", "resultant"])
def test_only_stresses_are_called_singular(kind: str) -> None:
    """The others have a limit always; growth is far from it."""
    values = 20.0 + 30.0 * (2.0 ** -np.arange(6.0)) ** -0.5
    assert verdict_of(values, kind).word in ("refine", "unproven")
    assert verdict_of(values, "point_stress").word == "singular"


def test_flat_then_moving_is_neither_sound_nor_singular() -> None:
    """Cells larger than the notch radius at first; the growth is steeper than any corner's."""
    assert verdict_of(NOTCH).word == "unproven"
    assert verdict_of(NOTCH[:4]).word == "unproven"


def test_growth_faster_than_any_corner_is_not_singular() -> None:
    """Changes of 3, 13, 61 grow like h^-2.2; stress at a corner grows like h^(λ−1), λ above 0.2."""
    assert verdict_of((280.0, 283.0, 296.0, 357.0)).word == "unproven"


@pytest.mark.parametrize("levels", [2, 3, 4, 5])
@pytest.mark.parametrize("relative", [0.05, 0.2])
def test_late_growth_is_never_sound(levels: int, relative: float) -> None:
    assert verdict_of(LATE[:levels], relative=relative).word != "sound"


@pytest.mark.parametrize("order", [0.3, 0.6, 1.0, 2.0])
def test_a_converging_table_is_not_singular(order: float) -> None:
    """Even slowly: the increments shrink. What is far from its limit is not called sound either."""
    values = 300.0 - 80.0 * (2.0 ** -np.arange(6.0)) ** order
    verdict = verdict_of(values)
    assert verdict.word in (("sound",) if order >= 1.0 else ("refine", "unproven"))


@pytest.mark.parametrize(
    ("values", "word"),
    [
        ((5.0,) * 5, "sound"),
        ((1.0, 2.0, 3.0, 4.0, np.nan), "unproven"),
        ((1.0, np.nan, 3.0, 4.0, np.nan, 5.0), "unproven"),
        ((1.0, 3.0, 2.0, 4.0, 3.0), "unproven"),
        ((0.0,) * 4, "sound"),
    ],
)
def test_what_is_no_growth(values: tuple, word: str) -> None:
    assert verdict_of(values).word == word


def test_growth_where_the_model_is_known_to_have_no_corner() -> None:
    """Theory decides: the levels do not resolve the peak yet, but it has a limit."""
    facts = Facts(kinds={"f": "peak_stress"}, growing={"f": (-0.6, -0.3)})
    assert singular_peak(table((1.0, 2.0)), facts).passed is False
    assert singular_peak(table((1.0, 2.0)), replace(facts, corners=())).passed is True


CORNERS = (
    Corner("heel", ((0.0, 0.0),), ("heel",), 270.0, ("free", "free"), 0.5445),
    Corner("toe", ((100.0, 0.0),), ("toe",), 90.0, ("clamped", "free"), 0.7583),
)


def test_peak_region() -> None:
    """A region that holds a corner is refused at once, named by its weakest corner."""
    ladder = table((10.0, 11.0, 11.2))
    kinds = {"f": "peak_stress", "g": "peak_stress"}
    facts = Facts(kinds=kinds, corners=CORNERS, covered={"f": (CORNERS[1], CORNERS[0]), "g": ()})
    check = peak_region(ladder, facts)
    assert check.passed is False and list(check.spoils) == ["f"] and check.leads_to == "unproven"
    assert (
        "the free-free corner heel of 270° at (0, 0); stress there grows like h^-0.456" in check.spoils["f"]
    )
    assert peak_region(ladder, replace(facts, covered={"f": (), "g": ()})).passed is True
    assert peak_region(ladder, Facts()).passed is None
    quantity = Quantity("f", "peak_stress", relative=0.5)
    verdict = judge(ladder, (quantity,), facts, "t").verdicts["f"]
    assert verdict.word == "unproven", "even where the levels themselves would be sound"
    free = judge(ladder, (quantity,), Facts(corners=()), "t").verdicts["f"]
    assert free.word == "sound"
