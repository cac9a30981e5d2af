"""Numbers of our own text with a decimal comma; what somebody else wrote stays as it is.

A comma is the decimal sign, a narrow no-break space parts groups of three digits, a semicolon parts numbers
(ISO 80000-1, from memory). What counts as a number stands alone: no part of a word, a standard, a version
of three numbers, a path or a date.
"""

import re
import tomllib
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise
from typing import Any

from convergence.report._picture import Picture
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Details,
    Document,
    Figures,
    Heading,
    Line,
    Paragraph,
    Section,
    Table,
    Verbatim,
    Words,
)
from convergence.results import Findings

APART = "\N{NARROW NO-BREAK SPACE}"
NUMBER = re.compile(r"(?<![\w.,/])(?<!\w-)[0-9]+(?:,[0-9]{3})*(?:\.[0-9]+)?(?:e[+-]?[0-9]+)?(?!\w|[.,/-]\w)")
BETWEEN = re.compile(r", [-±]?")  # two numbers of a list
CUT = "…"  # what stands for the middle of a long name
Spans = Sequence[tuple[int, int]]


@dataclass(frozen=True)
class DecimalComma:
    """Rewrites a text once; `names` stay as they are wherever they stand as whole words, cut ones too."""

    names: frozenset[str]

    def __call__(self, text: str) -> str:
        kept = [*self._whole(text), *self._cut(text)]
        made, at = [], 0
        for run in _runs(text, [found for found in NUMBER.finditer(text) if not _touches(found, kept)]):
            parted = any("." in number[0] for number in run) or _in_brackets(text, run)
            for number in run:
                before = text[at : number.start()]
                listed = parted and number is not run[0]
                made += [before.replace(",", ";") if listed else before, _with_comma(number[0])]
                at = number.end()
        return "".join([*made, text[at:]])

    @cached_property
    def _names(self) -> "re.Pattern[str]":
        longest_first = sorted(self.names, key=lambda name: (-len(name), name))
        either = "|".join(map(re.escape, longest_first)) or r"(?!)"
        return re.compile(rf"(?<!\w)(?<![0-9][.,])(?:{either})(?!\w|[.,][0-9])")

    def _whole(self, text: str) -> Spans:
        return [found.span() for found in self._names.finditer(text)]

    def _cut(self, text: str) -> Iterator[tuple[int, int]]:
        """Yield where the beginning and the end of a name stand around what was cut out of it."""
        for at in (found.start() for found in re.finditer(CUT, text)):
            for name in self.names:
                start = next((k for k in range(at) if name.startswith(text[k:at])), at)
                end = next((k for k in range(len(text), at + 1, -1) if name.endswith(text[at + 1 : k])), at)
                if start < at < end:
                    yield start, end


def _touches(found: re.Match[str], spans: Spans) -> bool:
    return any(found.start() < end and start < found.end() for start, end in spans)


def _runs(text: str, found: Sequence[re.Match[str]]) -> list[list[re.Match[str]]]:
    """Return the numbers in lists: alone, or several with nothing but commas between them."""
    runs = [[number] for number in found[:1]]
    for before, number in pairwise(found):
        if BETWEEN.fullmatch(text, before.end(), number.start()):
            runs[-1].append(number)
        else:
            runs.append([number])
    return runs


def _in_brackets(text: str, run: Sequence[re.Match[str]]) -> bool:
    before, after = text[: run[0].start()].rstrip("-±")[-1:], text[run[-1].end() :][:1]
    return f"{before}{after}" in ("()", "[]")


def _with_comma(number: str) -> str:
    return number.replace(",", APART).replace(".", ",")


def given_names(findings: Iterable[Findings], study_text: str, others: Iterable[str]) -> frozenset[str]:
    """Return what was named by somebody and has a digit in it.

    Of the study every string with a letter; of findings the names of quantities and corners and the title.
    """
    known = {
        *others,
        *(word for word in _strings(tomllib.loads(study_text)) if re.search("[^\\W\\d_]", word)),
    }
    for one in findings:
        corners = (*(one.facts.corners or ()), *one.facts.unexamined)
        known |= {one.title, one.ladder.source, *(quantity.name for quantity in one.quantities)}
        known |= {corner.name for corner in corners}
    return frozenset(name for name in known if re.search("[0-9]", name))


def _strings(said: Any) -> Iterator[str]:
    """Yield the keys and the strings of a study."""
    match said:
        case str():
            yield said
        case dict():
            for key, value in said.items():
                yield from (key, *_strings(value))
        case list():
            for value in said:
                yield from _strings(value)


def with_decimal_comma(document: Document, comma: DecimalComma) -> Document:
    """Return the document with its numbers rewritten; pictures are drawn with commas already."""
    sections = [_section(each, comma) for each in document.sections]
    return replace(document, title=comma(document.title), about=comma(document.about), sections=sections)


def _section(section: Section, comma: DecimalComma) -> Section:
    blocks = [_block(block, comma) for block in section.blocks]
    return replace(section, short=comma(section.short), title=comma(section.title), blocks=blocks)


def _block(block: Block, comma: DecimalComma) -> Block:
    match block:
        case Heading() | Paragraph():
            return replace(block, text=comma(block.text))
        case Bullets():
            return Bullets([comma(item) for item in block.items])
        case Table():
            rows = [[_cell(cell, comma) for cell in row] for row in block.rows]
            head = [comma(name) for name in block.head]
            return replace(block, caption=comma(block.caption), head=head, rows=rows)
        case Figures():
            return Figures([_picture(picture, comma) for picture in block.pictures])
        case Details():
            return Details(comma(block.summary), [_block(each, comma) for each in block.blocks])
        case Verbatim():
            return block


def _cell(cell: Cell, comma: DecimalComma) -> Cell:
    return tuple(_line(line, comma) for line in cell) if isinstance(cell, tuple) else _line(cell, comma)


def _line(line: Line, comma: DecimalComma) -> Line:
    if isinstance(line, Words):
        return line if line.given else replace(line, text=comma(line.text))
    return comma(line)


def _picture(picture: Picture, comma: DecimalComma) -> Picture:
    hints = tuple(comma(hint) for hint in picture.hints)
    return replace(picture, alt=comma(picture.alt), caption=comma(picture.caption), hints=hints)
