"""Reading a check's records from a ladder."""

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


def per_level(columns: dict[str, np.ndarray]) -> dict[str, tuple[float, ...]]:
    """Return the columns as a check keeps them."""
    return {name: tuple(float(value) for value in column) for name, column in columns.items()}
