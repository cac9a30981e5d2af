"""The field around singular corners on solved levels: against exact fields, statics and a plane of strain."""

from collections.abc import Callable
from dataclasses import replace
from functools import partial

import numpy as np
import pytest

from convergence.checks._field import CLEAN, field_of
from convergence.checks._instead import Instead, instead, missing
from convergence.checks.singular_field import HOT_SPOT, linearised, normal_stress, record, singular_field
from convergence.corners.singular_corners import singular_corners
from convergence.fem.material import Material
from convergence.fem.mesh import mesh
from convergence.fem.part import finer
from convergence.fem.problem import Support
from convergence.fem.solution import Solution, solve
from convergence.fem.stress import component
from convergence.judgement import judge
from convergence.models.l_bracket import l_bracket
from convergence.models.solid_bracket import solid_bracket
from convergence.quantities.stress_intensity import stress_intensity
from convergence.results import Facts, Findings, Ladder, Quantity

LAMBDA = 0.544483736782464  # 270 degrees, free on both sides: Williams 1952, J. Appl. Mech. 19:526
STEEL = Material(210000.0, 0.3)


def judged(solutions: tuple[Solution, ...], recorded: Callable, corner: str) -> Findings:
    """Judge one stress that stands on a corner: its own value is that of the cells which touch it."""
    ladder = recorded(solutions, "singular_field", "singular_peak", "linear_range")
    levels = tuple(
        replace(level, values={**level.values, "f": level.values[f"singular_peak.{corner}"]})
        for level in ladder.levels
    )
    corners = singular_corners(solutions[0].problem)
    facts = Facts(corners=corners, covered={"f": tuple(c for c in corners if c.name == corner)})
    ladder = replace(ladder, levels=levels, h_unit="mm")
    return judge(ladder, (Quantity("f", "point_stress", "MPa", 2.0, relative=0.05),), facts, "test")


def numbers_of(findings: Findings) -> dict[str, Instead]:
    found = instead(findings.ladder, findings.facts, "f")
    return {one.key.removeprefix("f: "): one for one in found}


def holds(one: Instead, value: float) -> bool:
    return one.low <= value <= one.high


@pytest.mark.parametrize("shape", ["quadrilateral", "triangle"])
def test_the_l_domain_against_its_exact_field(shape: str, solved: Callable, recorded: Callable) -> None:
    """The intervals hold the exact stress and the exact K = s λ leg^(1−λ) (2 + q (λ + 1) + λ − 1).

    That is the stress across the bisector in the field of Szabó & Babuška 1991, Finite Element Analysis,
    with q of its mode I.
    """
    solutions = solved("l_domain", shape, 2, 3, 5)
    found = numbers_of(judged(solutions, recorded, "inner_corner"))
    half = np.radians(135.0)
    q = -np.cos((LAMBDA - 1.0) * half) / np.cos((LAMBDA + 1.0) * half)
    exact = 20.0 * LAMBDA * 100.0 ** (1.0 - LAMBDA) * (2.0 + q * (LAMBDA + 1.0) + LAMBDA - 1.0)
    intensity = found["intensity"]
    assert holds(intensity, exact) and intensity.unit == "MPa mm^0.4555"
    assert abs(intensity.value / exact - 1.0) < 0.05, "places are clean to 5 %"
    field = solutions[0].problem.exact
    assert field is not None
    stresses = [one for key, one in found.items() if key.startswith("at ")]
    assert len(stresses) == 3
    for one in stresses:
        distance = float(one.label.split()[3])
        x = np.array([distance * np.sqrt(0.5)])
        xx, yy, zz, xy = field.stress(x, x)[:, 0]
        mises = np.sqrt(0.5 * ((xx - yy) ** 2 + (yy - zz) ** 2 + (zz - xx) ** 2) + 3.0 * xy**2)
        assert holds(one, mises), one.words


def test_a_load_that_leaves_the_weakest_term_out(solved: Callable, recorded: Callable) -> None:
    """Mode II alone grows like its own exponent, 0.9085, which is not the weakest; no stress across."""
    findings = judged(solved("l_domain", "quadrilateral", 2, 2, 4, mode="II"), recorded, "inner_corner")
    (check,) = (check for check in findings.checks if check.name == "singular_field")
    assert check.passed is False and not check.spoils
    assert "theory λ = 0.544, the levels give 0.90" in check.finding and "does not agree" in check.finding
    field = field_of(findings.ladder, findings.facts.covered["f"][0])
    mises = component(field.stress, "von_mises")
    assert np.all(np.abs(field.across[:, -1]) < CLEAN * mises[:, -1]), "skew: none across the bisector"


@pytest.mark.slow
def test_sections_of_the_sharp_bracket_against_statics(solved: Callable, recorded: Callable) -> None:
    """800 N per mm of thickness at x = 200; beam statics at the inner corner (80, 80), legs 80 deep.

    Arm: no membrane, bending 6 · 800 · 120 / 80² = 90. Post: membrane 800 / 80 = 10, bending
    6 · 800 · 160 / 80² = 120. At the clamped edge the same, on its outer side with the other sign.
    """
    solutions = solved("l_bracket", "quadrilateral", 2, 2, 5, fillet_radius=0.0)
    findings = judged(solutions, recorded, "inner_corner")
    found = numbers_of(findings)
    statics = {"+x.membrane": 0.0, "+x.bending": 90.0, "+y.membrane": 10.0, "+y.bending": 120.0}
    for key, exact in statics.items():
        assert holds(found[key], exact), found[key].words
    for corner, side in (("top_right", 1.0), ("top_left", -1.0)):
        clamped = numbers_of(judged(solutions, recorded, corner))
        assert holds(clamped["-y.membrane"], 10.0) and holds(clamped["-y.bending"], side * 120.0)
        assert "intensity" in clamped
    assert missing(findings.ladder, findings.facts, "f") == ()
    reason = findings.verdicts["f"].reasons[0]
    nearest = next(iter(found.values()))
    assert f"report instead: {nearest.words}; " in reason and "von Mises stress 5 mm from" in nearest.words
    (check,) = (check for check in findings.checks if check.name == "singular_field")
    assert check.passed is True and "from 5 mm (4 cells of the finest mesh) on" in check.finding


