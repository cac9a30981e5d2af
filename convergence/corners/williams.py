"""Corner singularities: the exponents of the stress at a corner with free, clamped or roller sides.

Williams, M.L. (1952), J. Appl. Mech. 19:526-528, for an isotropic wedge of one material: displacement
~ r^lambda, stress ~ r^(lambda-1). With kappa = 3 - 4 nu (plane strain) or (3 - nu)/(1 + nu) (plane
stress), opening w and sinc x = sin x / x, the determinant of the four functions r^lambda factors into

    free-free        sinc(lambda w) = -sinc w (I, symmetric)    sinc(lambda w) = sinc w (II, skew)
    clamped-clamped  sinc(lambda w) = sinc(w)/kappa (symmetric) sinc(lambda w) = -sinc(w)/kappa (skew)
    free-roller      sinc(2 lambda w) = -sinc 2w           symmetric modes of the mirrored wedge 2w
    clamped-roller   sinc(2 lambda w) = sinc(2w)/kappa     the same, of the clamped wedge 2w
    roller-roller    lambda = |1 - k pi/w|, k = 1, 2, ...
    clamped-free     kappa^2 + 1 + 2 kappa cos(2 lambda w) = (2 lambda sin w)^2

Only the last has complex roots with 0 < Re lambda < 1. In the others, at x + iy = lambda w, a complex
root of sinc = s needs |cos x| < |s|, |sinc x| < |s| and sin x, cos x of the sign of s, while x < w
and |s| <= |sinc w|: no lobe of sinc allows this.
"""

import math
from itertools import pairwise

import numpy as np

from convergence.errors import require

SIDES = ("free", "clamped", "roller")
SINC_EXTREMA = (4.493409457909064, 7.725251836937707, 10.904121659428900)  # tan x = x, below 4 pi
NEGLIGIBLE = 1e-9  # exponents this close to 0 or 1 count as rigid motion or constant stress
MEETING = 1e-7  # roots closer than this are one: a double root is only known to sqrt(rounding)


def corner_exponents(opening_degrees: float, sides: tuple[str, str], *, kappa: float) -> list[complex]:
    """Return all exponents with 0 < Re lambda < 1, by real part; none means a regular corner.

    `opening_degrees` is the interior angle, 0 < opening <= 360. A side is "free", "clamped" (both
    displacements held) or "roller" (normal displacement held, no shear). Each value is given once,
    however many modes share it, and a complex pair once, with Im > 0. Rigid motions and lambda = 1
    are left out, so a right clamped-free corner is regular at nu = 0, where its exponent reaches 1.
    Good to 1e-10; to 1e-7 where two clamped-free roots meet and turn complex.

    A load need not excite every mode. Do not ask for the corners of a faceted smooth arc: its rollers
    near 180 degrees have exponents near 0. Raises `Unsuitable`.
    """
    require(
        (0 < opening_degrees <= 360, "opening_degrees", opening_degrees, "0 < opening <= 360"),
        (len(sides) == 2 and set(sides) <= set(SIDES), "sides", sides, f"two of {', '.join(SIDES)}"),
        (1 <= kappa <= 1000, "kappa", kappa, "1 <= kappa <= 1000; 1 at nu = 0.5, plane strain"),
    )
    opening = math.radians(opening_degrees)
    found: list[complex] = []
    for root in sorted(_roots(opening, tuple(sorted(sides)), kappa), key=lambda z: (z.real, z.imag)):
        inside = NEGLIGIBLE < root.real < 1 - NEGLIGIBLE
        if inside and all(abs(root - other) > MEETING for other in found):
            found.append(root)
    return found


def weakest_exponent(opening_degrees: float, sides: tuple[str, str], *, kappa: float) -> float | None:
    """Return the smallest real part of `corner_exponents`, None where the corner is regular."""
    exponents = corner_exponents(opening_degrees, sides, kappa=kappa)
    return exponents[0].real if exponents else None


def _roots(opening: float, sides: tuple[str, ...], kappa: float) -> list[complex]:
    """Return the roots of the characteristic equation of the sides, in alphabetical order."""
    mirrored = 2 * opening
    match sides:
        case ("free", "free"):
            return _sinc_roots(opening, -_sinc(opening)) + _sinc_roots(opening, _sinc(opening))
        case ("clamped", "clamped"):
            level = _sinc(opening) / kappa
            return _sinc_roots(opening, level) + _sinc_roots(opening, -level)
        case ("free", "roller"):
            return _sinc_roots(mirrored, -_sinc(mirrored))
        case ("clamped", "roller"):
            return _sinc_roots(mirrored, _sinc(mirrored) / kappa)
        case ("roller", "roller"):
            return [complex(abs(1 - k * math.pi / opening)) for k in range(1, 1 + int(mirrored / math.pi))]
        case _:
            return _clamped_free_roots(opening, kappa)


def _sinc(x: float) -> float:
    return math.sin(x) / x if x else 1.0


def _sinc_roots(opening: float, level: float) -> list[complex]:
    """Return all lambda in (0, 1) with sinc(lambda w) = level, by bisection between the extrema."""
    knots = [0.0, *(x for x in SINC_EXTREMA if x < opening), opening]
    roots = []
    for low, high in pairwise(knots):
        start, end = _sinc(low) - level, _sinc(high) - level
        if start * end >= 0:  # a root at `opening` itself is lambda = 1
            continue
        for _ in range(60):
            middle = (low + high) / 2
            if (_sinc(middle) - level) * start > 0:
                low = middle
            else:
                high = middle
        roots.append(complex((low + high) / 2 / opening))
    return roots


def _clamped_free_roots(opening: float, kappa: float) -> list[complex]:
    """Return the clamped-free roots near the strip 0 < Re lambda < 1, with Im >= 0.

    With z = lambda w the equation is entire in z^2: all roots of its Taylor polynomial, good to 1e-6
    for |z| < 10 (the strip has none beyond: there 2 kappa |cos 2z| outgrows the rest), then Newton.
    """
    slope = 4 * _sinc(opening) ** 2
    taylor = [2 * kappa * (-4.0) ** k / math.factorial(2 * k) for k in range(40)]
    taylor[0] += kappa**2 + 1
    taylor[1] -= slope
    z = np.sqrt(np.roots(taylor[::-1]).astype(complex))
    z = z[(abs(z) < 10) & (z.real < 1.1 * opening) & (z.imag >= 0)]
    for _ in range(30):
        value = kappa**2 + 1 + 2 * kappa * np.cos(2 * z) - slope * z**2
        gradient = -4 * kappa * np.sin(2 * z) - 2 * slope * z
        z = z - np.divide(value, gradient, out=np.zeros_like(z), where=gradient != 0)
    exponents = z.real / opening + 1j * abs(z.imag) / opening
    return [complex(e.real, e.imag if e.imag > MEETING else 0.0) for e in exponents]
