"""Which cell of a mesh holds each of many places, and where in it: a spatial search, for all places at once.

The cells with the nearest centres are tried first, the one whose affine form fits best before the others.
Places that none of them holds meet every cell whose ball (about its centre, through its farthest node)
reaches them, found by trees of cells of like size: nothing that holds a place is missed, however uneven the
cells are. Of a place that lies in no cell the nearest one is told, if it is near enough.
"""

from dataclasses import dataclass
from typing import Any

import numpy as np

from convergence.fem.calculus import determinant, inverse
from convergence.fem.element import SIMPLICES, Element, element
from convergence.fem.workers import workers

REACH = 0.25  # of a cell's radius
NEAREST = 16  # cells looked at first
TURNS = ((0, 1), (1, 2), (2, NEAREST))  # ranks of these that are tried together
PLACES, PAIRS = 20_000, 8_000  # at once
NEWTON_STEPS = 20
SETTLED = 1e-7  # the last step of Newton, whose error is then of the order of its square
INSIDE = 1e-9  # of a cell
FARTHEST = (-3.0, 4.0)  # local coordinates on the way
SLIGHT = 0.02  # of a cell's radius: a place so little outside the cells it may lie in is not sought elsewhere
NEAR = 0.5  # of a cell, by which a curved one may pass the affine one, or fall short of it


@dataclass(frozen=True, eq=False)
class Found:
    """A cell for each place (n,), -1 where none is near; local (D, n) there, NaN where none.

    gap (n,) is the distance to the cell as a share of its radius: 0 inside, infinite where none is near.
    """

    cells: np.ndarray
    local: np.ndarray
    gap: np.ndarray


def search(
    nodes: np.ndarray, cell_nodes: np.ndarray, kind: Element, places: np.ndarray, *, reach: float = REACH
) -> Found:
    """Return the cell of each of the places (D, n) among cells (k, m) on nodes (D, N).

    A place outside all cells belongs to the nearest one up to `reach` radii away; local coordinates then
    lie outside the reference cell.
    """
    places = np.asarray(places, dtype=float)
    inquiry = _Inquiry(nodes, cell_nodes, kind, reach)
    starts = range(0, places.shape[1], PLACES)
    with workers() as pool:
        parts = list(pool.map(lambda start: inquiry.find(places[:, start : start + PLACES]), starts))
    if not parts:
        return Found(np.empty(0, dtype=np.intp), np.empty((len(nodes), 0)), np.empty(0))
    cells, local, gap = zip(*parts, strict=True)
    return Found(np.concatenate(cells), np.concatenate(local, axis=1), np.concatenate(gap))


def local_places(
    nodes: np.ndarray,
    cell_nodes: np.ndarray,
    kind: Element,
    cells: np.ndarray,
    places: np.ndarray,
    guess: np.ndarray | None = None,
) -> np.ndarray:
    """Return the local coordinates (D, n) of each of the places (D, n) in its cell; infinite where none are.

    By Newton from a guess (D, n), or from the middle of the cell.
    """
    middle = kind.nodes[: kind.corners].mean(axis=0)
    local = np.repeat(middle[:, None], len(cells), axis=1) if guess is None else np.clip(guess, *FARTHEST)
    corners = nodes[:, cell_nodes[:, cells]]
    left = np.arange(len(cells))
    for _ in range(NEWTON_STEPS):
        shapes, slopes = kind.evaluate(local[:, left])
        miss = places[:, left] - np.einsum("dnm,nm->dm", corners, shapes)
        jacobian = np.einsum("dnm,nkm->dkm", corners, slopes)
        # the map of a cell far from the place may fold there: any step leads on
        jacobian[:, :, determinant(jacobian) == 0.0] = np.eye(len(nodes))[:, :, None]
        step = np.einsum("kdm,dm->km", inverse(jacobian)[1], miss)
        local[:, left] = np.clip(local[:, left] + step, *FARTHEST)
        keep = np.abs(step).max(axis=0) >= SETTLED
        left, corners = left[keep], corners[:, :, keep]
        if len(left) == 0:
            break
    local[:, left] = np.inf
    return local


