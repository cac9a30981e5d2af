"""A document as one HTML page that stands alone; all of it can be read without its script."""

import base64
import hashlib
import re
from collections.abc import Iterator, Sequence
from itertools import count
from pathlib import Path

from convergence.report._controls import FILTERED, axis_switch, contents, controls, tagged, words_of
from convergence.report._look import CSS
from convergence.report._markup import attribute, element, text
from convergence.report._picture import LEVELS, Picture
from convergence.report.content import (
    Block,
    Bullets,
    Cell,
    Details,
    Document,
    Figures,
    Heading,
    Paragraph,
    Section,
    Table,
    Verbatim,
    Words,
    lines,
)

SCRIPT = Path(__file__).with_name("_page.js")
POLICY = (
    "default-src 'none'; img-src data:; style-src 'unsafe-inline'; script-src 'sha256-{}';"
    " base-uri 'none'; form-action 'none'"
)
REACH, CROWDED = (9, 4), 60  # radius around a mark that answers to the pointer, less where there are many
LONGEST_WORD = 40  # characters; longer ones may be broken anywhere
MARK = re.compile(r'<use [^>]*\bx="([-\d.]+)" y="([-\d.]+)"[^>]*/>')


class Numbers:
    """Running numbers of figures and tables."""

    def __init__(self) -> None:
        self.figures, self.tables = count(1), count(1)


def as_html(document: Document) -> str:
    """Return the whole page; the same document gives the same text.

    The policy allows this one script, by its hash, and no request at all.
    """
    numbers = Numbers()
    script = SCRIPT.read_text(encoding="utf-8")
    proof = base64.b64encode(hashlib.sha256(script.encode()).digest()).decode()
    head = "\n".join(
        [
            '<meta charset="utf-8">',
            '<meta name="viewport" content="width=device-width, initial-scale=1">',
            f'<meta http-equiv="Content-Security-Policy" content="{POLICY.format(proof)}">',
            element("title", {}, attribute(document.title)),
            element("style", {}, CSS),
        ]
    )
    top = element("h1", {}, text(document.title)) + element("p", {"class": "about"}, text(document.about))
    main = [element("header", {}, top), *(_section(section, numbers) for section in document.sections)]
    skip = element("a", {"class": "skip", "href": "#top"}, "Skip to the text")
    side = element("div", {"class": "side"}, contents(document), controls(document))
    body = element(
        "body", {}, skip, side, element("main", {"id": "top"}, "\n".join(main)), element("script", {}, script)
    )
    return f"<!DOCTYPE html>\n{element('html', {'lang': 'en'}, element('head', {}, head), body)}\n"


def _section(section: Section, numbers: Numbers) -> str:
    parts = [_part(part, numbers) for part in _parts(section.blocks)]
    title = element("h2", {}, text(section.title))
    return element("section", {"id": section.anchor}, title, "\n".join(parts))


def _parts(blocks: Sequence[Block]) -> Iterator[list[Block]]:
    """Yield runs of blocks: every heading begins one."""
    part: list[Block] = []
    for block in blocks:
        if isinstance(block, Heading) and part:
            yield part
            part = []
        part.append(block)
    yield part


def _part(blocks: Sequence[Block], numbers: Numbers) -> str:
    """Return a run of blocks; one that a verdict heads can be filtered."""
    shown = "\n".join(_block(block, numbers) for block in blocks)
    match blocks:
        case [Heading(mark=Words(text=word)), *_]:
            return element("div", {"class": "part", **tagged([word])}, shown)
    return shown


def _block(block: Block, numbers: Numbers) -> str:
    match block:
        case Heading():
            mark = [] if block.mark is None else [_words(block.mark)]
            return element("h3", {"id": block.anchor} if block.anchor else {}, text(block.text), *mark)
        case Paragraph(kind="quote"):
            spoken = [block.verdict] if block.verdict else []
            return element("blockquote", tagged(spoken), element("p", {}, text(block.text)))
        case Paragraph():
            return element("p", {"class": block.kind} if block.kind else {}, text(block.text))
        case Bullets():
            items = [element("li", {}, text(item)) for item in block.items]
            return element("ul", {}, *items) if items else ""
        case Table():
            return _table(block, next(numbers.tables))
        case Figures():
            return _figures(block.pictures, numbers)
        case Verbatim():
            return element("pre", {"tabindex": "0"}, text(block.text))
        case Details():
            inner = [_block(each, numbers) for each in block.blocks]
            return element("details", {}, element("summary", {}, text(block.summary)), *inner)


