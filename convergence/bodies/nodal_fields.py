"""Cells of one shape with fields on their nodes, whoever made them: what a pointwise map compares."""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from convergence.fem.element import Element
from convergence.fem.recovery import nodal_values, recovered_stress
from convergence.fem.solution import Solution

DISPLACEMENT, STRESS = "displacement", "stress"


@dataclass(frozen=True, eq=False)
class NodalFields:
    """nodes (D, n), cell_nodes (k, m) in the order of `kind`, fields by name (components, n).

    Every node belongs to a cell. `resolution` says how far rounding may have moved the values of a field.
    """

    nodes: np.ndarray
    cell_nodes: np.ndarray
    kind: Element
    fields: Mapping[str, np.ndarray]
    resolution: Mapping[str, float] = field(default_factory=dict)


def nodal_fields(solution: Solution, region: str | None = None) -> NodalFields:
    """Return displacement and recovered stress of a solution, on the cells of a region or on all.

    Stress jumps where materials meet: there the fields of all cells have the value of one side, those of a
    region its own.
    """
    mesh = solution.mesh
    cells = np.arange(mesh.cells) if region is None else mesh.regions[region]
    used, own = np.unique(mesh.cell_nodes[:, cells], return_inverse=True)
    stress = recovered_stress(solution)
    if region is not None:
        on_nodes = np.empty((len(stress), len(used)))
        on_nodes[:, own.reshape(-1, len(cells))] = stress[:, :, cells]
    else:
        on_nodes = nodal_values(solution, stress)[:, used]
    fields = {DISPLACEMENT: solution.displacement[:, used], STRESS: on_nodes}
    return NodalFields(mesh.nodes[:, used], own.reshape(-1, len(cells)), mesh.element, fields)


def rounding(values: np.ndarray) -> float:
    """Return how far rounding may have moved values.

    Values that single precision holds exactly are taken to have been stored in it.
    """
    largest = float(np.abs(values).max(initial=0.0))
    single = bool((values == values.astype(np.float32)).all())
    return 0.5 * float(np.finfo(np.float32 if single else values.dtype).eps) * largest
