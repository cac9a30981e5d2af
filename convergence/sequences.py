"""Facts about a sequence of values over sizes: its observed order, its behaviour, its noise.

Arrays run from coarse to fine. Only the three finest levels count for order and behaviour.
"""

import math

import numpy as np

ROUND_OFF = 1e-10
BISECTIONS = 200
LARGEST_ORDER, KNOWN_ORDERS = 30.0, 12_000  # of many ladders at once; an even number leaves out 0


def noise_floor(f: np.ndarray, resolution: float = 0.0) -> float:
    """Return the difference of two values up to which it is no evidence of anything.

    `resolution` is half a unit of the last printed digit, so two printed values differ by up to twice
    as much for nothing; 1e-10 of the largest value stands for round-off and solver tolerance.
    """
    return 2.0 * resolution + ROUND_OFF * float(np.max(np.abs(f), initial=0.0))


def unusable(h: np.ndarray, f: np.ndarray, levels: int) -> str:
    """Return in one sentence why the finest `levels` levels tell nothing, "" where they do."""
    if len(f) < levels:
        return f"needs {levels} levels, the ladder has {len(f)}"
    sizes, values = h[-levels:], f[-levels:]
    if not np.all(np.isfinite(values)):
        return f"a value of the {levels} finest levels is missing or not finite"
    if not (np.all(np.isfinite(sizes)) and np.all(sizes > 0.0) and np.all(sizes[1:] < sizes[:-1])):
        return "the sizes must be positive and fall from level to level"
    return ""


def observed_order(h: np.ndarray, f: np.ndarray) -> float:
    """Return p of f = f0 + c h^p through the three finest levels, at any two ratios of size.

    Celik et al. 2008 (J. Fluids Eng. 130, 078001), step 3, without its absolute value: the order is
    negative where the differences grow, and positive it is theirs, oscillating values (s = -1)
    included. Their fixed point need not contract; the equation

        ln|e32/e21| = ln(r21^p (r32^p - s) / (r21^p - s)),  s = sign(e32/e21)

    rises from its value at p = 0 at a mean slope between the smaller and the larger of ln r21 and ln r32,
    so it has exactly one root, in a known interval. NaN: fewer than three usable levels, or two
    neighbours are equal.
    """
    if unusable(h, f, 3):
        return math.nan
    h3, h2, h1 = (float(size) for size in h[-3:])
    f3, f2, f1 = (float(value) for value in f[-3:])
    log21, log32 = math.log(h2 / h1), math.log(h3 / h2)
    e21, e32 = f2 - f1, f3 - f2
    if e21 == 0.0 or e32 == 0.0 or log21 == 0.0 or log32 == 0.0:
        return math.nan
    same_sign = (e21 > 0.0) == (e32 > 0.0)
    target = math.log(abs(e32)) - math.log(abs(e21))
    start = target - _log_ratio(0.0, log21, log32, same_sign)
    low, high = sorted((start / log21, start / log32))
    for _ in range(BISECTIONS):
        middle = 0.5 * (low + high)
        if middle in (low, high):
            break
        if _log_ratio(middle, log21, log32, same_sign) < target:
            low = middle
        else:
            high = middle
    return 0.5 * (low + high)


def observed_orders(h: np.ndarray, f: np.ndarray) -> np.ndarray:
    """Return the observed orders (n,) of ladders f (levels, n) over the same sizes, as `observed_order`.

    They are interpolated between known ones, to 1e-5, and cut at ±`LARGEST_ORDER`.
    """
    h3, h2, h1 = (float(size) for size in h[-3:])
    e32, e21 = f[-2] - f[-3], f[-1] - f[-2]
    known = np.linspace(-LARGEST_ORDER, LARGEST_ORDER, KNOWN_ORDERS)
    usable = np.isfinite(e32) & np.isfinite(e21) & (e32 != 0.0) & (e21 != 0.0)
    orders = np.full(usable.shape, math.nan)
    for same_sign in (True, False):
        own = usable & ((e32 > 0.0) == (e21 > 0.0) if same_sign else (e32 > 0.0) != (e21 > 0.0))
        told = [_log_ratio(p, math.log(h2 / h1), math.log(h3 / h2), same_sign) for p in known]
        orders[own] = np.interp(np.log(np.abs(e32[own])) - np.log(np.abs(e21[own])), told, known)
    return orders


def behaviour(h: np.ndarray, f: np.ndarray, noise: float = 0.0) -> str:
    """Return what the three finest levels do, in the words of ITTC 7.5-03-01-01.

    One of "constant", "monotone convergence", "oscillatory convergence", "monotone divergence",
    "oscillatory divergence", "too few levels" (also where a value is missing or sizes do not fall).
    Differences up to `noise` count as zero. At unequal ratios the sign of the observed order decides,
    not the plain ratio of the differences: the last one may be larger only because its step is.
    """
    if unusable(h, f, 3):
        return "too few levels"
    f3, f2, f1 = (float(value) for value in f[-3:])
    e21, e32 = f2 - f1, f3 - f2
    if abs(e21) <= noise and abs(e32) <= noise:
        return "constant"
    if abs(e21) <= noise:
        return "monotone convergence"
    if abs(e32) <= noise:
        return "monotone divergence"
    manner = "monotone" if (e21 > 0.0) == (e32 > 0.0) else "oscillatory"
    return f"{manner} {'convergence' if observed_order(h, f) > 0.0 else 'divergence'}"


def _log_ratio(p: float, log21: float, log32: float, same_sign: bool) -> float:
    """Return ln(r21^p (r32^p - s) / (r21^p - s))."""
    if not same_sign:
        return p * log21 + _log_plus_one(p * log32) - _log_plus_one(p * log21)
    if p == 0.0:
        return math.log(log32 / log21)
    return p * log21 + _log_minus_one(p * log32) - _log_minus_one(p * log21)


def _log_plus_one(x: float) -> float:
    """Return ln(e^x + 1) without overflow."""
    return max(x, 0.0) + math.log1p(math.exp(-abs(x)))


def _log_minus_one(x: float) -> float:
    """Return ln|e^x - 1| without overflow, for x other than 0."""
    return max(x, 0.0) + math.log(-math.expm1(-abs(x)))
