"""Every mark of every figure says what it is, at the pointer and by the keyboard."""

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest


def test_a_level_tells_what_it_is(visit: Callable[..., Any], middle: Path) -> None:
    """The finest of five levels: h = 12 / 2^4, 24,000 / h² cells, 313.9 - 63.9 * 0.5^(4 * 1.94) = 313.605."""
    page = visit(middle)
    hint, level = page.locator("[role=tooltip]"), page.locator("#quantity-1 ~ .pictures .level").nth(4)
    assert not hint.is_visible()
    level.locator(".ring").hover()
    assert hint.inner_text() == "level 5 of 5; h 0.7500; 42,666 cells; value 313.605 MPa"
    box, ring = hint.bounding_box(), level.bounding_box()
    assert box["y"] + box["height"] <= ring["y"] or box["y"] >= ring["y"] + ring["height"], "beside the level"
    page.mouse.move(5, 5)
    assert not hint.is_visible()
    page.locator("#quantity-1 ~ .pictures .level").first.focus()
    assert hint.inner_text().startswith("level 1 of 5; h 12.00; 166 cells; value 250.0")
    page.keyboard.press("ArrowRight")
    assert hint.inner_text().startswith("level 2 of 5")
    page.keyboard.press("Escape")
    assert not hint.is_visible()


@pytest.mark.parametrize("name", ["middle", "compared", "balanced"])
def test_all_marks_say_what_they_are(
    name: str, visit: Callable[..., Any], request: pytest.FixtureRequest
) -> None:
    """Every group of marks that a figure has hints for; a figure without a hint has no points."""
    page = visit(request.getfixturevalue(name))
    groups, bare = (page.locator(f"svg [id*='-levels']{what}").count() for what in ("", ":not(:has(.level))"))
    assert groups >= 2 and bare == 0
    without = page.locator("figure:not(:has(.level)) svg")
    words = without.evaluate_all("all => all.map((svg) => svg.ariaLabel)")
    assert all(said.startswith(("Meshes of", "Map of")) for said in words)


def said(page: Any, name: str) -> list[str]:
    marks = page.locator(f"[id*='{name}'] .level")
    return [mark.get_attribute("aria-label") for mark in marks.all()]


def test_what_marks_of_results_say(visit: Callable[..., Any], middle: Path) -> None:
    """The made-up findings: interval 313.605 ± 1.996 about the finest value, limit 313.9, error norm 0.2."""
    page = visit(middle)
    best = said(page, "fillet-stress-value-levels-best")
    assert best[0].startswith("best estimate 313.9") and "interval 311.6 to 315.7 MPa" in best[0]
    norm = said(page, "energy-norm-levels-estimated")
    assert norm[0] == "level 1 of 5; h 12.00; 166 cells; estimated error 20.0 %" and len(norm) == 5
    peaks = said(page, "stress-levels")
    assert peaks == ["1: fillet_stress 313.6 MPa; at (62, 60)", "2: corner_stress 318 MPa; at (60, 60)"]


def test_what_marks_of_ladders_and_loads_say(
    visit: Callable[..., Any], compared: Path, balanced: Path
) -> None:
    page = visit(compared)
    assert said(page, "tip-comparison-levels-0")[0] == "first, level 1 of 4; h 8.000 mm; value 10.64 mm"
    assert said(page, "tip-comparison-levels-1")[2].startswith(
        "second, level 3 of 3; h 1.500 mm; value 10.02"
    )
    assert [hint.partition(":")[0] for hint in said(page, "tip-comparison-levels-best")] == [
        "first",
        "second",
        "both",
    ]
    page = visit(balanced)
    assert said(page, "lift-balance-levels") == [
        "load hook: Fy -12.5 kN; at (3, 4) m",
        "reaction foot: Fy 12.5 kN, Mz 37.5 kN m; at (0, 0) m",
    ]
