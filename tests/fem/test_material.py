"""Elasticity, compliance and thermal strain of materials against textbook formulas, in every kind."""

import math
from dataclasses import replace
from typing import get_args

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from convergence.errors import Unsuitable
from convergence.fem.material import (
    STRESSED,
    Material,
    ProblemKind,
    material,
)

KINDS: tuple[ProblemKind, ...] = get_args(ProblemKind)
STEEL = material(young=210000.0, poisson=0.3, expansion=1.2e-5)
# glass-fibre deck plate: three different axes, invented
PLATE = material(
    young=30000.0, young_y=18000.0, young_z=9000.0, poisson=0.25, poisson_yz=0.35, poisson_zx=0.09,
    shear_xy=5000.0, shear_yz=3500.0, shear_zx=4000.0,
    expansion=8e-6, expansion_y=1.5e-5, expansion_z=3e-5,
)  # fmt: skip
# T300/5208, GPa: Tsai & Hahn 1980, Introduction to Composite Materials, table 1.7; Kaw 2006, Mechanics of
# Composite Materials, 2nd ed., example 2.6 (both from memory); what acts out of the plane is invented
PLY = Material(
    181.0, 0.28, expansion=0.02e-6, expansion_y=22.5e-6, young_y=10.3, young_z=10.3, poisson_yz=0.4,
    poisson_zx=0.28 * 10.3 / 181.0, shear_xy=7.17, shear_yz=3.7, shear_zx=7.17,
)  # fmt: skip
# a few dozen operations on numbers of one size
ROUNDING = 1e-12


def rotated(tensor: np.ndarray, angle: float) -> np.ndarray:
    """Turn a symmetric tensor (3, 3) about z by degrees."""
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    axes = np.array([[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]])
    return np.asarray(axes @ tensor @ axes.T)


def tensor_of(vector: np.ndarray, shear: float) -> np.ndarray:
    xx, yy, zz, xy, yz, zx = vector * np.array([1.0, 1.0, 1.0, shear, shear, shear])
    return np.array([[xx, xy, zx], [xy, yy, yz], [zx, yz, zz]])


def test_isotropic_solid_and_plane_strain_are_lames() -> None:
    """Stress = λ tr(ε) + 2 μ ε."""
    lame, mu = 210000.0 * 0.3 / (1.3 * 0.4), 210000.0 / 2.6
    expected = np.diag([2 * mu] * 3 + [mu] * 3)
    expected[:3, :3] += lame
    found = STEEL.elasticity("solid")
    assert found == pytest.approx(expected, rel=ROUNDING, abs=ROUNDING * lame)
    for kind in ("plane strain", "axisymmetric"):
        assert STEEL.elasticity(kind) == pytest.approx(expected[:4, :4], rel=ROUNDING, abs=ROUNDING * lame)


def test_isotropic_plane_stress_and_rod() -> None:
    """E/(1 - ν²) [1, ν; ν, 1] and G (Timoshenko & Goodier, art. 6); E alone in a rod."""
    modulus = 210000.0 / 0.91
    expected = np.zeros((4, 4))
    expected[:2, :2] = [[modulus, 0.3 * modulus], [0.3 * modulus, modulus]]
    expected[3, 3] = 210000.0 / 2.6
    assert STEEL.elasticity("plane stress") == pytest.approx(expected, rel=ROUNDING, abs=ROUNDING * modulus)
    assert STEEL.elasticity("rod") == pytest.approx(np.array([[210000.0]]), rel=ROUNDING)


def test_orthotropic_solid_is_the_closed_form() -> None:
    """C_ij of Jones, eq. 2.26 (from memory): C11 = E1 (1 - ν23 ν32)/Δ, C12 = E1 (ν21 + ν31 ν23)/Δ ..."""
    ex, ey, ez = 30000.0, 18000.0, 9000.0
    xy, yz, zx = 0.25, 0.35, 0.09
    yx, zy, xz = xy * ey / ex, yz * ez / ey, zx * ex / ez
    delta = 1 - xy * yx - yz * zy - zx * xz - 2 * yx * zy * xz
    normal = np.array(
        [
            [ex * (1 - yz * zy), ex * (yx + zx * yz), ex * (zx + yx * zy)],
            [0.0, ey * (1 - xz * zx), ey * (zy + xy * zx)],
            [0.0, 0.0, ez * (1 - xy * yx)],
        ]
    )
    expected = np.diag([0.0, 0.0, 0.0, 5000.0, 3500.0, 4000.0])
    expected[:3, :3] = (normal + np.triu(normal, 1).T) / delta
    assert PLATE.elasticity("solid") == pytest.approx(expected, rel=ROUNDING, abs=ROUNDING * ex)


