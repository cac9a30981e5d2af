"""What a level, and what a best estimate is in words where a figure or a table shows it."""

from itertools import compress

import numpy as np

from convergence import numbers
from convergence.report import _trust, _words
from convergence.results import Ladder, Quantity, Verdict

SOLVED = 1e-10  # of the solution: what equations are solved to


def level_values(ladder: Ladder, quantity: Quantity, uncertainty: float) -> list[str]:
    """Return the values of the levels to a tenth of their smallest change, to the uncertainty without any.

    Never finer than they were printed or solved.
    """
    values = ladder.column(quantity.name)
    changes = np.diff(values)
    moves = np.abs(changes[np.isfinite(changes) & (changes != 0)])
    fine = float(moves.min()) / 10 if moves.size else uncertainty
    printed = 20.0 * ladder.resolution.get(quantity.name, 0.0)  # two digits of it end where the print does
    known = np.abs(values[np.isfinite(values)])
    solved = SOLVED * float(known.max()) if known.size else 0.0
    return [numbers.rounded(value, max(printed, solved, fine)) for value in values]


def level_hints(ladder: Ladder, quantity: Quantity, uncertainty: float) -> list[str]:
    """Return the name of every level with its value."""
    shown = level_values(ladder, quantity, uncertainty)
    return [
        f"{name}; value {_words.with_unit(value, quantity.unit)}"
        for name, value in zip(level_names(ladder), shown, strict=True)
    ]


def level_names(ladder: Ladder) -> list[str]:
    """Return number, cell size and, where known, cells of every level."""
    names = []
    for number, level in enumerate(ladder.levels, start=1):
        size = f"h {numbers.significant(level.h, 4)} {ladder.h_unit}".strip()
        cells = [f"{numbers.count(level.cells)} cells"] if level.cells > 0 else []
        names.append("; ".join([f"level {number} of {len(ladder.levels)}", size, *cells]))
    return names


def known_hints(ladder: Ladder, quantity: Quantity, uncertainty: float) -> list[str]:
    """Return the hints of the levels that have a value."""
    known = np.isfinite(ladder.column(quantity.name))
    return list(compress(level_hints(ladder, quantity, uncertainty), known))


def lost_hints(ladder: Ladder, quantity: Quantity) -> list[str]:
    """Return the hints of the levels without a value."""
    lost = ~np.isfinite(ladder.column(quantity.name)) & (ladder.h > 0)
    return [f"{name}; no value" for name in compress(level_names(ladder), lost)]


def best_hint(verdict: Verdict, unit: str) -> str:
    """Return the best estimate of the limit and the interval that holds it."""
    best, reach = _trust.best_text(verdict), _words.interval_text(verdict)
    if numbers.NONE in (best, reach):
        return f"best estimate {_words.with_unit(numbers.significant(verdict.limit), unit)}; no interval"
    return f"best estimate {_words.with_unit(best, unit)}; interval {_words.with_unit(reach, unit)}"
