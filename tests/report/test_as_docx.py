"""The Word form: what Word counts, refers to and keeps together."""

import io
from dataclasses import replace
from typing import Any

import docx
import pytest

from convergence.report._picture import Picture, draw
from convergence.report.as_docx import HIGHEST, WHOLE, as_docx
from convergence.report.content import (
    FOOT,
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

DAY = "2031-05-02"
HOSTILE = ["<w:p/>", "]]>&amp;", "שלום עולם", "crane 🏗", "x" * 300, "=1+1"]


@pytest.fixture(scope="module")
def picture() -> Picture:
    return draw("plot", (5.2, 4.1), "alt & <b>", "What is seen.", lambda f: f.add_subplot().plot([1, 2]))


@pytest.fixture(scope="module")
def document(picture: Picture) -> Document:
    names = [(words, words) for words in HOSTILE]
    values = Table("Values", ("name", "value"), [(Words("hook", to="#hook"), "9e-05"), *names])
    places = (Words("First", to="#first", paged=True), Words("Second", to="#second", paged=True))
    record = Table("Where", ("point", "here"), [("1. Loads", places), ("2. Tests", "nowhere")], "words")
    links = [(Words("out", to="other.html#x"),), (Words("lost", to="#lost", paged=True),)]
    parts = [
        Heading("hook", "hook", mark("sound")),
        Paragraph("Small print.", "tiny"),
        Paragraph("May be quoted.", "quote"),
        Figures([replace(picture, name=f"plot-{n}") for n in range(3)]),
        Figures([replace(picture, name="wide", width=6.6)]),
        Table("Long", ("n", "v"), [(str(n), "1") for n in range(WHOLE + 5)]),
        Details("Inner", [Table("Inner", ("a",), links)]),
        Details("The study", [Verbatim("[model]\n\n  name = 'hook'")]),
    ]  # fmt: skip
    first = [Paragraph("All sound.", "overall"), Bullets(HOSTILE), values]
    sections = [
        Section("first", "First", "First section", first),
        Section("record", "Record", "Record", [record]),
        Section("second", "Second", "Second section", parts),
    ]
    return Document("Hook of the davit", "about", sections)


def opened(document: Document) -> Any:
    return docx.Document(io.BytesIO(as_docx(document, DAY)))


@pytest.fixture(scope="module")
def file(document: Document) -> Any:
    return opened(document)


def text_of(element: Any) -> str:
    return str(element.xpath("string()"))


def test_headings_captions_and_every_word(file: Any) -> None:
    styles = {paragraph.text: paragraph.style.name for paragraph in file.paragraphs}
    assert styles["First section"] == "Heading 1" and styles["hook  sound"] == "Heading 2"
    captions = [text_of(p) for p in file.element.xpath("//w:p[w:pPr/w:pStyle/@w:val='Caption']")]
    assert captions == [
        "Table 1: Values", "Table 2: Where", "Figure 1: What is seen.", "Figure 2: What is seen.",
        "Figure 3: What is seen.", "Figure 4: What is seen.", "Table 3: Long", "Table 4: Inner",
    ]  # fmt: skip
    counted = file.element.xpath("//w:fldSimple/@w:instr")
    assert counted.count(r" SEQ Figure \* ARABIC ") == counted.count(r" SEQ Table \* ARABIC ") == 4
    cells = [cell.text for row in file.tables[0].rows for cell in row.cells]
    assert all(cells.count(words) == 2 for words in HOSTILE)
    assert "The study" in styles and "Inner" not in styles, "a summary is not said twice"


def test_figures_stand_two_in_a_row_with_their_captions(file: Any) -> None:
    figures = next(table for table in file.tables if table._tbl.xpath(".//w:drawing"))
    cells = [[cell._tc for cell in row.cells] for row in figures.rows]
    assert [[len(cell.xpath(".//w:drawing")) for cell in row] for row in cells] == [[1, 1], [1, 0]]
    said = [[text_of(cell)[:8] for cell in row] for row in cells]
    assert said == [["Figure 1", "Figure 2"], ["", "Figure 3"]], "at the side of the one that is alone"
    (section,) = file.sections
    room = int(section.page_width - section.left_margin - section.right_margin)
    *halves, whole = [int(width) for width in file.element.xpath("//w:drawing//wp:extent/@cx")]
    assert len(halves) == 3 and max(halves) <= room // 2 < whole <= room
    assert file.element.xpath("//wp:docPr/@descr") == ["alt & <b>"] * 4


def test_a_picture_is_never_higher_than_a_page(document: Document) -> None:
    tall = draw("tall", (6.0, 20.0), "alt", "Tall.", lambda f: f.add_subplot().plot([1, 2]))
    file = opened(replace(document, sections=[Section("a", "A", "A", [Figures([tall])])]))
    (shape,) = file.inline_shapes
    assert shape.height <= HIGHEST * file.sections[0].page_height
    assert shape.width / shape.height == pytest.approx(6 / 20, rel=1e-3)  # 1080 by 3600 pixels


def test_nothing_stands_alone_at_the_foot_of_a_page(file: Any) -> None:
    """Headings, captions of tables and short tables stay with what follows; rows are never parted."""
    for paragraph in file.paragraphs:
        text, kept = text_of(paragraph._p), paragraph.paragraph_format.keep_with_next
        if paragraph.style.name.startswith("Heading") or text in ("Small print.", "The study"):
            assert kept, text
        if paragraph.style.name == "Caption":
            assert bool(kept) is text.startswith("Table"), text
    for table in file.tables:
        assert all(row._tr.xpath("./w:trPr/w:cantSplit") for row in table.rows)
    values, _, long, _ = [
        [bool(row.cells[0].paragraphs[0].paragraph_format.keep_with_next) for row in table.rows]
        for table in file.tables
        if table.rows[0]._tr.xpath("./w:trPr/w:tblHeader")
    ]
    assert values == [True] * 7 + [False]
    assert long == [True, True, *[False] * (WHOLE + 2), True, False], "neither its head nor its end is alone"


def test_the_record_says_where_each_point_stands(file: Any) -> None:
    """Word finds the page; until it is asked to, the field says what is true without it."""
    fields = [text.split()[:2] for text in file.element.xpath("//w:instrText/text()")]
    assert fields[1:] == [["PAGEREF", "at_first"], ["PAGEREF", "at_second"]]
    assert file.tables[1].cell(1, 1).text == "First, above\nSecond, below"
    kinds = file.element.xpath("//w:fldChar/@w:fldCharType")
    assert kinds.count("begin") == kinds.count("separate") == kinds.count("end") == len(fields)
    places = file.element.xpath("//w:bookmarkStart/@w:name")
    assert {"at_first", "at_second", "at_hook"} <= set(places) and len(set(places)) == len(places)
    assert set(file.element.xpath("//w:hyperlink/@w:anchor")) <= set(places), "no link leads nowhere"
    assert not file.settings.element.xpath("//w:updateFields"), "Word would ask before it opens the file"


def test_contents_pages_and_outline(file: Any) -> None:
    assert file.element.xpath("//w:sdt//w:docPartGallery/@w:val") == ["Table of Contents"]
    heading, *entries, note = file.element.xpath("//w:sdt//w:p")
    titles = ["".join(entry.xpath(".//w:t/text()")) for entry in entries]
    assert text_of(heading) == "Contents" and titles == ["First section", "Record", "Second section"]
    assert "F9" in text_of(note) and note.xpath(".//w:fldChar[@w:fldCharType='end']"), "gone once updated"
    levels = [file.styles[f"Heading {n}"].element.xpath("./w:pPr/w:outlineLvl/@w:val") for n in (1, 2)]
    assert levels == [["0"], ["1"]]
    (section,) = file.sections
    for foot in (section.footer, section.first_page_footer):
        assert text_of(foot._element).strip() == f"{FOOT}Page 1 of 1"
        assert foot._element.xpath(".//w:fldSimple/@w:instr") == [" PAGE ", " NUMPAGES "]
    assert section.header.paragraphs[0].text == "Hook of the davit\tabout"
    assert section.first_page_header.paragraphs[0].text == ""


def test_an_exponent_is_not_parted(file: Any) -> None:
    cell = file.tables[0].cell(1, 1)
    assert cell.text == "9e-05" and cell._tc.xpath(".//w:noBreakHyphen")


def test_the_same_bytes_twice(document: Document) -> None:
    assert as_docx(document, DAY) == as_docx(document, DAY) != as_docx(document, "2031-05-03")
