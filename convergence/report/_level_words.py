"""What a level is in words where a figure or a table shows it."""

import numpy as np

from convergence import numbers
from convergence.report import _words
from convergence.results import Ladder, Quantity


def level_values(values: np.ndarray, uncertainty: float) -> list[str]:
    """Return values (n) to a tenth of their smallest change, to the uncertainty where nothing changes."""
    changes = np.diff(values)
    moves = np.abs(changes[np.isfinite(changes) & (changes != 0)])
    fine = float(moves.min()) / 10 if moves.size else uncertainty
    return [numbers.rounded(value, fine) for value in values]


def level_hints(ladder: Ladder, quantity: Quantity, uncertainty: float) -> list[str]:
    """Return number, cell size, cells where known, and value of every level."""
    shown = level_values(ladder.column(quantity.name), uncertainty)
    total = len(ladder.levels)
    hints = []
    for number, (level, value) in enumerate(zip(ladder.levels, shown, strict=True), start=1):
        parts = [f"level {number} of {total}", f"h {numbers.significant(level.h, 4)} {ladder.h_unit}".strip()]
        parts += [f"{numbers.count(level.cells)} cells"] if level.cells > 0 else []
        hints.append("; ".join([*parts, f"value {_words.with_unit(value, quantity.unit)}"]))
    return hints
