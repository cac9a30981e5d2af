"""A document as PDF, set by typst (`_page.typ`); pictures stay vectors, text can be selected."""

import json
import tempfile
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import Any

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
    pictures_of,
)

PAGE = Path(__file__).with_name("_page.typ")
LONGEST_WORD = 18  # characters; longer ones may be broken
LONGEST_TITLE = 90
SHORT, LONG = 18, 250  # characters of a cell of words: never broken into lines; as many as count
BREAK = "\N{ZERO WIDTH SPACE}"


def as_pdf(document: Document) -> bytes:
    """Return the file; the same document gives the same bytes."""
    import typst

    with tempfile.TemporaryDirectory() as folder:
        root = Path(folder)
        for picture in pictures_of(document):
            (root / f"{picture.name}.svg").write_text(picture.svg, encoding="utf-8")
        (root / "content.json").write_text(json.dumps(_document(document)), encoding="utf-8")
        page = root / PAGE.name
        page.write_bytes(PAGE.read_bytes())
        made: bytes = typst.compile(
            str(page), root=str(root), font_paths=[_fonts()], ignore_system_fonts=True, timestamp=0
        )
        return made


def _fonts() -> str:
    """Return the folder of the fonts of the figures, which come with matplotlib."""
    import matplotlib

    return str(Path(matplotlib.get_data_path()) / "fonts" / "ttf")


def _document(document: Document) -> dict[str, Any]:
    anchors = {section.anchor for section in document.sections} | set(_anchors(document))
    title = document.title if len(document.title) <= LONGEST_TITLE else document.title[:LONGEST_TITLE] + "…"
    return {
        "name": document.title,
        "title": _plain(document.title),
        "running": _plain(title),
        "about": _plain(document.about),
        "foot": "Discretization error is one part of the uncertainty of a result.",
        "sections": [
            {
                "anchor": section.anchor,
                "title": _plain(section.title),
                "blocks": [_block(block, anchors) for block in section.blocks],
            }
            for section in document.sections
        ],
    }


def _anchors(document: Document) -> Iterator[str]:
    """Yield what can be led to beside sections."""
    for section in document.sections:
        for block in section.blocks:
            if isinstance(block, Heading) and block.anchor:
                yield block.anchor
            if isinstance(block, Table):
                cells = (cell for row in block.rows for cell in row)
                yield from (words.anchor for cell in cells for words in lines(cell) if words.anchor)


def _block(block: Block, anchors: set[str]) -> dict[str, Any]:
    match block:
        case Heading():
            mark = None if block.mark is None else _words(block.mark, anchors)
            return {"kind": "heading", "text": _plain(block.text), "anchor": block.anchor, "mark": mark}
        case Paragraph():
            return {"kind": block.kind or "paragraph", "text": _plain(block.text)}
        case Bullets():
            return {"kind": "bullets", "items": [_plain(item) for item in block.items]}
        case Table():
            return _table(block, anchors)
        case Figures():
            drawn = [
                {
                    "file": f"{picture.name}.svg",
                    "alt": picture.alt,
                    "caption": _plain(picture.caption),
                    "width": picture.width,
                }
                for picture in block.pictures
            ]
            return {"kind": "figures", "pictures": drawn}
        case Verbatim():
            return {"kind": "verbatim", "lines": [_plain(line) for line in block.text.splitlines()]}
        case Details():
            inner = [_block(each, anchors) for each in block.blocks]
            return {"kind": "details", "summary": _plain(block.summary), "blocks": inner}


def _table(table: Table, anchors: set[str]) -> dict[str, Any]:
    columns = list(zip(table.head, *table.rows, strict=True))
    ends_in_words = table.kind in ("words", "methods")
    return {
        "kind": "table",
        "caption": _plain(table.caption),
        "head": [_plain(name) for name in table.head],
        "rows": [[_cell(cell, anchors) for cell in row] for row in table.rows],
        "left": [table.is_words(x) for x in range(len(table.head))],
        "shares": [_share(column) if ends_in_words else 0 for column in columns],
    }


def _share(column: Sequence[Cell]) -> float:
    """Return the share of the width that a column of words has, 0 for one that is as wide as its words."""
    longest = max(len(words.text) for cell in column for words in lines(cell))
    return 0 if longest <= SHORT else min(longest, LONG) ** 0.5


def _cell(cell: Cell, anchors: set[str]) -> list[dict[str, Any]]:
    return [_words(words, anchors) for words in lines(cell)]


def _words(words: Words, anchors: set[str]) -> dict[str, Any]:
    to = words.to.removeprefix("#") if words.to.startswith("#") else ""
    return {
        "text": _plain(words.text),
        "to": to if to in anchors else "",
        "anchor": words.anchor,
        "look": words.look,
        "paged": words.paged,
    }


def _plain(text: str) -> str:
    """Return the text with places where long words may be broken."""
    return " ".join(
        BREAK.join(word[at : at + LONGEST_WORD] for at in range(0, len(word), LONGEST_WORD)) or word
        for word in text.split(" ")
    )
