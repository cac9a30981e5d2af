"""`--explain NAME`: the steps that led to a verdict, printed after the summary."""

from collections.abc import Sequence

from convergence.cli._judging import Judged, JudgedCases
from convergence.cli._show import terminal
from convergence.errors import Fault, InputError, nearest


def require_known(names: Sequence[str], known: Sequence[str]) -> None:
    """Raise `InputError` for every name that is no quantity's."""
    faults = [
        Fault("--explain", "no such quantity", nearest(name, dict.fromkeys(known)), name)
        for name in names
        if name not in known
    ]
    if faults:
        raise InputError(faults)


def names_of(judged: Sequence[Judged | JudgedCases]) -> list[str]:
    """Return the names of all quantities that were judged."""
    return [q.name for each in judged for _, one in _each(each) for q in one.findings.quantities]


def explain(names: Sequence[str], judged: Judged | JudgedCases) -> None:
    """Print the steps for each name that was judged, case by case where there are cases."""
    from rich.table import Table
    from rich.text import Text

    from convergence.report.explanation import explanation

    screen = terminal()
    for name in names:
        for case, one in _each(judged):
            if name not in one.findings.verdicts:
                continue
            screen.print(Text(f"\n{name}{case}, step by step", "bold"))
            steps = Table(box=None, pad_edge=False, show_header=False)
            steps.add_column(justify="right")
            steps.add_column(overflow="fold")
            for number, step in enumerate(explanation(one.findings, name), start=1):
                steps.add_row(Text(f"{number}."), Text(step))
            screen.print(steps)


def _each(judged: Judged | JudgedCases) -> list[tuple[str, Judged]]:
    """Return every judged ladder after the words for its case, "" where there are none."""
    if isinstance(judged, Judged):
        return [("", judged)]
    return [(f", {case}", one) for case, one in judged.cases.items()]
