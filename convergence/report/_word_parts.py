"""Small parts of a Word file: runs of words, links and places they lead to, widths of columns."""

import re
from collections.abc import Sequence
from typing import Any

from convergence.report.content import Cell, Words, lines

CHARACTERS = 92  # of the size of a table, in a line of a page
PADDING = 4  # characters that the sides of a cell take
LONGEST_WORD, LONGEST_LINE = 24, 60  # characters of a cell that count for the width of its column
TONES = {"sound": "00594A", "refine": "7A4A00", "singular": "9C2F00", "unproven": "4A4F57"}
NOT_IN_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def shares(columns: Sequence[Sequence[Cell]]) -> list[float]:
    """Return the share of the width of each column: room for its longest word, more for long lines."""
    texts = [[words.text for cell in column for words in lines(cell)] for column in columns]
    words = [
        PADDING + min(LONGEST_WORD, max(len(w) for text in column for w in (text or " ").split(" ")))
        for column in texts
    ]
    wanted = [min(LONGEST_LINE, max(map(len, column))) for column in texts]
    more = [max(0, line - word) for line, word in zip(wanted, words, strict=True)]
    spare = max(0, CHARACTERS - sum(words)) / max(1, sum(more))
    widths = [word + min(1.0, spare) * extra for word, extra in zip(words, more, strict=True)]
    return [width / max(CHARACTERS, sum(widths)) for width in widths]


def put_words(run: Any, paragraph: Any, words: Words) -> None:
    """Write a run of words: bold and in the tone of its verdict, or leading to a place of the document."""
    from docx.shared import RGBColor

    run.add_text(clean(words.text))
    if words.look:
        run.bold = True
        run.font.color.rgb = RGBColor.from_string(TONES.get(words.look, "000000"))
    elif words.to.startswith("#"):
        link = tag("hyperlink", anchor=bookmark_name(words.to[1:]))
        paragraph._p.append(link)
        link.append(run._r)


def bookmark_name(anchor: str) -> str:
    """Return the anchor as a bookmark may be called: letters, digits and underscores, at most 40."""
    return re.sub(r"\W", "_", anchor)[:40]


def tag(kind: str, **attributes: str) -> Any:
    from docx.oxml import OxmlElement
    from docx.oxml.ns import qn

    made = OxmlElement(f"w:{kind}")
    for key, value in attributes.items():
        made.set(qn(f"w:{key}"), value)
    return made


def clean(text: str) -> str:
    """Return the text without characters that XML cannot hold."""
    return NOT_IN_XML.sub("\N{REPLACEMENT CHARACTER}", text)
