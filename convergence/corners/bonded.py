"""Corner singularities of bonded materials: exponents of any number of isotropic wedges around a corner.

With displacement r^lambda u, stress r^(lambda-1) lambda s and Hooke's law, equilibrium in polar coordinates
(Timoshenko & Goodier, Theory of Elasticity, section 27) is a linear system in the angle for the state
(u_r, u_t, s_rt, s_tt), which crosses a bonded interface unchanged. It is linear in lambda:

    u_r' = (1 - lambda) u_t + lambda s_rt / mu             nu* = (3 - kappa)/(1 + kappa)
    u_t' = -(1 + nu* lambda) u_r + lambda (kappa - 1)/(kappa + 1) s_tt / mu
    s_rt' = -lambda 8 mu/(kappa + 1) u_r + (1 - nu* lambda) s_tt
    s_tt' = -(1 + lambda) s_rt

and along the edge of a solid (antiplane) u_z' = lambda s_zt / mu, s_zt' = -lambda mu u_z. Collocation at
Gauss points with one polynomial per wedge (rectangular collocation: Driscoll & Hale 2016, IMA J. Numer.
Anal. 36:108) makes it a matrix eigenvalue problem; its eigenvalues are all exponents at once.
"""

import math
from collections.abc import Sequence
from typing import Literal

import numpy as np

from convergence.corners.williams import SIDES
from convergence.errors import require

Sector = tuple[float, float, float]  # opening in degrees, shear modulus, kappa
Mode = Literal["in plane", "antiplane"]
HELD: dict[Mode, dict[str, tuple[int, ...]]] = {  # entries of the state that are zero on a side
    "in plane": {"free": (2, 3), "clamped": (0, 1), "roller": (1, 2)},
    "antiplane": {"free": (1,), "clamped": (0,), "roller": (1,)},
}
NEGLIGIBLE = 1e-5  # exponents this close to 0 or 1 count as rigid motion or constant stress
MEETING = 1e-6  # roots closer than this are one: a double root is only known to sqrt(rounding)
POINTS, POINTS_PER_RADIAN = 5, 2
HIGHEST = 2.0
SHIFT = 1.3183  # no exponent of a usual corner, and a real one is quick


def wedge_exponents(
    sectors: Sequence[Sector], sides: tuple[str, str] | None, *, mode: Mode = "in plane"
) -> list[complex]:
    """Return all exponents with 0 < Re lambda < 1 and 0 <= Im lambda < 2, by real part.

    `sectors` in angular order, each (opening in degrees, shear modulus, kappa); `sides` are the conditions
    on the first and the last face: "free", "clamped" (all displacements held) or "roller" (normal
    displacement held, no shear); None closes the ring of 360 degrees. Each value is given once, however
    many modes share it, and a complex pair once. Values within 1e-5 of 0 (translation, and forces at
    the corner) and of 1 (rotation, constant stress) are left out.

    Good to 1e-10 where the moduli differ by a factor of up to 1000; to 1e-7 where two roots meet. Raises
    `Unsuitable`.
    """
    openings, mus, kappas = ([sector[k] for sector in sectors] for k in range(3))
    total = sum(openings)
    require(
        (min(openings, default=0) > 0 and total < 360 + 1e-6, "openings", openings, "0 < each, sum <= 360"),
        (min(mus, default=1) > 0, "mu", mus, "mu > 0"),
        (all(1 <= kappa <= 1000 for kappa in kappas), "kappa", kappas, "1 <= kappa <= 1000"),
        (sides is None or set(sides) <= set(SIDES), "sides", sides, f"two of {', '.join(SIDES)}"),
        (sides is not None or total > 360 - 1e-6, "openings", openings, "a ring of 360 degrees"),
    )
    constant, linear = _pencil(sectors, sides, mode)
    turned = np.linalg.eigvals(np.linalg.solve(constant - SHIFT * linear, linear))
    roots = SHIFT + 1.0 / turned[abs(turned) > 1e-6].astype(complex)
    roots = roots[(roots.imag > -MEETING) & (roots.imag < HIGHEST)]
    roots = roots[(roots.real > NEGLIGIBLE) & (roots.real < 1 - NEGLIGIBLE)]
    return _distinct(roots)


