"""Labels and conversion of a dimension with a half power."""

import pytest

from convergence.dimensions import STRESS_INTENSITY, SYSTEMS


def test_stress_intensity_in_every_system() -> None:
    """1 MPa √mm is 10⁶ Pa times √(10⁻³ m), by hand."""
    labels = {name: units.label(STRESS_INTENSITY) for name, units in SYSTEMS.items()}
    assert labels == {
        "mm, N, MPa": "MPa √mm",
        "m, N, Pa": "Pa √m",
        "m, kN, kPa": "kPa √m",
        "in, lbf, psi": "psi √in",
        "consistent": "",
    }
    assert SYSTEMS["mm, N, MPa"].from_millimetres(1.0, STRESS_INTENSITY) == 1.0
    assert SYSTEMS["m, N, Pa"].from_millimetres(1.0, STRESS_INTENSITY) == pytest.approx(1e6 * 1e-3**0.5)
