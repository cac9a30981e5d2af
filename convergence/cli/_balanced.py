"""The balance of loads and reactions on the screen, within 80 columns."""

from collections.abc import Mapping

from convergence.errors import Fault, InputError
from convergence.statics import Balance

COLOURS = {"balanced": "green", "within rounding": "magenta", "out of balance": "red"}


def point_of(words: str | None) -> tuple[float, ...] | None:
    """Return the point of "X,Y" or "X,Y,Z", None where nothing is said."""
    if words is None:
        return None
    try:
        point = tuple(float(word) for word in words.split(","))
    except ValueError:
        point = ()
    if len(point) not in (2, 3) or not all(abs(x) < float("inf") for x in point):
        raise InputError([Fault("--about", "not a point", "write e.g. 0,0 or 1.5,0,2", words)])
    return point


def show_balances(found: Mapping[str, Balance]) -> None:
    """Print the sums of every case, the worst first, what they say and how they are measured."""
    from rich.text import Text

    from convergence.cli._show import columns, terminal
    from convergence.report.balance_page import overall, worst_first
    from convergence.report.sections_balance import HEAD, balance_rows, measure_text
    from convergence.statics import finding

    screen = terminal()
    for case in worst_first(found):
        balance = found[case]
        table = columns(HEAD)
        for row in balance_rows(balance):
            table.add_row(*(Text(cell) for cell in row[:-1]), Text(row[-1], COLOURS[row[-1]]))
        screen.print(Text(case or balance.printout.source, "bold"))
        screen.print(table)
        screen.print(Text(finding(balance)))
        screen.print(Text(f"{measure_text(balance)}\n"))
    if len(found) > 1:
        screen.print(Text(overall(found)))
    for remark in next(iter(found.values())).printout.remarks:
        screen.print(Text(f"Remark: {remark}."))
