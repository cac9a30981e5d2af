"""What a level leaves for the figures: its mesh, displacement, stress and error, as plain arrays."""

import io
from collections.abc import Mapping
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import Any

import numpy as np

from convergence.textfile import write_bytes

FORCES = "forces."  # before the names of a file's arrays that are those of `Forces`


@dataclass(frozen=True)
class Forces:
    """What acts on a part: one column for each boundary or point with a load, and each support.

    is_load (k,); names (k,); place (D, k) the middle of the boundary; force (D, k); moment (1 or 3, k) about
    that place, (0, k) of rods and rings. Of a ring the forces are those all around.
    """

    is_load: np.ndarray
    names: np.ndarray
    place: np.ndarray
    force: np.ndarray
    moment: np.ndarray


@dataclass(frozen=True)
class Fields:
    """One solved level. All arrays are float64 or int64.

    points (2, n) nodes; cells (3 or 4, m) node indices of each cell, counter-clockwise; edges (2 or 3, e)
    the nodes along each edge of the mesh; boundary (2, b) nodes of boundary segments; displacement (2, n);
    von_mises (n,) recovered stress at the nodes; error (m,) recovered energy-norm error of each cell,
    squared, per volume. In `cells` those of degree 2 are cut into four, so that gradients show.

    Of a solid, points and displacement are (3, n) and only the surface is kept: cells are its faces,
    counter-clockwise seen from outside, edges the mesh lines on it, boundary the segments of the part's own
    sharp edges, error that of the cell behind each face.

    `forces` is None where nothing was solved here.
    """

    points: np.ndarray
    cells: np.ndarray
    edges: np.ndarray
    boundary: np.ndarray
    displacement: np.ndarray
    von_mises: np.ndarray
    error: np.ndarray
    forces: Forces | None = None

    def save(self, path: Path) -> None:
        """Write atomically as .npz, not compressed: that halves the file and takes twenty times as long."""
        packed = io.BytesIO()
        arrays: dict[str, Any] = asdict(self)
        forces: Mapping[str, np.ndarray] = arrays.pop("forces") or {}
        arrays |= {f"{FORCES}{name}": array for name, array in forces.items()}
        np.savez(packed, **arrays)
        write_bytes(path, packed.getvalue())


def load_fields(path: Path) -> Fields:
    """Read what `Fields.save` wrote."""
    with np.load(path) as data:
        arrays = {name: data[name] for name in data.files}
    acting = {name.removeprefix(FORCES): arrays.pop(name) for name in list(arrays) if name.startswith(FORCES)}
    return Fields(**arrays, forces=Forces(**acting) if acting else None)