def _table(table: Table, number: int) -> str:
    """Return a table that scrolls where it is wider than the page."""
    top = [element("th", {"scope": "col"}, _cell(name)) for name in table.head]
    rows = [
        element(
            "tr",
            tagged(words_of(row)) if table.kind in FILTERED else {},
            element("th", {"scope": "row"}, _cell(row[0])),
            *_cells(row[1:]),
        )
        for row in table.rows
    ]
    said = element("span", {}, _number("Table", number), text(table.caption))
    kind = {"class": table.kind} if table.kind else {}
    inner = element(
        "table",
        kind,
        element("caption", {}, said),
        element("thead", {}, element("tr", {}, *top)),
        element("tbody", {}, *rows),
    )
    frame = {"class": "scroll", "tabindex": "0", "role": "group", "aria-label": table.caption}
    return element("div", frame, inner)


def _cells(row: Sequence[Cell]) -> Iterator[str]:
    return (element("td", {}, _cell(cell)) for cell in row)


def _cell(cell: Cell) -> str:
    shown = [_words(line) for line in lines(cell)]
    return shown[0] if len(shown) == 1 else "".join(element("div", {}, line) for line in shown)


def _words(words: Words) -> str:
    attributes = {"id": words.anchor} if words.anchor else {}
    if words.look:
        return element("span", {**attributes, "class": f"verdict {words.look}"}, text(words.text))
    if max(map(len, words.text.split()), default=0) > LONGEST_WORD:
        attributes["class"] = "long"
    if words.to:
        return element("a", {**attributes, "href": words.to}, text(words.text))
    return element("span", attributes, text(words.text)) if attributes else text(words.text)


def _figures(pictures: Sequence[Picture], numbers: Numbers) -> str:
    """Return figures side by side, with a switch where some are two views of the same levels."""
    switched = {picture.axis for picture in pictures} >= {"value", "error"}
    drawn = [_figure(picture, next(numbers.figures), switched) for picture in pictures]
    shown = element("div", {"class": "pictures"}, *drawn) if len(drawn) > 1 else "".join(drawn)
    return f"{axis_switch()}{shown}" if switched else shown


def _figure(picture: Picture, number: int, switched: bool) -> str:
    caption = element("figcaption", {}, _number("Figure", number), text(picture.caption))
    card = element("div", {"class": "card"}, _inline(picture))
    axis = {"data-axis": picture.axis} if switched and picture.axis else {}
    return element("figure", {**axis, "style": f"max-width: {7 * picture.width:.1f}rem"}, card, caption)


def _number(what: str, number: int) -> str:
    return element("span", {"class": "number"}, f"{what} {number}. ")


def _inline(picture: Picture) -> str:
    """Return the SVG as it stands inside a page: no prolog, own ids, a name for screen readers, hints."""
    body = picture.svg[picture.svg.index("<svg") :]
    body = re.sub(r"<metadata>.*?</metadata>", "", body, flags=re.DOTALL)
    body = re.sub(r'(\bid="|url\(#|href="#)', rf"\g<1>{picture.name}-", body)
    role = "group" if picture.hints else "img"
    body = body.replace("<svg ", f'<svg role="{role}" aria-label="{attribute(picture.alt)}" ', 1).strip()
    return _hinted(body, f'<g id="{picture.name}-{LEVELS}', picture.hints) if picture.hints else body


def _hinted(svg: str, start: str, hints: Sequence[str]) -> str:
    """Return the SVG with a hint at each mark of the groups that begin with `start`, in their order.

    Where not all marks were drawn there is no hint: none may stand at the mark of another.
    """
    before, *groups = svg.split(start)
    parts = [group.partition("</g>") for group in groups]
    if sum(len(MARK.findall(marks)) for marks, _, _ in parts) != len(hints):
        return svg
    texts = iter(hints)
    reach = str(REACH[len(hints) > CROWDED])

    def hint(mark: re.Match[str]) -> str:
        ring = {"class": "ring", "cx": mark[1], "cy": mark[2], "r": reach}
        title = element("title", {}, attribute(next(texts)))
        return element("g", {"class": "level", "role": "img"}, title, mark[0], element("circle", ring))

    return start.join([before, *(MARK.sub(hint, marks) + end + rest for marks, end, rest in parts)])
