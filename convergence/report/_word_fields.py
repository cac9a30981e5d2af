"""Fields of a Word file: numbers of captions and pages, references to places, the table of contents.

Nothing here asks Word to update all fields on opening: it would question the reader first, each time. What a
field says until then is true by itself: "below" where the page is not known yet.
"""

from collections.abc import Sequence
from typing import Any

from convergence.report._word_parts import bookmark_name, clean, tag

CONTENTS = "Contents"
UNPAGED = "Pages come with an update of the fields: select all (Ctrl+A), then F9."


def put_simple(paragraph: Any, instruction: str, result: str) -> None:
    """Write a field that Word keeps up to date by itself."""
    field = tag("fldSimple", instr=f" {instruction} ")
    field.append(paragraph.add_run(result)._r)
    paragraph._p.append(field)


def put_place(paragraph: Any, anchor: str, is_above: bool) -> None:
    """Write the page of a place, "page 7" in Word; "above" or "below" until the fields are updated."""
    paragraph.add_run(", ")
    _begin(paragraph, f"PAGEREF {bookmark_name(anchor)} \\h \\# \"'page' 0\"")
    paragraph.add_run("above" if is_above else "below")
    _end(paragraph)


def put_pages(paragraph: Any) -> None:
    """Write the number of the page and how many there are."""
    paragraph.add_run("Page ")
    put_simple(paragraph, "PAGE", "1")
    paragraph.add_run(" of ")
    put_simple(paragraph, "NUMPAGES", "1")


def put_contents(file: Any, entries: Sequence[tuple[str, str]]) -> None:
    """Write the contents, of the (title, anchor) of each section; their pages come with an update."""
    heading = file.add_paragraph(CONTENTS, style="TOC Heading")
    lines = [file.add_paragraph(style="toc 1") for _ in entries]
    _begin(lines[0], 'TOC \\o "1-1" \\h \\z \\u')
    for line, (title, anchor) in zip(lines, entries, strict=True):
        line.paragraph_format.keep_with_next = True
        link = tag("hyperlink", anchor=bookmark_name(anchor))
        link.append(line.add_run(clean(title))._r)
        line._p.append(link)
    last = file.add_paragraph(UNPAGED, style="Small Print")
    _end(last)
    _as_one_block([heading, *lines, last])


def has_contents(file: Any) -> bool:
    """Return whether the file has a table of contents of its own."""
    instructions = file.element.xpath("//w:instrText/text() | //w:fldSimple/@w:instr")
    return any(words.split()[:1] == ["TOC"] for words in instructions)


def _as_one_block(paragraphs: Sequence[Any]) -> None:
    """Put paragraphs into the frame in which Word offers to update the contents."""
    gallery = tag("docPartObj")
    gallery.extend([tag("docPartGallery", val="Table of Contents"), tag("docPartUnique")])
    properties, content, block = tag("sdtPr"), tag("sdtContent"), tag("sdt")
    properties.append(gallery)
    block.extend([properties, content])
    paragraphs[0]._p.addprevious(block)
    content.extend([paragraph._p for paragraph in paragraphs])


def _begin(paragraph: Any, instruction: str) -> None:
    paragraph.add_run()._r.append(tag("fldChar", fldCharType="begin"))
    words = tag("instrText")
    words.text = f" {instruction} "
    words.set("{http://www.w3.org/XML/1998/namespace}space", "preserve")
    paragraph.add_run()._r.append(words)
    paragraph.add_run()._r.append(tag("fldChar", fldCharType="separate"))


def _end(paragraph: Any) -> None:
    paragraph.add_run()._r.append(tag("fldChar", fldCharType="end"))
