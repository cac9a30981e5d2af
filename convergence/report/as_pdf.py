"""A document as PDF, set by typst (`_page.typ`); pictures stay vectors, text can be selected."""

import json
import tempfile
from pathlib import Path
from typing import Any

from convergence.report._columns import WHOLE, bands, is_narrow, shares
from convergence.report._picture import Picture
from convergence.report.content import (
    FOOT,
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
    pictures_of,
)

PAGE = Path(__file__).with_name("_page.typ")
LONGEST_WORD = 18  # characters; longer ones may be broken
ROOM, ROOM_OF_TWO = 170, 82  # mm: between the margins, for each of two pictures
HIGHEST = 125  # mm: how high a picture is, so that two find room on a page
WIDEST = 6.7  # inches: a picture that fills the page
WHOLE_SIZE = 3000  # characters of a table that is not parted
SHORT, LONG = 22, 250  # characters of a cell of words: never broken into lines; as many as count
BREAK = "\N{ZERO WIDTH SPACE}"


def as_pdf(document: Document) -> bytes:
    """Return the file; the same document gives the same bytes.

    Signs that the fonts of the figures lack (emoji, Chinese) are set in a font of the machine, if it has one.
    """
    import typst

    fonts = _fonts()
    with tempfile.TemporaryDirectory() as folder:
        root = Path(folder)
        texts = {f"{picture.name}.svg": picture.svg for picture in pictures_of(document)}
        texts["content.json"] = json.dumps(_document(document), ensure_ascii=False)
        for name, text in texts.items():
            (root / name).write_text(text, encoding="utf-8")
        page = root / PAGE.name
        page.write_bytes(PAGE.read_bytes())
        made: bytes = typst.compile(
            str(page),
            root=str(root),
            font_paths=[str(fonts)],
            ignore_system_fonts=_is_covered("".join(texts.values()), fonts),
            timestamp=0,
        )
        return made


def _fonts() -> Path:
    """Return the folder of the fonts of the figures, which come with matplotlib."""
    import matplotlib

    return Path(matplotlib.get_data_path()) / "fonts" / "ttf"


def _is_covered(text: str, fonts: Path) -> bool:
    """Return whether the fonts of the figures have all signs of a text."""
    from matplotlib.ft2font import FT2Font

    drawn = {ord(sign) for sign in set(text) if not sign.isspace() and sign.isprintable()}
    return drawn <= FT2Font(str(fonts / "DejaVuSans.ttf")).get_charmap().keys()


def _document(document: Document) -> dict[str, Any]:
    anchors = anchors_of(document)
    return {
        "name": document.title,
        "title": _plain(document.title),
        "running": _plain(document.running),
        "about": _plain(document.about),
        "foot": FOOT,
        "sections": [
            {
                "anchor": section.anchor,
                "title": _plain(section.title),
                "blocks": [_block(block, anchors) for block in section.blocks],
            }
            for section in document.sections
        ],
    }


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
            return _figures(block)
        case Verbatim():
            columns = block.columns() if block.is_narrow else [(block.text,)]
            parts = [[[_plain(line) for line in text.splitlines()] for text in row] for row in columns]
            return {"kind": "verbatim", "parts": parts}
        case Details():
            inner = [_block(each, anchors) for each in block.blocks]
            summary = "" if block.is_captioned else _plain(block.summary)
            return {"kind": "details", "summary": summary, "blocks": inner}


def _figures(figures: Figures) -> dict[str, Any]:
    """Return pictures two in a row; one that is wide has the room of both."""
    pictures, is_wide = figures.pictures, figures.is_wide
    room = ROOM if is_wide else ROOM_OF_TWO
    drawn = [
        {
            "file": f"{picture.name}.svg",
            "alt": picture.alt,
            "caption": _plain(picture.caption),
            "share": min(
                1.0, picture.width / WIDEST if is_wide else 1.0, HIGHEST / (room * _tallness(picture))
            ),
        }
        for picture in pictures
    ]
    rows = [drawn[at : at + 2] for at in range(0, len(drawn), 2)]
    return {"kind": "figures", "wide": is_wide, "rows": rows}


def _tallness(picture: Picture) -> float:
    """Return height over width of a picture, from the head of its PNG."""
    width, height = (int.from_bytes(picture.png[at : at + 4]) for at in (16, 20))
    return height / width


def _table(table: Table, anchors: set[str]) -> dict[str, Any]:
    parts = bands(table)
    size = sum(len(words.text) for row in table.rows for cell in row for words in lines(cell))
    return {
        "kind": "table",
        "caption": _plain(table.caption),
        "whole": len(parts) * len(table.rows) <= WHOLE and size <= WHOLE_SIZE,
        "bands": [
            {
                "head": [_plain(name) for name in part.head],
                "rows": [[_cell(cell, anchors) for cell in row] for row in part.rows],
                "left": [part.is_words(x) for x in range(len(part.head))],
                "shares": _shares(part),
            }
            for part in parts
        ],
    }


def _shares(table: Table) -> list[float]:
    """Return the share of each column of the width that is left, 0 for one that is as wide as its words."""
    columns = list(zip(table.head, *table.rows, strict=True))
    if table.kind in ("words", "methods"):
        longest = [max(len(words.text) for cell in column for words in lines(cell)) for column in columns]
        return [0 if length <= SHORT else min(length, LONG) ** 0.5 for length in longest]
    return [0] * len(columns) if is_narrow(table) else shares(table)


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
