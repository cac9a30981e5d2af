"""What is seen of a solid from afar: the nearest triangle in every pixel of a page.

A z-buffer (Catmull 1974, A subdivision algorithm for computer display of curved surfaces, University of
Utah): right to a pixel for any shape, holes and steps included, where sorting whole faces by depth is not.
Coordinates are those of the page: across, up, towards the eye.
"""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np

BATCH = 1 << 19  # candidate pixels looked at in one go
EDGE_ON = 1e-9  # triangles of fewer square pixels are seen from the edge


@dataclass(frozen=True)
class Sight:
    """A surface as seen: points (3, n), its triangles that face the eye (t, 3), and the pixels.

    `faces` (t,) is the face that each triangle is a part of; `nearest` (rows, columns) the triangle seen in
    each pixel, -1 for none, lowest row first; `depth` how near it is, -inf for none; `corner` the place of
    the first pixel's centre and `step` the size of a pixel.
    """

    points: np.ndarray
    triangles: np.ndarray
    faces: np.ndarray
    nearest: np.ndarray
    depth: np.ndarray
    corner: np.ndarray
    step: float

    @property
    def extent(self) -> tuple[float, float, float, float]:
        """Return left, right, bottom and top of the pixels."""
        rows, columns = self.nearest.shape
        left, bottom = self.corner - 0.5 * self.step
        return (
            float(left),
            float(left + columns * self.step),
            float(bottom),
            float(bottom + rows * self.step),
        )

    def nodal(self, values: np.ndarray) -> np.ndarray:
        """Return values at the nodes (n,) in the pixels, linear in each triangle, NaN where nothing is."""
        row, column = np.nonzero(self.nearest >= 0)
        seen = self.nearest[row, column]
        first, second = _weights(_in_pixels(self), seen, column, row)
        a, b, c = values[self.triangles[seen]].T
        return self._spread(a + first * (b - a) + second * (c - a))

    def facial(self, values: np.ndarray) -> np.ndarray:
        """Return values of the faces (m,) in the pixels, NaN where nothing is."""
        return self._spread(values[self.faces[self.nearest[self.nearest >= 0]]])

    def _spread(self, values: np.ndarray) -> np.ndarray:
        image = np.full(self.nearest.shape, np.nan)
        image[self.nearest >= 0] = values
        return image

    def visible(self, places: np.ndarray, slack: float = 0.0) -> np.ndarray:
        """Return whether nothing stands before each place (3, k); what is `slack` behind counts as seen.

        A place is hidden only where the pixels all around are nearer, for a steep face is deep in a pixel.
        """
        rows, columns = self.depth.shape
        column, row = np.rint((places[:2] - self.corner[:, None]) / self.step).astype(int)
        behind = np.full(places.shape[1], np.inf)
        for up in (-1, 0, 1):
            for across in (-1, 0, 1):
                i, j = row + up, column + across
                inside = (i >= 0) & (i < rows) & (j >= 0) & (j < columns)
                found = self.depth[np.clip(i, 0, rows - 1), np.clip(j, 0, columns - 1)]
                behind = np.minimum(behind, np.where(inside, found, -np.inf))
        return np.asarray(places[2] >= behind - self.step - slack)

    def strokes(self, starts: np.ndarray, ends: np.ndarray) -> np.ndarray:
        """Return the visible pieces (p, 2, 2) of segments (3, s): piece, its two ends, across and up."""
        if not starts.size:
            return np.zeros((0, 2, 2))
        longest = float(np.hypot(*(ends - starts)[:2]).max())
        parts = int(np.clip(np.ceil(longest / (4 * self.step)), 1, 64))
        knots = np.linspace(0.0, 1.0, parts + 1)[:, None]
        places = starts[:, None] + knots * (ends - starts)[:, None]
        middles = 0.5 * (places[:, 1:] + places[:, :-1])
        seen = self.visible(middles.reshape(3, -1)).reshape(parts, -1)
        whole = seen.all(axis=0)
        pieces = np.array([places[:2, :-1], places[:2, 1:]])[:, :, seen & ~whole]
        lines = np.array([starts[:2, whole], ends[:2, whole]])
        return np.concatenate((lines, pieces), axis=2).transpose(2, 0, 1)

    def turning(self) -> np.ndarray:
        """Return the segments (2, s) where the surface turns away from the eye."""
        count = self.points.shape[1]
        sides = np.sort(np.hstack([self.triangles[:, [k, (k + 1) % 3]].T for k in range(3)]), axis=0)
        keys, times = np.unique(sides[0] * count + sides[1], return_counts=True)
        return np.array(np.divmod(keys[times == 1], count))


