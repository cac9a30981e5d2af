"""The hot spots of result files: place, value on every mesh, interval, verdict, averaging, corner."""

import math

from convergence import numbers
from convergence.checks._corner import described, growing_corner
from convergence.field_quantities import HOT_SPOT
from convergence.report import _words
from convergence.report.content import (
    Block,
    Cell,
    Paragraph,
    Section,
    Table,
    Words,
    mark,
)
from convergence.results import Findings, Quantity

ABOUT = (
    "A hot spot is a local maximum of the recovered von Mises stress on the finest mesh; on the others it is"
    " the largest within the spot's reach, so that a coarse mesh cannot miss it between its nodes.",
    "Averaging: half the spread of the cells' own stress around the spot over their average, on the finest"
    " mesh. Up to 5 % is good, up to 10 % acceptable (common practice).",
)


def hot_spots(findings: Findings) -> list[Quantity]:
    """Return the quantities that are hot spots."""
    return [quantity for quantity in findings.quantities if quantity.name.startswith(HOT_SPOT)]


def hot_spots_section(findings: Findings) -> Section:
    """Return the table of the hot spots, the hottest first."""
    found = hot_spots(findings)
    unit = found[0].unit
    levels = [f"mesh {number}" for number in range(1, 1 + len(findings.ladder.levels))]
    head = ("spot", "place", *levels, f"interval [{unit}]", "verdict", "averaging", "corner")
    rows = [_row(findings, quantity) for quantity in found]
    caption = f"Hot spots: von Mises stress [{unit}] on every mesh, coarse to fine"
    blocks: list[Block] = [Table(caption, head, rows), *(Paragraph(words, "tiny") for words in ABOUT)]
    return Section("hot-spots", "Hot spots", "Hot spots", blocks)


def _row(findings: Findings, quantity: Quantity) -> list[Cell]:
    name, verdict, ladder = quantity.name, findings.verdicts[quantity.name], findings.ladder
    places = [float(ladder.column(f"{name}.{axis}")[-1]) for axis in "xyz"]
    place = ", ".join(numbers.compact(x, 4) for x in places if math.isfinite(x))
    values = [
        numbers.NONE if math.isnan(value) else numbers.significant(float(value), 4)
        for value in ladder.column(name)
    ]
    spread = float(ladder.column(f"{name}.spread")[-1])
    corner = growing_corner(ladder, findings.facts, name)
    return [
        Words(name.removeprefix(HOT_SPOT), to=f"#{_words.anchor(findings, quantity)}"),
        f"({place})",
        *values,
        _words.interval_text(verdict),
        mark(verdict.word),
        numbers.NONE if math.isnan(spread) else numbers.percent(spread, digits=2),
        described(corner) if corner else numbers.NONE,
    ]
