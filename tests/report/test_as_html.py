"""The page as text: its policy, its colours, what its controls read, and words written from right to left."""

import base64
import hashlib
import html
import re
from collections.abc import Callable, Sequence

import numpy as np
import pytest
from matplotlib.figure import Figure

from convergence.report._controls import controls
from convergence.report._look import CSS
from convergence.report._markup import element, text
from convergence.report._picture import Picture, draw
from convergence.report.as_html import as_html
from convergence.report.content import (
    Block,
    Document,
    Figures,
    Heading,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.report.figures_growth import growth_figure
from convergence.report.figures_order import error_figure
from convergence.report.figures_value import value_figure
from convergence.results import Ladder, Quantity, Verdict

H = np.array([8.0, 4.0, 2.0, 1.0])
SCHEMES = ("light", "dark")
TEXT, OTHER = 4.5, 3.0  # least contrast: WCAG 2.1, success criteria 1.4.3 and 1.4.11
PAIRS = [
    *((ink, "paper", TEXT) for ink in ("ink", "soft", "sound", "refine", "singular", "unproven")),
    ("ink", "tint", TEXT),
    ("paper", "ink", TEXT),
    ("focus", "paper", OTHER),
]


def page_of(blocks: Sequence[Block]) -> str:
    return as_html(Document("Arm", "", [Section("quantities", "Quantities", "Quantities", blocks)]))


def colours(scheme: str) -> dict[str, str]:
    found = re.findall(r"--(\w+): light-dark\((#\w{6}), (#\w{6})\)", CSS)
    return {name: pair[SCHEMES.index(scheme)] for name, *pair in found}


def luminance(colour: str) -> float:
    """Relative luminance of #rrggbb, from its definition in WCAG 2.1."""
    parts = np.array([int(colour[i : i + 2], 16) / 255 for i in (1, 3, 5)])
    linear = np.where(parts <= 0.03928, parts / 12.92, ((parts + 0.055) / 1.055) ** 2.4)
    return float(linear @ (0.2126, 0.7152, 0.0722))


def contrast(first: str, second: str) -> float:
    """Contrast ratio, from its definition in WCAG 2.1."""
    low, high = sorted((luminance(first), luminance(second)))
    return (high + 0.05) / (low + 0.05)


def test_contrast_of_known_colours() -> None:
    """Black on white is 21 by definition; #777777 on white is 4.48, just too little (common practice)."""
    assert contrast("#000000", "#ffffff") == pytest.approx(21.0)
    assert 4.47 < contrast("#777777", "#ffffff") < TEXT


@pytest.mark.parametrize("scheme", SCHEMES)
@pytest.mark.parametrize(("ink", "paper", "least"), PAIRS)
def test_everything_can_be_read(scheme: str, ink: str, paper: str, least: float) -> None:
    colour = colours(scheme)
    assert contrast(colour[ink], colour[paper]) >= least


def test_the_policy_names_the_one_script_and_no_address() -> None:
    page = page_of([Paragraph("x")])
    (script,) = re.findall(r"<script>(.*?)</script>", page, flags=re.DOTALL)
    proof = base64.b64encode(hashlib.sha256(script.encode()).digest()).decode()
    (policy,) = re.findall(r'Content-Security-Policy" content="([^"]*)"', page)
    rules = dict(rule.strip().split(" ", 1) for rule in policy.split(";"))
    assert rules["default-src"] == "'none'" and rules["script-src"] == f"'sha256-{proof}'"
    assert "http" not in policy and not re.search(r"https?:|fetch|XMLHttp|import", script)


def test_a_part_reaches_from_its_heading_to_the_next() -> None:
    blocks = [
        Paragraph("before"),
        Heading("arm", "quantity-1", mark("sound")),
        Paragraph("of the arm"),
        Heading("no verdict"),
        Paragraph("after"),
    ]
    page = page_of(blocks)
    part = re.search(r'<div class="part" data-verdict="sound">(.*?)</div>', page, flags=re.DOTALL)
    assert part is not None and "of the arm" in part[1]
    assert "before" not in part[1] and "no verdict" not in part[1]
    assert '<li data-verdict="sound"><a href="#quantity-1">arm</a></li>' in page


def test_the_filter_counts_parts_or_else_the_cells_of_the_first_table() -> None:
    rows = [("arm", (mark("sound"), "1.0"), (mark("refine"), "2.0")), ("pin", (mark("sound"), "3.0"), "none")]
    table = Table("Matrix", ("quantity", "lift", "swell"), rows, "matrix")
    page = page_of([table])
    assert page.count('data-verdict="sound|refine"') == 1 and page.count('<tr data-verdict="sound">') == 1
    shown = re.findall(r'data-show="(\w+)".*?<span class="count"> (\d+)', page)
    assert shown == [("sound", "2"), ("refine", "1")]
    parts = [
        Heading(name, mark=mark(word)) for name, word in (("a", "sound"), ("b", "refine"), ("c", "refine"))
    ]
    shown = re.findall(r'data-show="(\w+)".*?<span class="count"> (\d+)', page_of([table, *parts]))
    assert shown == [("sound", "1"), ("refine", "2")]


def test_nothing_to_filter_where_all_are_alike() -> None:
    document = Document("", "", [Section("a", "A", "A", [Heading("x", mark=mark("sound"))])])
    assert "data-show" not in controls(document) and 'data-switch="dark"' in controls(document)


@pytest.fixture(scope="module")
def plain() -> Picture:
    return draw("plain", (2.0, 2.0), "alt", "caption", lambda figure: figure.add_subplot())


def test_both_axes_have_a_switch_and_one_alone_has_none(
    plain: Picture, verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    ladder, quantity = ladder_of({"s": 313.9 - 2.0 * H**1.75}, H), Quantity("s", unit="MPa")
    value = value_figure("s-value", quantity, verdict_of(), ladder, "mm")
    error = error_figure("s-order", quantity, verdict_of(), ladder, "mm")
    assert value is not None and error is not None
    page = page_of([Figures([value, error, plain])])
    assert re.findall(r'<figure data-axis="(\w+)"', page) == ["value", "error"]
    assert page.count('data-axis-of="value"') == 1
    assert (
        "data-axis" not in page_of([Figures([value, plain])]).partition("<script>")[0].partition("<main")[2]
    )


def test_every_level_that_is_drawn_has_a_hint(
    verdict_of: Callable[..., Verdict], ladder_of: Callable[..., Ladder]
) -> None:
    """Four levels, the coarsest without a value; 24,000 / h² cells (the ladder's own formula)."""
    values = np.array([np.nan, 300.0, 309.0, 312.437])
    ladder, quantity = ladder_of({"s": values}, H), Quantity("s", unit="MPa")
    figures = [
        value_figure("s-value", quantity, verdict_of(), ladder, "mm"),
        error_figure("s-order", quantity, verdict_of(), ladder, "mm"),
        growth_figure("s-growth", quantity, ladder, "mm", 0.5),
    ]
    for picture in figures:
        assert picture is not None
        page = page_of([Figures([picture])])
        hints = re.findall(r'<g class="level" role="img"><title>(.*?)</title><use ', page)
        assert hints == [html.escape(hint) for hint in picture.hints]
        assert hints[0] == "level 1 of 4; h 8.000; 375 cells; no value"
        assert hints[1].startswith("level 2 of 4; h 4.000; 1,500 cells; value 300.00 MPa")
    assert figures[1] is not None
    assert figures[1].hints[-1].endswith("difference from the best estimate 1.46 MPa"), "313.9 - 312.437"


def test_marks_of_other_artists_stay_as_they_are() -> None:
    """A figure with hints for its levels has as many circles as hints, not as ticks and marks."""

    def paint(figure: Figure) -> None:
        axes = figure.add_subplot()
        axes.plot([1, 2], [1, 2], "s")
        axes.plot([1, 2], [2, 1], "o", gid="levels")

    picture = draw("two", (3.0, 3.0), "alt", "caption", paint, ("first & <b>", "second"))
    page = page_of([Figures([picture])])
    assert page.count('class="ring"') == 2 and "<title>first &amp; &lt;b&gt;</title>" in page


def test_no_hint_stands_at_the_mark_of_another() -> None:
    """Two marks and three hints: nobody knows which one is not drawn."""

    def paint(figure: Figure) -> None:
        figure.add_subplot().plot([1, 2], [2, 1], "o", gid="levels")

    picture = draw("two", (3.0, 3.0), "alt", "caption", paint, ("first", "second", "third"))
    page = page_of([Figures([picture])])
    assert 'class="ring"' not in page and "second" not in page


def test_a_case_leads_back_to_all_cases() -> None:
    page = as_html(Document("lift", "", [], "../report.html"))
    assert '<nav aria-label="Contents"><ul><li><a href="../report.html">All cases</a></li>' in page


def test_a_quoted_sentence_has_the_verdict_of_its_quantity() -> None:
    page = page_of([Paragraph("On 4 meshes …", "quote", "refine"), Paragraph("So they say.", "quote")])
    assert page.count('<blockquote data-verdict="refine"><p>On 4') == 1
    assert "<blockquote><p>So they say." in page


def test_words_from_right_to_left_are_isolated() -> None:
    assert text("arm שלום עולם, مرحبا 12 MPa") == "arm <bdi>שלום עולם</bdi>, <bdi>مرحبا</bdi> 12 MPa"
    assert text("a_b & <i>") == "a_b &amp; &lt;i&gt;"


def test_unseen_characters_are_shown_as_such() -> None:
    """A right-to-left override would turn the rest of the line, a null is no HTML."""
    assert text("a\u202eb\x00c\td") == "a\ufffdb\ufffdc\td"


def test_attributes_cannot_be_left() -> None:
    assert element("p", {"title": '"><script>', "hidden": ""}) == (
        '<p title="&quot;&gt;&lt;script&gt;" hidden></p>'
    )
    assert 'href="#a"' in page_of([Table("t", ("x",), [(Words("a", to="#a"),)])])
