"""Strains from displacements: the operator B, the volume behind each point, and the strain of temperature.

Strains and stresses have xx, yy, zz, xy in a plane and around an axis, xx, yy, zz, xy, yz, zx in a solid and
xx in a rod; shear strains are those of engineering. Unknowns are interleaved: component c of scalar node n
is D n + c.
"""

import numpy as np

from convergence.fem.dilatation import projected
from convergence.fem.geometry import Geometry
from convergence.fem.loads import TemperatureRise, values_at
from convergence.fem.material import ProblemKind
from convergence.fem.mesh import Mesh
from convergence.fem.problem import Problem

# rows of B: (component of displacement, coordinate it is differentiated by)
ROWS = {
    1: (((0, 0),),),
    2: (((0, 0),), ((1, 1),), (), ((0, 1), (1, 0))),
    3: (((0, 0),), ((1, 1),), ((2, 2),), ((0, 1), (1, 0)), ((1, 2), (2, 1)), ((2, 0), (0, 2))),
}
HOOP = 2
ON_AXIS = 1e-9  # of the part's size: there the hoop strain u/x is du/dx


def unknowns(nodes: np.ndarray, dimension: int) -> np.ndarray:
    """Return the unknowns of each scalar node in the first axis, (n, m) -> (D n, m)."""
    return (dimension * nodes[:, None] + np.arange(dimension)[:, None]).reshape(-1, *nodes.shape[1:])


def volumes(problem: Problem, at: Geometry) -> np.ndarray:
    """Return the volume that each quadrature point stands for, (m, q)."""
    return np.asarray(at.dx * problem.depth(at.x[0]))


def strain_operator(problem: Problem, mesh: Mesh, at: Geometry, cells: np.ndarray) -> np.ndarray:
    """Return B (strains, D n, m, q) at points of cells."""
    operator = _plain_operator(problem, at)
    if mesh.formulation == "mean dilatation":
        mean = projected(
            mesh,
            lambda rule: _plain_operator(problem, rule)[:3].sum(axis=0),
            lambda rule: volumes(problem, rule),
            at,
            cells,
        )
        operator[:3] += (mean - operator[:3].sum(axis=0)) / 3.0
    return operator


def strain_gradients(problem: Problem, at: Geometry) -> np.ndarray:
    """Return what strains are made of (n, G, m, q): the shape gradients and, around an axis, N/x."""
    if problem.kind != "axisymmetric":
        return at.gradients
    shapes = at.shapes if at.shapes.ndim == 3 else at.shapes[:, None, :]
    away, inverse = _off_axis(problem, at)
    hoop = np.where(away, shapes * inverse, at.gradients[:, 0])
    return np.concatenate([at.gradients, hoop[:, None]], axis=1)


def strain_maps(problem: Problem, at: Geometry) -> np.ndarray:
    """Return what makes `strain_gradients` of the slopes and, around an axis, the shapes, (K, G, m, q)."""
    if problem.kind != "axisymmetric":
        return at.inward
    d = len(at.x)
    away, inverse = _off_axis(problem, at)
    maps = np.zeros((d + 1, d + 1, *away.shape))
    maps[:d, :d] = at.inward
    maps[:d, d] = np.where(away, 0.0, at.inward[:, 0])
    maps[d, d] = np.where(away, inverse, 0.0)
    return maps


def _off_axis(problem: Problem, at: Geometry) -> tuple[np.ndarray, np.ndarray]:
    """Return where points (m, q) are away from the axis, and 1/x there."""
    away = at.x[0] > ON_AXIS * problem.part.size
    return away, 1.0 / np.where(away, at.x[0], 1.0)


def strain_forms(kind: ProblemKind, dimension: int) -> np.ndarray:
    """Return which gradient (G) of which component (D) makes each strain, (strains, D, G)."""
    hoop = kind == "axisymmetric"
    forms = np.zeros((len(ROWS[dimension]), dimension, dimension + hoop))
    for row, terms in enumerate(ROWS[dimension]):
        for component, coordinate in terms:
            forms[row, component, coordinate] = 1.0
    if hoop:
        forms[HOOP, 0, dimension] = 1.0
    return forms


def _plain_operator(problem: Problem, at: Geometry) -> np.ndarray:
    gradients = strain_gradients(problem, at)
    forms = strain_forms(problem.kind, len(at.x))
    operator = np.einsum("sik,nkmq->snimq", forms, gradients, optimize=True)
    return np.asarray(operator.reshape(len(forms), -1, *gradients.shape[2:]))


def thermal_strain(problem: Problem, region: str, x: np.ndarray) -> np.ndarray:
    """Return the strain of the temperature rise at places x (D, m, q) of one region, (strains, m, q)."""
    per_kelvin = problem.materials[region].thermal_strain(problem.kind)
    total = np.zeros((len(per_kelvin), *x.shape[1:]))
    for load in problem.loads:
        if isinstance(load, TemperatureRise) and load.region in (None, region):
            total += np.multiply.outer(per_kelvin, values_at(load.value, x))
    return total


def is_heated(problem: Problem) -> bool:
    """Return whether a temperature acts."""
    return any(isinstance(load, TemperatureRise) for load in problem.loads)
