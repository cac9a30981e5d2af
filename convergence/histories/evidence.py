"""The evidence of a ladder for every candidate limit under every error law.

With errors e_i = f_i - L and a law g_i of scatter τ, u_i = e_i / g_i are draws from a normal distribution of
mean c and deviation τ |c|. The size c is not known and has the scale-free prior 1 / |c|; with x = 1 / c

    p(f | L, law) = Π 1/g_i (2π)^(-n/2) τ^(-n) ∫ |x|^(n-1) exp(-(A x² - 2 B x + n) / (2 τ²)) dx,

A = Σ u_i², B = Σ u_i: an absolute moment of a normal distribution, known in closed form. Neither a shift nor
a scale of the values changes the result, and sizes count by their ratios alone.
"""

import numpy as np
from scipy.special import erf

from convergence.histories.laws import SCATTERS, courses

TINY = 1e-300


def evidence(h: np.ndarray, f: np.ndarray, limits: np.ndarray) -> np.ndarray:
    """Return the logarithm (limits, courses, scatters), up to a constant of the ladder."""
    n, g = len(f), courses(h)
    errors = f[None, :] - limits[:, None]
    squares = np.maximum(errors**2 @ (g**-2.0).T, TINY)
    cosine = (errors @ (1.0 / g).T) / np.sqrt(squares)
    misfit = np.maximum(n - cosine**2, 0.0)
    moment = np.log(_absolute_moment(np.abs(cosine)[:, :, None] / SCATTERS, n - 1))
    size = 0.5 * n * np.log(squares) + np.log(g).sum(axis=1)
    return np.asarray(moment - 0.5 * misfit[:, :, None] / SCATTERS**2 - size[:, :, None])


def _absolute_moment(z: np.ndarray, order: int) -> np.ndarray:
    """Return E|Z + z|^order of a standard normal Z by the recurrence of every second moment.

    The moments with a sign, E sgn(Z + z) |Z + z|^k, run beside it.
    """
    if order % 2 == 0:
        absolute, signed, start = np.ones_like(z), z, 2
    else:
        step = erf(z / np.sqrt(2.0))
        absolute = z * step + 2.0 * (np.exp(-0.5 * z**2) / np.sqrt(2.0 * np.pi))
        signed, start = z * absolute + step, 3
    for k in range(start, order + 1, 2):
        absolute = z * signed + (k - 1) * absolute
        signed = z * absolute + k * signed
    return np.asarray(absolute)
