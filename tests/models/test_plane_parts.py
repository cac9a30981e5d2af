"""Notched, curved, bonded, lined and cracked plane parts: published values, exponents, odd proportions."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from convergence.corners.singular_corners import singular_corners
from convergence.errors import Unsuitable
from convergence.fem.material import Material
from convergence.fem.mesh import Shape, mesh
from convergence.fem.problem import Problem
from convergence.fem.recovery import recovered_stress
from convergence.fem.solution import Solution
from convergence.models.bonded_strip import bonded_strip
from convergence.models.centre_cracked_plate import centre_cracked_plate
from convergence.models.curved_bar import curved_bar
from convergence.models.double_notched_bar import double_notched_bar
from convergence.models.lined_cylinder import lined_cylinder
from convergence.models.thick_cylinder import thick_cylinder
from convergence.quantities.displacement import displacement
from convergence.quantities.section_force import section_force
from convergence.quantities.stress import stress

Climb = Callable[..., list[Solution]]
UNIT = Material(1.0, 0.3)
STEEL = Material(210000.0, 0.3)
LOOSE = 0.1  # of an order, by the next powers of h on these meshes
BOTH: tuple[Shape, ...] = ("triangle", "quadrilateral")
BOTH_SHAPES = pytest.mark.parametrize("shape", BOTH)


def orders(values: np.ndarray) -> np.ndarray:
    """Return the orders at which a ladder's changes fall."""
    changes = np.diff(values)
    return np.asarray(np.log2(changes[:-1] / changes[1:]))


def notched(depth: float, radius: float, half_length: float = 1.5) -> Problem:
    """Return a bar of width 1 under unit tension."""
    return double_notched_bar(
        width=1.0,
        notch_radius=radius,
        notch_depth=depth,
        half_length=half_length,
        tension=1.0,
        thickness=1.0,
        material=UNIT,
    )


def root_stress(solutions: list[Solution]) -> np.ndarray:
    return np.array([stress(solution, at="notch_root", component="xx").value for solution in solutions])


def quadratic_error(values: np.ndarray) -> float:
    """Return what the last change leaves at order 2, one below that of the recovered stress."""
    return float(abs(values[-1] - values[-2]) / 3.0)


def test_small_semicircular_notches(climb: Climb) -> None:
    """Ling 1947, J. Appl. Mech. 14:A275, from memory: 3.065 in the limit of a wide bar."""
    share = 0.025  # both notches of the width; they change the stress by the order of its square
    found = root_stress(climb(notched(0.5 * share, 0.5 * share), "quadrilateral", 2, 2, 3))
    assert abs(found[-1] - 3.065) < 0.0005 + 3.065 * share**2 + quadratic_error(found)


@pytest.mark.slow
@BOTH_SHAPES
@pytest.mark.parametrize("share", [0.1, 0.2, 0.4, 0.6, 0.8])
def test_semicircular_notches(climb: Climb, share: float, shape: Shape) -> None:
    """Pilkey, Peterson's Stress Concentration Factors, 2nd ed., chart 2.4, from memory; good to 1 %."""
    found = root_stress(climb(notched(0.5 * share, 0.5 * share), shape, 2, 2, 3))
    chart = 3.065 - 3.472 * share + 1.009 * share**2 + 0.405 * share**3
    assert abs(found[-1] * (1.0 - share) - chart) < 0.01 * chart + quadratic_error(found)


@pytest.mark.slow
@pytest.mark.parametrize(("depth", "radius"), [(0.1, 0.1), (0.2, 0.05)])
def test_notches_agree_between_cells(climb: Climb, depth: float, radius: float) -> None:
    """No closed form for straight flanks: both shapes meet within their last changes."""
    found = {shape: root_stress(climb(notched(depth, radius), shape, 2, 2, 3)) for shape in BOTH}
    changes = [abs(values[-1] - values[-2]) for values in found.values()]
    assert abs(found["triangle"][-1] - found["quadrilateral"][-1]) < sum(changes)


@pytest.mark.slow
def test_notched_bar_is_long_enough(climb: Climb) -> None:
    """Twice the length changes the stress by what decays over 1.5 widths: exp(-2.1 * 2 * 1.5).

    2.1 is the smallest decay rate of a strip of unit half width (Timoshenko & Goodier, art. 26).
    """
    short, long = (
        root_stress(climb(notched(0.2, 0.2, length), "quadrilateral", 2, 2, 2)) for length in (1.5, 3)
    )
    assert abs(short[-1] - long[-1]) < np.exp(-2.1 * 2.0 * 1.5) * short[-1]


