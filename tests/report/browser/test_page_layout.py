"""Nothing overlaps or leaves the page at any width or on paper; hostile words are text; no network."""

import io
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pypdf
import pytest

WIDTHS = (360, 900, 1600)
PAPER = 687  # px of a page of A4, 210 mm, between margins of 14 mm, at 96 px an inch
MOST_BYTES = 5_000_000


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["small", "middle", "hostile"])
def test_nothing_overlaps_or_leaves_the_page(
    name: str,
    width: int,
    visit: Callable[..., Any],
    request: pytest.FixtureRequest,
    asked: Callable[..., Any],
) -> None:
    page = visit(request.getfixturevalue(name), width)
    assert asked(page, "faults") == []


@pytest.mark.slow
@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["large", "matrix"])
def test_nor_does_it_on_a_large_page(
    name: str,
    width: int,
    visit: Callable[..., Any],
    request: pytest.FixtureRequest,
    asked: Callable[..., Any],
) -> None:
    path = request.getfixturevalue(name)
    assert asked(visit(path, width), "faults") == []
    paper = visit(path, PAPER)
    paper.emulate_media(media="print")
    assert asked(paper, "faults") == []
    assert path.stat().st_size < MOST_BYTES


def test_the_search_for_faults_finds_them(
    visit: Callable[..., Any], small: Path, asked: Callable[..., Any]
) -> None:
    page = visit(small, 360)
    page.add_style_tag(content="h2 { margin-bottom: -40px; } p.overall { width: 500px; }")
    found = asked(page, "faults")
    assert "H2 on overall" in found and "P leaves the page" in found and "page scrolls" in found


def test_the_policy_stops_every_other_script(browser: Any, small: Path, tmp_path: Path) -> None:
    path, heard = tmp_path / "page.html", []
    text = small.read_text(encoding="utf-8").replace(
        "</main>", "</main><script>document.title = 'x'</script>"
    )
    path.write_text(text, encoding="utf-8")
    page = browser.new_page()
    page.on("console", lambda message: heard.append(message.text))
    page.goto(path.as_uri())
    assert page.title() == "Arm" and any("Content Security Policy" in words for words in heard)
    page.close()


def test_without_the_script_all_is_there(
    visit: Callable[..., Any], middle: Path, shown: Callable[..., int]
) -> None:
    page = visit(middle, java_script_enabled=False)
    assert shown(page, "button") == 0 and shown(page, ".part") == 4
    assert shown(page, "figure") == page.locator("figure").count() == 13
    assert page.locator(".level title").count() > 20, "the browser's own hints"
    assert page.locator("nav a").first.is_visible()


@pytest.mark.parametrize("name", ["small", "middle", "hostile"])
def test_paper_shows_everything(
    name: str, visit: Callable[..., Any], request: pytest.FixtureRequest, asked: Callable[..., Any]
) -> None:
    """Whatever was hidden on the screen; and no control."""
    page = visit(request.getfixturevalue(name), PAPER, color_scheme="dark")
    for key in "1xd":
        page.keyboard.press(key)
    raw = page.pdf(format="A4", prefer_css_page_size=True)
    text = "".join(sheet.extract_text() for sheet in pypdf.PdfReader(io.BytesIO(raw)).pages)
    plain = "".join(text.split())
    titles = page.locator("h2, figcaption .number, caption .number").all_text_contents()
    assert titles and all("".join(title.split()) in plain for title in titles)
    assert "Keys:" not in text
    if name != "hostile":
        assert "title='davit'" in plain, "what stands in details"
    page.emulate_media(media="print")
    assert asked(page, "faults") == []
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"


def test_hostile_words_are_text(visit: Callable[..., Any], hostile: Path, hostile_words: list[str]) -> None:
    page = visit(hostile)
    assert page.title() == hostile_words[0] and page.locator("h1").inner_text() == hostile_words[0]
    assert page.locator("main img, main script").count() == 0
    for name in hostile_words[:-1]:
        assert page.locator("li").filter(has_text=name).count() >= 1
        assert page.locator("td").filter(has_text=name).count() >= 2


def test_words_from_right_to_left_do_not_turn_their_neighbours(
    visit: Callable[..., Any], hostile: Path
) -> None:
    """Left to right on the page, as they are read: first name, second name, and the number behind it."""
    left = visit(hostile).evaluate(
        """() => {
          const [first, second] = document.querySelectorAll("main p bdi"), number = document.createRange();
          number.selectNodeContents(second.nextSibling);
          return [first, second, number].map((item) => item.getBoundingClientRect().left);
        }"""
    )
    assert left == sorted(left)
