"""Superconvergent patches: polynomials fitted to the element stress around every vertex.

Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng 33:1331 (eqs. 9-13). A polynomial is fitted to the
element stress at the sampling points of the cells around each vertex; nodes between vertices take the
average of their vertices' polynomials. A vertex on the boundary uses the cells around its inner neighbours,
itself included: its own few cells do not determine the polynomial.
"""

from concurrent.futures import ThreadPoolExecutor
from itertools import product

import numpy as np
from scipy import sparse

from convergence.fem.element import SIMPLICES, Element
from convergence.fem.geometry import interpolate
from convergence.fem.solution import Solution
from convergence.fem.stress import direct_stress
from convergence.fem.workers import workers

SMALLEST_EIGENVALUE = 1e-7
SAFE_PIVOT = 1e-2  # of the moments' Cholesky factor, squared; smaller ones are looked at closely
ROUND_OFF = 1e-13
THINNEST = 1e-4
RINGS = 3
VALUES = 100_000  # of monomials at samples, at once: they stay in the cache
NODES = 4096  # at once
Powers = tuple[tuple[int, ...], ...]


def sample_places(kind: Element) -> np.ndarray:
    """Return the sampling points (D, q): one for degree 1, the points of a rule of order 2 for degree 2."""
    return kind.rule(kind.degree)[0]


def powers(kind: Element) -> Powers:
    """Return the powers of the monomials, those of lower total degree first.

    Degree 1 takes the linear ones only: x y vanishes at the samples of a patch turned by 45°.
    """
    every = product(range(kind.degree + 1), repeat=kind.dimension)
    if kind.degree == 1 or kind.shape in SIMPLICES:
        found = [p for p in every if sum(p) <= kind.degree]
    elif kind.shape == "wedge":
        found = [p for p in every if p[0] + p[1] <= kind.degree]
    else:
        found = list(every)
    return tuple(sorted(found, key=lambda p: (sum(p), [-i for i in p])))