def test_notched_section_carries_the_tension(climb: Climb) -> None:
    (solution,) = climb(notched(0.2, 0.05), "quadrilateral", 2, 6, 1)
    force = section_force(solution, start="axis", end="notch_root", component="normal")
    assert force == pytest.approx(0.5, rel=0.01)  # half of the width; stresses are off by O((1/12)²)


@pytest.mark.parametrize(
    ("ratio", "inner", "outer", "own"),
    [
        (1.3, 73.05, 61.35, (73.0523642, 61.3516806)),
        (2.0, 7.755, 4.917, (7.7552436, 4.9170168)),
        (3.0, 2.292, 1.130, (2.2919931, 1.1295029)),
    ],
)
def test_golovin_moment(ratio: float, inner: float, outer: float, own: tuple[float, float]) -> None:
    """Timoshenko & Goodier, 3rd ed., art. 29, the table, from memory; with more digits own computation."""
    exact = curved_bar(
        inner_radius=1.0, outer_radius=ratio, thickness=1.0, moment=1.0, force=0.0, material=UNIT
    ).exact
    assert exact is not None
    hoop = exact.stress(np.zeros(2), np.array([1.0, ratio]))[0]
    assert hoop * [1.0, -1.0] == pytest.approx([inner, outer], abs=0.00500001 if inner > 10 else 0.00050001)
    assert hoop * [1.0, -1.0] == pytest.approx(own, abs=0.51e-7)


def test_golovin_force() -> None:
    """Timoshenko & Goodier, art. 33, a = 1, b = 2, E = 1000: own evaluation of the closed form."""
    exact = curved_bar(
        inner_radius=1.0,
        outer_radius=2.0,
        thickness=1.0,
        moment=0.0,
        force=-1.0,
        material=Material(1000.0, 0.3),
    ).exact
    assert exact is not None and exact.energy is not None
    xx, yy, _, _ = exact.stress(np.zeros(3), np.array([1.0, 2.0, 1.5]))
    assert [xx[0], xx[1], yy[2]] == pytest.approx([-12.8828376, 6.4414188, -1.3916646], abs=0.51e-7)
    moved = exact.displacement(np.array([1.0, 1.5, 2.0]), np.zeros(3))[0]
    # the loaded end stays straight
    assert -moved == pytest.approx(0.0337271900, abs=0.51e-10)


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_a_liner_of_the_same_material_is_no_liner(kind: Any) -> None:
    lined = lined_cylinder(kind=kind, material=STEEL, liner_material=STEEL).exact
    plain = thick_cylinder(inner_radius=30.0, outer_radius=55.0, kind=kind, material=STEEL).exact
    assert lined is not None and plain is not None
    x, y = np.array([30.0, 35.0, 28.0, 40.0]), np.array([0.0, 10.0, 28.0, 30.0])
    assert lined.displacement(x, y) == pytest.approx(plain.displacement(x, y), rel=1e-12)
    assert lined.stress(x, y) == pytest.approx(plain.stress(x, y), rel=1e-12, abs=1e-12 * 21.0)
    assert lined.energy == pytest.approx(plain.energy, rel=1e-12)


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
def test_the_interface_holds_together(kind: Any) -> None:
    """Displacement and radial stress are those of both layers; the hoop stress jumps."""
    exact = lined_cylinder(kind=kind, material=STEEL).exact
    assert exact is not None
    sides, along = 40.0 * np.array([1.0 - 1e-12, 1.0 + 1e-12]), np.zeros(2)
    inside, outside = exact.displacement(sides, along)[0]
    assert inside == pytest.approx(outside, rel=1e-9)
    radial, hoop, _, _ = exact.stress(sides, along)
    assert radial[0] == pytest.approx(radial[1], rel=1e-9)
    assert hoop[1] > 1.5 * hoop[0]


@BOTH_SHAPES
def test_stress_is_recovered_per_region(climb: Climb, shape: Shape) -> None:
    """At the interface each region keeps its own hoop stress; on both sides the error falls with h^2.

    Two is the order at boundaries of quadratic triangles; a recovery across the interface keeps an error of
    the order of the jump.
    """
    problem = lined_cylinder(material=STEEL)
    assert problem.exact is not None
    errors = []
    for solution in climb(problem, shape, 2, 1, 3):
        cells, place = solution.mesh.cell_nodes, solution.mesh.vertices["bond_x"]
        found = recovered_stress(solution)[1]
        row = []
        for region, side in (("liner", 1.0 - 1e-12), ("barrel", 1.0 + 1e-12)):
            mine = solution.mesh.regions[region]
            at_bond = found[:, mine][cells[:, mine] == place]
            wanted = problem.exact.stress(np.array([40.0 * side]), np.zeros(1))[1]
            row.append(np.abs(at_bond - wanted).max())
        errors.append(row)
    falls = np.log2(np.array(errors[:-1]) / np.array(errors[1:]))
    assert (falls[-1] > 2.0 - LOOSE).all()


