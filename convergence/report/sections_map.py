"""The pointwise map in a few numbers: what share of the nodes is sound, and where it is worst."""

from collections.abc import Sequence
from dataclasses import asdict
from typing import Any

from convergence import numbers
from convergence.mapped import MappedField
from convergence.report._picture import Picture
from convergence.report.content import Block, Cell, Figures, Paragraph, Section, Table

MAP = "map.vtu"
WORDS = ("sound", "refine", "singular", "unproven")
ABOUT = (
    f"Every node of the finest mesh judged by itself, from the values of the finest three meshes there; the"
    f" fields stand in {MAP}, for any viewer: value, best estimate, half-width, half-width over the scale,"
    " observed order, verdict. The coarser meshes are read inside their cells by the shape functions. On"
    " fields with known limits 99.7 % of 282,000 such intervals held the limit, of any one field 95 % or more"
    " (own computation).",
)


def map_section(mapped: Sequence[MappedField], pictures: Sequence[Picture]) -> Section:
    """Return the table of the mapped fields and their pictures."""
    head = ("field", "largest", "accepted", *WORDS, "half-width, median", "largest half-width", "its place")
    caption = f"Shares of {mapped[0].nodes:,} nodes by verdict; half-widths over the scale"
    blocks: list[Block] = [Table(caption, head, [_row(field) for field in mapped])]
    blocks += [Figures(pictures)] if pictures else []
    blocks += [Paragraph(words, "tiny") for words in (*ABOUT, *_gaps(mapped))]
    return Section("map", "Map", "Pointwise map", blocks)


def mapped_object(field: MappedField) -> dict[str, Any]:
    """Return a mapped field for findings.json, None for a number that there is not."""
    whole = asdict(field)
    whole = {key: value for key, value in whole.items() if key not in ("name", "relative")}
    return {key: None if value != value else value for key, value in whole.items()}


def _row(field: MappedField) -> list[Cell]:
    place = ", ".join(numbers.compact(x, 4) for x in field.worst_place)
    scale = "largest value" if field.scale == "largest" else "local value"
    return [
        field.name.replace("_", " "),
        f"{numbers.significant(field.largest, 4)} {field.unit}".strip(),
        f"{numbers.percent(field.tolerance)} of the {scale}",
        *(numbers.percent(field.shares[word]) for word in WORDS),
        numbers.percent(field.typical, digits=2),
        numbers.percent(field.worst, field.tolerance, digits=2),
        f"({place})" if place else numbers.NONE,
    ]


def _gaps(mapped: Sequence[MappedField]) -> list[str]:
    """Return what is said of nodes that lie outside a coarser mesh."""
    first, said = mapped[0], []
    if first.extrapolated:
        said.append(
            f"{first.extrapolated:,} nodes lie outside a coarser mesh, beside a curved side: there the"
            " nearest cell is carried on beyond its border, by a quarter of its radius at most."
        )
    if first.missing:
        said.append(f"{first.missing:,} nodes lie farther outside a coarser mesh: they are unproven.")
    return said