class Patches:
    """The fitted polynomials of all vertices of one region."""

    def __init__(self, solution: Solution, cells: np.ndarray):
        mesh = solution.mesh
        self.mesh, self.cells, self.powers = mesh, cells, powers(mesh.element)
        corners = mesh.cell_nodes[: mesh.element.corners, cells]
        numbers = np.flatnonzero(np.bincount(corners.ravel(), minlength=mesh.nodes.shape[1]))
        local = np.empty(mesh.nodes.shape[1], dtype=np.int32)
        local[numbers] = np.arange(len(numbers))
        self.t = local[corners]
        self.centre = mesh.nodes[:, numbers]
        places = sample_places(mesh.element)
        at = mesh.nodes[:, mesh.cell_nodes[:, cells]]
        self.samples = np.ascontiguousarray(interpolate(at, mesh.element.shapes(places)).transpose(1, 0, 2))
        self.stress = np.ascontiguousarray(direct_stress(solution, places, cells).transpose(1, 2, 0))
        components = self.stress.shape[2]
        self.frame = np.zeros((len(numbers), mesh.dimension, mesh.dimension))
        self.coefficients = np.zeros((len(numbers), len(self.powers), components))
        self._fit()

    def _fit(self) -> None:
        """Fit inner vertices on their cells, the rest on those of the inner vertices beside them too.

        Patches that do not determine the polynomial grow by rings of cells, then lose its higher terms.
        """
        corners, m = self.t.shape
        n = self.centre.shape[1]
        starts = np.arange(0, corners * m + 1, corners, dtype=np.int32)
        by_cell = (np.ones(corners * m, dtype=np.int32), np.ascontiguousarray(self.t.T).ravel(), starts)
        touched = sparse.csr_array(by_cell, shape=(m, n))
        touch = sparse.csr_array(touched.T.tocsr())
        fitted = np.ones(n, dtype=bool)
        fitted[self._outer_faces().ravel()] = False
        with workers() as pool:
            inner = np.flatnonzero(fitted)
            fitted[inner] = self._groups(touch[inner], inner, len(self.powers), pool)
            left = np.flatnonzero(~fitted)
            around = touch[left]
            beside = sparse.csr_array(around @ touched)
            beside.data[:] = fitted[beside.indices]
            beside.eliminate_zeros()
            patches = sparse.csr_array(beside @ touch + around)
            for terms in (len(self.powers), self.mesh.dimension + 1, 1):
                for _ in range(RINGS):
                    keep = ~self._groups(patches, left, terms, pool)
                    if not keep.any():
                        return
                    left = left[keep]
                    patches = sparse.csr_array(sparse.csr_array(patches[keep] @ touched) @ touch)
        raise AssertionError("a constant can always be fitted")

    def _groups(
        self, patches: sparse.csr_array, vertices: np.ndarray, terms: int, pool: ThreadPoolExecutor
    ) -> np.ndarray:
        """Fit vertices, each on its row of patches, those with equally many cells together."""
        size = np.diff(patches.indptr)
        done = np.zeros(len(vertices), dtype=bool)
        batches = []
        for count in np.unique(size):
            rows = np.flatnonzero(size == count)
            step = max(1, VALUES // (int(count) * self.samples.shape[2] * terms))
            batches += [rows[start : start + step] for start in range(0, len(rows), step)]

        def fit(rows: np.ndarray) -> None:
            cells = patches.indices[patches.indptr[rows][:, None] + np.arange(size[rows[0]])]
            done[rows] = self._solve(vertices[rows], cells, terms)

        list(pool.map(fit, batches))
        return done

    def _solve(self, vertices: np.ndarray, cells: np.ndarray, terms: int) -> np.ndarray:
        """Return which patches (v, cells each) determine their polynomial; those are kept."""
        offset = self.samples[cells].transpose(0, 2, 1, 3) - self.centre[:, vertices].T[:, :, None, None]
        offset = offset.reshape(*offset.shape[:2], -1)
        count = offset.shape[2]
        frame = _even_frame(offset @ offset.transpose(0, 2, 1) / count)
        basis = _monomials((frame @ offset).transpose(1, 0, 2), self.powers[:terms])
        basis = np.ascontiguousarray(basis.transpose(1, 0, 2))
        moments = basis @ basis.transpose(0, 2, 1) / count
        right = basis @ self.stress[cells].reshape(len(cells), count, -1) / count
        guarded = moments + ROUND_OFF * np.eye(terms)
        pivots = np.diagonal(np.linalg.cholesky(guarded), axis1=1, axis2=2) ** 2
        good = pivots.min(axis=1) > SAFE_PIVOT
        doubtful = np.flatnonzero(~good)
        good[doubtful] = np.linalg.eigvalsh(moments[doubtful])[:, 0] > SMALLEST_EIGENVALUE
        self.coefficients[vertices[good], :terms] = np.linalg.solve(moments[good], right[good])
        self.frame[vertices[good]] = frame[good]
        return np.asarray(good)

    def at_cell_nodes(self) -> np.ndarray:
        """Return the recovered stress (components, nodes of a cell, cells)."""
        kind, mesh = self.mesh.element, self.mesh
        numbers = mesh.cell_nodes[:, self.cells]
        values = np.empty((self.stress.shape[2], mesh.nodes.shape[1]))
        owners_of = [np.flatnonzero(_nearest(kind.nodes[: kind.corners], at)) for at in kind.nodes]
        with workers() as pool:
            for count in {len(owners) for owners in owners_of}:
                between = np.full((count, mesh.nodes.shape[1]), -1, dtype=np.int32)
                for node, owners in zip(numbers, owners_of, strict=True):
                    if len(owners) == count:
                        between[:, node] = self.t[owners]
                nodes = np.flatnonzero(between[0] >= 0)
                parts = [nodes[start : start + NODES] for start in range(0, len(nodes), NODES)]
                means = pool.map(lambda part, ends=between: self._mean(ends[:, part], part), parts)
                for part, mean in zip(parts, means, strict=True):
                    values[:, part] = mean
        return values[:, numbers]

    def _mean(self, vertices: np.ndarray, nodes: np.ndarray) -> np.ndarray:
        """Return the mean over vertices (v, n) of their polynomials at nodes (n)."""
        total = np.zeros((self.stress.shape[2], len(nodes)))
        for owners in vertices:
            offset = self.mesh.nodes[:, nodes] - self.centre[:, owners]
            basis = _monomials(np.einsum("eij,je->ie", self.frame[owners], offset), self.powers)
            total += np.einsum("te,ets->se", basis, self.coefficients[owners])
        return total / len(vertices)

    def _outer_faces(self) -> np.ndarray:
        """Return vertices (D, f) of the faces that one cell only has; D of them tell faces apart."""
        n, dimension = self.centre.shape[1], self.mesh.dimension
        faces = [np.sort(self.t[list(face)], axis=0)[:dimension] for face in self.mesh.element.faces]
        vertices = np.concatenate(faces, axis=1)
        keys = vertices[0].astype(np.int64)
        for row in vertices[1:]:
            keys = keys * n + row
        _, first, count = np.unique(keys, return_index=True, return_counts=True)
        full = [np.sort(self.t[list(face)], axis=0)[-dimension:] for face in self.mesh.element.faces]
        single = first[count == 1]
        return np.concatenate([vertices[:, single], np.concatenate(full, axis=1)[:, single]], axis=1)


def _nearest(corners: np.ndarray, at: np.ndarray) -> np.ndarray:
    """Return which of the corners are nearest to a place."""
    distance = np.linalg.norm(corners - at, axis=1)
    return np.asarray(distance < distance.min() + 1e-9)


def _even_frame(spread: np.ndarray) -> np.ndarray:
    """Return (n, D, D) that maps offsets to even coordinates of size one, however thin their patch is.

    `spread` (n, D, D) are the mean products of the offsets.
    """
    size = np.trace(spread, axis1=1, axis2=2)[:, None, None]
    factor = np.linalg.cholesky(
        spread + (THINNEST**2 * size + np.finfo(float).tiny) * np.eye(spread.shape[1])
    )
    return np.asarray(0.5 * np.linalg.inv(factor))


def _monomials(offset: np.ndarray, exponents: Powers) -> np.ndarray:
    ladders = [[np.ones_like(row), row, row * row] for row in offset]
    found = []
    for power in exponents:
        term = ladders[0][power[0]]
        for ladder, i in zip(ladders[1:], power[1:], strict=True):
            term = term * ladder[i]
        found.append(term)
    return np.array(found)
