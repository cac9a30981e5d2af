"""Constants of a material that are refused, and the materials a model asks for."""

import numpy as np
import pytest

from convergence.errors import Unsuitable
from convergence.fem.material import ORTHOTROPIC, Material, material, material_names

CONSTANTS = {
    "young": 30000.0, "young_y": 18000.0, "young_z": 9000.0, "poisson": 0.25, "poisson_yz": 0.35,
    "poisson_zx": 0.09, "shear_xy": 5000.0, "shear_yz": 3500.0, "shear_zx": 4000.0,
}  # fmt: skip


@pytest.mark.parametrize(
    ("changes", "keys"),
    [
        # √(30000/18000) = 1.2910, √(18000/9000) = 1.4142, √(9000/30000) = 0.5477
        ({"poisson": 1.292}, ["poisson"]),
        ({"poisson_yz": -1.415}, ["poisson_yz"]),
        ({"poisson_zx": 0.548}, ["poisson_zx"]),
        # every pair is bounded, 1 - 0.6 - 0.5 - 0.3 < 0 together
        ({"poisson": 1.0, "poisson_yz": 1.0, "poisson_zx": 0.3}, ["poisson"]),
        ({"yield_strength": 200.0}, ["yield_strength"]),
    ],
)
def test_constants_without_positive_energy_are_refused(changes: dict[str, float], keys: list[str]) -> None:
    with pytest.raises(Unsuitable) as caught:
        material(**(CONSTANTS | changes))
    assert [key for key, _, _ in caught.value.problems] == keys


def test_just_inside_the_bounds_is_accepted() -> None:
    """1.29 < 1.2910; the other ratios 0 so that only this pair counts."""
    found = material(**(CONSTANTS | {"poisson": 1.29, "poisson_yz": 0.0, "poisson_zx": 0.0}))
    assert np.linalg.eigvalsh(found.elasticity("solid")).min() > 0.0


@pytest.mark.parametrize("missing", ORTHOTROPIC)
def test_an_orthotropic_material_has_all_of_its_constants(missing: str) -> None:
    rest = {key: value for key, value in CONSTANTS.items() if key != missing}
    with pytest.raises(Unsuitable, match=f"{missing} None: a value: an orthotropic material has all of"):
        material(**rest)


@pytest.mark.parametrize("poisson", [-1.0, 0.5])
def test_isotropic_bounds(poisson: float) -> None:
    with pytest.raises(Unsuitable, match=r"-1 < value < 0\.5"):
        material(poisson=poisson)
    assert material(poisson=0.99 * poisson).isotropic


def test_the_materials_of_a_model_are_its_parameters() -> None:
    def strip(*, length: float, material: Material, bond_material: Material) -> Material:
        return material

    assert material_names(strip) == ("material", "bond_material")
