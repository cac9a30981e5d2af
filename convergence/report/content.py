"""What a document says, whatever its form: sections of blocks of plain text.

Each form (`as_html`, `as_pdf`, `as_docx`) makes the text safe in its own way.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from convergence.report._picture import Picture


@dataclass(frozen=True)
class Words:
    """A run of text: `to` is where it leads (#anchor or a page), `anchor` what leads here.

    With a `look` it is a mark, framed as the verdict of that name. `paged` says on which page what it leads
    to stands, where there are pages.
    """

    text: str
    to: str = ""
    anchor: str = ""
    look: str = ""
    paged: bool = False


Line = str | Words
Cell = Line | tuple[Line, ...]


@dataclass(frozen=True)
class Heading:
    """A heading inside a section, with a mark at its end or none."""

    text: str
    anchor: str = ""
    mark: Words | None = None


@dataclass(frozen=True)
class Paragraph:
    """Running text; `kind` is "", "overall" (the conclusion), "quote" or "tiny"."""

    text: str
    kind: str = ""


@dataclass(frozen=True)
class Bullets:
    """A list of sentences."""

    items: Sequence[str]


@dataclass(frozen=True)
class Table:
    """A table whose first column heads the rows.

    `kind` is "" (numbers), "words", "statement", "matrix" or "methods".
    """

    caption: str
    head: Sequence[str]
    rows: Sequence[Sequence[Cell]]
    kind: str = ""

    def is_words(self, column: int) -> bool:
        """Return whether a column holds words, which begin at its left side; numbers end at its right one."""
        ends_in_words = self.kind == "methods" and column == len(self.head) - 1
        return column == 0 or self.kind in ("words", "matrix") or ends_in_words


@dataclass(frozen=True)
class Figures:
    """Pictures side by side where there is room."""

    pictures: Sequence[Picture]


@dataclass(frozen=True)
class Verbatim:
    """Text as it stands, line by line."""

    text: str


@dataclass(frozen=True)
class Details:
    """What is there on demand; on paper it stands under its summary."""

    summary: str
    blocks: Sequence["Block"]


Block = Heading | Paragraph | Bullets | Table | Figures | Verbatim | Details


@dataclass(frozen=True)
class Section:
    """A main section of a document; `short` is its name in the contents."""

    anchor: str
    short: str
    title: str
    blocks: Sequence[Block]


@dataclass(frozen=True)
class Document:
    """A title, what the document is about in a line, and its sections."""

    title: str
    about: str
    sections: Sequence[Section]


def mark(word: str, look: str = "") -> Words:
    """Return a word as a mark, in the look of a verdict, its own where none is said."""
    return Words(word, look=look or word)


def lines(cell: Cell) -> tuple[Words, ...]:
    """Return the lines of a cell."""
    each = cell if isinstance(cell, tuple) else (cell,)
    return tuple(Words(line) if isinstance(line, str) else line for line in each)


def pictures_of(document: Document) -> Iterator[Picture]:
    """Yield the pictures in the order of the document."""
    for section in document.sections:
        for block in section.blocks:
            if isinstance(block, Figures):
                yield from block.pictures
