"""The corners in the report: what each is in words, and what was not examined."""

import math
from collections.abc import Callable
from dataclasses import replace

import pytest

from convergence.corner import Corner
from convergence.report._picture import Picture
from convergence.report.sections_fields import stress_section
from convergence.results import Findings

PICTURE = Picture("stress", "what it shows", "what it says", "<svg></svg>", b"", 6.0)
HOOK = Corner("tip", ((0.0, 1.0, 2.0),), ("tip",), 0.0, ("point", "force"), -1.0)
SEAM = Corner("seam", ((5.0, 5.0),), ("seam",), 360.0, ("bonded", "bonded"), 0.9)
SILENT = Corner("root", ((7.0, 8.0),), ("root",), 90.0, ("clamped", "free"), math.nan)


@pytest.fixture
def section(findings: Findings, on_page) -> Callable[..., str]:
    def of(corners: tuple[Corner, ...], unexamined: tuple[Corner, ...]) -> str:
        facts = replace(findings.facts, corners=corners, unexamined=unexamined)
        return on_page(stress_section(replace(findings, facts=facts), PICTURE))

    return of


def test_points_and_materials_that_meet(section) -> None:
    shown = section((HOOK, SEAM), ())
    assert "a force on the point" in shown and "none, materials meet" in shown
    assert "<td>none</td>" in shown and ">0°<" not in shown, "a point of a solid has no opening"
    assert "360.0°" in shown and "point and force" not in shown and "Not examined" not in shown


def test_what_was_not_examined(section) -> None:
    shown = section((), (SILENT,))
    assert "Not examined: root at (7, 8); " in shown and "nan" not in shown
    assert "No corner of this model" not in shown, "that would say too much"
