"""Reading a check's records from a ladder."""

import math

import numpy as np

from convergence.results import Check, Ladder


def recorded(ladder: Ladder, check: str, *names: str) -> dict[str, np.ndarray] | None:
    """Return the columns CHECK.NAME of every level, or None where one is missing at the finest level."""
    columns = {name: ladder.column(f"{check}.{name}") for name in names}
    complete = bool(ladder.levels) and all(np.isfinite(column[-1]) for column in columns.values())
    return columns if complete else None


def not_applicable(check: str, why: str) -> Check:
    """Return a check that neither passed nor failed."""
    return Check(check, None, why)


def largest_share(
    ladder: Ladder, check: str, column: str, *, limit: float, says: str, failure: str, missing: str
) -> Check:
    """Return a check that passes where a recorded share stays within a limit on every level.

    `says` is the finding, with {worst} in it; `failure` what a failure spoils every quantity by; `missing`
    the finding where the ladder has no such record.
    """
    columns = recorded(ladder, check, column)
    if columns is None:
        return not_applicable(check, missing)
    worst = float(np.nanmax(columns[column]))
    finding = f"{says.format(worst=f'{worst:.1e}')} (allowed {limit:.0e})."
    passed = worst <= limit
    return Check(check, passed, finding, {} if passed else {"": failure}, values=per_level(columns))


def place_words(ladder: Ladder, name: str) -> str:
    """Return the place NAME.x, NAME.y and, in a solid, NAME.z on the finest level as "(x, y)"."""
    places = [float(ladder.column(f"{name}.{axis}")[-1]) for axis in "xyz"]
    return f"({', '.join(f'{x:.4g}' for x in places if not math.isnan(x))})"


def per_level(columns: dict[str, np.ndarray]) -> dict[str, tuple[float, ...]]:
    """Return the columns as a check keeps them."""
    return {name: tuple(float(value) for value in column) for name, column in columns.items()}