@pytest.mark.parametrize("kind", ["plane stress", "plane strain"])
@BOTH_SHAPES
@pytest.mark.parametrize("degree", [1, 2])
def test_pieces_that_contract_alike_are_exact(climb: Climb, kind: Any, shape: Shape, degree: int) -> None:
    """Plane stress: nu/E alike; plane strain: nu (1 + nu)/E. A field that is linear in each piece."""
    poisson = 0.15
    contracting = 0.3 * 1.3 / (poisson * 1.15) if kind == "plane strain" else 2.0
    problem = bonded_strip(
        kind=kind, material=STEEL, bond_material=Material(210000.0 / contracting, poisson), grading=3.0
    )
    assert problem.exact is not None and problem.exact.energy is not None
    for solution in climb(problem, shape, degree, 1, 2):
        wanted = problem.exact.displacement(*solution.mesh.nodes)
        assert np.abs(solution.displacement - wanted).max() < 1e-11 * np.abs(wanted).max()
        assert solution.energy == pytest.approx(problem.exact.energy, rel=1e-11)
        found = recovered_stress(solution)[[0, 1, 3]]
        assert np.abs(found - np.array([60.0, 0.0, 0.0])[:, None, None]).max() < 1e-8 * 60.0


def test_pieces_that_contract_differently_have_no_closed_form() -> None:
    assert bonded_strip(material=STEEL).exact is None


@pytest.mark.slow
@BOTH_SHAPES
@pytest.mark.parametrize(
    ("ratio", "exponent"), [(3.0, 0.920101695698), (10.0, 0.801533496663), (100.0, 0.721966363523)]
)
def test_bond_edge_exponent(climb: Climb, ratio: float, exponent: float, shape: Shape) -> None:
    """Bogy 1971, J. Appl. Mech. 38:377, right angles, plane strain; own roots of the 8 x 8 determinant."""
    problem = bonded_strip(
        width=2.0,
        length=1.0,
        bonded_length=1.0,
        thickness=1.0,
        tension=1.0,
        kind="plane strain",
        material=UNIT,
        bond_material=Material(1.0 / ratio, 0.3),
    )
    energies = np.array([solution.energy for solution in climb(problem, shape, 2, 2, 5)])
    assert orders(energies)[-1] == pytest.approx(2.0 * exponent, abs=LOOSE)


def cracked(height: float, crack: float, grading: float = 1.0) -> Problem:
    """Return a plate of half width 1 under unit tension."""
    return centre_cracked_plate(
        half_width=1.0,
        half_height=height,
        half_crack=crack,
        thickness=1.0,
        tension=1.0,
        grading=grading,
        material=UNIT,
    )


@pytest.mark.slow
@pytest.mark.parametrize("grading", [1.0, 10.0])
@BOTH_SHAPES
@pytest.mark.parametrize(
    ("height", "energy", "opening"),
    [
        (4.0, 2.23224635522, 1.181325636),
        (2.0, 1.23252043181, 1.182875500),
        (1.0, 0.77006177047, 1.389766618),
    ],
)
def test_cracked_plate(
    climb: Climb, height: float, energy: float, opening: float, shape: Shape, grading: float
) -> None:
    """Own computation: degree 8, 36 layers of grading, E = 1, nu = 0.3, a/W = 0.5. Errors fall with h.

    Extrapolation at order 1 leaves LOOSE ln 2 of the last error, by the next powers.
    """
    solutions = climb(cracked(height, 0.5, grading), shape, 2, 2, 4)
    moved = [displacement(solution, at="crack_middle", component="y") for solution in solutions]
    for values, wanted in (([solution.energy for solution in solutions], energy), (moved, opening)):
        error = wanted - np.array(values)
        assert (error > 0.0).all()
        assert np.log2(error[-2] / error[-1]) == pytest.approx(1.0, abs=LOOSE)
        assert abs(2.0 * error[-1] - error[-2]) < 2.0 * LOOSE * np.log(2.0) * error[-1]


