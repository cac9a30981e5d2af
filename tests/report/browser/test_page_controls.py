"""Each control of the page works: filter, axis, light and dark, keys, contents."""

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from convergence.report.as_html import as_html
from convergence.report.content import Document, Section, Table, mark

WIDTHS = (360, 900, 1600)


def marked(page: Any, address: str) -> None:
    """Hold that this entry of the contents, and no other, is marked soon: a page hears of scrolling late."""
    page.locator(f"nav a[aria-current][href='{address}']").wait_for(timeout=5000)
    assert page.locator("[aria-current]").count() == 1


def test_the_filter_hides_quantities_and_rows_but_not_the_conclusion(
    visit: Callable[..., Any], middle: Path, shown: Callable[..., int], pressed: Callable[..., list[str]]
) -> None:
    page = visit(middle)
    conclusion, note = page.locator("p.overall"), page.locator("[role=status]")
    before = conclusion.inner_text()
    assert (shown(page, ".part"), shown(page, "tr[data-verdict]"), note.inner_text()) == (4, 4, "")
    for word in ("sound", "singular"):
        page.locator(f"[data-show={word}]").click()
    assert pressed(page, "data-show") == ["refine", "unproven"]
    said = (".part", "tr[data-verdict]", "nav li li", "blockquote")
    assert [shown(page, what) for what in said] == [2, 2, 2, 2]
    assert note.inner_text() == "2 of 4 shown"
    for word in ("refine", "unproven"):
        page.locator(f"[data-show={word}]").click()
    assert shown(page, ".part") == 0 and conclusion.is_visible() and conclusion.inner_text() == before
    page.keyboard.press("0")
    assert [shown(page, what) for what in said] == [4, 4, 4, 4] and note.inner_text() == ""


@pytest.mark.parametrize("width", WIDTHS)
def test_what_is_hidden_stays_told_until_all_is_shown_again(
    width: int, visit: Callable[..., Any], middle: Path, shown: Callable[..., int]
) -> None:
    """By the keyboard alone: a verdict off, then all of them on, and the focus is not lost."""
    page = visit(middle, width)
    assert shown(page, "[data-reset]") == 0
    page.locator("[data-show]").nth(2).focus()
    page.keyboard.press("Space")
    page.evaluate("scrollTo(0, document.body.scrollHeight)")
    note = page.locator(".note")
    assert note.inner_text().split() == ["3", "of", "4", "shown", "show", "all"]
    box = note.bounding_box()
    assert box["x"] >= 0 and box["x"] + box["width"] <= width and 0 <= box["y"] < 900, "in sight"
    page.locator("[data-reset]").focus()
    page.keyboard.press("Enter")
    assert shown(page, ".part") == 4 and shown(page, "[data-reset]") == 0
    assert page.evaluate("document.activeElement.dataset.show") == "sound"


@pytest.mark.parametrize("name", ["compared", "balanced"])
def test_other_pages_are_filtered_alike(
    name: str, visit: Callable[..., Any], shown: Callable[..., int], request: pytest.FixtureRequest
) -> None:
    """One of the two parts of each, with its row and its entry in the contents."""
    page = visit(request.getfixturevalue(name))
    said = (".part", "tr[data-verdict]", "nav li li")
    assert [shown(page, what) for what in said] == [2, 2, 2]
    page.keyboard.press("1")
    assert [shown(page, what) for what in said] == [1, 1, 1]
    assert page.locator("[role=status]").inner_text() == "1 of 2 shown"


def test_a_row_is_hidden_when_none_of_its_verdicts_is_shown(
    visit: Callable[..., Any], tmp_path: Path, shown: Callable[..., int]
) -> None:
    """A verdict without a button, which the first table does not have, stays."""
    rows = [("arm", mark("sound"), mark("refine")), ("pin", mark("sound"), mark("sound"))]
    first = Table("Matrix", ("quantity", "lift", "swell"), rows, "matrix")
    second = Table("Largest", ("quantity", "verdict"), [("arm", mark("unproven"))], "statement")
    path = tmp_path / "page.html"
    path.write_text(as_html(Document("", "", [Section("a", "A", "A", [first, second])])), encoding="utf-8")
    page = visit(path)
    page.keyboard.press("1")
    assert page.locator("tbody th:visible").all_inner_texts() == ["arm", "arm"]
    page.keyboard.press("2")
    assert page.locator("tbody th:visible").all_inner_texts() == ["arm"]


