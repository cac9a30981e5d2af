"""What a level leaves for the figures: its mesh, displacement, stress and error, as plain arrays."""

import io
from dataclasses import asdict, dataclass
from pathlib import Path

import numpy as np

from convergence.textfile import write_bytes


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
    """

    points: np.ndarray
    cells: np.ndarray
    edges: np.ndarray
    boundary: np.ndarray
    displacement: np.ndarray
    von_mises: np.ndarray
    error: np.ndarray

    def save(self, path: Path) -> None:
        """Write atomically as .npz."""
        packed = io.BytesIO()
        np.savez_compressed(packed, **asdict(self))
        write_bytes(path, packed.getvalue())


def load_fields(path: Path) -> Fields:
    """Read what `Fields.save` wrote."""
    with np.load(path) as data:
        return Fields(**{name: data[name] for name in data.files})
