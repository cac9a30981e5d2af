"""Contents and controls of a page: where to go, which verdicts and which axis to show, light or dark."""

from collections import Counter
from collections.abc import Iterator, Sequence

from convergence.report._markup import element, text
from convergence.report.content import Cell, Document, Heading, Section, Table, lines, pictures_of

FILTERED = ("statement", "matrix", "words")  # kinds of tables whose rows have verdicts
KEYS = (  # what each key does, and for what it is needed
    ("n p", "next, previous section", "sections"),
    ("j k", "next, previous part", "parts"),
    ("x", "axis of the figures", "figures"),
    ("← →", "along the levels of a figure", "figures"),
    ("1 … 9", "a verdict on or off", "filter"),
    ("0", "all verdicts", "filter"),
    ("d", "dark", "sections"),
)


def contents(document: Document) -> str:
    """Return links to the sections and, inside them, to the parts that have a verdict; first the way up."""
    up = [element("li", {}, element("a", {"href": document.up}, "All cases"))] if document.up else []
    items = [*up, *(_item(section) for section in document.sections)]
    return element("nav", {"aria-label": "Contents"}, element("ul", {}, *items))


def controls(document: Document) -> str:
    """Return the controls, hidden until the script is there to serve them."""
    found = _verdicts(document)
    shown = [
        element(
            "button",
            {"type": "button", "aria-pressed": "true", "data-show": word, "class": f"verdict {look}"},
            text(word),
            element("span", {"class": "count"}, f" {number}"),
        )
        for (word, look), number in found.items()
    ]
    filtered = [_group("Show verdicts", "show", *shown)] if len(found) > 1 else []
    page = _group("Page", "page", _switch("dark", "dark", False), _switch("keys", "keys", True))
    there = _needs(document) | ({"filter"} if filtered else set())
    keys = "; ".join(f"{_keys(keys)} {text(what)}" for keys, what, need in KEYS if need in there)
    return element(
        "div",
        {"class": "controls", "role": "region", "aria-label": "View", "hidden": ""},
        *filtered,
        page,
        element("div", {"class": "note"}, element("p", {"role": "status"}, ""), _reset()),
        element("p", {"class": "keys"}, f"Keys: {keys}."),
    )


def axis_switch() -> str:
    """Return the switch between the two views of the levels of a quantity."""
    buttons = [
        element(
            "button",
            {"type": "button", "aria-pressed": "true" if name == "both" else "false", "data-axis-of": name},
            name,
        )
        for name in ("both", "value", "error")
    ]
    return element("div", {"class": "axis", "hidden": ""}, _group("Axis of the figures", "axis", *buttons))


def words_of(row: Sequence[Cell]) -> list[str]:
    """Return the words of the verdicts in a row of a table."""
    return [word for word, _ in _marks(row)]


def tagged(words: Sequence[str]) -> dict[str, str]:
    """Return the attribute that the filter reads."""
    return {"data-verdict": "|".join(words)} if words else {}


def _item(section: Section) -> str:
    inner = [
        element("li", tagged([block.mark.text]), element("a", {"href": f"#{block.anchor}"}, text(block.text)))
        for block in section.blocks
        if isinstance(block, Heading) and block.mark and block.anchor
    ]
    link = element("a", {"href": f"#{section.anchor}"}, text(section.short))
    return element("li", {}, link, element("ul", {}, *inner) if inner else "")


def _needs(document: Document) -> set[str]:
    """Return what a document has that keys are for."""
    blocks = [block for section in document.sections for block in section.blocks]
    needs = {"sections"}
    if any(isinstance(block, Heading) and block.mark for block in blocks):
        needs.add("parts")
    if any(picture.axis for picture in pictures_of(document)):
        needs.add("figures")
    return needs


def _verdicts(document: Document) -> Counter[tuple[str, str]]:
    """Return how often each verdict, a word and its look, is found: by parts, else in the first table."""
    blocks = [block for section in document.sections for block in section.blocks]
    parts = [(b.mark.text, b.mark.look) for b in blocks if isinstance(b, Heading) and b.mark]
    tables = [block for block in blocks if isinstance(block, Table) and block.kind in FILTERED]
    rows = tables[0].rows if tables else []
    return Counter(parts or [mark for row in rows for mark in _marks(row)])


def _marks(row: Sequence[Cell]) -> Iterator[tuple[str, str]]:
    return ((line.text, line.look) for cell in row for line in lines(cell) if line.look)


def _reset() -> str:
    return element("button", {"type": "button", "data-reset": "", "hidden": ""}, "show all")


def _switch(what: str, word: str, on: bool) -> str:
    attributes = {"type": "button", "aria-pressed": "true" if on else "false", "data-switch": what}
    return element("button", attributes, text(word))


def _group(name: str, label: str, *buttons: str) -> str:
    """Return buttons behind a short label; screen readers hear the name instead."""
    seen = element("span", {"aria-hidden": "true"}, label)
    return element("div", {"role": "group", "aria-label": name}, seen, *buttons)


def _keys(keys: str) -> str:
    return " ".join(key if key == "…" else element("kbd", {}, text(key)) for key in keys.split())
