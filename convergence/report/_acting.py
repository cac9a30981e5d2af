"""What acts on a part, as figure, table and JSON show it: without round-off, and its sums."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from convergence import numbers
from convergence.dimensions import Units
from convergence.fields import Fields, Forces
from convergence.report._plane import size_of

ROUND_OFF = 1e-7  # a component below this share of the largest force is none; moments: times the size


@dataclass(frozen=True)
class Sums:
    """Forces (D,) and moments about the origin (0, 1 or 3) of the loads, the reactions, and both together."""

    loads: np.ndarray
    reactions: np.ndarray

    @property
    def left(self) -> np.ndarray:
        return np.asarray(self.loads + self.reactions)


def forces_of(fields: Sequence[Fields]) -> Forces | None:
    """Return what acts on the finest mesh that is drawn, None where nothing was solved or nothing acts."""
    forces = fields[-1].forces if fields else None
    return forces if forces is not None and len(forces.names) else None


def cleaned(forces: Forces, size: float) -> Forces:
    """Return places, forces and moments without what is round-off; `size` is that of the part."""
    scale = ROUND_OFF * largest_force(forces)
    return replace(
        forces,
        place=np.where(np.abs(forces.place) > ROUND_OFF * size, forces.place, 0.0),
        force=np.where(np.abs(forces.force) > scale, forces.force, 0.0),
        moment=np.where(np.abs(forces.moment) > scale * size, forces.moment, 0.0),
    )


def all_around(forces: Forces) -> bool:
    """Return whether they are those of a whole ring."""
    return len(forces.place) == 2 and not len(forces.moment)


def largest_force(forces: Forces) -> float:
    """Return the size of the largest force, 0 where nothing acts."""
    return float(np.max(np.linalg.norm(forces.force, axis=0), initial=0.0))


def sums(forces: Forces) -> Sums:
    """Return what loads and reactions add up to."""
    moment = forces.moment
    if len(moment):
        arms = np.cross(_in_space(forces.place), _in_space(forces.force), axis=0)
        moment = moment + arms[-len(moment) :]
    rows = np.vstack((forces.force, moment))
    return Sums(rows[:, forces.is_load].sum(axis=1), rows[:, ~forces.is_load].sum(axis=1))


def acting_object(fields: Sequence[Fields], units: Units) -> dict[str, Any] | None:
    """Return our own loads and reactions with their sums as the report has them, None where there are none.

    Moments of a row are about its place, those of the sums about the origin.
    """
    forces = forces_of(fields)
    if forces is None:
        return None
    together, acting = sums(forces), cleaned(forces, size_of(fields[-1].points))
    dimension = len(forces.place)
    rows = [
        {
            "on": name,
            "what": "load" if acting.is_load[row] else "reaction",
            "place": acting.place[:, row].tolist(),
            "force": acting.force[:, row].tolist(),
            "moment": acting.moment[:, row].tolist(),
        }
        for row, name in enumerate(acting.names.tolist())
    ]
    summed = {"loads": together.loads, "reactions": together.reactions, "left": together.left}
    return {
        "units": {"force": units.force, "moment": moment_unit(units), "place": units.length},
        "rows": rows,
        "sums": {
            name: {"force": parts[:dimension].tolist(), "moment": parts[dimension:].tolist()}
            for name, parts in summed.items()
        },
    }


def _in_space(vectors: np.ndarray) -> np.ndarray:
    return np.vstack((vectors, np.zeros((3 - len(vectors), vectors.shape[1]))))


def vector_text(parts: np.ndarray, unit: str) -> str:
    """Return "(Fx, Fy) N", or "Fx N" of a rod; parts that are nothing beside the largest are 0."""
    scale = float(np.abs(parts).max())
    said = [numbers.compact(x if abs(x) > ROUND_OFF * scale else 0.0, 5) for x in parts.tolist()]
    return f"({', '.join(said)}) {unit}".strip() if len(said) > 1 else f"{said[0]} {unit}".strip()


def moment_unit(units: Units) -> str:
    """Return the unit of a moment."""
    return f"{units.force} {units.length}".strip()