def test_poisson_ratios_are_those_of_the_stress_that_acts() -> None:
    """poisson_ij = -(strain jj)/(strain ii) under the stress ii."""
    strain = PLATE.compliance("solid")
    assert -strain[1, 0] / strain[0, 0] == pytest.approx(0.25, rel=ROUNDING)
    assert -strain[2, 1] / strain[1, 1] == pytest.approx(0.35, rel=ROUNDING)
    assert -strain[0, 2] / strain[2, 2] == pytest.approx(0.09, rel=ROUNDING)


def reduced(ply: Material) -> dict[str, float]:
    """Return the plane-stress stiffness under its names in composite books."""
    d = ply.elasticity("plane stress")
    return {"11": d[0, 0], "12": d[0, 1], "22": d[1, 1], "66": d[3, 3], "16": d[0, 3], "26": d[1, 3]}


@pytest.mark.parametrize(
    ("angle", "expected"),
    [
        # Tsai & Hahn, table 3.4, and Kaw, examples 2.6 and 2.8 (both from memory)
        (0.0, {"11": 181.8, "12": 2.897, "22": 10.35, "66": 7.17, "16": 0.0, "26": 0.0}),
        (45.0, {"11": 56.66, "12": 42.32, "22": 56.66, "66": 46.59, "16": 42.87, "26": 42.87}),
        (60.0, {"11": 23.65, "12": 32.46, "22": 109.4, "66": 36.74, "16": 20.05, "26": 54.19}),
    ],
)
def test_published_ply(angle: float, expected: dict[str, float]) -> None:
    """To half a unit of the fourth digit."""
    found = reduced(replace(PLY, angle=angle))
    for name, value in expected.items():
        unit = 10.0 ** (math.floor(math.log10(value)) - 3) if value else 1e-12
        assert abs(found[name] - value) <= 0.5 * unit, name


def test_published_expansion_of_a_ply() -> None:
    """Kaw, example 2.17 (from memory), 60°: 16.88, 5.64 and -19.47 ×1e-6 per kelvin."""
    x, y, _, xy = replace(PLY, angle=60.0).thermal_strain("plane stress")
    assert [x, y, xy] == pytest.approx([16.88e-6, 5.64e-6, -19.47e-6], abs=0.005e-6)


@pytest.mark.parametrize("kind", KINDS)
@given(angle=st.floats(-360.0, 360.0))
def test_symmetric_positive_and_the_same_after_half_a_turn(kind: ProblemKind, angle: float) -> None:
    turned = replace(PLATE, angle=angle)
    for matrix in (turned.elasticity(kind), turned.compliance(kind)):
        assert matrix == pytest.approx(matrix.T, rel=ROUNDING, abs=ROUNDING * np.abs(matrix).max())
    carrying = turned.elasticity(kind)[np.ix_(STRESSED[kind], STRESSED[kind])]
    assert np.linalg.eigvalsh(carrying).min() > 0.0
    half = replace(PLATE, angle=angle + 180.0)
    for one, other in (
        (turned.elasticity(kind), half.elasticity(kind)),
        (turned.thermal_strain(kind), half.thermal_strain(kind)),
    ):
        assert other == pytest.approx(one, rel=ROUNDING, abs=ROUNDING * np.abs(one).max())


@pytest.mark.parametrize("kind", KINDS)
def test_a_quarter_turn_exchanges_x_and_y(kind: ProblemKind) -> None:
    exchanged = Material(
        18000.0, 0.25 * 18000.0 / 30000.0, young_y=30000.0, young_z=9000.0,
        poisson_yz=0.09 * 30000.0 / 9000.0, poisson_zx=0.35 * 9000.0 / 18000.0,
        shear_xy=5000.0, shear_yz=4000.0, shear_zx=3500.0,
        expansion=1.5e-5, expansion_y=8e-6, expansion_z=3e-5,
    )  # fmt: skip
    turned = replace(PLATE, angle=90.0)
    for one, other in (
        (turned.elasticity(kind), exchanged.elasticity(kind)),
        (turned.compliance(kind), exchanged.compliance(kind)),
        (turned.thermal_strain(kind), exchanged.thermal_strain(kind)),
    ):
        assert one == pytest.approx(other, rel=ROUNDING, abs=ROUNDING * np.abs(other).max())


@pytest.mark.parametrize("angle", [0.0, 30.0, -70.0])
def test_turning_is_turning_of_tensors(angle: float) -> None:
    """Strain turned back, stress along the material's axes, stress turned: all by 3 × 3 rotations."""
    strain = np.array([3.0, -1.0, 2.0, 0.5, -4.0, 1.5]) * 1e-4
    along = rotated(tensor_of(strain, 0.5), -angle)
    voigt = np.array([*np.diag(along), 2 * along[0, 1], 2 * along[1, 2], 2 * along[2, 0]])
    expected = rotated(tensor_of(PLATE.elasticity("solid") @ voigt, 1.0), angle)
    found = tensor_of(replace(PLATE, angle=angle).elasticity("solid") @ strain, 1.0)
    assert found == pytest.approx(expected, rel=ROUNDING, abs=ROUNDING * np.abs(expected).max())
    free = tensor_of(replace(PLATE, angle=angle).thermal_strain("solid"), 0.5)
    assert free == pytest.approx(rotated(np.diag([8e-6, 1.5e-5, 3e-5]), angle), abs=ROUNDING * 3e-5)


