"""The page in a real browser, without a network: quiet, complete at every width, each control works."""

import io
import shutil
from collections.abc import Callable, Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pypdf
import pytest

from convergence.dimensions import SYSTEMS, Units
from convergence.fields import Fields
from convergence.report.as_html import as_html
from convergence.report.cases_page import write_cases
from convergence.report.content import Bullets, Document, Heading, Paragraph, Section, Table, mark
from convergence.report.document import write_report
from convergence.results import Estimate, Facts, Findings, Ladder, Quantity, Verdict

driver = pytest.importorskip("playwright.sync_api", reason="the browser's driver is not installed")
NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome", "msedge")
BROWSER = next((path for name in NAMES if (path := shutil.which(name))), None)
pytestmark = pytest.mark.skipif(BROWSER is None, reason=f"none of {', '.join(NAMES)} is installed")

WIDTHS = (360, 800, 1400)
PAPER = 687  # px of a page of A4, 210 mm, between margins of 14 mm, at 96 px an inch
MOST_BYTES = 5_000_000
DAY = "2031-05-02"
LABELLED = {"study_name": "davit", "command": "meshassay judge davit.csv", "date": DAY}
HOSTILE = [
    "<img src=x onerror=alert(1)><script>alert(1)</script>",
    '=HYPERLINK("http://x") $x^2$ {{7*7}} &amp; ]]>',
    "שלום עולם",
    "x" * 300,
    "crane 🏗 hook ⚓",
    "turned \u202eback",
]
# what lies on something else, or leaves the page, outside of frames that scroll
FAULTS = """() => {
  const seen = (item) => item.getClientRects().length > 0;
  const box = (item) => item.getBoundingClientRect();
  const found = [];
  const blocks = "body, main, header, section, .part, .pictures, .controls, figure";
  for (const parent of document.querySelectorAll(blocks)) {
    const items = [...parent.children].filter((i) => seen(i) && getComputedStyle(i).position !== "fixed");
    items.filter((i) => !i.matches("nav, .side")).forEach((a, at, kept) => kept.slice(at + 1).forEach((b) => {
      const p = box(a), q = box(b);
      const wide = Math.min(p.right, q.right) - Math.max(p.left, q.left);
      const high = Math.min(p.bottom, q.bottom) - Math.max(p.top, q.top);
      if (wide > 1 && high > 1) found.push(`${a.className || a.tagName} on ${b.className || b.tagName}`);
    }));
  }
  const width = document.documentElement.clientWidth;
  for (const item of document.querySelectorAll("main *, .controls *")) {
    if (!seen(item) || item.closest("svg") || item.parentElement.closest(".scroll, pre")) continue;
    if (box(item).right > width + 1) found.push(`${item.tagName} leaves the page`);
  }
  if (document.documentElement.scrollWidth > width) found.push("page scrolls");
  return found;
}"""


@pytest.fixture(scope="module")
def browser() -> Iterator[Any]:
    with driver.sync_playwright() as started:
        chromium = started.chromium.launch(executable_path=BROWSER)
        yield chromium
        chromium.close()


@pytest.fixture
def visit(browser: Any) -> Iterator[Callable[..., Any]]:
    """Open a file without a network; whatever it says or asks for fails the test at its end."""
    heard: list[str] = []
    contexts = []

    def opened(path: Path, width: int = 1400, **settings: Any) -> Any:
        context = browser.new_context(
            viewport={"width": width, "height": 900}, offline=True, reduced_motion="reduce", **settings
        )
        contexts.append(context)
        page = context.new_page()
        page.on("console", lambda message: heard.append(message.text))
        page.on("pageerror", lambda error: heard.append(str(error)))
        page.on("dialog", lambda dialog: heard.append(dialog.message))
        page.on(
            "request", lambda request: None if request.url == path.as_uri() else heard.append(request.url)
        )
        page.goto(path.as_uri())
        return page

    yield opened
    for context in contexts:
        context.close()
    assert heard == []


@pytest.fixture(scope="module")
def small(
    tmp_path_factory: pytest.TempPathFactory,
    verdict_of: Callable[..., Verdict],
    ladder_of: Callable[..., Ladder],
) -> Path:
    """One quantity from a table."""
    h = np.array([8.0, 4.0, 2.0, 1.0])
    ladder = ladder_of({"tip": 313.9 - 1.463 * h**1.94}, h)
    findings = Findings(
        "Arm", ladder, (Quantity("tip", "displacement", "mm", 2.0),), Facts(), {}, (), {"tip": verdict_of()}
    )
    return write(findings, tmp_path_factory.mktemp("small"), [], SYSTEMS["consistent"])


@pytest.fixture(scope="module")
def middle(
    tmp_path_factory: pytest.TempPathFactory, findings: Findings, fields: list[Fields], units: Units
) -> Path:
    """One quantity of each verdict, with meshes and stress."""
    return write(findings, tmp_path_factory.mktemp("middle"), fields, units)


