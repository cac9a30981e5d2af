"""Equilibrium of a printout: sums of loads and reactions, what is left of them, and how it is measured."""

from convergence import numbers
from convergence.report._picture import Picture
from convergence.report._words import with_unit
from convergence.report.content import (
    Block,
    Cell,
    Details,
    Figures,
    Paragraph,
    Section,
    Table,
    mark,
)
from convergence.statics import Balance, Component, finding, moment_unit

HEAD = ("component", "loads", "reactions", "sum", "of the load", "rounding", "outcome")
LOOKS = {"balanced": "sound", "within rounding": "unproven", "out of balance": "singular"}
MOST_ROWS = 200
EXACT = "Rounding: half a unit of every last printed digit, added up; coordinates are taken as exact."


def balance_rows(balance: Balance) -> list[tuple[str, ...]]:
    """Return one row a component, as `HEAD`: numbers to the digits that the printout supports."""
    return [
        (
            f"{one.name}{f' [{unit_of(balance, one)}]' if unit_of(balance, one) else ''}",
            numbers.rounded(one.loads, one.rounding),
            numbers.rounded(one.reactions, one.rounding),
            numbers.compact(one.missing, 3),
            numbers.percent(one.share, balance.tolerance) if one.share else "0 %",
            f"±{numbers.compact(one.rounding, 2)}",
            one.word,
        )
        for one in balance.components
    ]


def unit_of(balance: Balance, one: Component) -> str:
    """Return the unit of a component."""
    force = one.name.startswith("F")
    return balance.printout.force_unit if force else moment_unit(balance.printout)


def measure_text(balance: Balance) -> str:
    """Return what the shares are shares of, in words and numbers."""
    printout, first, last = balance.printout, balance.components[0], balance.components[-1]
    said = f"Shares of {_scale(first, printout.force_unit)}, the magnitudes of the loads added up"
    if "Mz" in printout.components:
        said += (
            f", and of {_scale(last, moment_unit(printout))}, the larger of the largest moment of one load"
            " and that sum times the extent of the points"
        )
    return f"{said}."


def _scale(one: Component, unit: str) -> str:
    return with_unit(numbers.compact(one.scale, 4), unit)


def balance_part(balance: Balance, picture: Picture | None) -> list[Block]:
    """Return finding, table, figure and the rows of one load case."""
    rows: list[list[Cell]] = [[*row[:-1], mark(row[-1], LOOKS[row[-1]])] for row in balance_rows(balance)]
    return [
        Paragraph(finding(balance)),
        Table("Sums of loads and reactions", HEAD, rows),
        Paragraph(f"{measure_text(balance)} {EXACT}", "tiny"),
        *([Figures([picture])] if picture else []),
        _listed(balance),
    ]


def balance_section(balance: Balance, picture: Picture | None) -> Section:
    """Return the section of a study whose loads and reactions were printed by another solver."""
    source = f"From {balance.printout.source}{f', load case {balance.case}' if balance.case else ''}."
    return Section(
        "balance", "Equilibrium", "Equilibrium", [Paragraph(source), *balance_part(balance, picture)]
    )


def _listed(balance: Balance) -> Details:
    """Return the rows of the table, on demand."""
    actions, dimension = balance.actions, balance.printout.dimension
    names = [one for one in ("Fx", "Fy", "Fz")[:dimension]]
    names += ["Mx", "My", "Mz"] if dimension == 3 else ["Mz"]
    moments = actions.moment if dimension == 3 else actions.moment[2:]
    columns = [*actions.force[:dimension], *moments, *actions.point[:dimension]]
    rows = [
        [
            "load" if actions.is_load[row] else "reaction",
            actions.names[row],
            *(numbers.compact(float(column[row]), 7) for column in columns),
        ]
        for row in range(min(len(actions.names), MOST_ROWS))
    ]
    what = numbers.several(len(actions.names), "row")
    title = f"{what} of the table" + (f", the first {MOST_ROWS}" if len(actions.names) > MOST_ROWS else "")
    head = ("what", "name", *names, *"xyz"[:dimension])
    return Details(title, [Table("Forces and moments at their points", head, rows)])
