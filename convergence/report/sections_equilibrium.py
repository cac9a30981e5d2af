"""Equilibrium of our own solution: what acts where, and the sums."""

import numpy as np

from convergence import numbers
from convergence.dimensions import Units
from convergence.fields import Fields, Forces
from convergence.report import _acting
from convergence.report._axes import bracket
from convergence.report._picture import Picture
from convergence.report._plane import size_of
from convergence.report.content import Block, Cell, Figures, Paragraph, Section, Table
from convergence.results import Findings

NOTE = (
    "Forces of one boundary, or one support, are put together at the middle of that boundary; the moments of"
    " a row are about that place, those of the sums about the origin. What is left of the sums shows"
    " bookkeeping and solver, not the mesh."
)
RING = "Forces are those all around the ring; those along its radius cancel."


def equilibrium_section(findings: Findings, field: Fields, units: Units, picture: Picture) -> Section:
    """Return what acts on the mesh of the pictures, which has forces, with its sums."""
    forces = field.forces
    assert forces is not None
    found = [check.finding for check in findings.checks if check.name == "equilibrium"]
    ring = [RING] if _acting.all_around(forces) else []
    blocks: list[Block] = [
        *(Paragraph(said) for said in found),
        Figures([picture]),
        _table(forces, size_of(field.points), units),
        Paragraph(" ".join([NOTE, *ring]), "tiny"),
    ]
    return Section("balance", "Equilibrium", "Equilibrium", blocks)


def _table(forces: Forces, size: float, units: Units) -> Table:
    """Return a row for everything that acts, the sums, and what is left of them."""
    dimension, turning = len(forces.place), len(forces.moment)
    names = [f"F{axis}" for axis in "xyz"[:dimension]] + ["Mx", "My", "Mz"][3 - turning :]
    units_of = [units.force] * dimension + [_acting.moment_unit(units)] * turning
    scale = _acting.largest_force(forces) * np.repeat((1.0, size), (dimension, turning))
    sums, acting = _acting.sums(forces), _acting.cleaned(forces, size)
    rows: list[list[Cell]] = []
    for row, name in enumerate(acting.names.tolist()):
        what = "load" if acting.is_load[row] else "reaction"
        place = ", ".join(numbers.compact(x, 4) for x in acting.place[:, row].tolist())
        parts = np.concatenate((acting.force[:, row], acting.moment[:, row]))
        rows.append([name, what, *_texts(parts, scale), f"({place})"])
    for what, parts in (("loads", sums.loads), ("reactions", sums.reactions)):
        rows.append([f"all {what}", "sum", *_texts(parts, scale), "origin"])
    left = [numbers.compact(part, 2) for part in sums.left.tolist()]
    rows.append(["all together", "sum", *left, "origin"])
    head = ("on", "what", *(f"{n}{bracket(u)}" for n, u in zip(names, units_of, strict=True)), "place")
    return Table("What acts on the part", head, rows)


def _texts(parts: np.ndarray, scale: np.ndarray) -> list[str]:
    """Return parts without those that are round-off beside their scale."""
    kept = np.where(np.abs(parts) > _acting.ROUND_OFF * scale, parts, 0.0)
    return [numbers.compact(part, 6) for part in kept.tolist()]
