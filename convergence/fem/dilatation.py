"""Mean dilatation: quadrilaterals and hexahedra that do not lock near Poisson's ratio 0.5.

The volume strain of each cell is replaced by its projection on constants (degree 1) or on linear functions
of the place (degree 2): Nagtegaal, Parks & Rice 1974, Comput. Meth. Appl. Mech. Engng 4:153; Hughes 1987,
The Finite Element Method, sect. 4.5.2 (B-bar). It equals a mixed method with discontinuous pressures, which
is stable and of full order for quadrilaterals and hexahedra of degree 2 and used widely at degree 1.
Triangles and tetrahedra of degree 1 would go on locking, those of degree 2 lose an order.
"""

from collections.abc import Callable

import numpy as np

from convergence.errors import require
from convergence.fem.geometry import Geometry, at_rule
from convergence.fem.mesh import Formulation, Mesh

AtPoints = Callable[[Geometry], np.ndarray]
SHAPES = ("quadrilateral", "hexahedron")
KINDS = ("plane strain", "axisymmetric", "solid")
RULE = {1: 3, 2: 5}


def require_suitable(formulation: Formulation, shape: str, kind: str) -> None:
    """Raise Unsuitable where cells or kind do not take the formulation."""
    if formulation == "mean dilatation":
        right = "quadrilaterals or hexahedra, in plane strain, axisymmetric or solid"
        require(
            (shape in SHAPES and kind in KINDS, "formulation", f"{formulation} with {shape} in {kind}", right)
        )


def projected(
    mesh: Mesh, divergence: AtPoints, volume: AtPoints, at: Geometry, cells: np.ndarray
) -> np.ndarray:
    """Return the projection (D n, m, q), at points of cells, of the volume strain of every unknown.

    `divergence` gives the volume strain (D n, m, q) at a geometry, `volume` (m, q) that of each point.
    """
    rule = at_rule(mesh, RULE[mesh.degree], cells)
    centre = mesh.nodes[:, mesh.cell_nodes[: mesh.element.corners, cells]].mean(axis=1)
    size = np.abs(rule.x - centre[:, :, None]).max(axis=2)
    basis = _basis(mesh, (rule.x - centre[:, :, None]) / size[:, :, None])
    weights = volume(rule)
    moments = np.einsum("amq,bmq,mq->mab", basis, basis, weights)
    right = np.einsum("amq,nmq,mq->man", basis, divergence(rule), weights, optimize=True)
    factors = np.linalg.solve(moments, right)
    wanted = _basis(mesh, (at.x - centre[:, :, None]) / size[:, :, None])
    return np.asarray(np.einsum("man,amq->nmq", factors, wanted, optimize=True))


def _basis(mesh: Mesh, offset: np.ndarray) -> np.ndarray:
    one = np.ones_like(offset[:1])
    return one if mesh.degree == 1 else np.concatenate([one, offset])
