"""Planes, circles, cylinders and spheres: how far places are from them, and how they come to lie on them."""

from dataclasses import dataclass

import numpy as np

TINY = 1e-200  # of a length: no direction


@dataclass(frozen=True)
class Plane:
    """A plane, in two dimensions a straight line, through a place; `normal` has length one."""

    at: tuple[float, ...]
    normal: tuple[float, ...]

    def distance(self, places: np.ndarray) -> np.ndarray:
        """Return how far places (D, ...) are from it."""
        return np.asarray(np.abs(np.tensordot(np.array(self.normal), _from(self.at, places), 1)))

    def square(self, places: np.ndarray) -> np.ndarray:
        """Return the unit vectors (D, ...) across it at places."""
        normal = np.array(self.normal).reshape(-1, *[1] * (places.ndim - 1))
        return np.broadcast_to(normal, places.shape)

    def onto(self, places: np.ndarray) -> np.ndarray:
        """Return the places (D, ...) moved square to it until they lie on it."""
        normal = np.array(self.normal)
        return np.asarray(places - np.multiply.outer(normal, np.tensordot(normal, _from(self.at, places), 1)))


@dataclass(frozen=True)
class Round:
    """All places at `radius` from a centre, or from the line through it along `axis` (of length one)."""

    centre: tuple[float, ...]
    radius: float
    axis: tuple[float, ...] | None = None

    def distance(self, places: np.ndarray) -> np.ndarray:
        """Return how far places (D, ...) are from it."""
        return np.asarray(np.abs(np.linalg.norm(self._arms(places), axis=0) - self.radius))

    def square(self, places: np.ndarray) -> np.ndarray:
        """Return the unit vectors (D, ...) across it at places, zero in its middle."""
        arms = self._arms(places)
        return np.asarray(arms / np.maximum(np.linalg.norm(arms, axis=0), TINY))

    def onto(self, places: np.ndarray) -> np.ndarray:
        """Return the places (D, ...) moved square to it until they lie on it; its middle stays."""
        arms = self._arms(places)
        size = np.maximum(np.linalg.norm(arms, axis=0), TINY)
        return np.asarray(places + arms * (self.radius / size - 1.0))

    def _arms(self, places: np.ndarray) -> np.ndarray:
        """Return the vectors from the centre or the axis to places."""
        arms = _from(self.centre, places)
        if self.axis is None:
            return arms
        return np.asarray(arms - np.multiply.outer(self.axis, np.tensordot(np.array(self.axis), arms, 1)))


def _from(at: tuple[float, ...], places: np.ndarray) -> np.ndarray:
    return np.asarray(places - np.array(at).reshape(-1, *[1] * (places.ndim - 1)))
