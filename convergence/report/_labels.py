"""Where labels stand beside their places, so that none covers another label or place."""

import numpy as np

TURNS = np.radians((0.0, 45.0, -45.0, 90.0, -90.0, 135.0, -135.0, 180.0))
DISTANCES = (8.0, 18.0, 30.0, 44.0)  # from the place to the label's edge, in points
CLEAR = 1.5  # between labels, in points
CHARACTER, LINE = 0.62, 1.35  # width and height of a character over the size of the type


def size_of_text(text: str, type_size: float) -> tuple[float, float]:
    """Return about how wide and high a text is, in points."""
    lines = text.split("\n")
    return CHARACTER * type_size * max(map(len, lines)), LINE * type_size * len(lines)


def offsets(places: np.ndarray, sizes: np.ndarray, towards: np.ndarray) -> np.ndarray:
    """Return from places (2, k) to the middles of labels of `sizes` (2, k), all in points.

    Each label stands in the direction `towards` (2, k) if there is room, near it or farther off if not.
    """
    found = np.zeros_like(places)
    for number, (place, size) in enumerate(zip(places.T, sizes.T, strict=True)):
        tried = _candidates(towards[:, number], size)
        others = np.hstack((np.delete(places, number, axis=1), (places + found)[:, :number]))
        room = np.hstack((np.zeros((2, places.shape[1] - 1)), sizes[:, :number]))
        free = (offset for offset in tried if not _covers(place + offset, size, others, room))
        found[:, number] = next(free, tried[0])
    return found


def _candidates(towards: np.ndarray, size: np.ndarray) -> list[np.ndarray]:
    """Return offsets to try, the best first."""
    start = np.arctan2(towards[1], towards[0])
    ways = [np.array((np.cos(start + turn), np.sin(start + turn))) for turn in TURNS]
    return [distance * way + 0.5 * size * way for distance in DISTANCES for way in ways]


def _covers(middle: np.ndarray, size: np.ndarray, others: np.ndarray, sizes: np.ndarray) -> bool:
    """Return whether a box covers one of other boxes; a place is a box without a size."""
    apart = np.abs(others - middle[:, None]) - 0.5 * (size[:, None] + sizes)
    return bool((apart < CLEAR).all(axis=0).any())


def pairs(places: np.ndarray) -> list[tuple[float, float]]:
    """Return places (2, k) one by one."""
    return [(float(x), float(y)) for x, y in places.T]