@pytest.mark.parametrize("angle", [0.0, 25.0])
def test_plane_stress_is_the_solid_without_stress_zz(angle: float) -> None:
    """Eliminating the strain zz from the solid (Schur complement) gives the inverse of S without zz."""
    turned = replace(PLATE, angle=angle)
    solid = turned.elasticity("solid")[:4, :4]
    expected = solid - np.outer(solid[:, 2], solid[2]) / solid[2, 2]
    found = turned.elasticity("plane stress")
    assert found == pytest.approx(expected, rel=ROUNDING, abs=ROUNDING * solid.max())
    assert not found[2].any() and not found[:, 2].any()


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("of", [STEEL, PLATE, replace(PLATE, angle=35.0)])
def test_compliance_gives_the_energy_of_the_stress(kind: ProblemKind, of: Material) -> None:
    """s.S.s = s.e where s = D e."""
    strain = np.array([3.0, -1.0, 2.0, 0.5, -4.0, 1.5])[: len(of.compliance(kind))] * 1e-4
    stress = of.elasticity(kind) @ strain
    assert stress @ of.compliance(kind) @ stress == pytest.approx(stress @ strain, rel=1e-11)


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("of", [STEEL, PLATE, replace(PLATE, angle=35.0)])
def test_free_expansion_is_stressless(kind: ProblemKind, of: Material) -> None:
    """Strains of the free expansion made by hand: a turned tensor; zz is not seen in plane stress.

    The size of the stress that the expansion could make is young × expansion.
    """
    axes = [of.expansion, of.expansion_y or of.expansion, of.expansion_z or of.expansion]
    free = rotated(np.diag(axes), of.angle)
    strain = np.array([*np.diag(free), 2 * free[0, 1], 0.0, 0.0])[: len(of.thermal_strain(kind))]
    if kind == "plane stress":
        strain[2] = 0.0
    stress = of.elasticity(kind) @ (strain - of.thermal_strain(kind))
    assert np.abs(stress).max() < ROUNDING * of.young * max(axes)


def test_held_expansion_is_the_textbook_stress() -> None:
    """-EαT over 1 (rod), 1 - ν (plane stress), 1 - 2ν (all held): Timoshenko & Goodier, ch. 13."""
    scale = 210000.0 * 1.2e-5 * 50.0
    held = {kind: -50.0 * STEEL.elasticity(kind) @ STEEL.thermal_strain(kind) for kind in KINDS}
    assert held["rod"] == pytest.approx([-scale], rel=ROUNDING)
    plane = -scale / 0.7
    assert held["plane stress"] == pytest.approx([plane, plane, 0.0, 0.0], rel=ROUNDING)
    solid = -scale / 0.4
    assert held["solid"] == pytest.approx([solid] * 3 + [0.0] * 3, rel=ROUNDING)
    for kind in ("plane strain", "axisymmetric"):
        assert held[kind] == pytest.approx([solid] * 3 + [0.0], rel=ROUNDING)


def test_plane_strain_free_in_its_plane() -> None:
    """Strain (1 + ν)αT in the plane and stress -EαT out of it (Timoshenko & Goodier, ch. 13)."""
    grown = 1.3 * 1.2e-5
    strain = np.array([grown, grown, 0.0, 0.0]) - STEEL.thermal_strain("plane strain")
    stress = STEEL.elasticity("plane strain") @ strain
    assert stress == pytest.approx([0.0, 0.0, -210000.0 * 1.2e-5, 0.0], abs=ROUNDING * 210000.0)


def test_expansion_alone_does_not_make_a_material_orthotropic() -> None:
    rolled = material(expansion=1e-5, expansion_y=2e-5)
    assert rolled.isotropic and not PLATE.isotropic
    assert rolled.thermal_strain("solid")[:3] == pytest.approx([1e-5, 2e-5, 1e-5], rel=1e-15)


def test_kappa_is_for_isotropic_materials() -> None:
    """(3 - ν)/(1 + ν) in plane stress, 3 - 4ν else (Williams 1952)."""
    assert STEEL.kappa("plane stress") == pytest.approx(2.7 / 1.3, rel=1e-15)
    for kind in ("plane strain", "axisymmetric", "solid"):
        assert STEEL.kappa(kind) == pytest.approx(1.8, rel=1e-15)
    with pytest.raises(Unsuitable, match="an isotropic one"):
        PLATE.kappa("plane stress")
    with pytest.raises(Unsuitable, match="an isotropic one"):
        PLATE.shear_modulus  # noqa: B018
