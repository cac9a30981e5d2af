"""What a document says, whatever its form: sections of blocks of plain text.

Each form (`as_html`, `as_pdf`, `as_docx`) makes the text safe in its own way.
"""

from bisect import bisect_left, bisect_right
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import accumulate

from convergence.report._picture import Picture

FOOT = "Discretization error is one part of the uncertainty of a result."
LONGEST_LINE, LONGEST_COLUMN = 60, 40  # characters of a line, lines of a column, where two stand side by side
NARROW = 5.5  # inches: a picture that is no wider fills half a page
LONGEST_RUNNING = 90  # characters of a title at the head of every page


@dataclass(frozen=True)
class Words:
    """A run of text: `to` is where it leads (#anchor or a page), `anchor` what leads here.

    With a `look` it is a mark, framed as the verdict of that name. `paged` says on which page what it leads
    to stands, where there are pages. What is `given` was written by somebody else: its numbers stay as they
    are.
    """

    text: str
    to: str = ""
    anchor: str = ""
    look: str = ""
    paged: bool = False
    given: bool = False


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
    """Running text; `kind` is "", "overall" (the conclusion), "quote" or "tiny".

    `verdict` is the word of the one quantity of which it speaks, "" where it speaks of all.
    """

    text: str
    kind: str = ""
    verdict: str = ""


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

    @property
    def is_wide(self) -> bool:
        """Return whether they are a single picture that half a page is too narrow for."""
        return len(self.pictures) == 1 and self.pictures[0].width > NARROW


@dataclass(frozen=True)
class Verbatim:
    """Text as it stands, line by line."""

    text: str

    @property
    def is_narrow(self) -> bool:
        """Return whether it may stand in two columns on paper: few lines are longer than one of them."""
        rows = self.text.splitlines()
        long = sum(len(row) > LONGEST_LINE for row in rows)
        return 5 * long <= len(rows) and max(map(_height, rows), default=0) <= LONGEST_COLUMN

    def columns(self) -> list[tuple[str, str]]:
        """Return the text in pairs of columns of like height, each pair for a page at most."""
        pairs: list[tuple[str, str]] = []
        rows = self.text.splitlines()
        while rows:
            ends = list(accumulate(map(_height, rows)))
            last = max(1, bisect_right(ends, 2 * LONGEST_COLUMN))
            middle = bisect_left(ends, ends[last - 1] / 2) + 1
            pairs.append(("\n".join(rows[:middle]), "\n".join(rows[middle:last])))
            rows = rows[last:]
        return pairs


def _height(line: str) -> int:
    """Return how many lines a line takes in a column."""
    return max(1, -(-len(line) // LONGEST_LINE))


@dataclass(frozen=True)
class Details:
    """What is there on demand; on paper it stands under its summary."""

    summary: str
    blocks: Sequence["Block"]

    @property
    def is_captioned(self) -> bool:
        """Return whether its caption says what the summary does: on paper once is enough."""
        first = self.blocks[0]
        return isinstance(first, Table) and first.caption == self.summary


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
    """A title, what the document is about in a line, and its sections.

    `up` is the address of the document of all load cases, of which this one is a case.
    """

    title: str
    about: str
    sections: Sequence[Section]

    @property
    def running(self) -> str:
        """Return the title as it stands at the head of every page."""
        whole = len(self.title) <= LONGEST_RUNNING
        return self.title if whole else f"{self.title[:LONGEST_RUNNING]}…"

    up: str = ""


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


def anchors_of(document: Document) -> set[str]:
    """Return every place of the document that can be led to."""
    found = {section.anchor for section in document.sections}
    for block in (block for section in document.sections for block in section.blocks):
        if isinstance(block, Heading):
            found.add(block.anchor)
        if isinstance(block, Table):
            found.update(words.anchor for row in block.rows for cell in row for words in lines(cell))
    return found - {""}
