"""A document as a Word file: real headings, numbered captions, tables that carry on over pages.

With a template its styles, page and header stay, and the text is put after what it holds.
"""

import io
import zipfile
from collections.abc import Sequence
from datetime import datetime
from pathlib import Path
from typing import Any

from convergence.errors import Fault, InputError
from convergence.report._picture import Picture
from convergence.report._word_parts import bookmark_name, clean, put_words, shares, tag
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Details,
    Document,
    Figures,
    Heading,
    Paragraph,
    Table,
    Verbatim,
    Words,
    lines,
)

STYLES = {  # the first one that the template has; the last is Word's own for any text
    "title": ("Title", "Heading 1", "Normal"),
    "bullets": ("List Bullet", "List Paragraph", "Normal"),
    "quote": ("Quote", "Intense Quote", "Normal"),
    "caption": ("Caption", "Normal"),
    "table": ("Table Grid", "Normal Table"),
    "overall": ("Intense Quote", "Quote", "Normal"),
}
SMALL, TABLE_SIZE = 8, 8  # points
WIDEST = 5.0  # inches, so that two figures stand on a page
A4, MARGIN = (210, 297), 22  # mm
LONG_AGO = (1980, 1, 1, 0, 0, 0)  # the first date a zip archive knows


def as_docx(document: Document, date: str, template: Path | None = None) -> bytes:
    """Return the file; the same document, date and template give the same bytes.

    `InputError` where the template is no Word file.
    """
    writer = _Writer(_opened(template))
    writer.put(document, datetime.fromisoformat(date))
    return _dateless(writer.saved())


def _opened(template: Path | None) -> Any:
    import docx
    from docx.opc.exceptions import PackageNotFoundError

    if template is None:
        return _a4(docx.Document())
    try:
        return docx.Document(str(template))
    except (PackageNotFoundError, ValueError, KeyError, OSError, zipfile.BadZipFile):
        right = "give the path of a Word document (.docx) whose styles are to be used"
        raise InputError([Fault(str(template), "not a Word document", right)]) from None


def _a4(file: Any) -> Any:
    from docx.shared import Mm

    section = file.sections[0]
    section.page_width, section.page_height = (Mm(side) for side in A4)
    section.left_margin = section.right_margin = section.top_margin = section.bottom_margin = Mm(MARGIN)
    return file