def test_the_axis_is_switched_for_all_quantities_and_the_reader_stays(
    visit: Callable[..., Any], middle: Path, shown: Callable[..., int], pressed: Callable[..., list[str]]
) -> None:
    page = visit(middle)
    both = (shown(page, "[data-axis=value]"), shown(page, "[data-axis=error]"))
    assert both == (3, 3), "the singular quantity has one figure of its growth"
    others = shown(page, "figure:not([data-axis])")
    button = page.locator("#quantity-4 ~ .axis [data-axis-of=value]")
    button.scroll_into_view_if_needed()
    before = button.bounding_box()["y"]
    button.click()
    assert button.bounding_box()["y"] == pytest.approx(before, abs=1.0), "to a pixel"
    assert (shown(page, "figure[data-axis=value]"), shown(page, "figure[data-axis=error]")) == (3, 0)
    page.keyboard.press("x")
    assert (shown(page, "figure[data-axis=value]"), shown(page, "figure[data-axis=error]")) == (0, 3)
    assert set(pressed(page, "data-axis-of")) == {"error"}
    page.keyboard.press("x")
    assert (shown(page, "[data-axis=value]"), shown(page, "[data-axis=error]")) == both
    assert shown(page, "figure:not([data-axis])") == others


def test_light_and_dark_follow_the_system_until_switched(
    visit: Callable[..., Any], small: Path, pressed: Callable[..., list[str]]
) -> None:
    page = visit(small, color_scheme="light")
    paper = "getComputedStyle(document.body).backgroundColor"
    light = page.evaluate(paper)
    page.emulate_media(color_scheme="dark")
    dark = page.evaluate(paper)
    assert light != dark and pressed(page, "data-switch") == ["dark", "keys"]
    page.locator("[data-switch=dark]").click()
    assert page.evaluate(paper) == light and pressed(page, "data-switch") == ["keys"]
    page.emulate_media(color_scheme="light")
    page.keyboard.press("d")
    assert (
        page.evaluate(paper) == dark
        and page.evaluate("getComputedStyle(document.body).colorScheme") == "dark"
    )


def test_keys_lead_from_heading_to_heading(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle)
    focused = "document.activeElement.textContent"
    titles = page.locator("h2").all_inner_texts()
    for title in titles:
        page.keyboard.press("n")
        assert page.evaluate(focused) == title
        assert page.evaluate("document.activeElement.getBoundingClientRect().top") < 100
    for title in reversed(titles[:-1]):
        page.keyboard.press("p")
        assert page.evaluate(focused) == title
    for _ in range(2):
        page.keyboard.press("j")
    assert page.evaluate(focused).startswith("tip_deflection")
    marked(page, "#quantity-2")
    page.keyboard.press("k")
    assert page.evaluate(focused).startswith("fillet_stress")


def test_keys_can_be_switched_off(visit: Callable[..., Any], middle: Path, shown: Callable[..., int]) -> None:
    """WCAG 2.1, success criterion 2.1.4: a single letter does nothing where the reader does not want it."""
    page = visit(middle)
    assert page.locator("p.keys").is_visible()
    page.locator("[data-switch=keys]").click()
    page.keyboard.press("n")
    page.keyboard.press("1")
    assert page.evaluate("scrollY") == 0 and shown(page, ".part") == 4
    assert not page.locator("p.keys").is_visible()


@pytest.mark.parametrize("width", WIDTHS)
def test_the_contents_stay_in_sight_and_mark_the_section(
    width: int, visit: Callable[..., Any], middle: Path
) -> None:
    page = visit(middle, width)
    for link in page.locator("nav > ul > li > a").all():
        link.click()
        marked(page, link.get_attribute("href"))
        assert page.locator("[aria-current]").bounding_box()["x"] >= 0 and link.is_visible()
        heading = page.locator(f"{link.get_attribute('href')} > h2").bounding_box()
        bar = page.locator("nav").bounding_box()
        assert heading["y"] >= (bar["y"] + bar["height"] if width < WIDTHS[-1] else 0), "not under the bar"
