"""The Word file that is written into: a new one in our look, or a copy of a template; and its bytes."""

import io
import zipfile
from pathlib import Path
from typing import Any

from convergence.errors import Fault, InputError
from convergence.report import _word_styles
from convergence.report._word_fields import put_pages
from convergence.report._word_parts import clean
from convergence.report.content import FOOT, Document

A4, MARGINS = (210, 297), (20, 22, 20, 20)  # mm; left, top, right, bottom
KINDS = "[Content_Types].xml"
MAIN = b"application/vnd.openxmlformats-officedocument.wordprocessingml.%s.main+xml"
LONG_AGO = (1980, 1, 1, 0, 0, 0)  # the first date a zip archive knows


def new_file(document: Document) -> Any:
    """Return an empty file in our look, with running title and page numbers."""
    import docx
    from docx.oxml.ns import qn

    file = docx.Document()
    _lay_out(file.sections[0])
    _word_styles.dress(file)
    for mode in file.settings.element.xpath("//w:compatSetting[@w:name='compatibilityMode']"):
        mode.set(qn("w:val"), "15")  # that of Word since 2013
    links = file.part.package.rels
    for link in [link for link in links if links[link].reltype.endswith("/thumbnail")]:
        del links[link]  # the picture of another document
    _head_and_foot(file, document)
    return file


def copy_of(template: Path) -> Any:
    """Return a copy of a template (.docx or .dotx); styles that it lacks are added.

    `InputError` where it is no Word file.
    """
    import docx
    from docx.opc.exceptions import PackageNotFoundError

    try:
        file = docx.Document(io.BytesIO(_as_document(template.read_bytes())))
    except (PackageNotFoundError, ValueError, KeyError, OSError, zipfile.BadZipFile):
        right = "give the path of a Word document (.docx or .dotx) whose styles are to be used"
        raise InputError([Fault(str(template), "not a Word document", right)]) from None
    _word_styles.complete(file)
    return file


def bytes_of(file: Any) -> bytes:
    """Return the file with one date for all its members."""
    made, dateless = io.BytesIO(), io.BytesIO()
    file.save(made)
    with zipfile.ZipFile(made) as old, zipfile.ZipFile(dateless, "w", zipfile.ZIP_DEFLATED) as new:
        for name in old.namelist():
            new.writestr(zipfile.ZipInfo(name, LONG_AGO), old.read(name), zipfile.ZIP_DEFLATED)
    return dateless.getvalue()


def _as_document(content: bytes) -> bytes:
    """Return a template as the document that it is a template of."""
    made = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(content)) as old, zipfile.ZipFile(made, "w") as new:
        for name in old.namelist():
            part = old.read(name)
            new.writestr(
                name, part.replace(MAIN % b"template", MAIN % b"document") if name == KINDS else part
            )
    return made.getvalue()


def _lay_out(section: Any) -> None:
    from docx.shared import Mm

    section.page_width, section.page_height = (Mm(side) for side in A4)
    section.left_margin, section.top_margin, section.right_margin, section.bottom_margin = map(Mm, MARGINS)
    section.header_distance = section.footer_distance = Mm(10)


def _head_and_foot(file: Any, document: Document) -> None:
    """Write the running title, but for the first page, and page numbers."""
    from docx.enum.text import WD_TAB_ALIGNMENT

    section = file.sections[0]
    section.different_first_page_header_footer = True
    head = section.header.paragraphs[0]
    head.text = clean(f"{document.running}\t{document.about}")
    feet = [foot.paragraphs[0] for foot in (section.first_page_footer, section.footer)]
    for foot in feet:
        foot.text = f"{FOOT}\t"
        put_pages(foot)
    for paragraph in (head, *feet):
        stop = _word_styles.room_of(file)
        paragraph.paragraph_format.tab_stops.add_tab_stop(stop, WD_TAB_ALIGNMENT.RIGHT)