def _dateless(file: bytes) -> bytes:
    """Return the archive with one date for all its members."""
    made = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(file)) as old, zipfile.ZipFile(made, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            new.writestr(zipfile.ZipInfo(name, LONG_AGO), old.read(name), zipfile.ZIP_DEFLATED)
    return made.getvalue()


class _Writer:
    """Writes blocks at the end of an open Word document."""

    def __init__(self, file: Any):
        self.file = file
        self.numbers = {"Figure": 0, "Table": 0}
        self.bookmarks = 0

    def saved(self) -> bytes:
        made = io.BytesIO()
        self.file.save(made)
        return made.getvalue()

    def put(self, document: Document, date: datetime) -> None:
        about = self.file.core_properties
        about.title, about.author, about.comments = clean(document.title)[:255], "", ""
        about.created = about.modified = date
        self._paragraph(document.title, "title")
        self._small(document.about)
        for section in document.sections:
            self._heading(section.title, 1, section.anchor)
            for block in section.blocks:
                self._block(block)

    def _block(self, block: Block) -> None:
        match block:
            case Heading():
                self._heading(block.text, 2, block.anchor, block.mark)
            case Paragraph(kind="tiny"):
                self._small(block.text)
            case Paragraph():
                self._paragraph(block.text, block.kind)
            case Bullets():
                for item in block.items:
                    self._paragraph(item, "bullets")
            case Table():
                self._table(block)
            case Figures():
                for picture in block.pictures:
                    self._figure(picture)
            case Verbatim():
                self._verbatim(block.text)
            case Details():
                self._paragraph(block.summary).runs[0].bold = True
                for each in block.blocks:
                    self._block(each)

    def _style(self, name: str) -> str | None:
        wanted = STYLES.get(name, ())
        known = {style.name for style in self.file.styles}
        return next((style for style in wanted if style in known), None)

    def _paragraph(self, text: str, kind: str = "") -> Any:
        return self.file.add_paragraph(clean(text), style=self._style(kind))

    def _small(self, text: str) -> None:
        from docx.shared import Pt

        self._paragraph(text).runs[0].font.size = Pt(SMALL)

    def _heading(self, text: str, level: int, anchor: str, mark: Words | None = None) -> None:
        name = f"Heading {level}"
        known = name in {style.name for style in self.file.styles}
        paragraph = self.file.add_paragraph(style=name if known else None)
        run = paragraph.add_run(clean(text))
        run.bold = None if known else True
        if mark is not None:
            put_words(paragraph.add_run("  "), paragraph, mark)
        self._bookmark(paragraph, anchor)

    def _bookmark(self, paragraph: Any, anchor: str) -> None:
        """Mark a place that links lead to."""
        if not anchor:
            return
        self.bookmarks += 1
        number = str(self.bookmarks)
        paragraph._p.append(tag("bookmarkStart", id=number, name=bookmark_name(anchor)))
        paragraph._p.append(tag("bookmarkEnd", id=number))

    def _caption(self, what: str, text: str, stays_with_next: bool) -> None:
        """Write a caption whose number Word counts on by itself."""
        self.numbers[what] += 1
        paragraph = self.file.add_paragraph(style=self._style("caption"))
        paragraph.paragraph_format.keep_with_next = stays_with_next
        paragraph.add_run(f"{what} ")
        field = tag("fldSimple", instr=f" SEQ {what} \\* ARABIC ")
        run = paragraph.add_run(str(self.numbers[what]))
        field.append(run._r)
        paragraph._p.append(field)
        paragraph.add_run(f": {clean(text)}")

    def _room(self) -> int:
        """Return the width between the margins."""
        section = self.file.sections[-1]
        return int(section.page_width - section.left_margin - section.right_margin)

    def _figure(self, picture: Picture) -> None:
        from docx.shared import Inches

        paragraph = self.file.add_paragraph()
        paragraph.paragraph_format.keep_with_next = True
        shape = paragraph.add_run().add_picture(
            io.BytesIO(picture.png), width=min(Inches(min(picture.width, WIDEST)), self._room())
        )
        shape._inline.docPr.set("descr", clean(picture.alt))
        shape._inline.docPr.set("name", picture.name)
        self._caption("Figure", picture.caption, stays_with_next=False)

    def _table(self, table: Table) -> None:
        self._caption("Table", table.caption, stays_with_next=True)
        made = self.file.add_table(rows=1 + len(table.rows), cols=len(table.head), style=self._style("table"))
        made.autofit = False
        widths = shares(list(zip(table.head, *table.rows, strict=True)))
        for column, share in zip(made.columns, widths, strict=True):
            column.width = int(self._room() * share)
            for cell in column.cells:
                cell.width = column.width
        self._row(made.rows[0], table.head, table, bold=True)
        made.rows[0]._tr.get_or_add_trPr().append(tag("tblHeader"))
        for row, cells in zip(list(made.rows)[1:], table.rows, strict=True):
            self._row(row, cells, table)
        for row in made.rows:
            row._tr.get_or_add_trPr().append(tag("cantSplit"))
        self.file.add_paragraph()

    def _row(self, row: Any, cells: Sequence[Cell], table: Table, bold: bool = False) -> None:
        from docx.enum.text import WD_ALIGN_PARAGRAPH
        from docx.shared import Pt

        for x, (place, cell) in enumerate(zip(row.cells, cells, strict=True)):
            paragraph = place.paragraphs[0]
            paragraph.alignment = WD_ALIGN_PARAGRAPH.LEFT if table.is_words(x) else WD_ALIGN_PARAGRAPH.RIGHT
            paragraph.paragraph_format.space_after = Pt(0)
            for number, words in enumerate(lines(cell)):
                if number:
                    paragraph.add_run().add_break()
                run = paragraph.add_run()
                run.font.size, run.bold = Pt(TABLE_SIZE), True if bold else None
                put_words(run, paragraph, words)
                self._bookmark(paragraph, words.anchor)

    def _verbatim(self, text: str) -> None:
        from docx.shared import Pt

        run = self.file.add_paragraph().add_run(clean(text))
        run.font.name, run.font.size = "Courier New", Pt(SMALL - 1)
