"""`python -m convergence.calibration [FOLDER]`: measure coverage on the exact ladders, write coverage.md."""

import math
import sys
from pathlib import Path

from convergence.calibration.coverage import LEVELS, STATED, Count, coverage
from convergence.calibration.exact_ladders import CASES, LADDERS, exact_ladders

HEAD = """# Coverage of the estimates on parts with exact solutions

Parts: {cases}. Every named point and one place inside every block; triangles and quadrilaterals, degree 1
and 2; ladders {ladders}; every run of 3, 4 and 5 neighbouring levels. Energies, displacements, direct and
recovered stresses, each with its formal order given. Values exact to 1e-8 are left out.

All meshes of a ladder are similar (structured), which flatters every method: on ladders of unstructured
meshes the classical ones do worse. Nothing was fitted to these ladders, and the interval as stated is not
calibrated.

- answers: share of cases in which the method gives a half-width U about the finest value at all;
- covers: share of answers for which the exact value lies within U;
- median U/e: half-width over true error.

| method | levels | cases | answers | covers | median U/e |
| --- | --- | --- | --- | --- | --- |
"""


def page() -> str:
    """Return the page with the measured table."""
    counts = coverage(exact_ladders())
    ladders = " and ".join(f"of {n} levels from {d} divisions, ratio {r:g}" for d, r, n in LADDERS)
    head = HEAD.format(cases=", ".join(CASES), ladders=ladders)
    methods = sorted({method for method, _ in counts} - {STATED})
    keys = [(method, levels) for method in (*methods, STATED) for levels in LEVELS]
    rows = [_row(*key, counts[key]) for key in keys]
    return head + "\n".join(rows) + "\n"


def _row(method: str, levels: int, count: Count) -> str:
    name = method.replace("_", " ")
    if not count.answered:
        return f"| {name} | {levels} | {count.cases} | none | none | none |"
    ratio = f"{count.median_ratio:.2f}" if math.isfinite(count.median_ratio) else "none"
    share = 100.0 * count.answered / count.cases
    return f"| {name} | {levels} | {count.cases} | {share:.0f} % | {100.0 * count.coverage:.1f} % | {ratio} |"


if __name__ == "__main__":
    folder = Path(sys.argv[1] if len(sys.argv) > 1 else "figures")
    folder.mkdir(exist_ok=True)
    (folder / "coverage.md").write_text(page(), encoding="utf-8")
