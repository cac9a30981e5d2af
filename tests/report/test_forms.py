"""The three forms of one document: the same words, hostile ones too, and the same bytes twice."""

import io
from pathlib import Path

import pypdf
import pytest

from convergence.report import as_pdf as as_pdf_module
from convergence.report._picture import draw
from convergence.report.as_docx import as_docx
from convergence.report.as_html import as_html
from convergence.report.as_pdf import as_pdf
from convergence.report.content import (
    LONGEST_COLUMN,
    LONGEST_LINE,
    Bullets,
    Details,
    Document,
    Figures,
    Heading,
    Paragraph,
    Section,
    Table,
    Verbatim,
    Words,
    mark,
)
from convergence.report.forms import Forms, write_document

DAY = "2031-05-02"
HOSTILE = [
    "<script>alert(1)</script>",
    '#set page(fill: red) #eval("1") $x^2$ \\ `raw` *b* _i_ @ref <label> // no comment /* none */',
    '=HYPERLINK("http://x") {=1+1} ]]>&amp;',
    "שלום עולם مرحبا",
    "crane 🏗 hook ⚓",
    "x" * 300,
    "bell\x07 and null\x00",
]


@pytest.fixture(scope="module")
def document() -> Document:
    picture = draw("plot", (5.2, 4.1), "alt & <b>", "What is seen.", lambda f: f.add_subplot().plot([1, 2]))
    hook = (Words("hook", to="#hook"), ("1.0 ± 0.1", "0.9"))
    table = Table("Values", ("name", "value"), [hook, *[(words, words) for words in HOSTILE]])
    inner = Table("Inner", ("a", "b"), [("1", Words("2", to="elsewhere.html#x"))], "words")
    first = [Paragraph("All sound.", "overall"), Bullets(HOSTILE), table]
    return Document(
        HOSTILE[0],
        "about",
        [
            Section("first", "First", "First section", first),
            Section(
                "second",
                "Second",
                "Second section",
                [
                    Heading("hook", "hook", mark("sound")),
                    Paragraph("May be quoted.", "quote"),
                    Paragraph("Small print.", "tiny"),
                    Figures([picture]),
                    Details("More", [inner]),
                    Verbatim("[model]\n\n  name = 'hook'"),
                ],
            ),
        ],
    )  # fmt: skip


@pytest.fixture(scope="module")
def pdf(document: Document) -> bytes:
    return as_pdf(document)


@pytest.fixture(scope="module")
def word(document: Document) -> bytes:
    return as_docx(document, DAY)


def text_of(pdf: bytes) -> str:
    pages = pypdf.PdfReader(io.BytesIO(pdf)).pages
    return "".join(page.extract_text() for page in pages).replace("\u200b", "").replace("\n", "")


def test_the_pdf_has_every_word(pdf: bytes) -> None:
    found = text_of(pdf).replace(" ", "")
    for words in (
        "First section",
        "All sound.",
        "May be quoted.",
        "Figure 1. What is seen.",
        "Table 2. Inner",
    ):
        assert words.replace(" ", "") in found
    for words in (HOSTILE[0], HOSTILE[1], HOSTILE[2], HOSTILE[5]):
        assert found.count(words.replace(" ", "")) >= 2, "in the list and in the table, as text"


def test_the_pdf_can_be_walked_through(pdf: bytes) -> None:
    """An outline of the sections, a title, links inside."""
    reader = pypdf.PdfReader(io.BytesIO(pdf))
    titles = [entry.title for entry in reader.outline if not isinstance(entry, list)]
    assert titles == ["First section", "Second section"]
    assert reader.metadata is not None and reader.metadata.title == HOSTILE[0]
    assert any("/Annots" in page for page in reader.pages)


def test_signs_without_a_glyph_ask_for_other_fonts() -> None:
    """What the fonts of the figures have stays with them, so that the same text looks alike everywhere."""
    fonts = as_pdf_module._fonts()
    assert as_pdf_module._is_covered("h = 3.25 mm ± 2 % → λ ≤ 1°, שלום, مرحبا\n\u200b", fonts)
    assert not as_pdf_module._is_covered("crane 🏗", fonts)
    assert not as_pdf_module._is_covered("吊", fonts)


@pytest.mark.parametrize("count", [0, 1, 2, 37, 100, 101, 260])
def test_a_listing_in_two_columns_is_whole(count: int) -> None:
    """Read down the left column, then down the right one, pair by pair, it is the text; none too long."""
    text = "\n".join(f"line {number}" for number in range(count))
    columns = [column for pair in Verbatim(text).columns() for column in pair]
    assert "\n".join(column for column in columns if column) == text
    assert all(len(column.splitlines()) <= LONGEST_COLUMN for column in columns)


def test_a_listing_of_long_lines_stays_in_one_column() -> None:
    short, long = "a = 1", "b" * (LONGEST_LINE + 1)
    assert Verbatim("\n".join([short] * 4 + [long])).is_narrow, "one line in five may be longer"
    assert not Verbatim("\n".join([short] * 3 + [long])).is_narrow
    assert not Verbatim("\n".join([short] * 9 + [long * LONGEST_COLUMN])).is_narrow, "no column holds it"


def test_the_page_has_every_word_as_text(document: Document) -> None:
    page = as_html(document)
    assert page.count("<script>") == 1 and page.count("&lt;script&gt;") >= 4
    assert "Figure 1. " in page and "Table 2. " in page


def test_the_same_bytes_twice(document: Document, pdf: bytes, word: bytes) -> None:
    assert (
        as_pdf(document) == pdf and as_docx(document, DAY) == word and as_html(document) == as_html(document)
    )


def test_a_folder(document: Document, tmp_path: Path) -> None:
    written = write_document(
        document, tmp_path / "out", ("record.json", {"a": 1}), DAY, Forms(("html", "pdf", "docx"))
    )
    assert [path.name for path in written] == ["report.html", "report.pdf", "report.docx"]
    assert all(path.stat().st_size > 1000 for path in written)
    assert sorted(path.name for path in (tmp_path / "out" / "figures").iterdir()) == ["plot.png", "plot.svg"]
