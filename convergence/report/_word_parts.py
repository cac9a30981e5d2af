"""Small parts of a Word file: elements, runs of words, links and the places they lead to."""

import re
from typing import Any

from convergence.report.content import Words

TONES = {"sound": "00594A", "refine": "7A4A00", "singular": "9C2F00", "unproven": "4A4F57"}
EXPONENT = re.compile(r"(?<=\de)-(?=\d)")  # its sign, after which a line would be broken
NOT_IN_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def put_words(run: Any, paragraph: Any, words: Words, is_place: bool) -> None:
    """Write a run of words: bold and in the tone of its verdict, or leading to a place of the document."""
    from docx.shared import RGBColor

    for number, part in enumerate(EXPONENT.split(clean(words.text))):
        if number:
            run._r.append(tag("noBreakHyphen"))
        run.add_text(part)
    if words.look:
        run.bold = True
        run.font.color.rgb = RGBColor.from_string(TONES.get(words.look, "000000"))
    elif is_place:
        link = tag("hyperlink", anchor=bookmark_name(words.to.removeprefix("#")))
        paragraph._p.append(link)
        link.append(run._r)


def bookmark_name(anchor: str) -> str:
    """Return the anchor as a bookmark may be called: letters, digits and underscores, at most 40."""
    return "at_" + re.sub(r"\W", "_", anchor)[:37]


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
