"""A document as a Word file: real headings, numbered captions, tables that carry on over pages.

With a template its styles, margins, header and footer stay, and the text is put after what it holds.
"""

import io
from collections.abc import Sequence
from datetime import datetime
from pathlib import Path
from typing import Any

from convergence.report import _word_file, _word_styles
from convergence.report._columns import A4_WIDTH, WHOLE, bands, shares
from convergence.report._picture import Picture
from convergence.report._word_fields import has_contents, put_contents, put_place, put_simple
from convergence.report._word_parts import bookmark_name, clean, put_words, tag
from convergence.report._word_tables import in_two, set_widths
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
    anchors_of,
    lines,
)

PARAGRAPHS = {"": "Normal", "overall": "Intense Quote", "quote": "Quote", "tiny": "Small Print"}
LONGEST_TITLE, LONG_TITLE_SIZE = 120, 11  # characters; points of a longer one
ROOM = 170  # mm between the margins of our page
ROOM_FOR_TWO = 130  # mm between the margins: with less, pictures stand one below the other
GAP = 3  # mm at the right of each picture of two side by side
GAP_AROUND = 6  # points above pictures, below tables
HIGHEST = 0.5  # share of the height of a page that a picture takes


def as_docx(document: Document, date: str, template: Path | None = None) -> bytes:
    """Return the file; the same document, date and template give the same bytes.

    `InputError` where the template is no Word file.
    """
    file = _word_file.new_file(document) if template is None else _word_file.copy_of(template)
    _Writer(file, document).put(datetime.fromisoformat(date))
    return _word_file.bytes_of(file)


