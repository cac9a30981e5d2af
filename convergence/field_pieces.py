"""Result files whose meshes have several kinds of cells: one solution each, and what they say together.

A peak is the largest of all, a place belongs to the cells that hold it, energies are added. Recovered stress
does not cross from one kind of cells to the other.
"""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from convergence.bind import parameters
from convergence.errors import Unsuitable
from convergence.fem.element import Shape
from convergence.fem.given_part import GivenPart
from convergence.fem.problem import Problem
from convergence.fem.solution import Solution
from convergence.fields import Fields
from convergence.measuring import as_numbers, measured
from convergence.results import Quantity

LARGEST = ("peak_stress", "largest_displacement")
AT_A_PLACE = ("displacement", "stress", "rotation")
ADDED = ("strain_energy",)
TOGETHER = (*LARGEST, *AT_A_PLACE, *ADDED)


@dataclass(frozen=True, eq=False)
class FieldPiece:
    """Cells of one shape and degree: their problem, the displacement (D, n) of their nodes per mesh."""

    problem: Problem
    shape: Shape
    degree: int
    displacement: tuple[np.ndarray, ...]

    @property
    def part(self) -> GivenPart:
        assert isinstance(self.problem.part, GivenPart)
        return self.problem.part


def knows(problem: Problem, quantity: Quantity) -> bool:
    """Return whether a problem has all that the arguments of a quantity name."""
    assert quantity.measure is not None
    names = problem.names()
    return all(
        not parameter.names or not isinstance(value, str) or value in names[parameter.names]
        for parameter in parameters(quantity.measure.func)
        for value in [quantity.arguments.get(parameter.name)]
    )


def measured_on(quantities: Sequence[Quantity], solutions: Sequence[Solution], file: str) -> dict[str, float]:
    """Return the numbers of quantities over all kinds of cells; InputError as `measured`."""
    if len(solutions) == 1:
        return measured(quantities, solutions[0], file)
    values: dict[str, float] = {}
    for quantity in quantities:
        values |= _together(quantity, solutions)
    return values


def _together(quantity: Quantity, solutions: Sequence[Solution]) -> dict[str, float]:
    """Return the number of a quantity over all kinds of cells, nothing where none of them has it."""
    assert quantity.measure is not None
    found = []
    for solution in solutions:
        try:
            if knows(solution.problem, quantity):
                found.append(as_numbers(quantity.name, quantity.measure(solution)))
        except Unsuitable:  # the place or the names belong to the other kind of cells
            continue
    if not found:
        return {}
    if quantity.measure_name in AT_A_PLACE:
        return found[0]
    if quantity.measure_name in ADDED:
        return {quantity.name: math.fsum(own[quantity.name] for own in found)}
    sign = -1.0 if quantity.arguments.get("component") == "third_principal" else 1.0
    return max(found, key=lambda own: sign * own[quantity.name])


def joined_records(records: Sequence[Mapping[str, float]], solutions: Sequence[Solution]) -> dict[str, float]:
    """Return the records of all kinds of cells as those of one mesh: of the kind with the largest stress.

    Errors and energies are added, displacement and rotation the largest.
    """
    if len(records) == 1:
        return dict(records[0])
    peaks = [
        max((v for k, v in own.items() if k.endswith(".peak_von_mises")), default=0.0) for own in records
    ]
    joined = dict(records[int(np.argmax(peaks))])
    energy = sum(own["energy_norm.energy"] for own in records)
    squared = sum(own["energy_norm.absolute"] ** 2 for own in records)
    joined["energy_norm.energy"], joined["energy_norm.absolute"] = energy, math.sqrt(squared)
    joined["energy_norm.estimated"] = math.sqrt(squared / max(2.0 * energy + squared, 1e-300))
    for name in ("linear_range.displacement", "linear_range.rotation", "locking.bending"):
        joined[name] = max(own[name] for own in records)
    return joined


def joined_fields(fields: Sequence[Fields]) -> Fields:
    """Return the fields of all kinds of cells as one; triangles among quadrilaterals repeat a node."""
    if len(fields) == 1:
        return fields[0]
    starts = np.cumsum([0, *(field.points.shape[1] for field in fields)])[:-1]
    corners = max(len(field.cells) for field in fields)
    edges = max(len(field.edges) for field in fields)

    def shifted(rows: np.ndarray, start: int, wanted: int) -> np.ndarray:
        fuller = np.concatenate([rows, np.repeat(rows[-1:], wanted - len(rows), axis=0)])
        return np.asarray(fuller + start)

    pairs = list(zip(fields, starts, strict=True))
    return Fields(
        points=np.concatenate([field.points for field in fields], axis=1),
        cells=np.concatenate([shifted(field.cells, at, corners) for field, at in pairs], axis=1),
        edges=np.concatenate([shifted(field.edges, at, edges) for field, at in pairs], axis=1),
        boundary=np.concatenate([field.boundary + at for field, at in pairs], axis=1),
        displacement=np.concatenate([field.displacement for field in fields], axis=1),
        von_mises=np.concatenate([field.von_mises for field in fields]),
        error=np.concatenate([field.error for field in fields]),
    )
