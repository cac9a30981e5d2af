"""What the record of an analysis should hold, and where each point stands in this document.

The points are those that ASME V&V 10 and V&V 20, EN 1993-1-5 annex C, ASME VIII-2 part 5, ECSS-E-ST-32-03 and
NASA-STD-7009 ask of a report of a finite element analysis, put together from memory.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from convergence.record import Record
from convergence.report import _words
from convergence.report.content import Block, Cell, Paragraph, Section, Table, Words


@dataclass(frozen=True)
class Point:
    """A point of a record; the sections that hold it where they are there, and keys of [record] that do."""

    asked: str
    anchors: tuple[str, ...] = ()
    keys: tuple[str, ...] = ()


POINTS = (
    Point("Purpose, decision, quantities of interest, criteria", ("statement",), ("purpose", "criteria")),
    Point("Source of the geometry, idealisation, symmetry", (), ("drawing", "idealisation")),
    Point("Units and coordinate systems", ("trace",), ("coordinates",)),
    Point("Material model and data with their source", ("trace",), ("material_source",)),
    Point("Loads, resultants and hand values", ("balance", "checks"), ("load_source", "hand_values")),
    Point("Supports; held against rigid motion and no more", ("trace",), ("restraint",)),
    Point("Software, elements, solver, evidence of verification", ("trace", "interval"), ("software",)),
    Point("Meshes: counts, sizes, quality, how they are related", ("meshes", "quantities")),
    Point("Global equilibrium of forces and moments", ("balance", "checks")),
    Point("Residual and round-off", ("checks",)),
    Point("Refinement study of every quantity, observed order", ("quantities",)),
    Point("Uncertainty interval, its method and coverage", ("statement", "interval")),
    Point("Error estimate of the fields, stress jumps", ("error", "checks")),
    Point("Singularities and what is reported instead", ("stress", "quantities", "hot-spots")),
    Point("How stresses are read: place, component, averaging", ("quantities", "trace")),
    Point("Independent check", (), ("independent_check",)),
    Point("Comparison with tests", (), ("tests",)),
    Point("Sensitivity to uncertain inputs", (), ("sensitivity",)),
    Point("Conclusion, limits of validity, what is not resolved", ("statement", "caution"), ("conclusion",)),
    Point("Analyst, checker, date, hashes, archive", ("trace",), ("analyst", "checker", "archive")),
)
LACKING = "to be supplied by the analyst: {keys} of [record] in the study"


def record_section(record: Record, sections: Sequence[Section], elsewhere: Words | None = None) -> Section:
    """Return what the analyst states and where each point of a record stands among the sections.

    `elsewhere` leads to other documents that have all sections.
    """
    blocks: list[Block] = []
    if record:
        rows = [(_words.plain(key), Words(words, given=True)) for key, words in record.items()]
        blocks.append(Table("Stated by the analyst, not checked here", ("what", "in words"), rows, "words"))
    titles = {section.anchor: section.title for section in sections}
    rows_of_points = [
        _row(f"{number}. {point.asked}", point, record, titles, elsewhere)
        for number, point in enumerate(POINTS, start=1)
    ]
    blocks.append(
        Table("Where each point of the record stands", ("point", "in this document"), rows_of_points, "words")
    )
    blocks.append(Paragraph("A point that stands here is documented, not approved.", "tiny"))
    return Section("record", "Record", "Record of the analysis", blocks)


def _row(
    asked: str, point: Point, stated: Record, titles: dict[str, str], elsewhere: Words | None
) -> Sequence[Cell]:
    where: list[str | Words] = [
        Words(titles[a], to=f"#{a}", paged=True) for a in point.anchors if a in titles
    ]
    if elsewhere and point.anchors:
        where.append(elsewhere)
    given = [_words.plain(key) for key in point.keys if key in stated]
    lacking = [key for key in point.keys if key not in stated]
    if given:
        where.append(f"stated by the analyst: {', '.join(given)}")
    if lacking:
        where.append(LACKING.format(keys=", ".join(lacking)))
    return (asked, tuple(where) or "not in this document")