class _Writer:
    """Writes a document at the end of an open Word file."""

    def __init__(self, file: Any, document: Document):
        from docx.shared import Mm

        self.file, self.document = file, document
        self.anchors = anchors_of(document)
        self.passed: list[str] = []  # anchors, in the order in which they are written
        self.numbers = {"Figure": 0, "Table": 0}
        self.styles = {style.name: style.style_id for style in file.styles}
        self.bullet = "" if _word_styles.has_bullets(file) else "\N{BULLET}\t"
        self.first_mark = max(map(int, file.element.xpath("//w:bookmarkStart/@w:id")), default=0)
        section = file.sections[-1]
        self.room = _word_styles.room_of(file)
        self.characters = int(A4_WIDTH * self.room / Mm(ROOM))
        self.has_two, self.gap = self.room >= Mm(ROOM_FOR_TWO), Mm(GAP)
        self.height = int(HIGHEST * (section.page_height - section.top_margin - section.bottom_margin))

    def put(self, date: datetime) -> None:
        document, about = self.document, self.file.core_properties
        about.title, about.author, about.comments = clean(document.title)[:255], "", ""
        about.created = about.modified = date
        self._title(document.title)
        self._paragraph(document.about, "Small Print")
        if not has_contents(self.file):
            put_contents(self.file, [(section.title, section.anchor) for section in document.sections])
        for section in document.sections:
            self._heading(Heading(section.title, section.anchor), "Heading 1")
            self._blocks(section.blocks)

    def _title(self, title: str) -> None:
        from docx.shared import Pt

        run = self._paragraph(title, "Title").runs[0]
        if len(title) > LONGEST_TITLE:
            run.font.size = Pt(LONG_TITLE_SIZE)
            run._r.rPr.append(tag("szCs", val=str(2 * LONG_TITLE_SIZE)))

    def _blocks(self, blocks: Sequence[Block]) -> None:
        before: Block | None = None
        for block in blocks:
            self._block(block, follows_heading=isinstance(before, Heading))
            before = block

    def _block(self, block: Block, follows_heading: bool) -> None:
        match block:
            case Heading():
                self._heading(block, "Heading 2")
            case Paragraph():
                written = self._paragraph(block.text, PARAGRAPHS[block.kind])
                written.paragraph_format.keep_with_next = True if follows_heading else None
                written.paragraph_format.keep_together = True if block.kind == "quote" else None
            case Bullets():
                for item in block.items:
                    self._paragraph(f"{self.bullet}{item}", "List Bullet")
            case Table():
                self._table(block)
            case Figures():
                self._figures(block)
            case Verbatim():
                self._listing(block)
            case Details():
                if not block.is_captioned:
                    self._summary(block.summary)
                self._blocks(block.blocks)

    def _paragraph(self, text: str, style: str) -> Any:
        return self._styled(self.file.add_paragraph(clean(text)), style)

    def _styled(self, paragraph: Any, style: str) -> Any:
        """Give a paragraph its style by id: looked up by name it takes ten times as long."""
        paragraph._p.style = self.styles[style]
        return paragraph

    def _summary(self, text: str) -> None:
        written = self._paragraph(text, "Normal")
        written.runs[0].bold = True
        written.paragraph_format.keep_with_next = True

    def _heading(self, heading: Heading, style: str) -> None:
        paragraph = self._paragraph(heading.text, style)
        paragraph.paragraph_format.keep_with_next = True
        if heading.mark is not None:
            put_words(paragraph.add_run("  "), paragraph, heading.mark, is_place=False)
        self._bookmark(paragraph, heading.anchor)

    def _bookmark(self, paragraph: Any, anchor: str) -> None:
        """Make a paragraph a place that links lead to."""
        if not anchor:
            return
        self.passed.append(anchor)
        number = str(self.first_mark + len(self.passed))
        start = tag("bookmarkStart", id=number, name=bookmark_name(anchor))
        (paragraph.runs[0]._r if paragraph.runs else paragraph._p[-1]).addprevious(start)
        paragraph._p.append(tag("bookmarkEnd", id=number))

    def _caption(self, paragraph: Any, what: str, text: str) -> None:
        """Write a caption whose number Word counts on by itself."""
        self.numbers[what] += 1
        self._styled(paragraph, "Caption")
        paragraph.add_run(f"{what} ")
        put_simple(paragraph, f"SEQ {what} \\* ARABIC", str(self.numbers[what]))
        paragraph.add_run(f": {clean(text)}")

    def _figures(self, figures: Figures) -> None:
        """Write pictures two in a row, the caption of one without a neighbour at its side."""
        pictures = figures.pictures
        if figures.is_wide or not self.has_two:
            for picture in pictures:
                paragraph = self.file.add_paragraph()
                paragraph.paragraph_format.keep_with_next = True
                self._picture(paragraph, picture, self.room)
                self._caption(self.file.add_paragraph(), "Figure", picture.caption)
            return
        made = in_two(self.file, -(-len(pictures) // 2), self.room, self.gap)
        for number, row in enumerate(made.rows):
            pair = pictures[2 * number : 2 * number + 2]
            for cell, picture in zip(row.cells, pair, strict=False):
                self._picture(cell.paragraphs[0], picture, self.room // 2 - self.gap)
                beside = row.cells[1].paragraphs[0] if len(pair) == 1 else cell.add_paragraph()
                self._caption(beside, "Figure", picture.caption)
        self._gap()

    def _picture(self, paragraph: Any, picture: Picture, room: int) -> None:
        """Put a picture where there is room, as large as it was drawn or smaller."""
        from docx.shared import Inches, Pt

        paragraph.paragraph_format.space_before = Pt(GAP_AROUND)
        shape = paragraph.add_run().add_picture(io.BytesIO(picture.png))
        scale = min(1.0, room / Inches(picture.width), self.height / shape.height)
        shape.width, shape.height = int(shape.width * scale), int(shape.height * scale)
        shape._inline.docPr.set("descr", clean(picture.alt))
        shape._inline.docPr.set("name", picture.name)

    def _listing(self, block: Verbatim) -> None:
        """Write text as it stands, short lines in two columns."""
        if not block.is_narrow or not self.has_two:
            self._paragraph(block.text, "Listing")
            return
        rows = block.columns()
        made = in_two(self.file, len(rows), self.room, self.gap)
        for row, halves in zip(made.rows, rows, strict=True):
            for cell, text in zip(row.cells, halves, strict=True):
                self._styled(cell.paragraphs[0], "Listing").add_run(clean(text))
        self._gap()

    def _table(self, table: Table) -> None:
        caption = self.file.add_paragraph()
        caption.paragraph_format.keep_with_next = True
        self._caption(caption, "Table", table.caption)
        for part in bands(table, self.characters):
            self._band(part)

    def _band(self, table: Table) -> None:
        """Write a table, or as much of its columns as a page is wide."""
        made = self.file.add_table(rows=1 + len(table.rows), cols=len(table.head), style=_word_styles.TABLE)
        set_widths(made, [int(self.room * share) for share in shares(table, self.characters)])
        count = len(table.rows)
        stay = range(count) if count <= WHOLE else (0, 1, count - 1)  # rows on the page of the one below
        for number, (row, cells) in enumerate(zip(made.rows, (table.head, *table.rows), strict=True)):
            self._row(row, cells, table, is_head=number == 0, stays=number in stay)
        made.rows[0]._tr.get_or_add_trPr().append(tag("tblHeader"))
        self._gap()

    def _row(self, row: Any, cells: Sequence[Cell], table: Table, is_head: bool, stays: bool) -> None:
        from docx.enum.text import WD_ALIGN_PARAGRAPH

        for x, (place, cell) in enumerate(zip(row.cells, cells, strict=True)):
            paragraph = self._styled(place.paragraphs[0], "Table Text")
            paragraph.alignment = WD_ALIGN_PARAGRAPH.LEFT if table.is_words(x) else WD_ALIGN_PARAGRAPH.RIGHT
            paragraph.paragraph_format.keep_with_next = True if stays else None
            for number, words in enumerate(lines(cell)):
                if number:
                    paragraph.add_run().add_break()
                run = paragraph.add_run()
                run.bold = True if is_head or x == 0 else None
                self._words(run, paragraph, words)

    def _words(self, run: Any, paragraph: Any, words: Words) -> None:
        """Write words of a table: a mark, a link to a place of the document, or plain."""
        to = words.to.removeprefix("#")
        put_words(run, paragraph, words, is_place=to in self.anchors)
        if words.paged and to in self.anchors:
            put_place(paragraph, to, is_above=to in self.passed)
        self._bookmark(paragraph, words.anchor)

    def _gap(self) -> None:
        """Leave room after a table; without it the next one would be joined to it."""
        from docx.shared import Pt

        layout = self._paragraph("", "Table Text").paragraph_format
        layout.line_spacing = Pt(GAP_AROUND)
