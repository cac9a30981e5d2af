"""What is known of a table's columns: the kind that was said, or that of a length."""

import pytest

from convergence.columns import bare_quantities
from convergence.results import Kind, Ladder, Level, Quantity

UNITS = {"tip": "mm", "sag": "in", "root": "MPa", "pull": "kN", "lift": "N mm", "share": ""}


def quantities(**said: Kind) -> dict[str, Quantity]:
    levels = tuple(Level(h, 1, 1, 0.0, dict.fromkeys(UNITS, h), 0.0) for h in (2.0, 1.0))
    found = bare_quantities(Ladder(levels, "table.csv"), UNITS, kinds=said, degree=1, relative=None)
    return {quantity.name: quantity for quantity in found}


def test_a_length_is_a_displacement() -> None:
    found = quantities()
    for name in ("tip", "sag"):
        assert found[name].kind == "displacement" and found[name].assumed_kind
        assert found[name].formal_order == 2.0, "p + 1"
    for name in ("root", "pull", "lift", "share"):
        assert found[name].kind == "unknown" and not found[name].assumed_kind, "no unit tells"


@pytest.mark.parametrize("kind", ["unknown", "point_stress", "displacement"])
def test_what_is_said_counts(kind: Kind) -> None:
    tip = quantities(tip=kind)["tip"]
    assert tip.kind == kind and not tip.assumed_kind
