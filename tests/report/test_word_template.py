"""The template of a company: its looks stay, what it lacks is added, what is no template is refused."""

import io
import zipfile
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import docx
import pytest
from docx.shared import Mm

from convergence.errors import InputError
from convergence.report._picture import draw
from convergence.report.as_docx import as_docx
from convergence.report.content import Bullets, Document, Figures, Heading, Section, Table

DAY = "2031-05-02"
LACKING = (
    "Title",
    "Heading 2",
    "Caption",
    "List Bullet",
    "Quote",
    "Intense Quote",
    "Table Grid",
    "TOC Heading",
)
Company = Callable[..., Path]


@pytest.fixture(scope="module")
def document() -> Document:
    picture = draw("plot", (5.2, 4.1), "alt", "What is seen.", lambda f: f.add_subplot().plot([1, 2]))
    pictures = Figures([replace(picture, name=name) for name in ("left", "right")])
    table = Table("Values", ("name", "value"), [("hook", "1.0")])
    blocks = [Heading("hook", "hook"), Bullets(["One.", "Two."]), table, pictures]
    return Document("Hook of the davit", "about", [Section("first", "First", "First section", blocks)])


@pytest.fixture
def company(tmp_path: Path) -> Company:
    """Write a company's file: its own headings, page, header and footer; without some styles."""

    def make(*lacking: str, width: float = 215.9) -> Path:
        file = docx.Document()
        file.styles["Heading 1"].font.name = "Davit Sans"
        (section,) = file.sections
        section.page_width, section.left_margin, section.right_margin = Mm(width), Mm(31), Mm(17)
        section.header.paragraphs[0].text = "Quayside Davits, form 12"
        section.footer.paragraphs[0].text = "Confidential"
        file.add_paragraph("Cover")
        for name in lacking:
            style = file.styles[name].element
            style.getparent().remove(style)
        path = tmp_path / "company.docx"
        file.save(str(path))
        return path

    return make


def opened(document: Document, template: Path) -> Any:
    return docx.Document(io.BytesIO(as_docx(document, DAY, template)))


def test_a_template_keeps_its_looks(document: Document, company: Company) -> None:
    path = company()
    before, file = docx.Document(str(path)), opened(document, path)
    for name in (
        "Normal",
        "Title",
        "Heading 1",
        "Heading 2",
        "Caption",
        "List Bullet",
        "Quote",
        "Table Grid",
    ):
        assert file.styles[name].element.xml == before.styles[name].element.xml, name
    (old,), (new,) = before.sections, file.sections
    assert new._sectPr.xml == old._sectPr.xml, "page and margins"
    assert new.header._element.xml == old.header._element.xml
    assert new.footer._element.xml == old.footer._element.xml
    texts = [paragraph.text for paragraph in file.paragraphs]
    assert texts[:2] == ["Cover", "Hook of the davit"] and "First section" in texts


def test_styles_that_it_lacks_are_added(document: Document, company: Company) -> None:
    file = opened(document, company(*LACKING))
    assert set(LACKING) <= {style.name for style in file.styles}
    assert file.styles["Heading 1"].font.name == "Davit Sans"
    assert file.styles["Heading 2"].font.name is None, "the font of the template's text"
    assert file.styles["Heading 2"].element.xpath("./w:pPr/w:outlineLvl/@w:val") == ["1"]
    styles = {p.text: p.style.name for p in file.paragraphs}
    assert styles["Table : Values"] == "Caption", "its number is a field"
    assert styles["hook"] == "Heading 2"
    assert styles["•\tOne."] == "List Bullet", "a list without numbering shows its bullets itself"
    assert file.tables[0].style.name == "Table Grid"


def test_it_may_have_contents_and_bookmarks(document: Document, company: Company) -> None:
    """Its contents stay the only ones; bookmarks of both have numbers of their own."""
    path = company()
    path.write_bytes(as_docx(document, DAY, path))
    file = opened(replace(document, sections=[Section("other", "Other", "Other section", [])]), path)
    assert len(file.element.xpath("//w:docPartGallery")) == 1
    numbers = file.element.xpath("//w:bookmarkStart/@w:id")
    assert file.element.xpath("//w:bookmarkStart/@w:name") == ["at_first", "at_hook", "at_other"]
    assert len(set(numbers)) == len(numbers)


def test_a_narrow_one_has_one_picture_in_a_row(document: Document, company: Company) -> None:
    file = opened(document, company(width=148))
    (section,) = file.sections
    room = int(section.page_width - section.left_margin - section.right_margin)
    assert not any(table._tbl.xpath(".//w:drawing") for table in file.tables)
    widths = [int(width) for width in file.element.xpath("//w:drawing//wp:extent/@cx")]
    assert len(widths) == 2 and room // 2 < max(widths) <= room


def test_a_dotx_is_one_too(document: Document, company: Company) -> None:
    path = company().with_suffix(".dotx")
    with zipfile.ZipFile(path.with_suffix(".docx")) as old, zipfile.ZipFile(path, "w") as new:
        for name in old.namelist():
            new.writestr(name, old.read(name).replace(b"document.main+xml", b"template.main+xml"))
    with pytest.raises(ValueError, match="not a Word file"):
        docx.Document(str(path))
    assert opened(document, path).sections[0].footer.paragraphs[0].text == "Confidential"


@pytest.mark.parametrize("content", [None, b"", b"no archive", b"zip"])
def test_what_is_none_is_refused(document: Document, tmp_path: Path, content: bytes | None) -> None:
    path = tmp_path / "company.docx"
    if content == b"zip":
        with zipfile.ZipFile(path, "w") as archive:
            archive.writestr("a.txt", "not a document")
    elif content is not None:
        path.write_bytes(content)
    with pytest.raises(InputError, match="not a Word document"):
        as_docx(document, DAY, path)


def test_the_same_bytes_twice(document: Document, company: Company) -> None:
    path = company(*LACKING)
    assert as_docx(document, DAY, path) == as_docx(document, DAY, path)
