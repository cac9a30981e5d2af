"""The exact 95 % interval of a share that was counted (Clopper & Pearson 1934, Biometrika 26:404)."""

TAIL = 0.025


def binomial_interval(held: int, cases: int) -> tuple[float, float]:
    """Return the lowest and highest share that `held` of `cases` does not speak against."""
    from scipy.special import betaincinv

    low = float(betaincinv(held, cases - held + 1, TAIL)) if held else 0.0
    high = float(betaincinv(held + 1, cases - held, 1.0 - TAIL)) if held < cases else 1.0
    return low, high
