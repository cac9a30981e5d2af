"""All pictures of a report, as a list of figures to draw: together, or some of them somewhere else."""

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import partial
from itertools import islice
from typing import Any

import numpy as np

from convergence.dimensions import Units
from convergence.fields import Fields
from convergence.histories.table import outcomes
from convergence.mapped import MappedField
from convergence.report import _scene
from convergence.report._acting import forces_of
from convergence.report._picture import Picture, Rewrite
from convergence.report.figures_balance import balance_figure
from convergence.report.figures_equilibrium import equilibrium_figure
from convergence.report.figures_error import error_map, norm_figure
from convergence.report.figures_growth import field_figure, growth_figure
from convergence.report.figures_map import map_figure
from convergence.report.figures_mesh import mesh_figure
from convergence.report.figures_order import error_figure
from convergence.report.figures_standing import standing_figure
from convergence.report.figures_stress import stress_figure
from convergence.report.figures_value import value_figure
from convergence.results import Findings, Quantity

ROUND_OFF = 1e-7  # an energy-norm error below this share is no error to draw
Figure = tuple[Callable[..., Picture | None], tuple[Any, ...]]  # a function that draws, and its arguments
Draw = Callable[[Sequence[Figure]], list[Picture | None]]


@dataclass(frozen=True)
class Pictures:
    """What was drawn: by quantity; meshes and stress where there are fields; errors; maps; a balance."""

    by_quantity: dict[str, list[Picture]]
    fields: list[Picture]
    errors: list[Picture]
    maps: list[Picture]
    balance: list[Picture]

    @property
    def all(self) -> list[Picture]:
        return [picture for group in self._groups() for picture in group]

    def _groups(self) -> list[list[Picture]]:
        return [*self.by_quantity.values(), self.fields, self.errors, self.maps, self.balance]


def one_by_one(figures: Sequence[Figure]) -> list[Picture | None]:
    """Draw figures here and now."""
    return [function(*arguments) for function, arguments in figures]


def pictures(
    findings: Findings, fields: Sequence[Fields], units: Units, draw_all: Draw, comma: Rewrite | None = None
) -> Pictures:
    """Return the pictures of a report; `fields` as `write_report` has them, `comma` as `draw` has it."""
    stem = stems([quantity.name for quantity in findings.quantities])
    groups = [_of_quantity(findings, quantity, stem[quantity.name]) for quantity in findings.quantities]
    turned = _scene.turn(fields[-1]) if fields else np.eye(2)
    groups += [
        *_of_fields(findings, fields, turned, units),
        _of_maps(findings, fields, turned),
        _of_balance(findings, fields, turned, units),
    ]
    figures = [figure for group in groups for figure in group]
    if comma:
        figures = [(partial(function, comma=comma), arguments) for function, arguments in figures]
    drawn = iter(draw_all(figures))
    found = [[p for p in islice(drawn, len(group)) if p] for group in groups]
    *by_quantity, meshes, errors, maps, balance = found
    return Pictures(dict(zip(stem, by_quantity, strict=True)), meshes, errors, maps, balance)


def stems(names: Sequence[str]) -> dict[str, str]:
    """Return a file stem for every name: plain characters, not longer than 48, no two alike."""
    found: dict[str, str] = {}
    for name in names:
        plain = re.sub(r"[^a-z0-9]+", "-", name.lower()).strip("-")[:48] or "quantity"
        number = 2
        stem = plain
        while stem in found.values():
            stem, number = f"{plain}-{number}", number + 1
        found[name] = stem
    return found


def _of_quantity(findings: Findings, quantity: Quantity, stem: str) -> list[Figure]:
    ladder, verdict = findings.ladder, findings.verdicts[quantity.name]
    length = ladder.h_unit
    if verdict.word == "singular":
        exponent = _exponent(findings, quantity)
        return [
            (growth_figure, (f"{stem}-growth", quantity, ladder, length, exponent)),
            (field_figure, (f"{stem}-field", quantity, ladder, findings.facts)),
        ]
    return [
        (value_figure, (f"{stem}-value", quantity, verdict, ladder, length, findings.companion)),
        (error_figure, (f"{stem}-order", quantity, verdict, ladder, length)),
        (standing_figure, (f"{stem}-standing", quantity, verdict, ladder, outcomes())),
    ]


def _exponent(findings: Findings, quantity: Quantity) -> float | None:
    """Return the weakest exponent within the quantity's reach, of the whole model where that is unknown."""
    covered = findings.facts.covered.get(quantity.name, ())
    return min((corner.exponent for corner in covered), default=findings.facts.exponent)


def _of_fields(
    findings: Findings, fields: Sequence[Fields], turned: np.ndarray, units: Units
) -> list[list[Figure]]:
    """Return the figures of the meshes and the stress, and those of the errors."""
    ladder = findings.ladder
    exact = ladder.column("energy_norm.estimated")[-1] < ROUND_OFF
    errors: list[Figure] = [] if exact else [(norm_figure, (ladder, findings.facts, ladder.h_unit))]
    if not fields:
        return [[], errors]
    corners = findings.facts.corners or ()
    finest = _mesh_name(len(fields), len(ladder.levels))
    meshes: Figure = (mesh_figure, (fields, turned, ladder, ladder.h_unit))
    stress: Figure = (stress_figure, (fields[-1], turned, findings, units.stress, finest))
    error: Figure = (error_map, (fields[-1], turned, units, finest, corners))
    return [[meshes, stress], errors if exact else [error, *errors]]


def _of_maps(findings: Findings, fields: Sequence[Fields], turned: np.ndarray) -> list[Figure]:
    """Return the maps of the intervals at all nodes, where the finest mesh is drawn."""
    drawn = [one for one in findings.mapped if len(one.relative)]
    corners = findings.facts.corners or ()
    return [(map_figure, (fields[-1], turned, one, f"map-{stem}", corners)) for one, stem in _stemmed(drawn)]


def _stemmed(drawn: Sequence[MappedField]) -> list[tuple[MappedField, str]]:
    return list(zip(drawn, stems([one.name for one in drawn]).values(), strict=True))


def _of_balance(
    findings: Findings, fields: Sequence[Fields], turned: np.ndarray, units: Units
) -> list[Figure]:
    """Return the figure of printed loads and reactions, or that of our own."""
    if findings.facts.balance is not None:
        return [(balance_figure, ("equilibrium", findings.facts.balance))]
    forces = forces_of(fields)
    if forces is None:
        return []
    return [(equilibrium_figure, (fields, forces, turned, units))]


def _mesh_name(drawn: int, levels: int) -> str:
    """Return what the mesh of the pictures is called."""
    if drawn >= levels:
        return "the finest mesh"
    return f"level {drawn} of {levels}, the finest that can be drawn"