def _clamped(kind: Element, local: np.ndarray) -> np.ndarray:
    """Return places (D, n) of the reference cell near the local ones."""
    inside = np.clip(local, 0.0, 1.0)
    tied = {"wedge": 2}.get(kind.shape, len(local) if kind.shape in SIMPLICES else 0)
    if tied:
        inside[:tied] /= np.maximum(inside[:tied].sum(axis=0), 1.0)
    return np.asarray(inside)


class _Affine:
    """The affine maps at the middle of cells: a first guess, exact where the cell is affine."""

    def __init__(self, nodes: np.ndarray, cell_nodes: np.ndarray, kind: Element):
        vertices = [nodes[:, row] for row in cell_nodes[: kind.corners]]
        self.middle = kind.nodes[: kind.corners].mean(axis=0)
        slopes = element(kind.shape, 1).gradients(self.middle[:, None])[:, :, 0]
        self.centres = np.mean(vertices, axis=0)
        jacobian = np.einsum("nk,ndm->dkm", slopes, np.array(vertices))
        self.flat = determinant(jacobian) == 0.0
        away, bend = np.zeros(self.flat.shape), np.zeros(self.flat.shape)
        for row, at in zip(cell_nodes, kind.nodes, strict=True):
            arm = nodes[:, row] - self.centres
            away = np.maximum(away, (arm**2).sum(axis=0))
            bend = np.maximum(
                bend, np.abs(arm - np.einsum("dkm,k->dm", jacobian, at - self.middle)).max(axis=0)
            )
        self.radii = np.sqrt(away)
        self.exact = bend <= INSIDE * self.radii
        jacobian[:, :, self.flat] = np.eye(len(nodes))[:, :, None]
        self.inward = np.ascontiguousarray(inverse(jacobian)[1].transpose(2, 1, 0))

    def guess(self, cells: np.ndarray, places: np.ndarray) -> np.ndarray:
        """Return local places (D, n), infinite in cells without a volume."""
        away = places - self.centres[:, cells]
        local = self.middle[:, None] + np.einsum("mdk,dm->km", self.inward[cells], away)
        local[:, self.flat[cells]] = np.inf
        return np.asarray(local)


