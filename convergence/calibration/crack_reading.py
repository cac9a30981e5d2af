"""The stress intensity factor of a drawn solution, by the interaction integral around the tip of a crack.

Shih, Moran & Nakamura 1986, Int. J. Fract. 30:79, with two states as Yau, Wang & Corten 1980, J. Appl. Mech.
47:335. Its domain is half a ring around the tip, from half the radius to the radius, and it is integrated
along circles, so that a reference of high degree gives five digits and more. The crack lies on the symmetry
plane of a half that is drawn; its faces carry no load within the radius.
"""

import ngsolve as ng
import numpy as np

from convergence.calibration.drawn_solution import DrawnSolution
from convergence.fem.material import Material
from convergence.quantities._crack import interaction

CIRCLES = 12  # as many Gauss points across the ring
PARTS, POINTS = 24, 12  # pieces of half a circle, and Gauss points of each


def stress_intensity(
    solution: DrawnSolution,
    *,
    tip: tuple[float, float],
    ahead: tuple[float, float],
    side: float,
    radius: float,
) -> float:
    """Return the factor of mode I.

    `ahead` is a unit vector from the crack's faces through the tip; the part lies on its left (side 1) or
    right (-1).
    """
    elastic = solution.case.materials[""]
    material = Material(elastic.young, elastic.poisson)
    kappa = material.kappa("plane strain" if solution.case.kind == "plane_strain" else "plane stress")
    r, angle, area = _half_ring(radius)
    angle = side * angle
    turn = np.array([ahead, (-ahead[1], ahead[0])])
    outwards = np.array([np.cos(angle), np.sin(angle)])
    places = np.array(tip)[:, None] + turn.T @ (r * outwards)
    at = solution.mesh(*places)
    stress = np.array(solution.stress(at)).reshape(-1, 3, 3)[:, :2, :2].transpose(1, 2, 0)
    slopes = np.array(ng.Grad(solution.displacement)(at)).reshape(-1, 2, 2).transpose(1, 2, 0)
    stress, slopes = (np.einsum("ai,ijn,bj->abn", turn, tensor, turn) for tensor in (stress, slopes))
    shear = material.shear_modulus
    flow = interaction(stress, slopes, "I", r, angle, shear, kappa)
    total = ((flow * outwards).sum(axis=0) * _falling(r, radius) * area).sum()
    return float(8.0 * shear / (1.0 + kappa) * total)


def _falling(r: np.ndarray, radius: float) -> np.ndarray:
    """Return the slope of a weight that falls smoothly from 1 at half the radius to 0 at the radius."""
    s = 2.0 * r / radius - 1.0
    return np.asarray(-60.0 / radius * (s * (1.0 - s)) ** 2)


def _half_ring(radius: float) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return distances and angles of points of half a ring, and the area that each stands for."""
    across, share = np.polynomial.legendre.leggauss(CIRCLES)
    r = 0.25 * radius * (3.0 + across)
    along, part = np.polynomial.legendre.leggauss(POINTS)
    angle = (np.pi / PARTS * (np.arange(PARTS)[:, None] + 0.5 + 0.5 * along)).ravel()
    area = np.outer(0.25 * radius * share * r, np.tile(0.5 * np.pi / PARTS * part, PARTS))
    r, angle = (grid.ravel() for grid in np.meshgrid(r, angle, indexing="ij"))
    return r, angle, area.ravel()
