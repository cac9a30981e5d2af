"""Which field of a file is the displacement and which the stress, and their components.

Stress may have one component, the von Mises stress itself; xx, yy, xy or xx, yy, zz, xy in a plane; the
normal stresses and then three shear stresses in any order; or a whole tensor, row by row.
"""

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from convergence.bodies.file_mesh import FileMesh
from convergence.errors import Fault, InputError, listing, nearest
from convergence.fem.stress import component

DISPLACEMENTS = ("displacement", "displacements", "u", "disp", "displ", "uvw")
STRESSES = ("stress", "sigma", "stresses", "cauchy_stress", "stress_tensor", "von_mises", "mises", "s")


@dataclass(frozen=True)
class FilePeak:
    """The largest von Mises stress that a file has itself, its place, and whether it is one value a cell."""

    value: float
    place: tuple[float, ...]
    by_cell: bool


def displacement(found: FileMesh, name: str = "") -> np.ndarray:
    """Return the displacement (D, n) of a file; InputError where it is missing, zero or not finite."""
    dimension, fields = len(found.nodes), found.point_fields
    fitting = [key for key, rows in fields.items() if len(rows) in (dimension, len(found.axes), 3)]
    key = _chosen(found, name, fitting, fields, DISPLACEMENTS, "displacement")
    rows = fields[key]
    kept = rows[list(found.axes)] if len(rows) == 3 and dimension < 3 else rows[:dimension]
    bad = np.flatnonzero(~np.isfinite(kept).all(axis=0))
    if len(bad):
        numbers = listing([str(found.node_numbers[node]) for node in bad[:5]])
        what = f"the displacement {key!r} is not finite at {len(bad)} nodes (from 0: {numbers})"
        raise InputError([Fault(str(found.path), what, "write a number at every node")])
    if not kept.any():
        what = f"the displacement {key!r} is zero at every node"
        raise InputError([Fault(str(found.path), what, "give a file, or the step of a series, under load")])
    return np.ascontiguousarray(kept)


def _chosen(
    found: FileMesh, name: str, fitting: list[str], fields: Iterable[str], usual: Iterable[str], what: str
) -> str:
    """Return the field that is named, else the one of a usual name, else the only one that fits."""
    if name:
        if name not in fitting:
            wrong = f"no {what} {name!r} at the nodes" if name not in fields else f"{name!r} is no vector"
            raise InputError([Fault(str(found.path), wrong, nearest(name, fitting))])
        return name
    plain = {key.lower().replace(" ", "_"): key for key in reversed(fitting)}
    key = next((plain[word] for word in usual if word in plain), "")
    if key or len(fitting) == 1:
        return key or fitting[0]
    which = (
        f'say which field it is: {what} = "..." (vectors: {listing(fitting)})'
        if fitting
        else (f"write the {what} at the nodes (fields: {listing(sorted(fields))})")
    )
    raise InputError([Fault(str(found.path), f"no field that is plainly the {what}", which)])


def file_peak(found: FileMesh, name: str, across: float | None) -> FilePeak | None:
    """Return the largest von Mises stress of the file's own stress field, None where there is none.

    `across` is the normal stress across a plane over xx + yy, where the file has xx, yy, xy only; None where
    it is not known. InputError where a field is named and is not there or no stress.
    """
    named = {key: False for key in found.point_fields} | {
        key: True for key in found.cell_fields if key not in found.point_fields
    }
    plain = {key.lower().replace(" ", "_"): key for key in named}
    key = name or next((plain[word] for word in STRESSES if word in plain), "")
    if not key:
        return None
    if key not in named:
        raise InputError([Fault(str(found.path), f"no stress {key!r}", nearest(key, named))])
    by_cell = named[key]
    parts = found.cell_fields[key] if by_cell else (found.point_fields[key],)
    values = [own for rows in parts if (own := von_mises(rows, across)) is not None]
    if len(values) < len(parts):
        if name:
            what = f"{key!r} has {len(parts[0])} components"
            raise InputError([Fault(str(found.path), what, "1, 3, 4, 6 or 9 components of stress")])
        return None
    places = [found.nodes]
    if by_cell:
        places = [found.nodes[:, group.cell_nodes].mean(axis=1) for group in found.groups]
    stress, place = np.concatenate(values), np.concatenate(places, axis=1)
    if not np.isfinite(stress).any():
        return None
    best = int(np.where(np.isfinite(stress), stress, -np.inf).argmax())
    return FilePeak(float(stress[best]), tuple(place[:, best].tolist()), by_cell)


def von_mises(rows: np.ndarray, across: float | None) -> np.ndarray | None:
    """Return the von Mises stress (n,) of stresses (components, n), None where they cannot be stresses."""
    if len(rows) == 1:
        return np.asarray(rows[0])
    if len(rows) == 4 and np.array_equal(rows[1], rows[2]):
        rows = rows[[0, 3, 1]]
    if len(rows) == 3:
        if across is None:
            return None
        xx, yy, xy = rows
        return component(np.array([xx, yy, across * (xx + yy), xy]), "von_mises")
    if len(rows) == 4:
        return component(rows, "von_mises")
    if len(rows) == 9:
        return component(rows[[0, 4, 8, 1, 5, 2]], "von_mises")
    return component(rows, "von_mises") if len(rows) == 6 else None
