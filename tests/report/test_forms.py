"""The three forms of one document: the same words, hostile ones too, and the same bytes twice."""

import io
import zipfile
from pathlib import Path

import docx
import pypdf
import pytest

from convergence.errors import InputError
from convergence.report._picture import draw
from convergence.report.as_docx import as_docx
from convergence.report.as_html import as_html
from convergence.report.as_pdf import as_pdf
from convergence.report.content import (
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


def test_the_word_file_has_headings_captions_and_tables(word: bytes) -> None:
    file = docx.Document(io.BytesIO(word))
    styles = {paragraph.text: paragraph.style.name for paragraph in file.paragraphs}
    assert styles["First section"] == "Heading 1" and styles["hook  sound"] == "Heading 2"
    captions = [p._p.xpath("string()") for p in file.paragraphs if p.style.name == "Caption"]
    assert captions == ["Table 1: Values", "Figure 1: What is seen.", "Table 2: Inner"]
    assert [len(table.rows) for table in file.tables] == [2 + len(HOSTILE), 2]
    assert file.tables[0].rows[0]._tr.xpath("./w:trPr/w:tblHeader"), "the head is repeated on every page"
    (picture,) = file.inline_shapes
    assert picture._inline.docPr.get("descr") == "alt & <b>"
    links = file.element.xpath("//w:hyperlink/@w:anchor")
    assert links == ["hook"] and "hook" in file.element.xpath("//w:bookmarkStart/@w:name")


def test_the_word_file_has_every_word(word: bytes) -> None:
    cells = [cell.text for row in docx.Document(io.BytesIO(word)).tables[0].rows for cell in row.cells]
    for words in HOSTILE[:-1]:
        assert cells.count(words) == 2
    assert "bell\ufffd and null\ufffd" in cells, "what XML cannot hold"


def test_the_page_has_every_word_as_text(document: Document) -> None:
    page = as_html(document)
    assert page.count("<script>") == 1 and page.count("&lt;script&gt;") >= 4
    assert "Figure 1. " in page and "Table 2. " in page


def test_the_same_bytes_twice(document: Document, pdf: bytes, word: bytes) -> None:
    assert (
        as_pdf(document) == pdf and as_docx(document, DAY) == word and as_html(document) == as_html(document)
    )


@pytest.fixture
def template(tmp_path: Path) -> Path:
    """A company's file: its own font of headings, a header, a cover, and no style for captions."""
    file = docx.Document()
    file.styles["Heading 1"].font.name = "Davit Sans"
    file.sections[0].header.paragraphs[0].text = "Quayside Davits, form 12"
    file.add_paragraph("Cover")
    caption = file.styles["Caption"]
    caption.element.getparent().remove(caption.element)
    path = tmp_path / "company.docx"
    file.save(path)
    return path


def test_a_company_template_keeps_its_looks(document: Document, template: Path) -> None:
    file = docx.Document(io.BytesIO(as_docx(document, DAY, template)))
    assert file.styles["Heading 1"].font.name == "Davit Sans"
    assert file.sections[0].header.paragraphs[0].text == "Quayside Davits, form 12"
    texts = [paragraph.text for paragraph in file.paragraphs]
    assert texts[0] == "Cover" and "First section" in texts
    assert any(p._p.xpath("string()") == "Table 1: Values" for p in file.paragraphs), "in a plain paragraph"


@pytest.mark.parametrize("content", [None, b"", b"no archive", b"zip"])
def test_what_is_no_template_is_refused(document: Document, tmp_path: Path, content: bytes | None) -> None:
    path = tmp_path / "company.docx"
    if content == b"zip":
        with zipfile.ZipFile(path, "w") as archive:
            archive.writestr("a.txt", "not a document")
    elif content is not None:
        path.write_bytes(content)
    with pytest.raises(InputError, match="not a Word document"):
        as_docx(document, DAY, path)


def test_a_folder(document: Document, tmp_path: Path) -> None:
    written = write_document(
        document, tmp_path / "out", ("record.json", {"a": 1}), DAY, Forms(("html", "pdf", "docx"))
    )
    assert [path.name for path in written] == ["report.html", "report.pdf", "report.docx"]
    assert all(path.stat().st_size > 1000 for path in written)
    assert sorted(path.name for path in (tmp_path / "out" / "figures").iterdir()) == ["plot.png", "plot.svg"]
