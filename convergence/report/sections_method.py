"""How the interval is found and what it does not cover, on half a page; where methods were published."""

from convergence import numbers, rooms
from convergence.histories.laws import FALLING, SCATTERS
from convergence.histories.table import Table as Bank
from convergence.report import _trust, _words
from convergence.report.content import Block, Details, Paragraph, Section, Table, Words
from convergence.results import Findings

HEAD = ("quantities", "levels", "known", "measured coverage", "bank ladders", "half-width / true error")
NOT_COVERED = (
    "Not covered: values without a limit, which are looked for separately and called singular or unproven;"
    " errors of the model, its loads, supports and material; parts whose errors behave like none in the bank."
    " The coverage is that of all such ladders, not the odds of one: the figure of each quantity shows those"
    " most like it. Quantities of one part may miss together."
)
ROUNDING = (
    "Numbers are printed in the digits that the half-width supports. Ends of an interval are rounded outward."
    " A number is never rounded across the tolerance. Singular quantities have no interval."
)


def found_section(findings: Findings, bank: Bank) -> Section:
    """Return how the interval is found, with this study's numbers, and the methods beside it."""
    blocks: list[Block] = [
        *(Paragraph(lines) for lines in (_belief(bank), _stretch(bank), NOT_COVERED)),
        *_coverages(findings),
        Details("Families of the bank", [Paragraph(_families(bank))]),
        Paragraph(ROUNDING, "tiny"),
        *_sources(findings),
    ]
    return Section("interval", "Interval", "How the interval is found", blocks)


def _belief(bank: Bank) -> str:
    orders = f"{numbers.compact(FALLING[0], 2)} to {numbers.compact(FALLING[-1], 2)}"
    scatters = f"{numbers.compact(100 * SCATTERS[0], 2)} to {numbers.compact(100 * SCATTERS[-1], 3)} %"
    return (
        "Any candidate for the limit implies an error history: the values of the levels minus the candidate."
        " Each history is weighed against error laws: the error falls with a power of the cell size"
        f" ({orders}), from the first level on or only below some size, and scatters by {scatters} of itself."
        f" How much each law counts was learned from a bank of ladders with known limits ({_make_up(bank)}),"
        " by what is known of a quantity: nothing, its kind, or its kind and the degree of the cells. The sum"
        " over all laws is the belief in each candidate, and the best estimate is its median. Laws that grow"
        " without limit are weighed against these: growth is excluded, possible or shown."
    )


def _stretch(bank: Bank) -> str:
    return (
        "The half-width is that of the central 70 % of the belief, times a stretch fitted to the true errors"
        " of the bank so that 95 % and more of its intervals hold the limit on meshes of every source. The"
        " stretch depends on facts of the ladder that no change of units alters, such as its scatter and how"
        " fast its changes shrink. Coverage is measured on parts that were not used: each family in turn is"
        " left out, everything is learned from the others, and the intervals of its ladders are compared with"
        " their known limits."
    )


def _make_up(bank: Bank) -> str:
    made = bank.made_of
    return (
        f"{numbers.count(made['sub_ladders'])} of two to seven levels, out of"
        f" {numbers.count(made['ladders'])} on parts of {len(made['families'])} families; {made['date']}"
    )


def _families(bank: Bank) -> str:
    return f"{', '.join(_words.plain(family) for family in bank.made_of['families'])}."


def _coverages(findings: Findings) -> list[Block]:
    """Return the measured coverage of this study's intervals, a row for each that differs."""
    rows = [
        (
            ", ".join(names),
            _trust.levels_text(coverage),
            _trust.KNOWN[coverage.knowledge],
            _trust.share_text(coverage),
            numbers.count(coverage.cases),
            numbers.compact(coverage.ratio, 2),
        )
        for coverage, names in _trust.by_coverage(findings).items()
    ]
    caption = (
        "Measured coverage with its 95 % binomial interval, and the median of half-width over true error of"
        " the finest value"
    )
    return [Table(caption, HEAD, rows, "words")] if rows else []


def _sources(findings: Findings) -> list[Block]:
    """Return every method that was used with what it is and its published source."""
    known = rooms.shelf("estimators")
    used = dict.fromkeys(name for estimates in findings.estimates.values() for name in estimates)
    rows = []
    for name in used:
        source = str(rooms.beside("estimators", name, "SOURCE") or "") if name in known else ""
        title = Words(_words.plain(name), anchor=f"method-{name}")
        rows.append((title, known.get(name, ""), Words(source or numbers.NONE, given=True)))
    caption = "Published methods, shown beside the interval for comparison: it is not made from them"
    return [Table(caption, ("method", "what it is", "source"), rows, "words")] if rows else []
