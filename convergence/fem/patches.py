"""Superconvergent patches: polynomials fitted to the element stress around every vertex.

Zienkiewicz & Zhu 1992, Int. J. Numer. Meth. Engng 33:1331 (eqs. 9-13). A polynomial is fitted to the
element stress at the sampling points of the cells around each vertex; nodes between vertices take the
average of their vertices' polynomials.

A vertex on the boundary takes the patches of the inner vertices nearest to it together, each cell as often
as they have it. The stress of a linear cell is wrong by O(h), but on a regular mesh this cancels over the
patch of an inner vertex, value and slopes, and so it does over such a sum; over a mere union, or with the
vertex's own cells, it does not (18 % off on the edges of a bore with tetrahedra, now 2 %). At degree 2
nothing cancels that way, and the vertex's own cells make the way to it shorter.
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
SEEN = 1e-3  # squared share of a term that the terms before it do not have, at the samples
THINNEST = 1e-4
RINGS = 3
VALUES = 100_000  # of monomials at samples, at once: they stay in the cache
NODES, CELLS = 4096, 4096  # at once
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
        parts = [cells[start : start + CELLS] for start in range(0, len(cells), CELLS)]
        with workers() as pool:
            found = pool.map(lambda part: direct_stress(solution, places, part).transpose(1, 2, 0), parts)
            self.stress = np.concatenate(list(found))
        components = self.stress.shape[2]
        self.frame = np.zeros((len(numbers), mesh.dimension, mesh.dimension))
        self.coefficients = np.zeros((len(numbers), len(self.powers), components))
        self._fit()

    def _fit(self) -> None:
        """Fit inner vertices on their cells, the rest on the patches of the nearest of these.

        Where none is near, the vertex's own cells are taken, then those beside them too; terms that
        even these do not tell apart from lower ones are left out.
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
            fitted[inner] = self._groups(touch[inner], inner, pool)
            left = np.flatnonzero(~fitted)
            near = sparse.csr_array(touch[left] @ touched)
            for _ in range(RINGS if fitted.any() else 0):
                keep = ~self._groups(self._joined(near, fitted, touch, left), left, pool)
                left, near = left[keep], sparse.csr_array(sparse.csr_array(near[keep] @ touch) @ touched)
            left = left[~self._groups(touch[left], left, pool)]
            wider = sparse.csr_array(sparse.csr_array(touch[left] @ touched) @ touch)
            self._groups(wider, left, pool, every=False)

    def _joined(
        self, near: sparse.csr_array, fitted: np.ndarray, touch: sparse.csr_array, vertices: np.ndarray
    ) -> sparse.csr_array:
        """Return how often (vertices, cells) the patches of the fitted of the near vertices have a cell."""
        beside = near.copy()
        beside.data[:] = fitted[beside.indices]
        beside.eliminate_zeros()
        cells = sparse.csr_array(beside @ touch)
        if self.mesh.degree == 2:
            own = touch[vertices]
            own.data = np.repeat(np.diff(beside.indptr) > 0, np.diff(own.indptr)).astype(own.data.dtype)
            cells = sparse.csr_array(cells + own)
            cells.eliminate_zeros()
        return cells

    def _groups(
        self, patches: sparse.csr_array, vertices: np.ndarray, pool: ThreadPoolExecutor, every: bool = True
    ) -> np.ndarray:
        """Return which vertices could be fitted, each on its row of patches, none on an empty one.

        Those with equally many cells are fitted together, with all terms or, else, what terms they can.
        """
        size = np.diff(patches.indptr)
        done = np.zeros(len(vertices), dtype=bool)
        batches = []
        for count in np.unique(size[size > 0]):
            rows = np.flatnonzero(size == count)
            step = max(1, VALUES // (int(count) * self.samples.shape[2] * len(self.powers)))
            batches += [rows[start : start + step] for start in range(0, len(rows), step)]

        def fit(rows: np.ndarray) -> None:
            at = patches.indptr[rows][:, None] + np.arange(size[rows[0]])
            done[rows] = self._solve(vertices[rows], patches.indices[at], patches.data[at], every)

        list(pool.map(fit, batches))
        return done

    def _solve(self, vertices: np.ndarray, cells: np.ndarray, times: np.ndarray, every: bool) -> np.ndarray:
        """Return which patches (v, cells each, so many times) determine their terms; those are kept."""
        offset = self.samples[cells].transpose(0, 2, 1, 3) - self.centre[:, vertices].T[:, :, None, None]
        offset = offset.reshape(*offset.shape[:2], -1)
        count = offset.shape[2]
        frame = _even_frame(offset @ offset.transpose(0, 2, 1) / count)
        basis = _monomials((frame @ offset).transpose(1, 0, 2), self.powers)
        basis = np.ascontiguousarray(basis.transpose(1, 0, 2))
        shares = np.repeat(times / times.sum(axis=1, keepdims=True), self.samples.shape[2], axis=1)
        weighted = basis * (shares / self.samples.shape[2])[:, None, :]
        moments = weighted @ basis.transpose(0, 2, 1)
        right = weighted @ self.stress[cells].reshape(len(cells), count, -1)
        one = np.eye(len(self.powers))
        pivots = np.diagonal(np.linalg.cholesky(moments + ROUND_OFF * one), axis1=1, axis2=2) ** 2
        good = pivots.min(axis=1) > SAFE_PIVOT
        if every:
            doubtful = np.flatnonzero(~good)
            good[doubtful] = np.linalg.eigvalsh(moments[doubtful])[:, 0] > SMALLEST_EIGENVALUE
        else:
            seen = pivots > SEEN * np.maximum(np.diagonal(moments, axis1=1, axis2=2), SEEN)
            moments = np.where(seen[:, :, None] & seen[:, None, :], moments, one)
            right *= seen[:, :, None]
            good[:] = True
        self.coefficients[vertices[good]] = np.linalg.solve(moments[good], right[good])
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