def sight(points: np.ndarray, triangles: np.ndarray, faces: np.ndarray, step: float) -> Sight:
    """Look at triangles (t, 3), counter-clockwise from outside, of points (3, n) turned to the page."""
    used = points[:2, triangles.ravel()]
    corner = used.min(axis=1)
    columns, rows = (np.ceil((used.max(axis=1) - corner) / step).astype(int) + 1).tolist()
    ahead = _area(points[:2, triangles]) > EDGE_ON * step**2
    nearest, depth = np.full((rows, columns), -1), np.full((rows, columns), -np.inf)
    seen = Sight(points, triangles[ahead], faces[ahead], nearest, depth, corner, step)
    _fill(seen)
    return seen


def _area(corners: np.ndarray) -> np.ndarray:
    """Return twice the area of triangles (2, t, 3), negative for those that face away."""
    a, b = corners[..., 1] - corners[..., 0], corners[..., 2] - corners[..., 0]
    return np.asarray(a[0] * b[1] - a[1] * b[0])


def _in_pixels(seen: Sight) -> np.ndarray:
    """Return the corners (2, t, 3) of the triangles, counted in pixels."""
    return np.asarray((seen.points[:2, seen.triangles] - seen.corner[:, None, None]) / seen.step)


def _weights(
    corners: np.ndarray, which: np.ndarray, x: np.ndarray, y: np.ndarray
) -> tuple[np.ndarray, np.ndarray]:
    """Return the barycentric weights of the second and third corner at pixels x, y of triangles `which`."""
    a, b = corners[..., 1] - corners[..., 0], corners[..., 2] - corners[..., 0]
    area = _area(corners)
    across, up = x - corners[0, which, 0], y - corners[1, which, 0]
    first = across * (b[1] / area)[which] - up * (b[0] / area)[which]
    second = up * (a[0] / area)[which] - across * (a[1] / area)[which]
    return np.asarray(first), np.asarray(second)


def _fill(seen: Sight) -> None:
    """Let every triangle claim the pixels in which it is the nearest one."""
    corners = _in_pixels(seen)
    low = np.ceil(corners.min(axis=2)).astype(int)
    span = np.maximum(np.floor(corners.max(axis=2)).astype(int) - low + 1, 0)
    count = span[0] * span[1]
    first_of = np.concatenate(([0], np.cumsum(count)))
    batches = (first_of[1:] // BATCH).searchsorted(np.arange(first_of[-1] // BATCH + 2))
    towards = seen.points[2, seen.triangles].T
    for start, end in pairwise(batches):
        which = np.repeat(np.arange(start, end), count[start:end])
        place = np.arange(first_of[start], first_of[end]) - first_of[which]
        up, across = np.divmod(place, span[0, which])
        x, y = low[0, which] + across, low[1, which] + up
        first, second = _weights(corners, which, x, y)
        inside = (first >= -1e-9) & (second >= -1e-9) & (first + second <= 1 + 1e-9)
        which, x, y, first, second = (array[inside] for array in (which, x, y, first, second))
        a, b, c = towards[:, which]
        depth = a + first * (b - a) + second * (c - a)
        order = np.argsort(depth)  # of several writes to a pixel the last one stays
        order = order[depth[order] > seen.depth[y[order], x[order]]]
        seen.depth[y[order], x[order]] = depth[order]
        seen.nearest[y[order], x[order]] = which[order]
