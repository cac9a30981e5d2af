"""The page for everyone: contrast of all text, names, order of headings, keyboard, targets, motion."""

from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pytest


def test_landmarks_and_names(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle)
    for role, name in (("navigation", "Contents"), ("main", None), ("region", "View")):
        assert page.get_by_role(role, name=name).count() == 1
    levels = page.evaluate("[...document.querySelectorAll('h1, h2, h3')].map((h) => +h.tagName[1])")
    assert levels[0] == 1 and levels.count(1) == 1 and all(np.diff(levels) <= 1)
    assert page.locator("table").count() == page.locator("table > caption").count()
    assert page.locator("th:not([scope])").count() == 0
    assert page.locator("svg:not([aria-label]), .level:not([aria-label])").count() == 0


@pytest.mark.slow
def test_everything_can_be_reached_by_tab_and_is_seen_there(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle)
    kinds = "a, button, summary, .scroll, pre"
    stops = page.evaluate(
        f"[...document.querySelectorAll('{kinds}')].filter((item) => item.checkVisibility()).length"
    )
    reached, outlined = 0, True
    for _ in range(stops + page.locator("figure").count() + 5):
        page.keyboard.press("Tab")
        if page.evaluate("document.activeElement === document.body"):
            break
        if page.evaluate(f"document.activeElement.matches('{kinds}')"):
            reached += 1
            outlined &= page.evaluate("getComputedStyle(document.activeElement).outlineStyle === 'solid'")
    assert reached == stops > 50 and outlined


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("name", ["middle", "matrix", "compared", "balanced"])
def test_all_text_can_be_read(
    name: str,
    scheme: str,
    visit: Callable[..., Any],
    asked: Callable[..., Any],
    request: pytest.FixtureRequest,
) -> None:
    """Figures included, with a verdict that is switched off and a hint that is shown."""
    page = visit(request.getfixturevalue(name), color_scheme=scheme)
    page.keyboard.press("1")
    if page.locator(".level:visible").count():
        page.locator(".level:visible").first.focus()
    laid_bare(page)
    faults, read = asked(page, "contrast")
    assert faults == [] and read > 50


def laid_bare(page: Any) -> None:
    """Make the page as high as all of it, and everything of its figures something to point at."""
    page.add_style_tag(content=".card svg * { pointer-events: all !important; } .ring { display: none; }")
    page.set_viewport_size({"width": 1400, "height": page.evaluate("document.documentElement.scrollHeight")})


def test_text_that_cannot_be_read_is_found(
    visit: Callable[..., Any], small: Path, asked: Callable[..., Any]
) -> None:
    """#777777 on white is 4.48 (common practice); white on the blue of a shaded band is less than 2."""
    page = visit(small, color_scheme="light")
    laid_bare(page)
    page.add_style_tag(content="header p.about { color: #777777; background: white; }")
    page.evaluate("document.querySelector('svg text').style.fill = '#eeeeee'")
    faults, _ = asked(page, "contrast")
    assert [fault.rpartition(": ")[2] for fault in faults] == ["4.48", "1.16"]


@pytest.mark.parametrize("width", [360, 1600])
@pytest.mark.parametrize("name", ["middle", "matrix", "compared", "balanced"])
def test_targets_are_large_or_apart(
    name: str,
    width: int,
    visit: Callable[..., Any],
    asked: Callable[..., Any],
    request: pytest.FixtureRequest,
) -> None:
    assert asked(visit(request.getfixturevalue(name), width), "targets") == []


def test_motion_only_where_it_is_not_unwanted(visit: Callable[..., Any], small: Path) -> None:
    page = visit(small)
    style = "getComputedStyle(document.documentElement).scrollBehavior"
    assert page.evaluate(style) == "auto"
    page.emulate_media(reduced_motion="no-preference")
    assert page.evaluate(style) == "smooth"
    assert page.evaluate("document.getAnimations().length") == 0


def test_details_are_opened_by_the_keyboard(visit: Callable[..., Any], small: Path) -> None:
    page = visit(small)
    page.locator("summary").last.focus()
    page.keyboard.press("Enter")
    assert page.locator("details pre").last.is_visible()