class _Inquiry:
    """The trees of a mesh, and what is asked of them."""

    def __init__(self, nodes: np.ndarray, cell_nodes: np.ndarray, kind: Element, reach: float):
        self.nodes, self.cell_nodes, self.kind, self.reach = nodes, cell_nodes, kind, reach
        self.affine = _Affine(nodes, cell_nodes, kind)
        self.centres, self.radii = self.affine.centres, self.affine.radii
        self.tree = _tree(self.centres)
        size = np.floor(np.log2(np.maximum(self.radii, np.finfo(float).tiny)))
        groups = [np.flatnonzero(size == one) for one in np.unique(size)]
        self.sizes = [(members, _tree(self.centres[:, members])) for members in groups]

    def find(self, places: np.ndarray) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
        """Return cells, local places and gaps of some places."""
        n, count = places.shape[1], min(NEAREST, self.cell_nodes.shape[1])
        found = np.full(n, -1), np.full(places.shape, np.nan), np.full(n, np.inf)
        near = self.tree.query(places.T, k=np.arange(1, count + 1))[1].T
        excess = np.array([self.kind.outside(self.affine.guess(cells, places)) for cells in near])
        ranks = np.argsort(excess, axis=0, kind="stable")
        near, excess = np.take_along_axis(near, ranks, 0), np.take_along_axis(excess, ranks, 0)
        left = np.arange(n)
        for first, last in TURNS:
            owners = np.broadcast_to(left, (len(near[first:last]), len(left)))
            hopeful = excess[first:last, left] <= NEAR
            self._try(places, owners[hopeful], near[first:last, left][hopeful], found)
            left = left[found[2][left] > 0.0]
        if len(left):
            self._try_all(places, left, found)
        return found

    def _try_all(self, places: np.ndarray, left: np.ndarray, found: Any) -> None:
        """Try all cells that may hold some places; for those clearly outside of them, all that are near."""
        owners, cells = self._reaching(places, left)
        hopeful = self.kind.outside(self.affine.guess(cells, places[:, owners])) <= NEAR
        self._try(places, owners[hopeful], cells[hopeful], found, min(SLIGHT, self.reach))
        rest = found[2][owners] > SLIGHT
        self._try(places, owners[rest], cells[rest], found, self.reach)

    def _reaching(self, places: np.ndarray, left: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        """Return the pairs of a place and a cell whose ball, widened, has the place."""
        owners, cells = [np.empty(0, dtype=np.intp)], [np.empty(0, dtype=np.intp)]
        for members, tree in self.sizes:
            most = (1.0 + self.reach) * self.radii[members].max()
            lists = tree.query_ball_point(places[:, left].T, most, return_sorted=True)
            counts = np.array([len(one) for one in lists], dtype=np.intp)
            if counts.sum():
                owners.append(np.repeat(left, counts))
                cells.append(members[np.concatenate([one for one in lists if one]).astype(np.intp)])
        who, which = np.concatenate(owners), np.concatenate(cells)
        distance = np.sqrt(((places[:, who] - self.centres[:, which]) ** 2).sum(axis=0))
        keep = distance <= (1.0 + self.reach) * self.radii[which]
        return who[keep], which[keep]

    def _try(
        self, places: np.ndarray, owners: np.ndarray, cells: np.ndarray, found: Any, reach: float = 0.0
    ) -> None:
        """Take for each owner the nearest of its cells up to `reach`, if nearer than what is found."""
        for start in range(0, len(cells), PAIRS):
            own, cell = owners[start : start + PAIRS], cells[start : start + PAIRS]
            local = self._local(cell, places[:, own])
            gap = self._gap(places[:, own], cell, local, reach)
            order = np.lexsort((gap, own))
            first = order[np.concatenate([[True], np.diff(own[order]) > 0])]
            better = first[(gap[first] < found[2][own[first]]) & (gap[first] <= reach)]
            found[0][own[better]] = cell[better]
            found[1][:, own[better]] = local[:, better]
            found[2][own[better]] = gap[better]

    def _local(self, cells: np.ndarray, places: np.ndarray) -> np.ndarray:
        """Return local places in cells, infinite where there are none."""
        local = self.affine.guess(cells, places)
        rows = np.flatnonzero(~self.affine.exact[cells] & np.isfinite(local[0]))
        if len(rows):
            local[:, rows] = local_places(
                self.nodes, self.cell_nodes, self.kind, cells[rows], places[:, rows], local[:, rows]
            )
        return local

    def _gap(self, places: np.ndarray, cells: np.ndarray, local: np.ndarray, reach: float) -> np.ndarray:
        """Return the distances of places from their cells over the cells' radii, 0 inside."""
        gap = np.where(np.isfinite(local[0]), self.kind.outside(local), np.inf)
        gap[gap <= INSIDE] = 0.0
        off = np.flatnonzero((gap > 0.0) & np.isfinite(gap))
        if reach == 0.0:
            gap[off] = np.inf
            return gap
        corners = self.nodes[:, self.cell_nodes[:, cells[off]]]
        nearest = np.einsum("dnm,nm->dm", corners, self.kind.shapes(_clamped(self.kind, local[:, off])))
        gap[off] = np.sqrt(((places[:, off] - nearest) ** 2).sum(axis=0)) / self.radii[cells[off]]
        return gap


def _tree(places: np.ndarray) -> Any:
    from scipy.spatial import KDTree

    return KDTree(places.T)
