"""How many vertices, edges, faces and cells a mesh has when every cell is cut into 2^D, again and again."""

from dataclasses import dataclass

import numpy as np

from convergence.bodies.raising import Raised
from convergence.fem.element import Shape
from convergence.fem.outer_facets import outer_facets


@dataclass(frozen=True)
class Tally:
    """Numbers of a mesh of linear cells; faces and plane cells are triangles and quadrilaterals."""

    vertices: int
    edges: int
    triangles: int
    quadrilaterals: int
    tetrahedra: int
    hexahedra: int
    wedges: int

    def refined(self) -> "Tally":
        """Return the numbers after one refinement."""
        return Tally(
            self.vertices + self.edges + self.quadrilaterals + self.hexahedra,
            2 * self.edges
            + 3 * self.triangles
            + 4 * self.quadrilaterals
            + self.tetrahedra
            + 6 * self.hexahedra
            + 3 * self.wedges,
            4 * self.triangles + 8 * self.tetrahedra + 4 * self.wedges,
            4 * self.quadrilaterals + 12 * self.hexahedra + 6 * self.wedges,
            8 * self.tetrahedra,
            8 * self.hexahedra,
            8 * self.wedges,
        )


def tally(shape: Shape, cell_nodes: np.ndarray, found: Raised) -> Tally:
    """Return the numbers of linear cells (k, m), whose edges and quadrilaterals are counted already."""
    cells = cell_nodes.shape[1]
    outer = sum(facets.shape[1] for facets, _ in outer_facets(shape, 1, cell_nodes) if len(facets) == 3)
    each = {"triangle": 2, "tetrahedron": 4, "wedge": 2}.get(shape, 0)
    edges, quadrilaterals, hexahedra = found.count
    return Tally(
        found.vertices,
        edges,
        (each * cells + outer) // 2,
        quadrilaterals,
        cells if shape == "tetrahedron" else 0,
        hexahedra,
        cells if shape == "wedge" else 0,
    )
