"""A ladder on disk: written whole or not at all, read back to the identical numbers.

A CSV whose first lines, after #, state the fingerprint of the study, the number of levels, the
source, the resolution of the values and the remarks; its last line is "# end". An empty cell means
that a level has no such value. Ladders of earlier versions have no column of memory.
"""

import csv
import io
import json
import math
import re
from pathlib import Path

from convergence.errors import Fault, InputError
from convergence.results import COST, Ladder, Level
from convergence.textfile import read_text, write_text

_FIRST = re.compile(r"# meshassay ladder, fingerprint (\S*), levels (\d+)")
_END = "# end\n"
_REPAIR = "remove it and run the study again"


def is_ladder_file(path: Path) -> bool:
    """Say whether a file begins as `write_ladder` begins one."""
    if not path.is_file():
        return False
    with path.open("rb") as file:
        return file.read(18) == b"# meshassay ladder"


def write_ladder(ladder: Ladder, path: Path) -> None:
    """Write atomically."""
    names = list(dict.fromkeys(name for level in ladder.levels for name in level.values))
    text = io.StringIO()
    text.write(f"# meshassay ladder, fingerprint {ladder.fingerprint}, levels {len(ladder.levels)}\n")
    about = {
        "source": ladder.source,
        "h_unit": ladder.h_unit,
        "resolution": dict(ladder.resolution),
        "remarks": list(ladder.remarks),
    }
    text.write(f"# {json.dumps(about, ensure_ascii=False)}\n")
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow([*COST, *names])
    for level in ladder.levels:
        values = [repr(float(level.values[name])) if name in level.values else "" for name in names]
        memory = "" if math.isnan(level.memory) else repr(float(level.memory))
        cost = [repr(float(level.h)), level.cells, level.dofs, repr(float(level.seconds)), memory]
        writer.writerow([*cost, *values])
    text.write(_END)
    write_text(path, text.getvalue())


def read_ladder(path: Path) -> Ladder:
    """Read what `write_ladder` wrote; `InputError` where the file is damaged."""
    text = read_text(path, "a ladder written by a run (ladder.csv)")
    first, _, rest = text.partition("\n")
    found = _FIRST.fullmatch(first.rstrip())
    if not found:
        raise InputError([Fault(f"{path}:1", "not a ladder written by a run", "judge it as a table")])
    about, _, body = rest.partition("\n")
    try:
        facts = json.loads(about.removeprefix("# "))
        if not body.endswith(_END):
            raise ValueError("the end is missing")
        rows = list(csv.reader(io.StringIO(body.removesuffix(_END)), strict=True))
        levels = tuple(_level(rows[0], row) for row in rows[1:])
        ladder = Ladder(
            levels=levels,
            source=facts["source"],
            fingerprint=found[1],
            remarks=tuple(facts["remarks"]),
            resolution=facts["resolution"],
            h_unit=facts["h_unit"],
        )
    except (ValueError, KeyError, IndexError, TypeError, csv.Error):
        raise InputError([Fault(str(path), "a damaged ladder", _REPAIR)]) from None
    if len(levels) != int(found[2]):
        what = f"a damaged ladder: {len(levels)} levels of {found[2]}"
        raise InputError([Fault(str(path), what, _REPAIR)])
    return ladder


def _level(header: list[str], row: list[str]) -> Level:
    if tuple(header[: len(COST) - 1]) != COST[:-1]:
        raise ValueError("the header is not a ladder's")
    cells = dict(zip(header, row, strict=True))
    h, count, dofs, seconds, memory = (cells.pop(name, "") for name in COST)
    values = {name: float(cell) for name, cell in cells.items() if cell}
    return Level(
        float(h), int(count), int(dofs), float(seconds), values, float(memory) if memory else math.nan
    )