@pytest.fixture(scope="module")
def many(
    findings: Findings, verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> Findings:
    """Twelve quantities on six levels, hostile names among them."""
    h = 12.0 / 2.0 ** np.arange(6)
    names = [*HOSTILE, *(f"quantity number {n}" for n in range(len(HOSTILE), 12))]
    words = ["sound", "refine", "singular", "unproven"] * 3
    ladder = ladder_of({name: 313.9 - (1 + n) * h**1.94 for n, name in enumerate(names)}, h)
    estimate = {
        "grid_convergence_index": Estimate(313.9, 1.94, 1.83),
        "richardson": Estimate(313.9, 1.94, 1.2),
    }
    return replace(
        findings,
        title=HOSTILE[0],
        ladder=ladder,
        quantities=tuple(Quantity(name, "peak_stress", "MPa", 2.0, description=name) for name in names),
        estimates=dict.fromkeys(names, estimate),
        verdicts={name: verdict_of(word) for name, word in zip(names, words, strict=True)},
    )


@pytest.fixture(scope="module")
def large(
    tmp_path_factory: pytest.TempPathFactory, many: Findings, fields: list[Fields], units: Units
) -> Path:
    return write(many, tmp_path_factory.mktemp("large"), fields, units)


@pytest.fixture(scope="module")
def matrix(tmp_path_factory: pytest.TempPathFactory, many: Findings) -> Path:
    """Twelve quantities in four load cases."""
    cases = ("lift", "swell", HOSTILE[0], HOSTILE[2])
    (page,) = write_cases(
        dict.fromkeys(cases, many), tmp_path_factory.mktemp("matrix"), title=HOSTILE[3],
        loads=dict.fromkeys(cases, "tip_shear = -9.6"), study_text="", **LABELLED,
    )  # fmt: skip
    return page


@pytest.fixture(scope="module")
def hostile(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Hostile words in every place of a document."""
    rows = [(name, (mark("sound"), name), name) for name in HOSTILE]
    parts = [Heading(name, f"quantity-{n}", mark("refine")) for n, name in enumerate(HOSTILE)]
    blocks = [
        Paragraph("All sound.", "overall"),
        Paragraph("before שלום, مرحبا 12.5 MPa"),
        Bullets(HOSTILE),
        Table(HOSTILE[0], HOSTILE[:3], rows, "matrix"),
        *parts,
    ]
    path = tmp_path_factory.mktemp("hostile") / "page.html"
    path.write_text(
        as_html(Document(HOSTILE[0], HOSTILE[3], [Section("a", "A", "A", blocks)])), encoding="utf-8"
    )
    return path


def write(findings: Findings, folder: Path, fields: list[Fields], units: Units) -> Path:
    (page,) = write_report(
        findings, folder, fields=fields, units=units, study_text="title = 'davit'", **LABELLED
    )  # fmt: skip
    return page


def visible(page: Any, what: str) -> int:
    return int(page.locator(f"{what}:visible").count())


def marked(page: Any, address: str) -> None:
    """Hold that this entry of the contents, and no other, is marked soon: a page hears of scrolling late."""
    page.locator(f"nav a[aria-current][href='{address}']").wait_for(timeout=5000)
    assert page.locator("[aria-current]").count() == 1


def pressed(page: Any, what: str) -> list[str]:
    buttons = page.locator(f"button[{what}][aria-pressed=true]:visible")
    return [button.get_attribute(what) for button in buttons.all()]


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["small", "middle", "hostile"])
def test_nothing_overlaps_or_leaves_the_page(
    name: str, width: int, visit: Callable[..., Any], request: pytest.FixtureRequest
) -> None:
    page = visit(request.getfixturevalue(name), width)
    assert page.evaluate(FAULTS) == []


@pytest.mark.slow
@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", ["large", "matrix"])
def test_nor_does_it_on_a_large_page(
    name: str, width: int, visit: Callable[..., Any], request: pytest.FixtureRequest
) -> None:
    path = request.getfixturevalue(name)
    assert visit(path, width).evaluate(FAULTS) == []
    paper = visit(path, PAPER)
    paper.emulate_media(media="print")
    assert paper.evaluate(FAULTS) == []
    assert path.stat().st_size < MOST_BYTES


def test_the_search_for_faults_finds_them(visit: Callable[..., Any], small: Path) -> None:
    page = visit(small, 360)
    page.add_style_tag(content="h2 { margin-bottom: -40px; } p.overall { width: 500px; }")
    found = page.evaluate(FAULTS)
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


def test_the_filter_hides_quantities_and_rows_but_not_the_conclusion(
    visit: Callable[..., Any], middle: Path
) -> None:
    page = visit(middle)
    conclusion, note = page.locator("p.overall"), page.locator("[role=status]")
    before = conclusion.inner_text()
    assert (visible(page, ".part"), visible(page, "tr[data-verdict]"), note.inner_text()) == (4, 4, "")
    for word in ("sound", "singular"):
        page.locator(f"[data-show={word}]").click()
    assert pressed(page, "data-show") == ["refine", "unproven"]
    assert (visible(page, ".part"), visible(page, "tr[data-verdict]"), visible(page, "nav li li")) == (
        2,
        2,
        2,
    )
    assert note.inner_text() == "Hidden: 2 of 4 quantities, 2 of 4 rows."
    for word in ("refine", "unproven"):
        page.locator(f"[data-show={word}]").click()
    assert visible(page, ".part") == 0 and conclusion.is_visible() and conclusion.inner_text() == before
    page.keyboard.press("0")
    assert visible(page, ".part") == 4 and note.inner_text() == ""


def test_a_row_is_hidden_when_none_of_its_verdicts_is_shown(
    visit: Callable[..., Any], tmp_path: Path
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
    visit: Callable[..., Any], middle: Path
) -> None:
    page = visit(middle)
    both = (visible(page, "[data-axis=value]"), visible(page, "[data-axis=error]"))
    assert both == (3, 3), "the singular quantity has one figure of its growth"
    others = visible(page, "figure:not([data-axis])")
    button = page.locator("#quantity-4 ~ .axis [data-axis-of=value]")
    button.scroll_into_view_if_needed()
    before = button.bounding_box()["y"]
    button.click()
    assert button.bounding_box()["y"] == pytest.approx(before, abs=1.0), "to a pixel"
    assert (visible(page, "figure[data-axis=value]"), visible(page, "figure[data-axis=error]")) == (3, 0)
    page.keyboard.press("x")
    assert (visible(page, "figure[data-axis=value]"), visible(page, "figure[data-axis=error]")) == (0, 3)
    assert set(pressed(page, "data-axis-of")) == {"error"}
    page.keyboard.press("x")
    assert (visible(page, "[data-axis=value]"), visible(page, "[data-axis=error]")) == both
    assert visible(page, "figure:not([data-axis])") == others


def test_light_and_dark_follow_the_system_until_switched(visit: Callable[..., Any], small: Path) -> None:
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


def test_keys_can_be_switched_off(visit: Callable[..., Any], middle: Path) -> None:
    """WCAG 2.1, success criterion 2.1.4: a single letter does nothing where the reader does not want it."""
    page = visit(middle)
    assert page.locator("p.keys").is_visible()
    page.locator("[data-switch=keys]").click()
    page.keyboard.press("n")
    page.keyboard.press("1")
    assert page.evaluate("scrollY") == 0 and visible(page, ".part") == 4
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


@pytest.mark.slow
def test_everything_can_be_reached_by_tab_and_is_seen_there(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle)
    stops = "[...document.querySelectorAll('a, button, summary, .scroll, pre')].length"
    reached, outlined = 0, True
    for _ in range(page.evaluate(stops) + page.locator("figure").count() + 5):
        page.keyboard.press("Tab")
        if page.evaluate("document.activeElement === document.body"):
            break
        if page.evaluate("document.activeElement.matches('a, button, summary, .scroll, pre')"):
            reached += 1
            outlined &= page.evaluate("getComputedStyle(document.activeElement).outlineStyle === 'solid'")
    hidden = page.locator("details pre").count() + page.locator("details .scroll").count()
    assert reached == page.evaluate(stops) - hidden and outlined


def test_without_the_script_all_is_there(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle, java_script_enabled=False)
    assert visible(page, "button") == 0 and visible(page, ".part") == 4
    assert visible(page, "figure") == page.locator("figure").count() == 13
    assert page.locator(".level title").count() > 20, "the browser's own hints"
    assert page.locator("nav a").first.is_visible()


def test_landmarks_and_names(visit: Callable[..., Any], middle: Path) -> None:
    page = visit(middle)
    for role, name in (("navigation", "Contents"), ("main", None), ("region", "View")):
        assert page.get_by_role(role, name=name).count() == 1
    levels = page.evaluate("[...document.querySelectorAll('h1, h2, h3')].map((h) => +h.tagName[1])")
    assert levels[0] == 1 and levels.count(1) == 1 and all(np.diff(levels) <= 1)
    assert page.locator("table").count() == page.locator("table > caption").count()
    assert page.locator("th:not([scope])").count() == 0
    assert page.locator("svg:not([aria-label]), .level:not([aria-label])").count() == 0


@pytest.mark.parametrize("name", ["small", "middle", "hostile"])
def test_paper_shows_everything(name: str, visit: Callable[..., Any], request: pytest.FixtureRequest) -> None:
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
    assert page.evaluate(FAULTS) == []
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"


def test_hostile_words_are_text(visit: Callable[..., Any], hostile: Path) -> None:
    page = visit(hostile)
    assert page.title() == HOSTILE[0] and page.locator("h1").inner_text() == HOSTILE[0]
    assert page.locator("main img, main script").count() == 0
    for name in HOSTILE[:-1]:
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