def test_the_bond_of_two_materials(solved: Callable, recorded: Callable) -> None:
    """Tension 60: the same membrane and bending on both sides of the bond; λ of theory in the interval."""
    findings = judged(solved("bonded_strip", "quadrilateral", 2, 3, 4), recorded, "bond_edge")
    found = numbers_of(findings)
    assert holds(found["-x.membrane"], 60.0) and holds(found["+x.membrane"], 60.0)
    one, other = found["-x.bending"], found["+x.bending"]
    assert max(one.low, other.low) <= min(one.high, other.high)
    assert one.value != other.value, "each side is read in its own material"
    (check,) = (check for check in findings.checks if check.name == "singular_field")
    assert check.passed is True and "growth like log h fits as well" in check.finding


def test_a_crack_on_a_plane_of_symmetry(solved: Callable, recorded: Callable) -> None:
    """K √(2π) is the stress intensity of mode I, within the 5 % to which its places are clean."""
    solutions = solved("centre_cracked_plate", "quadrilateral", 2, 2, 4, grading=4.0)
    intensity = numbers_of(judged(solutions, recorded, "tip"))["intensity"]
    measure = partial(stress_intensity, tip="tip", ahead=(1.0, 0.0), radius=15.0, symmetric=True)
    expected = measure(solutions[-1]) / np.sqrt(2.0 * np.pi)
    assert holds(intensity, expected) and intensity.value == pytest.approx(expected, rel=0.05)


def test_an_edge_of_a_solid_in_plane_strain() -> None:
    """Held between its faces the solid bracket is the plane one: the same numbers around its inner edge.

    Recovery fits other patches, so they agree to a few per cent of the stress, at every place.
    """
    plane = l_bracket(fillet_radius=0.0, kind="plane strain", material=STEEL)
    solid = solid_bracket(fillet_radius=0.0, thickness=20.0, material=STEEL)
    between = (Support("back", z=0.0, boundary="back"), Support("front", z=0.0, boundary="front"))
    solid = replace(solid, supports=(*solid.supports, *between))
    found = []
    for problem, shape in ((plane, "quadrilateral"), (solid, "hexahedron")):
        counts = finer(problem.part.divisions(size=None, divisions=2), 2.0, 1)
        found.append(record(solve(problem, mesh(problem.part, counts, shape=shape, degree=1))))
    flat, deep = found
    edge = "inner_corner_back-inner_corner_middle-inner_corner_front"
    scale = max(abs(flat[f"inner_corner.{place}.yy"]) for place in range(7))
    shared = [key for key in flat if key.startswith("inner_corner.")]
    assert len(shared) == 2 + 7 * 5 + 2 * 4
    for key in shared:
        other = deep[key.replace("inner_corner", edge, 1)]
        assert other == pytest.approx(flat[key], rel=0.03, abs=0.03 * scale), key


def test_no_corner_no_record(solved: Callable) -> None:
    (solution,) = solved("thick_cylinder", "quadrilateral", 2, 1, 1)
    assert record(solution) == {}
    assert singular_field(Ladder((), "table"), Facts(corners=())).passed is None


def test_hot_spot_factors() -> None:
    """Exact for a linear stress 1 + 2x (Lagrange; printed as 1.67 and 0.67 by Hobbacher, from memory)."""
    assert sum(factor * (1.0 + 2.0 * x) for x, factor in HOT_SPOT.items()) == pytest.approx(1.0, abs=1e-14)
    assert [round(factor, 2) for factor in HOT_SPOT.values()] == [1.67, -0.67]


def test_linearised_stress_of_a_thick_cylinder() -> None:
    """Lamé's hoop stress, radii 3 and 9, pressure 1: membrane p a / t = 0.5, bending by own integration.

    s = (1 + 81/r²)/8, so ∫ s (t/2 − x) dx = (1/8) ∫ (1 + 81/r²)(6 − r) dr = (1/8)(108 − 81 ln 3 − 0).
    """
    depth, weights = np.polynomial.legendre.leggauss(20)
    depth, weights = 3.0 * (depth + 1.0), 3.0 * weights
    membrane, bending = linearised((1.0 + 81.0 / (3.0 + depth) ** 2) / 8.0, depth, weights, 6.0)
    assert membrane == pytest.approx(0.5, abs=1e-9)
    assert bending == pytest.approx((108.0 - 81.0 * np.log(3.0)) / 48.0, abs=1e-9)
    assert bending == pytest.approx(0.396091762873, abs=1e-9), "own computation with 40 digits"


def test_stress_along_a_direction() -> None:
    """n · s · n of a tensor, in a plane and in a solid."""
    n = np.array([2.0, -1.0, 2.0]) / 3.0
    tensor = np.array([[5.0, 1.0, -2.0], [1.0, -3.0, 4.0], [-2.0, 4.0, 7.0]])
    stress = np.array([[5.0], [-3.0], [7.0], [1.0], [4.0], [-2.0]])
    assert normal_stress(stress, n)[0] == pytest.approx(n @ tensor @ n, abs=1e-13)
    flat = np.array([0.6, 0.8])
    assert normal_stress(stress[:4], flat)[0] == pytest.approx(flat @ tensor[:2, :2] @ flat, abs=1e-13)