def _pencil(
    sectors: Sequence[Sector], sides: tuple[str, str] | None, mode: Mode
) -> tuple[np.ndarray, np.ndarray]:
    """Return A and B of (A - lambda B) states = 0, for the states at the nodes of all sectors in a row."""
    counts = [POINTS + math.ceil(POINTS_PER_RADIAN * math.radians(s[0])) for s in sectors]
    total, unit = sum(counts), math.exp(sum(math.log(s[1]) for s in sectors) / len(sectors))
    states = 4 if mode == "in plane" else 2
    pencil = np.zeros((2, total, states, total + 1, states))
    first = 0
    for (opening, mu, kappa), count in zip(sectors, counts, strict=True):
        value, slope = _collocation(count, math.radians(opening))
        block = (slice(first, first + count), slice(None), slice(first, first + count + 1))
        constant, linear = _in_plane(mu / unit, kappa) if mode == "in plane" else _antiplane(mu / unit)
        pencil[0][block] = np.einsum("ij,ab->iajb", slope, np.eye(states))
        pencil[0][block] -= np.einsum("ij,ab->iajb", value, constant)
        pencil[1][block] = np.einsum("ij,ab->iajb", value, linear)
        first += count
    last = states * total
    if sides is None:
        pencil[:, :, :, 0] += pencil[:, :, :, total]
        held = list(range(last, last + states))
    else:
        start, end = (HELD[mode][side] for side in sides)
        held = [*start, *(last + entry for entry in end)]
    matrices = np.delete(pencil.reshape(2, last, last + states), held, axis=2)
    return matrices[0], matrices[1]


def _in_plane(mu: float, kappa: float) -> tuple[np.ndarray, np.ndarray]:
    """Return M0 and M1 of state' = (M0 + lambda M1) state, the equations above."""
    lateral = (3 - kappa) / (kappa + 1)
    constant = np.array([[0, 1, 0, 0], [-1, 0, 0, 0], [0, 0, 0, 1], [0, 0, -1, 0]], dtype=float)
    linear = np.array(
        [
            [0, -1, 1 / mu, 0],
            [-lateral, 0, 0, (kappa - 1) / (kappa + 1) / mu],
            [-8 * mu / (kappa + 1), 0, 0, -lateral],
            [0, 0, -1, 0],
        ]
    )
    return constant, linear


def _antiplane(mu: float) -> tuple[np.ndarray, np.ndarray]:
    return np.zeros((2, 2)), np.array([[0, 1 / mu], [-mu, 0]])


def _collocation(count: int, opening: float) -> tuple[np.ndarray, np.ndarray]:
    """Return values and slopes (count, count + 1) at Gauss points of what is known at Chebyshev nodes."""
    chebyshev = np.polynomial.chebyshev
    nodes = -np.cos(np.pi * np.arange(count + 1) / count)
    gauss = np.polynomial.legendre.leggauss(count)[0]
    coefficients = np.linalg.inv(chebyshev.chebvander(nodes, count))
    slopes = chebyshev.chebvander(gauss, count - 1) @ chebyshev.chebder(np.eye(count + 1))
    return chebyshev.chebvander(gauss, count) @ coefficients, slopes @ coefficients * (2 / opening)


def _distinct(roots: np.ndarray) -> list[complex]:
    """Return the roots by real part; roots that meet by their mean, which is good where each is not."""
    groups: list[list[complex]] = []
    for root in sorted(roots.tolist(), key=lambda z: (z.real, z.imag)):
        near = next((group for group in groups if abs(group[0] - root) < MEETING), None)
        if near is None:
            groups.append([root])
        else:
            near.append(root)
    means = [sum(group) / len(group) for group in groups]
    return [complex(mean.real, mean.imag if mean.imag > MEETING else 0.0) for mean in means]