@pytest.mark.slow
@pytest.mark.parametrize(("crack", "isida"), [(0.4, 1.1094), (0.5, 1.1867), (0.6, 1.3033)])
def test_stress_intensity_from_energies(climb: Climb, crack: float, isida: float) -> None:
    """G = K²/E per tip is twice dU/da of the quarter; Isida 1971, Int. J. Fracture 7:301, from memory.

    Two energies give the mean of G between two cracks; the formula of Tada, Paris & Irwin, good to 0.1 %,
    tells how it differs from G in the middle. Energies are extrapolated at order 1.
    """
    step = 0.01
    short, long = (
        np.array([s.energy for s in climb(cracked(4.0, length, 10.0), "quadrilateral", 2, 2, 4)])
        for length in (crack - step, crack + step)
    )
    rates = (long - short) / step
    limits = 2.0 * rates[1:] - rates[:-1]
    shown = abs(limits[-1] - limits[-2]) / limits[-1]
    left, middle, right = (np.pi * a * tada(a) ** 2 for a in (crack - step, crack, crack + step))
    mean = (left + 4.0 * middle + right) / 6.0
    assert limits[-1] == pytest.approx(mean, rel=2.0 * 1e-3 + shown)
    factor = np.sqrt(limits[-1] * middle / mean / (np.pi * crack))
    assert factor == pytest.approx(isida, abs=0.5e-4 + 0.5 * shown * isida)
    assert shown < 1e-3


def tada(crack: float) -> float:
    return float((1.0 - 0.025 * crack**2 + 0.06 * crack**4) / np.sqrt(np.cos(0.5 * np.pi * crack)))


def test_the_crack_ends_at_the_tip() -> None:
    (corner,) = singular_corners(centre_cracked_plate(material=STEEL))
    assert corner.name == "tip" and corner.exponent == pytest.approx(0.5, abs=1e-9)


@pytest.mark.parametrize("make", [double_notched_bar, curved_bar, lined_cylinder])
def test_parts_without_singular_corners(make: Callable[..., Problem]) -> None:
    assert singular_corners(make(material=STEEL)) == ()


ODD: list[tuple[Callable[..., Problem], dict[str, float]]] = [
    (double_notched_bar, {"notch_radius": 0.5, "notch_depth": 0.5}),
    (double_notched_bar, {"notch_radius": 1.0, "notch_depth": 25.0}),
    (double_notched_bar, {"notch_radius": 28.5, "notch_depth": 28.5}),
    (double_notched_bar, {"notch_radius": 5.0, "notch_depth": 29.0}),
    (double_notched_bar, {"half_length": 31.0}),
    (curved_bar, {"inner_radius": 10.0}),
    (curved_bar, {"inner_radius": 240.0}),
    (lined_cylinder, {"bond_radius": 31.0}),
    (bonded_strip, {"length": 5.0, "grading": 8.0}),
    (centre_cracked_plate, {"half_crack": 3.0, "grading": 8.0}),
    (centre_cracked_plate, {"half_crack": 57.0, "half_height": 31.0, "grading": 8.0}),
]


@pytest.mark.parametrize(("make", "arguments"), ODD)
@BOTH_SHAPES
def test_odd_proportions_have_no_inverted_cells(
    make: Callable[..., Problem], arguments: dict[str, float], shape: Shape
) -> None:
    part = make(material=STEEL, **arguments).part
    for divisions in (1, 2):  # raises on an inverted cell
        mesh(part, part.divisions(size=None, divisions=divisions), shape=shape, degree=2)


CONFLICTS: list[tuple[Callable[..., Problem], dict[str, float], list[str]]] = [
    (double_notched_bar, {"notch_depth": 9.0, "half_length": 20.0}, ["notch_depth", "half_length"]),
    (double_notched_bar, {"notch_depth": 30.0}, ["notch_depth"]),
    (curved_bar, {"inner_radius": 250.0, "force": 0.0}, ["outer_radius", "force"]),
    (lined_cylinder, {"bond_radius": 60.0}, ["outer_radius"]),
    (lined_cylinder, {"bond_radius": 30.0}, ["bond_radius"]),
    (lined_cylinder, {"warmth": 9.0, "liner_material": Material(1.0, 0.3, expansion_y=1e-5)}, ["warmth"]),
    (centre_cracked_plate, {"half_crack": 60.0, "half_height": 30.0}, ["half_crack", "half_height"]),
]


@pytest.mark.parametrize(("make", "arguments", "keys"), CONFLICTS)
def test_conflicts_are_all_named(
    make: Callable[..., Problem], arguments: dict[str, float], keys: list[str]
) -> None:
    with pytest.raises(Unsuitable) as caught:
        make(material=STEEL, **arguments)
    assert [key for key, _, _ in caught.value.problems] == keys
