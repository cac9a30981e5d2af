"""The folders of load cases within that of a run or a report."""

import re
from collections.abc import Iterable

from convergence.quantity_tables import RESERVED


def case_folders(names: Iterable[str]) -> dict[str, str]:
    """Return a folder for each case, no two alike: its name, with - for all but letters, digits and _."""
    found: dict[str, str] = {}
    taken = set(RESERVED["case"])
    for name in names:
        plain = re.sub(r"[^\w-]+", "-", name).strip("-")[:60] or "case"
        number, folder = 2, plain
        while folder.casefold() in taken:
            folder, number = f"{plain}-{number}", number + 1
        found[name] = folder
        taken.add(folder.casefold())
    return found
