"""What `run` may use, as words on the command line: 10GB, "500 MB", 90s, 5min, 2h."""

import math
import re
from collections.abc import Sequence

from convergence import numbers
from convergence.errors import Fault, InputError
from convergence.forecast import Budget

EXAMPLE = "write e.g. 10GB, 500MB, 5min or 2h"
_AMOUNT = re.compile(r"(\d+(?:\.\d*)?|\.\d+)\s*([a-z]+)")


def budget_of(words: Sequence[str]) -> Budget:
    """Return the budget of at most one memory and one time; `InputError` has every fault."""
    found: dict[str, float] = {}
    faults = []
    for word in words:
        what, value = _amount(word)
        if not 0.0 < value < math.inf:
            faults.append(Fault("--budget", "not a memory or a time", EXAMPLE, word))
        elif what in found:
            faults.append(Fault("--budget", f"a second {what}", "give one memory and one time", word))
        found[what] = value
    if faults:
        raise InputError(faults)
    return Budget(seconds=found.get("time", math.inf), memory=found.get("memory", math.inf))


def _amount(word: str) -> tuple[str, float]:
    """Return what an amount is of, and it in seconds or MB; NaN where it is neither."""
    said = _AMOUNT.fullmatch(word.strip().lower())
    for what, scale in (("time", numbers.TIME), ("memory", numbers.MEMORY)):
        for size, unit in scale:
            if said and said[2] == unit.lower():
                return what, float(said[1]) * size
    return "", math.nan
